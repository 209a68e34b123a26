package report

import (
	"image"
	"image/color"
	"math"

	"codeberg.org/go-pdf/fpdf"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"
)

// pdfCanvas lets a chart be drawn onto a page of a PDF: the chart's points, upward from its lower left corner, are turned to the page's,
// downward from its upper left one. Text stays text.
type pdfCanvas struct {
	pdf          *fpdf.Fpdf
	left, bottom float64 // of the chart on the page, points
	scale        float64
	state        pdfState
	stack        []pdfState
}

// pdfState is what Push keeps: where things go, and how they look.
type pdfState struct {
	a, b, c, d, e, f float64 // x' = a x + c y + e, y' = b x + d y + f
	width            float64
	dashes           []float64
	offset           float64
	colour           color.Color
}

func newPDFCanvas(pdf *fpdf.Fpdf, left, bottom, scale float64) *pdfCanvas {
	return &pdfCanvas{pdf: pdf, left: left, bottom: bottom, scale: scale, state: pdfState{a: 1, d: 1, width: 1, colour: color.Black}}
}

// at turns a point of the chart into one of the page.
func (p *pdfCanvas) at(pt vg.Point) (x, y float64) {
	s := p.state
	u, v := float64(pt.X), float64(pt.Y)
	return p.left + p.scale*(s.a*u+s.c*v+s.e), p.bottom - p.scale*(s.b*u+s.d*v+s.f)
}

func (p *pdfCanvas) SetLineWidth(w vg.Length) { p.state.width = float64(w) }

func (p *pdfCanvas) SetLineDash(pattern []vg.Length, offset vg.Length) {
	p.state.dashes = nil
	for _, d := range pattern {
		p.state.dashes = append(p.state.dashes, float64(d)*p.scale)
	}
	p.state.offset = float64(offset) * p.scale
}

func (p *pdfCanvas) SetColor(c color.Color) {
	if c == nil {
		c = color.Black
	}
	p.state.colour = c
}

func (p *pdfCanvas) Rotate(rad float64) {
	s, c := math.Sincos(rad)
	m := p.state
	p.state.a, p.state.b = m.a*c+m.c*s, m.b*c+m.d*s
	p.state.c, p.state.d = m.c*c-m.a*s, m.d*c-m.b*s
}

func (p *pdfCanvas) Translate(pt vg.Point) {
	m := p.state
	p.state.e = m.a*float64(pt.X) + m.c*float64(pt.Y) + m.e
	p.state.f = m.b*float64(pt.X) + m.d*float64(pt.Y) + m.f
}

func (p *pdfCanvas) Scale(x, y float64) {
	p.state.a, p.state.b = p.state.a*x, p.state.b*x
	p.state.c, p.state.d = p.state.c*y, p.state.d*y
}

func (p *pdfCanvas) Push() { p.stack = append(p.stack, p.state) }

func (p *pdfCanvas) Pop() {
	p.state = p.stack[len(p.stack)-1]
	p.stack = p.stack[:len(p.stack)-1]
}

func (p *pdfCanvas) Stroke(path vg.Path) {
	if p.state.width <= 0 {
		return
	}
	r, g, b, _ := p.state.colour.RGBA()
	p.pdf.SetDrawColor(int(r>>8), int(g>>8), int(b>>8))
	p.pdf.SetLineWidth(p.state.width * p.scale)
	p.pdf.SetDashPattern(p.state.dashes, p.state.offset)
	p.path(path)
	p.pdf.DrawPath("D")
}

func (p *pdfCanvas) Fill(path vg.Path) {
	r, g, b, _ := p.state.colour.RGBA()
	p.pdf.SetFillColor(int(r>>8), int(g>>8), int(b>>8))
	p.path(path)
	p.pdf.DrawPath("F")
}

// path lays out a path. An arc goes as cubic curves of a quarter turn at most.
func (p *pdfCanvas) path(path vg.Path) {
	for _, part := range path {
		x, y := p.at(part.Pos)
		switch part.Type {
		case vg.MoveComp:
			p.pdf.MoveTo(x, y)
		case vg.LineComp:
			p.pdf.LineTo(x, y)
		case vg.CloseComp:
			p.pdf.ClosePath()
		case vg.CurveComp:
			c := part.Control
			if len(c) == 1 { // a quadratic curve as a cubic one is not met in our charts: a straight line to its end
				p.pdf.LineTo(x, y)
				continue
			}
			x0, y0 := p.at(c[0])
			x1, y1 := p.at(c[1])
			p.pdf.CurveBezierCubicTo(x0, y0, x1, y1, x, y)
		case vg.ArcComp:
			p.arc(part)
		}
	}
}

func (p *pdfCanvas) arc(part vg.PathComp) {
	pieces := int(math.Ceil(math.Abs(part.Angle) / (math.Pi / 2)))
	point := func(angle, reach, along float64) (x, y float64) {
		s, c := math.Sincos(angle)
		r := float64(part.Radius)
		return p.at(vg.Point{X: part.Pos.X + vg.Length(r*(c*reach-s*along)), Y: part.Pos.Y + vg.Length(r*(s*reach+c*along))})
	}
	from := part.Start
	x, y := point(from, 1, 0)
	p.pdf.LineTo(x, y)
	for range pieces {
		turn := part.Angle / float64(pieces)
		k := 4.0 / 3 * math.Tan(turn/4)
		x0, y0 := point(from, 1, k)
		x1, y1 := point(from+turn, 1, -k)
		x, y := point(from+turn, 1, 0)
		p.pdf.CurveBezierCubicTo(x0, y0, x1, y1, x, y)
		from += turn
	}
}

func (p *pdfCanvas) FillString(f font.Face, pt vg.Point, text string) {
	x, y := p.at(pt)
	r, g, b, _ := p.state.colour.RGBA()
	p.pdf.SetTextColor(int(r>>8), int(g>>8), int(b>>8))
	p.pdf.SetFont(pdfFamily, "", float64(f.Font.Size)*p.scale)
	turn := math.Atan2(p.state.b, p.state.a) * 180 / math.Pi
	if turn != 0 {
		p.pdf.TransformBegin()
		p.pdf.TransformRotate(turn, x, y)
		defer p.pdf.TransformEnd()
	}
	p.pdf.Text(x, y, pdfText(text))
}

// DrawImage is not met in our charts.
func (p *pdfCanvas) DrawImage(vg.Rectangle, image.Image) {}
