package hydraulics

import (
	"math"
	"testing"

	"brinehead/fluids"
)

// The friction of chevron plates by two authors (coolers.csv) goes with 1.78 to 1.86 powers of flow: the default of 1.8
// for the channels' share and the square of the ports' lie around them, 1.75 to 1.95 all in.
func TestPlateCoolerExponentAgainstFriction(t *testing.T) {
	sum := 0.0
	rows := referenceRows(t, "coolers.csv", 6)
	for _, r := range rows {
		n := r.number("n")
		sum += n
		if !(math.Abs(n-PlateCoolerExponent) <= 0.06) {
			t.Errorf("%v lies far from %g", r.fields, PlateCoolerExponent)
		}
	}
	if mean := sum / float64(len(rows)); !(math.Abs(mean-PlateCoolerExponent) <= 0.02) {
		t.Errorf("mean %g, default %g", mean, PlateCoolerExponent)
	}
}

// A rated plate cooler at half flow loses 0.287 of its drop, where a square law would say 0.25.
func TestPlateCoolerAtHalfFlow(t *testing.T) {
	e := entry(t, "plate cooler")
	f := Fitting{Name: e.Name, RatedFlow: 0.1, RatedDrop: 60e3, RatedDensity: 998.2, Exponent: e.Exponent}
	pipe := Pipe{Bore: 0.25}
	full, _ := f.Loss(0.1, pipe, 1e-6)
	half, _ := f.Loss(0.05, pipe, 1e-6)
	if !near(full, 60e3/(998.2*fluids.Gravity), 1e-9) || !near(half/full, 0.2872, 1e-3) {
		t.Errorf("full flow %g m, half flow %g of it", full, half/full)
	}
}
