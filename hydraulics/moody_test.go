package hydraulics

import (
	"math"
	"testing"
)

// L. F. Moody, Trans. ASME 66 (1944) 671-684: friction factors as they are commonly read off the chart, from memory.
// The tolerance is what a reading of the printed chart is good to, 2 %. His lines were drawn from 64/re and Colebrook's
// law, so that the readings are no second opinion on the law; they show that it answers where an engineer looks it up.
func TestMoodyChart(t *testing.T) {
	worst := 0.0
	for _, c := range []struct{ re, rel, f float64 }{
		{1e3, 0, 0.064}, {1.5e3, 0.01, 0.0427},
		{1e4, 0, 0.031}, {1e5, 0, 0.018}, {1e6, 0, 0.0116}, {1e7, 0, 0.0081},
		{1e8, 1e-5, 0.0082},
		{1e5, 1e-4, 0.0185}, {1e6, 1e-4, 0.0134}, {1e7, 1e-4, 0.0122},
		{1e5, 1e-3, 0.0222}, {1e7, 1e-3, 0.0197},
		{5e4, 2e-3, 0.0265},
		{1e5, 0.01, 0.0385}, {1e6, 0.01, 0.038},
		{1e4, 0.05, 0.074}, {1e8, 0.05, 0.072},
	} {
		f, _, err := FrictionFactor(c.re, c.rel)
		if err != nil {
			t.Fatal(err)
		}
		worst = math.Max(worst, math.Abs(f/c.f-1))
		if !(math.Abs(f/c.f-1) <= 0.02) {
			t.Errorf("Re %g, roughness %g: %.5f, the chart %.4f", c.re, c.rel, f, c.f)
		}
	}
	t.Logf("greatest relative deviation %.2g", worst)
}
