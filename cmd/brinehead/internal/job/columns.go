package job

import (
	"fmt"
	"math"
	"slices"
	"strings"
)

// column is what one column of a table may hold.
type column struct {
	name     string // as in the contract, in lower case
	quantity Quantity
	required bool
	within   interval // of SI values
	integer  bool
	oneOf    []string // the words a text may be; none for any
	perRow   bool     // a value whose unit stands in the row's own unit column
}

// table is what a file of a job folder may hold.
type table struct {
	name     string
	required bool
	columns  []column
	key      string // column whose names others may refer to, or empty
}

// Names of the tables.
const (
	pointsTable     = "points"
	runsTable       = "runs"
	fittingsTable   = "fittings"
	pumpsTable      = "pumps"
	curvesTable     = "pump_curves"
	conditionsTable = "conditions"
	limitsTable     = "limits"
	readingsTable   = "readings"
)

func text(name string) column               { return column{name: name, quantity: words} }
func word(name string, of ...string) column { return column{name: name, quantity: words, oneOf: of} }
func number(name string, q Quantity, within interval) column {
	return column{name: name, quantity: q, within: within}
}

func (c column) must() column { c.required = true; return c }

// tables is the contract of DESIGN section 3: every table with its columns, in one list that reading, messages and
// documentation share.
var tables = []table{
	{name: pointsTable, required: true, key: "point", columns: []column{
		text("point").must(),
		word("kind", "sea", "overboard", "tank", "junction").must(),
		number("elevation", length, between(-100, 200)).must(),
		number("level", length, between(-100, 200)),
		number("pressure", pressure, between(-1.1e5, 1e8)),
		number("draw", flow, between(-100, 100)),
		text("straight"),
		word("siphon", "yes", "no"),
		number("tee angle", angle, between(0, math.Pi)),
		number("off centre", length, between(-50, 50)),
		number("aft of mark", length, between(-400, 400)),
		text("note"),
	}},
	{name: runsTable, required: true, key: "run", columns: []column{
		text("run").must(), text("from").must(), text("to").must(),
		number("length", length, between(0, 1e5)).must(),
		number("bore", length, between(0.002, 5)),
		text("standard"), text("size"), text("material"),
		number("roughness", length, between(0, 0.1)),
		number("fouling", length, between(0, 1)),
		word("state", "open", "shut"),
		number("temperature", temperature, between(-5, 150)),
		number("high point", length, between(-100, 200)),
		number("design pressure", pressure, above(0, 1e8)),
		text("note"),
	}},
	{name: fittingsTable, required: true, key: "tag", columns: []column{
		text("run").must(), text("fitting").must(), text("tag"),
		{name: "count", quantity: plain, within: between(1, 10000), integer: true},
		number("k", plain, between(0, 1e9)),
		number("kv", capacity, above(0, 1e7)),
		number("rated flow", flow, above(0, 100)),
		number("rated drop", drop, between(0, 1e8)),
		number("rated density", density, above(0, 2000)),
		number("exponent", plain, between(0.5, 3)),
		number("bore", length, between(0.002, 5)),
		number("blockage", share, below(0, 1)),
		number("opening", share, between(0, 1)),
		number("heat", power, between(-1e9, 1e9)),
		number("angle", angle, between(0, math.Pi)),
		number("radius ratio", plain, between(0, 100)),
		number("second bore", length, between(0.002, 5)),
		number("open area", share, above(0, 1)),
		number("hole", length, above(0, 5)),
		number("pitch", length, above(0, 5)),
		number("face area", area, above(0, 100)),
		number("area ratio", plain, above(0, 1000)),
		number("mesh", plain, between(0, 1000)),
		{name: "cuts", quantity: plain, within: between(1, 20), integer: true},
		number("length", length, between(0, 100)),
		number("design pressure", pressure, above(0, 1e8)),
		text("note"),
	}},
	{name: pumpsTable, required: true, key: "pump", columns: []column{
		text("pump").must(), text("from").must(), text("to").must(), text("curve").must(),
		number("datum", length, between(-100, 200)),
		number("impeller", length, between(0.01, 5)),
		number("speed", speed, above(0, 20000)),
		number("motor", power, above(0, 1e8)),
		number("wear", share, below(0, 1)),
		number("leak", capacity, above(0, 1e5)),
		number("internal leakage", share, between(0, 0.5)),
		number("inlet diameter", length, between(0.005, 5)),
		number("frequency", frequency, between(10, 400)),
		{name: "poles", quantity: plain, within: between(2, 48), integer: true},
		number("slip", share, between(0, 0.2)),
		number("volts", voltage, between(12, 15000)),
		number("motor efficiency", share, between(0.2, 1)),
		number("power factor", plain, between(0.1, 1)),
		number("design pressure", pressure, above(0, 1e8)),
		number("suction gauge elevation", length, between(-100, 200)),
		text("note"),
	}},
	{name: curvesTable, required: true, key: "curve", columns: []column{
		text("curve").must(),
		number("impeller", length, between(0.01, 5)),
		number("speed", speed, above(0, 20000)),
		number("flow", flow, between(0, 100)).must(),
		number("head", length, between(0, 2000)).must(),
		number("efficiency", share, between(0, 1)),
		number("power", power, between(0, 1e8)),
		number("npshr", length, between(0, 200)),
	}},
	{name: conditionsTable, required: true, key: "condition", columns: []column{
		text("condition").must(),
		word("water", "sea", "fresh").must(),
		number("temperature", temperature, between(-5, 150)).must(),
		number("salinity", salinity, between(0, 45)),
		number("draught", length, between(0, 50)),
		number("atmosphere", absolutePressure, between(5e4, 1.2e5)),
		text("running"),
		number("hours", plain, between(0, 8784)),
	}},
	{name: limitsTable, columns: []column{
		word("limit", "minimum flow", "maximum flow", "NPSH margin", "NPSH ratio", "maximum velocity", "minimum velocity", "maximum shaft power",
			"least share of best-efficiency flow", "greatest share of best-efficiency flow", "least allowable share of best-efficiency flow",
			"greatest allowable share of best-efficiency flow", "maximum shaft power along the curve", "least motor reserve", "maximum shut-off pressure", "minimum pressure", "minimum absolute pressure",
			"minimum immersion", "maximum outlet temperature").must(),
		text("on").must(),
		column{name: "value", quantity: plain, within: anyNumber, perRow: true}.must(),
		text("unit").must(), text("condition"), text("note"),
	}},
	{name: readingsTable, columns: []column{
		text("condition").must(),
		word("quantity", "suction gauge", "discharge gauge", "differential", "flow", "velocity", "shaft power", "motor power", "motor current", "speed",
			"temperature", "level", "draught").must(),
		text("on").must(),
		column{name: "value", quantity: plain, within: anyNumber, perRow: true}.must(),
		text("unit").must(),
		number("gauge elevation", length, between(-100, 200)),
		column{name: "uncertainty", quantity: plain, within: between(0, 1e9)},
	}},
}

// measure is what a value may be whose unit stands in its own row.
type measure struct {
	quantity Quantity
	within   interval // of SI values
}

// limitQuantities says in what a limit is given.
var limitQuantities = map[string]measure{
	"minimum flow": {flow, between(0, 100)}, "maximum flow": {flow, above(0, 100)},
	"npsh margin": {length, between(0, 100)}, "npsh ratio": {ratio, above(0, 100)},
	"maximum velocity": {velocity, above(0, 100)}, "minimum velocity": {velocity, between(0, 100)},
	"maximum shaft power":                 {power, above(0, 1e8)},
	"least share of best-efficiency flow": {share, between(0, 10)}, "greatest share of best-efficiency flow": {share, above(0, 10)},
	"least allowable share of best-efficiency flow": {share, between(0, 10)}, "greatest allowable share of best-efficiency flow": {share, above(0, 10)},
	"maximum shaft power along the curve": {power, above(0, 1e8)}, "least motor reserve": {share, above(0, 10)}, "maximum shut-off pressure": {pressure, above(0, 1e8)},
	"minimum pressure": {pressure, between(-1.1e5, 1e8)}, "minimum absolute pressure": {absolutePressure, between(0, 1e8)},
	"minimum immersion": {length, between(0, 50)}, "maximum outlet temperature": {temperature, between(-5, 150)},
}

// readingQuantities says in what a reading is given.
var readingQuantities = map[string]measure{
	"suction gauge": {pressure, between(-1.1e5, 1e8)}, "discharge gauge": {pressure, between(-1.1e5, 1e8)},
	"differential": {drop, between(-1e8, 1e8)}, "flow": {flow, between(-100, 100)}, "velocity": {velocity, between(-100, 100)},
	"shaft power": {power, between(0, 1e8)}, "motor power": {power, between(0, 1e8)}, "motor current": {current, between(0, 1e5)},
	"speed": {speed, between(0, 20000)}, "temperature": {temperature, between(-5, 150)},
	"level": {length, between(-100, 200)}, "draught": {length, between(0, 50)},
}

// settable are the columns that a condition may set for one element, by table.
var settable = map[string][]string{
	pointsTable:   {"level", "pressure", "draw"},
	runsTable:     {"state", "roughness", "fouling", "temperature"},
	fittingsTable: {"blockage", "opening", "k", "kv", "rated drop"},
	pumpsTable:    {"speed", "wear", "impeller", "leak", "internal leakage", "frequency"},
}

// TableContract is what a table of a job folder may hold.
type TableContract struct {
	File     string // as in "runs.csv"
	Required bool   // a job must have it
	Columns  []ColumnContract
}

// ColumnContract is what a column of a table may hold.
type ColumnContract struct {
	Name     string   // as it is matched, without its unit
	Quantity Quantity // its units, of which the header names one; none for words and plain numbers
	Required bool     // the table must have it, and every row fill it in
	Words    []string // the words it may be, or none where any will do
	Range    string   // of its number in the quantity's first unit, such as "at least 2, at most 5000"; empty for words
	Settable bool     // a condition may set it for one element, in a column "TAG name [unit]"
}

// Contract returns what every table may hold: the list by which tables are read.
func Contract() []TableContract {
	var list []TableContract
	for _, t := range tables {
		entry := TableContract{File: t.fileName(), Required: t.required}
		for _, c := range t.columns {
			out := ColumnContract{Name: c.name, Quantity: c.quantity, Required: c.required, Words: slices.Clone(c.oneOf), Settable: slices.Contains(settable[t.name], c.name)}
			if c.isNumber() {
				u := Unit{Factor: 1}
				if len(c.quantity.Units) > 0 {
					u = c.quantity.Units[0]
				}
				out.Range = c.within.words(u)
			}
			out.Quantity.Units = slices.Clone(c.quantity.Units)
			entry.Columns = append(entry.Columns, out)
		}
		list = append(list, entry)
	}
	return list
}

func (c column) isNumber() bool { return c.quantity.Name != words.Name }

func (t table) fileName() string { return t.name + ".csv" }

// column finds a column of the table.
func (t table) column(name string) (column, bool) {
	for _, c := range t.columns {
		if c.name == name {
			return c, true
		}
	}
	return column{}, false
}

// columnHint says what to do about a column of no known name.
func (t table) columnHint(name string) string {
	if before, unit, bracketed := strings.Cut(strings.TrimSuffix(name, ")"), "("); bracketed {
		if c, known := t.column(fold(before)); known {
			return fmt.Sprintf("a unit stands in square brackets: %s [%s]", c.name, unit)
		}
	}
	if name == "cv" { // so near to kv in spelling, so far in meaning
		return "kv [m3/h] is 0.865 times a Cv in gpm (US) at 1 psi"
	}
	return nearestHint(name, t.columnNames())
}

func (t table) columnNames() []string {
	var names []string
	for _, c := range t.columns {
		names = append(names, c.name)
	}
	return names
}

// tableNamed finds a table of the contract.
func tableNamed(name string) (table, bool) {
	for _, t := range tables {
		if t.name == name {
			return t, true
		}
	}
	return table{}, false
}
