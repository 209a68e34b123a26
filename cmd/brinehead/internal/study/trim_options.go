package study

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/pumps"
)

// TrimOption is one way to the same duty: what it takes in each condition, and over a year.
type TrimOption struct {
	Option     string            `json:"option"`
	What       string            `json:"what"`
	Reason     string            `json:"reason"` // why it does not serve; empty where it does
	Conditions []OptionCondition `json:"conditions"`
	Energy     Figure            `json:"energy_kWh"` // of a year, at the motors' terminals
	CO2        Figure            `json:"co2_t"`
	Fuel       Figure            `json:"fuel_t"`
	Cost       Figure            `json:"cost"` // in the currency of the price
}

// OptionCondition is one way in one condition.
type OptionCondition struct {
	Condition string `json:"condition"`
	Setting   string `json:"setting"`
	Power     Figure `json:"shaft_power_kW"` // of all pumps, drive loss included
	Flow      Figure `json:"flow_m3h"`       // of all pumps
	Hours     Figure `json:"hours"`
	Reason    string `json:"reason"`
}

// Factor is a figure that turns energy into fuel, CO2 and money.
type Factor struct {
	Name   string `json:"name"`
	Value  Figure `json:"value"`
	Unit   string `json:"unit"`
	Source string `json:"source"`
}

// Defaults of the factors: common practice and rules from memory, all to be given by the user where they matter.
const (
	DefaultFuel            = 0.215 // kg/kWh at the consumer
	DefaultCO2             = 3.206 // kg/kg of marine gas oil
	defaultMotorEfficiency = 0.93
	driveEfficiency        = 0.97 // of a frequency converter
)

// options works out the other ways to the duty, and the energy of all.
func (t *trimStudy) options(a *Trim, o TrimOptions) {
	fuel, co2 := orElse(o.Fuel, DefaultFuel), orElse(o.CO2, DefaultCO2)
	source := func(given float64, text string) string {
		if given != 0 {
			return "as given"
		}
		return text
	}
	price := unknown
	if o.Price > 0 {
		price = Figure(o.Price)
	}
	a.Factors = []Factor{
		{"fuel for a kWh at the consumer", Figure(fuel), "kg/kWh", source(o.Fuel, "200 to 230 g/kWh on board (from memory, verify)")},
		{"CO2 for fuel burnt", Figure(co2), "kg/kg", source(o.CO2, "marine gas oil, IMO MEPC guidelines (from memory, verify)")},
		{"price of fuel", price, "a tonne", source(o.Price, "not given: no cost is worked out")},
		{"efficiency of a motor whose own is not given", defaultMotorEfficiency, "-", "about that of a 22 kW IE3 motor (from memory, verify)"},
		{"efficiency of a frequency converter", driveEfficiency, "-", "common practice"},
	}
	for k := range t.base {
		if !t.job.Tables.Conditions[k].Hours.Given {
			a.EnergyUnknown = "conditions.csv gives no hours for " + t.base[k].Condition + ": no energy of a year is worked out"
		}
	}
	a.Options = append(a.Options, t.option("as it stands", "no change", t.each(func(b *Condition) (*Condition, string, string) { return b, "", "" })))
	if a.Choice != nil {
		final := float64(a.Choice.Final) / 1e3
		a.Options = append(a.Options, t.option("trim", fmt.Sprintf("impeller of %.5g mm", final*1e3), t.each(func(b *Condition) (*Condition, string, string) {
			k := slices.Index(t.base, b)
			return t.after[k], "", ""
		})))
	}
	if !t.gated() {
		a.Notes = append(a.Notes, "no minimum flow or pressure is met as it stands: throttling, slower running and fewer pumps have nothing to keep, and are left out")
	} else {
		a.Options = append(a.Options, t.throttling(o.Valve), t.oneSpeed(), t.ownSpeeds(), t.fewerPumps())
	}
	for i := range a.Options {
		t.energy(&a.Options[i], a.EnergyUnknown, fuel, co2, o.Price)
	}
}

func orElse(x, other float64) float64 {
	if x == 0 {
		return other
	}
	return x
}

// gated says whether any gate is met as it stands, and none is broken.
func (t *trimStudy) gated() bool {
	met := false
	for _, c := range t.base {
		for _, f := range c.Findings {
			if slices.Contains(gates, f.Limit) {
				if f.Verdict == NotMet {
					return false
				}
				met = met || f.Verdict == Met
			}
		}
	}
	return met
}

// each works out one way in every condition; a condition that it does not serve gives the reason.
func (t *trimStudy) each(way func(b *Condition) (c *Condition, setting, reason string)) (list []OptionCondition) {
	for k, b := range t.base {
		o := OptionCondition{Condition: b.Condition, Power: unknown, Flow: unknown, Hours: Figure(t.job.Tables.Conditions[k].Hours.Value)}
		c, setting, reason := way(b)
		o.Setting, o.Reason = setting, reason
		if c != nil {
			o.Power, o.Flow = total(c)
			if !o.Power.Known() && o.Reason == "" {
				o.Reason = "the power of a running pump is not known"
			}
		}
		list = append(list, o)
	}
	return list
}

// total adds up shaft power and flow of the running pumps.
func total(c *Condition) (power, flow Figure) {
	for _, p := range c.Pumps {
		if p.Running {
			power, flow = power+p.ShaftPower, flow+p.Flow
		}
	}
	return power, flow
}

func (t *trimStudy) option(name, what string, conditions []OptionCondition) TrimOption {
	return TrimOption{Option: name, What: what, Conditions: conditions, Energy: unknown, CO2: unknown, Fuel: unknown, Cost: unknown}
}

// energy adds up a year.
func (t *trimStudy) energy(o *TrimOption, unknownWhy string, fuel, co2, price float64) {
	if unknownWhy != "" || o.Reason != "" {
		return
	}
	kWh := Figure(0)
	for _, c := range o.Conditions {
		if c.Hours != 0 {
			kWh += c.Hours * c.Power / Figure(t.motorEfficiency())
		}
	}
	if !kWh.Known() {
		for _, c := range o.Conditions {
			if !c.Power.Known() && c.Hours != 0 {
				o.Reason = fmt.Sprintf("not known in %s: %s", c.Condition, c.Reason)
				break
			}
		}
		return
	}
	o.Energy, o.Fuel, o.CO2 = kWh, kWh*Figure(fuel)/1e3, kWh*Figure(fuel*co2)/1e3
	if price > 0 {
		o.Cost = o.Fuel * Figure(price)
	}
}

// motorEfficiency returns that of the motors of the pumps to cut.
func (t *trimStudy) motorEfficiency() float64 {
	if e := t.base[0].built.Pumps[t.pumps[0]].Motor.Efficiency; !math.IsNaN(e) {
		return e
	}
	return defaultMotorEfficiency
}

// throttling shuts one valve as far as every gate of the condition bears.
func (t *trimStudy) throttling(tag string) TrimOption {
	o := t.option("throttling", "", nil)
	if tag == "" {
		tag = t.throttleValve()
	}
	if !slices.ContainsFunc(t.job.Openable(), func(v string) bool { return strings.EqualFold(v, tag) }) {
		o.Reason = "no tagged valve behind the pumps whose loss the catalogue knows at any opening"
		if tag != "" {
			o.Reason = tag + " is no tagged valve whose loss the catalogue knows at any opening; those are: " + strings.Join(t.job.Openable(), ", ")
		}
		return o
	}
	o.What = "valve " + tag + " as far shut as the limits of each condition bear"
	const shut = 0.05
	o.Conditions = t.each(func(b *Condition) (*Condition, string, string) {
		at := func(opening float64) (*Condition, error) {
			set := job.Override{Tag: job.Text{Value: tag}, Table: "fittings", Quantity: "opening", Number: job.Number{Value: opening, Given: true}}
			built, err := t.job.Build(b.Condition, set)
			if err != nil {
				return nil, err
			}
			c, _ := judged(t.job, t.limits, built, b.solved)
			return &c, nil
		}
		if !judgesGate(b) {
			return b, "as it is, no limit to go by", ""
		}
		keeps := func(opening float64) bool {
			c, err := at(opening)
			return err == nil && t.gateBroken(c) == nil
		}
		good, bad := t.presentOpening(b, tag), shut
		if !keeps(good) {
			return nil, "", "its limits are not kept as it stands"
		}
		for range 50 {
			if middle := (good + bad) / 2; keeps(middle) {
				good = middle
			} else {
				bad = middle
			}
		}
		c, err := at(good)
		if err != nil {
			return nil, "", err.Error()
		}
		return c, fmt.Sprintf("%.1f %% open", 100*good), ""
	})
	return o
}

// presentOpening returns how far a valve is open in a condition as it stands.
func (t *trimStudy) presentOpening(b *Condition, tag string) float64 {
	opening := 1.0
	for _, r := range t.job.Tables.Fittings {
		if strings.EqualFold(r.Tag.Value, tag) {
			opening = r.Opening.Or(opening)
		}
	}
	for _, o := range b.built.Row.Overrides {
		if o.Quantity == "opening" && o.Number.Given && strings.EqualFold(o.Tag.Value, tag) {
			opening = o.Number.Value
		}
	}
	return opening
}

// throttleValve finds the valve to throttle with: behind the first pump, the one that is throttled already, else the first.
func (t *trimStudy) throttleValve() string {
	open := t.job.Openable()
	for _, throttled := range []bool{true, false} {
		for _, b := range t.base {
			if b.solved == nil {
				continue
			}
			for _, run := range t.behind(b) {
				for _, f := range b.solved.Network.Runs[run].Fittings {
					if !slices.Contains(open, f.Tag) {
						continue
					}
					k := slices.IndexFunc(t.job.Tables.Fittings, func(r job.FittingRow) bool { return r.Tag.Value == f.Tag })
					if !throttled || t.job.Tables.Fittings[k].Opening.Given {
						return f.Tag
					}
				}
			}
		}
	}
	return ""
}

// behind returns the runs through which the water of the pumps goes on, nearest first.
func (t *trimStudy) behind(c *Condition) (runs []int) {
	n := c.solved.Network
	var points []int
	for _, i := range t.pumps {
		points = append(points, c.solved.Plant.Pumps[i].To)
	}
	for k := 0; k < len(points); k++ {
		for i, r := range n.Runs {
			const passes = 1e-9 // m3/s
			to := -1
			switch q := c.solved.RunFlows[i]; {
			case r.From == points[k] && q > passes:
				to = r.To
			case r.To == points[k] && q < -passes:
				to = r.From
			}
			if to < 0 || n.Points[points[k]].Fixed || slices.Contains(runs, i) {
				continue
			}
			runs = append(runs, i)
			if !slices.Contains(points, to) {
				points = append(points, to)
			}
		}
	}
	return runs
}

// slower returns a condition with the pumps at a share of their present speed.
func (t *trimStudy) slower(b *Condition, share float64) *Condition {
	built := b.built.Clone()
	for _, i := range t.pumps {
		u := &built.Pumps[i]
		n := u.Speed
		if n == 0 {
			n = u.Curve.Speed
		}
		u.Speed = n * share
	}
	c, _ := judged(t.job, t.limits, built, b.solved)
	return &c
}

const slowestShareOfSpeed = 0.4

// speedOf returns the pumps' speed in a condition, NaN where it is not known.
func (t *trimStudy) speedOf(b *Condition) float64 { return float64(b.Pumps[t.pumps[0]].Speed) }

// oneSpeed finds the one lower share of their speed that keeps every gate in every condition.
func (t *trimStudy) oneSpeed() TrimOption {
	o := t.option("slower, one speed", "", nil)
	if math.IsNaN(t.speedOf(t.base[0])) {
		o.Reason = "the speed of the pumps is not known"
		return o
	}
	share := t.sharedSpeed()
	o.What = fmt.Sprintf("%.1f %% of the present speed, by a frequency converter that loses %.0f %%", 100*share, 100*(1-driveEfficiency))
	o.Conditions = t.each(func(b *Condition) (*Condition, string, string) {
		return t.slower(b, share), t.speedText(b, share), ""
	})
	driven(o.Conditions)
	return o
}

// sharedSpeed returns the least share of the present speed that every condition bears.
func (t *trimStudy) sharedSpeed() float64 {
	return leastShare(func(x float64) bool {
		return !slices.ContainsFunc(t.base, func(b *Condition) bool { return t.gateBroken(t.slower(b, x)) != nil })
	})
}

// ownSpeeds finds the lowest speed of each condition.
func (t *trimStudy) ownSpeeds() TrimOption {
	o := t.option("slower, own speeds", "each condition at its lowest speed, by a frequency converter", nil)
	if math.IsNaN(t.speedOf(t.base[0])) {
		o.Reason = "the speed of the pumps is not known"
		return o
	}
	shared := t.sharedSpeed()
	o.Conditions = t.each(func(b *Condition) (*Condition, string, string) {
		if !judgesGate(b) { // as slow as the conditions that have limits bear together
			return t.slower(b, shared), t.speedText(b, shared) + ", no limit of its own", ""
		}
		share := leastShare(func(x float64) bool { return t.gateBroken(t.slower(b, x)) == nil })
		return t.slower(b, share), t.speedText(b, share), ""
	})
	driven(o.Conditions)
	return o
}

func (t *trimStudy) speedText(b *Condition, share float64) string {
	n := t.speedOf(b) * share
	text := fmt.Sprintf("%.0f rpm", n)
	for _, i := range t.pumps {
		if row := t.job.Tables.Pumps[i]; row.Frequency.Given {
			return text + fmt.Sprintf(", %.1f Hz", row.Frequency.Value*share)
		}
	}
	return text
}

// leastShare finds the least share of the present speed that is kept, by bisection; 1 where none below is.
func leastShare(keeps func(x float64) bool) float64 {
	good, bad := 1.0, slowestShareOfSpeed
	if keeps(bad) {
		return bad
	}
	for range 50 {
		if middle := (good + bad) / 2; keeps(middle) {
			good = middle
		} else {
			bad = middle
		}
	}
	return good
}

// driven adds the loss of the drive.
func driven(list []OptionCondition) {
	for i := range list {
		list[i].Power /= driveEfficiency
	}
}

// fewerPumps takes pumps out of each condition as long as every gate is kept and every pump stays on its curve.
func (t *trimStudy) fewerPumps() TrimOption {
	o := t.option("fewer pumps", "each condition with as few pumps as keep its limits", nil)
	o.Conditions = t.each(func(b *Condition) (*Condition, string, string) {
		best, names := b, runningNames(b)
		if !judgesGate(b) {
			return b, strings.Join(names, " ") + ", no limit to go by", ""
		}
		for {
			found := false
			for _, leave := range names {
				rest := slices.DeleteFunc(slices.Clone(names), func(n string) bool { return n == leave })
				if len(rest) == 0 {
					break
				}
				built, err := t.job.BuildVaried(b.Condition, pumps.ISO9906, func(row *job.ConditionRow) { run(row, rest) })
				if err != nil {
					continue
				}
				c, _ := judged(t.job, t.limits, built, nil)
				if c.solved != nil && t.gateBroken(&c) == nil && !slices.ContainsFunc(c.Pumps, func(p Pump) bool { return p.Extrapolated }) && suctionKept(&c) {
					best, names, found = &c, rest, true
					break
				}
			}
			if !found {
				return best, strings.Join(names, " "), ""
			}
		}
	})
	return o
}

// judgesGate says whether a condition has a gate that is met.
func judgesGate(c *Condition) bool {
	return slices.ContainsFunc(c.Findings, func(f Finding) bool { return slices.Contains(gates, f.Limit) && f.Verdict == Met })
}

// suctionKept says whether every NPSH rule is met.
func suctionKept(c *Condition) bool {
	for _, f := range c.Findings {
		if strings.HasPrefix(f.Limit, "NPSH") && f.Verdict != Met {
			return false
		}
	}
	return true
}

func runningNames(c *Condition) (names []string) {
	for _, p := range c.Pumps {
		if p.Running {
			names = append(names, p.Pump)
		}
	}
	return names
}
