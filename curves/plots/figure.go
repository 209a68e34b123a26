package plots

import (
	"fmt"
	"image/color"
	"io"
	"math"
	"slices"
	"strings"
	"unicode"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"
	"gonum.org/v1/plot/vg/vgpdf"
	"gonum.org/v1/plot/vg/vgsvg"
)

// Format is a format a chart is written in, and the ending of its file.
type Format string

// The formats. PNG is drawn at 150 dots to the inch.
const (
	SVG Format = "svg"
	PNG Format = "png"
	PDF Format = "pdf"
)

const pngDotsPerInch = 150

// Size is the size of a chart in mm; the zero value is 160 x 110, which reads well on an A5 page.
type Size struct{ Width, Height float64 }

// Colours of Okabe and Ito, with a grey for what stands behind.
var (
	pumpColour    = color.RGBA{0, 114, 178, 255}   // blue
	systemColour  = color.RGBA{213, 94, 0, 255}    // vermilion
	suctionColour = color.RGBA{0, 128, 94, 255}    // bluish green, darkened for print
	inkColour     = color.RGBA{30, 30, 30, 255}    // text, operating points
	gridColour    = color.RGBA{225, 225, 225, 255} // grid
	boundColour   = color.RGBA{110, 110, 110, 255} // limits
)

// weight is how a line is drawn.
type weight int

const (
	given  weight = iota // thick: what is there
	asked                // thin: what is asked for
	beyond               // dotted: no data
	edged                // hair: the edge of a band, a level
	former               // dashed: what was before a change
)

func (w weight) style(c color.Color) draw.LineStyle {
	switch w {
	case asked:
		return draw.LineStyle{Color: c, Width: vg.Points(0.9)}
	case edged:
		return draw.LineStyle{Color: c, Width: vg.Points(0.5)}
	case former:
		return draw.LineStyle{Color: c, Width: vg.Points(1.1), Dashes: []vg.Length{vg.Points(7), vg.Points(3)}}
	case beyond:
		return draw.LineStyle{Color: c, Width: vg.Points(1.6), Dashes: []vg.Length{vg.Points(1.5), vg.Points(3.5)}}
	}
	return draw.LineStyle{Color: c, Width: vg.Points(2)}
}

// stroke is a line on the paper in axis units.
type stroke struct {
	name   string
	points plotter.XYs
	weight weight
	colour color.Color
	rings  bool // open rings at the points in place of a line
	ticks  bool // a cross at each point beside the line
}

// bracket shows a difference between two values at one flow.
type bracket struct {
	x, low, high float64
	label        string
}

// figure is a chart in the making. It draws itself onto gonum's axes as one plotter, so that labels know what they must
// keep clear of.
type figure struct {
	title, subtitle, quantity string
	across                    string // what the lower axis shows; empty for flow
	units                     Units
	bands                     []stroke // filled outlines
	strokes                   []stroke
	marks, formerMarks        []Mark // in axis units; the former of before a change
	limits                    []Bound
	brackets                  []bracket

	drawn *pen // what the last drawing has put where
}

func newFigure(title, subtitle, quantity string, u Units) *figure {
	return &figure{title: printable(title), subtitle: printable(subtitle), quantity: quantity, units: u.OrMetric()}
}

// printable makes a user's text fit to be drawn: no control characters, no broken encoding, not endless.
func printable(s string) string {
	s = strings.Map(func(r rune) rune {
		if unicode.IsControl(r) || r == unicode.ReplacementChar {
			return ' '
		}
		return r
	}, strings.ToValidUTF8(s, " "))
	const most = 90
	if r := []rune(s); len(r) > most {
		s = string(r[:most-1]) + "…"
	}
	return strings.TrimSpace(s)
}

func (f *figure) line(l Line, w weight, c color.Color) {
	s := stroke{name: printable(l.Name), weight: w, colour: c}
	for i := range min(len(l.Flow), len(l.Value)) {
		s.points = append(s.points, plotter.XY{X: l.Flow[i] * f.units.FlowFactor, Y: l.Value[i] * f.units.HeadFactor})
	}
	f.strokes = append(f.strokes, s)
}

func (f *figure) pumpLine(p PumpLine, c color.Color) {
	f.line(p.Line, given, c)
	for _, b := range p.Beyond {
		b.Name = ""
		f.line(b, beyond, c)
	}
	p.Digitised.Name = ""
	f.line(p.Digitised, given, c)
	f.strokes[len(f.strokes)-1].rings = true
}

// band fills what lies between two lines in a light shade of a colour, where both are known, and names it along the upper one.
func (f *figure) band(b Band, c color.RGBA) {
	outline := stroke{colour: shade(c)}
	var below plotter.XYs
	edge := Line{Name: b.Name}
	for i := range min(len(b.Low.Value), len(b.High.Value)) {
		low, high := b.Low.Value[i], b.High.Value[i]
		if !finite(low) || !finite(high) {
			continue
		}
		x := b.Low.Flow[i] * f.units.FlowFactor
		outline.points = append(outline.points, plotter.XY{X: x, Y: high * f.units.HeadFactor})
		below = append(below, plotter.XY{X: x, Y: low * f.units.HeadFactor})
		edge.Flow, edge.Value = append(edge.Flow, b.Low.Flow[i]), append(edge.Value, high)
	}
	slices.Reverse(below)
	outline.points = append(outline.points, below...)
	if len(below) > 1 {
		f.bands = append(f.bands, outline)
		f.line(edge, edged, c)
	}
}

// shade returns a light shade of a colour.
func shade(c color.RGBA) color.RGBA {
	light := func(v uint8) uint8 { return uint8(255 - (255-int(v))*18/100) }
	return color.RGBA{light(c.R), light(c.G), light(c.B), 255}
}

// level draws a thin line through the points of one efficiency, with a tick at each.
func (f *figure) level(l Line) {
	f.line(l, edged, inkColour)
	f.strokes[len(f.strokes)-1].ticks = true
}

func (f *figure) duty(marks []Mark) {
	for _, m := range marks {
		m.Flow *= f.units.FlowFactor
		m.Value *= f.units.HeadFactor
		m.Label = printable(m.Label)
		if finite(m.Flow) && finite(m.Value) {
			f.marks = append(f.marks, m)
		}
	}
}

func (f *figure) bounds(bounds []Bound) {
	for _, b := range bounds {
		b.Flow *= f.units.FlowFactor
		b.Name = printable(b.Name)
		if finite(b.Flow) && !slices.Contains(f.limits, b) {
			f.limits = append(f.limits, b)
		}
	}
}

func (f *figure) margin(flow, low, high float64) {
	u := f.units
	f.brackets = append(f.brackets, bracket{flow * u.FlowFactor, low * u.HeadFactor, high * u.HeadFactor,
		fmt.Sprintf("margin %.1f %s", (high-low)*u.HeadFactor, u.HeadName)})
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// lowest returns the least value there is to show, 0 at the most.
func (f *figure) lowest() float64 {
	low := 0.0
	for _, s := range f.strokes {
		for _, p := range s.points {
			if finite(p.X) && finite(p.Y) {
				low = math.Min(low, p.Y)
			}
		}
	}
	for _, m := range f.marks {
		low = math.Min(low, m.Value)
	}
	return low
}

// extent returns the greatest flow and value there is to show, a little more than 1 at least.
func (f *figure) extent() (x, y float64) {
	for _, s := range f.strokes {
		for _, p := range s.points {
			if finite(p.X) && finite(p.Y) {
				x, y = math.Max(x, p.X), math.Max(y, p.Y)
			}
		}
	}
	for _, m := range slices.Concat(f.formerMarks, f.marks) {
		x, y = math.Max(x, m.Flow), math.Max(y, m.Value)
	}
	for _, b := range f.limits {
		x = math.Max(x, b.Flow)
	}
	if x <= 0 {
		x = 1
	}
	if y <= 0 {
		y = 1
	}
	return x, y
}

// steps are ticks at round numbers from below low (0 or less) to above most, some six to ten of them.
func steps(low, most float64) (ticks plot.ConstantTicks, bottom, top float64) {
	span := most - low
	step := math.Pow(10, math.Floor(math.Log10(span/6)))
	for _, f := range []float64{1, 2, 5, 10} {
		if span/(f*step) <= 9 {
			step *= f
			break
		}
	}
	decimals := max(0, int(math.Ceil(-math.Log10(step)-1e-9)))
	first, last := int(math.Floor(low/step+1e-9)), int(math.Ceil(most/step-1e-9))
	for i := first; i <= last; i++ {
		ticks = append(ticks, plot.Tick{Value: float64(i) * step, Label: fmt.Sprintf("%.*f", decimals, float64(i)*step)})
	}
	return ticks, float64(first) * step, float64(last) * step
}

// write draws the figure.
func (f *figure) write(w io.Writer, format Format, size Size) error {
	if size.Width <= 0 || size.Height <= 0 {
		size = Size{160, 110}
	}
	return writePage(w, format, size, func(page draw.Canvas) {
		f.plot().Draw(draw.Crop(page, vg.Points(6), -vg.Points(10), vg.Points(6), -f.heading(page)))
	})
}

// writePage makes a white page of a size, has it drawn on, and writes it in a format.
func writePage(w io.Writer, format Format, size Size, drawn func(page draw.Canvas)) error {
	width, height := vg.Length(size.Width)*vg.Millimeter, vg.Length(size.Height)*vg.Millimeter
	switch to := w.(type) {
	case page:
		drawn(draw.NewCanvas(to.Canvas, width, height))
		return nil
	case *measure:
		to.size = size
		return nil
	}
	var canvas vg.CanvasWriterTo
	switch format {
	case SVG:
		canvas = vgsvg.New(width, height)
	case PNG:
		canvas = vgimg.PngCanvas{Canvas: vgimg.NewWith(vgimg.UseWH(width, height), vgimg.UseDPI(pngDotsPerInch))}
	case PDF:
		canvas = vgpdf.New(width, height)
	default:
		return fmt.Errorf("plots: found format %q, want svg, png or pdf", format)
	}
	page := draw.New(canvas)
	page.SetColor(color.White)
	page.Fill(page.Rectangle.Path())
	drawn(page)
	_, err := canvas.WriteTo(w)
	return err
}

// heading writes title and subtitle over the plot and returns the height they take.
func (f *figure) heading(page draw.Canvas) vg.Length {
	y := page.Max.Y - vg.Points(8)
	for _, line := range []struct {
		text string
		size vg.Length
	}{{f.title, 11}, {f.subtitle, 9}} {
		style := writing(line.size)
		style.YAlign = text.YTop
		text := line.text
		for r := []rune(text); style.Width(text) > page.Size().X-vg.Points(24) && len(r) > 1; {
			r = r[:len(r)-1]
			text = strings.TrimSpace(string(r)) + "…"
		}
		page.FillText(style, vg.Point{X: page.Min.X + vg.Points(12), Y: y}, text)
		y -= line.size * 1.35
	}
	return page.Max.Y - y + vg.Points(2)
}

// writing is the one style of letters.
func writing(size vg.Length) text.Style {
	return text.Style{Color: inkColour, Font: font.From(font.Font{Typeface: "Liberation", Variant: "Sans"}, size), Handler: text.Plain{Fonts: font.DefaultCache}}
}

// plot makes gonum's axes with the figure on them.
func (f *figure) plot() *plot.Plot {
	p := plot.New()
	x, y := f.extent()
	var xTicks, yTicks plot.ConstantTicks
	xTicks, p.X.Min, p.X.Max = steps(0, x)
	yTicks, p.Y.Min, p.Y.Max = steps(f.lowest(), y*1.04)
	p.X.Tick.Marker, p.Y.Tick.Marker = xTicks, yTicks
	p.X.Label.Text = "flow [" + f.units.FlowName + "]"
	if f.across != "" {
		p.X.Label.Text = f.across + " [" + f.units.FlowName + "]"
	}
	p.Y.Label.Text = f.quantity + " [" + f.units.HeadName + "]"
	for _, a := range []*plot.Axis{&p.X, &p.Y} {
		a.Label.TextStyle.Font, a.Label.TextStyle.Color = writing(10).Font, inkColour
		a.Tick.Label.Font, a.Tick.Label.Color = writing(9).Font, inkColour
		a.LineStyle = draw.LineStyle{Color: inkColour, Width: vg.Points(0.6)}
		a.Tick.LineStyle = a.LineStyle
		a.Padding = 0
	}
	grid := plotter.NewGrid()
	grid.Horizontal = draw.LineStyle{Color: gridColour, Width: vg.Points(0.5)}
	grid.Vertical = grid.Horizontal
	p.Add(grid, f)
	return p
}

// Plot draws the figure within the axes; it is how gonum's plot asks for it.
func (f *figure) Plot(c draw.Canvas, p *plot.Plot) {
	toX, toY := p.Transforms(&c)
	pen := &pen{canvas: c, x: toX, y: toY}
	f.drawn = pen
	for _, b := range f.bands {
		pen.fill(b)
	}
	for _, b := range f.limits {
		pen.bound(b)
	}
	for _, s := range f.strokes {
		pen.stroke(s)
	}
	for _, b := range f.brackets {
		pen.bracket(b)
	}
	for _, m := range f.formerMarks {
		pen.mark(m, true)
	}
	for _, m := range f.marks {
		pen.mark(m, false)
	}
	for _, b := range f.limits { // names last, when it is known what they must keep clear of
		pen.boundName(b)
	}
	for _, m := range slices.Concat(f.formerMarks, f.marks) {
		pen.labelAt(m.Label, vg.Point{X: toX(m.Flow), Y: toY(m.Value)}, inkColour)
	}
	for _, b := range f.brackets {
		pen.labelAt(b.label, vg.Point{X: toX(b.x), Y: toY((b.low + b.high) / 2)}, inkColour)
	}
	for _, s := range f.strokes {
		if s.name != "" {
			pen.labelAlong(s)
		}
	}
}
