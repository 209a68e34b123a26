package study

import (
	"fmt"
	"math"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
)

// CompareOptions says what of a change is to be compared.
type CompareOptions struct {
	Conditions []string // only these; every condition where empty
	Test       []string // conditions of the harbour test; every compared condition that the change leaves where empty
	Grade      string   // of acceptance of the pump's head, of Grades; 2B where empty
	Version    string   // of the program, for the answer
}

// Comparison is the answer to `compare`: a job before and after a change.
type Comparison struct {
	Job        string                `json:"job"`
	Change     string                `json:"change"`
	Version    string                `json:"version"`
	Inputs     []job.Change          `json:"inputs"`
	Supplied   []SuppliedComparison  `json:"supplied"` // what the catalogues and defaults supply otherwise
	OnlyBefore []string              `json:"conditions_only_before"`
	OnlyAfter  []string              `json:"conditions_only_after"`
	Verdicts   VerdictCounts         `json:"verdicts"`
	Worst      []WorstComparison     `json:"worst"`
	Conditions []ConditionComparison `json:"conditions"` // those of both sides
	Test       HarbourTest           `json:"harbour_test"`
	Failed     []error               `json:"-"` // *NoSolution of the conditions that could not be solved, of either side

	before, after *Check // nil where a side has none of the conditions asked for
}

// SuppliedComparison is a figure that the program puts in where the tables leave it open, and that is another after the
// change. A side on which the tables give it, or have no use for it, is empty.
type SuppliedComparison struct {
	On     string `json:"on"`
	What   string `json:"what"`
	Before string `json:"before"`
	After  string `json:"after"`
	Source string `json:"source"` // of the later figure, or else of the earlier
}

// VerdictCounts counts the limits of all conditions of each side.
type VerdictCounts struct {
	Before VerdictCount `json:"before"`
	After  VerdictCount `json:"after"`
	Gained int          `json:"gained"` // met after and not before
	Lost   int          `json:"lost"`   // met before and not after
	Still  int          `json:"still"`  // met neither before nor after
}

// VerdictCount counts the limits of one side.
type VerdictCount struct {
	Met       int `json:"met"`
	NotMet    int `json:"not_met"`
	NotJudged int `json:"not_judged"`
}

// Pair is a figure before and after. The difference is known only where both are.
type Pair struct {
	Before     Figure `json:"before"`
	After      Figure `json:"after"`
	Difference Figure `json:"difference"`
}

func pairOf(before, after Figure) Pair {
	p := Pair{before, after, unknown}
	if before.Known() && after.Known() {
		p.Difference = after - before
	}
	return p
}

// Differs says whether the two figures are told apart: by more than what solving twice may leave, or since one alone is known.
func (p Pair) Differs() bool {
	if p.Before.Known() != p.After.Known() {
		return true
	}
	const solving = 1e-7 // of the figure, and of one unit: the solver's own step is far below
	b, a := float64(p.Before), float64(p.After)
	return p.Before.Known() && math.Abs(a-b) > solving*math.Max(1, math.Max(math.Abs(a), math.Abs(b)))
}

// Sides is a word for each side.
type Sides struct {
	Before string `json:"before"`
	After  string `json:"after"`
}

// ConditionComparison is a condition that stands on both sides.
type ConditionComparison struct {
	Condition string              `json:"condition"`
	Unknown   Sides               `json:"not_known"` // why figures of a side are not known; empty where they are
	Pumps     []PumpComparison    `json:"pumps"`
	Runs      []RunComparison     `json:"runs"`
	Fittings  []FittingComparison `json:"fittings"`
	Points    []PointComparison   `json:"points"`
	Limits    []LimitComparison   `json:"limits"`
	Paths     []PathComparison    `json:"paths"`

	before, after *Condition
}

// The states of a pump, run or point on a side, beside those that Sides names in words of their own.
const (
	stateRunning    = "running"
	stateIdle       = "idle"
	stateOffCurve   = "off curve"
	stateHeldShut   = "held shut"
	stateOpen       = "open"
	stateShut       = "shut"
	stateCutOff     = "cut off"
	stateNotKnown   = "not known"
	stateNoSolution = "no solution"
	stateNotThere   = "not there"
)

// PumpComparison is a pump before and after.
type PumpComparison struct {
	Pump          string `json:"pump"`
	State         Sides  `json:"state"` // running, idle, held shut, off curve, no solution, not there
	Flow          Pair   `json:"flow_m3h"`
	Head          Pair   `json:"head_m"`
	ShaftPower    Pair   `json:"shaft_power_kW"`
	NPSHAvailable Pair   `json:"npsh_available_m"`
	NPSHRequired  Pair   `json:"npsh_required_m"`
	NPSHMargin    Pair   `json:"npsh_margin_m"`
	BestShare     Pair   `json:"best_efficiency_share"`
}

// RunComparison is a run before and after; Loss is that of its pipe and fittings together.
type RunComparison struct {
	Run         string `json:"run"`
	State       Sides  `json:"state"` // open, shut, not known, no solution, not there
	Flow        Pair   `json:"flow_m3h"`
	Velocity    Pair   `json:"velocity_m_s"`
	PipeLoss    Pair   `json:"pipe_loss_m"`
	FittingLoss Pair   `json:"fitting_loss_m"`
	Loss        Pair   `json:"loss_m"`
}

// FittingComparison is a row of fittings.csv before and after.
type FittingComparison struct {
	Run     string `json:"run"`
	Tag     string `json:"tag"`
	Fitting string `json:"fitting"`
	State   Sides  `json:"state"` // there, not there
	Loss    Pair   `json:"loss_m"`
}

// PointComparison is a point before and after.
type PointComparison struct {
	Point         string `json:"point"`
	State         Sides  `json:"state"` // there, cut off, not known, no solution, not there
	Head          Pair   `json:"head_m"`
	GaugePressure Pair   `json:"gauge_pressure_bar"`
}

// Outcome says what a change does to a limit.
type Outcome string

// The outcomes.
const (
	Same        Outcome = "same"
	Gained      Outcome = "gained"  // met after and not before
	Lost        Outcome = "lost"    // met before and not after
	OtherwayOut Outcome = "changed" // met on neither side, not met on one and not judged on the other
	NewLimit    Outcome = "added"   // judged after only
	DroppedOff  Outcome = "removed" // judged before only
)

// LimitComparison is a limit judged on both sides; a side where it does not apply has an empty verdict.
type LimitComparison struct {
	Limit      string  `json:"limit"`
	On         string  `json:"on"`
	Unit       string  `json:"unit"`
	Outcome    Outcome `json:"outcome"`
	Before     Verdict `json:"before"`
	After      Verdict `json:"after"`
	Value      Pair    `json:"value"`
	LimitValue Pair    `json:"limit_value"`
	Reason     Sides   `json:"reason"`

	Findings [2]*Finding `json:"-"` // before and after, for wording; nil where a side has none
}

// WorstComparison is the worst of one figure over all conditions of each side.
type WorstComparison struct {
	What   string `json:"what"`
	Unit   string `json:"unit"`
	Before Worst  `json:"before"`
	After  Worst  `json:"after"`
}

// Worst is a figure with where it is met, and the conditions in which it is not known: one of these may be worse.
type Worst struct {
	Value     Figure   `json:"value"`
	On        string   `json:"on"`
	Condition string   `json:"condition"`
	NotKnown  []string `json:"not_known_in"`
}

// Compared solves the conditions of a job before and after a change, and tells what differs. The error is job.Faults, or that
// of a grade of no known name.
func Compared(before, after *job.Job, change string, o CompareOptions) (*Comparison, error) {
	a := &Comparison{Job: before.Name, Change: change, Version: o.Version, Inputs: before.Tables.Changes(after.Tables)}
	grade, err := GradeNamed(o.Grade)
	if err != nil {
		return nil, err
	}
	var names [2][]string
	for side, j := range []*job.Job{before, after} {
		names[side] = chosen(j.Conditions(), o.Conditions)
	}
	for _, name := range o.Conditions {
		if !holds(names[0], name) && !holds(names[1], name) {
			_, err := after.Build(name)
			return nil, err
		}
	}
	for side, j := range []*job.Job{before, after} {
		if len(names[side]) == 0 {
			continue
		}
		answer, err := Checked(j, names[side], o.Version)
		if err != nil {
			return nil, err
		}
		a.Failed = append(a.Failed, answer.Failed...)
		if side == 0 {
			a.before = answer
		} else {
			a.after = answer
		}
	}
	a.pairConditions(names[0], names[1])
	if a.before != nil && a.after != nil {
		a.Supplied = suppliedCompared(a.before.Supplied, a.after.Supplied)
	}
	a.count()
	a.Worst = a.worst()
	a.Test, err = a.harbourTest(after, o.Test, grade)
	return a, err
}

// sameName says whether two names are one, as the tables take them.
func sameName(a, b string) bool {
	return strings.EqualFold(strings.Join(strings.Fields(a), " "), strings.Join(strings.Fields(b), " "))
}

func holds(names []string, name string) bool {
	for _, n := range names {
		if sameName(n, name) {
			return true
		}
	}
	return false
}

// chosen returns those of the names that are asked for, or all where none is.
func chosen(names, asked []string) (list []string) {
	for _, n := range names {
		if len(asked) == 0 || holds(asked, n) {
			list = append(list, n)
		}
	}
	return list
}

// suppliedCompared lists the supplied figures that are not the same on both sides.
func suppliedCompared(before, after []Supplied) (list []SuppliedComparison) {
	for _, p := range paired(before, after, func(s Supplied) string { return s.On + ": " + s.What }) {
		at := p.either()
		c := SuppliedComparison{On: at.On, What: at.What, Source: at.Source}
		if p.before != nil {
			c.Before = p.before.Figure
		}
		if p.after != nil {
			c.After = p.after.Figure
		}
		if c.Before != c.After {
			list = append(list, c)
		}
	}
	return list
}

// pairConditions compares the conditions of both sides and names those of one.
func (a *Comparison) pairConditions(before, after []string) {
	for _, name := range before {
		if !holds(after, name) {
			a.OnlyBefore = append(a.OnlyBefore, name)
		}
	}
	for i, name := range after {
		if !holds(before, name) {
			a.OnlyAfter = append(a.OnlyAfter, name)
			continue
		}
		for k := range before {
			if sameName(before[k], name) {
				a.Conditions = append(a.Conditions, compareCondition(&a.before.Conditions[k], &a.after.Conditions[i]))
			}
		}
	}
}

// both is a thing of a condition on either side; nil where it is not there.
type both[T any] struct{ before, after *T }

// paired brings the things of two lists together by name, those of one name by their order: the later ones in their order,
// and those that only the earlier list has behind them.
func paired[T any](before, after []T, name func(T) string) (list []both[T]) {
	keys := func(things []T) []string {
		met := map[string]int{}
		var list []string
		for _, t := range things {
			key := strings.ToLower(name(t))
			met[key]++
			list = append(list, fmt.Sprintf("%s #%d", key, met[key]))
		}
		return list
	}
	at := map[string]int{}
	earlier := keys(before)
	for i, key := range earlier {
		at[key] = i
	}
	for k, key := range keys(after) {
		pair := both[T]{after: &after[k]}
		if i, has := at[key]; has {
			pair.before = &before[i]
			delete(at, key)
		}
		list = append(list, pair)
	}
	for i, key := range earlier {
		if _, left := at[key]; left {
			list = append(list, both[T]{before: &before[i]})
		}
	}
	return list
}

// either is the one that is there.
func (b both[T]) either() *T {
	if b.after != nil {
		return b.after
	}
	return b.before
}

// pair takes a figure of both.
func (b both[T]) pair(figure func(*T) Figure) Pair {
	side := [2]Figure{unknown, unknown}
	for i, t := range []*T{b.before, b.after} {
		if t != nil {
			side[i] = figure(t)
		}
	}
	return pairOf(side[0], side[1])
}

// states words what the thing is on either side.
func (b both[T]) states(before, after *Condition, word func(*T) string) Sides {
	of := func(c *Condition, t *T) string {
		switch {
		case c.solved == nil:
			return stateNoSolution
		case t == nil:
			return stateNotThere
		}
		return word(t)
	}
	return Sides{of(before, b.before), of(after, b.after)}
}

func compareCondition(before, after *Condition) ConditionComparison {
	c := ConditionComparison{Condition: after.Condition, Unknown: Sides{before.unknownWhy(), after.unknownWhy()}, before: before, after: after}
	for _, p := range paired(before.Pumps, after.Pumps, func(p Pump) string { return p.Pump }) {
		c.Pumps = append(c.Pumps, PumpComparison{Pump: p.either().Pump, State: p.states(before, after, pumpState),
			Flow:          p.pair(func(p *Pump) Figure { return p.Flow }),
			Head:          p.pair(func(p *Pump) Figure { return p.Head }),
			ShaftPower:    p.pair(func(p *Pump) Figure { return p.ShaftPower }),
			NPSHAvailable: p.pair(func(p *Pump) Figure { return p.NPSHAvailable }),
			NPSHRequired:  p.pair(func(p *Pump) Figure { return p.NPSHRequired }),
			NPSHMargin:    p.pair(func(p *Pump) Figure { return p.NPSHMargin }),
			BestShare:     p.pair(func(p *Pump) Figure { return p.BestShare })})
	}
	for _, r := range paired(before.Runs, after.Runs, func(r Run) string { return r.Run }) {
		c.Runs = append(c.Runs, RunComparison{Run: r.either().Run, State: r.states(before, after, runState),
			Flow:        r.pair(func(r *Run) Figure { return r.Flow }),
			Velocity:    r.pair(func(r *Run) Figure { return r.Velocity }),
			PipeLoss:    r.pair(func(r *Run) Figure { return r.PipeLoss }),
			FittingLoss: r.pair(func(r *Run) Figure { return r.FittingLoss }),
			Loss:        r.pair(func(r *Run) Figure { return r.PipeLoss + r.FittingLoss })})
	}
	for _, f := range paired(before.Fittings, after.Fittings, fittingKey) {
		at := f.either()
		c.Fittings = append(c.Fittings, FittingComparison{Run: at.Run, Tag: at.Tag, Fitting: at.Fitting,
			State: f.states(before, after, func(*Fitting) string { return "there" }),
			Loss:  f.pair(func(f *Fitting) Figure { return f.Loss })})
	}
	for _, p := range paired(before.Points, after.Points, func(p Point) string { return p.Point }) {
		c.Points = append(c.Points, PointComparison{Point: p.either().Point,
			State: Sides{before.pointState(p.before), after.pointState(p.after)},
			Head:  p.pair(func(p *Point) Figure { return p.Head }), GaugePressure: p.pair(func(p *Point) Figure { return p.GaugePressure })})
	}
	for _, f := range paired(before.Findings, after.Findings, func(f Finding) string { return f.Limit + " of " + f.On }) {
		c.Limits = append(c.Limits, limitCompared(f))
	}
	c.Paths = comparePaths(before, after)
	return c
}

// fittingKey is what a fitting is known by: its tag (both ports of a valve have one), or its run and name.
func fittingKey(f Fitting) string {
	if port := job.ValvePort(f.Fitting); f.Tag != "" {
		return f.Tag + " " + port
	}
	return f.Run + ": " + f.Fitting
}

func pumpState(p *Pump) string {
	switch {
	case !p.Running:
		return stateIdle
	case p.Extrapolated:
		return stateOffCurve
	case p.HeldShut:
		return stateHeldShut
	case !p.Flow.Known():
		return stateNotKnown
	}
	return stateRunning
}

func runState(r *Run) string {
	switch {
	case r.Shut:
		return stateShut
	case !r.Flow.Known():
		return stateNotKnown
	}
	return stateOpen
}

func (c *Condition) pointState(p *Point) string {
	switch {
	case c.solved == nil:
		return stateNoSolution
	case p == nil:
		return stateNotThere
	case p.Head.Known():
		return "there"
	case c.unknownWhy() != "":
		return stateNotKnown
	}
	return stateCutOff
}

// unknownWhy says why the figures of a condition as a whole are not known, or nothing where they are.
func (c *Condition) unknownWhy() string {
	if c.solved == nil {
		for _, n := range c.Notes {
			if strings.HasPrefix(n, "no solution: ") {
				return n
			}
		}
		return stateNoSolution
	}
	for i, p := range c.Pumps {
		if p.Extrapolated {
			return beyondCurve(c.solved, i)
		}
	}
	for _, r := range c.Runs {
		if !r.Shut && !r.Flow.Known() {
			return "a flow is beyond the range of the friction law"
		}
	}
	return ""
}

func limitCompared(f both[Finding]) LimitComparison {
	at := f.either()
	l := LimitComparison{Limit: at.Limit, On: at.On, Unit: at.Unit, Findings: [2]*Finding{f.before, f.after},
		Value: f.pair(func(f *Finding) Figure { return f.Value }), LimitValue: f.pair(func(f *Finding) Figure { return f.LimitValue })}
	if f.before != nil {
		l.Before, l.Reason.Before = f.before.Verdict, f.before.Reason
	}
	if f.after != nil {
		l.After, l.Reason.After = f.after.Verdict, f.after.Reason
	}
	switch {
	case f.before == nil:
		l.Outcome = NewLimit
	case f.after == nil:
		l.Outcome = DroppedOff
	case l.Before == l.After:
		l.Outcome = Same
	case l.After == Met:
		l.Outcome = Gained
	case l.Before == Met:
		l.Outcome = Lost
	default:
		l.Outcome = OtherwayOut
	}
	return l
}

// count counts the verdicts of each side, and those that changed.
func (a *Comparison) count() {
	for _, side := range []struct {
		check *Check
		count *VerdictCount
	}{{a.before, &a.Verdicts.Before}, {a.after, &a.Verdicts.After}} {
		if side.check == nil {
			continue
		}
		for _, c := range side.check.Conditions {
			for _, f := range c.Findings {
				switch f.Verdict {
				case Met:
					side.count.Met++
				case NotMet:
					side.count.NotMet++
				case NotJudged:
					side.count.NotJudged++
				}
			}
		}
	}
	for _, c := range a.Conditions {
		for _, l := range c.Limits {
			switch {
			case l.Outcome == Gained:
				a.Verdicts.Gained++
			case l.Outcome == Lost:
				a.Verdicts.Lost++
			case l.Before != "" && l.After != "" && l.After != Met:
				a.Verdicts.Still++
			}
		}
	}
}

// Met says whether every limit is met after the change and none is left unjudged.
func (a *Comparison) Met() bool { return a.after != nil && a.after.Met() }

// ConditionLimit is a limit of a condition.
type ConditionLimit struct {
	Condition string
	LimitComparison
}

// Limits lists every limit of every condition after the change, those of conditions that are new among them, and behind each
// condition's those that it has lost.
func (a *Comparison) Limits() (list []ConditionLimit) {
	if a.after == nil {
		return nil
	}
	for i := range a.after.Conditions {
		after := &a.after.Conditions[i]
		compared := false
		for _, c := range a.Conditions {
			if c.after != after {
				continue
			}
			compared = true
			for _, l := range c.Limits {
				list = append(list, ConditionLimit{c.Condition, l})
			}
		}
		for k := range after.Findings {
			if !compared {
				list = append(list, ConditionLimit{after.Condition, limitCompared(both[Finding]{after: &after.Findings[k]})})
			}
		}
	}
	return list
}

// NotConverged returns the first condition of either side whose solution did not settle, or nil.
func (a *Comparison) NotConverged() error { return (&Check{Failed: a.Failed}).NotConverged() }

// Same says whether the change changes nothing: no input, and no figure of any condition.
func (a *Comparison) Same() bool {
	if len(a.Inputs)+len(a.OnlyBefore)+len(a.OnlyAfter) > 0 {
		return false
	}
	for _, c := range a.Conditions {
		if c.Differs() {
			return false
		}
	}
	return true
}

// Differs says whether any figure, state or verdict of the condition is another after the change.
func (c *ConditionComparison) Differs() bool {
	for _, p := range c.Pumps {
		if p.State.Before != p.State.After || p.Flow.Differs() || p.Head.Differs() || p.ShaftPower.Differs() || p.NPSHMargin.Differs() ||
			p.NPSHAvailable.Differs() || p.NPSHRequired.Differs() || p.BestShare.Differs() {
			return true
		}
	}
	for _, r := range c.Runs {
		if r.State.Before != r.State.After || r.Flow.Differs() || r.Velocity.Differs() || r.PipeLoss.Differs() || r.FittingLoss.Differs() {
			return true
		}
	}
	for _, f := range c.Fittings {
		if f.State.Before != f.State.After || f.Loss.Differs() {
			return true
		}
	}
	for _, p := range c.Points {
		if p.State.Before != p.State.After || p.Head.Differs() || p.GaugePressure.Differs() {
			return true
		}
	}
	for _, l := range c.Limits {
		if l.Outcome != Same || l.Value.Differs() || l.LimitValue.Differs() {
			return true
		}
	}
	return false
}

// worstKind is a figure of which the worst counts: the least where least is set, else the greatest.
type worstKind struct {
	what, unit string
	least      bool
	list       func(c *Condition) []onValue
}

// onValue is a figure of one thing.
type onValue struct {
	on    string
	value Figure
}

// ofPumps lists a figure of the running pumps of a condition.
func ofPumps(figure func(Pump) Figure) func(c *Condition) []onValue {
	return func(c *Condition) (list []onValue) {
		for _, p := range c.Pumps {
			if p.Running {
				list = append(list, onValue{p.Pump, figure(p)})
			}
		}
		return list
	}
}

// worstKinds are the figures whose worst is told.
var worstKinds = []worstKind{
	{"least NPSH margin", "m", true, ofPumps(func(p Pump) Figure { return p.NPSHMargin })},
	{"least flow over its minimum", "%", true, func(c *Condition) (list []onValue) {
		for _, f := range c.Findings {
			if f.Limit == "minimum flow" && f.LimitValue > 0 {
				list = append(list, onValue{f.On, 100 * f.Value / f.LimitValue})
			}
		}
		return list
	}},
	{"greatest shaft power", "kW", false, ofPumps(func(p Pump) Figure { return p.ShaftPower })},
	{"greatest share of best-efficiency flow", "%", false, ofPumps(func(p Pump) Figure { return 100 * p.BestShare })},
	{"greatest velocity", "m/s", false, func(c *Condition) (list []onValue) {
		for _, r := range c.Runs {
			if !r.Shut {
				list = append(list, onValue{r.Run, Figure(math.Abs(float64(r.Velocity)))})
			}
		}
		return list
	}},
	{"lowest gauge pressure", "bar", true, func(c *Condition) (list []onValue) {
		for i, p := range c.Points {
			if !c.solved.Network.Points[i].Fixed { // the sea, an overboard and a tank are given, not found
				list = append(list, onValue{p.Point, p.GaugePressure})
			}
		}
		return list
	}},
}

// worst finds the worst of each figure on each side, over all its conditions.
func (a *Comparison) worst() (list []WorstComparison) {
	for _, k := range worstKinds {
		w := WorstComparison{What: k.what, Unit: k.unit, Before: k.of(a.before), After: k.of(a.after)}
		if w.Before.Value.Known() || w.After.Value.Known() || len(w.Before.NotKnown)+len(w.After.NotKnown) > 0 {
			list = append(list, w)
		}
	}
	return list
}

func (k worstKind) of(check *Check) Worst {
	w := Worst{Value: unknown}
	if check == nil {
		return w
	}
	for i := range check.Conditions {
		c := &check.Conditions[i]
		all := k.list(c)
		known := c.solved != nil
		for _, v := range all {
			if !v.value.Known() {
				known = false
			} else if !w.Value.Known() || k.least && v.value < w.Value || !k.least && v.value > w.Value {
				w.Value, w.On, w.Condition = v.value, v.on, c.Condition
			}
		}
		if !known && (len(all) > 0 || c.solved == nil) {
			w.NotKnown = append(w.NotKnown, c.Condition)
		}
	}
	return w
}
