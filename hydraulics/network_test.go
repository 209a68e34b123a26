package hydraulics

import (
	"brinehead/fluids"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// parabolicPump is the curve shutOff - fall Q2.
type parabolicPump struct{ shutOff, fall float64 }

func (p parabolicPump) Head(q float64) (head, slope float64) {
	return p.shutOff - p.fall*q*q, -2 * p.fall * q
}

// randomNetwork makes a connected network: a random tree of points, some extra runs for loops, two or three fixed
// heads, pumps with and without company, non-return valves, draws, losses over many decades.
func randomNetwork(rng *rand.Rand) *Network {
	n := &Network{Viscosity: math.Pow(10, -6.5+rng.Float64())}
	points := 3 + rng.IntN(25)
	for i := range points {
		p := Point{Name: fmt.Sprintf("p%d", i)}
		if i < 2 || rng.Float64() < 0.08 {
			p.Fixed, p.Head = true, 20*rng.Float64()
		} else if rng.Float64() < 0.15 {
			p.Draw = 0.02 * (rng.Float64() - 0.3)
		}
		n.Points = append(n.Points, p)
	}
	run := func(from, to int) {
		bore := math.Pow(10, -1.7+1.4*rng.Float64())
		r := Run{Name: fmt.Sprintf("r%d", len(n.Runs)), From: from, To: to,
			Pipe: Pipe{Length: math.Pow(10, 3*rng.Float64()), Bore: bore, Roughness: bore * 0.05 * math.Pow(rng.Float64(), 4)}}
		if rng.Float64() < 0.1 && !n.Points[from].Fixed && !n.Points[to].Fixed { // two seas without a loss between have no answer
			r.Pipe.Length = 0
		}
		for range rng.IntN(4) {
			f := Fitting{Name: "fitting"}
			switch rng.IntN(3) {
			case 0:
				f.Coefficient = Coefficient{K: math.Pow(10, -2+6*rng.Float64()), Viscous: 500 * rng.Float64()}
			case 1:
				f.Kv = math.Pow(10, 4*rng.Float64())
			case 2:
				f.RatedFlow, f.RatedDrop, f.RatedDensity = 0.1*rng.Float64()+1e-3, 1e5*rng.Float64(), 998.2
				f.Exponent = 1.5 + rng.Float64()
				f.Blockage = 0.9 * rng.Float64()
			}
			r.Fittings = append(r.Fittings, f)
		}
		if rng.Float64() < 0.15 {
			r.Fittings = append(r.Fittings, Fitting{Name: "check valve", Coefficient: Coefficient{K: 2}, NonReturn: true})
		}
		n.Runs = append(n.Runs, r)
	}
	for i := 1; i < points; i++ {
		run(rng.IntN(i), i)
	}
	for range rng.IntN(points) {
		if a, b := rng.IntN(points), rng.IntN(points); a != b {
			run(a, b)
		}
	}
	for range 1 + rng.IntN(3) {
		a, b := rng.IntN(points), rng.IntN(points)
		if a != b {
			q := math.Pow(10, -2.5+2*rng.Float64())
			n.Pumps = append(n.Pumps, PumpLink{Name: fmt.Sprintf("u%d", len(n.Pumps)), From: a, To: b,
				Drive: parabolicPump{10 + 40*rng.Float64(), 20 * rng.Float64() / (q * q)}, Running: rng.Float64() < 0.8})
			if rng.Float64() < 0.4 {
				n.Pumps[len(n.Pumps)-1].LeakKv = math.Pow(10, 2*rng.Float64())
			}
		}
	}
	// A draw behind a non-return valve, or put in before one, may have no answer; draws are kept where there is none.
	oneWay := slices.ContainsFunc(n.Runs, Run.NonReturn)
	for i := range n.Points {
		if oneWay {
			n.Points[i].Draw = 0
		}
	}
	return n
}

// solveNew solves a network from its own first guess.
func solveNew(t testing.TB, n *Network) (*Solver, *Solution) {
	t.Helper()
	s, err := NewSolver(n)
	if err != nil {
		t.Fatal(err)
	}
	var out Solution
	if err := s.Solve(&out); err != nil {
		t.Fatal(err)
	}
	return s, &out
}

// checkSolution holds a solution against the laws by its own sums: continuity at every point, the loss of every open
// run against the heads at its ends, and what a non-return may do.
func checkSolution(n *Network, out *Solution) error {
	balance, greatest := make([]float64, len(n.Points)), 0.0
	add := func(from, to int, q float64) {
		balance[from] -= q
		balance[to] += q
		greatest = math.Max(greatest, math.Abs(q))
	}
	for i, r := range n.Runs {
		q, drop := out.RunFlows[i], out.Heads[r.From]-out.Heads[r.To]
		add(r.From, r.To, q)
		if math.IsNaN(drop) {
			if q != 0 {
				return fmt.Errorf("%s: %g m3/s where no head is known", r.Name, q)
			}
			continue
		}
		loss, _ := r.Pipe.Loss(q, n.Viscosity)
		for _, f := range r.Fittings {
			h, _ := f.Loss(q, r.Pipe, n.Viscosity)
			loss += h
		}
		if r.Pipe.Length == 0 && r.Fittings == nil {
			loss = leastResistance * q
		}
		if r.NonReturn() {
			if q < -1e-15 {
				return fmt.Errorf("%s: %g m3/s backwards through a non-return", r.Name, q)
			}
			if q <= 1e-15 && drop <= 1e-6 {
				continue // shut, and holding
			}
		}
		if !(math.Abs(loss-drop) <= 1e-6) {
			return fmt.Errorf("%s: loss %g m, heads differ by %g m at %g m3/s", r.Name, loss, drop, q)
		}
	}
	for i, p := range n.Pumps {
		q := out.PumpFlows[i]
		add(p.From, p.To, q)
		if p.leaks() {
			loss, _ := Fitting{Kv: p.LeakKv}.Loss(q, leakPipe, n.Viscosity)
			if lift := out.Heads[p.From] - out.Heads[p.To]; q > 1e-15 || lift <= 0 && !(math.Abs(loss-lift) <= 1e-6) {
				return fmt.Errorf("%s: leak of %g m3/s under %g m, whose loss is %g m", p.Name, q, lift, loss)
			}
			continue
		}
		if !p.Running {
			if q != 0 {
				return fmt.Errorf("%s: idle and passing %g m3/s", p.Name, q)
			}
			continue
		}
		head, _ := p.Drive.Head(math.Max(q, 0))
		lift := out.Heads[p.To] - out.Heads[p.From]
		if q < -1e-15 {
			return fmt.Errorf("%s: %g m3/s backwards", p.Name, q)
		}
		if q <= 1e-15 && lift >= head-1e-6 {
			continue // held shut by more than its shut-off head
		}
		if !(math.Abs(head-lift) <= 1e-6) {
			return fmt.Errorf("%s: head %g m, heads differ by %g m at %g m3/s", p.Name, head, lift, q)
		}
	}
	for i, p := range n.Points {
		if !p.Fixed && !(math.Abs(balance[i]-p.Draw) <= 1e-9*greatest+1e-18) {
			return fmt.Errorf("%s: inflow %g, draw %g m3/s, greatest flow %g", p.Name, balance[i], p.Draw, greatest)
		}
	}
	return nil
}

// Thousands of connected networks: mass balanced to 1e-9 of the greatest flow, heads to 1e-6 m, and the same answer
// from another start and with the rows in another order.
func TestRandomNetworks(t *testing.T) {
	const seed, count = 1988, 3000
	t.Logf("seed %d", seed)
	rounds, most, massWorst, headWorst, moved := 0, 0, 0.0, 0.0, 0.0
	for i := range count {
		rng := rand.New(rand.NewPCG(seed, uint64(i)))
		n := randomNetwork(rng)
		s, out := solveNew(t, n)
		if err := checkSolution(n, out); err != nil {
			t.Fatalf("network %d: %v", i, err)
		}
		rounds += out.Rounds
		most = max(most, out.Rounds)
		massWorst, headWorst = math.Max(massWorst, out.MassResidual), math.Max(headWorst, out.HeadResidual)

		for k := range s.flow { // another start
			s.flow[k] = 0.3 * rng.NormFloat64()
		}
		var again Solution
		if err := s.Solve(&again); err != nil {
			t.Fatalf("network %d: from another start: %v", i, err)
		}
		shuffled, runPlace := *n, rng.Perm(len(n.Runs)) // another order of rows
		shuffled.Runs = make([]Run, len(n.Runs))
		for old, new := range runPlace {
			shuffled.Runs[new] = n.Runs[old]
		}
		_, other := solveNew(t, &shuffled)
		for p := range n.Points {
			if math.IsNaN(out.Heads[p]) {
				continue
			}
			moved = math.Max(moved, math.Abs(out.Heads[p]-again.Heads[p]))
			moved = math.Max(moved, math.Abs(out.Heads[p]-other.Heads[p]))
			if !(math.Abs(out.Heads[p]-again.Heads[p]) <= 1e-6) || !(math.Abs(out.Heads[p]-other.Heads[p]) <= 1e-6) {
				t.Fatalf("network %d, %s: head %g m, from another start %g, in another order %g", i, n.Points[p].Name, out.Heads[p], again.Heads[p], other.Heads[p])
			}
		}
	}
	t.Logf("%d networks, %.1f rounds each, at most %d; worst mass residual %.2g of the greatest flow, head residual %.2g m, greatest change of a head %.2g m",
		count, float64(rounds)/count, most, massWorst, headWorst, moved)
}

// An independent solution: Newton's method in the plain, on all flows and heads as one dense system with halved steps.
// It knows no band, no content and no weights, and takes only the losses from the package.
func TestAgainstDenseNewton(t *testing.T) {
	const seed, count = 42, 1000
	compared, tried := 0, 0
	for ; compared < count; tried++ {
		rng := rand.New(rand.NewPCG(seed, uint64(tried)))
		n := randomNetwork(rng)
		for k := range n.Runs { // one-way valves and idle pumps are beyond a plain method
			n.Runs[k].Fittings = slices.DeleteFunc(n.Runs[k].Fittings, func(f Fitting) bool { return f.NonReturn })
			n.Runs[k].Pipe.Length = math.Max(n.Runs[k].Pipe.Length, 1)
		}
		for k := range n.Pumps {
			n.Pumps[k].Running = true
		}
		_, out := solveNew(t, n)
		if len(n.Pumps) > 0 && slices.Min(out.PumpFlows) <= 0 {
			continue
		}
		heads, ok := denseNewton(n)
		if !ok {
			continue // the plain method is not sure to converge; the count is of the networks it solves
		}
		compared++
		for p := range n.Points {
			if !(math.Abs(heads[p]-out.Heads[p]) <= 1e-6) {
				t.Errorf("seed %d network %d, %s: %.9g m, dense Newton %.9g m", seed, tried, n.Points[p].Name, out.Heads[p], heads[p])
			}
		}
	}
	t.Logf("%d networks compared of %d tried", compared, tried)
}

// denseNewton solves for the flows of runs and pumps and the heads of free points together.
func denseNewton(n *Network) (heads []float64, ok bool) {
	links, row := len(n.Runs)+len(n.Pumps), make([]int, len(n.Points))
	size := links
	for i, p := range n.Points {
		row[i] = -1
		if !p.Fixed {
			row[i] = size
			size++
		}
	}
	x := make([]float64, size)
	for i := range x {
		x[i] = 0.01
	}
	headAt := func(x []float64, point int) float64 {
		if row[point] < 0 {
			return n.Points[point].Head
		}
		return x[row[point]]
	}
	residual := func(x []float64, jacobian *mat.Dense) []float64 {
		f := make([]float64, size)
		for i, p := range n.Points {
			if row[i] >= 0 {
				f[row[i]] = -p.Draw
			}
		}
		entry := func(r, c int, v float64) {
			if jacobian != nil && c >= 0 {
				jacobian.Set(r, c, jacobian.At(r, c)+v)
			}
		}
		for k := range links {
			var from, to int
			var loss, slope float64
			if k < len(n.Runs) {
				r := n.Runs[k]
				from, to = r.From, r.To
				loss, slope = r.Pipe.Loss(x[k], n.Viscosity)
				for _, fitting := range r.Fittings {
					h, dh := fitting.Loss(x[k], r.Pipe, n.Viscosity)
					loss, slope = loss+h, slope+dh
				}
			} else {
				p := n.Pumps[k-len(n.Runs)]
				from, to = p.From, p.To
				h, dh := p.Drive.Head(x[k])
				loss, slope = -h, -dh
			}
			f[k] = loss - headAt(x, from) + headAt(x, to)
			entry(k, k, slope)
			entry(k, row[from], -1)
			entry(k, row[to], 1)
			if row[from] >= 0 {
				f[row[from]] -= x[k]
				entry(row[from], k, -1)
			}
			if row[to] >= 0 {
				f[row[to]] += x[k]
				entry(row[to], k, 1)
			}
		}
		return f
	}
	norm := func(v []float64) (sum float64) {
		for _, a := range v {
			sum += a * a
		}
		return math.Sqrt(sum)
	}
	for range 200 {
		jacobian := mat.NewDense(size, size, nil)
		f := residual(x, jacobian)
		var change mat.VecDense
		if err := change.SolveVec(jacobian, mat.NewVecDense(size, f)); err != nil {
			return nil, false
		}
		share, next := 1.0, make([]float64, size)
		for ; share > 1e-6; share /= 2 {
			for i := range x {
				next[i] = x[i] - share*change.AtVec(i)
			}
			if norm(residual(next, nil)) < norm(f) {
				break
			}
		}
		x = next
		if mat.Norm(&change, math.Inf(1)) < 1e-9 {
			if len(n.Pumps) > 0 && slices.Min(x[len(n.Runs):links]) < 0 {
				return nil, false // a parabola's mirror image, where no pump works
			}
			for i := range n.Points {
				heads = append(heads, headAt(x, i))
			}
			return heads, true
		}
	}
	return nil, false
}

// chain is sea - run - pump - run - overboard, with whatever the caller puts in.
func chain(suction, discharge Run, pump PumpLink) *Network {
	suction.From, suction.To, suction.Name = 0, 1, "suction"
	discharge.From, discharge.To, discharge.Name = 2, 3, "discharge"
	pump.From, pump.To, pump.Name = 1, 2, "P1"
	return &Network{Viscosity: 1e-6,
		Points: []Point{{Name: "sea", Fixed: true, Head: 6}, {Name: "S"}, {Name: "D"}, {Name: "over", Fixed: true, Head: 8}},
		Runs:   []Run{suction, discharge}, Pumps: []PumpLink{pump}}
}

var plain = Run{Pipe: Pipe{Length: 10, Bore: 0.2, Roughness: 5e-5}}

// A pump too weak for the lift stands at its shut-off head, its non-return holding the rest.
func TestWeakPumpStandsAtShutOff(t *testing.T) {
	valve := plain
	valve.Fittings = []Fitting{{Name: "check valve", NonReturn: true, Coefficient: Coefficient{K: 2}}}
	n := chain(plain, valve, PumpLink{Drive: parabolicPump{1.5, 100}, Running: true})
	_, out := solveNew(t, n)
	if err := checkSolution(n, out); err != nil {
		t.Error(err)
	}
	if out.PumpFlows[0] != 0 || !(math.Abs(out.Heads[2]-7.5) < 1e-9) {
		t.Errorf("flow %g, discharge head %g m; want none and 6 + 1.5 m", out.PumpFlows[0], out.Heads[2])
	}
	// Without a valve of its own the pump is the one that holds: its discharge stands at the overboard's head.
	n = chain(plain, plain, PumpLink{Drive: parabolicPump{1.5, 100}, Running: true})
	_, out = solveNew(t, n)
	if out.PumpFlows[0] != 0 || !(math.Abs(out.Heads[2]-8) < 1e-9) {
		t.Errorf("flow %g, discharge head %g m; want none and 8 m", out.PumpFlows[0], out.Heads[2])
	}
}

func TestIdlePumpAndShutRunPassNothing(t *testing.T) {
	n := chain(plain, plain, PumpLink{Drive: parabolicPump{30, 500}})
	_, out := solveNew(t, n)
	if out.PumpFlows[0] != 0 || out.RunFlows[0] != 0 || !(math.Abs(out.Heads[1]-6) < 1e-12) || !(math.Abs(out.Heads[2]-8) < 1e-12) {
		t.Errorf("idle: %+v", out)
	}
	shut := plain
	shut.Shut = true
	n = chain(plain, shut, PumpLink{Drive: parabolicPump{30, 500}, Running: true})
	_, out = solveNew(t, n)
	if out.PumpFlows[0] != 0 || !(math.Abs(out.Heads[2]-36) < 1e-9) {
		t.Errorf("against a shut valve: %g m3/s, head %g m; want shut-off 36 m", out.PumpFlows[0], out.Heads[2])
	}
	n = chain(shut, shut, PumpLink{Drive: parabolicPump{30, 500}})
	_, out = solveNew(t, n)
	if !math.IsNaN(out.Heads[1]) || out.RunFlows[0] != 0 {
		t.Errorf("shut in on all sides: head %g m, want none", out.Heads[1])
	}
	n = chain(shut, shut, PumpLink{Drive: parabolicPump{30, 500}, Running: true})
	s, err := NewSolver(n)
	if err != nil {
		t.Fatal(err)
	}
	var cut *CutOff
	if err := s.Solve(out); !errors.As(err, &cut) || !slices.Equal(cut.Points, []string{"S", "D"}) {
		t.Errorf("a pump shut in on both sides: %v", err)
	}
}

// An idle pump behind a leaking valve passes water back, by the definition of Kv: 1 bar drives Kv m3/h in water of 1000.
func TestIdlePumpLeaks(t *testing.T) {
	n := chain(plain, plain, PumpLink{Drive: parabolicPump{30, 500}, LeakKv: 20})
	n.Points[3].Head = 6 + 1e5/(1000*9.80665) // 1 bar over the sea
	for i := range n.Runs {
		n.Runs[i].Pipe = Pipe{Bore: 1}
	}
	_, out := solveNew(t, n)
	if got := out.PumpFlows[0] * 3600; !(math.Abs(got+20) < 1e-4) || !(math.Abs(out.RunFlows[0]*3600+20) < 1e-4) {
		t.Errorf("%g m3/h through the pump, %g through its suction; want -20", got, out.RunFlows[0]*3600)
	}
	n.Points[3].Head = 2 // the other way it holds
	if _, out := solveNew(t, n); out.PumpFlows[0] != 0 {
		t.Errorf("%g m3/s forwards through an idle pump", out.PumpFlows[0])
	}
}

// A drooping curve meets a system with static head twice; from a start on its falling side the solution is the stable one.
func TestDroopingCurveStable(t *testing.T) {
	droop := droopingPump{20, 60, 700} // 20 + 60 Q - 700 Q2: 21.3 m at 0.043 m3/s
	valve := Run{Pipe: Pipe{Bore: 0.3}, Fittings: []Fitting{{Name: "k", Coefficient: Coefficient{K: 5}}}}
	n := chain(valve, valve, PumpLink{Drive: droop, Running: true, Start: 0.15})
	n.Points[3].Head = 6 + 20.6
	_, out := solveNew(t, n)
	_, slope := droop.Head(out.PumpFlows[0])
	if !(out.PumpFlows[0] > 0.05) || !(slope < 0) {
		t.Errorf("%g m3/s, slope %g", out.PumpFlows[0], slope)
	}
	if err := checkSolution(n, out); err != nil {
		t.Error(err)
	}
}

// droopingPump is the curve shutOff + rise Q - fall Q2.
type droopingPump struct{ shutOff, rise, fall float64 }

func (p droopingPump) Head(q float64) (head, slope float64) {
	return p.shutOff + p.rise*q - p.fall*q*q, p.rise - 2*p.fall*q
}

// Two equal pumps side by side deliver the same head at double flow; the exact algebra of CHECKS: pump 40 - 1.2e-5 Q2
// against 5 + 2e-5 Q2 (m, m3/h) gives 1045.82503 m3/h alone, 1233.58791 m3/h for two.
func TestParallelPumpsExactly(t *testing.T) {
	const hour = 3600.0
	for count, want := range map[int]float64{1: 1045.82503, 2: 1233.58791} {
		n := &Network{Viscosity: 1e-6, Points: []Point{{Name: "low", Fixed: true}, {Name: "header"}, {Name: "high", Fixed: true, Head: 5}},
			Runs: []Run{{Name: "system", From: 1, To: 2, Pipe: Pipe{Bore: 0.4},
				Fittings: []Fitting{{RatedFlow: 1000 / hour, RatedDrop: 20 * 1000 * fluids.Gravity, RatedDensity: 1000}}}}}
		for range count {
			n.Pumps = append(n.Pumps, PumpLink{Name: "P", From: 0, To: 1, Drive: parabolicPump{40, 1.2e-5 * hour * hour}, Running: true})
		}
		_, out := solveNew(t, n)
		if got := out.RunFlows[0] * hour; !(math.Abs(got-want) <= 5e-6) {
			t.Errorf("%d pumps: %.5f m3/h, want %.5f", count, got, want)
		}
	}
}

// Setting a pump's flow to what it delivers must ask of it the head it gives.
func TestForcedFlowAgreesWithSolution(t *testing.T) {
	for i := range 200 {
		n := randomNetwork(rand.New(rand.NewPCG(5, uint64(i))))
		s, out := solveNew(t, n)
		for k, p := range n.Pumps {
			if !p.Running || out.PumpFlows[k] < 1e-6 {
				continue
			}
			var forced Solution
			if err := s.SolveForced(&forced, k, out.PumpFlows[k]); err != nil {
				t.Fatalf("network %d: %v", i, err)
			}
			want, _ := p.Drive.Head(out.PumpFlows[k])
			if got := forced.Heads[p.To] - forced.Heads[p.From]; !(math.Abs(got-want) <= 1e-6) {
				t.Errorf("network %d, %s: system asks %g m, pump gives %g m", i, p.Name, got, want)
			}
		}
	}
}

func TestNetworkRefusals(t *testing.T) {
	base := func() *Network { return chain(plain, plain, PumpLink{Drive: parabolicPump{30, 500}, Running: true}) }
	for want, spoil := range map[string]func(n *Network){
		"viscosity":       func(n *Network) { n.Viscosity = 0 },
		"ends at no two":  func(n *Network) { n.Runs[0].To = 9 },
		"length -1":       func(n *Network) { n.Runs[0].Pipe.Length = -1 },
		"bore 1 mm":       func(n *Network) { n.Runs[0].Pipe.Bore = 1e-3 },
		"closes a bore":   func(n *Network) { n.Runs[0].Pipe.Fouling = 0.1 },
		"at most 5 %":     func(n *Network) { n.Runs[0].Pipe.Roughness = 0.011 },
		"blockage 100 %":  func(n *Network) { n.Runs[0].Fittings = []Fitting{{Blockage: 1}} },
		"exponent 4":      func(n *Network) { n.Runs[0].Fittings = []Fitting{{Exponent: 4}} },
		"density":         func(n *Network) { n.Runs[0].Fittings = []Fitting{{RatedFlow: 1, RatedDrop: 1}} },
		"coefficient NaN": func(n *Network) { n.Runs[0].Fittings = []Fitting{{Coefficient: Coefficient{K: math.NaN()}}} },
		"no curve":        func(n *Network) { n.Pumps[0].Drive = nil },
		"head is not":     func(n *Network) { n.Points[0].Head = math.NaN() },
		"overboard or tank point from sea, S, D, over": func(n *Network) { n.Points[0].Fixed, n.Points[3].Fixed = false, false },
	} {
		n := base()
		spoil(n)
		if _, err := NewSolver(n); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%v, want %q", err, want)
		}
	}
}

// Where the method cannot settle it says how far it came: a pump whose head jumps at the very flow where the system
// meets it has no operating point.
type jumpingPump struct{}

func (jumpingPump) Head(q float64) (head, slope float64) {
	if q < 0.1 {
		return 5, 0
	}
	return 60, 0
}

func TestNotConverged(t *testing.T) {
	n := chain(plain, plain, PumpLink{Drive: jumpingPump{}, Running: true})
	n.Runs[1].Fittings = []Fitting{{Name: "valve", Coefficient: Coefficient{K: 20}}}
	s, err := NewSolver(n)
	if err != nil {
		t.Fatal(err)
	}
	var out Solution
	err = s.Solve(&out)
	var stuck *NotConverged
	if err != nil && !errors.As(err, &stuck) {
		t.Errorf("%v", err)
	}
	if err == nil {
		if e := checkSolution(n, &out); e != nil {
			t.Errorf("an answer that is none: %v", e)
		}
	}
}

// No allocation inside the iteration, nor in a solution whose slices are used again.
func TestSolveAllocatesNothing(t *testing.T) {
	s, out := solveNew(t, randomNetwork(rand.New(rand.NewPCG(1, 1))))
	if n := testing.AllocsPerRun(50, func() {
		if err := s.Solve(out); err != nil {
			t.Fatal(err)
		}
	}); n != 0 {
		t.Errorf("%g allocations a solution", n)
	}
}
