package curves

import (
	"math"
	"testing"

	"brinehead/hydraulics"
	"brinehead/pumps"
)

// together is a plant of equal pumps, H = 40 - 1.2e-5 Q2 (m, m3/h) at full speed, side by side or one behind the other, on a system of
// 5 + 2e-5 Q2. The pipes have no length; all of the system's loss is one coefficient.
func together(t testing.TB, count int, series bool, speed float64) *Solved {
	t.Helper()
	var points []pumps.SheetPoint
	for q := 0.0; q <= 1500; q += 150 {
		nan := math.NaN()
		points = append(points, pumps.SheetPoint{Flow: q / 3600, Head: 40 - 1.2e-5*q*q, Efficiency: nan, Power: nan, NPSHRequired: nan})
	}
	c, err := pumps.NewCurve(0, 1000, points)
	if err != nil {
		t.Fatal(err)
	}
	p := coldWaterPlant(t)
	const bore = 0.4
	area := math.Pi * bore * bore / 4
	k := 2e-5 * 3600 * 3600 * 2 * 9.80665 * area * area
	p.Network.Points = []hydraulics.Point{{Name: "from", Fixed: true}, {Name: "to", Fixed: true, Head: 5}, {Name: "header"}}
	p.Network.Runs = []hydraulics.Run{{Name: "system", From: 2, To: 1, Pipe: hydraulics.Pipe{Bore: bore},
		Fittings: []hydraulics.Fitting{{Name: "system", Coefficient: hydraulics.Coefficient{K: k}}}}}
	from := 0
	for i := range count {
		to := 2
		if series && i < count-1 {
			p.Network.Points = append(p.Network.Points, hydraulics.Point{Name: "between"})
			to = len(p.Network.Points) - 1
		}
		p.Pumps = append(p.Pumps, Pump{Name: string(rune('A' + i)), From: from, To: to, Running: true, Pump: pumps.Pump{Curve: c, Speed: 1000 * speed}})
		if series {
			from = to
		}
	}
	p.Elevations = make([]float64, len(p.Network.Points))
	s, err := p.Solve()
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func coldWaterPlant(t testing.TB) *Plant {
	p := &Plant{Atmosphere: 101325}
	p.Water.Density, p.Water.DynamicViscosity = 1000, 1e-3
	return p
}

// Exact algebra: one pump runs at sqrt(35/3.2e-5) = 1045.825 m3/h and 26.875 m, two side by side deliver 1233.588 in all (each at half
// the flow), one at 0.9 of its speed 925.338 m3/h at 22.125 m; two in series meet 80 - 2.4e-5 Q2 = 5 + 2e-5 Q2 at sqrt(75/4.4e-5).
func TestPumpsTogether(t *testing.T) {
	for _, c := range []struct {
		name        string
		count       int
		series      bool
		speed       float64
		total, head float64 // m3/h of all, m of one pump
	}{
		{"one", 1, false, 1, 1045.82503, 26.875},
		{"two side by side", 2, false, 1, 1233.58791, 35.43478},
		{"one, slower", 1, false, 0.9, 925.33777, 22.125},
		{"two in series", 2, true, 1, math.Sqrt(75 / 4.4e-5), 40 - 1.2e-5*75/4.4e-5},
	} {
		s := together(t, c.count, c.series, c.speed)
		if total := s.RunFlows[0] * 3600; !(math.Abs(total/c.total-1) < 1e-6) {
			t.Errorf("%s: %.5f m3/h, want %.5f", c.name, total, c.total)
		}
		for i := range s.Plant.Pumps {
			want := c.total
			if !c.series {
				want /= float64(c.count)
			}
			if d := s.Duty(i); !(math.Abs(d.Head-c.head) < 1e-4) || !(math.Abs(d.Flow*3600/want-1) < 1e-6) {
				t.Errorf("%s: pump %d at %.5f m3/h, %.5f m; want %.5f, %.5f", c.name, i, d.Flow*3600, d.Head, want, c.head)
			}
		}
	}
}
