package study

import (
	"fmt"
	"math"
	"slices"

	"brinehead/pumps"
)

// TrimPicture is what the plots of a trim show, in SI, of the first of its pumps.
type TrimPicture struct {
	Pump           string
	Present, Final Trace
	First          Trace
	Points         Trace // digitised, of the present impeller where it is
	Low, High      Trace // of the methods, with the final diameter
	Systems        []Trace
	Duty           []DutyMark
	Power          []Trace // shaft power of one pump over its flow, W
	Motor          float64
	PowerMarks     []DutyMark // in the governing condition
}

// Picture returns what there is to plot; nil where there is no cut.
func (a *Trim) Picture() *TrimPicture {
	if a.Choice == nil {
		return nil
	}
	t := a.study
	i := t.pumps[0]
	u := t.base[0].built.Pumps[i]
	p := &TrimPicture{Pump: a.Pumps[0], Motor: u.Motor.Rating}
	final, first := float64(a.Choice.Final)/1e3, float64(a.Choice.First)/1e3
	curve := func(method string, d float64) (pumps.Pump, bool) {
		c, err := t.curve(method, d)
		v := u.Pump
		v.Curve = c
		return v, err == nil
	}
	central := pumps.ISO9906.String()
	if len(t.family) > 1 && t.family[0].Impeller <= final {
		central = neighboursMethod
	}
	heads := func(v pumps.Pump, name string) Trace {
		low, high := v.Range()
		return traceOf(name, low, high, func(q float64) float64 { h, _ := v.Head(q); return h })
	}
	p.Present = heads(u.Pump, fmt.Sprintf("%.5g mm now", t.present*1e3))
	for _, d := range u.Curve.Points {
		n := speedRatio(u.Pump)
		p.Points.Flow, p.Points.Value = append(p.Points.Flow, d.Flow*n), append(p.Points.Value, d.Head*n*n)
	}
	cut, _ := curve(central, final)
	p.Final = heads(cut, fmt.Sprintf("%.5g mm", final*1e3))
	if v, ok := curve(central, first); ok && first > final {
		p.First = heads(v, fmt.Sprintf("%.5g mm first", first*1e3))
	}
	low, high := cut.Range()
	over := func(pick func(a, b float64) float64) Trace {
		return traceOf("", low, high, func(q float64) float64 {
			worst := math.NaN()
			for _, r := range a.Results {
				v, ok := curve(r.Method, final)
				if !ok {
					continue
				}
				if from, to := v.Range(); !(from <= q && q <= to) {
					return math.NaN()
				}
				h, _ := v.Head(q)
				if math.IsNaN(worst) {
					worst = h
				}
				worst = pick(worst, h)
			}
			return worst
		})
	}
	p.Low, p.High = over(math.Min), over(math.Max)
	power := func(v pumps.Pump, name string) Trace {
		from, to := v.Range()
		return traceOf(name, from, to, func(q float64) float64 { return v.At(q, t.base[0].solved.Water.Density).ShaftPower })
	}
	p.Power = []Trace{power(u.Pump, p.Present.Name), power(cut, p.Final.Name)}
	if k := slices.IndexFunc(a.Options, func(o TrimOption) bool { return o.Option == "slower, one speed" }); k >= 0 && a.Options[k].Reason == "" {
		share := t.sharedSpeed()
		v := u.Pump
		if v.Speed == 0 {
			v.Speed = v.Curve.Speed
		}
		v.Speed *= share
		p.Power = append(p.Power, power(v, fmt.Sprintf("%.0f rpm", v.Speed)))
	}
	governing := ""
	for _, r := range a.Results {
		if r.Governs != nil && governing == "" {
			governing = r.Governs.Condition
		}
	}
	for k, c := range t.after {
		if c.solved == nil || !c.solved.Plant.Pumps[i].Running || !c.Pumps[i].Flow.Known() {
			continue
		}
		_, end := u.Range()
		demand, err := c.solved.SystemCurve(i, 0, end, picturePoints)
		if err != nil {
			continue
		}
		s := Trace{}
		if c.Condition == governing || governing == "" && k == 0 {
			s.Name = "governs: " + c.Condition
			p.Duty = append(p.Duty, DutyMark{p.Final.Name, float64(c.Pumps[i].Flow) / 3600, float64(c.Pumps[i].Head)})
			p.PowerMarks = append(p.PowerMarks, DutyMark{"end", float64(c.Pumps[i].Flow) / 3600, float64(c.Pumps[i].ShaftPower) * 1e3})
			if b := t.base[k].Pumps[i]; b.Flow.Known() {
				p.PowerMarks = append(p.PowerMarks, DutyMark{"now", float64(b.Flow) / 3600, float64(b.ShaftPower) * 1e3})
			}
		}
		for _, d := range demand {
			s.Flow, s.Value = append(s.Flow, d.Flow), append(s.Value, d.Head)
		}
		p.Systems = append(p.Systems, s)
	}
	return p
}
