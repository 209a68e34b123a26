package plots

import (
	"io"
	"math"
)

// Band is what lies between two lines of one set of flows.
type Band struct {
	Name      string
	Low, High Line
}

// FamilyChart is head over flow of one pump: its own curve, those of the other digitised diameters, the digitised points, the band
// that an acceptance grade allows, the regions to run in, and where the efficiency is even.
type FamilyChart struct {
	Title, Subtitle string
	Units           Units
	Own             PumpLine
	Family          []Line
	Digitised       []Line // points
	Band            Band
	Levels          []Line // of one efficiency each, across the diameters; a single point is drawn as a tick
	Systems         []Line // what the system asks
	Duty            []Mark
	Bounds          []Bound
}

// Write draws the chart; see [HeadChart.Write].
func (c FamilyChart) Write(w io.Writer, format Format, size Size) error {
	return c.figure().write(w, format, size)
}

func (c FamilyChart) figure() *figure {
	f := newFigure(c.Title, c.Subtitle, "head", c.Units)
	f.bounds(c.Bounds)
	f.band(c.Band, pumpColour)
	for _, l := range c.Family {
		f.line(l, asked, pumpColour)
	}
	f.pumpLine(c.Own, pumpColour)
	for _, d := range c.Digitised {
		d.Name = ""
		f.line(d, given, pumpColour)
		f.strokes[len(f.strokes)-1].rings = true
	}
	for _, l := range c.Levels {
		f.level(l)
	}
	for _, s := range c.Systems {
		f.line(s, asked, systemColour)
	}
	f.duty(c.Duty)
	return f
}

// PowerChart is shaft power over flow: in Units the head's name and factor are those of power (axis value of 1 W).
type PowerChart struct {
	Title, Subtitle string
	Units           Units
	Power           []Line
	Motor           float64 // W, rating; NaN for none
	Marks           []Mark
	Bounds          []Bound
}

// Write draws the chart; see [HeadChart.Write].
func (c PowerChart) Write(w io.Writer, format Format, size Size) error {
	return c.figure().write(w, format, size)
}

func (c PowerChart) figure() *figure {
	f := newFigure(c.Title, c.Subtitle, "shaft power", c.Units)
	f.bounds(c.Bounds)
	for _, p := range c.Power {
		f.line(p, given, pumpColour)
	}
	if !math.IsNaN(c.Motor) {
		x, _ := f.extent()
		x /= f.units.FlowFactor
		f.line(Line{"motor", []float64{0, x}, []float64{c.Motor, c.Motor}}, asked, systemColour)
	}
	f.duty(c.Marks)
	return f
}
