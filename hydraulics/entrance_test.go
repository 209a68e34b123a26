package hydraulics

import (
	"math"
	"testing"
)

// Rows of fittings.csv on rounded inlets: Crane's to the digit, the other authors' between half and twice and a bit.
func TestRoundedEntranceAgainstTable(t *testing.T) {
	found := 0
	for _, r := range referenceRows(t, "fittings.csv", 121) {
		if r.text("fitting") != "rounded inlet" {
			continue
		}
		found++
		k, err := RoundedEntrance(r.number("ratio"))
		if r.text("source") == "Crane TP-410" {
			if err != nil || !(math.Abs(k-r.number("k")) <= 1e-9) {
				t.Errorf("%v: K %g, %v", r.fields, k, err)
			}
		} else if others := r.number("k") / k; !(0.7 <= others && others <= 3.8) {
			t.Errorf("%v: %g times K %g", r.fields, others, k)
		}
	}
	if found != 24 {
		t.Errorf("%d rows, want 24", found)
	}
}

func TestEntranceLimits(t *testing.T) {
	if k, err := RoundedEntrance(0); err != nil || k != 0.5 {
		t.Errorf("no rounding: K %g, %v; want the sharp entrance", k, err)
	}
	last := 1.0
	for r := 0.0; r <= 1; r += 0.001 {
		k, err := RoundedEntrance(r)
		if err != nil || !(k <= last) || !(k >= 0.04) {
			t.Fatalf("radius %g: K %g after %g, %v", r, k, last, err)
		}
		last = k
	}
	for _, bad := range []float64{math.NaN(), -0.01, 1.01, math.Inf(1)} {
		refused(t, "radius", func() (float64, error) { return RoundedEntrance(bad) })
	}
	// Crane TP-410 (2009), appendix A; sharp also Idelchik, 0.57 by Rennels & Hudson
	for name, want := range map[string]float64{"sharp entrance": 0.5, "bellmouth": 0.04, "projecting entrance": 0.78, "exit": 1} {
		if c, err := entry(t, name).Coefficient(BareDimensions(0.3, 0)); err != nil || c != (Coefficient{K: want, Bore: 0.3}) {
			t.Errorf("%s: %+v, %v", name, c, err)
		}
	}
}
