package study

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"gonum.org/v1/gonum/stat/distuv"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/curves"
	"brinehead/fluids"
)

// ReadingsOptions says how readings are to be taken.
type ReadingsOptions struct {
	Conditions []string // only these; every condition with readings where empty
	Grade      string   // tolerance of a pump's head, of GradeNames; 2B where empty
	Version    string

	// Of the motors, for their current or power: V between phases, and fractions; 0 where not known.
	Volts, PowerFactor, MotorEfficiency float64
}

// Readings is the answer to `readings`: what gauges and meters say of each pump, beside the calculation.
//
// Every uncertainty is plus or minus at about 95 % (twice the standard uncertainty), those of independent readings combined as
// the root of the sum of squares (JCGM 100:2008, 5.1.2, from memory).
type Readings struct {
	Job        string              `json:"job"`
	Version    string              `json:"version"`
	Grade      Grade               `json:"grade"`
	Conditions []ConditionReadings `json:"conditions"`
}

// ConditionReadings is one condition with readings.
type ConditionReadings struct {
	Condition string         `json:"condition"`
	NotKnown  string         `json:"not_known"` // why the calculation has no figures; empty where it has
	Pumps     []PumpReadings `json:"pumps"`
	Gauges    []GaugeReading `json:"gauges"`
	Unused    []string       `json:"unused"`      // readings that say nothing here, with the reason
	Explained *Explanation   `json:"explanation"` // null where there are too few readings, or no figures
}

// Measured is a figure with its uncertainty.
type Measured struct {
	Value       Figure `json:"value"`
	Uncertainty Figure `json:"uncertainty"`
}

// PumpReadings is what readings say of one running pump.
type PumpReadings struct {
	Pump       string         `json:"pump"`
	Calculated Pump           `json:"calculated"`
	Head       *HeadReading   `json:"head"` // nil without both gauges
	Estimates  []FlowEstimate `json:"flows"`
	Mean       Measured       `json:"mean_flow_m3h"` // weighted by the inverse squares of the uncertainties; without an outlier, and none of readings that disagree
	Agreement  Agreement      `json:"agreement"`
	Curve      CurveVerdict   `json:"curve"`
	ShaftPower Measured       `json:"shaft_power_kW"` // as measured; not known where nothing measures it
	Efficiency Measured       `json:"efficiency"`     // of the pump: rho g Q H over the shaft power, at the mean of the flows that do not rest on its curve
}

// HeadReading is a pump's total head from its gauges,
//
//	H = (pd - ps)/(rho g) + (zd - zs) + (vd2 - vs2)/2g
//
// (ISO 9906:2012, from memory), pressures gauge and below 0 for a vacuum, z the elevations of the gauges, v the velocities in
// the bores of the tappings, which are those of the runs at the pump's flanges.
type HeadReading struct {
	Lines       []HeadLine `json:"lines"`
	AtFlow      Figure     `json:"at_flow_m3h"` // at which the velocity heads are taken
	Head        Measured   `json:"head_m"`
	still, perQ float64    // head = still + perQ Q2
}

// HeadLine is one line of the working.
type HeadLine struct {
	What        string `json:"what"`
	Unit        string `json:"unit"`
	Value       Figure `json:"value"`
	Uncertainty Figure `json:"uncertainty"`
}

// FlowEstimate is a pump's flow as one kind of reading has it.
type FlowEstimate struct {
	By    string `json:"by"`
	Flow  Figure `json:"flow_m3h"`
	Low   Figure `json:"low_m3h"`
	High  Figure `json:"high_m3h"`
	Curve bool   `json:"rests_on_curve"` // read off the pump's own curve: it cannot say whether the pump is on it
	Note  string `json:"note"`

	Shared bool `json:"by_calculated_share"` // of a run that carries other water too: it rests on the calculation

	uncertainty float64 // m3/h; NaN where a bound is not known, and then the estimate has no weight
}

// Agreement says whether the estimates of a flow agree, by the sum of the squares of their departures from the mean over their
// standard uncertainties, which for estimates that agree stays under the limit 19 times in 20 (chi-square with one degree
// less than there are estimates).
type Agreement struct {
	Estimates  int     `json:"estimates"` // that have weight
	ChiSquared Figure  `json:"chi_squared"`
	Limit      Figure  `json:"limit"`
	Verdict    Verdict `json:"verdict"`
	Outlier    string  `json:"outlier"` // the one without which the others agree; empty for none
}

// CurveVerdict says whether a pump stands on its curve, within the grade's tolerance of head.
type CurveVerdict struct {
	Flow      Measured `json:"flow_m3h"` // mean of the estimates that do not rest on the curve
	CurveHead Figure   `json:"curve_head_m"`
	Departure Measured `json:"departure"` // measured head over that of the curve, less 1
	Verdict   Verdict  `json:"verdict"`
	Reason    string   `json:"reason"`
}

// GaugeReading is a gauge beside the calculation. Where nothing moves it is a check of the gauge itself.
type GaugeReading struct {
	Gauge      string   `json:"gauge"`
	On         string   `json:"on"`
	Elevation  Figure   `json:"elevation_m"`
	Read       Measured `json:"read_bar"`
	Calculated Figure   `json:"calculated_bar"`
	Difference Figure   `json:"difference_bar"` // read less calculated
	AtRest     bool     `json:"at_rest"`
	Verdict    Verdict  `json:"verdict"` // of a gauge at rest; not judged for one where water moves
	Reason     string   `json:"reason"`
}

// Uncertainties that stand in for those a row does not give (common practice): gauges of class 1.6 to 6 bar, a clamp-on meter
// with good straight lengths, power from a meter or from current.
const (
	gaugeDefault    = 0.1e5 // Pa
	dropDefault     = 0.05e5
	flowDefault     = 0.05 // of the flow
	powerDefault    = 0.05
	currentDefault  = 0.08
	widestFlowShare = 0.08 // of the flow: what ISO 9906:2012, grade 2B, leaves it (from memory); a band wider than that decides nothing
)

// reading is a row, its uncertainty settled.
type reading struct {
	job.ReadingRow
	quantity    string
	uncertainty float64
	supposed    bool // the row gives none
}

func readingOf(row job.ReadingRow) reading {
	r := reading{ReadingRow: row, quantity: strings.ToLower(row.Quantity.Value)}
	if row.Uncertainty.Given {
		r.uncertainty = row.Uncertainty.Value
		return r
	}
	r.supposed = true
	size := math.Abs(row.Value.Value)
	r.uncertainty = map[string]float64{"suction gauge": gaugeDefault, "discharge gauge": gaugeDefault, "differential": dropDefault, "flow": flowDefault * size,
		"velocity": flowDefault * size, "shaft power": powerDefault * size, "motor power": powerDefault * size, "motor current": currentDefault * size}[r.quantity]
	return r
}

// name is the reading as messages have it.
func (r reading) name() string { return r.Quantity.Value + " of " + r.On.Value }

// Read works the readings of a job. The error is job.Faults, or names a flag.
func Read(j *job.Job, o ReadingsOptions) (*Readings, error) {
	grade, err := GradeNamed(o.Grade)
	if err != nil {
		return nil, err
	}
	a := &Readings{Job: j.Name, Version: o.Version, Grade: grade}
	if len(j.Tables.Readings) == 0 {
		return nil, fmt.Errorf("readings.csv: found no readings, want gauges or meters read in a condition")
	}
	for _, name := range o.Conditions {
		if !holds(j.Conditions(), name) {
			_, err := j.Build(name)
			return nil, err
		}
	}
	for _, name := range chosen(j.Conditions(), o.Conditions) {
		var rows []reading
		for _, row := range j.Tables.Readings {
			if sameName(row.Condition.Value, name) {
				rows = append(rows, readingOf(row))
			}
		}
		if rows == nil {
			continue
		}
		check, err := Checked(j, []string{name}, o.Version)
		if err != nil {
			return nil, err
		}
		b := bench{job: j, condition: &check.Conditions[0], rows: rows, options: o, grade: grade, used: map[int]bool{}}
		a.Conditions = append(a.Conditions, b.read())
	}
	if a.Conditions == nil {
		return nil, fmt.Errorf("readings.csv: found no readings in %s, want some in a condition asked for", quotedNames(o.Conditions))
	}
	return a, nil
}

func quotedNames(names []string) string { return `"` + strings.Join(names, `", "`) + `"` }

// Met says whether every pump stands on its curve, all estimates agree, and every gauge at rest reads true.
func (a *Readings) Met() bool {
	for _, c := range a.Conditions {
		for _, p := range c.Pumps {
			if p.Curve.Verdict != Met || p.Agreement.Verdict == NotMet {
				return false
			}
		}
		for _, g := range c.Gauges {
			if g.AtRest && g.Verdict != Met {
				return false
			}
		}
	}
	return true
}

// bench works the readings of one condition.
type bench struct {
	job       *job.Job
	condition *Condition
	rows      []reading
	options   ReadingsOptions
	grade     Grade
	used      map[int]bool
	idle      map[int]string // why a reading says nothing
}

func (b *bench) read() ConditionReadings {
	c := b.condition
	b.idle = map[int]string{}
	out := ConditionReadings{Condition: c.Condition, NotKnown: c.unknownWhy()}
	for i, u := range c.built.Pumps {
		if u.Running {
			out.Pumps = append(out.Pumps, b.pump(i))
		}
	}
	for k, r := range b.rows {
		if r.quantity == "suction gauge" || r.quantity == "discharge gauge" {
			if g, found := b.gauge(k); found {
				out.Gauges = append(out.Gauges, g)
				b.used[k] = true
			}
		}
	}
	for k, r := range b.rows {
		if b.used[k] {
			continue
		}
		why := b.idle[k]
		if why == "" {
			why = map[string]string{"temperature": "the condition's own temperature is taken", "level": "the condition's own level is taken", "draught": "the condition's own draught is taken"}[r.quantity]
		}
		if why == "" {
			why = "it is on no running pump, nor on its way"
		}
		out.Unused = append(out.Unused, r.name()+": "+why)
	}
	out.Explained = b.explain()
	return out
}

// find returns the row of a quantity that is on a pump, or on the point of its flange.
func (b *bench) find(quantity string, names ...string) (k int, found bool) {
	for k, r := range b.rows {
		if r.quantity == quantity && holds(names, r.On.Value) {
			return k, true
		}
	}
	return 0, false
}

// pump works the readings of one running pump.
func (b *bench) pump(i int) PumpReadings {
	c := b.condition
	u := c.built.Pumps[i]
	out := PumpReadings{Pump: u.Name, Calculated: Pump{Pump: u.Name, Running: true, Flow: unknown, Head: unknown}, ShaftPower: Measured{unknown, unknown}, Efficiency: Measured{unknown, unknown}}
	if c.solved != nil {
		out.Calculated = c.Pumps[i]
	}
	if k, found := b.find("speed", u.Name); found {
		b.used[k] = true
		if u.Curve.Speed != 0 {
			u.Speed = b.rows[k].Value.Value
		} else {
			b.used[k], b.idle[k] = false, "the pump's curve gives no speed to set it against"
		}
	}
	out.Head = b.head(u)
	power := b.shaftPower(u)
	if power.Value.Known() {
		out.ShaftPower = Measured{power.Value / 1e3, power.Uncertainty / 1e3}
		out.Estimates = append(out.Estimates, fromPower(u, power, c.built.Water.Density))
	}
	if out.Head != nil {
		out.Estimates = append(out.Estimates, fromHead(u, out.Head))
	}
	out.Estimates = append(out.Estimates, b.meters(i, u)...)
	out.Mean, out.Agreement = agree(out.Estimates)
	own := slices.DeleteFunc(slices.Clone(out.Estimates), func(e FlowEstimate) bool { return e.Curve })
	if direct := slices.DeleteFunc(slices.Clone(own), func(e FlowEstimate) bool { return e.Shared }); len(direct) > 0 {
		own = direct // a meter on the pump's own flow goes before one that needs the calculation
	}
	out.Curve.Flow, _ = agree(own)
	if out.Head != nil {
		out.Head.settle(out)
		out.Curve.judge(u, out.Head, out.Estimates, b.grade)
	} else {
		out.Curve.CurveHead, out.Curve.Departure = unknown, Measured{unknown, unknown}
		out.Curve.Verdict, out.Curve.Reason = NotJudged, "a suction and a discharge gauge are needed for the head"
	}
	if q := out.Curve.Flow; q.Value.Known() && out.Head != nil && out.ShaftPower.Value > 0 {
		head, share := out.Head.at(float64(q.Value)/3600), float64(out.Head.Head.Uncertainty)
		eta := c.built.Water.Density * fluids.Gravity * float64(q.Value) / 3600 * head / (float64(out.ShaftPower.Value) * 1e3)
		out.Efficiency = Measured{Figure(eta), Figure(eta * rootSum(share/head, float64(q.Uncertainty/q.Value), float64(out.ShaftPower.Uncertainty/out.ShaftPower.Value)))}
	}
	return out
}

// rootSum is the root of the sum of squares.
func rootSum(parts ...float64) float64 {
	sum := 0.0
	for _, p := range parts {
		sum += p * p
	}
	return math.Sqrt(sum)
}

// bore returns the bore of the run at a point, the narrowest where several meet (there are then several, which a note says), 0
// where there is none.
func (b *bench) bore(point int) (bore float64, runs int) {
	for _, r := range b.condition.built.Network.Runs {
		if r.From == point || r.To == point {
			if d := r.Pipe.ClearBore(); runs == 0 || d < bore {
				bore = d
			}
			runs++
		}
	}
	return bore, runs
}

// elevation is that of a gauge: its own, or that of its point.
func (b *bench) elevation(r reading, point int) float64 {
	return r.GaugeElevation.Or(b.condition.built.Elevations[point])
}

// head works a pump's total head from its gauges, or returns nil where one is missing.
func (b *bench) head(u curves.Pump) *HeadReading {
	points := b.condition.built.Network.Points
	s, hasSuction := b.find("suction gauge", u.Name, points[u.From].Name)
	d, hasDischarge := b.find("discharge gauge", u.Name, points[u.To].Name)
	if !hasSuction || !hasDischarge {
		return nil
	}
	b.used[s], b.used[d] = true, true
	suction, discharge := b.rows[s], b.rows[d]
	density := b.condition.built.Water.Density
	weight := density * fluids.Gravity
	zs, zd := b.elevation(suction, u.From), b.elevation(discharge, u.To)
	pressure := (discharge.Value.Value - suction.Value.Value) / weight
	uncertainty := rootSum(discharge.uncertainty, suction.uncertainty) / weight
	h := &HeadReading{still: pressure + zd - zs, Head: Measured{unknown, Figure(uncertainty)}, AtFlow: unknown}
	bores, several := [2]float64{}, [2]string{}
	for i, point := range []int{u.From, u.To} {
		var runs int
		if bores[i], runs = b.bore(point); runs > 1 {
			several[i] = fmt.Sprintf(", the narrowest of %d runs that meet there", runs)
		}
	}
	perQ := func(bore float64) float64 { // velocity head over the square of the flow, m/(m3/s)2
		if bore == 0 {
			return 0
		}
		area := math.Pi / 4 * bore * bore
		return 1 / (2 * fluids.Gravity * area * area)
	}
	h.perQ = perQ(bores[1]) - perQ(bores[0])
	word := func(r reading) string {
		if r.supposed {
			return " (uncertainty by common practice)"
		}
		return ""
	}
	vacuum := ""
	if suction.Value.Value < 0 {
		vacuum = ", a vacuum, counted below 0"
	}
	h.Lines = []HeadLine{
		{"discharge gauge" + word(discharge), "bar", Figure(discharge.Value.Value / 1e5), Figure(discharge.uncertainty / 1e5)},
		{"suction gauge" + vacuum + word(suction), "bar", Figure(suction.Value.Value / 1e5), Figure(suction.uncertainty / 1e5)},
		{"density of the water", "kg/m3", Figure(density), unknown},
		{"pressure head between the gauges", "m", Figure(pressure), Figure(uncertainty)},
		{"height of the discharge gauge over the suction gauge", "m", Figure(zd - zs), unknown},
		{"bore at the suction tapping" + several[0], "mm", Figure(bores[0] * 1e3), unknown},
		{"bore at the discharge tapping" + several[1], "mm", Figure(bores[1] * 1e3), unknown},
	}
	return h
}

// at is the measured total head at a flow, m.
func (h *HeadReading) at(flow float64) float64 { return h.still + h.perQ*flow*flow }

// settle takes the velocity heads at the best flow there is: measured, or as the gauges have it, or calculated.
func (h *HeadReading) settle(p PumpReadings) {
	flow, by := p.Curve.Flow.Value, "the flow measured"
	for _, e := range p.Estimates {
		if !flow.Known() && e.Curve {
			flow, by = e.Flow, "the flow by "+e.By
		}
	}
	if !flow.Known() {
		flow, by = p.Calculated.Flow, "the flow calculated"
	}
	q := float64(flow) / 3600
	if h.perQ == 0 {
		q, by = 0, "equal bores, at any flow"
	}
	if math.IsNaN(q) {
		h.Lines = append(h.Lines, HeadLine{"velocity head, discharge less suction: no flow is known", "m", unknown, unknown})
		return
	}
	h.AtFlow, h.Head.Value = flow, Figure(h.at(q))
	h.Lines = append(h.Lines, HeadLine{"velocity head, discharge less suction, at " + by, "m", Figure(h.perQ * q * q), unknown},
		HeadLine{"total head", "m", h.Head.Value, h.Head.Uncertainty})
}

// crossings finds where a function crosses 0 between two flows.
func crossings(f func(flow float64) float64, low, high float64) (found []float64) {
	const steps = 400
	at, before := low, f(low)
	for k := 1; k <= steps; k++ {
		next := low + (high-low)*float64(k)/steps
		after := f(next)
		if before == 0 {
			found = append(found, at)
		} else if before*after < 0 {
			a, b := at, next
			for range 60 {
				if middle := (a + b) / 2; f(middle)*before > 0 {
					a = middle
				} else {
					b = middle
				}
			}
			found = append(found, (a+b)/2)
		}
		at, before = next, after
	}
	if before == 0 {
		found = append(found, at)
	}
	return found
}

// inverted reads a flow off a curve: where the curve has the value measured, and where it has that value at either end of its
// uncertainty. What is not met just once within the curve's range is not known, and the note says why.
func inverted(by string, curve func(flow float64) float64, m Measured, low, high float64) FlowEstimate {
	e := FlowEstimate{By: by, Flow: unknown, Low: unknown, High: unknown, Curve: true, uncertainty: math.NaN()}
	flowAt := func(value float64) (Figure, int) {
		found := crossings(func(q float64) float64 { return curve(q) - value }, low, high)
		if len(found) != 1 {
			return unknown, len(found)
		}
		return Figure(found[0] * 3600), 1
	}
	flow, times := flowAt(float64(m.Value))
	switch {
	case times == 0:
		e.Note = "the figure measured is not met within the digitised curve"
		return e
	case times > 1:
		e.Note = fmt.Sprintf("the curve has the figure measured at %d flows: it cannot say which", times)
		return e
	}
	e.Flow = flow
	a, _ := flowAt(float64(m.Value - m.Uncertainty))
	b, _ := flowAt(float64(m.Value + m.Uncertainty))
	if a.Known() && b.Known() {
		e.Low, e.High = min(a, b), max(a, b)
		e.uncertainty = float64(e.High-e.Low) / 2
		return e
	}
	rising := curve(high) > curve(low)
	if !rising {
		a, b = b, a // of a falling curve the greater value is at the lesser flow
	}
	e.Low, e.High = a, b
	e.Note = "the band reaches beyond the digitised curve, and has no weight"
	return e
}

func fromHead(u curves.Pump, h *HeadReading) FlowEstimate {
	low, high := u.Range()
	surplus := func(q float64) float64 { head, _ := u.Head(q); return head - h.perQ*q*q }
	e := inverted("gauges and head curve", surplus, Measured{Figure(h.still), h.Head.Uncertainty}, low, high)
	if e.Note == "" && e.uncertainty > widestFlowShare*float64(e.Flow) {
		e.Note = fmt.Sprintf("the band is wider than +/-%.0f %% of the flow: gauges alone cannot decide", 100*widestFlowShare)
	}
	return e
}

func fromPower(u curves.Pump, power Measured, density float64) FlowEstimate {
	low, high := u.Range()
	return inverted("shaft power and power curve", func(q float64) float64 { return u.At(q, density).ShaftPower }, power, low, high)
}

// shaftPower is what is measured of a pump's shaft power, W: as it is, or from its motor with the figures of the options.
//
//	P = motor power x efficiency; motor power = sqrt(3) volts amperes x power factor
func (b *bench) shaftPower(u curves.Pump) Measured {
	if k, found := b.find("shaft power", u.Name); found {
		b.used[k] = true
		return Measured{Figure(b.rows[k].Value.Value), Figure(b.rows[k].uncertainty)}
	}
	o := b.options // what the command line gives goes before pumps.csv
	for _, f := range []struct {
		to   *float64
		from float64
	}{{&o.Volts, u.Motor.Volts}, {&o.PowerFactor, u.Motor.PowerFactor}, {&o.MotorEfficiency, u.Motor.Efficiency}} {
		if *f.to == 0 && !math.IsNaN(f.from) {
			*f.to = f.from
		}
	}
	if k, found := b.find("motor power", u.Name); found {
		if o.MotorEfficiency > 0 {
			b.used[k] = true
			return Measured{Figure(b.rows[k].Value.Value * o.MotorEfficiency), Figure(b.rows[k].uncertainty * o.MotorEfficiency)}
		}
		b.idle[k] = "the efficiency of the motor is not known (--motor-efficiency)"
	}
	if k, found := b.find("motor current", u.Name); found {
		if o.Volts > 0 && o.PowerFactor > 0 && o.MotorEfficiency > 0 {
			b.used[k] = true
			factor := math.Sqrt(3) * o.Volts * o.PowerFactor * o.MotorEfficiency
			return Measured{Figure(b.rows[k].Value.Value * factor), Figure(b.rows[k].uncertainty * factor)}
		}
		b.idle[k] = "voltage, power factor and efficiency of the motor are not all known (--volts, --power-factor, --motor-efficiency)"
	}
	return Measured{unknown, unknown}
}

// meters lists the flow of a pump as meters and drops over fittings have it.
func (b *bench) meters(pump int, u curves.Pump) (list []FlowEstimate) {
	c := b.condition
	for k, r := range b.rows {
		var e FlowEstimate
		run := -1
		switch r.quantity {
		case "flow", "velocity":
			e = FlowEstimate{By: r.name(), Flow: Figure(r.Value.Value * 3600), uncertainty: r.uncertainty * 3600}
			if sameName(r.On.Value, u.Name) && r.quantity == "flow" {
				list = append(list, e.banded())
				b.used[k] = true
				continue
			}
			run = b.runOf(r.On.Value)
			if run >= 0 && r.quantity == "velocity" {
				area := c.built.Network.Runs[run].Pipe.Area()
				e.Flow, e.uncertainty = Figure(r.Value.Value*area*3600), r.uncertainty*area*3600
			}
		case "differential":
			if run = b.runOf(r.On.Value); run >= 0 {
				e = b.drop(run, r)
			}
		default:
			continue
		}
		share, note, direct, on := b.share(pump, u, run)
		if !on {
			continue
		}
		b.used[k] = true
		e.Flow, e.uncertainty, e.Shared = e.Flow*Figure(share), e.uncertainty*math.Abs(share), !direct
		e.Note = strings.TrimPrefix(strings.Join([]string{e.Note, note}, "; "), "; ")
		e.Note = strings.TrimSuffix(e.Note, "; ")
		list = append(list, e.banded())
	}
	return list
}

// banded fills in the bounds of an estimate from its uncertainty.
func (e FlowEstimate) banded() FlowEstimate {
	e.Low, e.High = e.Flow-Figure(e.uncertainty), e.Flow+Figure(e.uncertainty)
	return e
}

// runOf finds the run of a name, or that of a tag which is on one fitting; -1 for none.
func (b *bench) runOf(name string) int {
	found := -1
	for i, r := range b.condition.built.Network.Runs {
		if sameName(r.Name, name) {
			return i
		}
		for _, f := range r.Fittings {
			if sameName(f.Tag, name) {
				if found >= 0 {
					return -1 // both ports of a valve
				}
				found = i
			}
		}
	}
	return found
}

// drop is the flow in a run by the drop over one of its fittings, as the loss of the fitting has it. The uncertainty is that
// of the reading, and how well the fitting's loss is known.
func (b *bench) drop(run int, r reading) FlowEstimate {
	c := b.condition
	e := FlowEstimate{By: r.name(), Flow: unknown, uncertainty: math.NaN()}
	network := &c.built.Network
	at := network.Runs[run]
	for k := range at.Fittings {
		f := at.Fittings[k]
		if !sameName(f.Tag, r.On.Value) {
			continue
		}
		weight := c.built.Water.Density * fluids.Gravity
		nu := c.built.Water.KinematicViscosity()
		flowAt := func(head float64) float64 { // by bisection; the loss grows with the flow
			low, high := 0.0, 1e-3
			for at.FittingLoss(k, high, nu) < math.Abs(head) {
				if high *= 2; high > 1e3 {
					return math.NaN() // it loses next to nothing
				}
			}
			for range 80 {
				if middle := (low + high) / 2; at.FittingLoss(k, middle, nu) < math.Abs(head) {
					low = middle
				} else {
					high = middle
				}
			}
			return math.Copysign((low+high)/2, head)
		}
		known := lossBand(&at, &f, rowsOfRun(b.job, at.Name)[k])
		if !(known.Low > 0) {
			e.Note = "the loss of " + f.Tag + " is not known well enough"
			return e
		}
		head, part := r.Value.Value/weight, r.uncertainty/weight
		flow := flowAt(head)
		byReading := math.Abs(flowAt(head+part)-flowAt(head-part)) / 2
		byLoss := math.Abs(flowAt(head/float64(known.Low))-flowAt(head/float64(known.High))) / 2
		e.Flow, e.uncertainty = Figure(flow*3600), rootSum(byReading, byLoss)*3600
		e.Note = fmt.Sprintf("the loss of %s is taken as %.2g to %.2g times its figure; dirt that the tables do not give makes the flow too great", f.Tag, float64(known.Low), float64(known.High))
	}
	return e
}

// share is a pump's flow over that of a run: 1 where the run alone is joined to its flange, or else what is calculated for a run
// on its way.
func (b *bench) share(pump int, u curves.Pump, run int) (share float64, note string, direct, on bool) {
	if run < 0 {
		return 0, "", false, false
	}
	c := b.condition
	r := c.built.Network.Runs[run]
	for _, flange := range []int{u.From, u.To} {
		if _, runs := b.bore(flange); runs == 1 && (r.From == flange || r.To == flange) {
			if forward := r.To == u.From || r.From == u.To; !forward {
				return -1, "", true, true
			}
			return 1, "", true, true
		}
	}
	if c.unknownWhy() != "" || math.Abs(c.solved.RunFlows[run]) < atRest {
		return 0, "", false, false
	}
	onWay := slices.ContainsFunc(c.wayOf(u.Name), func(s step) bool { return !s.pump && sameName(s.name, r.Name) })
	if !onWay {
		return 0, "", false, false
	}
	share = c.solved.PumpFlows[pump] / c.solved.RunFlows[run]
	if math.Abs(share-1) < 0.001 { // no meter tells that apart
		return share, "", false, true
	}
	return share, fmt.Sprintf("%s carries %.3g times the flow of the pump, as calculated", r.Name, 1/share), false, true
}

// agree is the weighted mean of the estimates that have weight, and whether they agree.
func agree(estimates []FlowEstimate) (Measured, Agreement) {
	var weighed []FlowEstimate
	for _, e := range estimates {
		if e.Flow.Known() && e.uncertainty > 0 {
			weighed = append(weighed, e)
		}
	}
	a := Agreement{Estimates: len(weighed), ChiSquared: unknown, Limit: unknown, Verdict: NotJudged}
	mean, chi := weightedMean(weighed)
	if len(weighed) < 2 {
		return mean, a
	}
	a.ChiSquared, a.Limit = Figure(chi), Figure(distuv.ChiSquared{K: float64(len(weighed) - 1)}.Quantile(0.95))
	if a.ChiSquared <= a.Limit {
		a.Verdict = Met
		return mean, a
	}
	a.Verdict = NotMet
	mean = Measured{unknown, unknown}
	least := math.Inf(1)
	for i := range weighed { // of two that disagree nothing says which is wrong
		rest := slices.Delete(slices.Clone(weighed), i, i+1)
		if len(rest) < 2 {
			break
		}
		if others, without := weightedMean(rest); without < least && without <= (distuv.ChiSquared{K: float64(len(rest) - 1)}.Quantile(0.95)) {
			mean, least, a.Outlier = others, without, weighed[i].By
		}
	}
	return mean, a
}

// weightedMean weighs by the inverse squares of the uncertainties, which are twice the standard ones.
func weightedMean(estimates []FlowEstimate) (mean Measured, chi float64) {
	sum, weights := 0.0, 0.0
	for _, e := range estimates {
		w := 1 / (e.uncertainty * e.uncertainty)
		sum, weights = sum+w*float64(e.Flow), weights+w
	}
	if weights == 0 {
		return Measured{unknown, unknown}, 0
	}
	mean = Measured{Figure(sum / weights), Figure(1 / math.Sqrt(weights))}
	for _, e := range estimates {
		d := 2 * float64(e.Flow-mean.Value) / e.uncertainty
		chi += d * d
	}
	return mean, chi
}

// judge says whether the measured head lies within the grade of the curve at the measured flow. The band of the departure,
// from head and flow, must lie within the tolerance wholly to be met, and outside it wholly to be not met.
func (v *CurveVerdict) judge(u curves.Pump, h *HeadReading, estimates []FlowEstimate, grade Grade) {
	v.CurveHead, v.Departure, v.Verdict = unknown, Measured{unknown, unknown}, NotJudged
	if !v.Flow.Value.Known() {
		v.Reason = "gauges alone cannot decide: nothing measures the flow beside the pump's own curve"
		if measured := slices.ContainsFunc(estimates, func(e FlowEstimate) bool { return !e.Curve }); measured {
			v.Reason = "the flows measured beside the pump's own curve disagree, and nothing says which is right"
			return
		}
		for _, e := range estimates {
			if e.Curve && e.Low.Known() && e.High.Known() {
				v.Reason += fmt.Sprintf("; %s would have it between %.0f and %.0f m3/h", e.By, float64(e.Low), float64(e.High))
			}
		}
		return
	}
	q := float64(v.Flow.Value) / 3600
	if low, high := u.Range(); !(low <= q && q <= high) {
		v.Reason = fmt.Sprintf("the flow measured, %.0f m3/h, lies beyond the digitised curve, %.0f to %.0f m3/h", q*3600, low*3600, high*3600)
		return
	}
	head, slope := u.Head(q)
	v.CurveHead = Figure(head)
	departure := h.at(q)/head - 1
	band := rootSum(float64(h.Head.Uncertainty)/head, (2*h.perQ*q-slope)*float64(v.Flow.Uncertainty)/3600/head)
	v.Departure = Measured{Figure(departure), Figure(band)}
	words := fmt.Sprintf("head %+.1f %% of the curve's, +/-%.1f %%; %s allows %+.0f to %+.0f %%", 100*departure, 100*band, grade.Name, -100*float64(grade.Below), 100*float64(grade.Above))
	switch {
	case departure-band >= -float64(grade.Below) && departure+band <= float64(grade.Above):
		v.Verdict, v.Reason = Met, words
	case departure+band < -float64(grade.Below) || departure-band > float64(grade.Above):
		v.Verdict, v.Reason = NotMet, words+": the pump, or what measures its head and flow"
	default:
		v.Reason = words + ": the band straddles the limit"
	}
}

// gauge sets a gauge beside the calculation; there is none where it is on neither a pump nor a point.
func (b *bench) gauge(k int) (g GaugeReading, found bool) {
	c, r := b.condition, b.rows[k]
	point, pump := -1, -1
	for i, u := range c.built.Pumps {
		if sameName(u.Name, r.On.Value) {
			pump, point = i, u.From
			if r.quantity == "discharge gauge" {
				point = u.To
			}
		}
	}
	for i, p := range c.built.Network.Points {
		if point < 0 && sameName(p.Name, r.On.Value) {
			point = i
		}
	}
	if point < 0 {
		b.idle[k] = "a gauge is on a pump or a point"
		return g, false
	}
	z := b.elevation(r, point)
	g = GaugeReading{Gauge: r.Quantity.Value, On: r.On.Value, Elevation: Figure(z), Read: Measured{Figure(r.Value.Value / 1e5), Figure(r.uncertainty / 1e5)},
		Calculated: unknown, Difference: unknown, Verdict: NotJudged}
	if c.unknownWhy() != "" || math.IsNaN(c.solved.Heads[point]) {
		g.Reason = "the calculation has no figure: " + c.unknownWhy()
		return g, true
	}
	weight := c.built.Water.Density * fluids.Gravity
	pressure := c.solved.GaugePressure(point) + (c.solved.Elevations[point]-z)*weight
	g.Calculated, g.Difference = Figure(pressure/1e5), Figure((r.Value.Value-pressure)/1e5)
	g.AtRest = pump < 0 || !c.built.Pumps[pump].Running
	for i, run := range c.solved.Network.Runs {
		if (run.From == point || run.To == point) && math.Abs(c.solved.RunFlows[i]) > atRest {
			g.AtRest = false
		}
	}
	switch {
	case !g.AtRest:
		g.Reason = "water moves there: the difference is of gauge and calculation together"
	case math.Abs(float64(g.Difference)) <= float64(g.Read.Uncertainty):
		g.Verdict, g.Reason = Met, "at rest the gauge reads true within its uncertainty"
	default:
		g.Verdict = NotMet
		word := "high"
		if g.Difference < 0 {
			word = "low"
		}
		g.Reason = fmt.Sprintf("at rest the gauge reads %.2f bar too %s, more than its uncertainty: correct its zero", math.Abs(float64(g.Difference)), word)
	}
	return g, true
}
