package pumps

import (
	"math"
	"testing"
)

// The grades with what was read in a second source: class 1 and 2 of 1999 and flow and head of 3B.
func TestGrades(t *testing.T) {
	if n := len(Grades()); n != 8 {
		t.Errorf("%d grades, want six of 2012 and two of 1999", n)
	}
	for _, c := range []struct {
		name       string
		flow, head float64
	}{{"class 1", 0.045, 0.03}, {"class 2", 0.08, 0.05}, {"3b", 0.09, 0.07}, {" 2B ", 0.08, 0.05}, {"1B", 0.05, 0.03}} {
		g, err := FindGrade(c.name)
		if err != nil || !(math.Abs(g.Flow.Below-c.flow) < 1e-12) || !(math.Abs(g.Head.Above-c.head) < 1e-12) || g.Flow.Source == "" {
			t.Errorf("%s: %+v, %v", c.name, g, err)
		}
	}
	if g, err := FindGrade("1U"); err != nil || g.Flow.Below != 0 || !math.IsInf(g.Power.Below, 1) {
		t.Errorf("1U: %+v, %v", g, err)
	}
	if _, err := FindGrade("4B"); err == nil {
		t.Error("grade 4B is found")
	}
}

// The band touches the curve's cross of tolerances: at no flow only the head counts, on a steep part the flow.
func TestBand(t *testing.T) {
	g, err := FindGrade("2B")
	if err != nil {
		t.Fatal(err)
	}
	p := Pump{Curve: fullSheet(t, false)}
	head := func(q float64) float64 { h, _ := p.Head(q / 3600); return h }
	low, high := g.Band(p, 100/3600.0)
	if !(math.Abs(low-0.95*head(100)) < 1e-9) || !(math.Abs(high-1.05*head(100)) < 1e-9) {
		t.Errorf("flat part: %g to %g about %g", low, high, head(100))
	}
	low, high = g.Band(p, 500/3600.0)
	if !(math.Abs(low-head(500/0.92)) < 1e-9 || math.Abs(low-0.95*head(500)) < 1e-9) || !(math.Abs(high-head(500/1.08)) < 1e-9) || !(low < head(500) && high > head(500)) {
		t.Errorf("steep part: %g to %g about %g", low, high, head(500))
	}
	if low, high := g.Band(p, 600/3600.0); !math.IsNaN(low) || !math.IsNaN(high) {
		t.Errorf("beyond the sheet: %g to %g", low, high)
	}
}

func TestRegionsAndMargins(t *testing.T) {
	for nq, want := range map[float64]Region{30: {0.7, 1.2}, 87: {0.7, 1.2}, 95: {0.8, 1.2}, math.NaN(): {0.7, 1.2}} {
		if got := PreferredRegion(nq); got != want {
			t.Errorf("preferred region at %g: %v", nq, got)
		}
	}
	if AllowableRegion() != (Region{0.5, 1.25}) {
		t.Errorf("allowable region %v", AllowableRegion())
	}
	for _, c := range []struct {
		preferred     bool
		s             float64
		ratio, metres float64
	}{{true, 120, 1.1, 0.6}, {true, 150, 1.2, 1.0}, {false, 120, 1.2, 1.0}, {true, math.NaN(), 1.1, 0.6}} {
		if r, m := NPSHRule(c.preferred, c.s); r != c.ratio || m != c.metres {
			t.Errorf("%+v: %g, %g", c, r, m)
		}
	}
	for kW, want := range map[float64]float64{0.5: 1.35, 1: 1.35, 10: 1.20, 100: 1.10, 500: 1.10, math.Sqrt(1000): 1.15} {
		if got := MotorMargin(kW * 1e3); !(math.Abs(got-want) < 1e-9) {
			t.Errorf("motor margin at %g kW: %g, want %g", kW, got, want)
		}
	}
	if n := len(Practices()); n != 38 || len(PracticeNotes()) == 0 {
		t.Errorf("%d rules of practice", n)
	}
}

func TestMotor(t *testing.T) {
	if n := SynchronousSpeed(50, 4); n != 1500 {
		t.Errorf("50 Hz, 4 poles: %g rpm", n)
	}
	if n := SynchronousSpeed(60, 6); n != 1200 {
		t.Errorf("60 Hz, 6 poles: %g rpm", n)
	}
	for kW, want := range map[float64]float64{11: 0.02, 75: 0.01} {
		if s := Slip(kW * 1e3); !(math.Abs(s-want) < 1e-12) {
			t.Errorf("slip at %g kW: %g", kW, s)
		}
	}
	// Fox and McDonald, example 10.3, turned round: 33.9 A at 460 V, power factor 0.875, efficiency 0.90 give 28.5 hp (computed).
	m := Motor{Rating: 30e3, Volts: 460, Efficiency: 0.90, PowerFactor: 0.875}
	if i, why := m.Current(28.51 * 745.6998715822702); why != "" || !(math.Abs(i/33.9-1) < 1e-3) {
		t.Errorf("current %g A, %s", i, why)
	}
	for _, power := range []float64{10e3, math.NaN()} {
		if i, why := m.Current(power); !math.IsNaN(i) || why == "" {
			t.Errorf("at %g W: %g A", power, i)
		}
	}
	if i, why := (Motor{Rating: 30e3, Volts: math.NaN(), Efficiency: 0.9, PowerFactor: 0.9}).Current(20e3); !math.IsNaN(i) || why == "" {
		t.Errorf("without volts %g A", i)
	}
}

// The greatest power of a radial pump lies at run-out, of one whose power falls with flow at the start, and inside where it
// peaks; what the sheet ends with may go on.
func TestGreatestPower(t *testing.T) {
	sheet := func(power func(q float64) float64) *Curve {
		var points []SheetPoint
		for q := 0.0; q <= 1; q += 0.125 {
			points = append(points, SheetPoint{Flow: q, Head: 30 - 10*q, Efficiency: math.NaN(), Power: power(q), NPSHRequired: math.NaN()})
		}
		c, err := NewCurve(0, 0, points)
		if err != nil {
			t.Fatal(err)
		}
		return c
	}
	for _, c := range []struct {
		power func(float64) float64
		at    float64
		end   bool
	}{{func(q float64) float64 { return 20 + 10*q }, 1, true}, {func(q float64) float64 { return 30 - 10*q }, 0, false}, {func(q float64) float64 { return 30 - (q-0.6)*(q-0.6) }, 0.6, false}} {
		most, known := Pump{Curve: sheet(c.power)}.GreatestPower(1025)
		if !known || !(math.Abs(most.Flow-c.at) < 0.01) || most.AtEnd != c.end || !(math.Abs(most.Power-1.025*c.power(c.at)) < 0.01) {
			t.Errorf("%+v, want at %g", most, c.at)
		}
	}
	if _, known := (Pump{Curve: sheet(func(float64) float64 { return math.NaN() })}).GreatestPower(1000); known {
		t.Error("a power where none is given")
	}
}

func TestShutOffHead(t *testing.T) {
	c := pumpOf(t, PlainAffinity, 0.33, 0.33, 0.16)
	if h, known := (Pump{Curve: c, Speed: 1480 * 1.1}).ShutOffHead(); !known || !(math.Abs(h-34*1.21) < 1e-6) {
		t.Errorf("shut-off head %g, %v", h, known)
	}
	if _, known := (Pump{Curve: fullSheet(t, false)}).ShutOffHead(); known {
		t.Error("a sheet from 80 m3/h on shows a shut-off head")
	}
}
