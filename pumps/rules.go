package pumps

import (
	_ "embed" // for the tables of rules
	"fmt"
	"math"
	"slices"
	"strings"
	"sync"

	"brinehead/sources"
)

// Tolerance is by how much a figure may lie below and above the guaranteed one, as a share of it; +Inf where that side has no
// limit.
type Tolerance struct {
	Below, Above float64
	Source       string
	Mark         sources.Mark
}

// Grade is an acceptance grade: what a test of a pump may depart from what was guaranteed. The guarantee holds where the
// measured curve cuts or touches the cross of the tolerances of flow and head.
type Grade struct {
	Standard, Name                string
	Flow, Head, Power, Efficiency Tolerance
}

//go:embed rules/acceptance.csv
var acceptanceCSV string

//go:embed rules/practice.csv
var practiceCSV string

// Grades returns the acceptance grades of ISO 9906, in the order of its editions.
func Grades() []Grade { return slices.Clone(grades()) }

var grades = sync.OnceValue(func() []Grade {
	list, err := parseGrades(acceptanceCSV)
	if err != nil {
		panic(fmt.Sprintf("embedded table of acceptance grades cannot be read: %v", err))
	}
	return list
})

func parseGrades(text string) (list []Grade, err error) {
	table, err := sources.ParseMarked(text, "standard", "grade", "quantity", "below_percent", "above_percent")
	if err != nil {
		return nil, err
	}
	for _, row := range table.Rows {
		none := Tolerance{Below: math.Inf(1), Above: math.Inf(1)}
		k := slices.IndexFunc(list, func(g Grade) bool { return g.Standard == row["standard"] && g.Name == row["grade"] })
		if k < 0 {
			k = len(list)
			list = append(list, Grade{row["standard"], row["grade"], none, none, none, none})
		}
		t := Tolerance{Source: row["source"], Mark: row.Mark()}
		for column, side := range map[string]*float64{"below_percent": &t.Below, "above_percent": &t.Above} {
			if *side, err = row.Number(column, 0.01); err != nil {
				return nil, err
			}
			if math.IsNaN(*side) {
				*side = math.Inf(1)
			}
		}
		g := &list[k]
		into, known := map[string]*Tolerance{"flow": &g.Flow, "head": &g.Head, "power": &g.Power, "efficiency": &g.Efficiency}[row["quantity"]]
		if !known {
			return nil, fmt.Errorf("quantity: found %q, want flow, head, power or efficiency", row["quantity"])
		}
		*into = t
	}
	return list, nil
}

// FindGrade finds a grade by its name, whatever the case, the latest edition first. The error lists the names.
func FindGrade(name string) (Grade, error) {
	var names []string
	for _, g := range grades() {
		if strings.EqualFold(g.Name, strings.TrimSpace(name)) {
			return g, nil
		}
		names = append(names, g.Name)
	}
	return Grade{}, fmt.Errorf("acceptance grade: found %q, want one of %s", name, strings.Join(names, ", "))
}

// Band returns the lowest and the highest head (m) at a flow (m3/s) of a pump whose tested curve would still be accepted
// at every point of the pump's own curve taken as guaranteed: the curve may lie low by the tolerance of head, or short by that
// of flow, whichever is more. A side is NaN where the pump's curve does not reach.
func (g Grade) Band(p Pump, flow float64) (low, high float64) {
	from, to := p.Range()
	head := func(q float64) float64 {
		if !(from <= q && q <= to) {
			return math.NaN()
		}
		h, _ := p.Head(q)
		return h
	}
	here := head(flow)
	low = math.Min(here*(1-g.Head.Below), head(flow/(1-g.Flow.Below)))
	high = math.Max(here*(1+g.Head.Above), head(flow/(1+g.Flow.Above)))
	return low, high
}

// Practice is one rule or limit of the trade.
type Practice struct {
	Rule, AppliesTo string
	Value           float64
	Unit            string
	Source          string
	Mark            sources.Mark
}

// Practices returns the rules of motors, regions, NPSH margins and trims in the order of their table, and NotesOfPractice
// what there is to say of their sources.
func Practices() []Practice { return slices.Clone(practice().list) }

// PracticeNotes returns the notes on the sources of [Practices] and of [Grades].
func PracticeNotes() []string { return slices.Clone(practice().notes) }

type practiceTable struct {
	list  []Practice
	notes []string
}

var practice = sync.OnceValue(func() practiceTable {
	p, err := parsePractice(practiceCSV)
	if err != nil {
		panic(fmt.Sprintf("embedded table of practice cannot be read: %v", err))
	}
	return p
})

func parsePractice(text string) (p practiceTable, err error) {
	table, err := sources.ParseMarked(text, "rule", "applies_to", "value", "unit")
	if err != nil {
		return p, err
	}
	p.notes = table.Notes
	for _, row := range table.Rows {
		rule := Practice{Rule: row["rule"], AppliesTo: row["applies_to"], Unit: row["unit"], Source: row["source"], Mark: row.Mark()}
		if rule.Value, err = row.Number("value", 1); err != nil {
			return p, err
		}
		p.list = append(p.list, rule)
	}
	return p, nil
}

// ruled returns the value of a rule of the table of practice, which must have it.
func ruled(rule, appliesTo string) float64 {
	for _, p := range practice().list {
		if p.Rule == rule && p.AppliesTo == appliesTo {
			return p.Value
		}
	}
	panic("pumps: no rule " + rule + ", " + appliesTo)
}

// Region is a span of flows as shares of the flow of best efficiency.
type Region struct{ From, To float64 }

// highSpecificSpeed is that from which the preferred region is narrower, rpm, m3/s, m (4500 in US units).
const highSpecificSpeed = 87.0

// PreferredRegion returns the preferred operating region of a pump of a specific speed (rpm, m3/s, m; NaN where not known: then
// that of most pumps).
//
// Source: ANSI/HI 9.6.3-2012, 3.1, as quoted in an article of Pumps & Systems.
func PreferredRegion(specificSpeed float64) Region {
	kind := "most rotodynamic pumps"
	if specificSpeed > highSpecificSpeed {
		kind = "specific speed above 87 (4500 US)"
	}
	return Region{ruled("preferred operating region; from", kind) / 100, ruled("preferred operating region; to", kind) / 100}
}

// AllowableRegion returns the allowable operating region where the maker is silent (common practice).
func AllowableRegion() Region {
	const kind = "where the maker is silent"
	return Region{ruled("allowable operating region; from", kind) / 100, ruled("allowable operating region; to", kind) / 100}
}

// highSuctionSpeed is the suction specific speed from which the wider NPSH margin is asked, rpm, m3/s, m (7500 in US units).
const highSuctionSpeed = 145.0

// NPSHRule returns the margin asked of water pumps, the greater of a ratio and of metres: the wider one outside the preferred
// region or from a suction specific speed of 145 (rpm, m3/s, m; NaN counts as low, since it is the region that is judged then).
//
// Source: ANSI/HI 9.6.1-2012, from a one-page summary; outside the preferred region common practice.
func NPSHRule(preferred bool, suctionSpecificSpeed float64) (ratio, metres float64) {
	if !preferred || suctionSpecificSpeed > highSuctionSpeed {
		return 1.2, 1.0
	}
	return 1.1, 0.6
}

// MotorMargin returns the rating a motor should have over the power its pump takes (W, more than 0), as a ratio: 1.35 at 1 kW, 1.20
// at 10 kW and 1.10 from 100 kW, straight over the logarithm of the power between.
//
// Source: ISO 5199, figure of motor margins (three points of it, from memory, to be verified).
func MotorMargin(power float64) float64 {
	chart := [][2]float64{}
	for i, at := range []string{"ISO 5199; at 1 kW", "ISO 5199; at 10 kW", "ISO 5199; from 100 kW"} {
		chart = append(chart, [2]float64{float64(i), ruled("motor rating over pump power", at) / 100})
	}
	return chartLine(chart, math.Min(math.Max(math.Log10(power/1e3), 0), 2), 0, 1)
}
