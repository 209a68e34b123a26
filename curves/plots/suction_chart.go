package plots

import "io"

// MarginChart is the NPSH margin of pumps over the blocked share of a strainer's open area. The Flow of its lines and marks is that share;
// in Units only the head counts.
type MarginChart struct {
	Title, Subtitle string
	Units           Units
	Margins         []Line
	Rule            Line // the margin asked
	Marks           []Mark
	Bounds          []Bound
}

// Write draws the chart; see [HeadChart.Write].
func (c MarginChart) Write(w io.Writer, format Format, size Size) error {
	return c.figure().write(w, format, size)
}

func (c MarginChart) figure() *figure {
	u := c.Units.OrMetric()
	u.FlowName, u.FlowFactor = "%", 100
	f := newFigure(c.Title, c.Subtitle, "NPSH margin", u)
	f.across = "blocked share of the strainer's open area"
	f.bounds(c.Bounds)
	for _, m := range c.Margins {
		f.line(m, given, suctionColour)
	}
	f.line(c.Rule, asked, systemColour)
	f.duty(c.Marks)
	return f
}

// ProfileChart is the suction from the sea to a pump: over the distance (m, the Flow of its lines) the height of the pipe and the hydraulic
// grade above the keel, and the absolute pressure and the vapour pressure as heads of the water.
type ProfileChart struct {
	Title, Subtitle string
	Units           Units
	Pipe, Grade     Line
	Absolute        Line
	Vapour          Line
	Names           []Mark // of what stands along the way
}

// Write draws the chart; see [HeadChart.Write].
func (c ProfileChart) Write(w io.Writer, format Format, size Size) error {
	return c.figure().write(w, format, size)
}

func (c ProfileChart) figure() *figure {
	u := c.Units.OrMetric()
	u.FlowName, u.FlowFactor = u.HeadName, u.HeadFactor
	f := newFigure(c.Title, c.Subtitle, "height above the keel, head", u)
	f.across = "way from the sea to the pump"
	f.line(c.Pipe, asked, inkColour)
	f.line(c.Grade, given, pumpColour)
	f.line(c.Absolute, given, suctionColour)
	f.line(c.Vapour, asked, systemColour)
	f.duty(c.Names)
	return f
}
