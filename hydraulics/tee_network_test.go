package hydraulics

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// teeHeader is three pumps on a header of tees that feeds two coolers: five tees, each with its branch.
func randomTees(t testing.TB, rng *rand.Rand) *Network {
	n := &Network{Viscosity: 1e-6, Points: []Point{{Name: "sea", Fixed: true, Head: 6}, {Name: "over", Fixed: true, Head: 5 + 4*rng.Float64()}}}
	run := func(from, to int, bore, k float64) int {
		n.Runs = append(n.Runs, Run{Name: fmt.Sprintf("r%d", len(n.Runs)), From: from, To: to,
			Pipe: Pipe{Length: 1 + 10*rng.Float64(), Bore: bore, Roughness: 5e-5}, Fittings: []Fitting{{Name: "k", Coefficient: Coefficient{K: k}}}})
		return len(n.Runs) - 1
	}
	point := func() int {
		n.Points = append(n.Points, Point{Name: fmt.Sprintf("j%d", len(n.Points))})
		return len(n.Points) - 1
	}
	main := 0.25 + 0.2*rng.Float64()
	tee := func(at, first, second, branch int) {
		law, err := (Tee{Bore: main, Branch: n.Runs[branch].Pipe.Bore, Angle: (60 + 60*rng.Float64()) * math.Pi / 180}).Law()
		if err != nil {
			t.Fatal(err)
		}
		n.Tees = append(n.Tees, TeeLink{at, first, second, branch, law})
	}
	// A header whose one end is a small pipe back to the sea, fed by pumps and drained by coolers at its tees.
	last := point()
	before := run(0, last, main, 200+1000*rng.Float64())
	for i := range 4 + rng.IntN(3) {
		at := last
		next := point()
		after := run(at, next, main, 0.2*rng.Float64())
		var branch int
		if i%2 == 0 {
			d := point()
			n.Pumps = append(n.Pumps, PumpLink{Name: fmt.Sprintf("u%d", i), From: 0, To: d, Drive: parabolicPump{15 + 15*rng.Float64(), 300 + 600*rng.Float64()}, Running: rng.Float64() < 0.8})
			branch = run(d, at, main*(0.4+0.6*rng.Float64()), 1+4*rng.Float64())
		} else {
			branch = run(at, 1, main*(0.4+0.6*rng.Float64()), 2+30*rng.Float64())
		}
		tee(at, before, after, branch)
		last, before = next, after
	}
	run(last, 1, main, 5+20*rng.Float64())
	return n
}

// With tees the solution obeys the tees' law as well: the ends of the runs stand where their losses, the heads of the
// points and the law of the tee put them. The answer does not depend on the start.
func TestRandomTees(t *testing.T) {
	const seed, count = 1957, 400
	worst, most, gains := 0.0, 0, 0
	for i := range count {
		rng := rand.New(rand.NewPCG(seed, uint64(i)))
		n := randomTees(t, rng)
		s, out := solveNew(t, n)
		most = max(most, out.Rounds)
		into := func(tee TeeLink, run int) float64 {
			if n.Runs[run].To == tee.Point {
				return out.RunFlows[run]
			}
			return -out.RunFlows[run]
		}
		// Head at the end of a run at a tee, from the run's other end and its own losses.
		end := func(tee TeeLink, run int) float64 {
			r := n.Runs[run]
			loss := r.PipeLoss(out.RunFlows[run], n.Viscosity) + r.FittingLoss(0, out.RunFlows[run], n.Viscosity)
			other, sign := r.From, 1.0
			if r.From == tee.Point {
				other, sign = r.To, -1
			}
			far := out.Heads[other]
			for _, o := range n.Tees { // the far end may be another leg of another tee
				if o.Point == other {
					h := o.Law.Heads(into(o, o.First), into(o, o.Second))
					if o.Second == run {
						far += h.Second
					} else if o.Branch == run {
						far += h.Branch
					}
				}
			}
			return far - sign*loss
		}
		for _, tee := range n.Tees {
			h := tee.Law.Heads(into(tee, tee.First), into(tee, tee.Second))
			first, second, branch := end(tee, tee.First), end(tee, tee.Second), end(tee, tee.Branch)
			gap := math.Max(math.Abs(first-out.Heads[tee.Point]), math.Max(math.Abs(second-first-h.Second), math.Abs(branch-first-h.Branch)))
			worst = math.Max(worst, gap)
			if !(gap <= 1e-6) {
				t.Fatalf("seed %d network %d: the tee at %s is out by %g m", seed, i, n.Points[tee.Point].Name, gap)
			}
			if h.Branch > 0 && into(tee, tee.Branch) < 0 && into(tee, tee.First) > 0 || h.Second > 0 && into(tee, tee.First) > 0 {
				gains++
			}
		}
		for k := range s.flow {
			s.flow[k] = 0.3 * rng.NormFloat64()
		}
		for k := range s.tees.held {
			s.tees.held[k] = rng.NormFloat64()
		}
		var again Solution
		if err := s.Solve(&again); err != nil {
			t.Fatalf("network %d: from another start: %v", i, err)
		}
		for p := range n.Points {
			if !(math.Abs(out.Heads[p]-again.Heads[p]) <= 1e-6) {
				t.Errorf("network %d, %s: %g m, from another start %g m", i, n.Points[p].Name, out.Heads[p], again.Heads[p])
			}
		}
	}
	t.Logf("%d networks, at most %d rounds, worst %.2g m, %d legs with a gain of head", count, most, worst, gains)
	if gains == 0 {
		t.Error("no tee with a negative coefficient was met")
	}
}

// Crane's converging tee of example 7-35 has fixed flows; here a fixed split is drawn from a network and the tee's own law
// must come back: heads of the three legs by hand.
func TestTeeByHand(t *testing.T) {
	law, err := (Tee{Bore: 0.3, Branch: 0.2, Angle: math.Pi / 2}).Law()
	if err != nil {
		t.Fatal(err)
	}
	lossless := func(from, to int, bore float64) Run {
		return Run{From: from, To: to, Pipe: Pipe{Bore: bore}, Fittings: []Fitting{{Name: "k", Coefficient: Coefficient{K: 1}}}}
	}
	n := &Network{Viscosity: 1e-6,
		Points: []Point{{Name: "main", Draw: -0.10}, {Name: "side", Draw: -0.05}, {Name: "tee"}, {Name: "out", Fixed: true}},
		Runs:   []Run{lossless(0, 2, 0.3), lossless(2, 3, 0.3), lossless(1, 2, 0.2)}, Tees: []TeeLink{{2, 0, 1, 2, law}}}
	_, out := solveNew(t, n)
	branch, run, err := CombiningTee((0.2/0.3)*(0.2/0.3), math.Pi/2)
	if err != nil {
		t.Fatal(err)
	}
	kBranch, _ := branch.At(0.05 / 0.15)
	kRun, _ := run.At(0.05 / 0.15)
	v2 := func(q, d float64) float64 { return math.Pow(q/(math.Pi/4*d*d), 2) / (2 * 9.80665) }
	combined := v2(0.15, 0.3)
	main := combined*(1+kRun) + v2(0.10, 0.3) // exit run, tee, main run
	side := combined*(1+kBranch) + v2(0.05, 0.2)
	if !(math.Abs(out.Heads[0]-main) < 1e-7) || !(math.Abs(out.Heads[1]-side) < 1e-7) {
		t.Errorf("main %g m, side %g m; by hand %g and %g", out.Heads[0], out.Heads[1], main, side)
	}
	if !(math.Abs(out.TeeLosses[1]-kRun*combined) < 1e-7) || out.TeeLosses[0] != 0 {
		t.Errorf("losses of the tee %v", out.TeeLosses)
	}
}
