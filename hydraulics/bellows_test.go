package hydraulics

import (
	"math"
	"testing"
)

func TestBellows(t *testing.T) {
	f, err := NewSteelFriction(0.2)
	if err != nil {
		t.Fatal(err)
	}
	if k, err := Bellows(0.15, 0.2); err != nil || !near(k, 3*f*0.75, 1e-12) {
		t.Errorf("K %g, %v", k, err)
	}
	if k, err := Bellows(0, 0.2); err != nil || k != 0 {
		t.Errorf("no length: K %g, %v", k, err)
	}
	if c, err := entry(t, "rubber bellows").Coefficient(BareDimensions(0.2, 0)); err != nil || !near(c.K, 3*f, 1e-12) {
		t.Errorf("one bore long: %+v, %v", c, err)
	}
	for _, bad := range []float64{math.NaN(), -0.1, math.Inf(1)} {
		refused(t, "length", func() (float64, error) { return Bellows(bad, 0.2) })
		refused(t, "bore", func() (float64, error) { return Bellows(0.1, bad) })
	}
}
