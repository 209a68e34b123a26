package hydraulics

import (
	"math"
	"testing"
)

// The fluids library 1.0.22, v_lift_valve_Crane(rho=998.2, D1=0.0627, D2=0.0779, 'lift check straight') of its
// documentation: 1.02523 m/s with a seat of 0.0627/0.0779 of the bore, whose square the constant bears.
func TestLiftVelocity(t *testing.T) {
	seat := 0.0627 / 0.0779
	if v, err := LiftVelocity(50*seat*seat, 998.2); err != nil || !near(v, 1.0252301935349286, 1e-12) {
		t.Errorf("%.6f m/s, %v", v, err)
	}
	for _, bad := range []float64{math.NaN(), -1, 0, 1.3e3, math.Inf(1)} {
		refused(t, "constant", func() (float64, error) { return LiftVelocity(bad, 1000) })
		refused(t, "density", func() (float64, error) { return LiftVelocity(45, bad) })
	}
}

// The constants of all check valves, by the library's transcription of Crane, seven digits; and only they have one.
func TestLiftOfTheCatalogue(t *testing.T) {
	for _, r := range referenceRows(t, "check_valves.csv", 8) {
		if v, err := LiftVelocity(entry(t, r.text("valve")).Lift, 1025); err != nil || !near(v, r.number("velocity"), 1e-6) {
			t.Errorf("%v: %.6f m/s, %v", r.fields, v, err)
		}
	}
	for _, e := range CatalogueFittings() {
		if e.NonReturn != (e.Lift > 0) {
			t.Errorf("%s: non-return %t, lift %g", e.Name, e.NonReturn, e.Lift)
		}
	}
}

// A check valve's own pattern orders its loss: lift above stop check above swing, angle below globe.
func TestCheckValvesInOrder(t *testing.T) {
	last := math.Inf(1)
	for _, name := range []string{"lift check valve", "screw-down non-return valve", "angle screw-down non-return valve", "swing check valve",
		"angle lift check valve", "straight swing check valve"} {
		c, err := entry(t, name).Coefficient(BareDimensions(0.15, 0))
		if err != nil || !(c.K < last) {
			t.Errorf("%s: K %g after %g, %v", name, c.K, last, err)
		}
		last = c.K
	}
}
