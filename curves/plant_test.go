package curves

import (
	"math"
	"math/rand/v2"
	"testing"

	"brinehead/fluids"
	"brinehead/hydraulics"
	"brinehead/pumps"
)

// pumpCurve is an invented sheet: head shutOff at rest, falling by share of it at the flow of best efficiency, known to 1.4
// of that flow.
func pumpCurve(t testing.TB, shutOff, fall, best float64) *pumps.Curve {
	t.Helper()
	var points []pumps.SheetPoint
	for x := 0.0; x <= 1.41; x += 0.2 {
		points = append(points, pumps.SheetPoint{Flow: x * best, Head: shutOff * (1 - fall*math.Pow(x, 2.3)), Efficiency: 0.8 * x * (2 - x), Power: math.NaN(), NPSHRequired: 2 + 2*x*x})
	}
	c, err := pumps.NewCurve(0.3, 1450, points)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// randomPlant is a sea-water circuit: a common suction, one to three pumps of their own curves and branches with
// non-return valves, two coolers side by side, an overboard above or below the waterline.
func randomPlant(t testing.TB, rng *rand.Rand) *Plant {
	water, err := fluids.Sea(30*rng.Float64(), 35, fluids.StandardAtmosphere)
	if err != nil {
		t.Fatal(err)
	}
	draught, overboard := 4+6*rng.Float64(), 5+3*rng.Float64()
	p := &Plant{Water: water, Atmosphere: fluids.StandardAtmosphere}
	point := func(name string, z float64, fixed bool, head float64) int {
		p.Network.Points = append(p.Network.Points, hydraulics.Point{Name: name, Fixed: fixed, Head: head})
		p.Elevations = append(p.Elevations, z)
		p.SeaInlets = append(p.SeaInlets, name == "sea")
		return len(p.Elevations) - 1
	}
	run := func(name string, from, to int, bore float64, k float64, nonReturn bool) {
		p.Network.Runs = append(p.Network.Runs, hydraulics.Run{Name: name, From: from, To: to,
			Pipe:     hydraulics.Pipe{Length: 3 + 20*rng.Float64(), Bore: bore, Roughness: 5e-5},
			Fittings: []hydraulics.Fitting{{Name: name, Coefficient: hydraulics.Coefficient{K: k}, NonReturn: nonReturn}}})
	}
	sea, main, header := point("sea", 1, true, draught), point("suction main", 2, false, 0), point("header", 3, false, 0)
	out, over := point("coolers out", 5, false, 0), point("overboard", overboard, true, math.Max(draught, overboard))
	run("suction", sea, main, 0.35, 4*rng.Float64(), false)
	run("cooler 1", header, out, 0.25, 20+20*rng.Float64(), false)
	run("cooler 2", header, out, 0.25, 20+20*rng.Float64(), false)
	run("overboard line", out, over, 0.35, 3+20*rng.Float64(), false)
	for i := range 1 + rng.IntN(3) {
		name := string(rune('1' + i))
		s, d := point("S"+name, 2, false, 0), point("D"+name, 2.5, false, 0)
		run("suction "+name, main, s, 0.25, 0.5, false)
		run("delivery "+name, d, header, 0.25, 3, true)
		p.Pumps = append(p.Pumps, Pump{Name: "P" + name, From: s, To: d, Datum: 2.2, Running: true,
			Pump: pumps.Pump{Curve: pumpCurve(t, 24+8*rng.Float64(), 0.2+0.2*rng.Float64(), (300+200*rng.Float64())/3600), Wear: 0.1 * rng.Float64()}})
	}
	return p
}

// The crossing of a pump's curve with its system curve is the operating point of the network's solution: two ways to one
// answer, which must agree to 1e-6.
func TestIntersectionAgreesWithSolution(t *testing.T) {
	const seed = 3
	worstFlow, worstHead, compared := 0.0, 0.0, 0
	for i := range 60 {
		p := randomPlant(t, rand.New(rand.NewPCG(seed, uint64(i))))
		s, err := p.Solve()
		if err != nil {
			t.Fatalf("plant %d: %v", i, err)
		}
		for k, u := range p.Pumps {
			flow := s.PumpFlows[k]
			if flow == 0 {
				continue // held shut by the others: the curves do not cross
			}
			_, high := u.Range()
			d, err := s.Intersection(k, 0, 3*high)
			if err != nil {
				t.Fatalf("plant %d: %v", i, err)
			}
			head, _ := u.Head(flow)
			compared++
			worstFlow = math.Max(worstFlow, math.Abs(d.Flow/flow-1))
			worstHead = math.Max(worstHead, math.Abs(d.Head-head))
			if !(math.Abs(d.Flow-flow) <= 1e-6*flow) || !(math.Abs(d.Head-head) <= 1e-6) || !(math.Abs(d.NPSHAvailable-s.Duty(k).NPSHAvailable) <= 1e-6) {
				t.Errorf("seed %d plant %d %s: crossing at %.9g m3/s %.9g m, solution %.9g m3/s %.9g m", seed, i, u.Name, d.Flow, d.Head, flow, head)
			}
		}
	}
	if compared < 80 {
		t.Errorf("only %d pumps compared", compared)
	}
	t.Logf("%d pumps, flows agree to %.1g, heads to %.1g m", compared, worstFlow, worstHead)
}

// The more a pump takes the more the system asks, and the less NPSH its suction leaves.
func TestSystemCurveIsMonotone(t *testing.T) {
	for i := range 20 {
		p := randomPlant(t, rand.New(rand.NewPCG(11, uint64(i))))
		s, err := p.Solve()
		if err != nil {
			t.Fatal(err)
		}
		curve, err := s.SystemCurve(0, 0, 0.2, 41)
		if err != nil {
			t.Fatal(err)
		}
		for k := 1; k < len(curve); k++ {
			if !(curve[k].Head > curve[k-1].Head) || !(curve[k].NPSHAvailable < curve[k-1].NPSHAvailable) {
				t.Errorf("plant %d: %+v after %+v", i, curve[k], curve[k-1])
			}
		}
	}
}

// More blockage leaves less NPSH at any flow, more draught more.
func TestNPSHAvailableFollowsBlockageAndDraught(t *testing.T) {
	available := func(blockage, draught float64) float64 {
		p := randomPlant(t, rand.New(rand.NewPCG(1, 1)))
		p.Network.Runs[0].Fittings[0].Blockage = blockage
		p.Network.Points[0].Head = draught
		s, err := p.Solve()
		if err != nil {
			t.Fatal(err)
		}
		d, err := s.Demand(0, 0.1)
		if err != nil {
			t.Fatal(err)
		}
		return d.NPSHAvailable
	}
	last := math.Inf(1)
	for b := 0.0; b < 0.95; b += 0.1 {
		if n := available(b, 6); !(n < last) {
			t.Errorf("blockage %g: NPSH available %g m after %g m", b, n, last)
		} else {
			last = n
		}
	}
	// A metre more of water over the inlet, less what the other pumps, now running further out, lose of it in the suction.
	if a, b := available(0.3, 6), available(0.3, 7); !(0 < b-a && b-a <= 1+1e-9) {
		t.Errorf("a metre of draught brings %g m", b-a)
	}
}

func TestIdlePumpHasNoFigures(t *testing.T) {
	p := randomPlant(t, rand.New(rand.NewPCG(2, 0)))
	p.Pumps[0].Running = false
	s, err := p.Solve()
	if err != nil {
		t.Fatal(err)
	}
	if d := s.Duty(0); d.Running || d.Flow != 0 || !math.IsNaN(d.Head) || !math.IsNaN(d.NPSHAvailable) || !math.IsNaN(d.ShaftPower) {
		t.Errorf("%+v", d)
	}
}

func TestNoIntersection(t *testing.T) {
	p := randomPlant(t, rand.New(rand.NewPCG(2, 0)))
	s, err := p.Solve()
	if err != nil {
		t.Fatal(err)
	}
	if _, err := s.Intersection(0, 0, s.PumpFlows[0]/2); err == nil {
		t.Error("a crossing was found where there is none")
	}
}

// A pressure is the head less the elevation less the velocity head, at the sea none.
func TestGaugePressure(t *testing.T) {
	p := randomPlant(t, rand.New(rand.NewPCG(4, 0)))
	s, err := p.Solve()
	if err != nil {
		t.Fatal(err)
	}
	weight := p.Water.Density * fluids.Gravity
	if got, want := s.GaugePressure(0), (p.Network.Points[0].Head-1)*weight; !(math.Abs(got-want) < 1e-6*want) {
		t.Errorf("at the sea inlet %g Pa, want %g", got, want)
	}
	v := s.RunFlows[0] / p.Network.Runs[0].Pipe.Area() // the main is fed by this run alone, the widest
	fastest := v * v
	for i, r := range p.Network.Runs {
		if r.From == 1 || r.To == 1 {
			w := s.RunFlows[i] / r.Pipe.Area()
			fastest = math.Max(fastest, w*w)
		}
	}
	if got, want := s.GaugePressure(1), (s.Heads[1]-2-fastest/(2*fluids.Gravity))*weight; !(math.Abs(got-want) < 1e-6*math.Abs(want)) {
		t.Errorf("in the suction main %g Pa, want %g", got, want)
	}
}

func BenchmarkSystemCurve(b *testing.B) {
	s, err := randomPlant(b, rand.New(rand.NewPCG(1, 0))).Solve()
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		if _, err := s.SystemCurve(0, 0, 0.15, 61); err != nil {
			b.Fatal(err)
		}
	}
}
