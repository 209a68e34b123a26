package plots

import (
	"image/color"
	"math"

	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

const labelSize = vg.Length(9) // points

// pen draws within the axes and remembers what it has drawn, so that labels can keep clear of it.
type pen struct {
	canvas draw.Canvas
	x, y   func(float64) vg.Length

	boxes []vg.Rectangle          // labels and marks
	ink   map[cell][]vg.Point     // points along what is drawn, close together, by where they lie
	taken map[cell][]vg.Rectangle // the boxes, in every cell that they touch
}

// cell is a square of the paper, so that a label asks only what lies near it.
type cell struct{ x, y int }

const cellSide = 24 // points

func cellOf(at vg.Point) cell {
	return cell{int(math.Floor(float64(at.X) / cellSide)), int(math.Floor(float64(at.Y) / cellSide))}
}

// cells calls a function for every cell that a box touches.
func cells(box vg.Rectangle, f func(c cell)) {
	low, high := cellOf(box.Min), cellOf(box.Max)
	for x := low.x; x <= high.x; x++ {
		for y := low.y; y <= high.y; y++ {
			f(cell{x, y})
		}
	}
}

// keep notes a box that labels must keep clear of.
func (p *pen) keep(box vg.Rectangle) {
	if p.taken == nil {
		p.taken = map[cell][]vg.Rectangle{}
	}
	p.boxes = append(p.boxes, box)
	cells(box, func(c cell) { p.taken[c] = append(p.taken[c], box) })
}

// fill fills an outline where it lies within the frame.
func (p *pen) fill(s stroke) {
	var outline []vg.Point
	for _, xy := range s.points {
		outline = append(outline, vg.Point{X: p.x(xy.X), Y: p.y(xy.Y)})
	}
	p.canvas.FillPolygon(s.colour, p.canvas.ClipPolygonXY(outline))
}

// stroke draws a line where it lies within the frame, or rings at its points.
func (p *pen) stroke(s stroke) {
	if s.rings {
		ring := draw.GlyphStyle{Color: s.colour, Radius: vg.Points(2.4), Shape: draw.RingGlyph{}}
		for _, xy := range s.points {
			if at := (vg.Point{X: p.x(xy.X), Y: p.y(xy.Y)}); finite(xy.X) && finite(xy.Y) && p.canvas.Contains(at) {
				p.canvas.DrawGlyph(ring, at)
			}
		}
		return
	}
	if s.ticks {
		cross := draw.GlyphStyle{Color: s.colour, Radius: vg.Points(2.2), Shape: draw.CrossGlyph{}}
		for _, xy := range s.points {
			if at := (vg.Point{X: p.x(xy.X), Y: p.y(xy.Y)}); p.canvas.Contains(at) {
				p.canvas.DrawGlyph(cross, at)
				p.remember([]vg.Point{at, at})
			}
		}
	}
	var part []vg.Point
	flush := func() {
		if len(part) > 1 {
			for _, piece := range p.canvas.ClipLinesXY(part) {
				p.canvas.StrokeLines(s.weight.style(s.colour), piece)
				p.remember(piece)
			}
		}
		part = nil
	}
	for _, xy := range s.points {
		if !finite(xy.X) || !finite(xy.Y) {
			flush()
			continue
		}
		part = append(part, vg.Point{X: p.x(xy.X), Y: p.y(xy.Y)})
	}
	flush()
}

// remember notes points two points (of the printer) apart along a drawn line.
func (p *pen) remember(line []vg.Point) {
	if p.ink == nil {
		p.ink = map[cell][]vg.Point{}
	}
	for i := 1; i < len(line); i++ {
		a, b := line[i-1], line[i]
		steps := max(1, int(math.Hypot(float64(b.X-a.X), float64(b.Y-a.Y))/2))
		for k := range steps + 1 {
			t := vg.Length(k) / vg.Length(steps)
			at := vg.Point{X: a.X + t*(b.X-a.X), Y: a.Y + t*(b.Y-a.Y)}
			p.ink[cellOf(at)] = append(p.ink[cellOf(at)], at)
		}
	}
}

// bound draws a limit: a line with short hatches on the forbidden side.
func (p *pen) bound(b Bound) {
	x := p.x(b.Flow)
	if x < p.canvas.Min.X || x > p.canvas.Max.X {
		return
	}
	style := draw.LineStyle{Color: boundColour, Width: vg.Points(0.8)}
	bottom, top := vg.Point{X: x, Y: p.canvas.Min.Y}, vg.Point{X: x, Y: p.canvas.Max.Y}
	p.canvas.StrokeLine2(style, bottom.X, bottom.Y, top.X, top.Y)
	side := vg.Points(4) // hatches to the right of a greatest flow
	if b.Least {
		side = -side
	}
	style.Width = vg.Points(0.5)
	for y := bottom.Y; y+vg.Points(4) <= top.Y; y += vg.Points(5) {
		p.canvas.StrokeLine2(style, x, y, x+side, y+vg.Points(4))
	}
	p.remember([]vg.Point{bottom, top})
}

// boundName writes a limit's name upright along its line, on the free side, where it hides least.
func (p *pen) boundName(b Bound) {
	x := p.x(b.Flow)
	if x < p.canvas.Min.X || x > p.canvas.Max.X {
		return
	}
	name := writing(labelSize - 1)
	name.Color, name.Rotation, name.XAlign, name.YAlign = boundColour, math.Pi/2, text.XLeft, text.YTop
	width, height := name.Width(b.Name), name.Height(b.Name)
	left := x + vg.Points(2)
	if !b.Least {
		left = x - vg.Points(2) - height
	}
	var best vg.Rectangle
	bestCost := math.Inf(1)
	for y := p.canvas.Min.Y + vg.Points(4); y+width < p.canvas.Max.Y; y += vg.Points(6) {
		box := vg.Rectangle{Min: vg.Point{X: left, Y: y}, Max: vg.Point{X: left + height, Y: y + width}}
		if cost := p.cost(box) + 0.01*float64(y-p.canvas.Min.Y); cost < bestCost {
			best, bestCost = box, cost
		}
	}
	if math.IsInf(bestCost, 1) {
		return // a name longer than the frame is high
	}
	p.canvas.FillText(name, best.Min, b.Name)
	p.keep(best)
}

// bracket draws a difference: a line between two short bars.
func (p *pen) bracket(b bracket) {
	x, low, high := p.x(b.x), p.y(b.low), p.y(b.high)
	style := draw.LineStyle{Color: inkColour, Width: vg.Points(0.9)}
	bar := vg.Points(3)
	p.canvas.StrokeLine2(style, x, low, x, high)
	p.canvas.StrokeLine2(style, x-bar, low, x+bar, low)
	p.canvas.StrokeLine2(style, x-bar, high, x+bar, high)
	p.remember([]vg.Point{{X: x, Y: low}, {X: x, Y: high}})
}

// mark draws an operating point, or an open one of before a change.
func (p *pen) mark(m Mark, former bool) {
	at := vg.Point{X: p.x(m.Flow), Y: p.y(m.Value)}
	p.dot(at, former, inkColour)
	r := vg.Points(5)
	p.keep(vg.Rectangle{Min: vg.Point{X: at.X - r, Y: at.Y - r}, Max: vg.Point{X: at.X + r, Y: at.Y + r}})
}

// dot draws a filled mark, or an open one for what was before a change.
func (p *pen) dot(at vg.Point, former bool, c color.Color) {
	style := draw.GlyphStyle{Color: c, Radius: vg.Points(3.4), Shape: draw.CircleGlyph{}}
	if former {
		p.canvas.DrawGlyph(draw.GlyphStyle{Color: color.White, Radius: style.Radius, Shape: draw.CircleGlyph{}}, at)
		style.Shape = draw.RingGlyph{}
	}
	p.canvas.DrawGlyph(style, at)
}

// labelAt writes a label near a point: of the places round it the one that is clearest, the nearer of equals.
func (p *pen) labelAt(label string, at vg.Point, c color.Color) {
	var places []vg.Point
	style := writing(labelSize)
	w, h := style.Width(label), style.Height(label)
	for _, far := range []vg.Length{7, 14, 22, 32} {
		d := vg.Points(float64(far))
		places = append(places,
			vg.Point{X: at.X + d, Y: at.Y + d/2}, vg.Point{X: at.X + d, Y: at.Y - h - d/2},
			vg.Point{X: at.X - w - d, Y: at.Y - h - d/2}, vg.Point{X: at.X - w - d, Y: at.Y + d/2},
			vg.Point{X: at.X + d, Y: at.Y - h/2}, vg.Point{X: at.X - w - d, Y: at.Y - h/2},
			vg.Point{X: at.X - w/2, Y: at.Y + d}, vg.Point{X: at.X - w/2, Y: at.Y - h - d})
	}
	p.write(label, style, places, c)
}

// labelAlong writes a line's name beside it, as near its right end as there is room.
func (p *pen) labelAlong(s stroke) {
	style := writing(labelSize)
	w, h := style.Width(s.name), style.Height(s.name)
	var places []vg.Point
	for k := len(s.points) - 1; k >= 0; k -= max(1, len(s.points)/24) {
		if !finite(s.points[k].X) || !finite(s.points[k].Y) {
			continue
		}
		at := vg.Point{X: p.x(s.points[k].X), Y: p.y(s.points[k].Y)}
		gap := vg.Points(4)
		places = append(places, vg.Point{X: at.X - w/2, Y: at.Y + gap}, vg.Point{X: at.X - w/2, Y: at.Y - h - gap},
			vg.Point{X: at.X - w - gap, Y: at.Y - h - gap}, vg.Point{X: at.X - w - gap, Y: at.Y + gap}, vg.Point{X: at.X + gap, Y: at.Y + gap}, vg.Point{X: at.X + gap, Y: at.Y - h - gap})
	}
	p.write(s.name, style, places, s.colour)
}

// write puts a label at the best of the places, each the lower left corner of its box.
func (p *pen) write(label string, style text.Style, places []vg.Point, c color.Color) {
	if label == "" || len(places) == 0 {
		return
	}
	w, h := style.Width(label), style.Height(label)
	var best vg.Rectangle
	bestCost := math.Inf(1)
	for i, at := range places {
		box := vg.Rectangle{Min: at, Max: vg.Point{X: at.X + w, Y: at.Y + h}}
		if cost := p.cost(box) + float64(i)*0.02; cost < bestCost {
			best, bestCost = box, cost
		}
	}
	style.Color, style.XAlign, style.YAlign = c, text.XLeft, text.YBottom
	p.canvas.FillText(style, best.Min, label)
	p.keep(best)
}

// cost says how much a label in a box would hide, or how far it would leave the frame.
func (p *pen) cost(box vg.Rectangle) float64 {
	cost := 0.0
	frame := p.canvas.Rectangle
	if box.Min.X < frame.Min.X+2 || box.Max.X > frame.Max.X-2 || box.Min.Y < frame.Min.Y+2 || box.Max.Y > frame.Max.Y-2 {
		cost += 1000
	}
	// Grown by the room that is wanted round a label.
	wide := vg.Rectangle{Min: vg.Point{X: box.Min.X - 2, Y: box.Min.Y - 1}, Max: vg.Point{X: box.Max.X + 2, Y: box.Max.Y + 1}}
	first := cellOf(wide.Min)
	cells(wide, func(c cell) {
		for _, other := range p.taken[c] {
			// A box in several cells counts in the first of those that are looked at.
			if o := cellOf(other.Min); c.x != max(o.x, first.x) || c.y != max(o.y, first.y) {
				continue
			}
			if wide.Min.X < other.Max.X && other.Min.X < wide.Max.X && wide.Min.Y < other.Max.Y && other.Min.Y < wide.Max.Y {
				cost += 200
			}
		}
		for _, at := range p.ink[c] {
			if box.Min.X-1 < at.X && at.X < box.Max.X+1 && box.Min.Y-1 < at.Y && at.Y < box.Max.Y+1 {
				cost++
			}
		}
	})
	return cost
}
