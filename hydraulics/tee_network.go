package hydraulics

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// teeSolver settles the losses of a network's tees with its flows. They depend on the flows of two runs each, may be
// negative and do not always grow with flow, so that they have no place in the symmetric equations of the heads: they are
// held while the network is solved, worked anew from its flows, and so on until they stay. Left alone such a substitution
// may creep or swing; Anderson's mixing (D. G. Anderson, J. ACM 12 (1965) 547-560; H. F. Walker and P. Ni, SIAM J.
// Numerical Analysis 49 (2011) 1715-1735) draws the next guess from the last few.
type teeSolver struct {
	lift []float64 // by run: what its link lifts without the tees, m
	held []float64 // head of each tee's second leg and branch over its point, m, as held now
	past []teeStep
}

// teeStep is a guess at the held heads and by how much the flows that it brings disagree with it.
type teeStep struct{ held, gap []float64 }

const (
	teeRounds    = 100
	teeTolerance = 1e-9 // m
	teeMemory    = 5
)

func newTeeSolver(s *Solver) *teeSolver {
	t := &teeSolver{held: make([]float64, 2*len(s.network.Tees))}
	for k := range s.network.Runs {
		t.lift = append(t.lift, s.links[k].lift)
	}
	return t
}

// settleTees solves the network with the losses of its tees.
func (s *Solver) settleTees(forced int) (rounds int, err error) {
	t := s.tees
	t.past = t.past[:0]
	for range teeRounds {
		s.holdTees()
		took, err := s.settle(forced)
		rounds += took
		if err != nil {
			return rounds, err
		}
		gap, worst := make([]float64, len(t.held)), 0.0
		for i, tee := range s.network.Tees {
			heads := tee.Law.Heads(s.intoTee(tee, tee.First), s.intoTee(tee, tee.Second))
			gap[2*i], gap[2*i+1] = heads.Second-t.held[2*i], heads.Branch-t.held[2*i+1]
			worst = math.Max(worst, math.Max(math.Abs(gap[2*i]), math.Abs(gap[2*i+1])))
		}
		if worst <= teeTolerance {
			return rounds, nil
		}
		t.next(gap)
	}
	k := s.network.Tees[0].Branch
	return rounds, &NotConverged{Rounds: rounds, Step: s.flow[k], Where: "the tee at " + s.network.Points[s.network.Tees[0].Point].Name}
}

// intoTee returns the flow into a tee through one of its runs.
func (s *Solver) intoTee(tee TeeLink, run int) float64 {
	if s.links[run].to == tee.Point {
		return s.flow[run]
	}
	return -s.flow[run]
}

// holdTees puts the held heads of the tees' legs into the links of their runs.
func (s *Solver) holdTees() {
	for k := range s.network.Runs {
		s.links[k].lift = s.tees.lift[k]
	}
	for i, tee := range s.network.Tees {
		for leg, run := range []int{tee.Second, tee.Branch} {
			head := s.tees.held[2*i+leg] // at the leg's end, over the point's
			if s.links[run].from == tee.Point {
				head = -head
			}
			s.links[run].lift += head
		}
	}
}

// next makes the next guess out of the last few and their gaps.
func (t *teeSolver) next(gap []float64) {
	t.past = append(t.past, teeStep{append([]float64(nil), t.held...), gap})
	if len(t.past) > teeMemory+1 {
		t.past = t.past[1:]
	}
	last := t.past[len(t.past)-1]
	mixed := t.mix()
	for i := range t.held {
		t.held[i] = last.held[i] + gap[i]
		for k, share := range mixed {
			a, b := t.past[k], t.past[k+1]
			t.held[i] -= share * (b.held[i] - a.held[i] + b.gap[i] - a.gap[i])
		}
	}
}

// mix returns the shares of the last steps whose sum best undoes the last gap; none where they say nothing.
func (t *teeSolver) mix() []float64 {
	steps, size := len(t.past)-1, len(t.held)
	steps = min(steps, size)
	if steps < 1 {
		return nil
	}
	first := len(t.past) - 1 - steps
	changes := mat.NewDense(size, steps, nil)
	for k := range steps {
		for i := range size {
			changes.Set(i, k, t.past[first+k+1].gap[i]-t.past[first+k].gap[i])
		}
	}
	var share mat.VecDense
	if err := share.SolveVec(changes, mat.NewVecDense(size, t.past[len(t.past)-1].gap)); err != nil {
		t.past = t.past[len(t.past)-1:] // changes that do not tell the tees apart: begin anew
		return nil
	}
	mixed := make([]float64, len(t.past)-1)
	for k := range steps {
		mixed[first+k] = share.AtVec(k)
	}
	return mixed
}
