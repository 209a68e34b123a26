package study

import (
	"fmt"
	"math"
	"runtime"
	"slices"
	"strings"
	"sync"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/fluids"
	"brinehead/pumps"
)

// Suction is the answer to `suction`: what NPSH each pump has in each case, how dirty each strainer may get, and at what draught,
// temperature, bore, speed and flow the margin ends.
type Suction struct {
	Job       string        `json:"job"`
	Version   string        `json:"version"`
	Allowance Figure        `json:"alarm_allowance"` // share of the rise of the strainer's drop that the alarm keeps in hand
	Cases     []SuctionCase `json:"cases"`
	Worst     *WorstCell    `json:"worst"` // null where no margin could be worked out
	Defaults  []Default     `json:"defaults"`

	// Before is the same without the change folder; null without one.
	Before *Suction `json:"before"`
}

// SuctionCase is a condition, or one cell of the cross of draughts, temperatures and pumps running.
type SuctionCase struct {
	Condition   string           `json:"condition"`
	Draught     Figure           `json:"draught_m"`
	Temperature Figure           `json:"temperature_degC"`
	Running     []string         `json:"running"`
	TrimMethod  string           `json:"trim_method"` // where an impeller is trimmed by a law
	Pumps       []PumpSuction    `json:"pumps"`
	Strainers   []StrainerLimit  `json:"strainers"`
	Chests      []ChestImmersion `json:"sea_chests"`
	Reason      string           `json:"reason"` // why there is no answer; empty where there is one
	Notes       []string         `json:"notes"`

	make   func(more func(*job.ConditionRow), set ...job.Override) (*job.Case, error)
	solved *Condition
}

// Name tells a case from the others.
func (c *SuctionCase) Name() string { return c.Condition }

// PumpSuction is the suction of one running pump.
type PumpSuction struct {
	Pump      string        `json:"pump"`
	Flow      Figure        `json:"flow_m3h"`
	Available Figure        `json:"npsh_available_m"`
	Required  Figure        `json:"npsh_required_m"`
	High      Figure        `json:"npsh_required_high_m"`
	Margin    Figure        `json:"npsh_margin_m"`
	Ratio     Figure        `json:"npsh_ratio"`
	Rules     []Finding     `json:"rules"` // the limits on its margin and ratio
	Verdict   Verdict       `json:"verdict"`
	Lines     []NPSHLine    `json:"lines"` // that add up to the NPSH available
	Gauge     SuctionGauge  `json:"suction_gauge"`
	Limits    []MarginLimit `json:"limits"`
	Starting  []StartEffect `json:"starting"`
	Vacuum    []string      `json:"below_atmosphere"` // runs of the suction that stand below the atmosphere
}

// NPSHLine is one part of an NPSH available, losses negative.
type NPSHLine struct {
	What string `json:"what"`
	Run  string `json:"run"`
	Head Figure `json:"head_m"`
}

// SuctionGauge is what a suction gauge shows.
type SuctionGauge struct {
	Elevation Figure `json:"elevation_m"`
	Pressure  Figure `json:"gauge_pressure_bar"`
	Vacuum    Figure `json:"vacuum_mmHg"` // above 0 below the atmosphere, 0 above it
	Boils     bool   `json:"boils"`       // the pressure would lie below that of the vapour: no gauge shows it, the pump loses its suction
}

// StartEffect is what a pump's margin becomes when another one on the same suction starts.
type StartEffect struct {
	Pump    string  `json:"starting"`
	Flow    Figure  `json:"flow_m3h"`
	Margin  Figure  `json:"npsh_margin_m"`
	Verdict Verdict `json:"verdict"`
	Reason  string  `json:"reason"`
}

// WorstCell is the case and pump with the least margin, one that is not judged before all others.
type WorstCell struct {
	Condition string  `json:"condition"`
	Pump      string  `json:"pump"`
	Margin    Figure  `json:"npsh_margin_m"`
	Verdict   Verdict `json:"verdict"`
}

// SuctionOptions say what to ask. The zero value asks every condition as it stands.
type SuctionOptions struct {
	Conditions   []string   // only these
	Pump         string     // only this one
	Draughts     []float64  // m; each condition at each of them, in place of its own
	Temperatures []float64  // degC, likewise
	Running      [][]string // names of pumps, likewise
	Allowance    float64    // share of the rise of the strainer's drop kept in hand by the alarm; 0 counts as DefaultAllowance
	Heel         float64    // deg, to either side
	Trim, Length float64    // m by the stern between the draught marks, and the length between them
	Version      string
}

// DefaultAllowance is the share of the strainer's permissible rise in drop that an alarm keeps in hand (common practice).
const DefaultAllowance = 0.20

// Suctions works out the suction of a job's pumps. The error is job.Faults or says which name is not known.
func Suctions(j *job.Job, o SuctionOptions) (*Suction, error) {
	if o.Allowance == 0 {
		o.Allowance = DefaultAllowance
	}
	limits := newLimits(j)
	answer := &Suction{Job: j.Name, Version: o.Version, Allowance: Figure(o.Allowance), Defaults: limits.defaults}
	cases, err := suctionCases(j, o)
	if err != nil {
		return nil, err
	}
	answer.Cases = cases
	faults := make([]error, len(cases))
	var work sync.WaitGroup
	slots := make(chan struct{}, runtime.GOMAXPROCS(0))
	for i := range cases {
		work.Go(func() {
			slots <- struct{}{}
			faults[i] = answer.Cases[i].work(j, limits, o)
			<-slots
		})
	}
	work.Wait()
	for _, err := range faults {
		if err != nil {
			return nil, err
		}
	}
	answer.Worst = answer.worst()
	answer.Defaults = slices.DeleteFunc(slices.Clone(answer.Defaults), func(d Default) bool { return !strings.HasPrefix(d.Limit, "NPSH") })
	return answer, nil
}

// suctionCases makes the cases: every condition, or its cross with the lists asked for, and every method of trim.
func suctionCases(j *job.Job, o SuctionOptions) (cases []SuctionCase, err error) {
	names := o.Conditions
	if len(names) == 0 {
		names = j.Conditions()
	}
	if o.Pump != "" && !slices.ContainsFunc(j.Tables.Pumps, func(p job.PumpRow) bool { return strings.EqualFold(p.Pump.Value, o.Pump) }) {
		return nil, fmt.Errorf("pump: found %q, want one of %s", o.Pump, strings.Join(pumpNames(j), ", "))
	}
	for _, set := range o.Running {
		for _, p := range set {
			if !slices.ContainsFunc(pumpNames(j), func(n string) bool { return strings.EqualFold(n, p) }) {
				return nil, fmt.Errorf("running: found %q, want pumps of the job: %s", p, strings.Join(pumpNames(j), ", "))
			}
		}
	}
	for _, name := range names {
		built, err := j.Build(name)
		if err != nil {
			return nil, err
		}
		methods := []pumps.TrimMethod{pumps.ISO9906}
		if slices.ContainsFunc(built.Trims, job.Trim.ByLaw) {
			methods = pumps.TrimMethods()
		}
		for _, draught := range orOwn(o.Draughts) {
			for _, temperature := range orOwn(o.Temperatures) {
				for _, running := range orOwn(o.Running) {
					for _, method := range methods {
						c := SuctionCase{Condition: built.Row.Condition.Value, Draught: unknown, Temperature: unknown}
						if len(methods) > 1 {
							c.TrimMethod = method.String()
						}
						vary := func(row *job.ConditionRow) {
							if draught != nil {
								row.Draught.Value, row.Draught.Given = *draught, true
							}
							if temperature != nil {
								row.Temperature.Value, row.Temperature.Given = *temperature, true
							}
							if running != nil {
								run(row, *running)
							}
						}
						c.make = func(more func(*job.ConditionRow), set ...job.Override) (*job.Case, error) {
							return j.BuildVaried(name, method, func(row *job.ConditionRow) {
								vary(row)
								if more != nil {
									more(row)
								}
							}, set...)
						}
						cases = append(cases, c)
					}
				}
			}
		}
	}
	return cases, nil
}

// run sets the pumps that run.
func run(row *job.ConditionRow, names []string) {
	row.RunningList, row.NoneRuns = nil, len(names) == 0
	for _, n := range names {
		row.RunningList = append(row.RunningList, job.Text{Value: n})
	}
}

// orOwn returns the list's values, or one nil that stands for the condition's own.
func orOwn[T any](list []T) (values []*T) {
	for i := range list {
		values = append(values, &list[i])
	}
	if values == nil {
		values = []*T{nil}
	}
	return values
}

func pumpNames(j *job.Job) (names []string) {
	for _, p := range j.Tables.Pumps {
		names = append(names, p.Pump.Value)
	}
	return names
}

// work fills a case in. The error is one of the tables that no case can do without.
func (c *SuctionCase) work(j *job.Job, limits *limits, o SuctionOptions) error {
	built, err := c.make(nil)
	if err != nil {
		c.Reason = err.Error()
		return nil // a draught or temperature of the cross that cannot be: said, and not judged
	}
	c.Draught, c.Temperature = Figure(built.Row.Draught.Or(math.NaN())), Figure(built.Water.Celsius)
	for _, u := range built.Pumps {
		if u.Running {
			c.Running = append(c.Running, u.Name)
		}
	}
	solve := func(b *job.Case) *Condition {
		var near = c.solved
		if near != nil && near.solved != nil {
			one, _ := judged(j, limits, b, near.solved)
			return &one
		}
		one, _ := judged(j, limits, b, nil)
		return &one
	}
	s := solve(built)
	c.solved = s
	c.Notes = s.Notes
	if s.solved == nil {
		c.Reason = s.Notes[len(s.Notes)-1]
		return nil
	}
	for i, u := range s.solved.Plant.Pumps {
		if u.Running && (o.Pump == "" || strings.EqualFold(o.Pump, u.Name)) {
			c.Pumps = append(c.Pumps, c.pump(j, s, i, solve))
		}
	}
	c.Strainers = c.strainers(j, s, o, solve)
	c.Chests = chests(j, s, o)
	return nil
}

// npshRules returns the findings on a pump's margin and ratio.
func npshRules(c *Condition, pump string) (rules []Finding) {
	for _, f := range c.Findings {
		if (f.Limit == "NPSH margin" || f.Limit == "NPSH ratio") && strings.EqualFold(f.On, pump) {
			rules = append(rules, f)
		}
	}
	return rules
}

// keeps says whether a pump keeps every rule of its suction; where there is no rule it is not judged.
func keeps(rules []Finding) Verdict {
	if len(rules) == 0 {
		return NotJudged
	}
	verdict := Met
	for _, f := range rules {
		switch {
		case f.Verdict == NotMet:
			return NotMet
		case f.Verdict == NotJudged:
			verdict = NotJudged
		}
	}
	return verdict
}

// pump works out the suction of one pump in a solved case.
func (c *SuctionCase) pump(j *job.Job, s *Condition, i int, solve func(*job.Case) *Condition) PumpSuction {
	p := s.Pumps[i]
	out := PumpSuction{Pump: p.Pump, Flow: p.Flow, Available: p.NPSHAvailable, Required: p.NPSHRequired, High: p.NPSHRequiredHigh, Margin: p.NPSHMargin,
		Ratio: p.NPSHAvailable / p.NPSHRequired, Rules: npshRules(s, p.Pump), Gauge: SuctionGauge{unknown, unknown, unknown, false}}
	out.Verdict = keeps(out.Rules)
	if !p.Flow.Known() {
		return out
	}
	out.Lines = npshLines(s, i)
	out.Gauge = suctionGauge(j, s, i)
	for _, step := range suctionPath(s, s.solved.Plant.Pumps[i].From) {
		r := s.solved.Network.Runs[step.run]
		if pressure := lowestPressure(s.solved, step.run, s.built.HighPoints[step.run]); pressure < s.solved.Atmosphere {
			out.Vacuum = append(out.Vacuum, fmt.Sprintf("%s: %.2f bar absolute at its lowest", r.Name, pressure/1e5))
		}
	}
	out.Limits = c.marginLimits(j, s, i, solve)
	out.Starting = c.starting(s, i, solve)
	return out
}

// suctionStep is a run on the way from the sea to a pump; forward where the water goes from its start to its end.
type suctionStep struct {
	run     int
	forward bool
}

// suctionPath returns the runs that water takes from a fixed point to a point, upstream first: at every point the way that most
// comes from. It is empty where no water comes.
func suctionPath(s *Condition, point int) (path []suctionStep) {
	seen := map[int]bool{}
	for n := s.solved.Network; !n.Points[point].Fixed && !seen[point]; {
		seen[point] = true
		best, most := suctionStep{-1, false}, 0.0
		for i, r := range n.Runs {
			q := s.solved.RunFlows[i]
			switch {
			case r.To == point && q > most:
				best, most = suctionStep{i, true}, q
			case r.From == point && -q > most:
				best, most = suctionStep{i, false}, -q
			}
		}
		if best.run < 0 {
			return nil
		}
		path = append([]suctionStep{best}, path...)
		if point = n.Runs[best.run].From; !best.forward {
			point = n.Runs[best.run].To
		}
	}
	return path
}

// feeds returns the runs through which any of the water that reaches a point comes, on every way, nearest first.
func feeds(s *Condition, point int) (runs []int) {
	n := s.solved.Network
	points := []int{point}
	for k := 0; k < len(points); k++ {
		if n.Points[points[k]].Fixed {
			continue
		}
		for i, r := range n.Runs {
			const passes = 1e-9 // m3/s
			from := -1
			switch q := s.solved.RunFlows[i]; {
			case r.To == points[k] && q > passes:
				from = r.From
			case r.From == points[k] && q < -passes:
				from = r.To
			}
			if from < 0 || slices.Contains(runs, i) {
				continue
			}
			runs = append(runs, i)
			if !slices.Contains(points, from) {
				points = append(points, from)
			}
		}
	}
	return runs
}

// NPSHLines takes the NPSH available of a pump apart, by its place among the condition's pumps; nil where it does not run on its curve.
func (c *Condition) NPSHLines(pump int) []NPSHLine {
	if c.solved == nil || !c.Pumps[pump].Running || !c.Pumps[pump].NPSHAvailable.Known() {
		return nil
	}
	return npshLines(c, pump)
}

// npshLines takes a pump's NPSH available apart; the lines add up to it.
func npshLines(s *Condition, pump int) []NPSHLine {
	u := s.solved.Plant.Pumps[pump]
	weight := s.solved.Water.Density * fluids.Gravity
	path := suctionPath(s, u.From)
	source := u.From
	if len(path) > 0 {
		if first := s.solved.Network.Runs[path[0].run]; path[0].forward {
			source = first.From
		} else {
			source = first.To
		}
	}
	lines := []NPSHLine{
		{"atmosphere", "", Figure(s.solved.Atmosphere / weight)},
		{"vapour pressure", "", Figure(-s.solved.Water.VapourPressure / weight)},
		{fmt.Sprintf("head of %s over the pump's datum at %.2f m", s.solved.Network.Points[source].Name, u.Datum), "", Figure(s.solved.Heads[source] - u.Datum)},
	}
	for _, p := range path {
		r, sign := s.Runs[p.run], Figure(1)
		if !p.forward {
			sign = -1
		}
		lines = append(lines, NPSHLine{"pipe friction", r.Run, -sign * r.PipeLoss})
		for _, f := range s.Fittings {
			if f.Run == r.Run {
				name := f.Fitting
				if f.Tag != "" {
					name += " " + f.Tag
				}
				lines = append(lines, NPSHLine{name, r.Run, -sign * f.Loss})
			}
		}
		for _, more := range []struct {
			what string
			head Figure
		}{{"tees at its ends", r.TeeLoss}, {"weight of its own water", r.Buoyancy}} {
			if more.head != 0 {
				lines = append(lines, NPSHLine{more.what, r.Run, -sign * more.head})
			}
		}
	}
	return lines
}

// suctionGauge returns what the suction gauge of a pump shows: at its own elevation, or at the pump's datum where pumps.csv gives none.
func suctionGauge(j *job.Job, s *Condition, pump int) SuctionGauge {
	u := s.solved.Plant.Pumps[pump]
	elevation := j.Tables.Pumps[pump].SuctionGauge.Or(u.Datum)
	weight := s.solved.Water.Density * fluids.Gravity
	pressure := s.solved.GaugePressure(u.From) + (s.built.Elevations[u.From]-elevation)*weight
	const millimetreOfMercury = 133.322387415 // Pa, conventional
	if s.solved.Atmosphere+pressure < s.solved.Water.VapourPressure {
		return SuctionGauge{Figure(elevation), unknown, unknown, true}
	}
	return SuctionGauge{Figure(elevation), Figure(pressure / 1e5), Figure(math.Max(-pressure, 0) / millimetreOfMercury), false}
}

// starting starts each pump that stands idle and shares the suction, and sees what is left of the margin.
func (c *SuctionCase) starting(s *Condition, i int, solve func(*job.Case) *Condition) (effects []StartEffect) {
	mine := suctionPath(s, s.solved.Plant.Pumps[i].From)
	for k, other := range s.solved.Plant.Pumps {
		if other.Running || !c.shares(s, mine, k) {
			continue
		}
		built, err := c.make(func(row *job.ConditionRow) { run(row, append(slices.Clone(c.Running), other.Name)) })
		if err != nil {
			continue
		}
		with := solve(built)
		e := StartEffect{Pump: other.Name, Flow: unknown, Margin: unknown, Verdict: NotJudged}
		if with.solved == nil {
			e.Reason = with.Notes[len(with.Notes)-1]
		} else {
			rules := npshRules(with, s.Pumps[i].Pump)
			e.Flow, e.Margin, e.Verdict = with.Pumps[i].Flow, with.Pumps[i].NPSHMargin, keeps(rules)
			for _, f := range rules {
				if f.Verdict != Met {
					e.Reason = f.Limit + ": " + f.Reason
				}
			}
		}
		effects = append(effects, e)
	}
	return effects
}

// shares says whether an idle pump's suction is joined to a path by open runs, without passing a pump.
func (c *SuctionCase) shares(s *Condition, path []suctionStep, pump int) bool {
	n := s.solved.Network
	on := map[int]bool{}
	for _, p := range path {
		on[n.Runs[p.run].From], on[n.Runs[p.run].To] = true, true
	}
	seen := map[int]bool{}
	var reach func(point int) bool
	reach = func(point int) bool {
		if seen[point] || n.Points[point].Fixed {
			return false
		}
		if seen[point] = true; on[point] {
			return true
		}
		for _, r := range n.Runs {
			if !r.Shut && (r.From == point && reach(r.To) || r.To == point && reach(r.From)) {
				return true
			}
		}
		return false
	}
	return reach(s.solved.Plant.Pumps[pump].From)
}

// worst finds the case and pump with the least margin; what is not judged counts as worse than any margin.
func (a *Suction) worst() *WorstCell {
	var worst *WorstCell
	rank := func(v Verdict, margin Figure) float64 {
		if !margin.Known() {
			return math.Inf(-1)
		}
		return float64(margin)
	}
	for i := range a.Cases {
		c := &a.Cases[i]
		if c.Reason != "" && len(c.Pumps) == 0 {
			worst = &WorstCell{c.Name(), "", unknown, NotJudged}
		}
		for _, p := range c.Pumps {
			if worst == nil || rank(p.Verdict, p.Margin) < rank(worst.Verdict, worst.Margin) {
				worst = &WorstCell{c.Name(), p.Pump, p.Margin, p.Verdict}
			}
		}
	}
	return worst
}

// Met says whether every running pump keeps its margin in every case; where none runs nothing is shown.
func (a *Suction) Met() bool {
	if !slices.ContainsFunc(a.Cases, func(c SuctionCase) bool { return len(c.Pumps) > 0 }) {
		return false
	}
	for _, c := range a.Cases {
		if c.Reason != "" {
			return false
		}
		for _, p := range c.Pumps {
			if p.Verdict != Met {
				return false
			}
		}
	}
	return true
}
