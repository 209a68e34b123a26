package plots

import (
	"fmt"
	"io"

	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// BarChart sets figures beside each other, a bar each, the first one drawn as the yardstick of the others.
type BarChart struct {
	Title, Subtitle string
	Unit            string
	Bars            []Bar
}

// Bar is one figure; NaN is written as not known.
type Bar struct {
	Name  string
	Value float64
	Note  string // why it is not known
}

// Write draws the chart; see [HeadChart.Write].
func (c BarChart) Write(w io.Writer, format Format, size Size) error {
	if size.Width <= 0 || size.Height <= 0 {
		size = Size{160, 30 + 12*float64(len(c.Bars))}
	}
	return writePage(w, format, size, c.draw)
}

func (c BarChart) draw(page draw.Canvas) {
	f := newFigure(c.Title, c.Subtitle, "", Units{})
	top := page.Max.Y - f.heading(page) - vg.Points(8)
	const nameWidth, valueWidth = 130, 110 // points
	left, right := page.Min.X+nameWidth, page.Max.X-valueWidth
	most := 0.0
	for _, b := range c.Bars {
		if finite(b.Value) && b.Value > most {
			most = b.Value
		}
	}
	pitch := (top - page.Min.Y - vg.Points(10)) / vg.Length(max(len(c.Bars), 1))
	for i, b := range c.Bars {
		middle := top - pitch*(vg.Length(i)+0.5)
		name := writing(labelSize)
		name.XAlign, name.YAlign = text.XRight, text.YCenter
		page.FillText(name, vg.Point{X: left - vg.Points(6), Y: middle}, printable(b.Name))
		value := writing(labelSize)
		value.XAlign, value.YAlign = text.XLeft, text.YCenter
		if !finite(b.Value) || most == 0 {
			page.FillText(value, vg.Point{X: left + vg.Points(4), Y: middle}, printable("not known: "+b.Note))
			continue
		}
		end := left + (right-left)*vg.Length(b.Value/most)
		half := pitch * 0.32
		colour := pumpColour
		if i > 0 {
			colour = suctionColour
		}
		page.FillPolygon(shade(colour), []vg.Point{{X: left, Y: middle - half}, {X: end, Y: middle - half}, {X: end, Y: middle + half}, {X: left, Y: middle + half}})
		page.StrokeLines(draw.LineStyle{Color: colour, Width: vg.Points(0.9)}, []vg.Point{{X: left, Y: middle - half}, {X: end, Y: middle - half}, {X: end, Y: middle + half}, {X: left, Y: middle + half}})
		words := fmt.Sprintf("%.3g %s", b.Value, c.Unit)
		if first := c.Bars[0].Value; i > 0 && finite(first) && first > 0 {
			words += fmt.Sprintf(" (%+.0f %%)", 100*(b.Value/first-1))
		}
		page.FillText(value, vg.Point{X: end + vg.Points(5), Y: middle}, words)
	}
	page.StrokeLine2(draw.LineStyle{Color: inkColour, Width: vg.Points(0.8)}, left, page.Min.Y+vg.Points(8), left, top)
}
