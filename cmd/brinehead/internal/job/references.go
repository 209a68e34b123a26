package job

import (
	"cmp"
	"fmt"
	"slices"
	"strings"
)

// element is something a condition, a limit or a reading may name.
type element struct {
	name  string
	table string
	at    Place
}

// references checks names: each is there once, and each that is named is there.
func (r *reader) references() {
	t := r.tables
	points, runs, pumps := r.register(pointsTable), r.register(runsTable), r.register(pumpsTable)
	tags := r.register(fittingsTable)
	conditions := r.register(conditionsTable)
	curves := map[string]bool{}
	var curveNames []string
	for _, c := range t.Curves {
		if !curves[fold(c.Curve.Value)] {
			curves[fold(c.Curve.Value)] = true
			curveNames = append(curveNames, c.Curve.Value)
		}
	}
	elements := r.together(points, runs, pumps, tags)

	for _, row := range t.Points {
		if kind := fold(row.Kind.Value); kind != "tank" && (row.Level.Given || row.Pressure.Given) {
			r.fault(cmp.Or(row.Level, row.Pressure).Place, "a level or pressure at a "+kind+" point", "them at a tank only", "")
		} else if kind != "junction" && row.Draw.Given {
			r.fault(row.Draw.Place, "a draw at a "+kind+" point", "it at a junction only", "")
		} else if kind != "junction" && row.Straight.Given() {
			r.fault(row.Straight.Place, "a tee at a "+kind+" point", "it at a junction only", "")
		} else if kind != "overboard" && row.Siphon.Given() {
			r.fault(row.Siphon.Place, "a siphon at a "+kind+" point", "it at an overboard only", "")
		}
	}
	for _, row := range t.Runs {
		r.ends(row.From, row.To, points)
		switch {
		case row.Bore.Given && row.Size.Given():
			r.fault(row.Size.Place, quoted(row.Size.Value), "a bore or a size, not both", "")
		case !row.Bore.Given && !row.Size.Given():
			r.fault(row.Bore.Place, "neither a bore nor a size", "a bore [mm], or a standard with a size", "")
		}
	}
	for _, row := range t.Fittings {
		r.refer(row.Run, runs, "a run of runs.csv")
		r.oneResistance(row)
	}
	for _, row := range t.Pumps {
		r.ends(row.From, row.To, points)
		if !curves[fold(row.Curve.Value)] {
			r.fault(row.Curve.Place, quoted(row.Curve.Value), "a curve of pump_curves.csv", nearestHint(row.Curve.Value, curveNames))
		}
	}
	hasSea := slices.ContainsFunc(t.Points, func(p PointRow) bool { k := fold(p.Kind.Value); return k == "sea" || k == "overboard" })
	for i := range t.Conditions {
		row := &t.Conditions[i]
		if hasSea && !row.Draught.Given {
			r.fault(row.Condition.Place, "no draught", "one in every condition, since the job has a sea or overboard point", "")
		}
		if fold(row.Water.Value) == "fresh" && row.Salinity.Given && row.Salinity.Value != 0 {
			r.fault(row.Salinity.Place, "a salinity of fresh water", "none, or the water sea", "")
		}
		for _, name := range splitNames(row.Running, pumps) {
			r.refer(name, pumps, "a pump of pumps.csv")
			row.RunningList = append(row.RunningList, name)
		}
	}
	r.overrides(elements)
	for _, row := range t.Limits {
		if row.On.Value != "*" {
			r.refer(row.On, elements, "a tag, run, pump or point, or * for all")
		}
		if row.Condition.Given() {
			r.refer(row.Condition, conditions, "a condition of conditions.csv")
		}
	}
	for _, row := range t.Readings {
		r.refer(row.Condition, conditions, "a condition of conditions.csv")
		r.refer(row.On, elements, "a tag, run, pump or point")
	}
}

// register lists the names that a table gives, and faults a second row of one name.
func (r *reader) register(tableName string) map[string]element {
	var names []Text
	t := r.tables
	switch tableName {
	case pointsTable:
		for _, row := range t.Points {
			names = append(names, row.Point)
		}
	case runsTable:
		for _, row := range t.Runs {
			names = append(names, row.Run)
		}
	case pumpsTable:
		for _, row := range t.Pumps {
			names = append(names, row.Pump)
		}
	case fittingsTable:
		names = r.tags()
	case conditionsTable:
		for _, row := range t.Conditions {
			names = append(names, row.Condition)
		}
	}
	known := map[string]element{}
	for _, n := range names {
		key := fold(n.Value)
		if first, twice := known[key]; twice {
			r.fault(n.Place, quoted(n.Value), fmt.Sprintf("a name of its own: line %d has this one", first.at.Line), "")
			continue
		}
		known[key] = element{n.Value, tableName, n.Place}
	}
	return known
}

// tags lists the tags of fittings.csv. The two ports of a three-way valve share one.
func (r *reader) tags() []Text {
	ports := map[string]string{} // by tag: the ports met
	var names []Text
	for _, row := range r.tables.Fittings {
		port, tag := ValvePort(row.Fitting.Value), fold(row.Tag.Value)
		switch {
		case !row.Tag.Given():
		case port == "":
			names = append(names, row.Tag)
		case ports[tag] == "":
			names = append(names, row.Tag)
			ports[tag] = port
		case strings.Contains(ports[tag], port):
			r.fault(row.Tag.Place, quoted(row.Tag.Value), "one port "+strings.ToUpper(port)+" of the valve", "")
		default:
			ports[tag] += port
		}
	}
	for _, row := range r.tables.Fittings {
		if met := ports[fold(row.Tag.Value)]; ValvePort(row.Fitting.Value) != "" && len(met) == 1 && row.Tag.Given() {
			r.fault(row.Tag.Place, quoted(row.Tag.Value), "the valve's other port, with the same tag, in another run", "")
		}
	}
	return names
}

// together joins the names of elements. A point may share its name with a run or pump, since a reference to either is
// clear from its limit; a tag, a run and a pump may not share one.
func (r *reader) together(points, runs, pumps, tags map[string]element) map[string]element {
	all := map[string]element{}
	for key, e := range points {
		all[key] = e
	}
	for _, group := range []map[string]element{runs, pumps, tags} {
		for _, e := range inOrder(group) {
			if other, taken := all[fold(e.name)]; taken && other.table != pointsTable {
				r.fault(e.at, quoted(e.name), fmt.Sprintf("a name of its own: line %d of %s has this one", other.at.Line, other.at.File), "")
			}
			all[fold(e.name)] = e
		}
	}
	return all
}

// inOrder returns the elements in the order of their rows.
func inOrder(group map[string]element) []element {
	var list []element
	for _, e := range group {
		list = append(list, e)
	}
	slices.SortFunc(list, func(a, b element) int { return cmp.Compare(a.at.Line, b.at.Line) })
	return list
}

func elementNames(group map[string]element) []string {
	var names []string
	for _, e := range inOrder(group) {
		names = append(names, e.name)
	}
	return names
}

// refer faults a name that is not among the known ones.
func (r *reader) refer(name Text, known map[string]element, want string) bool {
	if _, has := known[fold(name.Value)]; has || !name.Given() {
		return has
	}
	r.fault(name.Place, quoted(name.Value), want, nearestHint(name.Value, elementNames(known)))
	return false
}

// ends checks the two ends of a run or pump.
func (r *reader) ends(from, to Text, points map[string]element) {
	fromKnown := r.refer(from, points, "a point of points.csv")
	toKnown := r.refer(to, points, "a point of points.csv")
	if fromKnown && toKnown && fold(from.Value) == fold(to.Value) {
		r.fault(to.Place, quoted(to.Value), "another point than it starts from", "")
	}
}

// oneResistance checks that a fitting's loss is given in one way at most, and wholly.
func (r *reader) oneResistance(row FittingRow) {
	var given []string
	for _, c := range []struct {
		name string
		n    Number
	}{{"k", row.K}, {"kv", row.Kv}, {"rated flow", row.RatedFlow}} {
		if c.n.Given {
			given = append(given, c.name)
		}
	}
	switch {
	case len(given) > 1:
		r.fault(row.Fitting.Place, "a loss given as "+strings.Join(given, " and as "), "it given in one way", "")
	case row.RatedFlow.Given != row.RatedDrop.Given:
		r.fault(row.Fitting.Place, "a rated flow without a rated drop, or the reverse", "both or neither", "")
	case row.RatedDensity.Given && !row.RatedFlow.Given:
		r.fault(row.RatedDensity.Place, "a rated density without a rated flow and drop", "all three, or none", "")
	}
}

// splitNames takes apart a list of names with spaces between, where a name may itself hold spaces: the longest name that
// fits is taken each time.
func splitNames(list Text, known map[string]element) []Text {
	fields := strings.Fields(list.Value)
	var out []Text
	for start := 0; start < len(fields); {
		end := start + 1
		for k := len(fields); k > start+1; k-- {
			if _, has := known[fold(strings.Join(fields[start:k], " "))]; has {
				end = k
				break
			}
		}
		out = append(out, Text{strings.Join(fields[start:end], " "), list.Place})
		start = end
	}
	return out
}

// overrides reads the columns of conditions.csv that set an element's column: "STR1 blockage [%]".
func (r *reader) overrides(elements map[string]element) {
	s := r.sheets[conditionsTable]
	for i, h := range s.header {
		if _, own := s.table.column(h.name); own {
			continue
		}
		e, c, fine := r.overrideColumn(h, elements)
		if !fine || !r.checkUnit(h, c.quantity) {
			continue
		}
		u := s.unitOf(c, i, true)
		for k := range s.rows {
			at := s.rows[k][i]
			if at.text == "" {
				continue
			}
			o := Override{Tag: Text{e.name, at.Place}, Table: e.table, Quantity: c.name, Number: notGiven(at.Place)}
			if c.quantity.Name == words.Name {
				o.Text = Text{at.text, at.Place}
				r.checkText(c, o.Text, true)
			} else {
				o.Number = r.number(s, c, at.text, at.Place, u)
			}
			r.tables.Conditions[k].Overrides = append(r.tables.Conditions[k].Overrides, o)
		}
	}
}

// overrideColumn takes a header apart into the element it names and the column it sets.
func (r *reader) overrideColumn(h heading, elements map[string]element) (e element, c column, fine bool) {
	var quantities []string
	for _, spec := range tables {
		for _, q := range settable[spec.name] {
			if !slices.Contains(quantities, q) {
				quantities = append(quantities, q)
			}
		}
	}
	// The longest quantity that ends the header; what stands before it names the element.
	slices.SortStableFunc(quantities, func(a, b string) int { return cmp.Compare(len(b), len(a)) })
	for _, q := range quantities {
		name, ends := strings.CutSuffix(h.name, " "+q)
		if !ends {
			continue
		}
		e, has := elements[name]
		if !has {
			r.fault(h.Place, quoted(name), "a tag, run, pump or point before "+q, nearestHint(name, elementNames(elements)))
			return e, c, false
		}
		if !slices.Contains(settable[e.table], q) {
			r.fault(h.Place, quoted(h.name), fmt.Sprintf("for %s, of %s.csv, one of %s", e.name, e.table, strings.Join(settable[e.table], ", ")), "")
			return e, c, false
		}
		spec, _ := tableNamed(e.table)
		c, _ = spec.column(q)
		return e, c, true
	}
	spec, _ := tableNamed(conditionsTable)
	r.fault(h.Place, "a column of no known name", "one of "+strings.Join(spec.columnNames(), ", ")+
		", or an element and what it sets: "+strings.Join(quantities, ", "), nearestHint(h.name, spec.columnNames()))
	return e, c, false
}
