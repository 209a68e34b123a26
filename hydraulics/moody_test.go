package hydraulics

import (
	"math"
	"testing"
)

// L. F. Moody, Trans. ASME 66 (1944) 671-684: friction factors as they are read off his chart, to two or three digits (the
// readings from memory). The chart was drawn from Colebrook's law; what is left is the reading.
func TestMoodyChart(t *testing.T) {
	for _, c := range []struct{ re, rel, f float64 }{
		{1e3, 0, 0.064}, {1.5e3, 0.01, 0.0427},
		{1e4, 0, 0.031}, {1e5, 0, 0.018}, {1e6, 0, 0.0116}, {1e7, 0, 0.0081},
		{1e4, 0.05, 0.074}, {1e5, 0.01, 0.0385}, {1e6, 0.01, 0.038}, {1e7, 0.001, 0.0197}, {1e5, 0.001, 0.0222}, {1e6, 1e-4, 0.0134}, {1e7, 1e-4, 0.0122}, {1e5, 1e-4, 0.0185},
		{1e8, 1e-5, 0.0082}, {5e4, 0.002, 0.0265},
	} {
		f, _, err := FrictionFactor(c.re, c.rel)
		if err != nil || !(math.Abs(f/c.f-1) <= 0.02) {
			t.Errorf("Re %g, roughness %g: %.5f, the chart %.4f, %v", c.re, c.rel, f, c.f, err)
		}
	}
}
