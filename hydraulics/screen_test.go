package hydraulics

import (
	"math"
	"testing"
)

// Idelchik's diagram 8-1 by its formula, as an independent hand computed it, four digits; and Blevins' table of
// square-edged plates (fittings.csv), another author's: 15 %, and 2 % for figures of two digits.
func TestPerforatedPlate(t *testing.T) {
	for open, want := range map[float64]float64{0.2: 52.58, 0.3: 19.32, 0.4: 8.758, 0.5: 4.370, 0.6: 2.257, 0.7: 1.148, 0.8: 0.538} {
		if k, err := PerforatedPlate(open); err != nil || !near(k, want, 1e-3) {
			t.Errorf("open by %g: K %.4f, %v; want %g", open, k, err, want)
		}
	}
	found, worst := 0, 0.0
	for _, r := range referenceRows(t, "fittings.csv", 121) {
		if r.text("fitting") != "perforated plate" {
			continue
		}
		found++
		k, err := PerforatedPlate(r.number("ratio"))
		worst = max(worst, math.Abs(k/r.number("k")-1))
		if err != nil || !near(k, r.number("k"), 0.17) {
			t.Errorf("%v: K %.3f, %v", r.fields, k, err)
		}
	}
	if found != 13 {
		t.Errorf("%d rows, want 13", found)
	}
	t.Logf("worst from Blevins %.1f %%", worst*100)
}

func TestScreenLimits(t *testing.T) {
	if k, err := PerforatedPlate(1); err != nil || k != 0 {
		t.Errorf("no plate: K %g, %v", k, err)
	}
	if k, err := InletGrating(1); err != nil || !near(k, 0.5, 1e-3) {
		t.Errorf("no bars: K %g, %v; want the sharp entrance", k, err)
	}
	for open := 0.02; open < 1; open += 0.01 {
		plate, err := PerforatedPlate(open)
		inlet, err2 := InletGrating(open)
		wider, _ := PerforatedPlate(open + 0.005)
		if err != nil || err2 != nil || !(wider < plate && plate < inlet) {
			t.Errorf("open by %g: wider %g, plate %g, inlet %g", open, wider, plate, inlet)
		}
	}
	for _, bad := range []float64{math.NaN(), 0, -0.1, 0.019, 1.001, math.Inf(1)} {
		refused(t, "plate", func() (float64, error) { return PerforatedPlate(bad) })
		refused(t, "grating", func() (float64, error) { return InletGrating(bad) })
	}
	// holes that touch: pi/(2 sqrt 3), the densest packing of circles
	if f, err := PerforatedShare(0.005, 0.005); err != nil || !near(f, 0.9068996821, 1e-9) {
		t.Errorf("touching holes %g, %v", f, err)
	}
	// a sheet maker's usual 5 mm at 8 mm pitch, 35 % (common practice)
	if f, err := PerforatedShare(0.005, 0.008); err != nil || !near(f, 0.354, 2e-3) {
		t.Errorf("5 mm at 8 mm: %g, %v", f, err)
	}
	for _, bad := range []float64{math.NaN(), 0, -1, math.Inf(1)} {
		refused(t, "hole", func() (float64, error) { return PerforatedShare(bad, 0.008) })
		refused(t, "pitch", func() (float64, error) { return PerforatedShare(0.005, bad) })
	}
	refused(t, "holes that overlap", func() (float64, error) { return PerforatedShare(0.005, 0.0049) })
}

// A plate across the run and a grating of its own face: the coefficient stands on the face it is for.
func TestPlateStandsOnItsFace(t *testing.T) {
	d := BareDimensions(0.2, 0)
	d.OpenArea = 0.5
	c, err := entry(t, "perforated plate").Coefficient(d)
	if err != nil || !near(c.Bore, 0.2, 1e-12) || !near(c.K, 4.370, 1e-3) {
		t.Errorf("across the run: %+v, %v", c, err)
	}
	d.FaceArea = math.Pi / 4
	if c, err := entry(t, "sea chest grating").Coefficient(d); err != nil || !near(c.Bore, 1, 1e-12) || !near(c.K, 1.207*1.207/0.25, 1e-12) {
		t.Errorf("grating: %+v, %v", c, err)
	}
	d.OpenArea, d.Hole, d.Pitch = math.NaN(), 0.005, 0.008
	byHoles, err := entry(t, "sea chest grating").Coefficient(d)
	d.OpenArea, _ = PerforatedShare(0.005, 0.008)
	d.Hole, d.Pitch = math.NaN(), math.NaN()
	byShare, err2 := entry(t, "sea chest grating").Coefficient(d)
	if err != nil || err2 != nil || byHoles != byShare {
		t.Errorf("by holes %+v, %v; by share %+v, %v", byHoles, err, byShare, err2)
	}
}

// Clean main sea strainers lose 0.03 to 0.10 bar at 2 to 2.5 m/s (common practice).
func TestStrainersAgainstPractice(t *testing.T) {
	for name, velocity := range map[string]float64{"basket strainer": 2.5, "duplex strainer": 2.2} {
		c, err := entry(t, name).Coefficient(BareDimensions(0.3, 0))
		bar := c.K * 1025 * velocity * velocity / 2 / 1e5
		if err != nil || !(0.03 <= bar && bar <= 0.10) {
			t.Errorf("%s: %.3f bar at %g m/s, %v", name, bar, velocity, err)
		}
		t.Logf("%s: K %.2f, %.3f bar at %g m/s", name, c.K, bar, velocity)
	}
}

func TestStrainerParts(t *testing.T) {
	s := Strainer{Bore: 0.2, OpenArea: 0.4, AreaRatio: 4, Mesh: math.NaN()}
	body, basket, err := s.Loss()
	// 8.758 of the sheet at a tenth of the pipe's velocity: 0.08758
	if err != nil || body != 1.5 || !near(basket, 0.08758, 1e-3) {
		t.Errorf("simplex: %g and %g, %v", body, basket, err)
	}
	s.Duplex = true
	f, _ := NewSteelFriction(0.2)
	if twin, _, err := s.Loss(); err != nil || !near(twin, 1.5+60*f, 1e-12) {
		t.Errorf("duplex: %g, %v", twin, err)
	}
	// Eaton strainer technical data: 40 mesh 1.2, 80 mesh 1.6, 325 mesh 2.5 times; half way between in between
	s.Duplex = false
	for mesh, factor := range map[float64]float64{40: 1.2, 80: 1.6, 325: 2.5, 50: 1.3, 150: 1.85, 0: 1} {
		s.Mesh = mesh
		b, k, err := s.Loss()
		if err != nil || !near(b+k, (body+basket)*factor, 1e-12) {
			t.Errorf("%g mesh: %g, %v", mesh, b+k, err)
		}
	}
	for _, bad := range []Strainer{
		{math.NaN(), 0.4, 4, 0, false}, {0.2, math.NaN(), 4, 0, false}, {0.2, 0.4, math.NaN(), 0, false}, {0.2, 0, 4, 0, false},
		{0.2, 0.4, 0.4, 0, false}, {0.2, 0.4, 51, 0, false}, {0.2, 0.4, 4, 39, false}, {0.2, 0.4, 4, 326, false}, {0.2, 0.4, 4, -1, false},
	} {
		refused(t, "strainer", func() (float64, error) { b, _, err := bad.Loss(); return b, err })
	}
}
