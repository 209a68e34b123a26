package hydraulics

import (
	"math"
	"testing"
)

// Rows of fittings.csv named mitre and mitre bend: the library's figures, five decimals.
func TestMitresAgainstTable(t *testing.T) {
	found := 0
	for _, r := range referenceRows(t, "fittings.csv", 121) {
		var k float64
		var err error
		switch name, x := r.text("fitting"), r.number("ratio"); name {
		case "mitre":
			k, err = Mitre(x * math.Pi / 180)
		case "mitre bend 90", "mitre bend 45":
			angle := math.Pi / 2
			if name == "mitre bend 45" {
				angle /= 2
			}
			var c Coefficient
			c, err = MitreBend(x, angle, 0.2)
			k = c.K + c.Viscous/1e5
		default:
			continue
		}
		found++
		if err != nil || !(math.Abs(k-r.number("k")) <= 0.6e-5) {
			t.Errorf("%v: K %.5f, %v", r.fields, k, err)
		}
	}
	if found != 13 {
		t.Errorf("%d rows, want 13", found)
	}
}

// More cuts lose less, never less than a smooth long-radius elbow, and a single mitre more than any.
func TestMitreBendsLieBetweenMitreAndElbow(t *testing.T) {
	elbow, err := entry(t, "elbow 90").Coefficient(BareDimensions(0.2, 0))
	if err != nil {
		t.Fatal(err)
	}
	last, err := Mitre(math.Pi / 2)
	if err != nil {
		t.Fatal(err)
	}
	for cuts := 2.0; cuts <= 5; cuts++ {
		c, err := MitreBend(cuts, math.Pi/2, 0.2)
		if err != nil || !(elbow.K < c.K && c.K < last) {
			t.Errorf("%g cuts: K %.3f, want between %.3f and %.3f, %v", cuts, c.K, elbow.K, last, err)
		}
		last = c.K
	}
	if k, err := Mitre(0); err != nil || k != 0 {
		t.Errorf("no angle: K %g, %v", k, err)
	}
}

func TestMitreRange(t *testing.T) {
	for _, v := range []float64{math.NaN(), -0.01, -1e-15, 151 * math.Pi / 180, math.Inf(1)} {
		refused(t, "angle", func() (float64, error) { return Mitre(v) })
	}
	for _, v := range []float64{math.NaN(), 0, 6, math.Inf(1)} {
		refused(t, "bore", func() (float64, error) { c, err := MitreBend(3, math.Pi/2, v); return c.K, err })
	}
	for _, c := range [][2]float64{{1, 90}, {6, 90}, {2.5, 90}, {3, 45}, {2, 60}, {math.NaN(), 90}, {2, math.NaN()}} {
		if got, err := MitreBend(c[0], c[1]*math.Pi/180, 0.2); err == nil || !math.IsNaN(got.K) {
			t.Errorf("%g cuts over %g degrees: %+v, %v", c[0], c[1], got, err)
		}
	}
}
