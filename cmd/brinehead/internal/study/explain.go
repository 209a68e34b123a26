package study

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"

	"gonum.org/v1/gonum/stat/distuv"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/curves"
	"brinehead/fluids"
	"brinehead/hydraulics"
)

// Explanation says what one fault at a time would explain the difference of the readings from the calculation, each sized by least
// squares, the best first.
type Explanation struct {
	Readings   int      `json:"readings"`    // that have weight
	ChiSquared Figure   `json:"chi_squared"` // of the calculation as it stands
	Limit      Figure   `json:"limit"`       // under which readings agree with it 19 times in 20
	Faults     []Fault  `json:"faults"`
	Verdict    string   `json:"verdict"`    // in words
	Rows       []Fitted `json:"calibrated"` // measured, calculated, and with the best fault; never one without the others
}

// Fault is one thing that may be wrong.
type Fault struct {
	Name        string `json:"fault"`
	Size        string `json:"size"` // in words
	ChiSquared  Figure `json:"chi_squared"`
	Alike       bool   `json:"cannot_be_told_from_the_best"`
	Implausible string `json:"implausible"` // why its size is hard to believe; empty where it is not
	Tell        string `json:"tell"`        // the reading that would tell it from the best; empty where none is needed or none would

	predicted []float64
	solved    *curves.Solved
}

// Fitted is one reading beside the calculation and the best fault.
type Fitted struct {
	Reading    string `json:"reading"`
	Unit       string `json:"unit"`
	Measured   Figure `json:"measured"`
	Calculated Figure `json:"calculated"`
	Calibrated Figure `json:"with_the_best_fault"`
}

// observation is a reading as the model predicts it: in SI, with its standard uncertainty.
type observation struct {
	name, unit string
	scale      float64 // unit over SI
	value      float64
	sigma      float64
	predict    func(s *curves.Solved) float64
}

// trial is a fault that can be tried at a size.
type trial struct {
	name        string
	low, high   float64 // sizes searched
	logarithmic bool
	apply       func(c *job.Case, size float64)
	words       func(size float64) string
	believable  [2]float64
}

// observations lists the readings of the bench that the model can predict.
func (b *bench) observations() (list []observation) {
	c := b.condition
	weight := c.built.Water.Density * fluids.Gravity
	add := func(r reading, unit string, scale, value, uncertainty float64, predict func(s *curves.Solved) float64) {
		if uncertainty > 0 {
			list = append(list, observation{r.name(), unit, scale, value, uncertainty / 2, predict})
		}
	}
	for _, r := range b.rows {
		switch r.quantity {
		case "suction gauge", "discharge gauge":
			if point := b.gaugePoint(r); point >= 0 {
				z := b.elevation(r, point)
				add(r, "bar", 1e-5, r.Value.Value, r.uncertainty, func(s *curves.Solved) float64 { return s.GaugePressure(point) + (s.Elevations[point]-z)*weight })
			}
		case "flow", "velocity":
			pump := slices.IndexFunc(c.built.Pumps, func(u curves.Pump) bool { return sameName(u.Name, r.On.Value) })
			run := b.runOf(r.On.Value)
			switch {
			case r.quantity == "flow" && pump >= 0:
				add(r, "m3/h", 3600, r.Value.Value, r.uncertainty, func(s *curves.Solved) float64 { return s.PumpFlows[pump] })
			case run >= 0 && r.quantity == "flow":
				add(r, "m3/h", 3600, r.Value.Value, r.uncertainty, func(s *curves.Solved) float64 { return s.RunFlows[run] })
			case run >= 0:
				add(r, "m/s", 1, r.Value.Value, r.uncertainty, func(s *curves.Solved) float64 { return s.RunFlows[run] / s.Network.Runs[run].Pipe.Area() })
			}
		case "differential":
			run := b.runOf(r.On.Value)
			if run < 0 {
				continue
			}
			k := slices.IndexFunc(c.built.Network.Runs[run].Fittings, func(f hydraulics.Fitting) bool { return sameName(f.Tag, r.On.Value) })
			if k >= 0 {
				add(r, "bar", 1e-5, r.Value.Value, r.uncertainty, func(s *curves.Solved) float64 {
					return s.Network.Runs[run].FittingLoss(k, s.RunFlows[run], s.Network.Viscosity) * weight
				})
			}
		}
	}
	for i, u := range c.built.Pumps {
		if power := b.shaftPower(u); u.Running && power.Value.Known() {
			r := reading{}
			r.Quantity.Value, r.On.Value = "shaft power", u.Name
			add(r, "kW", 1e-3, float64(power.Value), float64(power.Uncertainty), func(s *curves.Solved) float64 { return s.Duty(i).ShaftPower })
		}
	}
	return list
}

// gaugePoint finds the point a gauge is on, -1 for none.
func (b *bench) gaugePoint(r reading) int {
	c := b.condition
	for _, u := range c.built.Pumps {
		if sameName(u.Name, r.On.Value) {
			if r.quantity == "discharge gauge" {
				return u.To
			}
			return u.From
		}
	}
	return slices.IndexFunc(c.built.Network.Points, func(p hydraulics.Point) bool { return sameName(p.Name, r.On.Value) })
}

// trials lists the faults of the plant: strainers blocked, coolers and valves that lose more, pumps worn, leaking within or off their
// speed, pipes rougher.
func (b *bench) trials() (list []trial) {
	c := b.condition
	for k, r := range c.built.Network.Runs {
		for i, f := range r.Fittings {
			name := f.Tag
			if name == "" || r.Shut {
				continue
			}
			lower := strings.ToLower(f.Name)
			factor := func(kind string, believable float64) trial {
				return trial{kind + " " + name + " loses more", 0.2, 30, true, func(c *job.Case, x float64) { scaleLoss(&c.Network.Runs[k].Fittings[i], x) },
					func(x float64) string { return fmt.Sprintf("%.2f times its loss", x) }, [2]float64{0.8, believable}}
			}
			switch {
			case strings.Contains(lower, "strainer"):
				list = append(list, trial{"strainer " + name + " is blocked", 0, 0.97, false, func(c *job.Case, x float64) { c.Network.Runs[k].Fittings[i].Blockage = x },
					func(x float64) string { return fmt.Sprintf("%.0f %% of its open area", 100*x) }, [2]float64{0, 0.9}})
			case strings.Contains(lower, "cooler") || strings.Contains(lower, "exchanger"):
				list = append(list, factor("cooler", 4))
			case strings.Contains(lower, "valve"):
				list = append(list, factor("valve", 10))
			}
		}
	}
	for i, u := range c.built.Pumps {
		if !u.Running {
			continue
		}
		list = append(list, trial{"pump " + u.Name + " is worn", 0, 0.5, false, func(c *job.Case, x float64) { c.Pumps[i].Wear = x },
			func(x float64) string { return fmt.Sprintf("%.1f %% of the head lost", 100*x) }, [2]float64{0, 0.25}})
		if !math.IsNaN(u.BestEfficiencyFlow()) {
			list = append(list, trial{"pump " + u.Name + " leaks within", 0, 0.5, false, func(c *job.Case, x float64) { c.Pumps[i].Leakage = x },
				func(x float64) string { return fmt.Sprintf("%.1f %% of best-efficiency flow", 100*x) }, [2]float64{0, 0.2}})
		}
		if n := orElse(u.Speed, u.Curve.Speed); n > 0 {
			list = append(list, trial{"pump " + u.Name + " is off its speed", 0.7, 1.15, false, func(c *job.Case, x float64) { c.Pumps[i].Speed = n * x },
				func(x float64) string { return fmt.Sprintf("%.0f rpm, %+.1f %%", n*x, 100*(x-1)) }, [2]float64{0.96, 1.03}})
		}
	}
	return append(list, trial{"the pipes are rougher", 0.1, 100, true, func(c *job.Case, x float64) {
		for k := range c.Network.Runs {
			c.Network.Runs[k].Pipe.Roughness *= x
		}
	}, func(x float64) string { return fmt.Sprintf("%.2g times the roughness", x) }, [2]float64{0.3, 10}})
}

// explain sizes every fault to the readings and ranks them; nil where there are too few readings, or no solution.
func (b *bench) explain() *Explanation {
	c := b.condition
	seen := b.observations()
	if c.solved == nil || c.unknownWhy() != "" || len(seen) < 2 {
		return nil
	}
	e := &Explanation{Readings: len(seen), Limit: Figure(distuv.ChiSquared{K: float64(len(seen))}.Quantile(0.95))}
	now := predicted(c.solved, seen)
	e.ChiSquared = Figure(chiSquared(seen, now, -1))
	if e.ChiSquared <= e.Limit {
		e.Verdict = "the readings agree with the calculation within their uncertainties: there is nothing to explain"
		e.Rows = fittedRows(seen, now, nil)
		return e
	}
	for _, t := range b.trials() {
		if f, ok := b.size(t, seen); ok {
			e.Faults = append(e.Faults, f)
		}
	}
	for k, o := range seen { // a wrong gauge: it alone is left out, and its offset is what it departs by
		offset := o.value - now[k]
		e.Faults = append(e.Faults, Fault{Name: o.name + " reads wrong", Size: fmt.Sprintf("by %+.3g %s", offset*o.scale, o.unit), ChiSquared: Figure(chiSquared(seen, now, k)), predicted: now, solved: c.solved})
	}
	slices.SortStableFunc(e.Faults, func(x, y Fault) int { return cmp.Compare(x.ChiSquared, y.ChiSquared) })
	best := &e.Faults[0]
	const oneParameter = 3.84 // chi-square of one degree that is passed once in twenty
	var alike []string
	for i := range e.Faults[1:] {
		f := &e.Faults[i+1]
		if f.Alike = f.ChiSquared-best.ChiSquared < oneParameter; f.Alike {
			f.Tell = b.tell(best, f, seen)
			alike = append(alike, f.Name)
		}
	}
	left := Figure(distuv.ChiSquared{K: math.Max(float64(len(seen)-1), 1)}.Quantile(0.95))
	switch {
	case best.ChiSquared > left:
		e.Verdict = fmt.Sprintf("no single fault explains the readings; nearest is: %s, %s (chi-square %.3g, at most %.3g)", best.Name, best.Size, float64(best.ChiSquared), float64(left))
	case alike != nil:
		e.Verdict = fmt.Sprintf("%s (%s) explains the readings best, but cannot be told apart from: %s", best.Name, best.Size, strings.Join(alike, "; "))
	default:
		e.Verdict = fmt.Sprintf("%s (%s) explains the readings, and nothing else does as well", best.Name, best.Size)
	}
	if best.Implausible != "" {
		e.Verdict += "; " + best.Implausible
	}
	e.Rows = fittedRows(seen, now, best.predicted)
	const shown = 8
	e.Faults = e.Faults[:min(len(e.Faults), shown)]
	return e
}

func predicted(s *curves.Solved, seen []observation) []float64 {
	list := make([]float64, len(seen))
	for k, o := range seen {
		list[k] = o.predict(s)
	}
	return list
}

// chiSquared sums the squares of the departures over their standard uncertainties; one observation may be left out.
func chiSquared(seen []observation, predicted []float64, but int) float64 {
	sum := 0.0
	for k, o := range seen {
		if k != but {
			d := (o.value - predicted[k]) / o.sigma
			sum += d * d
		}
	}
	return sum
}

func fittedRows(seen []observation, now, best []float64) (rows []Fitted) {
	for k, o := range seen {
		r := Fitted{o.name, o.unit, Figure(o.value * o.scale), Figure(now[k] * o.scale), unknown}
		if best != nil {
			r.Calibrated = Figure(best[k] * o.scale)
		}
		rows = append(rows, r)
	}
	return rows
}

// size finds the size of a fault that fits best: a coarse search, then golden section about the best of it. A size at which the
// plant has no sound solution counts as none.
func (b *bench) size(t trial, seen []observation) (f Fault, ok bool) {
	at := func(u float64) (float64, []float64, *curves.Solved) { // u from 0 to 1
		built := b.condition.built.Clone()
		t.apply(built, t.at(u))
		s, err := built.SolveNear(b.condition.solved)
		if err != nil {
			return math.Inf(1), nil, nil
		}
		for i, p := range s.Plant.Pumps {
			if d := s.Duty(i); p.Running && d.Extrapolated {
				return math.Inf(1), nil, nil
			}
		}
		p := predicted(s, seen)
		return chiSquared(seen, p, -1), p, s
	}
	const steps = 24
	best, least := -1, math.Inf(1)
	for k := range steps + 1 {
		if x, _, _ := at(float64(k) / steps); x < least {
			best, least = k, x
		}
	}
	if best < 0 {
		return f, false
	}
	low, high := math.Max(float64(best-1)/steps, 0), math.Min(float64(best+1)/steps, 1)
	const golden = 0.6180339887498949
	a, c := high-golden*(high-low), low+golden*(high-low)
	fa, _, _ := at(a)
	fc, _, _ := at(c)
	for range 40 {
		if fa < fc {
			high, c, fc = c, a, fa
			a = high - golden*(high-low)
			fa, _, _ = at(a)
		} else {
			low, a, fa = a, c, fc
			c = low + golden*(high-low)
			fc, _, _ = at(c)
		}
	}
	u := (low + high) / 2
	x, p, s := at(u)
	if math.IsInf(x, 1) {
		return f, false
	}
	size := t.at(u)
	f = Fault{Name: t.name, Size: t.words(size), ChiSquared: Figure(x), predicted: p, solved: s}
	if size < t.believable[0] || size > t.believable[1] {
		f.Implausible = "so much is hard to believe"
	}
	return f, true
}

// at returns the size at a share of the way from the least to the greatest.
func (t trial) at(u float64) float64 {
	if t.logarithmic {
		return t.low * math.Pow(t.high/t.low, u)
	}
	return t.low + u*(t.high-t.low)
}

// tell finds the reading that would tell two faults apart: of those not taken, the one whose predictions differ most over the
// uncertainty it usually has.
func (b *bench) tell(best, other *Fault, seen []observation) string {
	taken := func(name string) bool {
		return slices.ContainsFunc(seen, func(o observation) bool { return sameName(o.name, name) })
	}
	weight := b.condition.built.Water.Density * fluids.Gravity
	name, most := "", 2.0 // standard uncertainties: less tells nothing
	try := func(what string, uncertainty float64, value func(s *curves.Solved) float64) {
		x, y := value(best.solved), value(other.solved)
		if d := math.Abs(x-y) / (uncertainty / 2); d > most && !taken(what) {
			name, most = what, d
		}
	}
	for i, u := range best.solved.Plant.Pumps {
		if !u.Running {
			continue
		}
		try("suction gauge of "+u.Name, gaugeDefault, func(s *curves.Solved) float64 { return s.GaugePressure(u.From) })
		try("discharge gauge of "+u.Name, gaugeDefault, func(s *curves.Solved) float64 { return s.GaugePressure(u.To) })
		try("flow of "+u.Name, flowDefault*best.solved.PumpFlows[i], func(s *curves.Solved) float64 { return s.PumpFlows[i] })
		try("shaft power of "+u.Name, powerDefault*best.solved.Duty(i).ShaftPower, func(s *curves.Solved) float64 { return s.Duty(i).ShaftPower })
		if n := orElse(u.Speed, u.Curve.Speed); n > 0 {
			try("speed of "+u.Name, 0.01*n, func(s *curves.Solved) float64 { return orElse(s.Plant.Pumps[i].Speed, s.Plant.Pumps[i].Curve.Speed) })
		}
	}
	for k, r := range best.solved.Network.Runs {
		for i, f := range r.Fittings {
			if f.Tag != "" && !r.Shut {
				try("differential of "+f.Tag, dropDefault, func(s *curves.Solved) float64 {
					return s.Network.Runs[k].FittingLoss(i, s.RunFlows[k], s.Network.Viscosity) * weight
				})
			}
		}
	}
	if name == "" {
		return "no usual reading would tell it from the best"
	}
	return name + " would tell it from the best"
}
