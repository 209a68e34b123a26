package pumps

import (
	"brinehead/fluids"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

// fullSheet is an invented pump: 24 m at 400 m3/h, best efficiency 82 % there, given from 80 to 560 m3/h, the NPSH
// required only from 160 to 480 m3/h.
func fullSheet(t testing.TB, withPower bool) *Curve {
	t.Helper()
	var points []SheetPoint
	for q := 80.0; q <= 560; q += 80 {
		x := q / 400
		p := SheetPoint{Flow: q / 3600, Head: 31 - 7*x*x, Efficiency: 0.82 * (1 - (x-1)*(x-1)), Power: math.NaN(), NPSHRequired: math.NaN()}
		if withPower {
			p.Power, p.Efficiency = 1000*fluids.Gravity*p.Flow*p.Head/p.Efficiency, math.NaN()
		}
		if 160 <= q && q <= 480 {
			p.NPSHRequired = 2 + 1.5*x*x
		}
		points = append(points, p)
	}
	c, err := NewCurve(0.32, 1480, points)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// Each figure is known over its own points only.
func TestFiguresKeepTheirRanges(t *testing.T) {
	p := Pump{Curve: fullSheet(t, false)}
	for _, c := range []struct {
		flow            float64
		head, npsh, far bool
	}{{70, false, false, true}, {80, true, false, false}, {170, true, true, false}, {480, true, true, false}, {490, true, false, false}, {561, false, false, true}} {
		d := p.At(c.flow/3600, 1025)
		if math.IsNaN(d.Head) == c.head || math.IsNaN(d.NPSHRequired) == c.npsh || d.Extrapolated != c.far ||
			math.IsNaN(d.ShaftPower) == c.head || math.IsNaN(d.Efficiency) == c.head {
			t.Errorf("%g m3/h: %+v", c.flow, d)
		}
	}
	if d := p.At(400/3600.0, 1000); !(math.Abs(d.Head-24) < 1e-9) || !(math.Abs(d.Efficiency-0.82) < 1e-9) || !(math.Abs(d.BestShare-1) < 1e-6) {
		t.Errorf("at the best point: %+v", d)
	}
}

// A sheet that gives power in place of efficiency says the same.
func TestPowerAndEfficiencyAgree(t *testing.T) {
	a, b := Pump{Curve: fullSheet(t, false)}, Pump{Curve: fullSheet(t, true)}
	for q := 100.0; q <= 550; q += 25 {
		x, y := a.At(q/3600, 1025), b.At(q/3600, 1025)
		// Between the digitised points the two are different curves through one set of points.
		if !(math.Abs(x.ShaftPower/y.ShaftPower-1) < 3e-3) || !(math.Abs(x.Efficiency/y.Efficiency-1) < 3e-3) {
			t.Errorf("%g m3/h: %+v and %+v", q, x, y)
		}
		if want := 1025 * fluids.Gravity * x.Flow * x.Head / x.Efficiency; !(math.Abs(x.ShaftPower/want-1) < 1e-12) {
			t.Errorf("%g m3/h: power %g, rho g Q H / eta %g", q, x.ShaftPower, want)
		}
	}
	if q, _, known := b.Curve.BestEfficiency(); !known || !(math.Abs(q*3600-400) < 4) {
		t.Errorf("best efficiency from power at %g m3/h, known %v", q*3600, known)
	}
}

// Affinity there and back is the identity, and power goes with the cube at corresponding points.
func TestAffinityThereAndBack(t *testing.T) {
	const seed = 7
	rng := rand.New(rand.NewPCG(seed, 0))
	c := fullSheet(t, false)
	for range 200 {
		n := 0.5 + rng.Float64()
		q := (170 + 300*rng.Float64()) / 3600
		here := Pump{Curve: c}.At(q, 1025)
		there := Pump{Curve: c, Speed: c.Speed * n}.At(q*n, 1025)
		for name, pair := range map[string][2]float64{
			"head": {there.Head, here.Head * n * n}, "power": {there.ShaftPower, here.ShaftPower * n * n * n},
			"efficiency": {there.Efficiency, here.Efficiency}, "NPSH required": {there.NPSHRequired, here.NPSHRequired * n * n},
			"share of best flow": {there.BestShare, here.BestShare},
		} {
			if !(math.Abs(pair[0]-pair[1]) <= 1e-12*math.Abs(pair[1])) {
				t.Fatalf("seed %d, n %g, Q %g: %s %g, want %g", seed, n, q, name, pair[0], pair[1])
			}
		}
	}
}

// Wear takes head and efficiency in one share, and leaves the power.
func TestWear(t *testing.T) {
	c := fullSheet(t, false)
	sound, worn := Pump{Curve: c}.At(0.1, 1025), Pump{Curve: c, Wear: 0.08}.At(0.1, 1025)
	if !(math.Abs(worn.Head/sound.Head-0.92) < 1e-12) || !(math.Abs(worn.Efficiency/sound.Efficiency-0.92) < 1e-12) || worn.ShaftPower != sound.ShaftPower {
		t.Errorf("sound %+v, worn %+v", sound, worn)
	}
}

// The head's slope is that of the head, at any speed, and beyond the sheet the head goes on falling.
func TestHeadSlopeAndContinuation(t *testing.T) {
	p := Pump{Curve: fullSheet(t, false), Speed: 1300, Wear: 0.05}
	for q := 0.0; q < 0.3; q += 0.0033 {
		const h = 1e-7
		low, _ := p.Head(q)
		high, _ := p.Head(q + h)
		_, slope := p.Head(q + h/2)
		if !(math.Abs((high-low)/h-slope) <= 1e-5*math.Abs(slope)+1e-6) || !(slope <= 0) {
			t.Errorf("at %g: slope %g, difference %g", q, slope, (high-low)/h)
		}
	}
}

func TestCurveRefusals(t *testing.T) {
	nan := math.NaN()
	point := func(q, h float64) SheetPoint {
		return SheetPoint{Flow: q, Head: h, Efficiency: nan, Power: nan, NPSHRequired: nan}
	}
	for want, points := range map[string][]SheetPoint{
		"at least 3":          {point(0, 30), point(1, 20)},
		"two points at 1":     {point(0, 30), point(1, 20), point(1, 19)},
		"does not fall":       {point(0, 20), point(1, 25), point(2, 30)},
		"may be negative":     {point(0, 30), point(1, 20), point(2, -5)},
		"flow -1":             {point(-1, 30), point(1, 20), point(2, 15)},
		"head: point 1: +Inf": {point(math.Inf(1), 30), point(1, 20), point(2, 15)},
	} {
		if _, err := NewCurve(0, 0, points); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%v: %v, want %q", points, err, want)
		}
	}
	// A best efficiency at the end of the sheet is not known: the true one may be beyond.
	c, err := NewCurve(0, 0, []SheetPoint{{0, 30, 0, nan, nan}, {1, 25, 0.5, nan, nan}, {2, 18, 0.7, nan, nan}})
	if err != nil {
		t.Fatal(err)
	}
	if q, _, known := c.BestEfficiency(); known || !math.IsNaN(q) {
		t.Errorf("best efficiency at %g", q)
	}
}

// Leakage moves the curve by an amount that goes with the root of the head, keeps what passes the impeller on the curve, and
// takes power and NPSH for what goes round within; at another speed it scales with everything else.
func TestLeakage(t *testing.T) {
	c := fullSheet(t, false)
	best, _, _ := c.BestEfficiency()
	bestHead, _ := c.head.At(best)
	for _, n := range []float64{1, 0.8, 1.1} {
		p := Pump{Curve: c, Speed: 1480 * n, Leakage: 0.06}
		for q := 120.0; q <= 500; q += 20 {
			flow := q / 3600 * n
			d := p.At(flow, 1000)
			lost := 0.06 * best * n * math.Sqrt(d.Head/n/n/bestHead)
			through := Pump{Curve: c, Speed: 1480 * n}.At(flow+lost, 1000)
			if !(math.Abs(through.Head/d.Head-1) < 1e-11) || !(math.Abs(through.ShaftPower/d.ShaftPower-1) < 1e-11) {
				t.Fatalf("%g m3/h: %+v, through the impeller %+v", q, d, through)
			}
			if w := waterPower(1000, flow, d.Head) / d.ShaftPower; !(math.Abs(d.Efficiency/w-1) < 1e-9) {
				t.Fatalf("%g m3/h: efficiency %g, want %g", q, d.Efficiency, w)
			}
			if d.NPSHRequired != through.NPSHRequired && !(math.Abs(d.NPSHRequired-through.NPSHRequired) < 1e-9) && !math.IsNaN(through.NPSHRequired) {
				t.Fatalf("%g m3/h: NPSH required %g, want %g", q, d.NPSHRequired, through.NPSHRequired)
			}
			const h = 1e-6
			low, _ := p.Head(flow - h)
			high, _ := p.Head(flow + h)
			if _, slope := p.Head(flow); !(math.Abs((high-low)/(2*h)-slope) <= 1e-4*math.Abs(slope)+1e-4) {
				t.Fatalf("%g m3/h: slope %g, difference %g", q, slope, (high-low)/(2*h))
			}
		}
		low, high := p.Range()
		if !(low < 80/3600.0*n && high < 560/3600.0*n) {
			t.Errorf("known from %g to %g", low*3600, high*3600)
		}
	}
}

// At another speed the NPSH required lies between those of the powers 1.3 and 2 of the speed; the higher is the cautious one.
func TestNPSHRequiredHigh(t *testing.T) {
	c := fullSheet(t, false)
	for n, exponent := range map[float64]float64{0.8: 1.3, 1: 2, 1.2: 2} {
		p := Pump{Curve: c, Speed: 1480 * n}
		at := Pump{Curve: c}.NPSHRequired(300 / 3600.0)
		if got, want := p.NPSHRequiredHigh(300/3600.0*n), at*math.Pow(n, exponent); !(math.Abs(got/want-1) < 1e-12) {
			t.Errorf("speed %g: %g, want %g", n, got, want)
		}
	}
}
