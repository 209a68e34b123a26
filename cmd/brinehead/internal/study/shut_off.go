package study

import (
	"fmt"
	"math"

	"brinehead/fluids"
)

// shutOff is what stands in a condition's pipes when the last valve behind the running pumps is shut: total heads (m) by
// point, at the deepest draught of all conditions. Where a pump's sheet does not show its head at no flow, Unknown says so.
type shutOff struct {
	heads   []float64
	unknown string
}

// shutOff works out the heads against shut valves. The water stands still. Every point has the greatest head that the sea, a tank or an
// overboard gives; what can be reached from a running pump's delivery through open runs, the way their non-return valves pass water,
// has the pump's shut-off head more. The way ends at a fixed point, at a shut run, at a pump's suction, and where a tank that passes no
// flow stands joined: it relieves. A pump whose suction stands well over the first one's, in the solved condition, stands in series, and
// adds its own.
func (c *Condition) shutOff() shutOff {
	s := c.solved
	n := len(s.Network.Points)
	base := math.Inf(-1)
	for i, p := range s.Network.Points {
		if !p.Fixed {
			continue
		}
		base = math.Max(base, p.Head)
		if c.built.SeaInlets[i] && !math.IsNaN(c.deepest) {
			base = math.Max(base, c.deepest)
		}
	}
	out := shutOff{heads: make([]float64, n)}
	for i := range out.heads {
		out.heads[i] = base
	}
	relieved := make([]bool, n)
	suction := make([]bool, n)
	for i, r := range s.Network.Runs {
		const still = 1e-9 // m3/s
		for _, end := range [][2]int{{r.From, r.To}, {r.To, r.From}} {
			p := s.Network.Points[end[1]]
			if p.Fixed && !c.built.SeaInlets[end[1]] && !c.built.Overboards[end[1]] && !r.Shut && math.Abs(s.RunFlows[i]) < still {
				relieved[end[0]] = true
			}
		}
	}
	for _, u := range s.Plant.Pumps {
		suction[u.From] = true
	}
	for range s.Plant.Pumps { // as often as pumps may stand one behind another
		for _, u := range s.Plant.Pumps {
			if !u.Running {
				continue
			}
			head, known := u.ShutOffHead()
			if !known {
				out.unknown = "the sheet of " + u.Name + " does not show its head at no flow"
				continue
			}
			from := base
			for _, first := range s.Plant.Pumps {
				if h, known := first.ShutOffHead(); known && first.Running && first.Name != u.Name && s.Heads[u.From]-s.Heads[first.From] > h/2 {
					from = math.Max(from, out.heads[first.To])
				}
			}
			c.spread(&out, u.To, from+head, relieved, suction)
		}
	}
	return out
}

// spread gives a head to a point and to what can be reached from it.
func (c *Condition) spread(out *shutOff, point int, head float64, relieved, suction []bool) {
	if !(head > out.heads[point]) || c.solved.Network.Points[point].Fixed {
		return
	}
	out.heads[point] = head
	if relieved[point] || suction[point] {
		return
	}
	for _, r := range c.solved.Network.Runs {
		switch {
		case r.Shut:
		case r.From == point:
			c.spread(out, r.To, head, relieved, suction)
		case r.To == point && !r.NonReturn():
			c.spread(out, r.From, head, relieved, suction)
		}
	}
}

// shutOffPressure returns the gauge pressure (bar) that a run, a fitting or a pump must bear against shut valves, at its lowest end.
func shutOffPressure(c *Condition, kind string, i int) (Figure, string) {
	if c.shut == nil {
		shut := c.shutOff()
		c.shut = &shut
	}
	if c.shut.unknown != "" {
		return unknown, c.shut.unknown
	}
	n := c.solved.Network
	weight := c.solved.Water.Density * fluids.Gravity
	switch kind {
	case "pumps":
		u := c.solved.Plant.Pumps[i]
		return Figure((c.shut.heads[u.To] - u.Datum) * weight / 1e5), ""
	case "tags":
		for k, r := range c.Runs {
			if r.Run == c.Fittings[i].Run {
				return shutOffPressure(c, "runs", k)
			}
		}
	}
	r := n.Runs[i]
	head := math.Max(c.shut.heads[r.From], c.shut.heads[r.To])
	lowest := math.Min(c.built.Elevations[r.From], c.built.Elevations[r.To])
	return Figure((head - lowest) * weight / 1e5), ""
}

// deepestDraught returns the deepest draught of all conditions of a job, NaN where none gives one.
func deepestDraught(draughts []float64) float64 {
	deepest := math.NaN()
	for _, d := range draughts {
		if !(d <= deepest) && !math.IsNaN(d) {
			deepest = d
		}
	}
	return deepest
}

// designSource says where the design pressure of a part stands.
func designSource(kind string) string {
	return fmt.Sprintf("the design pressure in %s.csv; shut-off head at the deepest draught", map[string]string{"runs": "runs", "tags": "fittings", "pumps": "pumps"}[kind])
}
