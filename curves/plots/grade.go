package plots

import (
	"io"
	"math"
	"strings"

	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// GradeChart is the hydraulic grade along the way of a pump's water before and after a change, over the elevation of the
// pipe. The points of the way stand evenly apart, whatever the length between them: losses sit in fittings, not in metres.
type GradeChart struct {
	Title, Subtitle string
	Units           Units
	Points          []string  // the points of the way
	Elevations      []float64 // m, of the points
	Before, After   Grade     // Before may be empty
	Pumps           []string  // by step between two points: the pump, or empty for a run
}

// Grade is the hydraulic grade (m) at the beginning and end of each step of a way.
type Grade struct{ Start, End []float64 }

// Write draws the chart in a format, as wide as its points need.
func (c GradeChart) Write(w io.Writer, format Format) error {
	c.Units = c.Units.OrMetric()
	width := math.Max(160, 40+17*float64(len(c.Points)))
	return writePage(w, format, Size{width, 115}, func(page draw.Canvas) {
		f := &figure{title: printable(c.Title), subtitle: printable(c.Subtitle)}
		top := f.heading(page)
		if len(c.Points) > 1 && len(c.Elevations) == len(c.Points) {
			c.draw(draw.Crop(page, vg.Points(12), -vg.Points(16), vg.Points(8), -top-vg.Points(4)))
		}
	})
}

// trace lays a grade over the stations: each step a piece of its own, and an upright one where the velocity changes.
func (g Grade) trace() (x, y []float64) {
	for k := range min(len(g.Start), len(g.End)) {
		x, y = append(x, float64(k), float64(k+1)), append(y, g.Start[k], g.End[k])
	}
	return x, y
}

// extent is the least and the greatest head to show, in axis units, 0 among them.
func (c GradeChart) extent() (low, high float64) {
	for _, list := range [][]float64{c.Elevations, c.Before.Start, c.Before.End, c.After.Start, c.After.End} {
		for _, v := range list {
			if finite(v) {
				low, high = math.Min(low, v*c.Units.HeadFactor), math.Max(high, v*c.Units.HeadFactor)
			}
		}
	}
	return low, math.Max(high*1.04, 1)
}

// draw draws axis, lines, and the names of points and lines.
func (c GradeChart) draw(page draw.Canvas) {
	frame := draw.Crop(page, vg.Points(34), -vg.Points(24), vg.Points(42), 0)
	low, high := c.extent()
	low, high, step, label := span(low, high)
	x := func(v float64) vg.Length {
		return frame.Min.X + vg.Length(v/float64(len(c.Points)-1))*frame.Size().X
	}
	y := func(v float64) vg.Length {
		return frame.Min.Y + vg.Length((v-low)/(high-low))*frame.Size().Y
	}
	tick := writing(9)
	tick.XAlign, tick.YAlign = text.XRight, text.YCenter
	for v := low; v <= high+step/2; v += step {
		frame.StrokeLine2(draw.LineStyle{Color: gridColour, Width: vg.Points(0.5)}, frame.Min.X, y(v), frame.Max.X, y(v))
		page.FillText(tick, vg.Point{X: frame.Min.X - vg.Points(5), Y: y(v)}, decimalLike(label, v))
	}
	axis := writing(10)
	axis.XAlign, axis.YAlign, axis.Rotation = text.XCenter, text.YTop, math.Pi/2
	page.FillText(axis, vg.Point{X: page.Min.X - vg.Points(4), Y: (frame.Min.Y + frame.Max.Y) / 2}, "head over the keel ["+c.Units.HeadName+"]")
	for k, name := range c.Points {
		frame.StrokeLine2(draw.LineStyle{Color: gridColour, Width: vg.Points(0.5)}, x(float64(k)), frame.Min.Y, x(float64(k)), frame.Max.Y)
		c.station(page, vg.Point{X: x(float64(k)), Y: frame.Min.Y - vg.Points(9)}, name, frame.Size().X/vg.Length(len(c.Points)-1))
	}
	p := &pen{canvas: frame, x: x, y: y}
	strokes := []stroke{c.stroke("pipe", asked, stations(len(c.Points)), c.Elevations)}
	strokes[0].colour = boundColour
	if len(c.Before.Start) > 0 {
		at, head := c.Before.trace()
		strokes = append(strokes, c.stroke("before", former, at, head))
		strokes[1].colour = systemColour
	}
	at, head := c.After.trace()
	after := c.stroke("after", given, at, head)
	after.colour = pumpColour
	strokes = append(strokes, after)
	for _, s := range strokes {
		p.stroke(s)
	}
	for k, name := range c.Pumps {
		if name != "" && k < min(len(c.After.Start), len(c.After.End)) {
			middle := (c.After.Start[k] + c.After.End[k]) / 2 * c.Units.HeadFactor
			p.labelAt(printable(name), vg.Point{X: x(float64(k) + 0.5), Y: y(middle)}, inkColour)
		}
	}
	p.labelAlong(strokes[0])
	if before, after := strokes[1], strokes[len(strokes)-1]; len(strokes) == 3 && len(before.points) == len(after.points) {
		k := widestGap(before.points, after.points) // the names stand where the lines are farthest apart
		for _, s := range strokes[1:] {
			p.labelAt(s.name, vg.Point{X: x(s.points[k].X), Y: y(s.points[k].Y)}, s.colour)
		}
		return
	}
	for _, s := range strokes[1:] {
		p.labelAlong(s)
	}
}

// widestGap returns where two lines with points at the same places are farthest apart.
func widestGap(a, b plotter.XYs) (at int) {
	widest := 0.0
	for k := range a {
		if gap := math.Abs(a[k].Y - b[k].Y); gap > widest {
			widest, at = gap, k
		}
	}
	return at
}

func stations(count int) (at []float64) {
	for k := range count {
		at = append(at, float64(k))
	}
	return at
}

// stroke makes a line over the stations, its points close enough together for a name to be put beside it anywhere.
func (c GradeChart) stroke(name string, w weight, at, head []float64) stroke {
	s := stroke{name: name, weight: w}
	const pieces = 8
	for k := 1; k < len(at); k++ {
		for i := range pieces + 1 {
			t := float64(i) / pieces
			s.points = append(s.points, plotter.XY{X: at[k-1] + t*(at[k]-at[k-1]), Y: (head[k-1] + t*(head[k]-head[k-1])) * c.Units.HeadFactor})
		}
	}
	return s
}

// station writes a point's name below the axis, a word a line, as far as three lines and its room go.
func (c GradeChart) station(page draw.Canvas, at vg.Point, name string, room vg.Length) {
	style := writing(8)
	style.XAlign, style.YAlign = text.XCenter, text.YTop
	var lines []string
	for _, word := range strings.Fields(printable(name)) {
		if last := len(lines) - 1; last >= 0 && style.Width(lines[last]+" "+word) < room-vg.Points(4) {
			lines[last] += " " + word
		} else {
			lines = append(lines, word)
		}
	}
	for i, line := range lines {
		if i == 3 {
			break
		}
		for r := []rune(line); style.Width(line) > room-vg.Points(2) && len(r) > 1; {
			r = r[:len(r)-1]
			line = string(r) + "…"
		}
		page.FillText(style, at, line)
		at.Y -= vg.Points(9.5)
	}
}
