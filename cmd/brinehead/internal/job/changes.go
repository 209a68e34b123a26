package job

import (
	"fmt"
	"math"
	"reflect"
	"strings"
)

// Change is one difference between the tables of two jobs: a cell of a row that stands in both, or a whole row that stands
// in one of them only.
type Change struct {
	File   string     `json:"table"` // as in "runs.csv"
	Row    string     `json:"row"`   // what the row is known by: the run, the tag, or "RUN: fitting" for a fitting without one
	Kind   ChangeKind `json:"kind"`
	Column string     `json:"column"` // of a cell, without its unit; empty for a whole row

	// Before and After are what is written there, with its unit; empty where nothing is. For a whole row they are all its
	// cells.
	Before string `json:"before"`
	After  string `json:"after"`
}

// ChangeKind says what became of a row.
type ChangeKind string

// The kinds of change.
const (
	Changed ChangeKind = "changed"
	Added   ChangeKind = "added"
	Removed ChangeKind = "removed"
)

// Changes lists what a later set of tables says otherwise than t, table by table in the order of the contract, row by row
// and column by column. Rows are matched by what they are known by, never by their order; two numbers that mean the same in
// different units are no change, nor is a name in other case.
func (t *Tables) Changes(later *Tables) []Change {
	var all []Change
	before, after := t.records(), later.records()
	for _, spec := range tables {
		all = append(all, changesOf(spec.fileName(), before[spec.name], after[spec.name])...)
	}
	return all
}

// record is a row of any table, taken apart for comparing.
type record struct {
	key   string // folded; unique in its table
	alias string // what it may be known by where the key is not found: of a fitting, its run and name
	name  string // for a reader
	cells []written
}

// written is a cell as it is written, and as it is understood.
type written struct {
	column string
	text   string  // with its unit; empty where the cell is blank
	value  float64 // of a number
	number bool
}

// same says whether two cells mean the same.
func (w written) same(other written) bool {
	if w.number && other.number && w.text != "" && other.text != "" {
		const unitRounding = 1e-12 // what turning units may leave
		return math.Abs(w.value-other.value) <= unitRounding*math.Max(math.Abs(w.value), math.Abs(other.value))
	}
	return fold(w.text) == fold(other.text)
}

// records takes every row of the tables apart.
func (t *Tables) records() map[string][]record {
	var conditions []record
	for i, r := range recordsOf(t.Conditions, func(r ConditionRow) (string, string) { return r.Condition.Value, "" }) {
		for _, o := range t.Conditions[i].Overrides {
			column := o.Tag.Value + " " + o.Quantity
			if o.Number.Given {
				r.cells = append(r.cells, numberWritten(column, o.Number, ""))
			} else {
				r.cells = append(r.cells, written{column: column, text: o.Text.Value})
			}
		}
		conditions = append(conditions, r)
	}
	return map[string][]record{
		pointsTable: recordsOf(t.Points, func(r PointRow) (string, string) { return r.Point.Value, "" }),
		runsTable:   recordsOf(t.Runs, func(r RunRow) (string, string) { return r.Run.Value, "" }),
		fittingsTable: recordsOf(t.Fittings, func(r FittingRow) (string, string) {
			if port := ValvePort(r.Fitting.Value); port != "" {
				return nameOf(r) + " port " + strings.ToUpper(port), ""
			}
			return nameOf(r), r.Run.Value + ": " + r.Fitting.Value
		}),
		pumpsTable: recordsOf(t.Pumps, func(r PumpRow) (string, string) { return r.Pump.Value, "" }),
		curvesTable: recordsOf(t.Curves, func(r CurveRow) (string, string) {
			name := r.Curve.Value
			for _, n := range []Number{r.Impeller, r.Speed} {
				if n.Given {
					name += ", " + numberWritten("", n, "").text
				}
			}
			return name + " at " + numberWritten("", r.Flow, "").text, ""
		}),
		conditionsTable: conditions,
		limitsTable: recordsOf(t.Limits, func(r LimitRow) (string, string) {
			name := r.Limit.Value + " of " + r.On.Value
			if r.Condition.Given() {
				name += " in " + r.Condition.Value
			}
			return name, ""
		}),
		readingsTable: recordsOf(t.Readings, func(r ReadingRow) (string, string) {
			return r.Quantity.Value + " of " + r.On.Value + " in " + r.Condition.Value, ""
		}),
	}
}

// recordsOf takes the rows of one table apart. Rows known by one name are told apart by their order.
func recordsOf[Row any](rows []Row, known func(Row) (name, alias string)) []record {
	var list []record
	met := map[string]int{}
	for _, row := range rows {
		name, alias := known(row)
		key := fold(name)
		met[key]++
		if n := met[key]; n > 1 {
			key += fmt.Sprintf(" #%d", n)
			name += fmt.Sprintf(" (no. %d)", n)
		}
		list = append(list, record{key: key, alias: fold(alias), name: name, cells: cellsOf(row)})
	}
	return list
}

// cellsOf lists the cells of a row. A value with a unit column of its own takes that unit, and the unit is no cell then.
func cellsOf(row any) []written {
	var cells []written
	value := reflect.ValueOf(row)
	unit := ""
	if u := value.FieldByName("Unit"); u.IsValid() {
		unit = u.Interface().(Text).Value
	}
	for i := range value.NumField() {
		column := value.Type().Field(i).Tag.Get("csv")
		switch cell := value.Field(i).Interface().(type) {
		case Text:
			if column != "unit" {
				cells = append(cells, written{column: column, text: cell.Value})
			}
		case Number:
			own := unit
			if column == "gauge elevation" { // a length in its header's unit, in a row whose value has another
				own = ""
			}
			cells = append(cells, numberWritten(column, cell, own))
		}
	}
	return cells
}

// numberWritten is a number as it stands, with the unit of its row or else of its column's header.
func numberWritten(column string, n Number, unit string) written {
	w := written{column: column, value: n.Value, number: true}
	if !n.Given {
		return w
	}
	if _, after, bracketed := strings.Cut(n.Column, "["); unit == "" && bracketed {
		unit = strings.TrimSpace(strings.TrimSuffix(strings.TrimSpace(after), "]"))
	}
	w.text = n.raw
	if unit != "" && unit != "-" {
		w.text += " " + unit
	}
	return w
}

// changesOf compares the rows of one table.
func changesOf(file string, before, after []record) []Change {
	partner := partners(before, after)
	var list []Change
	taken := map[int]bool{}
	for i, b := range before {
		k, found := partner[i]
		if !found {
			list = append(list, Change{File: file, Row: b.name, Kind: Removed, Before: b.worded()})
			continue
		}
		taken[k] = true
		list = append(list, b.changes(file, after[k])...)
	}
	for k, a := range after {
		if !taken[k] {
			list = append(list, Change{File: file, Row: a.name, Kind: Added, After: a.worded()})
		}
	}
	return list
}

// partners finds for each row of one table its fellow in the other: by key, and then, of those left over, by alias, so that
// a fitting that is given a tag is still the same fitting.
func partners(before, after []record) map[int]int {
	partner, taken := map[int]int{}, map[int]bool{}
	for _, known := range []func(r record) string{func(r record) string { return r.key }, func(r record) string { return r.alias }} {
		at := map[string][]int{}
		for k, a := range after {
			if !taken[k] {
				at[known(a)] = append(at[known(a)], k)
			}
		}
		for i, b := range before {
			name := known(b)
			if _, done := partner[i]; done || name == "" || len(at[name]) == 0 {
				continue
			}
			k := at[name][0]
			at[name] = at[name][1:]
			partner[i], taken[k] = k, true
		}
	}
	return partner
}

// changes compares the cells of a row with those of its fellow.
func (r record) changes(file string, later record) []Change {
	cells, order := map[string][2]written{}, []string{}
	for side, list := range [][]written{r.cells, later.cells} {
		for _, c := range list {
			column := fold(c.column)
			pair, met := cells[column]
			if !met {
				order = append(order, column)
			}
			pair[side] = c
			cells[column] = pair
		}
	}
	var list []Change
	for _, column := range order {
		b, a := cells[column][0], cells[column][1]
		if b.same(a) {
			continue
		}
		name := b.column
		if name == "" {
			name = a.column
		}
		list = append(list, Change{File: file, Row: r.name, Kind: Changed, Column: name, Before: b.text, After: a.text})
	}
	return list
}

// worded lists the cells of a row that are filled in.
func (r record) worded() string {
	var parts []string
	for _, c := range r.cells {
		if c.text != "" {
			parts = append(parts, c.column+" "+c.text)
		}
	}
	return strings.Join(parts, ", ")
}
