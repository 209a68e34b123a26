package plots

import (
	"io"
	"math"
	"slices"
	"strings"
)

// Units are the units of the axes; the zero value is m3/h and m.
type Units struct {
	FlowName   string
	FlowFactor float64 // axis value of 1 m3/s
	HeadName   string
	HeadFactor float64 // axis value of 1 m
}

// OrMetric returns the units with m3/h and m where none are named.
func (u Units) OrMetric() Units {
	if u.FlowFactor == 0 {
		u.FlowName, u.FlowFactor = "m3/h", 3600
	}
	if u.HeadFactor == 0 {
		u.HeadName, u.HeadFactor = "m", 1
	}
	return u
}

// Line is a named line: values (m) over flows (m3/s). A NaN breaks it.
type Line struct {
	Name        string
	Flow, Value []float64
}

// PumpLine is a curve of a pump sheet over its digitised range.
type PumpLine struct {
	Line
	Digitised Line   // the points of the sheet
	Beyond    []Line // its continuation, which is no data
}

// Mark is an operating point with what is written beside it.
type Mark struct {
	Name, Label string
	Flow, Value float64
}

// Bound is a limit on the flow: at least (Least) or at most Flow.
type Bound struct {
	Name  string
	Flow  float64
	Least bool
}

// HeadChart is head over flow: pump curves, what the system asks, and the operating points.
type HeadChart struct {
	Title, Subtitle string
	Units           Units
	Pumps           []PumpLine
	Systems         []Line
	Duty            []Mark
	Bounds          []Bound

	// What was before a change: lines drawn broken, operating points open.
	FormerPumps, FormerSystems []Line
	FormerDuty                 []Mark
}

// Write draws the chart in a format and size (the zero value is 160 x 110 mm). An error is one of writing, or of a format
// that is none; a chart with nothing to draw is an empty frame.
func (c HeadChart) Write(w io.Writer, format Format, size Size) error {
	return c.figure().write(w, format, size)
}

func (c HeadChart) figure() *figure {
	f := newFigure(c.Title, c.Subtitle, "head", c.Units)
	f.bounds(c.Bounds)
	for _, p := range c.Pumps {
		f.pumpLine(p, pumpColour)
	}
	for _, p := range c.FormerPumps {
		f.line(p, former, pumpColour)
	}
	for _, s := range c.Systems {
		f.line(s, asked, systemColour)
	}
	for _, s := range c.FormerSystems {
		f.line(s, former, systemColour)
	}
	f.duty(c.FormerDuty)
	f.formerMarks, f.marks = f.marks, nil
	f.duty(c.Duty)
	return f
}

// NPSHChart is NPSH over flow: what the suction makes available and what the pumps require.
type NPSHChart struct {
	Title, Subtitle string
	Units           Units
	Available       []Line
	Required        []PumpLine
	Rule            []Line // required, and the margin that a rule asks
	Duty            []Mark // at the NPSH available
	Bounds          []Bound
}

// Write draws the chart; see HeadChart.Write. Between the NPSH required and available at an operating point stands the
// margin, where both are known; a Required line belongs to the Duty whose name ends its own.
func (c NPSHChart) Write(w io.Writer, format Format, size Size) error {
	return c.figure().write(w, format, size)
}

func (c NPSHChart) figure() *figure {
	f := newFigure(c.Title, c.Subtitle, "NPSH", c.Units)
	f.bounds(c.Bounds)
	for _, a := range c.Available {
		f.line(a, given, suctionColour)
	}
	for _, r := range c.Required {
		f.pumpLine(r, pumpColour)
	}
	for _, r := range c.Rule {
		f.line(r, asked, pumpColour)
	}
	for _, d := range c.Duty {
		for _, r := range c.Required {
			if required := r.at(d.Flow); strings.HasSuffix(r.Name, d.Name) && !math.IsNaN(required) {
				f.margin(d.Flow, required, d.Value)
			}
		}
	}
	f.duty(c.Duty)
	return f
}

// at returns the line's value at a flow by straight lines between its points, NaN beyond them.
func (l Line) at(flow float64) float64 {
	k, found := slices.BinarySearch(l.Flow, flow)
	switch {
	case found:
		return l.Value[k]
	case k == 0 || k == len(l.Flow):
		return math.NaN()
	}
	share := (flow - l.Flow[k-1]) / (l.Flow[k] - l.Flow[k-1])
	return l.Value[k-1] + share*(l.Value[k]-l.Value[k-1])
}
