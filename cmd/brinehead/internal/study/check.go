package study

import (
	"errors"
	"fmt"
	"math"
	"runtime"
	"slices"
	"strings"
	"sync"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/curves"
	"brinehead/fluids"
	"brinehead/hydraulics"
	"brinehead/pumps"
)

// Check is the answer to `check`: every condition of a job with its operating points and its limits judged. Its JSON
// keys are a contract; see the README.
type Check struct {
	Job        string      `json:"job"`
	Version    string      `json:"version"`
	Conditions []Condition `json:"conditions"`
	Defaults   []Default   `json:"defaults"`
	Supplied   []Supplied  `json:"supplied"`
	SheetNotes []string    `json:"sheet_notes"` // what is odd about the digitised curves

	Failed []error `json:"-"` // *NoSolution of each condition that could not be solved
}

// Condition is one condition solved.
type Condition struct {
	Condition string    `json:"condition"`
	Water     Water     `json:"water"`
	Draught   Figure    `json:"draught_m"`
	Pumps     []Pump    `json:"pumps"`
	Runs      []Run     `json:"runs"`
	Fittings  []Fitting `json:"fittings"`
	Points    []Point   `json:"points"`
	Findings  []Finding `json:"findings"`
	Notes     []string  `json:"notes"`
	Solution  Solution  `json:"solution"`

	solved  *curves.Solved // nil where there is no solution
	built   *job.Case
	deepest float64  // draught of all conditions of the job, m
	shut    *shutOff // once it is asked
	remarks []string // notes that give figures, kept for a sound solution
}

// Water is the water of a condition.
type Water struct {
	Kind             string `json:"kind"`
	Temperature      Figure `json:"temperature_degC"`
	Salinity         Figure `json:"salinity_g_kg"`
	Density          Figure `json:"density_kg_m3"`
	DynamicViscosity Figure `json:"dynamic_viscosity_Pa_s"`
	VapourPressure   Figure `json:"vapour_pressure_Pa"`
	HeatCapacity     Figure `json:"heat_capacity_J_kg_K"`
}

// Pump is a pump's operating point. Where it is extrapolated every figure that rests on the curve is unknown.
type Pump struct {
	Pump          string `json:"pump"`
	Running       bool   `json:"running"`
	Flow          Figure `json:"flow_m3h"`
	Head          Figure `json:"head_m"`
	Efficiency    Figure `json:"efficiency"`
	ShaftPower    Figure `json:"shaft_power_kW"`
	NPSHAvailable Figure `json:"npsh_available_m"`
	NPSHRequired  Figure `json:"npsh_required_m"`
	NPSHMargin    Figure `json:"npsh_margin_m"`
	BestShare     Figure `json:"best_efficiency_share"`
	Extrapolated  bool   `json:"extrapolated"`
	HeldShut      bool   `json:"held_shut"`

	NPSHRequiredHigh Figure `json:"npsh_required_high_m"` // the higher of what its speed may do to it
	Speed            Figure `json:"speed_rpm"`
	Impeller         Figure `json:"impeller_mm"`
	CurveOrigin      string `json:"curve_origin"` // "digitised", or how the curve was made
	MotorLoad        Figure `json:"motor_load"`   // shaft power over the motor's rating
	MotorCurrent     Figure `json:"motor_current_A"`
	CurrentBand      Figure `json:"motor_current_band"`            // by what share it may be off
	GreatestPower    Figure `json:"greatest_shaft_power_kW"`       // over the digitised curve
	GreatestAt       Figure `json:"greatest_shaft_power_flow_m3h"` // where
	GreatestAtEnd    bool   `json:"greatest_shaft_power_at_end"`   // that is the end of what is digitised: beyond it may be more

	// Trim holds what each method of trim gives, where the impeller is smaller than all digitised ones.
	Trim []TrimDuty `json:"trim"`

	// Crossings are all flows at which a drooping curve meets the system; none for a curve that only falls.
	Crossings []Crossing `json:"crossings"`
}

// Crossing is a meeting of a pump's curve and its system.
type Crossing struct {
	Flow   Figure `json:"flow_m3h"`
	Head   Figure `json:"head_m"`
	Stable bool   `json:"stable"`
}

// Run is the flow in a run, positive from its start to its end.
type Run struct {
	Run            string `json:"run"`
	Flow           Figure `json:"flow_m3h"`
	Velocity       Figure `json:"velocity_m_s"`
	Reynolds       Figure `json:"reynolds"`
	FrictionFactor Figure `json:"friction_factor"`
	PipeLoss       Figure `json:"pipe_loss_m"`
	FittingLoss    Figure `json:"fitting_loss_m"`
	Buoyancy       Figure `json:"buoyancy_m"`              // taken by the weight of the run's own water; below 0 where it drives the flow
	TeeLoss        Figure `json:"tee_loss_m"`              // taken by the tees at its ends, in the direction of the run; below 0 where they give
	LowestPressure Figure `json:"lowest_pressure_bar_abs"` // see lowestPressure
	VapourMargin   Figure `json:"vapour_margin_m"`         // of LowestPressure over the vapour pressure
	Regime         string `json:"regime"`
	Shut           bool   `json:"shut"`
}

// Fitting is the loss of one row of fittings.csv.
type Fitting struct {
	Run     string `json:"run"`
	Tag     string `json:"tag"`
	Fitting string `json:"fitting"`
	Loss    Figure `json:"loss_m"`
	Drop    Figure `json:"drop_bar"`
	Outlet  Figure `json:"outlet_temperature_degC"` // where the row gives a heat: by heat balance alone
}

// Point is the state of a point.
type Point struct {
	Point         string `json:"point"`
	Head          Figure `json:"head_m"`
	GaugePressure Figure `json:"gauge_pressure_bar"`
}

// Solution says how well the condition is solved.
type Solution struct {
	Converged    bool   `json:"converged"`
	Rounds       int    `json:"rounds"`
	MassResidual Figure `json:"mass_residual"`
	HeadResidual Figure `json:"head_residual_m"`
	Worst        string `json:"worst"`
}

// NoSolution is a condition without an answer.
type NoSolution struct {
	Condition string
	Err       error
}

// Error names the condition.
func (e *NoSolution) Error() string { return fmt.Sprintf("condition %s: %v", e.Condition, e.Err) }

// Unwrap returns why.
func (e *NoSolution) Unwrap() error { return e.Err }

// Checked solves the conditions of a job (all of them where only is empty) and judges its limits. Conditions that
// cannot be solved are in the answer, all their limits not judged, and in Failed. The error is job.Faults.
func Checked(j *job.Job, only []string, version string) (*Check, error) {
	if len(only) == 0 {
		only = j.Conditions()
	}
	limits := newLimits(j)
	answer := &Check{Job: j.Name, Version: version, Defaults: limits.defaults, Conditions: make([]Condition, len(only)), SheetNotes: SheetNotes(j)}
	faults, failures := make([]error, len(only)), make([]error, len(only))
	one := func(i int, near *curves.Solved) {
		answer.Conditions[i], faults[i], failures[i] = checkedCondition(j, limits, only[i], near)
	}
	one(0, nil)
	// The others start from the first one's solution, whichever is done first, on as many cores as there are.
	var work sync.WaitGroup
	slots := make(chan struct{}, runtime.GOMAXPROCS(0))
	for i := 1; i < len(only); i++ {
		work.Go(func() {
			slots <- struct{}{}
			one(i, answer.Conditions[0].solved)
			<-slots
		})
	}
	work.Wait()
	for i := range only {
		if faults[i] != nil {
			return nil, faults[i]
		}
		if failures[i] != nil {
			answer.Failed = append(answer.Failed, failures[i])
		}
		answer.supply(answer.Conditions[i].built.Supplied)
		for _, n := range answer.Conditions[i].trimNotes() {
			if !slices.Contains(answer.SheetNotes, n) {
				answer.SheetNotes = append(answer.SheetNotes, n)
			}
		}
	}
	answer.Defaults = slices.DeleteFunc(answer.Defaults, func(d Default) bool { return !answer.judges(d.Limit) })
	if len(only) == len(j.Conditions()) {
		if err := wrongWay(j, answer.Conditions).Err(); err != nil {
			return nil, err
		}
	}
	return answer, nil
}

// checkedCondition solves and judges one condition; where an impeller is trimmed by a law, by every method of trim, and a
// limit that they do not agree on is not judged. A fault is of the tables; a failure is a *NoSolution.
func checkedCondition(j *job.Job, limits *limits, name string, near *curves.Solved) (c Condition, fault, failure error) {
	const first = pumps.ISO9906 // whose figures are given
	c, fault, failure = conditionTrimmed(j, limits, name, first, near)
	if fault != nil || failure != nil || !slices.ContainsFunc(c.built.Trims, job.Trim.ByLaw) {
		return c, fault, failure
	}
	all := map[pumps.TrimMethod]*Condition{first: &c}
	for _, m := range pumps.TrimMethods() {
		if m == first {
			continue
		}
		other, fault, failure := conditionTrimmed(j, limits, name, m, near)
		if fault != nil {
			return c, fault, nil
		}
		if failure != nil {
			c.Notes = append(c.Notes, fmt.Sprintf("trimmed by %s: %v", m, failure))
		}
		all[m] = &other
	}
	c.weigh(all)
	return c, nil, nil
}

// conditionTrimmed solves and judges one condition with one method of trim.
func conditionTrimmed(j *job.Job, limits *limits, name string, method pumps.TrimMethod, near *curves.Solved) (c Condition, fault, failure error) {
	built, err := j.BuildTrimmed(name, method)
	if err != nil {
		return c, err, nil
	}
	c, failure = judged(j, limits, built, near)
	return c, nil, failure
}

// judged solves and judges a built case.
func judged(j *job.Job, limits *limits, built *job.Case, near *curves.Solved) (c Condition, failure error) {
	c = Condition{Condition: built.Row.Condition.Value, Water: waterOf(built.Plant), Draught: Figure(built.Row.Draught.Or(math.NaN())), built: built,
		deepest: deepestDraught(j.Draughts())}
	var err error
	if c.solved, err = c.solve(near); err != nil {
		failure = &NoSolution{c.Condition, err}
		c.Notes = append(c.Notes, "no solution: "+err.Error())
		c.Solution = Solution{MassResidual: unknown, HeadResidual: unknown}
	} else {
		c.report(j)
	}
	c.Findings = limits.judge(&c, err)
	return c, failure
}

// judges says whether the answer holds a finding of a limit.
func (a *Check) judges(limit string) bool {
	return slices.ContainsFunc(a.Conditions, func(c Condition) bool {
		return slices.ContainsFunc(c.Findings, func(f Finding) bool { return f.Limit == limit })
	})
}

// Supplied is a figure that the program has put in where the tables left it open.
type Supplied struct {
	On     string `json:"on"`
	What   string `json:"what"`
	Figure string `json:"figure"`
	Source string `json:"source"`
}

// supply notes supplied figures, each once.
func (a *Check) supply(figures []job.Supplied) {
	for _, f := range figures {
		if s := Supplied(f); !slices.Contains(a.Supplied, s) {
			a.Supplied = append(a.Supplied, s)
		}
	}
}

func waterOf(p *curves.Plant) Water {
	w := p.Water
	return Water{Kind: w.Kind.String(), Temperature: Figure(w.Celsius), Salinity: Figure(w.Salinity), Density: Figure(w.Density),
		DynamicViscosity: Figure(w.DynamicViscosity), VapourPressure: Figure(w.VapourPressure), HeatCapacity: Figure(w.HeatCapacity)}
}

// report fills in what the solution says. Where a running pump is beyond its curve, all flows rest on a guess at its
// head, and none is given as a figure.
func (c *Condition) report(j *job.Job) {
	s := c.solved
	sound := true
	for i, u := range s.Plant.Pumps {
		d := s.Duty(i)
		p := Pump{Pump: u.Name, Running: d.Running, Flow: Figure(d.Flow * 3600), Head: Figure(d.Head), Efficiency: Figure(d.Efficiency),
			ShaftPower: Figure(d.ShaftPower / 1e3), NPSHAvailable: Figure(d.NPSHAvailable), NPSHRequired: Figure(d.NPSHRequired),
			NPSHMargin: Figure(d.NPSHMargin), BestShare: Figure(d.BestShare), Extrapolated: d.Extrapolated && d.Running, HeldShut: d.HeldShut}
		c.drive(&p, u, d)
		if p.Extrapolated {
			sound = false
			c.Notes = append(c.Notes, beyondCurve(s, i))
		}
		if p.HeldShut {
			c.remarks = append(c.remarks, u.Name+" runs against its shut non-return valve and delivers nothing: it heats up")
		}
		if !d.Running && d.Flow < 0 {
			c.remarks = append(c.remarks, fmt.Sprintf("%s stands idle, and %s m3/h run back through its leaking non-return valve", u.Name, short(-d.Flow*3600, 3)))
		}
		if p.Running && !p.Extrapolated && u.Droops() {
			p.Crossings = c.crossings(i)
		}
		c.Pumps = append(c.Pumps, p)
	}
	for i, r := range s.Network.Runs {
		run := runOf(r, s.RunFlows[i], s.Network.Viscosity)
		if !r.Shut {
			run.TeeLoss = Figure(s.TeeLosses[i])
			c.pressures(i, &run)
		}
		c.Runs = append(c.Runs, run)
		c.Fittings = append(c.Fittings, fittingsOf(s, i)...)
	}
	for i, p := range s.Network.Points {
		c.Points = append(c.Points, Point{p.Name, Figure(s.Heads[i]), Figure(s.GaugePressure(i) / 1e5)})
		if math.IsNaN(s.Heads[i]) {
			c.Notes = append(c.Notes, p.Name+" is cut off by shut runs: its pressure is not known")
		}
	}
	for _, r := range c.Runs {
		if r.Regime == hydraulics.Transitional.String() {
			c.remarks = append(c.remarks, fmt.Sprintf("flow in %s is transitional (Re %.0f): its friction is a bridge between two laws", r.Run, float64(r.Reynolds)))
		}
		if float64(r.Reynolds) > hydraulics.GreatestReynolds {
			sound = false
			c.Notes = append(c.Notes, fmt.Sprintf("flow in %s is beyond the range of the friction law (Re %.3g)", r.Run, float64(r.Reynolds)))
		}
	}
	c.warn()
	c.Solution = Solution{true, s.Rounds, Figure(s.MassResidual), Figure(s.HeadResidual), s.Worst}
	outlets(j, c)
	if sound {
		c.Notes = append(c.Notes, c.remarks...)
	} else {
		c.withhold()
	}
}

// boilingMargin is the head over the vapour pressure under which a point is called near boiling, m (common practice).
const boilingMargin = 2.0

// warn notes what is odd of a whole condition: no pump runs, a point near boiling, tanks between which water runs.
func (c *Condition) warn() {
	s := c.solved
	if len(s.Plant.Pumps) > 0 && !slices.ContainsFunc(s.Plant.Pumps, func(u curves.Pump) bool { return u.Running }) {
		c.Notes = append(c.Notes, "no pump runs in this condition")
	}
	weight := s.Water.Density * fluids.Gravity
	for i, p := range s.Network.Points {
		margin := (s.Atmosphere + s.GaugePressure(i) - s.Water.VapourPressure) / weight
		if margin < 0 && !p.Fixed {
			c.remarks = append(c.remarks, fmt.Sprintf("%s boils: its pressure would lie %.1f m under that of the vapour, which no gauge shows; the flows of this condition are not reached", p.Name, -margin))
		} else if margin < boilingMargin && !p.Fixed {
			c.remarks = append(c.remarks, fmt.Sprintf("%s is near boiling: %.1f m over the vapour pressure, less than %g m (common practice)", p.Name, margin, boilingMargin))
		}
	}
	var held []string
	for i, p := range s.Network.Points {
		if p.Fixed && !c.built.SeaInlets[i] && !c.built.Overboards[i] && math.Abs(s.NetFlow(i)) > 1e-6 {
			held = append(held, fmt.Sprintf("%s %s m3/h", p.Name, short(s.NetFlow(i)*3600, 3)))
		}
	}
	if len(held) > 1 && c.Water.Kind == "fresh" {
		c.remarks = append(c.remarks, "more than one tank holds the circuit, and water runs from one to another (out of each: "+strings.Join(held, ", ")+"); a closed loop hangs on one tank")
	}
}

// crossings finds where a drooping curve meets its system, and says so where that is not in one place.
func (c *Condition) crossings(pump int) (list []Crossing) {
	found, err := c.solved.Crossings(pump)
	if err != nil {
		c.Notes = append(c.Notes, "the curve droops, and its crossings could not be searched: "+err.Error())
		return nil
	}
	name := c.solved.Plant.Pumps[pump].Name
	var others []string
	for _, x := range found {
		list = append(list, Crossing{Figure(x.Flow * 3600), Figure(x.Head), x.Stable})
		if math.Abs(x.Flow-c.solved.PumpFlows[pump]) > 1e-6 {
			word := "unstable"
			if x.Stable {
				word = "stable"
			}
			others = append(others, fmt.Sprintf("%s m3/h, %s m (%s)", short(x.Flow*3600, 3), short(x.Head, 3), word))
		}
	}
	if others != nil {
		c.remarks = append(c.remarks, fmt.Sprintf("the curve of %s droops and meets the system elsewhere too: %s. The stable point is reported; from rest, or after a dip, the pump may not reach it",
			name, strings.Join(others, "; ")))
	}
	return list
}

// withhold takes back every figure that rests on an extrapolated one. A fixed head stays: it is given, not found.
func (c *Condition) withhold() {
	for i, p := range c.Pumps {
		if p.Running {
			p.Flow, p.Head, p.Efficiency, p.ShaftPower, p.BestShare = unknown, unknown, unknown, unknown, unknown
			p.NPSHAvailable, p.NPSHRequired, p.NPSHRequiredHigh, p.NPSHMargin = unknown, unknown, unknown, unknown
			p.MotorLoad, p.MotorCurrent, p.HeldShut, p.Crossings = unknown, unknown, false, nil
			c.Pumps[i] = p
		}
	}
	for i, r := range c.Runs {
		if !r.Shut {
			c.Runs[i] = Run{Run: r.Run, Flow: unknown, Velocity: unknown, Reynolds: unknown, FrictionFactor: unknown, PipeLoss: unknown, FittingLoss: unknown, Buoyancy: unknown,
				TeeLoss: unknown, LowestPressure: unknown, VapourMargin: unknown}
		}
	}
	for i := range c.Fittings {
		c.Fittings[i].Loss, c.Fittings[i].Drop, c.Fittings[i].Outlet = unknown, unknown, unknown
	}
	for i, p := range c.solved.Network.Points {
		if !p.Fixed {
			c.Points[i].Head, c.Points[i].GaugePressure = unknown, unknown
		}
	}
}

// beyondCurve says in words where a pump stands that runs off its digitised points.
func beyondCurve(s *curves.Solved, pump int) string {
	u := s.Plant.Pumps[pump]
	low, high := u.Range()
	end, word, surplusWord := high, "last", "over"
	if s.PumpFlows[pump] < low {
		end, word, surplusWord = low, "first", "under"
	}
	text := fmt.Sprintf("%s runs beyond the %s digitised point of its curve, %.0f m3/h", u.Name, word, end*3600)
	if d, err := s.Demand(pump, end); err == nil {
		head, _ := u.Head(end)
		text += fmt.Sprintf("; there its head is still %.1f m %s what the system asks", math.Abs(head-d.Head), surplusWord)
	}
	return text + fmt.Sprintf(" (a straight continuation, which is no data, would meet the system near %s m3/h)", short(s.PumpFlows[pump]*3600, 2))
}

// solve solves the condition. Where the siphon of an overboard line would break, by its rule, the line is taken as falling
// from its high point, and solved anew.
func (c *Condition) solve(near *curves.Solved) (*curves.Solved, error) {
	s, err := c.built.SolveNear(near)
	if err != nil {
		return nil, err
	}
	broken := false
	for i, r := range s.Network.Runs {
		over, high := c.overboardOf(r), c.built.HighPoints[i]
		if over < 0 || r.Shut || !(high > s.Heads[over]) {
			continue
		}
		pressure := lowestPressure(s, i, high)
		text := fmt.Sprintf("%s rises to %.1f m, %.1f m over the head of %s: with its siphon the pressure there is %.2f bar absolute, the rule asks %.2f",
			r.Name, high, high-s.Heads[over], s.Network.Points[over].Name, pressure/1e5, siphonPressure/1e5)
		if pressure < siphonPressure {
			s.Network.Points[over].Head = high
			broken = true
			text += "; no credit is taken, and the pump lifts to the high point"
		} else {
			text += "; the credit is taken, but a pump starts the line without it"
		}
		c.remarks = append(c.remarks, text)
	}
	if broken {
		return c.built.Solve()
	}
	return s, nil
}

// siphonPressure is the least absolute pressure at the high point under which a siphon is counted on, Pa: below it air and
// vapour come out of the water and gather there (common practice).
const siphonPressure = 0.3e5

// overboardOf returns the overboard point at an end of a run, or -1.
func (c *Condition) overboardOf(r hydraulics.Run) int {
	for _, i := range []int{r.From, r.To} {
		if c.built.Overboards[i] {
			return i
		}
	}
	return -1
}

// lowestPressure returns the lowest absolute pressure in a run, Pa: at either end or at its high point (NaN for none), which
// is taken to lie behind all of the run's losses, since where it lies is not known.
func lowestPressure(s *curves.Solved, run int, high float64) float64 {
	r := s.Network.Runs[run]
	v := s.RunFlows[run] / r.Pipe.Area()
	from, to := s.Heads[r.From]-s.Elevations[r.From], s.Heads[r.To]-s.Elevations[r.To]
	lowest := math.Min(from, to)
	if !math.IsNaN(high) {
		lowest = math.Min(lowest, math.Min(s.Heads[r.From], s.Heads[r.To])-high)
	}
	return s.Atmosphere + (lowest-v*v/(2*fluids.Gravity))*s.Water.Density*fluids.Gravity
}

// pressures fills in the lowest pressure of a run and its margin to boiling.
func (c *Condition) pressures(i int, run *Run) {
	s := c.solved
	pressure := lowestPressure(s, i, c.built.HighPoints[i])
	run.LowestPressure = Figure(pressure / 1e5)
	run.VapourMargin = Figure((pressure - s.Water.VapourPressure) / (s.Water.Density * fluids.Gravity))
	high, over := c.built.HighPoints[i], c.overboardOf(s.Network.Runs[i])
	if siphon := over >= 0 && high > s.Heads[over]; pressure < s.Atmosphere && !math.IsNaN(high) && !siphon { // a siphon has its own note
		c.remarks = append(c.remarks, fmt.Sprintf("%s, high point %.1f m: lowest pressure %.2f bar absolute, below the atmosphere, %.1f m over boiling", run.Run, high, pressure/1e5, float64(run.VapourMargin)))
	}
}

func runOf(r hydraulics.Run, flow, viscosity float64) Run {
	out := Run{Run: r.Name, Flow: Figure(flow * 3600), Velocity: unknown, Reynolds: unknown, FrictionFactor: unknown, PipeLoss: unknown, FittingLoss: unknown, Buoyancy: unknown,
		TeeLoss: unknown, LowestPressure: unknown, VapourMargin: unknown, Shut: r.Shut}
	if r.Shut {
		return out
	}
	out.Velocity = Figure(flow / r.Pipe.Area())
	re := r.Reynolds(flow, viscosity)
	out.Reynolds = Figure(re)
	out.Regime = hydraulics.RegimeOf(re).String()
	if f, _, err := hydraulics.FrictionFactor(re, r.Pipe.Roughness/r.Pipe.ClearBore()); err == nil && r.Pipe.Length > 0 {
		out.FrictionFactor = Figure(f)
	}
	fittings := 0.0
	for k := range r.Fittings {
		fittings += r.FittingLoss(k, flow, viscosity)
	}
	out.PipeLoss, out.FittingLoss = Figure(r.PipeLoss(flow, viscosity)), Figure(fittings)
	out.Buoyancy = Figure(r.Buoyancy())
	return out
}

func fittingsOf(s *curves.Solved, run int) []Fitting {
	r := s.Network.Runs[run]
	var list []Fitting
	for k, f := range r.Fittings {
		h := r.FittingLoss(k, s.RunFlows[run], s.Network.Viscosity)
		row := Fitting{Run: r.Name, Tag: f.Tag, Fitting: f.Name, Loss: Figure(h), Drop: Figure(h * s.Water.Density * fluids.Gravity / 1e5), Outlet: unknown}
		if r.Shut {
			row.Loss, row.Drop = unknown, unknown
		}
		list = append(list, row)
	}
	return list
}

// outlets works out the temperature of the water that leaves each fitting that takes up a heat, from the heat balance
// alone: t = t_in + heat/(rho c Q), t_in being the condition's temperature.
func outlets(j *job.Job, c *Condition) {
	for _, row := range j.Tables.Fittings {
		if !row.Heat.Given {
			continue
		}
		for i := range c.Fittings {
			f := &c.Fittings[i]
			if f.Run != row.Run.Value || f.Tag != row.Tag.Value || f.Fitting != row.Fitting.Value {
				continue
			}
			for _, r := range c.Runs {
				if strings.EqualFold(r.Run, f.Run) && r.Flow != 0 {
					w := c.solved.Water
					f.Outlet = Figure(w.Celsius + row.Heat.Value/(w.Density*w.HeatCapacity*math.Abs(float64(r.Flow))/3600))
				}
			}
		}
	}
}

// wrongWay finds non-return valves that hold back water in every one of a job's conditions, where without them it would run
// backwards through their run each time: they stand the wrong way round, or their run is written from the wrong end.
func wrongWay(j *job.Job, conditions []Condition) job.Faults {
	var faults job.Faults
	for i, r := range conditions[0].built.Network.Runs {
		backwards := r.NonReturn()
		for k := range conditions {
			backwards = backwards && conditions[k].runsBackwards(i)
		}
		if !backwards {
			continue
		}
		row := j.Tables.Runs[i]
		faults = append(faults, job.Fault{Place: row.Run.Place, Found: `"` + row.Run.Value + `"`,
			Want: fmt.Sprintf("its non-return valve the other way round: in every condition water would run from %s to %s", row.To.Value, row.From.Value),
			Hint: "swap from and to of the run, if the valve is drawn right"})
	}
	return faults
}

// runsBackwards says whether water would run backwards through a run if its non-return valve were not there.
func (c *Condition) runsBackwards(run int) bool {
	if c.solved == nil || c.solved.Network.Runs[run].Shut || c.solved.RunFlows[run] != 0 {
		return false
	}
	without := *c.built.Plant
	without.Network.Runs = slices.Clone(without.Network.Runs)
	without.Network.Pumps = nil
	r := &without.Network.Runs[run]
	r.Fittings = slices.Clone(r.Fittings)
	for k := range r.Fittings {
		r.Fittings[k].NonReturn = false
	}
	s, err := without.Solve()
	const passes = 1e-6 // m3/s
	return err == nil && s.RunFlows[run] < -passes
}

// Met says whether every limit judged is met and none is left unjudged.
func (a *Check) Met() bool {
	for _, c := range a.Conditions {
		for _, f := range c.Findings {
			if f.Verdict != Met {
				return false
			}
		}
	}
	return true
}

// NotConverged returns the first condition whose solution did not settle, or nil.
func (a *Check) NotConverged() error {
	for _, err := range a.Failed {
		var stuck *hydraulics.NotConverged
		if errors.As(err, &stuck) {
			return err
		}
	}
	return nil
}
