package job

import "math"

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
	key      string // column whose names must be unique, or empty
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
		text("note"),
	}},
	{name: fittingsTable, required: true, columns: []column{
		text("run").must(), text("fitting").must(), text("tag"),
		{name: "count", quantity: plain, within: between(1, 10000), integer: true},
		number("k", plain, between(0, 1e9)),
		number("kv", capacity, above(0, 1e7)),
		number("rated flow", flow, above(0, 100)),
		number("rated drop", pressure, between(0, 1e8)),
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
		text("note"),
	}},
	{name: curvesTable, required: true, columns: []column{
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
		number("atmosphere", pressure, between(5e4, 1.2e5)),
		text("running"),
	}},
	{name: limitsTable, columns: []column{
		word("limit", "minimum flow", "maximum flow", "NPSH margin", "NPSH ratio", "maximum velocity", "minimum velocity", "maximum shaft power",
			"least share of best-efficiency flow", "greatest share of best-efficiency flow", "minimum pressure", "minimum absolute pressure",
			"minimum immersion", "maximum outlet temperature").must(),
		text("on").must(),
		column{name: "value", quantity: plain, within: anyNumber, perRow: true}.must(),
		text("unit").must(), text("condition"), text("note"),
	}},
	{name: readingsTable, columns: []column{
		text("condition").must(), text("quantity").must(), text("on").must(),
		column{name: "value", quantity: plain, within: anyNumber, perRow: true}.must(),
		text("unit").must(),
		number("gauge elevation", length, between(-100, 200)),
		column{name: "uncertainty", quantity: plain, within: between(0, 1e9)},
	}},
}

// limitQuantities says in what a limit is given.
var limitQuantities = map[string]Quantity{
	"minimum flow": flow, "maximum flow": flow, "npsh margin": length, "npsh ratio": ratio, "maximum velocity": velocity,
	"minimum velocity": velocity, "maximum shaft power": power, "least share of best-efficiency flow": share,
	"greatest share of best-efficiency flow": share, "minimum pressure": pressure, "minimum absolute pressure": pressure, "minimum immersion": length,
	"maximum outlet temperature": temperature,
}

// readingQuantities are the quantities whose units a reading may have.
var readingQuantities = []Quantity{pressure, flow, power, temperature, speed, length, current, velocity}

// settable are the columns that a condition may set for one element, by table.
var settable = map[string][]string{
	pointsTable:   {"level", "pressure", "draw"},
	runsTable:     {"state", "roughness", "fouling", "temperature"},
	fittingsTable: {"blockage", "opening", "k", "kv", "rated drop"},
	pumpsTable:    {"speed", "wear", "impeller", "leak"},
}

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
