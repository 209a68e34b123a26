package curves

import (
	"fmt"
	"math"
	"slices"

	"brinehead/fluids"
	"brinehead/hydraulics"
	"brinehead/pumps"
)

// Plant is a circuit with its pumps in one condition: valves, levels, running pumps and water as they then are.
type Plant struct {
	Network    hydraulics.Network // its PumpLinks are made from Pumps
	Elevations []float64          // of the points, m above the keel
	SeaInlets  []bool             // by point: an inlet from the sea
	Overboards []bool             // by point: an outlet to the sea
	Pumps      []Pump
	Water      fluids.State
	Atmosphere float64 // Pa, absolute
}

// Pump is a pump in its place.
type Pump struct {
	Name     string
	From, To int         // points of the network
	Datum    float64     // m above the keel, of the impeller eye
	Motor    pumps.Motor // its figures NaN where not known
	Running  bool
	LeakKv   float64 // of its non-return valve when it stands idle, m3/h at 1 bar; 0 for none
	pumps.Pump
}

// Solved is a plant with its solution.
type Solved struct {
	*Plant
	hydraulics.Solution
	solver *hydraulics.Solver
}

// Solve finds the operating point of every pump and the flow in every run at once. The error is that of the
// network's solution: unsound data, a *hydraulics.CutOff or a *hydraulics.NotConverged.
func (p *Plant) Solve() (*Solved, error) { return p.SolveNear(nil) }

// SolveNear does the same, starting from the solution of a neighbouring condition of the same plant, which saves rounds.
// It starts anew where near is nil, or where a curve droops: which of several meetings is found must not depend on the way.
func (p *Plant) SolveNear(near *Solved) (*Solved, error) {
	p.link()
	solver, err := hydraulics.NewSolver(&p.Network)
	if err != nil {
		return nil, err
	}
	if near != nil && !slices.ContainsFunc(p.Pumps, func(u Pump) bool { return u.Curve != nil && u.Droops() }) {
		solver.StartFrom(&near.Solution)
	}
	s := &Solved{Plant: p, solver: solver}
	if err := solver.Solve(&s.Solution); err != nil {
		return nil, err
	}
	return s, nil
}

// Check returns the first thing that makes the plant unsound; see hydraulics.Network.Check.
func (p *Plant) Check() error {
	p.link()
	return p.Network.Check()
}

// link puts the water and the pumps into the network.
func (p *Plant) link() {
	p.Network.Viscosity = p.Water.KinematicViscosity()
	p.Network.Pumps = p.Network.Pumps[:0]
	for i := range p.Pumps {
		u := &p.Pumps[i]
		link := hydraulics.PumpLink{Name: u.Name, From: u.From, To: u.To, Drive: u.Pump, Running: u.Running, LeakKv: u.LeakKv}
		if u.Curve != nil {
			_, link.Start = u.Range() // far out, on the falling side of any hump
		}
		p.Network.Pumps = append(p.Network.Pumps, link)
	}
}

// weight returns the weight of a cubic metre of the water, N/m3.
func (p *Plant) weight() float64 { return p.Water.Density * fluids.Gravity }

// NPSHAvailable returns the NPSH (m) at a pump's datum under a total head (m) at its suction point:
//
//	NPSHA = H - z + (p_atmosphere - p_vapour)/(rho g)
//
// (ISO 17769-1, from memory). H is a total head, so that no velocity head is added.
func (p *Plant) NPSHAvailable(pump int, suctionHead float64) float64 {
	return suctionHead - p.Pumps[pump].Datum + (p.Atmosphere-p.Water.VapourPressure)/p.weight()
}

// Duty is what one pump does in a solved plant. What is not known is NaN.
type Duty struct {
	pumps.Duty
	NPSHAvailable float64
	NPSHMargin    float64 // available less required
	Running       bool
	HeldShut      bool // running, but its non-return is shut: the pump turns at its shut-off head
}

// Duty returns the operating point of a pump. For an idle pump the flow is 0, or below it what leaks back, and every other
// figure unknown.
func (s *Solved) Duty(pump int) Duty {
	u := s.Plant.Pumps[pump]
	if !u.Running {
		nan := math.NaN()
		return Duty{Duty: pumps.Duty{Flow: s.PumpFlows[pump], Head: nan, Efficiency: nan, ShaftPower: nan, NPSHRequired: nan, BestShare: nan}, NPSHAvailable: nan, NPSHMargin: nan}
	}
	flow := math.Max(s.PumpFlows[pump], 0) // a running pump held at rest may stand at -1e-17
	d := Duty{Duty: u.At(flow, s.Water.Density), Running: true, HeldShut: flow < 1e-9}
	d.NPSHAvailable = s.NPSHAvailable(pump, s.Heads[u.From])
	d.NPSHMargin = d.NPSHAvailable - d.NPSHRequired
	return d
}

// GaugePressure returns the pressure a gauge at a point's elevation shows, Pa. At a point where water moves the
// velocity head of the run or runs that meet there is taken off, the greatest where they differ, since the least
// pressure is what counts; the sea, an overboard and a tank count as still. It is NaN at a point cut off.
func (s *Solved) GaugePressure(point int) float64 {
	velocityHead := 0.0
	if !s.Network.Points[point].Fixed {
		for i, r := range s.Network.Runs {
			if r.From == point || r.To == point {
				v := s.RunFlows[i] / r.Pipe.Area()
				velocityHead = math.Max(velocityHead, v*v/(2*fluids.Gravity))
			}
		}
	}
	return (s.Heads[point] - s.Elevations[point] - velocityHead) * s.weight()
}

// NetFlow returns the flow (m3/s) that leaves a point into the plant, below 0 for one that enters it from there: what a tank
// gives, what an overboard takes.
func (s *Solved) NetFlow(point int) float64 {
	out := 0.0
	add := func(from, to int, flow float64) {
		if from == point {
			out += flow
		} else if to == point {
			out -= flow
		}
	}
	for i, r := range s.Network.Runs {
		add(r.From, r.To, s.RunFlows[i])
	}
	for i, u := range s.Plant.Pumps {
		add(u.From, u.To, s.PumpFlows[i])
	}
	return out
}

// Demand is what the system asks of one pump at one flow.
type Demand struct {
	Flow          float64 // m3/s
	Head          float64 // m, that the pump must add for the system to take the flow
	NPSHAvailable float64 // m
}

// Demand sets the flow of one pump, lets the rest of the plant settle, and reads what the system asks. The other
// pumps stay on their curves. It is the system curve of that pump, point by point.
func (s *Solved) Demand(pump int, flow float64) (Demand, error) {
	var out hydraulics.Solution
	if err := s.solver.SolveForced(&out, pump, flow); err != nil {
		return Demand{}, fmt.Errorf("system of %s at %.4g m3/h: %w", s.Plant.Pumps[pump].Name, flow*3600, err)
	}
	u := s.Plant.Pumps[pump]
	return Demand{Flow: flow, Head: out.Heads[u.To] - out.Heads[u.From], NPSHAvailable: s.NPSHAvailable(pump, out.Heads[u.From])}, nil
}

// SystemCurve returns the demand at count flows, evenly from low to high.
func (s *Solved) SystemCurve(pump int, low, high float64, count int) ([]Demand, error) {
	curve := make([]Demand, 0, count)
	for i := range count {
		d, err := s.Demand(pump, low+(high-low)*float64(i)/float64(count-1))
		if err != nil {
			return nil, err
		}
		curve = append(curve, d)
	}
	return curve, nil
}

// Crossing is a flow at which a pump's curve meets its system curve.
type Crossing struct {
	Flow, Head float64 // m3/s, m
	Stable     bool    // the pump's head falls more steeply there than the system's demand: a small departure dies out
}

// Crossings returns every crossing of a pump's curve and its system curve over the digitised range, the other pumps staying
// on their curves. A falling curve has one at most; one that droops towards rest may have two, of which the left is
// unstable (A. J. Stepanoff, Centrifugal and Axial Flow Pumps, from memory).
func (s *Solved) Crossings(pump int) ([]Crossing, error) {
	const steps = 80
	u := s.Plant.Pumps[pump]
	low, high := u.Range()
	surplus := func(flow float64) (float64, error) {
		d, err := s.Demand(pump, flow)
		head, _ := u.Head(flow)
		return head - d.Head, err
	}
	var found []Crossing
	flow := low
	before, err := surplus(flow)
	for k := 1; k <= steps && err == nil; k++ {
		next := low + (high-low)*float64(k)/steps
		var after float64
		if after, err = surplus(next); err != nil {
			break
		}
		if before*after < 0 || after == 0 {
			a, b := flow, next
			for range 60 {
				middle := (a + b) / 2
				var at float64
				if at, err = surplus(middle); err != nil {
					break
				}
				if at*before > 0 {
					a = middle
				} else {
					b = middle
				}
			}
			head, _ := u.Head((a + b) / 2)
			found = append(found, Crossing{(a + b) / 2, head, before > 0})
		}
		flow, before = next, after
	}
	return found, err
}

// Intersection finds the operating point of one pump anew, as the crossing of its curve and its system curve between
// two flows (m3/s), by bisection and regula falsi. It is the way of the drawing board, and must agree with the
// solution of the whole network. It is an error where the curves do not cross between the two.
func (s *Solved) Intersection(pump int, low, high float64) (Demand, error) {
	surplus := func(flow float64) (float64, Demand, error) {
		d, err := s.Demand(pump, flow)
		head, _ := s.Plant.Pumps[pump].Head(flow)
		return head - d.Head, d, err
	}
	atLow, _, err := surplus(low)
	if err != nil {
		return Demand{}, err
	}
	atHigh, d, err := surplus(high)
	if err != nil {
		return Demand{}, err
	}
	if !(atLow >= 0 && atHigh <= 0) {
		return Demand{}, fmt.Errorf("pump %s and its system do not cross between %.4g and %.4g m3/h: the pump is %.3g m and %.3g m over the system there",
			s.Plant.Pumps[pump].Name, low*3600, high*3600, atLow, atHigh)
	}
	for round := 0; round < 200 && high-low > 1e-13*high; round++ {
		middle := (low + high) / 2
		if round%2 == 0 && atLow != atHigh { // in turn, so that neither end can stand still
			middle = low + (high-low)*atLow/(atLow-atHigh)
		}
		at, demand, err := surplus(middle)
		if err != nil {
			return Demand{}, err
		}
		d = demand
		if at >= 0 {
			low, atLow = middle, at
		} else {
			high, atHigh = middle, at
		}
	}
	return d, nil
}
