package pumps

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

// What follows from the ISO form for a wanted head ratio h: D'/D = sqrt(d2 + h(1 - d2)), d = D1/D. Cuts in per cent, worked by
// hand to two decimals, beside those of plain affinity.
func TestISOCutForAHead(t *testing.T) {
	for _, c := range []struct {
		method        TrimMethod
		inlet, h, cut float64
	}{
		{PlainAffinity, 0, 0.90, 5.13}, {PlainAffinity, 0, 0.80, 10.56},
		{ISO9906, 0.40, 0.90, 4.29}, {ISO9906, 0.40, 0.80, 8.79},
		{ISO9906, 0.50, 0.90, 3.82}, {ISO9906, 0.50, 0.80, 7.80},
		{ISO9906, 0.60, 0.90, 3.25}, {ISO9906, 0.60, 0.80, 6.62},
		{ISO9906, 0, 0.80, 10.56}, // without an inlet it is plain affinity
	} {
		lambda, err := c.method.Diameter(math.Sqrt(c.h), c.inlet)
		if got := 100 * (1 - lambda); err != nil || !(math.Abs(got-c.cut) <= 0.0051) {
			t.Errorf("%v, d %g, h %g: cut %.4f %%, %v; want %.2f", c.method, c.inlet, c.h, got, err, c.cut)
		}
	}
}

// The points of Stepanoff's chart (from memory), and the one that Lobanoff and Ross (Centrifugal Pumps, 2nd ed., p. 19) print for
// their own: a calculated 82 % is cut to 84 %. The two charts part by less than 2 % of the diameter.
func TestStepanoffChart(t *testing.T) {
	for calculated, actual := range map[float64]float64{0.65: 0.71, 0.75: 0.80, 0.85: 0.88, 0.90: 0.92, 0.95: 0.96, 1: 1} {
		lambda, err := Stepanoff.Diameter(calculated, 0)
		if calculated == 0.65 {
			if err == nil {
				t.Error("the end of the chart is taken as known")
			}
			continue
		}
		if err != nil || !(math.Abs(lambda-actual) < 1e-12) {
			t.Errorf("%g: %g, %v; want %g", calculated, lambda, err, actual)
		}
	}
	if lambda, err := Stepanoff.Diameter(0.82, 0); err != nil || !(math.Abs(lambda-0.84) < 0.02) {
		t.Errorf("0.82: %g, %v; Lobanoff and Ross have 0.84", lambda, err)
	}
}

// Ratio and Diameter undo each other; every method is monotone, loses no more than nothing, and plain affinity keeps most.
func TestTrimThereAndBack(t *testing.T) {
	const seed = 11
	rng := rand.New(rand.NewPCG(seed, 0))
	for range 2000 {
		lambda, inlet := 0.72+0.28*rng.Float64(), 0.3+0.35*rng.Float64()
		var r []float64
		for _, m := range TrimMethods() {
			x, err := m.Ratio(lambda, inlet)
			if err != nil {
				t.Fatalf("seed %d, %v: %v", seed, m, err)
			}
			back, err := m.Diameter(x, inlet)
			if err != nil && x > 0.66 || err == nil && !(math.Abs(back-lambda) < 1e-12) {
				t.Fatalf("seed %d, %v: %g to %g and back to %g, %v", seed, m, lambda, x, back, err)
			}
			further, err := m.Ratio(lambda-1e-3, inlet)
			if err != nil || !(further < x) {
				t.Fatalf("seed %d, %v: %g keeps %g, a deeper cut %g, %v", seed, m, lambda, x, further, err)
			}
			r = append(r, x)
		}
		if !(r[ISO9906] <= r[PlainAffinity] && r[Stepanoff] <= r[PlainAffinity]) {
			t.Fatalf("seed %d: at %g the methods keep %v", seed, lambda, r)
		}
	}
}

func TestTrimRanges(t *testing.T) {
	for _, m := range TrimMethods() {
		for _, lambda := range []float64{0, 0.45, 1.001, math.NaN(), math.Inf(1)} {
			if r, err := m.Ratio(lambda, 0.5); err == nil || !math.IsNaN(r) {
				t.Errorf("%v: ratio of %g is %g", m, lambda, r)
			}
			if r, err := m.Diameter(lambda, 0.5); err == nil || !math.IsNaN(r) {
				t.Errorf("%v: diameter for %g is %g", m, lambda, r)
			}
		}
		if r, err := m.Ratio(1, 0.5); err != nil || r != 1 {
			t.Errorf("%v: no cut gives %g, %v", m, r, err)
		}
	}
	for _, inlet := range []float64{-0.1, 1, math.NaN()} {
		if _, err := ISO9906.Ratio(0.95, inlet); err == nil {
			t.Errorf("inlet share %g is taken", inlet)
		}
		if _, err := ISO9906.Diameter(0.95, inlet); err == nil {
			t.Errorf("inlet share %g is taken", inlet)
		}
	}
}

// A trimmed curve: head and flow along the parabola, NPSH required the same at the same flow, power by rho g Q H / eta with
// the efficiency that is left, whether the sheet gives the one or the other.
func TestTrimmedCurve(t *testing.T) {
	for _, withPower := range []bool{false, true} {
		c := fullSheet(t, withPower)
		for _, m := range TrimMethods() {
			const diameter, inlet = 0.300, 0.150
			cut, err := c.Trimmed(m, diameter, inlet)
			if err != nil {
				t.Fatal(err)
			}
			r, _ := m.Ratio(diameter/0.32, inlet/0.32)
			full, trimmed := Pump{Curve: c}.At(300/3600.0, 1000), Pump{Curve: cut}.At(300/3600.0*r, 1000)
			if !(math.Abs(trimmed.Head/(full.Head*r*r)-1) < 1e-12) {
				t.Errorf("%v: head %g, want %g", m, trimmed.Head, full.Head*r*r)
			}
			if n := (Pump{Curve: c}).NPSHRequired(300 / 3600.0 * r); trimmed.NPSHRequired != n {
				t.Errorf("%v: NPSH required %g, of the full impeller at that flow %g", m, trimmed.NPSHRequired, n)
			}
			if w := waterPower(1000, trimmed.Flow, trimmed.Head) / trimmed.Efficiency; !(math.Abs(trimmed.ShaftPower/w-1) < 2e-3) {
				t.Errorf("%v: power %g, want %g", m, trimmed.ShaftPower, w)
			}
			_, best, _ := c.BestEfficiency()
			_, left, _ := cut.BestEfficiency()
			if loss := best - left; !(math.Abs(loss-0.2*(1-300.0/320)) < 1e-9) { // beyond 3 %: 0.2 points for each
				t.Errorf("%v: best efficiency falls by %g", m, loss)
			}
			if !strings.Contains(cut.Origin, "trimmed from 320 mm by "+m.String()) || cut.Points != nil {
				t.Errorf("%v: origin %q, points %v", m, cut.Origin, cut.Points)
			}
		}
	}
	if _, err := (&Curve{}).Trimmed(PlainAffinity, 0.3, 0.1); err == nil {
		t.Error("a curve without a diameter is trimmed")
	}
}

func TestEfficiencyLoss(t *testing.T) {
	for _, c := range []struct{ lambda, k, loss float64 }{{0.97, 1.0, 0}, {0.98, 0.5, 0}, {0.98, 1.2, 0.004}, {0.90, 0.5, 0.02}, {0.98, math.NaN(), 0.004}} {
		if loss, rule := EfficiencyLoss(c.lambda, c.k); !(math.Abs(loss-c.loss) < 1e-12) || rule == "" {
			t.Errorf("%g at type number %g: %g, want %g", c.lambda, c.k, loss, c.loss)
		}
	}
}

func TestTrimCautions(t *testing.T) {
	for _, c := range []struct {
		lambda, k float64
		refuses   bool
		says      []string
	}{
		{0.97, 0.6, false, nil},
		{0.94, 0.6, false, []string{"beyond the 5 %"}},
		{0.88, 0.6, false, []string{"beyond the 5 %", "beyond 10 %"}},
		{0.79, 0.6, true, []string{"less than 80 %"}},
		{0.97, 1.6, true, []string{"mixed-flow"}},
		{0.89, 1.2, true, []string{"less than 90 %", "cut in steps"}},
		{0.97, 1.2, false, []string{"cut in steps"}},
		{0.97, math.NaN(), false, []string{"not judged"}},
	} {
		var text string
		refuses := false
		for _, w := range TrimCautions(c.lambda, c.lambda, c.k) {
			text += w.Text + "\n"
			refuses = refuses || w.Refuses
			if w.Source == "" {
				t.Errorf("no source: %s", w.Text)
			}
		}
		for _, s := range c.says {
			if !strings.Contains(text, s) {
				t.Errorf("%g, K %g: %q does not say %q", c.lambda, c.k, text, s)
			}
		}
		if refuses != c.refuses || c.says == nil && text != "" {
			t.Errorf("%g, K %g: refuses %v: %s", c.lambda, c.k, refuses, text)
		}
	}
}
