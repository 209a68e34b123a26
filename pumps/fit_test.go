package pumps

import (
	"math"
	"math/rand/v2"
	"testing"
)

// at evaluates a function at points.
func at(x []float64, f func(float64) float64) []float64 {
	y := make([]float64, len(x))
	for i := range x {
		y[i] = f(x[i])
	}
	return y
}

func evenly(low, high float64, n int) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = low + (high-low)*float64(i)/float64(n-1)
	}
	return x
}

// A parabola is what the smoothest fit is made of: it must come back but for rounding.
func TestFitReturnsParabola(t *testing.T) {
	head := func(x float64) float64 { return 40 - 1.2e-5*x*x }
	for _, n := range []int{3, 4, 5, 8, 15} {
		x := evenly(0, 1200, n)
		f, err := NewFit(x, at(x, head), Hump)
		if err != nil {
			t.Fatal(err)
		}
		for v := 0.0; v <= 1200; v += 37 {
			y, slope := f.At(v)
			if !(math.Abs(y-head(v)) <= 1e-11*40) || !(math.Abs(slope+2.4e-5*v) <= 1e-11*40/100) {
				t.Errorf("%d points, %g: %.12g slope %g, want %.12g slope %g", n, v, y, slope, head(v), -2.4e-5*v)
			}
		}
	}
}

// Good points of a curve that is no parabola are gone through: a steep pump whose head falls with flow cubed, and an
// efficiency with its shoulder. The bound is a fifth of what a ruler reads, 1/100 of the axis (common practice).
func TestFitGoesThroughGoodPoints(t *testing.T) {
	curves := map[string]func(float64) float64{
		"cubic head":  func(x float64) float64 { return 30 - 4*x - 9*x*x*x },
		"efficiency":  func(x float64) float64 { return 0.82 * (1 - math.Pow(math.Abs(x-0.7)/0.7, 2.5)) },
		"NPSH needed": func(x float64) float64 { return 2.2 + 0.6*x + 3*math.Pow(x, 4) },
	}
	for name, f := range curves {
		x := evenly(0, 1, 9)
		fit, err := NewFit(x, at(x, f), AnyShape)
		if err != nil {
			t.Fatal(err)
		}
		span := math.Abs(f(1)-f(0)) + math.Abs(f(0.7)-f(0))
		worst := 0.0
		for v := 0.0; v <= 1; v += 0.01 {
			y, _ := fit.At(v)
			worst = math.Max(worst, math.Abs(y-f(v))/span)
		}
		t.Logf("%s: worst %.2g of the span, residual %.2g", name, worst, fit.Residual()/span)
		if !(worst <= 2e-3) {
			t.Errorf("%s: departs by %g of the span", name, worst)
		}
	}
}

// Reading errors are smoothed: over many seeded trials the fit is nearer the true curve than the points are, and
// never turns twice.
func TestFitSmoothsNoise(t *testing.T) {
	const seed = 20261201
	rng := rand.New(rand.NewPCG(seed, 0))
	t.Logf("seed %d", seed)
	f := func(x float64) float64 { return 30 - 2*x - 8*x*x }
	const noise = 0.15 // m, half a per cent of the head
	x := evenly(0, 1, 12)
	sumFit, sumPoints, worst := 0.0, 0.0, 0.0
	for range 300 {
		y := at(x, f)
		for i := range y {
			y[i] += noise * rng.NormFloat64()
			sumPoints += (y[i] - f(x[i])) * (y[i] - f(x[i]))
		}
		fit, err := NewFit(x, y, AnyShape)
		if err != nil {
			t.Fatal(err)
		}
		if !fit.Shaped() {
			t.Error("turns more than once")
		}
		for i := range x {
			v, _ := fit.At(x[i])
			sumFit += (v - f(x[i])) * (v - f(x[i]))
			worst = math.Max(worst, math.Abs(v-f(x[i])))
		}
	}
	t.Logf("error of the fit over that of the points %.2f, worst %.2f m", math.Sqrt(sumFit/sumPoints), worst)
	if !(sumFit < 0.45*sumPoints) { // a parabola alone, the truth here, would leave 3 of 12 parts
		t.Errorf("squared error of the fit %g of the points'", sumFit/sumPoints)
	}
}

func TestFitSlopeAgainstCentralDifference(t *testing.T) {
	x := evenly(0, 1, 9)
	f, err := NewFit(x, at(x, func(x float64) float64 { return 30 - 4*x - 9*x*x*x }), Hump)
	if err != nil {
		t.Fatal(err)
	}
	for v := -0.2; v < 1.2; v += 0.0171 {
		const h = 1e-6
		low, _ := f.At(v - h)
		high, _ := f.At(v + h)
		if _, slope := f.At(v); !(math.Abs(slope-(high-low)/(2*h)) <= 1e-6*math.Abs(slope)) {
			t.Errorf("at %g: slope %g, central difference %g", v, slope, (high-low)/(2*h))
		}
	}
}

func TestFitBounds(t *testing.T) {
	f, err := NewFit([]float64{2, 1}, []float64{5, 7}, AnyShape) // any order; two points make a line
	if err != nil {
		t.Fatal(err)
	}
	if y, slope := f.At(1.5); !(math.Abs(y-6) < 1e-12) || !(math.Abs(slope+2) < 1e-12) {
		t.Errorf("line: %g slope %g", y, slope)
	}
	if low, high := f.Range(); low != 1 || high != 2 || !f.Within(1) || !f.Within(2) || f.Within(2.0001) || f.Within(math.NaN()) {
		t.Errorf("range %g to %g", low, high)
	}
	if x, y, inner := f.Greatest(); x != 1 || !(math.Abs(y-7) < 1e-12) || inner {
		t.Errorf("greatest %g at %g, inner %v", y, x, inner)
	}
	for name, c := range map[string][2][]float64{
		"none":       {nil, nil},
		"one":        {{1}, {1}},
		"two equal":  {{1, 1, 2}, {1, 2, 3}},
		"not number": {{1, math.NaN(), 2}, {1, 2, 3}},
		"infinite":   {{1, 2, 3}, {1, math.Inf(1), 3}},
		"unequal":    {{1, 2}, {1}},
	} {
		if _, err := NewFit(c[0], c[1], AnyShape); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
}

func TestGreatest(t *testing.T) {
	x := evenly(0, 2, 7)
	f, err := NewFit(x, at(x, func(x float64) float64 { return 0.8 - (x-1.3)*(x-1.3) }), Hump)
	if err != nil {
		t.Fatal(err)
	}
	if x, y, inner := f.Greatest(); !inner || !(math.Abs(x-1.3) < 1e-9) || !(math.Abs(y-0.8) < 1e-12) {
		t.Errorf("%g at %g, inner %v; want 0.8 at 1.3", y, x, inner)
	}
}

func BenchmarkFit(b *testing.B) {
	x := evenly(0, 1, 9)
	y := at(x, func(x float64) float64 { return 30 - 4*x - 9*x*x*x })
	for b.Loop() {
		if _, err := NewFit(x, y, AnyShape); err != nil {
			b.Fatal(err)
		}
	}
}
