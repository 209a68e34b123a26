package study

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/pumps"
)

// Trim is the answer to `trim`: how far an impeller may be cut, by every method, what stops the next millimetre, and what else would do.
type Trim struct {
	Job           string       `json:"job"`
	Version       string       `json:"version"`
	Pumps         []string     `json:"pumps"`
	Present       Figure       `json:"present_mm"`
	From          Figure       `json:"cut_from_mm"` // the digitised diameter that the laws start from
	Full          Figure       `json:"full_mm"`
	Inlet         Figure       `json:"inlet_diameter_mm"`
	StandIn       bool         `json:"inlet_diameter_is_a_stand_in"`
	TypeNumber    Figure       `json:"type_number"`
	Results       []TrimResult `json:"methods"`
	Spread        Figure       `json:"spread_mm"`
	Choice        *TrimChoice  `json:"choice"`  // null where there is none
	Refusal       string       `json:"refusal"` // why there is none
	States        []TrimState  `json:"states"`
	SideEffects   []SideEffect `json:"side_effects"`
	Options       []TrimOption `json:"options"`
	Factors       []Factor     `json:"factors"`
	Notes         []string     `json:"notes"`
	EnergyUnknown string       `json:"energy_unknown"` // why there is no energy of a year; empty where there is

	study *trimStudy
}

// TrimResult is the smallest diameter by one method.
type TrimResult struct {
	Method   string      `json:"method"`
	Source   string      `json:"source"`
	Word     string      `json:"word"` // "", "none": nothing may be cut, "refused", "unlimited": to the least diameter that may be answered for
	Diameter Figure      `json:"diameter_mm"`
	Cut      Figure      `json:"cut"` // share of the present diameter
	Reason   string      `json:"reason"`
	Governs  *Governance `json:"governs"` // null where nothing does
}

// Governance is the limit that stops the cut.
type Governance struct {
	Condition string `json:"condition"`
	Limit     string `json:"limit"`
	On        string `json:"on"`
	Source    string `json:"source"`
	Text      string `json:"text"` // just beyond
}

// TrimChoice is what to ask the workshop for.
type TrimChoice struct {
	Final    Figure   `json:"final_mm"` // the most cautious of the methods, rounded up
	First    Figure   `json:"first_cut_mm"`
	Step     Figure   `json:"step_mm"`
	Cautions []string `json:"cautions"`
}

// TrimState is the plant with one diameter.
type TrimState struct {
	State      string          `json:"state"` // "present", "first cut", "final"
	Diameter   Figure          `json:"diameter_mm"`
	Conditions []TrimCondition `json:"conditions"`
}

// TrimCondition is a condition with one diameter: the pumps by ISO 9906, or by the digitised neighbours, with the span of all methods.
type TrimCondition struct {
	Condition string     `json:"condition"`
	Pumps     []TrimPump `json:"pumps"`
}

// TrimPump is a pump with one diameter.
type TrimPump struct {
	Pump       string `json:"pump"`
	Flow       Figure `json:"flow_m3h"`
	Low        Figure `json:"flow_low_m3h"` // over the methods
	High       Figure `json:"flow_high_m3h"`
	Head       Figure `json:"head_m"`
	ShaftPower Figure `json:"shaft_power_kW"`
	Efficiency Figure `json:"efficiency"`
	NPSHMargin Figure `json:"npsh_margin_m"`
	BestShare  Figure `json:"best_efficiency_share"`
	Trimmed    bool   `json:"trimmed"`
}

// SideEffect is a limit whose value the cut changes.
type SideEffect struct {
	Condition string  `json:"condition"`
	Limit     string  `json:"limit"`
	On        string  `json:"on"`
	Unit      string  `json:"unit"`
	Before    Figure  `json:"before"`
	After     Figure  `json:"after"`
	Asked     Figure  `json:"limit_value"`
	Was       Verdict `json:"was"`
	Is        Verdict `json:"is"`
	Reason    string  `json:"reason"`
}

// TrimOptions say what to ask. The zero value trims every pump that has the first one's curve, in steps of 1 mm.
type TrimOptions struct {
	Pumps   []string
	LimitTo float64 // m: not below; 0 for none
	Step    float64 // m; 0 counts as 1 mm
	Valve   string  // tag of the valve to throttle with; empty for the one that suits
	Grade   string
	Fuel    float64 // kg of fuel for a kWh at the consumer; 0 for DefaultFuel
	CO2     float64 // kg for a kg of fuel; 0 for DefaultCO2
	Price   float64 // of a tonne of fuel; 0 for not known
	Version string
}

// gates are the limits that a trim must keep in every condition.
var gates = []string{"minimum flow", "minimum pressure"}

// firstCutShare is the share of the cautious cut to take before a test (common practice: cut less first, test, cut again).
const firstCutShare = 0.75

// trimStudy is the job at work: its present conditions, and the pumps to cut.
type trimStudy struct {
	job     *job.Job
	limits  *limits
	pumps   []int
	base    []*Condition // as it stands
	from    *pumps.Curve // digitised, that the laws start from
	family  []*pumps.Curve
	present float64 // m
	inlet   float64

	unjudged []Finding    // gates that are not judged as it stands
	after    []*Condition // with the final diameter
}

// neighbours is what stands for the way of the digitised neighbours beside the methods of trim.
const neighboursMethod = "digitised neighbours"

// Trims finds the smallest impeller of a job's pumps that keeps every minimum flow and minimum pressure in every condition. The error is
// job.Faults, or names a pump that is none.
func Trims(j *job.Job, o TrimOptions) (*Trim, error) {
	if o.Step == 0 {
		o.Step = 1e-3
	}
	t := &trimStudy{job: j, limits: newLimits(j)}
	answer := &Trim{Job: j.Name, Version: o.Version, study: t, Present: unknown, From: unknown, Full: unknown, Inlet: unknown, TypeNumber: unknown, Spread: unknown}
	if err := t.choose(o.Pumps); err != nil {
		return nil, err
	}
	for _, name := range j.Conditions() {
		built, err := j.Build(name)
		if err != nil {
			return nil, err
		}
		c, _ := judged(j, t.limits, built, nil)
		t.base = append(t.base, &c)
	}
	for _, i := range t.pumps {
		answer.Pumps = append(answer.Pumps, t.base[0].built.Pumps[i].Name)
	}
	if answer.Refusal = t.start(answer); answer.Refusal == "" {
		t.solve(answer, o)
	}
	t.options(answer, o)
	return answer, nil
}

// choose finds the pumps to cut: those named, or all that have the first one's curve and impeller.
func (t *trimStudy) choose(names []string) error {
	rows := t.job.Tables.Pumps
	for _, n := range names {
		k := slices.IndexFunc(rows, func(p job.PumpRow) bool { return strings.EqualFold(p.Pump.Value, n) })
		if k < 0 {
			return fmt.Errorf("pump: found %q, want one of %s", n, strings.Join(pumpNames(t.job), ", "))
		}
		if len(t.pumps) > 0 && !t.alike(t.pumps[0], k) {
			return fmt.Errorf("pump: %s has another curve or impeller than %s: trim them one after the other", n, rows[t.pumps[0]].Pump.Value)
		}
		if !slices.Contains(t.pumps, k) {
			t.pumps = append(t.pumps, k)
		}
	}
	for k := range rows {
		if len(names) == 0 && t.alike(0, k) {
			t.pumps = append(t.pumps, k)
		}
	}
	return nil
}

// alike says whether two pumps have one curve and impeller.
func (t *trimStudy) alike(i, k int) bool {
	a, b := t.job.Tables.Pumps[i], t.job.Tables.Pumps[k]
	return strings.EqualFold(a.Curve.Value, b.Curve.Value) && sameFigure(a.Impeller.Value, b.Impeller.Value)
}

// start reads the impeller as it stands, and says why it may not be cut at all, or nothing.
func (t *trimStudy) start(a *Trim) string {
	first := t.pumps[0]
	row, built := t.job.Tables.Pumps[first], t.base[0].built
	own := built.Pumps[first].Curve
	if !(own.Impeller > 0) {
		return "the sheet of " + row.Pump.Value + " does not say the diameter of its impeller"
	}
	for _, c := range t.base {
		if c.built.Pumps[first].Curve.Impeller != own.Impeller {
			return "the conditions give " + row.Pump.Value + " different impellers"
		}
	}
	t.family = t.job.Family(row.Curve.Value, own.Speed)
	t.present, t.from = own.Impeller, own
	if trim := built.Trims[first]; trim.ByLaw() { // a second cut goes by the digitised impeller too, not by the last guess
		t.from = t.family[0]
	}
	full := t.family[len(t.family)-1].Impeller
	t.inlet = row.InletDiameter.Or(pumps.StandInInletShare * full)
	a.StandIn = !row.InletDiameter.Given
	a.Present, a.From, a.Full, a.Inlet = toMillimetres(t.present), toMillimetres(t.from.Impeller), toMillimetres(full), toMillimetres(t.inlet)
	k := t.from.Numbers().TypeNumber
	a.TypeNumber = Figure(k)
	if math.IsNaN(k) {
		return "the type number is not known, since the sheet shows no best efficiency or no speed: whether these laws hold for the impeller cannot be said"
	}
	gated := false
	for _, c := range t.base {
		if c.solved == nil {
			return c.Condition + " has no solution: " + c.Notes[len(c.Notes)-1]
		}
		for _, f := range c.Findings {
			if !slices.Contains(gates, f.Limit) {
				continue
			}
			switch f.Verdict {
			case NotMet:
				return fmt.Sprintf("%s of %s in %s is not met as it stands (%s): nothing may be cut", f.Limit, f.On, c.Condition, f.Reason)
			case NotJudged:
				t.unjudged = append(t.unjudged, f)
				a.Notes = append(a.Notes, fmt.Sprintf("%s of %s in %s is not judged as it stands, and does not hold the cut: %s", f.Limit, f.On, c.Condition, f.Reason))
			default:
				gated = true
			}
		}
	}
	if !gated {
		return "no minimum flow and no minimum pressure of limits.csv is judged: nothing says how far the impeller may be cut"
	}
	return ""
}

// toMillimetres turns a length, without the dust of the conversion.
func toMillimetres(m float64) Figure { return Figure(math.Round(m*1e9) / 1e6) }

// curve returns the curve of a diameter by a method, or by the digitised neighbours.
func (t *trimStudy) curve(method string, diameter float64) (*pumps.Curve, error) {
	if diameter == t.present {
		return t.base[0].built.Pumps[t.pumps[0]].Curve, nil
	}
	if method == neighboursMethod {
		for k := 1; k < len(t.family); k++ {
			if t.family[k-1].Impeller <= diameter && diameter <= t.family[k].Impeller {
				return pumps.Between(t.family[k-1], t.family[k], diameter)
			}
		}
		return nil, fmt.Errorf("no digitised diameters on either side of %.5g mm", diameter*1e3)
	}
	m := pumps.TrimMethods()[slices.IndexFunc(pumps.TrimMethods(), func(m pumps.TrimMethod) bool { return m.String() == method })]
	return t.from.Trimmed(m, diameter, t.inlet)
}

// with judges every condition with a curve in place of the pumps' own.
func (t *trimStudy) with(curve *pumps.Curve) []*Condition {
	list := make([]*Condition, len(t.base))
	for k, b := range t.base {
		list[k] = t.conditionWith(b, curve)
	}
	return list
}

func (t *trimStudy) conditionWith(b *Condition, curve *pumps.Curve) *Condition {
	built := b.built.Clone()
	for _, i := range t.pumps {
		built.Pumps[i].Curve = curve
	}
	c, _ := judged(t.job, t.limits, built, b.solved)
	return &c
}

// broken returns the first gate that is not met, or nil.
func (t *trimStudy) broken(list []*Condition) *Governance {
	for _, c := range list {
		if g := t.gateBroken(c); g != nil {
			return g
		}
	}
	return nil
}

// gateBroken returns the first gate of a condition that is not met, or that can no longer be judged.
func (t *trimStudy) gateBroken(c *Condition) *Governance {
	for _, f := range c.Findings {
		if !slices.Contains(gates, f.Limit) || f.Verdict == Met {
			continue
		}
		if f.Verdict == NotJudged && slices.ContainsFunc(t.unjudged, func(u Finding) bool { return u.Limit == f.Limit && u.On == f.On && u.Source == f.Source }) {
			continue
		}
		return &Governance{c.Condition, f.Limit, f.On, f.Source, f.Reason}
	}
	return nil
}

// solve finds the diameter by each method, and what to make of them.
func (t *trimStudy) solve(a *Trim, o TrimOptions) {
	methods := []string{}
	if len(t.family) > 1 {
		methods = append(methods, neighboursMethod)
	}
	for _, m := range pumps.TrimMethods() {
		methods = append(methods, m.String())
	}
	cautious, bold := 0.0, math.Inf(1)
	for _, m := range methods {
		r := t.smallest(m, a, o)
		a.Results = append(a.Results, r)
		if d := float64(r.Diameter) / 1e3; r.Word != "refused" {
			cautious, bold = math.Max(cautious, d), math.Min(bold, d)
		}
	}
	if cautious == 0 {
		a.Refusal = "no method answers for a cut: " + a.Results[0].Reason
		return
	}
	a.Spread = toMillimetres(cautious - bold)
	final := math.Min(roundUp(cautious, o.Step), t.present)
	first := math.Min(roundUp(t.present-firstCutShare*(t.present-cautious), o.Step), t.present)
	if final >= t.present {
		a.Refusal = fmt.Sprintf("nothing to cut: the most cautious method asks for %.2f mm, which is the present impeller in steps of %g mm", cautious*1e3, o.Step*1e3)
		return
	}
	a.Choice = &TrimChoice{Final: toMillimetres(final), First: toMillimetres(first), Step: toMillimetres(o.Step)}
	for _, w := range pumps.TrimCautions(final/t.from.Impeller, final/(float64(a.Full)/1e3), float64(a.TypeNumber)) {
		a.Choice.Cautions = append(a.Choice.Cautions, w.Text+" ("+w.Source+")")
	}
	a.States = []TrimState{t.state("present", t.present, methods), t.state("first cut", first, methods), t.state("final", final, methods)}
	t.sideEffects(a, final)
}

func roundUp(x, step float64) float64 { return math.Ceil(x/step-1e-9) * step }

// smallest finds by bisection the smallest diameter that one method answers for and that keeps every gate.
func (t *trimStudy) smallest(method string, a *Trim, o TrimOptions) TrimResult {
	r := TrimResult{Method: method, Source: "digitised diameters on either side, along affinity parabolas", Diameter: unknown, Cut: unknown}
	for _, m := range pumps.TrimMethods() {
		if m.String() == method {
			r.Source = m.Source()
		}
	}
	full := float64(a.Full) / 1e3
	least, why := o.LimitTo, fmt.Sprintf("the limit asked for, %g mm", o.LimitTo*1e3)
	if method == neighboursMethod {
		if small := t.family[0].Impeller; small > least {
			least, why = small, fmt.Sprintf("the smallest digitised diameter, %.5g mm", small*1e3)
		}
		if t.present <= t.family[0].Impeller {
			r.Word, r.Reason = "refused", "no digitised diameter is smaller than the present impeller"
			return r
		}
	} else {
		for _, w := range pumps.TrimCautions(1-1e-6, 1-1e-6, float64(a.TypeNumber)) {
			if w.Refuses {
				r.Word, r.Reason = "refused", w.Text+" ("+w.Source+")"
				return r
			}
		}
		for share := 0.5; share < 1; share += 0.005 { // the least share that is not refused
			refuses := slices.ContainsFunc(pumps.TrimCautions(share*full/t.from.Impeller, share, float64(a.TypeNumber)), func(w pumps.TrimCaution) bool { return w.Refuses })
			if refuses {
				continue
			}
			if d := share * full; d > least {
				least, why = d, fmt.Sprintf("%.0f %% of the full diameter, below which no method is answered for", share*100)
			}
			break
		}
	}
	if least >= t.present {
		r.Word, r.Reason = "refused", "the present impeller is at "+why+", or below it"
		return r
	}
	broken := func(d float64) *Governance {
		c, err := t.curve(method, d)
		if err != nil {
			return &Governance{Text: err.Error()}
		}
		return t.broken(t.with(c))
	}
	good, bad := t.present, least
	if broken(bad) == nil {
		r.Word, r.Diameter, r.Cut = "unlimited", toMillimetres(least), Figure(1-least/t.present)
		r.Reason = "every minimum flow and pressure is kept down to " + why
		return r
	}
	for good-bad > 1e-13*good {
		middle := (good + bad) / 2
		if middle == good || middle == bad {
			break
		}
		if broken(middle) == nil {
			good = middle
		} else {
			bad = middle
		}
	}
	r.Governs = broken(bad)
	r.Diameter, r.Cut = toMillimetres(good), Figure(1-good/t.present)
	r.Reason = fmt.Sprintf("%s of %s in %s", r.Governs.Limit, r.Governs.On, r.Governs.Condition)
	if r.Governs.Limit == "" {
		r.Reason = r.Governs.Text
	}
	if t.present-good < 1e-6*t.present {
		r.Word = "none"
	}
	return r
}

// state works out every condition with one diameter, by every method.
func (t *trimStudy) state(name string, diameter float64, methods []string) TrimState {
	s := TrimState{State: name, Diameter: toMillimetres(diameter)}
	var all [][]*Condition
	centre := 0
	for _, m := range methods {
		c, err := t.curve(m, diameter)
		if err != nil {
			continue
		}
		if m == pumps.ISO9906.String() && methods[0] != neighboursMethod {
			centre = len(all)
		}
		all = append(all, t.with(c))
	}
	if len(all) == 0 {
		return s
	}
	for k, c := range all[centre] {
		tc := TrimCondition{Condition: c.Condition}
		for i, p := range c.Pumps {
			if !p.Running {
				continue
			}
			tp := TrimPump{Pump: p.Pump, Flow: p.Flow, Low: p.Flow, High: p.Flow, Head: p.Head, ShaftPower: p.ShaftPower, Efficiency: p.Efficiency, NPSHMargin: p.NPSHMargin,
				BestShare: p.BestShare, Trimmed: slices.Contains(t.pumps, i)}
			for _, list := range all {
				q := list[k].Pumps[i].Flow
				if !q.Known() {
					tp.Low, tp.High = unknown, unknown
					break
				}
				tp.Low, tp.High = min(tp.Low, q), max(tp.High, q)
			}
			tc.Pumps = append(tc.Pumps, tp)
		}
		s.Conditions = append(s.Conditions, tc)
	}
	return s
}

// sideEffects sets every limit beside itself, before and after the final cut by the central method.
func (t *trimStudy) sideEffects(a *Trim, final float64) {
	method := pumps.ISO9906.String()
	if len(t.family) > 1 && t.family[0].Impeller <= final {
		method = neighboursMethod
	}
	c, err := t.curve(method, final)
	if err != nil {
		return
	}
	t.after = t.with(c)
	for k, after := range t.after {
		before := t.base[k]
		for _, f := range after.Findings {
			b := slices.IndexFunc(before.Findings, func(x Finding) bool { return x.Limit == f.Limit && x.On == f.On && x.Source == f.Source })
			if b < 0 {
				continue
			}
			was := before.Findings[b]
			if was.Value == f.Value && was.Verdict == f.Verdict {
				continue
			}
			a.SideEffects = append(a.SideEffects, SideEffect{after.Condition, f.Limit, f.On, f.Unit, was.Value, f.Value, f.LimitValue, was.Verdict, f.Verdict, f.Reason})
		}
	}
}

// Met says whether a cut was found and every limit is met after it.
func (a *Trim) Met() bool {
	if a.Choice == nil {
		return false
	}
	for _, c := range a.study.after {
		for _, f := range c.Findings {
			if f.Verdict != Met {
				return false
			}
		}
	}
	return true
}
