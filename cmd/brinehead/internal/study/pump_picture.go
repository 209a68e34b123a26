package study

import (
	"fmt"
	"math"

	"brinehead/pumps"
)

// SheetPicture is what the plots of a pump's sheet show, in SI. A value that is not known is NaN.
type SheetPicture struct {
	Title    string
	Own      Trace // the pump's own curve over its digitised range, at its speed
	Beyond   Trace // its continuation, which is no data
	Family   []Trace
	Points   []Trace // digitised points, one list a sheet
	Low      Trace   // band of the acceptance grade
	High     Trace
	Grade    string
	Levels   []Level // of one efficiency
	Bounds   []Bound
	Power    Trace // shaft power, W
	Motor    float64
	Greatest pumps.PowerPoint
}

// Trace is a named line.
type Trace struct {
	Name        string
	Flow, Value []float64
}

// Level joins the points of one efficiency on the curves of several diameters, on one side of the best.
type Level struct {
	Name  string
	Trace Trace
}

// Picture returns what there is to plot of a sheet.
func (s *PumpSheet) Picture(density float64) SheetPicture {
	u := s.pump
	low, high := u.Range()
	p := SheetPicture{Title: s.Pumps + ": " + s.Curve, Grade: s.Grade.Name, Motor: u.Motor.Rating}
	p.Own = traceOf(s.Pumps, low, high, func(q float64) float64 { h, _ := u.Head(q); return h })
	if u.Curve.Impeller > 0 {
		p.Own.Name = fmt.Sprintf("%.5g mm", u.Curve.Impeller*1e3)
	}
	p.Beyond = traceOf("", high, 1.1*high, func(q float64) float64 { h, _ := u.Head(q); return h })
	p.Low = traceOf("", low, high, func(q float64) float64 { l, _ := s.grade.Band(u.Pump, q); return l })
	p.High = traceOf("", low, high, func(q float64) float64 { _, h := s.grade.Band(u.Pump, q); return h })
	n := u.Pump
	n.Wear, n.Leakage = 0, 0
	for _, c := range s.family {
		n.Curve = c
		from, to := n.Range()
		t := traceOf(fmt.Sprintf("%.5g mm", c.Impeller*1e3), from, to, func(q float64) float64 { h, _ := n.Head(q); return h })
		if c != u.Curve {
			p.Family = append(p.Family, t)
		}
		r := 1.0
		if u.Speed > 0 && c.Speed > 0 {
			r = u.Speed / c.Speed
		}
		points := Trace{}
		for _, d := range c.Points {
			points.Flow, points.Value = append(points.Flow, d.Flow*r), append(points.Value, d.Head*r*r)
		}
		p.Points = append(p.Points, points)
	}
	p.Levels = s.levels()
	for _, r := range s.Regions {
		p.Bounds = append(p.Bounds, Bound{r.Name, float64(r.From) / 3600, true}, Bound{r.Name, float64(r.To) / 3600, false})
	}
	p.Power = traceOf("shaft power", low, high, func(q float64) float64 { return u.At(q, density).ShaftPower })
	p.Greatest, _ = u.GreatestPower(density)
	return p
}

func traceOf(name string, low, high float64, f func(float64) float64) Trace {
	x, y := trace(low, high, f)
	return Trace{name, x, y}
}

// levels finds the flows of even efficiencies on each curve of the family, on the pump's own where there is no other.
func (s *PumpSheet) levels() (levels []Level) {
	u := s.pump.Pump
	u.Wear, u.Leakage = 0, 0
	family := s.family
	if len(family) == 0 || len(family) == 1 {
		family = []*pumps.Curve{u.Curve}
	}
	for _, e := range []float64{0.5, 0.6, 0.7, 0.75, 0.8, 0.85} {
		for _, left := range []bool{true, false} {
			l := Level{Name: fmt.Sprintf("%.0f %%", 100*e)}
			for _, c := range family {
				u.Curve = c
				if q := flowOfEfficiency(u, e, left); !math.IsNaN(q) {
					h, _ := u.Head(q)
					l.Trace.Flow, l.Trace.Value = append(l.Trace.Flow, q), append(l.Trace.Value, h)
				}
			}
			if len(l.Trace.Flow) > 0 {
				levels = append(levels, l)
			}
		}
	}
	return levels
}

// flowOfEfficiency returns the flow left or right of the best at which a pump has an efficiency; NaN where it has it nowhere.
func flowOfEfficiency(u pumps.Pump, efficiency float64, left bool) float64 {
	best := u.BestEfficiencyFlow()
	low, high := u.Range()
	other := high
	if left {
		other = low
	}
	at := func(q float64) float64 { return u.At(q, 1000).Efficiency }
	if !(at(best) > efficiency && at(other) <= efficiency) {
		return math.NaN()
	}
	in, out := best, other
	for range 60 {
		if middle := (in + out) / 2; at(middle) > efficiency {
			in = middle
		} else {
			out = middle
		}
	}
	return in
}
