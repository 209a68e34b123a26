package plots

import (
	"fmt"
	"io"
	"math"
	"strings"

	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// PairChart shows one figure of many things before and after a change: a row for each, an open ring before, a filled mark
// after, the line between them the change, and the change in figures behind it. Figures are in the units of the axis.
type PairChart struct {
	Title, Subtitle string
	Quantity        string // what the axis shows, with its unit
	Decimals        int    // of the figures written
	Rows            []PairRow
}

// PairRow is a thing. A figure that is not known is NaN, and Note says why.
type PairRow struct {
	Group         string // a heading over the first row of each group; empty for none
	Name          string
	Before, After float64
	Note          string
}

// Heights and sizes of a row chart, in points.
const (
	rowHeight   = vg.Length(13)
	rowFont     = vg.Length(8.5)
	ringRadius  = vg.Length(4.4)
	textRise    = vg.Length(1.3) // letters without descenders stand low in their box
	rowsPerPage = 400            // more are not drawn: no reader follows them
)

// Write draws the chart in a format, 160 mm wide and as high as its rows need.
func (c PairChart) Write(w io.Writer, format Format) error {
	if len(c.Rows) > rowsPerPage {
		c.Rows = c.Rows[:rowsPerPage]
	}
	lines := len(c.Rows)
	group := ""
	for _, r := range c.Rows {
		if r.Group != group {
			lines, group = lines+1, r.Group
		}
	}
	height := (rowHeight*vg.Length(lines) + vg.Points(112)) / vg.Millimeter
	return writePage(w, format, Size{160, float64(height)}, func(page draw.Canvas) {
		f := &figure{title: printable(c.Title), subtitle: printable(c.Subtitle)}
		top := f.heading(page)
		c.draw(draw.Crop(page, vg.Points(12), -vg.Points(12), vg.Points(8), -top-vg.Points(4)))
	})
}

// draw draws key, axis and rows.
func (c PairChart) draw(page draw.Canvas) {
	name, change := writing(rowFont), writing(rowFont)
	left, right := vg.Points(40), change.Width("change")
	for _, r := range c.Rows {
		left = max(left, name.Width(shortened(r.Name))+vg.Points(10), name.Width(shortened(r.Group)))
		right = max(right, change.Width(c.change(r)))
	}
	axis := draw.Crop(page, left+vg.Points(8), -right-vg.Points(10), vg.Points(34), -vg.Points(20))
	low, high := c.extent()
	low, high, step, label := span(low, high)
	x := func(v float64) vg.Length {
		return axis.Min.X + vg.Length((v-low)/(high-low))*axis.Size().X
	}
	p := &pen{canvas: page}
	c.key(p, vg.Point{X: axis.Min.X, Y: page.Max.Y - vg.Points(8)})
	heading := writing(rowFont)
	heading.YAlign = text.YCenter
	page.FillText(heading, vg.Point{X: axis.Max.X + vg.Points(8), Y: page.Max.Y - vg.Points(8) + textRise}, "change")
	tick := writing(9)
	tick.XAlign, tick.YAlign = text.XCenter, text.YTop
	for v := low; v <= high+step/2; v += step {
		page.StrokeLine2(draw.LineStyle{Color: gridColour, Width: vg.Points(0.5)}, x(v), axis.Min.Y, x(v), axis.Max.Y)
		page.FillText(tick, vg.Point{X: x(v), Y: axis.Min.Y - vg.Points(4)}, decimalLike(label, v))
	}
	page.StrokeLine2(draw.LineStyle{Color: inkColour, Width: vg.Points(0.6)}, x(low), axis.Min.Y, x(high), axis.Min.Y)
	page.StrokeLine2(draw.LineStyle{Color: boundColour, Width: vg.Points(0.6)}, x(0), axis.Min.Y, x(0), axis.Max.Y)
	page.FillText(tick, vg.Point{X: (axis.Min.X + axis.Max.X) / 2, Y: axis.Min.Y - vg.Points(19)}, printable(c.Quantity))
	y, group := axis.Max.Y-rowHeight/2, ""
	for _, r := range c.Rows {
		if r.Group != group {
			group = r.Group
			heading := writing(rowFont)
			heading.YAlign, heading.Color = text.YCenter, boundColour
			page.FillText(heading, vg.Point{X: page.Min.X, Y: y + textRise}, shortened(r.Group))
			y -= rowHeight
		}
		c.row(p, r, x, y, page.Min.X, axis.Max.X+vg.Points(8), axis.Min.X+vg.Points(6))
		y -= rowHeight
	}
}

// span is an axis of round steps over a range that holds 0, with the label of its first step.
func span(least, greatest float64) (low, high, step float64, label string) {
	ticks, _, _ := steps(0, math.Max(greatest, -least))
	step, label = ticks[1].Value, ticks[1].Label
	const trifle = 0.02 // of a step, that needs no step of its own
	return step * math.Floor(least/step+trifle), step * math.Ceil(greatest/step-trifle), step, label
}

// decimalLike writes a tick with as many decimals as another has.
func decimalLike(label string, v float64) string {
	_, decimals, _ := strings.Cut(label, ".")
	if math.Abs(v) < 1e-12 {
		v = 0
	}
	return fmt.Sprintf("%.*f", len(decimals), v)
}

// shortened makes a name fit for the left margin.
func shortened(name string) string {
	const most = 40
	name = printable(name)
	if r := []rune(name); len(r) > most {
		return string(r[:most-1]) + "…"
	}
	return name
}

// extent is the least and the greatest figure there is to show, 0 among them.
func (c PairChart) extent() (low, high float64) {
	for _, r := range c.Rows {
		for _, v := range []float64{r.Before, r.After} {
			if finite(v) {
				low, high = math.Min(low, v), math.Max(high, v)
			}
		}
	}
	if high <= 0 {
		high = math.Max(1, -low)
	}
	return low, high
}

// key says what the marks mean.
func (c PairChart) key(p *pen, at vg.Point) {
	style := writing(rowFont)
	style.YAlign = text.YCenter
	for _, k := range []struct {
		word   string
		former bool
	}{{"before", true}, {"after", false}} {
		pairMark(p.canvas, vg.Point{X: at.X + vg.Points(4), Y: at.Y}, k.former)
		p.canvas.FillText(style, vg.Point{X: at.X + vg.Points(11), Y: at.Y + textRise}, k.word)
		at.X += vg.Points(11) + style.Width(k.word) + vg.Points(14)
	}
}

// pairMark draws the ring of before or the smaller filled mark of after, which shows within the ring where the two fall
// together.
func pairMark(c draw.Canvas, at vg.Point, former bool) {
	if former {
		c.DrawGlyph(draw.GlyphStyle{Color: inkColour, Radius: ringRadius, Shape: draw.RingGlyph{}}, at)
		return
	}
	c.DrawGlyph(draw.GlyphStyle{Color: pumpColour, Radius: vg.Points(2.7), Shape: draw.CircleGlyph{}}, at)
}

// row draws one thing at a height.
func (c PairChart) row(p *pen, r PairRow, x func(float64) vg.Length, y, left, right, inside vg.Length) {
	style := writing(rowFont)
	style.YAlign = text.YCenter
	indent := vg.Length(0)
	if r.Group != "" {
		indent = vg.Points(10)
	}
	p.canvas.FillText(style, vg.Point{X: left + indent, Y: y + textRise}, shortened(r.Name))
	if finite(r.Before) && finite(r.After) {
		if from, to := x(r.Before), x(r.After); to > from+ringRadius {
			p.canvas.StrokeLine2(draw.LineStyle{Color: pumpColour, Width: vg.Points(2)}, from+ringRadius, y, to, y)
		} else if to < from-ringRadius {
			p.canvas.StrokeLine2(draw.LineStyle{Color: pumpColour, Width: vg.Points(2)}, from-ringRadius, y, to, y)
		}
	}
	if finite(r.Before) {
		pairMark(p.canvas, vg.Point{X: x(r.Before), Y: y}, true)
	}
	if finite(r.After) {
		pairMark(p.canvas, vg.Point{X: x(r.After), Y: y}, false)
	}
	if r.Note != "" {
		note := style
		note.Color = boundColour
		if finite(r.Before) || finite(r.After) { // beside the mark that is there, on the side with more room
			at := r.Before
			if !finite(at) {
				at = r.After
			}
			inside = x(at) + vg.Points(8)
			if w := note.Width(printable(r.Note)); inside+w > right-vg.Points(8) {
				inside = x(at) - vg.Points(8) - w
			}
		}
		p.canvas.FillText(note, vg.Point{X: inside, Y: y + textRise}, printable(r.Note))
	}
	p.canvas.FillText(style, vg.Point{X: right, Y: y + textRise}, c.change(r))
}

// change writes the change of a row, nothing where it is not known.
func (c PairChart) change(r PairRow) string {
	difference := r.After - r.Before
	if !finite(difference) {
		return ""
	}
	figure := fmt.Sprintf("%+.*f", c.Decimals, difference)
	if strings.Trim(figure, "+-0.") == "" {
		return strings.TrimLeft(figure, "+-")
	}
	return figure
}
