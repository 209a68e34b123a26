package hydraulics

import (
	"fmt"
	"math"
	"strings"
)

// Network is a set of points joined by runs and pumps, filled with one water.
type Network struct {
	Points    []Point
	Runs      []Run
	Pumps     []PumpLink
	Tees      []TeeLink
	Viscosity float64 // kinematic viscosity of the water, m2/s
}

// TeeLink is a tee whose losses follow the split of its flow, at a point where just three runs meet. The head of the point
// is that at the end of the first leg.
type TeeLink struct {
	Point                 int
	First, Second, Branch int // indices in Network.Runs: the two that go straight through, and the one at their side
	Law                   TeeLaw
}

// Point is a place where runs and pumps meet, or where the network meets the outside.
type Point struct {
	Name  string
	Fixed bool    // the head is given: the sea, the overboard, a tank
	Head  float64 // total head of a fixed point, m
	Draw  float64 // flow taken out at a point that is not fixed, m3/s; negative for flow put in
}

// Run is a length of one pipe with its fittings, from one point to another.
type Run struct {
	Name     string
	From, To int // indices in Network.Points
	Pipe     Pipe
	Fittings []Fitting
	Shut     bool // a closed valve: nothing passes
	Own      OwnWater
}

// OwnWater is the water of a run where it is warmer or colder than the network's, such as the hot leg of a loop. The
// zero value is the network's water. Its volume flow counts as that of the rest: the change of volume with temperature,
// a few per cent at most, is left out of continuity and kept where it drives the water.
type OwnWater struct {
	Viscosity    float64 // kinematic, m2/s; 0 stands for the network's water
	DensityRatio float64 // its density over the network's
	Rise         float64 // m, elevation of To less that of From
}

// viscosity returns the kinematic viscosity in the run.
func (r Run) viscosity(network float64) float64 {
	if r.Own.Viscosity > 0 {
		return r.Own.Viscosity
	}
	return network
}

// densityRatio returns the density in the run over the network's.
func (r Run) densityRatio() float64 {
	if r.Own.Viscosity > 0 {
		return r.Own.DensityRatio
	}
	return 1
}

// Buoyancy returns the head (m of the network's water) that the weight of the run's own water takes from a flow from From
// to To: (ratio - 1) rise. It is negative where lighter water rises, and drives the flow. Two columns of water of one
// height and other densities stand on each other with just this difference; the circulation it drives is the thermosyphon.
func (r Run) Buoyancy() float64 { return (r.densityRatio() - 1) * r.Own.Rise }

// PipeLoss returns the friction loss of the run (m of the network's water, of the flow's sign) at a flow (m3/s) in a
// network of water of the kinematic viscosity nu (m2/s).
func (r Run) PipeLoss(flow, nu float64) float64 {
	h, _ := r.Pipe.Loss(flow, r.viscosity(nu))
	return h * r.densityRatio()
}

// FittingLoss does the same for one of its fittings, by its place in Fittings.
func (r Run) FittingLoss(fitting int, flow, nu float64) float64 {
	h, _ := r.Fittings[fitting].Loss(flow, r.Pipe, r.viscosity(nu))
	return h * r.densityRatio()
}

// Reynolds returns the Reynolds number in the run.
func (r Run) Reynolds(flow, nu float64) float64 { return r.Pipe.Reynolds(flow, r.viscosity(nu)) }

// NonReturn says whether a fitting of the run lets water pass from From to To only.
func (r Run) NonReturn() bool {
	for _, f := range r.Fittings {
		if f.NonReturn {
			return true
		}
	}
	return false
}

// PumpLink is a pump in the network. An idle pump is shut, but for a leak; a running one never passes water backwards.
type PumpLink struct {
	Name     string
	From, To int // indices in Network.Points
	Drive    HeadSource
	Running  bool
	Start    float64 // first guess of its flow, m3/s; 0 leaves it to the solver. A drooping curve may meet the system twice: the guess should lie on its falling side
	LeakKv   float64 // of the non-return valve behind it, m3/h at 1 bar: an idle pump passes water back from To to From through it; 0 for none
}

// leaks says whether the pump stands idle behind a leaking non-return valve.
func (p PumpLink) leaks() bool { return !p.Running && p.LeakKv > 0 }

// HeadSource is a pump as the network sees it: the head (m) it adds at a flow (m3/s, 0 or more), and the derivative
// of that head with respect to flow. It must answer at every flow, beyond its data by some falling continuation.
type HeadSource interface {
	Head(flow float64) (head, slope float64)
}

// Check returns the first thing that makes the network unsound: an index that is none, a pipe or fitting that
// makes no sense, a point that no path of runs and pumps, open or shut, joins to a fixed one.
func (n *Network) Check() error {
	if !(n.Viscosity > 0) {
		return fmt.Errorf("kinematic viscosity %g m2/s, want more than 0", n.Viscosity)
	}
	known := func(i int) bool { return 0 <= i && i < len(n.Points) }
	joined := newPartition(len(n.Points))
	for _, r := range n.Runs {
		if !known(r.From) || !known(r.To) || r.From == r.To {
			return fmt.Errorf("run %s: ends at no two points", r.Name)
		}
		if err := r.Pipe.Check(); err != nil {
			return fmt.Errorf("run %s: %w", r.Name, err)
		}
		for _, f := range r.Fittings {
			if err := f.Check(); err != nil {
				return fmt.Errorf("run %s: %s: %w", r.Name, f.Name, err)
			}
		}
		if r.Own.Viscosity != 0 && (!(r.Own.Viscosity > 0) || !(r.Own.DensityRatio > 0) || math.IsNaN(r.Own.Rise)) {
			return fmt.Errorf("run %s: water of its own with viscosity %g m2/s and density ratio %g", r.Name, r.Own.Viscosity, r.Own.DensityRatio)
		}
		joined.join(r.From, r.To)
	}
	for _, p := range n.Pumps {
		if !known(p.From) || !known(p.To) || p.From == p.To || p.Drive == nil {
			return fmt.Errorf("pump %s: stands between no two points, or has no curve", p.Name)
		}
		joined.join(p.From, p.To)
	}
	for _, t := range n.Tees {
		for _, k := range []int{t.First, t.Second, t.Branch} {
			if !known(t.Point) || !(0 <= k && k < len(n.Runs)) || n.Runs[k].From != t.Point && n.Runs[k].To != t.Point {
				return fmt.Errorf("a tee without three runs that meet in its point")
			}
		}
	}
	held := make([]bool, len(n.Points))
	for i, p := range n.Points {
		if p.Fixed {
			if math.IsNaN(p.Head) || math.IsInf(p.Head, 0) {
				return fmt.Errorf("point %s: its head is not known", p.Name)
			}
			held[joined.root(i)] = true
		}
	}
	var loose []string
	for i, p := range n.Points {
		if !held[joined.root(i)] {
			loose = append(loose, p.Name)
		}
	}
	if loose != nil {
		return &CutOff{Points: loose}
	}
	return nil
}

// CutOff tells of points whose head nothing holds: no open path joins them to the sea, an overboard or a tank,
// while water is driven or drawn among them.
type CutOff struct {
	Points []string
}

// Error names the points.
func (e *CutOff) Error() string {
	return "no path to any sea, overboard or tank point from " + strings.Join(e.Points, ", ")
}

// partition is a set of disjoint sets of points.
type partition []int

func newPartition(n int) partition {
	p := make(partition, n)
	p.reset()
	return p
}

func (p partition) reset() {
	for i := range p {
		p[i] = i
	}
}

func (p partition) root(i int) int {
	for p[i] != i {
		p[i] = p[p[i]] // halve the path on the way
		i = p[i]
	}
	return i
}

func (p partition) join(i, j int) { p[p.root(i)] = p.root(j) }
