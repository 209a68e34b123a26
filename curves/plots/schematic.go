package plots

import (
	"cmp"
	"fmt"
	"image/color"
	"io"
	"math"
	"slices"

	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// Schematic is a network drawn from left to right, the way the water goes, with higher points higher up. Symbols follow
// ISO 14617 and ISO 10628 in spirit and are drawn by us: a circle with a triangle for a pump (filled where it runs), a
// bow-tie for a valve, a triangle against a bar for a non-return, a hatched box for a strainer, a circle with a zigzag for a
// cooler, two bars for an orifice.
type Schematic struct {
	Title, Subtitle string
	Units           Units
	PressureName    string
	PressureFactor  float64 // axis value of 1 Pa; 0 stands for bar
	Points          []SchematicPoint
	Runs            []SchematicRun
	Pumps           []SchematicPump
}

// SchematicPoint is a point of the network.
type SchematicPoint struct {
	Name      string
	Kind      string  // "sea", "overboard", "tank" or "junction"
	Elevation float64 // m
	Pressure  float64 // Pa, gauge; NaN where not known
}

// SchematicRun is a run between two points, by their indices.
type SchematicRun struct {
	Name     string
	From, To int
	Flow     float64 // m3/s, positive from From to To; NaN where not known
	Shut     bool
	Symbols  []string // in order: "strainer", "cooler", "valve", "non-return", "orifice"
}

// SchematicPump is a pump between two points.
type SchematicPump struct {
	Name     string
	From, To int
	Flow     float64 // m3/s; NaN where not known
	Running  bool
}

// Write draws the schematic in a format and size (the zero value is 260 x 165 mm). Indices that are none are passed over.
func (s Schematic) Write(w io.Writer, format Format, size Size) error {
	if size.Width <= 0 || size.Height <= 0 {
		size = Size{260, 165}
	}
	if s.PressureFactor == 0 {
		s.PressureName, s.PressureFactor = "bar", 1e-5
	}
	s.Units = s.Units.OrMetric()
	return writePage(w, format, size, func(page draw.Canvas) {
		f := &figure{title: printable(s.Title), subtitle: printable(s.Subtitle)}
		top := f.heading(page)
		s.draw(draw.Crop(page, vg.Points(14), -vg.Points(14), vg.Points(10), -top-vg.Points(4)))
	})
}

// edge is a run or a pump as the layout sees it.
type edge struct {
	from, to int
	run      int // index in Runs, or -1
	pump     int // index in Pumps, or -1
	lane     int // which of the edges between the same two columns this is
	back     bool
}

// edges lists runs and pumps whose ends are points.
func (s Schematic) edges() (list []edge) {
	known := func(i int) bool { return 0 <= i && i < len(s.Points) }
	for i, r := range s.Runs {
		if known(r.From) && known(r.To) && r.From != r.To {
			list = append(list, edge{from: r.From, to: r.To, run: i, pump: -1})
		}
	}
	for i, p := range s.Pumps {
		if known(p.From) && known(p.To) && p.From != p.To {
			list = append(list, edge{from: p.From, to: p.To, run: -1, pump: i})
		}
	}
	return list
}

// columns gives each point a column: one more than the farthest of those that lead to it, from the seas and tanks on. An
// edge that closes a loop does not count and is marked as running back.
func (s Schematic) columns(edges []edge) (column []int, count int) {
	leaving := make([][]int, len(s.Points))
	for k, e := range edges {
		leaving[e.from] = append(leaving[e.from], k)
	}
	state := make([]int, len(s.Points)) // 0 not met, 1 on the way, 2 done
	var order []int                     // points, each behind those that it leads to
	var visit func(p int)
	visit = func(p int) {
		state[p] = 1
		for _, k := range leaving[p] {
			switch to := edges[k].to; state[to] {
			case 0:
				visit(to)
			case 1:
				edges[k].back = true
			}
		}
		state[p] = 2
		order = append(order, p)
	}
	for _, kind := range []string{"sea", "tank", ""} {
		for p := range s.Points {
			if state[p] == 0 && (kind == "" || s.Points[p].Kind == kind) {
				visit(p)
			}
		}
	}
	column = make([]int, len(s.Points))
	for _, p := range slices.Backward(order) {
		for _, k := range leaving[p] {
			if e := edges[k]; !e.back {
				column[e.to] = max(column[e.to], column[p]+1)
			}
		}
		count = max(count, column[p]+1)
	}
	return column, count
}

// place puts the points on the canvas: columns evenly across, in each column by elevation, no nearer than a label needs.
func (s Schematic) place(c draw.Canvas, column []int, columns int) []vg.Point {
	low, high := math.Inf(1), math.Inf(-1)
	for _, p := range s.Points {
		if finite(p.Elevation) {
			low, high = math.Min(low, p.Elevation), math.Max(high, p.Elevation)
		}
	}
	at := make([]vg.Point, len(s.Points))
	side := vg.Points(26)
	step := (c.Size().X - 2*side) / vg.Length(max(columns-1, 1))
	for k := range columns {
		var here []int
		for p := range s.Points {
			if column[p] == k {
				here = append(here, p)
			}
		}
		slices.SortStableFunc(here, func(a, b int) int { return cmp.Compare(s.Points[a].Elevation, s.Points[b].Elevation) })
		bottom, top := c.Min.Y+vg.Points(30), c.Max.Y-vg.Points(46)
		least := min(vg.Points(58), (top-bottom)/vg.Length(max(len(here)-1, 1)))
		last := bottom - least
		for i, p := range here {
			share := 0.5
			if high > low && finite(s.Points[p].Elevation) {
				share = (s.Points[p].Elevation - low) / (high - low)
			}
			y := max(bottom+vg.Length(share)*(top-bottom), last+least)
			y = min(y, top-least*vg.Length(len(here)-1-i)) // leave room for those above
			at[p] = vg.Point{X: c.Min.X + side + vg.Length(k)*step, Y: y}
			last = y
		}
	}
	return at
}

// draw draws the network within a canvas.
func (s Schematic) draw(c draw.Canvas) {
	if len(s.Points) == 0 {
		return
	}
	edges := s.edges()
	column, columns := s.columns(edges)
	back := 0
	for _, e := range edges {
		if column[e.to] <= column[e.from] {
			back++
		}
	}
	at := s.place(draw.Crop(c, 0, 0, 0, -vg.Length(min(back, 6))*backLane), column, columns)
	met := map[[2]int]int{}
	for k := range edges {
		key := laneKey(column, edges[k])
		edges[k].lane = met[key]
		met[key]++
	}
	p := &pen{canvas: c}
	routes := make([][]vg.Point, len(edges))
	for k, e := range edges {
		routes[k] = route(at[e.from], at[e.to], c, e, met[laneKey(column, e)])
		s.drawLine(p, e, routes[k])
	}
	middle := make([]vg.Point, len(edges))
	for k, e := range edges { // when every line is there, so that symbols can keep off the crossings
		middle[k] = s.drawSymbols(p, e, routes[k])
	}
	for i, point := range s.Points {
		s.drawPoint(p, point, at[i])
	}
	for i, point := range s.Points { // names last, when it is known what they must keep clear of
		label := printable(point.Name)
		detail := fmt.Sprintf("%.1f %s", point.Elevation*s.Units.HeadFactor, s.Units.HeadName)
		if finite(point.Pressure) {
			detail += fmt.Sprintf(", %.2f %s", point.Pressure*s.PressureFactor, s.PressureName)
		}
		p.twoLines(label, detail, at[i], inkColour)
	}
	for k, e := range edges {
		name, flow := s.words(e)
		p.twoLines(name, flow, middle[k], pumpColour)
	}
}

// backLane is the room over the points that an edge running back takes.
var backLane = vg.Points(34)

// laneKey tells which edges share out the room between two columns among them; those that run back share the top.
func laneKey(column []int, e edge) [2]int {
	if column[e.to] <= column[e.from] {
		return [2]int{-1, -1}
	}
	return [2]int{column[e.from], column[e.to]}
}

// words returns what is written on an edge: its name and its flow.
func (s Schematic) words(e edge) (name, flow string) {
	q, still := 0.0, ""
	if e.run >= 0 {
		name, q = s.Runs[e.run].Name, s.Runs[e.run].Flow
		if s.Runs[e.run].Shut {
			still = "shut"
		}
	} else {
		name, q = s.Pumps[e.pump].Name, s.Pumps[e.pump].Flow
		if !s.Pumps[e.pump].Running && !(q < 0) {
			still = "idle"
		}
	}
	switch {
	case still != "":
		return printable(name), still
	case !finite(q):
		return printable(name), "flow not known"
	}
	return printable(name), fmt.Sprintf("%.0f %s", math.Abs(q)*s.Units.FlowFactor, s.Units.FlowName)
}

// route leads an edge from point to point in right angles: across, up or down in a lane of its own, and across. One that
// closes a loop runs back over the top.
func route(a, b vg.Point, c draw.Canvas, e edge, lanes int) []vg.Point {
	share := vg.Length(e.lane+1) / vg.Length(lanes+1)
	if b.X > a.X {
		x := a.X + (b.X-a.X)*(0.25+0.5*share)
		return []vg.Point{a, {X: x, Y: a.Y}, {X: x, Y: b.Y}, b}
	}
	out, in := a.X+vg.Points(16+8*float64(e.lane%4)), b.X-vg.Points(16+8*float64(e.lane%4))
	over := c.Max.Y - vg.Points(34) - vg.Length(e.lane%6)*backLane
	return []vg.Point{a, {X: out, Y: a.Y}, {X: out, Y: over}, {X: in, Y: over}, {X: in, Y: b.Y}, b}
}

// longest returns the start and end of a route's longest stretch.
func longest(line []vg.Point) (a, b vg.Point) {
	best := vg.Length(-1)
	for i := 1; i < len(line); i++ {
		d := vg.Length(math.Hypot(float64(line[i].X-line[i-1].X), float64(line[i].Y-line[i-1].Y)))
		if d > best {
			a, b, best = line[i-1], line[i], d
		}
	}
	return a, b
}

// state says how an edge stands: its flow, and whether it is shut or idle.
func (s Schematic) state(e edge) (flow float64, still bool) {
	if e.run >= 0 {
		return s.Runs[e.run].Flow, s.Runs[e.run].Shut
	}
	u := s.Pumps[e.pump]
	return u.Flow, !u.Running && !(u.Flow < 0)
}

// drawLine draws the line of a run or a pump, broken where nothing passes.
func (s Schematic) drawLine(p *pen, e edge, line []vg.Point) {
	style := draw.LineStyle{Color: inkColour, Width: vg.Points(1.1)}
	if _, still := s.state(e); still {
		style = draw.LineStyle{Color: boundColour, Width: vg.Points(0.9), Dashes: []vg.Length{vg.Points(4), vg.Points(3)}}
	}
	p.canvas.StrokeLines(style, line)
	p.remember(line)
}

// drawSymbols draws the symbols of a run or a pump and the direction of its flow on the longest stretch of its line, moved
// along it to where they hide least. It returns the middle of them, where the name belongs.
func (s Schematic) drawSymbols(p *pen, e edge, line []vg.Point) vg.Point {
	a, b := longest(line)
	length := vg.Length(math.Hypot(float64(b.X-a.X), float64(b.Y-a.Y)))
	if length == 0 {
		return a
	}
	direction := vg.Point{X: (b.X - a.X) / length, Y: (b.Y - a.Y) / length}
	var symbols []string
	if e.pump >= 0 {
		symbols = []string{"pump"}
	} else {
		symbols = slices.Clone(s.Runs[e.run].Symbols)
		if flow, still := s.state(e); !still && finite(flow) && flow > 0 {
			symbols = append(symbols, "arrow")
		} else if !still && finite(flow) && flow < 0 {
			symbols = append(symbols, "arrow back")
		}
	}
	step := min(vg.Points(22), length/vg.Length(len(symbols)+1))
	spot := func(shift vg.Length, i int) vg.Point {
		d := shift + vg.Length(i)*step
		return vg.Point{X: a.X + d*direction.X, Y: a.Y + d*direction.Y}
	}
	room := length - vg.Length(len(symbols)-1)*step
	best, bestCost := room/2, math.Inf(1)
	for k := range 21 {
		shift := room * (0.1 + 0.8*vg.Length(k)/20)
		cost := math.Abs(float64(k)-10) * 0.1
		for i := range symbols {
			at := spot(shift, i)
			r := vg.Points(7)
			cost += p.cost(vg.Rectangle{Min: vg.Point{X: at.X - r, Y: at.Y - r}, Max: vg.Point{X: at.X + r, Y: at.Y + r}})
		}
		if cost < bestCost {
			best, bestCost = shift, cost
		}
	}
	for i, name := range symbols {
		switch name {
		case "arrow":
			p.arrow(spot(best, i), direction)
		case "arrow back":
			p.arrow(spot(best, i), vg.Point{X: -direction.X, Y: -direction.Y})
		default:
			p.symbol(name, spot(best, i), direction, e.pump >= 0 && s.Pumps[e.pump].Running)
		}
	}
	if len(symbols) == 0 {
		return vg.Point{X: (a.X + b.X) / 2, Y: (a.Y + b.Y) / 2}
	}
	return vg.Point{X: (spot(best, 0).X + spot(best, len(symbols)-1).X) / 2, Y: (spot(best, 0).Y + spot(best, len(symbols)-1).Y) / 2}
}

// drawPoint draws a point: water for the sea and an overboard, an open vessel for a tank, a dot for a junction.
func (s Schematic) drawPoint(p *pen, point SchematicPoint, at vg.Point) {
	style := draw.LineStyle{Color: suctionColour, Width: vg.Points(1.3)}
	r := vg.Points(7)
	switch point.Kind {
	case "sea", "overboard":
		for k := range 3 {
			y := at.Y - vg.Length(k)*vg.Points(3)
			p.canvas.StrokeLine2(style, at.X-r+vg.Length(k)*vg.Points(2), y, at.X+r-vg.Length(k)*vg.Points(2), y)
		}
	case "tank":
		p.canvas.StrokeLines(style, []vg.Point{{X: at.X - r, Y: at.Y + r}, {X: at.X - r, Y: at.Y - r}, {X: at.X + r, Y: at.Y - r}, {X: at.X + r, Y: at.Y + r}})
		p.canvas.StrokeLine2(style, at.X-r, at.Y+r/2, at.X+r, at.Y+r/2)
	default:
		p.canvas.DrawGlyph(draw.GlyphStyle{Color: inkColour, Radius: vg.Points(2.2), Shape: draw.CircleGlyph{}}, at)
	}
	p.keep(vg.Rectangle{Min: vg.Point{X: at.X - r, Y: at.Y - r}, Max: vg.Point{X: at.X + r, Y: at.Y + r}})
}

// symbol draws the symbol of an element at a place on a line that runs in a direction.
func (p *pen) symbol(name string, at, direction vg.Point, filled bool) {
	const r = vg.Length(6)
	across := vg.Point{X: -direction.Y, Y: direction.X}
	spot := func(along, side float64) vg.Point {
		return vg.Point{X: at.X + r*(vg.Length(along)*direction.X+vg.Length(side)*across.X), Y: at.Y + r*(vg.Length(along)*direction.Y+vg.Length(side)*across.Y)}
	}
	style := draw.LineStyle{Color: inkColour, Width: vg.Points(1)}
	shape := func(fill color.Color, corners ...vg.Point) {
		p.canvas.FillPolygon(fill, corners)
		p.canvas.StrokeLines(style, append(corners, corners[0]))
	}
	circle := func(size float64) {
		var ring []vg.Point
		for k := range 24 {
			angle := 2 * math.Pi * float64(k) / 24
			ring = append(ring, spot(size*math.Cos(angle), size*math.Sin(angle)))
		}
		shape(color.White, ring...)
	}
	switch name {
	case "pump":
		circle(1.5)
		fill := color.Color(color.White)
		if filled {
			fill = pumpColour
		}
		shape(fill, spot(1.5, 0), spot(-0.75, 1.3), spot(-0.75, -1.3))
	case "valve":
		shape(color.White, spot(-1, 0.7), spot(1, -0.7), spot(1, 0.7), spot(-1, -0.7))
	case "non-return":
		shape(color.White, spot(-0.9, 0.8), spot(0.8, 0), spot(-0.9, -0.8))
		p.canvas.StrokeLines(style, []vg.Point{spot(0.8, 0.9), spot(0.8, -0.9)})
	case "strainer":
		shape(color.White, spot(-1, 1), spot(1, 1), spot(1, -1), spot(-1, -1))
		for _, k := range []float64{-0.5, 0, 0.5} {
			p.canvas.StrokeLines(style, []vg.Point{spot(k, 1), spot(k, -1)})
		}
	case "cooler":
		circle(1.2)
		p.canvas.StrokeLines(style, []vg.Point{spot(-1.2, 0), spot(-0.5, 0), spot(-0.2, 0.8), spot(0.2, -0.8), spot(0.5, 0), spot(1.2, 0)})
	case "orifice":
		p.canvas.StrokeLines(style, []vg.Point{spot(0, 1), spot(0, 0.3)})
		p.canvas.StrokeLines(style, []vg.Point{spot(0, -1), spot(0, -0.3)})
	}
	p.keep(vg.Rectangle{Min: vg.Point{X: at.X - 1.5*r, Y: at.Y - 1.5*r}, Max: vg.Point{X: at.X + 1.5*r, Y: at.Y + 1.5*r}})
}

// arrow draws a filled arrow head.
func (p *pen) arrow(at, direction vg.Point) {
	const r = vg.Length(5)
	across := vg.Point{X: -direction.Y, Y: direction.X}
	p.canvas.FillPolygon(inkColour, []vg.Point{
		{X: at.X + r*direction.X, Y: at.Y + r*direction.Y},
		{X: at.X - r*direction.X + 0.6*r*across.X, Y: at.Y - r*direction.Y + 0.6*r*across.Y},
		{X: at.X - r*direction.X - 0.6*r*across.X, Y: at.Y - r*direction.Y - 0.6*r*across.Y}})
}

// twoLines writes a name and a figure under it near a place, where they hide least.
func (p *pen) twoLines(name, figure string, at vg.Point, c color.Color) {
	style := writing(labelSize - 1.5)
	style.Color, style.XAlign, style.YAlign = c, text.XLeft, text.YBottom
	w := max(style.Width(name), style.Width(figure))
	line := style.Height("Ag") * 1.1
	h := 2 * line
	var best vg.Rectangle
	bestCost := math.Inf(1)
	rank := 0.0
	for _, far := range []vg.Length{5, 9, 15, 23, 33, 45} {
		d := vg.Points(float64(far))
		for _, corner := range []vg.Point{{X: at.X - w/2, Y: at.Y + d}, {X: at.X - w/2, Y: at.Y - h - d}, {X: at.X + d, Y: at.Y - h/2}, {X: at.X - w - d, Y: at.Y - h/2},
			{X: at.X + d, Y: at.Y + d}, {X: at.X + d, Y: at.Y - h - d}, {X: at.X - w - d, Y: at.Y + d}, {X: at.X - w - d, Y: at.Y - h - d}} {
			box := vg.Rectangle{Min: corner, Max: vg.Point{X: corner.X + w, Y: corner.Y + h}}
			rank += 0.05
			if cost := p.cost(box) + rank; cost < bestCost {
				best, bestCost = box, cost
			}
		}
	}
	p.canvas.FillText(style, vg.Point{X: best.Min.X, Y: best.Min.Y + line}, name)
	p.canvas.FillText(style, best.Min, figure)
	p.keep(best)
}
