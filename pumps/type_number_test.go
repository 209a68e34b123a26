package pumps

import (
	"math"
	"testing"
)

// nq = K / (2 pi/60 / g^(3/4)), that is 52.9 K; the US figure is 51.6 times the metric one (Hydraulic Institute, Engineering Data Book).
func TestSpecificSpeeds(t *testing.T) {
	k, nq := TypeNumber(1480, 400/3600.0, 24), SpecificSpeed(1480, 400/3600.0, 24)
	if !(math.Abs(nq/k/52.919-1) < 1e-4) {
		t.Errorf("nq %g over K %g", nq, k)
	}
	if us := SpecificSpeedUS(1); !(math.Abs(us-51.6) < 0.05) {
		t.Errorf("US over metric %g", us)
	}
	for _, bad := range [][3]float64{{0, 1, 1}, {1, 0, 1}, {1, 1, 0}, {1, 1, -1}, {math.NaN(), 1, 1}} {
		if !math.IsNaN(TypeNumber(bad[0], bad[1], bad[2])) || !math.IsNaN(SpecificSpeed(bad[0], bad[1], bad[2])) {
			t.Errorf("%v has a specific speed", bad)
		}
	}
	n := fullSheet(t, false).Numbers()
	if !(math.Abs(n.BestFlow*3600-400) < 0.1) || !(math.Abs(n.BestHead-24) < 0.01) || !(math.Abs(n.SpecificSpeed/nq-1) < 1e-4) ||
		!(math.Abs(n.SuctionSpecificSpeed/SpecificSpeed(1480, 400/3600.0, 3.5)-1) < 1e-3) { // 2 + 1.5 m at best flow
		t.Errorf("%+v", n)
	}
	if n := (&Curve{head: fullSheet(t, false).head, bestFlow: math.NaN()}).Numbers(); !math.IsNaN(n.TypeNumber) || !math.IsNaN(n.SuctionSpecificSpeed) {
		t.Errorf("without efficiency: %+v", n)
	}
}
