package pumps

import (
	"math"
	"testing"
)

// pumpOf makes the curve of a trimmed impeller of one pump out of a law of its own: the full impeller's H = 34 - 9 x2,
// x = Q/(400 m3/h), carried to smaller diameters by a method of trim that is not plain affinity.
func pumpOf(t testing.TB, method TrimMethod, full, diameter, inlet float64) *Curve {
	t.Helper()
	var points []SheetPoint
	r := 1.0
	if diameter < full {
		var err error
		if r, err = method.Ratio(diameter/full, inlet/full); err != nil {
			t.Fatal(err)
		}
	}
	for x := 0.0; x <= 1.45; x += 0.145 {
		q := x * 400 / 3600 * r
		efficiency := 0.83 * (1 - (x-1)*(x-1))
		points = append(points, SheetPoint{Flow: q, Head: (34 - 9*x*x) * r * r, Efficiency: efficiency,
			Power: math.NaN(), NPSHRequired: 2 + 1.5*x*x})
	}
	c, err := NewCurve(diameter, 1480, points)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// The middle diameter of a family, left out, is found again from its neighbours along affinity parabolas, much better than by a
// mean at equal flow or by plain affinity from the full impeller. The families follow each method of trim: the rule of
// interpolation is exact for two of them (so that their error is that of fit and tracing), and the third is a chart of straight lines.
func TestLeaveOutTheMiddleDiameter(t *testing.T) {
	const full, inlet = 0.330, 0.165
	for _, c := range []struct {
		method TrimMethod
		within float64 // m, of some 30
	}{{PlainAffinity, 1e-3}, {ISO9906, 1e-3}, {Stepanoff, 0.06}} {
		small, middle, large := pumpOf(t, c.method, full, 0.290, inlet), pumpOf(t, c.method, full, 0.310, inlet), pumpOf(t, c.method, full, full, inlet)
		found, err := Between(small, large, 0.310)
		if err != nil {
			t.Fatal(err)
		}
		affinity, err := large.Trimmed(PlainAffinity, 0.310, math.NaN())
		if err != nil {
			t.Fatal(err)
		}
		parabola, equal, plain := 0.0, 0.0, 0.0
		low, high := found.head.Range()
		if low != 0 || !(math.Abs(high/middle.head.high-1) < 3e-3) {
			t.Errorf("%v: known from %g to %g m3/s, the middle one from 0 to %g", c.method, low, high, middle.head.high)
		}
		high = math.Min(high, middle.head.high)
		for k := range 41 {
			q := high * float64(k) / 40
			want, _ := middle.head.At(q)
			got, _ := found.head.At(q)
			a, _ := small.head.At(q)
			b, _ := large.head.At(q)
			parabola = math.Max(parabola, math.Abs(got-want))
			equal = math.Max(equal, math.Abs((a+b)/2-want))
			p, _ := affinity.head.At(q)
			plain = math.Max(plain, math.Abs(p-want))
			e, _ := found.efficiency.At(q)
			wantE, _ := middle.efficiency.At(q)
			if !(math.Abs(e-wantE) < 3e-3) {
				t.Errorf("%v: efficiency at %g: %g, want %g", c.method, q, e, wantE)
			}
		}
		t.Logf("%v: greatest error of the head along parabolas %.4f m, of the mean at equal flow %.3f m, of plain affinity from the full impeller %.3f m", c.method, parabola, equal, plain)
		if !(parabola < c.within && equal > 3*parabola) || c.method != PlainAffinity && !(plain > 5*parabola) {
			t.Errorf("%v: errors %g, %g, %g m", c.method, parabola, equal, plain)
		}
	}
}

// Where the two curves follow plain affinity, so does every one between, to the accuracy of tracing, and at the ends the curve
// is the digitised one.
func TestBetweenKeepsAffinity(t *testing.T) {
	large := pumpOf(t, PlainAffinity, 0.330, 0.330, math.NaN())
	small, err := large.Trimmed(PlainAffinity, 0.300, math.NaN())
	if err != nil {
		t.Fatal(err)
	}
	small.efficiency = large.efficiency.scaled(300.0/330, 1) // without the loss that trimming adds
	worst := 0.0
	for _, d := range []float64{0.300, 0.307, 0.315, 0.326, 0.330} {
		found, err := Between(small, large, d)
		if err != nil {
			t.Fatal(err)
		}
		n := d / 0.330
		for k := range 60 {
			q := large.head.high * n * float64(k) / 60
			want, slope := large.head.At(q / n)
			got, gotSlope := found.head.At(q)
			worst = math.Max(worst, math.Abs(got-want*n*n))
			if !(math.Abs(gotSlope-slope*n) < 2e-3*(1+math.Abs(slope))) {
				t.Errorf("%g mm at %g m3/s: slope %g, want %g", d*1e3, q, gotSlope, slope*n)
			}
			e, _ := found.efficiency.At(q)
			wantE, _ := large.efficiency.At(q / n)
			if !(math.Abs(e-wantE) < 1e-5) {
				t.Errorf("%g mm at %g m3/s: efficiency %g, want %g", d*1e3, q, e, wantE)
			}
		}
	}
	t.Logf("greatest error of the head %.2g m", worst)
	if !(worst < 1e-5) {
		t.Errorf("departs from affinity by %g m", worst)
	}
}

func TestBetweenRefusals(t *testing.T) {
	large, small := pumpOf(t, ISO9906, 0.33, 0.33, 0.16), pumpOf(t, ISO9906, 0.33, 0.30, 0.16)
	for _, c := range []struct {
		a, b *Curve
		d    float64
	}{{large, small, 0.31}, {small, large, 0.29}, {small, large, 0.34}, {small, large, math.NaN()}} {
		if _, err := Between(c.a, c.b, c.d); err == nil {
			t.Errorf("no error at %g m", c.d)
		}
	}
	slow := *small
	slow.Speed = 1180
	if _, err := Between(&slow, large, 0.31); err == nil {
		t.Error("two speeds are taken")
	}
}

// Each figure of a curve between is known where both neighbours know it at corresponding points.
func TestBetweenKeepsRanges(t *testing.T) {
	large, small := pumpOf(t, PlainAffinity, 0.33, 0.33, 0.16), pumpOf(t, PlainAffinity, 0.33, 0.30, 0.16)
	points := large.Points[3:8]
	short, err := NewCurve(0.33, 1480, points)
	if err != nil {
		t.Fatal(err)
	}
	c, err := Between(small, short, 0.315)
	if err != nil {
		t.Fatal(err)
	}
	low, high := c.head.Range()
	n := 0.315 / 0.33
	if !(math.Abs(low/(points[0].Flow*n)-1) < 1e-6) || !(math.Abs(high/(points[4].Flow*n)-1) < 1e-6) {
		t.Errorf("known from %g to %g m3/s, want %g to %g", low, high, points[0].Flow*n, points[4].Flow*n)
	}
	if d := (Pump{Curve: c}).At(high*1.01, 1000); !d.Extrapolated || !math.IsNaN(d.Head) {
		t.Errorf("beyond: %+v", d)
	}
}
