package plots

import (
	"bytes"
	"math"
	"strings"
	"testing"
)

// The family's plotted data: the band ends where either edge is unknown, the other diameters are thin, what is beyond is dotted, a level of
// one efficiency has a tick at each diameter.
func TestFamilyChartData(t *testing.T) {
	nan := math.NaN()
	x := []float64{0, 0.05, 0.1}
	c := FamilyChart{Title: "job: P1", Own: PumpLine{Line: Line{"300 mm", x, []float64{30, 28, 20}}, Beyond: []Line{{"", []float64{0.1, 0.11}, []float64{20, 18}}}},
		Family: []Line{{"285 mm", x, []float64{27, 25, 17}}}, Digitised: []Line{{"", x, []float64{30.1, 27.9, 20}}},
		Band:   Band{"grade 2B", Line{"", x, []float64{28.5, 26, nan}}, Line{"", x, []float64{31.5, 29.5, 22}}},
		Levels: []Line{{"70 %", []float64{0.06, 0.055}, []float64{27, 24}}}, Bounds: []Bound{{"preferred", 0.03, true}}}
	f := c.figure()
	if len(f.bands) != 1 || len(f.bands[0].points) != 4 {
		t.Fatalf("band of %+v", f.bands)
	}
	if top := f.bands[0].points[1]; !(math.Abs(top.X-180) < 1e-9) || top.Y != 29.5 {
		t.Errorf("second point of the band %+v", top)
	}
	weights := map[string]weight{}
	rings, ticks, dotted := 0, 0, 0
	for _, s := range f.strokes {
		weights[s.name] = s.weight
		if s.rings {
			rings++
		}
		if s.ticks {
			ticks++
		}
		if s.weight == beyond {
			dotted++
		}
	}
	if weights["300 mm"] != given || weights["285 mm"] != asked || weights["70 %"] != edged || weights["grade 2B"] != edged || ticks != 1 || dotted != 1 || rings != 2 {
		t.Errorf("%v, %d rings, %d ticks, %d dotted", weights, rings, ticks, dotted)
	}
	for _, format := range []Format{SVG, PNG, PDF} {
		var a, b bytes.Buffer
		if err := c.Write(&a, format, Size{}); err != nil {
			t.Fatal(err)
		}
		if err := c.Write(&b, format, Size{}); err != nil {
			t.Fatal(err)
		}
		if a.Len() == 0 || !bytes.Equal(a.Bytes(), b.Bytes()) {
			t.Errorf("%s: %d bytes, not the same twice", format, a.Len())
		}
		if format == SVG {
			for _, says := range []string{"300 mm", "285 mm", "70 %", "grade 2B", "preferred"} {
				if !strings.Contains(a.String(), says) {
					t.Errorf("no %q", says)
				}
			}
		}
	}
}

func TestPowerChartData(t *testing.T) {
	c := PowerChart{Units: Units{HeadName: "kW", HeadFactor: 1e-3}, Power: []Line{{"shaft power", []float64{0.02, 0.1}, []float64{20e3, 35e3}}}, Motor: 45e3,
		Marks: []Mark{{Label: "greatest 35 kW", Flow: 0.1, Value: 35e3}}}
	f := c.figure()
	motor := f.strokes[1]
	if motor.name != "motor" || motor.points[1].X != 360 || motor.points[1].Y != 45 || f.marks[0].Value != 35 {
		t.Errorf("%+v, %+v", motor, f.marks)
	}
	c.Motor = math.NaN()
	if f := c.figure(); len(f.strokes) != 1 {
		t.Errorf("a motor that is not known is drawn: %+v", f.strokes)
	}
}
