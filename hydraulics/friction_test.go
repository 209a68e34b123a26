package hydraulics

import (
	"brinehead/fluids"
	"encoding/csv"
	"errors"
	"math"
	"os"
	"strconv"
	"testing"
)

// The grid is made by testdata/reference/colebrook.py with mpmath in 40 digits.
func TestColebrookAgainstHighPrecision(t *testing.T) {
	file, err := os.Open("../testdata/reference/colebrook.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	r := csv.NewReader(file)
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if len(rows) != 1+16*18 {
		t.Fatalf("%d rows, want a head and 288", len(rows))
	}
	worst := 0.0
	for _, row := range rows[1:] {
		var v [3]float64
		for i, cell := range row {
			if v[i], err = strconv.ParseFloat(cell, 64); err != nil {
				t.Fatal(err)
			}
		}
		got, err := Colebrook(v[0], v[1])
		if err != nil {
			t.Fatal(err)
		}
		worst = math.Max(worst, math.Abs(got/v[2]-1))
		if !(math.Abs(got/v[2]-1) <= 1e-14) {
			t.Errorf("Re %g, roughness %g: %.17g, want %.17g", v[0], v[1], got, v[2])
		}
	}
	t.Logf("greatest relative deviation %.2g", worst)
}

func TestFrictionDerivativeAgainstCentralDifference(t *testing.T) {
	for _, re := range []float64{10, 500, 1999, 2001, 2500, 3000, 3999, 4001, 1e4, 1e5, 1e6, 1e7, 9e7} {
		for _, rel := range []float64{0, 1e-5, 1e-3, 0.05} {
			step := re * 1e-5
			if (re-step-LaminarLimit)*(re+step-LaminarLimit) < 0 || (re-step-TurbulentLimit)*(re+step-TurbulentLimit) < 0 {
				step = re * 1e-6
			}
			low, _, errLow := FrictionFactor(re-step, rel)
			high, _, errHigh := FrictionFactor(re+step, rel)
			_, slope, err := FrictionFactor(re, rel)
			if err := errors.Join(errLow, errHigh, err); err != nil {
				t.Fatal(err)
			}
			want := (high - low) / (2 * step)
			f := (high + low) / 2
			// The difference itself is good to its rounding, 1e-16 f/step, and its third-order term.
			if !(math.Abs(slope-want) <= 2e-8*f/re+1e-15*f/step) {
				t.Errorf("Re %g, roughness %g: slope %g, central difference %g", re, rel, slope, want)
			}
		}
	}
}

// Loss must grow with flow everywhere, the bridge included, and have no jump of value or slope at its ends.
func TestReducedLossIsSmoothAndMonotone(t *testing.T) {
	for _, rel := range []float64{0, 1e-6, 1e-4, 1e-3, 0.01, 0.05} {
		last := -1.0
		for re := 0.0; re < 6000; re += 5 {
			loss, slope := reducedLoss(re, rel)
			if !(loss > last && slope > 0) {
				t.Fatalf("roughness %g: loss %g after %g at Re %g, slope %g", rel, loss, last, re, slope)
			}
			last = loss
		}
		for _, at := range []float64{LaminarLimit, TurbulentLimit} {
			below, slopeBelow := reducedLoss(math.Nextafter(at, 0), rel)
			above, slopeAbove := reducedLoss(at, rel)
			if !(math.Abs(below/above-1) < 1e-12) || !(math.Abs(slopeBelow/slopeAbove-1) < 1e-12) {
				t.Errorf("roughness %g, Re %g: %g to %g, slope %g to %g", rel, at, below, above, slopeBelow, slopeAbove)
			}
		}
	}
}

func TestFrictionLimits(t *testing.T) {
	f, _, err := FrictionFactor(1000, 0.01)
	if err != nil || f != 0.064 {
		t.Errorf("laminar at Re 1000: %g, %v; want 64/Re", f, err)
	}
	// Fully rough: f = 0.25/log10(rel/3.7)^2, the limit of the law without its viscous term. At Re 1e8 and 5 %
	// roughness that term is 1e-6 of the sum.
	f, err = Colebrook(1e8, 0.05)
	if want := 0.25 / math.Pow(math.Log10(0.05/3.7), 2); err != nil || !(math.Abs(f/want-1) < 1e-5) {
		t.Errorf("rough: %g, %v; want %g", f, err, want)
	}
	// Smooth, Re 1e5: 0.0180 of J. Nikuradse's law 1/sqrt(f) = 2 log10(re sqrt(f)) - 0.8, to which Colebrook's
	// tends with 2.51 in place of 10^0.4 = 2.512.
	f, err = Colebrook(1e5, 0)
	if residual := 1/math.Sqrt(f) - 2*math.Log10(1e5*math.Sqrt(f)) + 0.8; err != nil || !(math.Abs(residual) < 1e-3) {
		t.Errorf("smooth: %g, %v; residual of Nikuradse's law %g", f, err, residual)
	}
}

func TestFrictionRefusals(t *testing.T) {
	for _, c := range []struct{ re, rel float64 }{
		{math.NaN(), 0}, {1e5, math.NaN()}, {0, 0}, {-1, 0}, {1.1e8, 0}, {math.Inf(1), 0}, {1e5, -1e-9}, {1e5, 0.051},
	} {
		f, slope, err := FrictionFactor(c.re, c.rel)
		var out *fluids.RangeError
		if !math.IsNaN(f) || !math.IsNaN(slope) || !errors.As(err, &out) {
			t.Errorf("%v: %g, %g, %v; want NaN and a range error", c, f, slope, err)
		}
		if f, err := Colebrook(c.re, c.rel); !math.IsNaN(f) || !errors.As(err, &out) {
			t.Errorf("%v: %g, %v; want NaN and a range error", c, f, err)
		}
	}
	if _, err := Colebrook(3999, 0); err == nil {
		t.Error("Colebrook answers below its range")
	}
}

func TestRegimes(t *testing.T) {
	for re, want := range map[float64]string{0: "laminar", 1999: "laminar", 2000: "transitional", 3999: "transitional", 4000: "turbulent", 1e9: "turbulent"} {
		if got := RegimeOf(re).String(); got != want {
			t.Errorf("Re %g: %s, want %s", re, got, want)
		}
	}
}

// What the friction factor costs: the solution in use, beside plain successive substitution to the same accuracy,
// the explicit formula of P. K. Swamee and A. K. Jain (J. Hydraulics Division ASCE 102 (1976) 657-664), and two
// logarithms, the least that any such law could cost. Compare within one run.
func BenchmarkFriction(b *testing.B) {
	cases := []struct {
		name string
		law  func(re, rel float64) float64
	}{
		{"colebrook", func(re, rel float64) float64 { f, _ := colebrook(re, rel); return f }},
		{"substitution", func(re, rel float64) float64 {
			x := 7.0
			for {
				next := -2 * math.Log10(rel/3.7+2.51*x/re)
				if math.Abs(next-x) <= 1e-14*x {
					return 1 / (next * next)
				}
				x = next
			}
		}},
		{"explicit", func(re, rel float64) float64 {
			l := math.Log10(rel/3.7 + 5.74/math.Pow(re, 0.9))
			return 0.25 / (l * l)
		}},
		{"two logarithms", func(re, rel float64) float64 { return math.Log(rel + math.Log(re)) }},
	}
	for _, c := range cases {
		b.Run(c.name, func(b *testing.B) {
			sum := 0.0
			for i := range b.N {
				sum += c.law(4e3+float64(i&1023)*1e3, 1e-5*float64(i&63))
			}
			if math.IsNaN(sum) {
				b.Fatal("not a number")
			}
		})
	}
}
