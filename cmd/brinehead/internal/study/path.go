package study

import (
	"math"
	"slices"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/fluids"
)

// PathComparison takes the head of one running pump apart along the way of its water, before and after. On each side, and in
// the differences,
//
//	Head = Static + the sum of the losses of Elements
//
// since along any way from one point to another total heads add up; it holds to what the solver leaves at each run
// (solution.head_residual_m). Where the pump does not run on its curve on both sides there is only the reason.
type PathComparison struct {
	Pump     string              `json:"pump"`
	From     Sides               `json:"from"` // the point where the way begins, and where it ends
	To       Sides               `json:"to"`
	Head     Pair                `json:"head_m"`
	Static   Pair                `json:"static_m"` // total head where the way ends, less that where it begins
	Elements []ElementComparison `json:"elements"`
	Reason   string              `json:"reason"` // why it cannot be taken apart; empty where it is

	Profiles [2]Profile `json:"-"` // before and after, for drawing
}

// Profile is the hydraulic grade along a way, m above the keel: the total head less the velocity head of the run, which is
// how high the water would rise in a gauge glass. A point that holds its head counts as still.
type Profile struct {
	Points     []string  // by station, from the first to the last
	Elevations []float64 // of the points
	Start, End []float64 // grade at the beginning and end of each step between two stations
	Pumps      []string  // by step: the pump, or empty for a run
}

// ElementComparison is what one element on the way loses: the pipe of a run, a fitting, its tees, the weight of its own water,
// or another pump, which gives (a loss below 0). What is on the way on one side only loses 0 on the other.
//
// Where the element's loss can be worked at any flow, the difference is split into what the element itself brings, at the flow
// as it was, and what comes of the other flow:
//
//	difference = [after(Qbefore) - before(Qbefore)] + [after(Qafter) - after(Qbefore)] = ByElement + ByFlow
type ElementComparison struct {
	Run       string `json:"run"`
	Element   string `json:"element"`
	On        Sides  `json:"on_the_way"` // yes or no
	Loss      Pair   `json:"loss_m"`
	ByElement Figure `json:"by_element_m"`
	ByFlow    Figure `json:"by_flow_m"`
}

// step is a run or a pump of a way, along its from and to or against them.
type step struct {
	name    string
	pump    bool
	forward bool
}

// element is a loss on the way of one side.
type element struct {
	key, run, name string
	loss           float64
	at             func(flow float64) float64 // the loss at another flow of its run; nil where the flow alone does not say
}

// comparePaths takes every pump that runs on either side apart.
func comparePaths(before, after *Condition) (list []PathComparison) {
	for _, p := range paired(before.Pumps, after.Pumps, func(p Pump) string { return p.Pump }) {
		runs := p.before != nil && p.before.Running || p.after != nil && p.after.Running
		if !runs {
			continue
		}
		list = append(list, comparePath(before, after, p))
	}
	return list
}

func comparePath(before, after *Condition, p both[Pump]) PathComparison {
	out := PathComparison{Pump: p.either().Pump, Head: p.pair(func(p *Pump) Figure { return p.Head }), Static: pairOf(unknown, unknown)}
	states := p.states(before, after, pumpState)
	if states.Before != stateRunning || states.After != stateRunning {
		out.Reason = "before: " + states.Before + ", after: " + states.After
		return out
	}
	earlier, later := before.wayOf(out.Pump), after.wayOf(out.Pump)
	if after.passable(before, earlier) {
		later = earlier // the same way on both sides, where it is open on both
	}
	static, elements, ends := [2]float64{}, [2][]element{}, [2][2]string{}
	for side, c := range []*Condition{before, after} {
		way := [][]step{earlier, later}[side]
		static[side], elements[side], ends[side] = c.along(out.Pump, way)
		out.Profiles[side] = c.profile(way)
	}
	out.Static = pairOf(Figure(static[0]), Figure(static[1]))
	out.From, out.To = Sides{ends[0][0], ends[1][0]}, Sides{ends[0][1], ends[1][1]}
	out.Elements = compareElements(before, after, elements[0], elements[1])
	return out
}

// pumpIndex and runIndex find a pump and a run of the condition's plant by name, or -1.
func (c *Condition) pumpIndex(name string) int {
	for i, u := range c.solved.Plant.Pumps {
		if sameName(u.Name, name) {
			return i
		}
	}
	return -1
}

func (c *Condition) runIndex(name string) int {
	for i, r := range c.solved.Network.Runs {
		if sameName(r.Name, name) {
			return i
		}
	}
	return -1
}

// atRest is a flow that counts as none when a way is sought, m3/s.
const atRest = 1e-9

// wayOf follows the water of a pump: from its suction back along the greatest flow to where the water comes from, and from
// its delivery on to where it goes. In a closed loop the way back leads round to the pump's own delivery, and is the whole.
func (c *Condition) wayOf(pump string) []step {
	u := c.solved.Plant.Pumps[c.pumpIndex(pump)]
	met := map[int]bool{u.From: true}
	var back []step
	for at := u.From; at != u.To; {
		next, s, found := c.next(at, u.Name, -1)
		if !found || met[next] {
			break
		}
		back = append([]step{s}, back...)
		met[next] = true
		at = next
	}
	way := append(back, step{u.Name, true, true})
	if met[u.To] {
		return way
	}
	met[u.To] = true
	for at := u.To; ; {
		next, s, found := c.next(at, u.Name, 1)
		if !found || met[next] {
			return way
		}
		way = append(way, s)
		met[next] = true
		at = next
	}
}

// next finds the link of the greatest flow that leaves a point (sense 1) or comes to it (sense -1), other than a pump. There
// is none at a point that gives or takes water itself: the way begins or ends there.
func (c *Condition) next(at int, pump string, sense float64) (to int, s step, found bool) {
	sol := c.solved
	if sol.Network.Points[at].Fixed && math.Abs(sol.NetFlow(at)) > atRest {
		return 0, step{}, false
	}
	best := atRest
	try := func(from, end int, flow float64, name string, isPump bool) {
		out := flow * sense // above 0 where the water goes the way we follow, along from and to
		if from == at && out > best {
			best, to, s, found = out, end, step{name, isPump, sense > 0}, true
		}
		if end == at && -out > best {
			best, to, s, found = -out, from, step{name, isPump, sense < 0}, true
		}
	}
	for i, r := range sol.Network.Runs {
		try(r.From, r.To, sol.RunFlows[i], r.Name, false)
	}
	for i, u := range sol.Plant.Pumps {
		if u.Name != pump && u.Running {
			try(u.From, u.To, sol.PumpFlows[i], u.Name, true)
		}
	}
	return to, s, found
}

// passable says whether a way of another plant leads through the same points here, along runs that are open.
func (c *Condition) passable(other *Condition, way []step) bool {
	for _, s := range way {
		from, to, open := c.endsOf(s)
		otherFrom, otherTo, _ := other.endsOf(s)
		if !open || !sameName(from, otherFrom) || !sameName(to, otherTo) {
			return false
		}
	}
	return true
}

// endsOf returns the points a step leads between, in its own sense, and whether water can pass.
func (c *Condition) endsOf(s step) (from, to string, open bool) {
	var a, b int
	if s.pump {
		i := c.pumpIndex(s.name)
		if i < 0 {
			return "", "", false
		}
		u := c.solved.Plant.Pumps[i]
		a, b, open = u.From, u.To, u.Running
	} else {
		i := c.runIndex(s.name)
		if i < 0 {
			return "", "", false
		}
		r := c.solved.Network.Runs[i]
		a, b, open = r.From, r.To, !r.Shut
	}
	if !s.forward {
		a, b = b, a
	}
	points := c.solved.Network.Points
	return points[a].Name, points[b].Name, open
}

// along adds up what is lost on a way, the head of its own pump left out.
func (c *Condition) along(pump string, way []step) (static float64, elements []element, ends [2]string) {
	heads := map[string]float64{}
	for i, p := range c.solved.Network.Points {
		heads[p.Name] = c.solved.Heads[i]
	}
	for k, s := range way {
		from, to, _ := c.endsOf(s)
		if k == 0 {
			ends[0] = from
		}
		ends[1] = to
		switch {
		case !s.pump:
			elements = append(elements, c.elementsOf(s)...)
		case !sameName(s.name, pump):
			head := heads[to] - heads[from]
			elements = append(elements, element{key: "pump " + strings.ToLower(s.name), run: s.name, name: "pump", loss: -head})
		}
	}
	return heads[ends[1]] - heads[ends[0]], elements, ends
}

// profile is the hydraulic grade along a way.
func (c *Condition) profile(way []step) (p Profile) {
	sol := c.solved
	at := map[string]int{}
	for i, point := range sol.Network.Points {
		at[point.Name] = i
	}
	station := func(name string) {
		p.Points, p.Elevations = append(p.Points, name), append(p.Elevations, sol.Elevations[at[name]])
	}
	for k, s := range way {
		from, to, _ := c.endsOf(s)
		if k == 0 {
			station(from)
		}
		station(to)
		velocityHead, pump := 0.0, s.name
		if !s.pump {
			i := c.runIndex(s.name)
			v := sol.RunFlows[i] / sol.Network.Runs[i].Pipe.Area()
			velocityHead, pump = v*v/(2*fluids.Gravity), ""
		}
		grade := func(name string) float64 {
			if sol.Network.Points[at[name]].Fixed {
				return sol.Heads[at[name]]
			}
			return sol.Heads[at[name]] - velocityHead
		}
		p.Start, p.End, p.Pumps = append(p.Start, grade(from)), append(p.End, grade(to)), append(p.Pumps, pump)
	}
	for k := range way { // a pump's flanges have the velocity of the runs beside them
		if p.Pumps[k] != "" && k > 0 {
			p.Start[k] = p.End[k-1]
		}
		if p.Pumps[k] != "" && k+1 < len(way) {
			p.End[k] = p.Start[k+1]
		}
	}
	return p
}

// elementsOf lists what a run loses, each counted in the sense of the way.
func (c *Condition) elementsOf(s step) (list []element) {
	i := c.runIndex(s.name)
	sol := c.solved
	r, q, nu := sol.Network.Runs[i], sol.RunFlows[i], sol.Network.Viscosity
	sense := 1.0
	if !s.forward {
		sense = -1
	}
	run := strings.ToLower(r.Name)
	if r.Pipe.Length > 0 {
		at := func(q float64) float64 { return sense * r.PipeLoss(q, nu) }
		list = append(list, element{run + " pipe", r.Name, "pipe", at(q), at})
	}
	met := map[string]int{}
	for k, f := range r.Fittings {
		key := strings.ToLower(f.Tag)
		if key == "" {
			key = strings.ToLower(f.Name)
		}
		key += job.ValvePort(f.Name)
		met[key]++
		name := strings.TrimSpace(f.Tag + " " + f.Name)
		at := func(q float64) float64 { return sense * r.FittingLoss(k, q, nu) }
		list = append(list, element{run + " " + key + strings.Repeat("'", met[key]), r.Name, name, at(q), at})
	}
	if tee := sol.TeeLosses[i]; tee != 0 {
		list = append(list, element{run + " tee", r.Name, "tee", sense * tee, nil})
	}
	if own := r.Buoyancy(); own != 0 {
		list = append(list, element{run + " own water", r.Name, "weight of its own water", sense * own, nil})
	}
	return list
}

// compareElements brings the elements of both ways together, those of the way before in their order, and each that is new
// behind the last one of its run.
func compareElements(before, after *Condition, earlier, later []element) (list []ElementComparison) {
	pairs := paired(earlier, later, func(e element) string { return e.key })
	for _, e := range earlier {
		for _, p := range pairs {
			if p.before != nil && p.before.key == e.key {
				list = append(list, compareElement(before, after, p))
			}
		}
	}
	for _, p := range pairs {
		if p.before != nil {
			continue
		}
		at := len(list)
		for k, e := range list {
			if sameName(e.Run, p.after.run) {
				at = k + 1
			}
		}
		list = append(list[:at], append([]ElementComparison{compareElement(before, after, p)}, list[at:]...)...)
	}
	return list
}

func compareElement(before, after *Condition, p both[element]) ElementComparison {
	e := ElementComparison{Run: p.either().run, Element: p.either().name, On: Sides{"yes", "yes"}, ByElement: unknown, ByFlow: unknown}
	loss := func(e *element) float64 {
		if e == nil {
			return 0
		}
		return e.loss
	}
	if p.before == nil {
		e.On.Before = "no"
	}
	if p.after == nil {
		e.On.After = "no"
	}
	e.Loss = pairOf(Figure(loss(p.before)), Figure(loss(p.after)))
	i := before.runIndex(e.Run)
	if p.either().at == nil || i < 0 {
		return e
	}
	then := 0.0 // the loss of the element as it is after, at the flow as it was before
	if p.after != nil {
		then = p.after.at(before.solved.RunFlows[i])
	}
	e.ByElement, e.ByFlow = Figure(then-loss(p.before)), Figure(loss(p.after)-then)
	return e
}

// Pictures returns what plots show of the running pumps on either side; see Condition.Pictures.
func (c *ConditionComparison) Pictures() (before, after []Picture) {
	return c.before.Pictures(), c.after.Pictures()
}

// PathsToDraw returns the ways worth a drawing: those that could be taken apart, and of pumps that do the same on both sides
// only the first.
func (c *ConditionComparison) PathsToDraw() (list []PathComparison) {
	for _, p := range c.Paths {
		alike := func(q PathComparison) bool {
			const near = 0.005 // of the head
			return len(p.Elements) == len(q.Elements) && math.Abs(float64(p.Head.Before-q.Head.Before)) <= near*float64(q.Head.Before) &&
				math.Abs(float64(p.Head.After-q.Head.After)) <= near*float64(q.Head.After)
		}
		if p.Reason == "" && !slices.ContainsFunc(list, alike) {
			list = append(list, p)
		}
	}
	return list
}
