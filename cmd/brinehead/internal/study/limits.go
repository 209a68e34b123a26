package study

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/curves"
	"brinehead/hydraulics"
	"brinehead/pumps"
)

// Verdict is the outcome of judging a limit.
type Verdict string

// The verdicts. Not judged is no pass.
const (
	Met       Verdict = "met"
	NotMet    Verdict = "not met"
	NotJudged Verdict = "not judged"
)

// Finding is one limit judged in one condition.
type Finding struct {
	Limit      string  `json:"limit"`
	On         string  `json:"on"`
	Value      Figure  `json:"value"`
	LimitValue Figure  `json:"limit_value"`
	Unit       string  `json:"unit"`
	Verdict    Verdict `json:"verdict"`
	Reason     string  `json:"reason"`
	Source     string  `json:"source"` // limits.csv with its line, or the default's source
}

// limit is one thing that must hold.
type limit struct {
	name      string // canonical, as in limitKinds
	on        string // a name, or * for all that the limit can be on
	value     float64
	condition string // or empty for all
	source    string
	byDefault bool
}

// limitKind is a kind of limit: what it may be on, its unit in findings, whether the value must not fall below it,
// and how the value is read from a condition (in that unit).
type limitKind struct {
	name  string
	unit  string
	scale float64 // unit of findings over the SI unit of the table
	least bool
	still bool     // judged from the condition alone, without a solution
	on    []string // pumps, runs, points, seas, tags; what * stands for is the first, by default it may be all
	value func(c *Condition, kind string, index int) (value Figure, why string)

	evenShut bool // a shut run is judged too
}

// limitKinds is the list of every limit that can be judged.
var limitKinds = []limitKind{
	{"minimum flow", "m3/h", 3600, true, false, []string{"pumps", "runs", "tags"}, flowOf, false},
	{"maximum flow", "m3/h", 3600, false, false, []string{"pumps", "runs", "tags"}, flowOf, false},
	{"NPSH margin", "m", 1, true, false, []string{"pumps"}, func(c *Condition, _ string, i int) (Figure, string) {
		return c.Pumps[i].NPSHMargin, noNPSH(c, i)
	}, false},
	{"NPSH ratio", "-", 1, true, false, []string{"pumps"}, func(c *Condition, _ string, i int) (Figure, string) {
		return c.Pumps[i].NPSHAvailable / c.Pumps[i].NPSHRequired, noNPSH(c, i)
	}, false},
	{"maximum velocity", "m/s", 1, false, false, []string{"runs"}, velocityOf, false},
	{"minimum velocity", "m/s", 1, true, false, []string{"runs"}, velocityOf, false},
	{"maximum shaft power", "kW", 1e-3, false, false, []string{"pumps"}, func(c *Condition, _ string, i int) (Figure, string) {
		return c.Pumps[i].ShaftPower, "the pump sheet gives neither efficiency nor power at this flow"
	}, false},
	{"least share of best-efficiency flow", "%", 100, true, false, []string{"pumps"}, shareOf, false},
	{"greatest share of best-efficiency flow", "%", 100, false, false, []string{"pumps"}, shareOf, false},
	{"least allowable share of best-efficiency flow", "%", 100, true, false, []string{"pumps"}, shareOf, false},
	{"greatest allowable share of best-efficiency flow", "%", 100, false, false, []string{"pumps"}, shareOf, false},
	{"maximum shaft power along the curve", "kW", 1e-3, false, false, []string{"pumps"}, func(c *Condition, _ string, i int) (Figure, string) {
		return c.Pumps[i].GreatestPower, "the pump sheet gives neither efficiency nor power"
	}, false},
	{"least motor reserve", "%", 100, true, false, []string{"pumps"}, func(c *Condition, _ string, i int) (Figure, string) {
		return 100 / c.Pumps[i].MotorLoad, "the shaft power or the motor's rating is not known"
	}, false},
	{"maximum shut-off pressure", "bar", 1e-5, false, false, []string{"runs", "tags", "pumps"}, shutOffPressure, true},
	{"minimum pressure", "bar", 1e-5, true, false, []string{"points"}, func(c *Condition, _ string, i int) (Figure, string) {
		return c.Points[i].GaugePressure, "the point is cut off by shut runs"
	}, false},
	{"minimum absolute pressure", "bar", 1e-5, true, false, []string{"runs"}, func(c *Condition, _ string, i int) (Figure, string) {
		return c.Runs[i].LowestPressure, "a point of the run is cut off by shut runs"
	}, false},
	{"minimum immersion", "m", 1, true, true, []string{"seas"}, func(c *Condition, _ string, i int) (Figure, string) {
		return c.Draught - Figure(c.built.Elevations[i]), "the condition gives no draught"
	}, false},
	{"maximum outlet temperature", "degC", 1, false, false, []string{"tags"}, func(c *Condition, _ string, i int) (Figure, string) {
		return c.Fittings[i].Outlet, "no heat [kW] is given for it, or no water flows"
	}, false},
}

// flowOf returns a pump's flow, or how much runs through a run or through that of a fitting, whichever way.
func flowOf(c *Condition, kind string, i int) (Figure, string) {
	switch kind {
	case "pumps":
		return c.Pumps[i].Flow, ""
	case "tags":
		for k, r := range c.Runs {
			if r.Run == c.Fittings[i].Run {
				return flowOf(c, "runs", k)
			}
		}
	}
	return Figure(math.Abs(float64(c.Runs[i].Flow))), ""
}

func velocityOf(c *Condition, _ string, i int) (Figure, string) {
	return Figure(math.Abs(float64(c.Runs[i].Velocity))), ""
}

func shareOf(c *Condition, _ string, i int) (Figure, string) {
	return 100 * c.Pumps[i].BestShare, "the pump sheet does not show its best-efficiency point"
}

func noNPSH(c *Condition, i int) string {
	low, high, given := c.solved.Plant.Pumps[i].NPSHRequiredRange()
	if !given {
		return "the pump sheet gives no NPSH required"
	}
	return fmt.Sprintf("the pump sheet gives NPSH required from %.0f to %.0f m3/h only, and the pump runs at %.0f m3/h",
		low*3600, high*3600, float64(c.Pumps[i].Flow))
}

// Defaults of common practice, judged where limits.csv names no limit of the kind.
const (
	practice        = "common practice"
	defaultVelocity = 3.0 // m/s
)

var defaultSources = map[string]string{
	"NPSH margin":                            practice + ": 0.6 m in the preferred region, 1.0 m outside it or from suction specific speed 145 (after ANSI/HI 9.6.1-2012, from a summary)",
	"NPSH ratio":                             practice + ": 1.1 in the preferred region, 1.2 outside it or from suction specific speed 145 (after ANSI/HI 9.6.1-2012, from a summary)",
	"maximum velocity":                       practice + ": what the run's material bears in sea water by the catalogue, or 3.0 m/s (an engine maker's project guide)",
	"minimum velocity":                       practice + ": what the run's material needs in sea water by the catalogue, where that says",
	"least share of best-efficiency flow":    practice + ": 70 %, or 80 % from specific speed 87, preferred region (after ANSI/HI 9.6.3-2012, from an article)",
	"greatest share of best-efficiency flow": practice + ": 120 %, preferred region (after ANSI/HI 9.6.3-2012, from an article)",
	"minimum absolute pressure":              practice + ": 0.3 bar absolute in a run that gives a high point: below it air and vapour gather there",
	"maximum shaft power":                    "the motor's rating in pumps.csv",

	"least allowable share of best-efficiency flow":    practice + ": 50 %, allowable region where the maker is silent (from memory)",
	"greatest allowable share of best-efficiency flow": practice + ": 125 %, allowable region where the maker is silent (from memory)",
	"maximum shaft power along the curve":              "the motor's rating in pumps.csv: a motor must carry its pump anywhere on its curve (" + practice + ")",
	"least motor reserve":                              "ISO 5199, figure of motor margins: rating over shaft power 135 % at 1 kW, 120 % at 10 kW, 110 % from 100 kW (from memory, verify)",
	"maximum shut-off pressure":                        "the design pressures in runs.csv, fittings.csv and pumps.csv",
}

// limits are the limits of a job, its own and the defaults.
type limits struct {
	list     []limit
	defaults []Default
}

func newLimits(j *job.Job) *limits {
	l := &limits{}
	named := map[string]bool{}
	for _, row := range j.Tables.Limits {
		for _, k := range limitKinds {
			if !strings.EqualFold(k.name, row.Limit.Value) {
				continue
			}
			named[k.name] = true
			l.list = append(l.list, limit{name: k.name, on: row.On.Value, value: row.Value.Value * k.scale, condition: row.Condition.Value,
				source: fmt.Sprintf("limits.csv, line %d", row.Limit.Line)})
		}
	}
	for _, k := range limitKinds {
		source, has := defaultSources[k.name]
		if named[k.name] || !has {
			continue
		}
		l.defaults = append(l.defaults, Default{k.name, source})
		l.list = append(l.list, limit{name: k.name, on: "*", value: math.NaN(), source: source, byDefault: true})
	}
	return l
}

// Default is a limit judged by default, with where its figure comes from.
type Default struct {
	Limit  string `json:"limit"`
	Source string `json:"source"`
}

// judge judges every limit in a condition. A condition without a solution has every limit not judged.
func (l *limits) judge(c *Condition, failure error) []Finding {
	var findings []Finding
	for _, k := range limitKinds {
		for _, lim := range l.list {
			if lim.name != k.name || lim.condition != "" && !strings.EqualFold(lim.condition, c.Condition) {
				continue
			}
			findings = append(findings, k.judge(c, lim, failure)...)
		}
	}
	return findings
}

// judge judges one limit on each thing it is on.
func (k limitKind) judge(c *Condition, lim limit, failure error) []Finding {
	var findings []Finding
	for _, kind := range k.on {
		for i, name := range namesOf(kind, c.built.Plant) {
			if name == "" || lim.on != "*" && !strings.EqualFold(lim.on, name) {
				continue
			}
			if f, applies := k.finding(c, lim, kind, i, failure); applies {
				f.On = name
				findings = append(findings, f)
			}
		}
		if lim.on == "*" && !lim.byDefault {
			break // all of the first kind
		}
	}
	return findings
}

// namesOf lists what a limit can be on; an empty name is none.
func namesOf(kind string, plant *curves.Plant) []string {
	var names []string
	switch kind {
	case "pumps":
		for _, p := range plant.Pumps {
			names = append(names, p.Name)
		}
	case "runs":
		for _, r := range plant.Network.Runs {
			names = append(names, r.Name)
		}
	case "points":
		for _, p := range plant.Network.Points {
			names = append(names, p.Name)
		}
	case "seas":
		for i, p := range plant.Network.Points {
			if !plant.SeaInlets[i] {
				p.Name = ""
			}
			names = append(names, p.Name)
		}
	case "tags":
		for _, r := range plant.Network.Runs {
			for _, f := range r.Fittings {
				names = append(names, f.Tag)
			}
		}
	}
	return names
}

// finding judges one limit on one thing. It does not apply to an idle pump or a shut run, unless the limit was set for
// this very thing in this very condition: then it is not judged, with the reason.
func (k limitKind) finding(c *Condition, lim limit, kind string, i int, failure error) (f Finding, applies bool) {
	f = Finding{Limit: k.name, Value: unknown, LimitValue: Figure(lim.value), Unit: k.unit, Verdict: NotJudged, Source: lim.source}
	asked, plant := lim.on != "*" && lim.condition != "", c.built.Plant
	if kind == "pumps" && !plant.Pumps[i].Running {
		f.Reason = "the pump does not run in this condition"
		return f, asked
	}
	if kind == "runs" && k.unit != "m3/h" && plant.Network.Runs[i].Shut && !k.evenShut {
		f.Reason = "the run is shut in this condition"
		return f, asked
	}
	const atRest = 0.01 // m/s
	if kind == "runs" && k.least && k.unit == "m/s" && lim.on == "*" && failure == nil && math.Abs(float64(c.Runs[i].Velocity)) < atRest {
		return f, false // a standby branch or a balanced cross-connection has no velocity to keep
	}
	if lim.byDefault {
		lim.value, f.Source = k.defaultValue(c, kind, i, failure)
		if f.LimitValue = Figure(lim.value); !f.LimitValue.Known() {
			return f, false // no motor rating: nothing to hold the power against
		}
	}
	if failure != nil && !k.still {
		f.Reason = reasonOf(failure)
		return f, true
	}
	value, why := k.value(c, kind, i)
	f.Value = value
	if !value.Known() {
		f.Value, f.Reason = unknown, c.whyUnknown(why)
		return f, true
	}
	ok := float64(value) <= lim.value
	if k.least {
		ok = float64(value) >= lim.value
	}
	if ok {
		f.Verdict = Met
	} else {
		f.Verdict = NotMet
	}
	f.Reason = f.Worded(float64(value), lim.value, k.unit)
	if f.Verdict == Met {
		c.doubtNPSH(&f, i)
	}
	return f, true
}

// doubtNPSH takes back the verdict on an NPSH margin or ratio that holds with affinity alone, and would not with the highest NPSH
// required that the pump's speed may bring.
func (c *Condition) doubtNPSH(f *Finding, i int) {
	var value Figure
	p := Pump{}
	if i < len(c.Pumps) {
		p = c.Pumps[i]
	}
	switch f.Limit {
	case "NPSH margin":
		value = p.NPSHAvailable - p.NPSHRequiredHigh
	case "NPSH ratio":
		value = p.NPSHAvailable / p.NPSHRequiredHigh
	default:
		return
	}
	if value < f.LimitValue {
		f.Verdict = NotJudged
		f.Reason += fmt.Sprintf(" by affinity; but with the NPSH required at this speed as high as it may be, %s (power 1.3 of the speed: ISO 9906, from memory), it is %s", short(float64(p.NPSHRequiredHigh), 3)+" m", short(float64(value), 3))
	}
}

// Worded says a judged finding in words, its value and its limit given in a unit of the caller's choice.
func (f Finding) Worded(value, limitValue float64, unit string) string {
	word := "at most"
	for _, k := range limitKinds {
		if k.name == f.Limit && k.least {
			word = "at least"
		}
	}
	// Enough digits to tell the two apart, and no more than they are worth.
	digits := 3
	for digits < 8 && value != limitValue && short(value, digits) == short(limitValue, digits) {
		digits++
	}
	if unit == "-" {
		return fmt.Sprintf("%s, want %s %s", short(value, digits), word, short(limitValue, digits))
	}
	return fmt.Sprintf("%s %s, want %s %s", short(value, digits), unit, word, short(limitValue, digits))
}

// Origin says in a word where the limit comes from: its row, or default.
func (f Finding) Origin() string {
	if strings.HasPrefix(f.Source, "limits.csv") {
		return f.Source
	}
	return "default"
}

// defaultValue returns the default of a limit for a pump or a run, in the unit of findings, and its source; NaN where
// there is none.
func (k limitKind) defaultValue(c *Condition, kind string, i int, failure error) (value float64, source string) {
	source = defaultSources[k.name]
	switch k.name {
	case "maximum velocity":
		if b := c.built.Walls[i].Greatest; b.Known() {
			return b.Velocity, boundSource(c.built.Walls[i].Material, b)
		}
		return defaultVelocity, source
	case "minimum absolute pressure":
		if math.IsNaN(c.built.HighPoints[i]) {
			return math.NaN(), source
		}
		return siphonPressure / 1e5, source
	case "minimum velocity":
		b := c.built.Walls[i].Least
		return b.Velocity, boundSource(c.built.Walls[i].Material, b)
	case "maximum shaft power", "maximum shaft power along the curve":
		return c.built.Pumps[i].Motor.Rating / 1e3, source
	case "least motor reserve":
		if failure != nil || !c.Pumps[i].ShaftPower.Known() || math.IsNaN(c.built.Pumps[i].Motor.Rating) {
			return math.NaN(), source // nothing to hold against each other; the maximum shaft power says so
		}
		return 100 * pumps.MotorMargin(float64(c.Pumps[i].ShaftPower)*1e3), source
	case "maximum shut-off pressure":
		design := map[string][]float64{"runs": c.built.Design.Runs, "tags": c.built.Design.Fittings, "pumps": c.built.Design.Pumps}[kind]
		return design[i] / 1e5, designSource(kind)
	}
	return k.pumpDefault(c, i, failure), source
}

// pumpDefault returns the default of a limit that goes by the kind of pump.
func (k limitKind) pumpDefault(c *Condition, i int, failure error) float64 {
	numbers := c.built.Pumps[i].Curve.Numbers()
	preferred, allowable := pumps.PreferredRegion(numbers.SpecificSpeed), pumps.AllowableRegion()
	inside := false // an unknown share counts as outside: the stricter rule
	if failure == nil {
		share := float64(c.Pumps[i].BestShare)
		inside = preferred.From <= share && share <= preferred.To
	}
	ratio, metres := pumps.NPSHRule(inside, numbers.SuctionSpecificSpeed)
	return map[string]float64{
		"least share of best-efficiency flow": 100 * preferred.From, "greatest share of best-efficiency flow": 100 * preferred.To,
		"least allowable share of best-efficiency flow": 100 * allowable.From, "greatest allowable share of best-efficiency flow": 100 * allowable.To,
		"NPSH margin": metres, "NPSH ratio": ratio,
	}[k.name]
}

// boundSource says where a velocity that a material bears comes from.
func boundSource(material string, b hydraulics.Bound) string {
	return fmt.Sprintf("%s in sea water: %s; %s", material, b.Source, b.Mark.Meaning())
}

// whyUnknown gives the reason of a figure that is not known: the running pump that is off its curve where there is
// one, or else the kind's own.
func (c *Condition) whyUnknown(own string) string {
	for _, p := range c.Pumps {
		if p.Extrapolated {
			return p.Pump + " runs beyond its digitised curve in this condition, and every flow rests on it"
		}
	}
	if own == "" {
		own = "not known"
	}
	return own
}

func reasonOf(err error) string {
	var stuck *hydraulics.NotConverged
	if errors.As(err, &stuck) {
		return "the calculation did not converge: " + err.Error()
	}
	return err.Error()
}

// short formats a figure with a number of significant digits, without an exponent.
func short(x float64, digits int) string {
	if x == 0 || math.IsNaN(x) || math.IsInf(x, 0) {
		return fmt.Sprintf("%g", x)
	}
	places := digits - 1 - int(math.Floor(math.Log10(math.Abs(x))))
	return fmt.Sprintf("%.*f", max(places, 0), x)
}
