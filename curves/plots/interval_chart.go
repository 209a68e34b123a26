package plots

import (
	"fmt"
	"io"
	"math"

	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// IntervalChart sets estimates of one figure beside each other, each with its band, in the units of the axis.
type IntervalChart struct {
	Title, Subtitle string
	Quantity        string // with its unit
	Rows            []Interval
}

// Interval is one estimate: NaN for what is not known. Main rows, the mean and the calculation, are drawn stronger.
type Interval struct {
	Name            string
	Low, Best, High float64
	Main            bool
}

// Write draws the chart; see [HeadChart.Write].
func (c IntervalChart) Write(w io.Writer, format Format, size Size) error {
	if size.Width <= 0 || size.Height <= 0 {
		size = Size{160, 34 + 9*float64(len(c.Rows))}
	}
	return writePage(w, format, size, c.draw)
}

// span returns the axis: round numbers about what there is to show.
func (c IntervalChart) span() (low, high, step float64) {
	low, high = math.Inf(1), math.Inf(-1)
	for _, r := range c.Rows {
		for _, v := range []float64{r.Low, r.Best, r.High} {
			if finite(v) {
				low, high = math.Min(low, v), math.Max(high, v)
			}
		}
	}
	if !(low < high) {
		low, high = 0, 1
	}
	ticks, _, _ := steps(0, high-low)
	step = ticks[1].Value
	return step * math.Floor(low/step), step * math.Ceil(high/step), step
}

func (c IntervalChart) draw(page draw.Canvas) {
	f := newFigure(c.Title, c.Subtitle, "", Units{})
	top := page.Max.Y - f.heading(page) - vg.Points(6)
	const nameWidth, foot = 170, 34 // points
	left, right, bottom := page.Min.X+nameWidth, page.Max.X-vg.Points(24), page.Min.Y+foot
	low, high, step := c.span()
	x := func(v float64) vg.Length { return left + (right-left)*vg.Length((v-low)/(high-low)) }
	tick := writing(9)
	tick.XAlign, tick.YAlign = text.XCenter, text.YTop
	for v := low; v <= high+step/2; v += step {
		page.StrokeLine2(draw.LineStyle{Color: gridColour, Width: vg.Points(0.5)}, x(v), bottom, x(v), top)
		page.FillText(tick, vg.Point{X: x(v), Y: bottom - vg.Points(3)}, fmt.Sprintf("%g", v))
	}
	page.FillText(tick, vg.Point{X: (left + right) / 2, Y: bottom - vg.Points(16)}, printable(c.Quantity))
	page.StrokeLine2(draw.LineStyle{Color: inkColour, Width: vg.Points(0.6)}, left, bottom, right, bottom)
	pitch := (top - bottom) / vg.Length(max(len(c.Rows), 1))
	for i, r := range c.Rows {
		y := top - pitch*(vg.Length(i)+0.5)
		name := writing(labelSize)
		name.XAlign, name.YAlign = text.XRight, text.YCenter
		page.FillText(name, vg.Point{X: left - vg.Points(6), Y: y}, shortened(r.Name))
		colour, width, radius := suctionColour, vg.Points(1.4), vg.Points(2.6)
		if r.Main {
			colour, width, radius = inkColour, vg.Points(2.2), vg.Points(3.4)
		}
		if finite(r.Low) && finite(r.High) {
			page.StrokeLine2(draw.LineStyle{Color: colour, Width: width}, x(r.Low), y, x(r.High), y)
			for _, end := range []float64{r.Low, r.High} {
				page.StrokeLine2(draw.LineStyle{Color: colour, Width: width}, x(end), y-vg.Points(3.5), x(end), y+vg.Points(3.5))
			}
		}
		if finite(r.Best) {
			page.DrawGlyph(draw.GlyphStyle{Color: colour, Radius: radius, Shape: draw.CircleGlyph{}}, vg.Point{X: x(r.Best), Y: y})
		} else {
			note := writing(labelSize)
			note.YAlign = text.YCenter
			page.FillText(note, vg.Point{X: left + vg.Points(6), Y: y}, "not known")
		}
	}
}
