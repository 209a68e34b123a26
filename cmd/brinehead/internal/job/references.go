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
	row   []cell // that gives the name
}

// roll is the names that tables give, by their folded form. A point may bear the name of a run or pump, hence the lists.
type roll struct {
	known    map[string][]element
	doubtful bool // a table could not be read whole, so that a name not known may be there in truth
}

// all lists the names as written, in the order of their rows.
func (l roll) all() []string {
	var list []element
	for _, same := range l.known {
		list = append(list, same...)
	}
	slices.SortFunc(list, func(a, b element) int {
		return cmp.Or(cmp.Compare(a.at.File, b.at.File), cmp.Compare(a.at.Line, b.at.Line))
	})
	var spelt []string
	for _, e := range list {
		spelt = append(spelt, e.name)
	}
	return spelt
}

func (l roll) has(name string) bool { return len(l.known[fold(name)]) > 0 }

// misled says whether a table is missing or its header is at fault, so that what a row seems to lack may be there.
func (r *reader) misled(table string) bool {
	s := r.sheets[table]
	return s == nil || s.misled
}

// references checks names, each there once and each that is named there, and what the cells of a row say together. What
// only seems to be missing, since a table could not be read whole, is not told.
func (r *reader) references() {
	points, runs, pumps := r.register(pointsTable), r.register(runsTable), r.register(pumpsTable)
	tags, conditions, curves := r.register(fittingsTable), r.register(conditionsTable), r.register(curvesTable)
	elements := r.together(points, runs, pumps, tags)
	t := r.tables
	for _, row := range t.Points {
		r.point(row)
	}
	for _, row := range t.Runs {
		r.ends(row.From, row.To, points)
		if !r.misled(runsTable) {
			r.boreOrSize(row)
		}
	}
	for _, row := range t.Fittings {
		r.refer(row.Run, runs, "a run of runs.csv")
		if !r.misled(fittingsTable) {
			r.oneResistance(row)
		}
	}
	for _, row := range t.Pumps {
		r.ends(row.From, row.To, points)
		r.refer(row.Curve, curves, "a curve of pump_curves.csv")
	}
	hasSea := slices.ContainsFunc(t.Points, func(p PointRow) bool { k := fold(p.Kind.Value); return k == "sea" || k == "overboard" })
	for i := range t.Conditions {
		r.condition(&t.Conditions[i], hasSea, pumps)
	}
	r.ports()
	if r.sheets[conditionsTable] != nil {
		r.overrides(elements)
	}
	for _, row := range t.Limits {
		if row.On.Value != "*" {
			r.refer(row.On, elements, "a tag, run, pump or point, or * for all")
		}
		r.refer(row.Condition, conditions, "a condition of conditions.csv")
	}
	for _, row := range t.Readings {
		r.refer(row.Condition, conditions, "a condition of conditions.csv")
		r.refer(row.On, elements, "a tag, run, pump or point")
	}
}

// point checks that a point has what its kind may have.
func (r *reader) point(row PointRow) {
	spec, _ := tableNamed(pointsTable)
	kinds, _ := spec.column("kind")
	kind := fold(row.Kind.Value)
	if !slices.Contains(kinds.oneOf, kind) {
		return // a fault already told
	}
	for _, n := range []Number{row.Level, row.Pressure} {
		if n.written() && kind != "tank" {
			r.fault(n.Place, "a level or pressure at a "+kind+" point", "them at a tank only", "")
		}
	}
	if row.Draw.written() && kind != "junction" {
		r.fault(row.Draw.Place, "a draw at a "+kind+" point", "it at a junction only", "")
	}
	if row.Straight.Given() && kind != "junction" {
		r.fault(row.Straight.Place, "a tee at a "+kind+" point", "it at a junction only", "")
	}
	if row.Siphon.Given() && kind != "overboard" {
		r.fault(row.Siphon.Place, "a siphon at a "+kind+" point", "it at an overboard only", "")
	}
}

// boreOrSize checks that a run has a bore, or a standard with a size.
func (r *reader) boreOrSize(row RunRow) {
	switch {
	case row.Bore.written() && row.Size.Given():
		r.fault(row.Size.Place, quoted(row.Size.Value), "a bore or a size, not both", "")
	case !row.Bore.written() && !row.Size.Given():
		r.fault(row.Bore.Place, "neither a bore nor a size", "a bore [mm], or a standard with a size", "")
	case row.Size.Given() && !row.Standard.Given():
		r.fault(row.Size.Place, "a size without a standard", "the standard that says what bore the size has", "all of them: brinehead catalogue sizes")
	case row.Standard.Given() && !row.Size.Given():
		r.fault(row.Standard.Place, "a standard without a size", "both or neither", "")
	}
}

// condition checks a condition's row and takes its running pumps apart.
func (r *reader) condition(row *ConditionRow, hasSea bool, pumps roll) {
	if hasSea && !row.Draught.written() && !r.misled(conditionsTable) {
		r.fault(row.Condition.Place, "no draught", "one in every condition, since the job has a sea or overboard point", "")
	}
	if fold(row.Water.Value) == "fresh" && row.Salinity.Given && row.Salinity.Value != 0 {
		r.fault(row.Salinity.Place, "a salinity of fresh water", "none, or the water sea", "")
	}
	if fold(row.Running.Value) == "none" && !pumps.has("none") {
		row.NoneRuns = true
		return
	}
	for _, name := range splitNames(row.Running, pumps.has) {
		r.refer(name, pumps, "a pump of pumps.csv")
		row.RunningList = append(row.RunningList, name)
	}
}

// register lists the names that a table gives in its key column, and faults a second row of one name, but for the points
// of a pump curve.
func (r *reader) register(tableName string) roll {
	list := roll{known: map[string][]element{}}
	s := r.sheets[tableName]
	if s == nil {
		list.doubtful = true
		return list
	}
	key, _ := s.table.column(s.table.key)
	place, has := s.places[key.name]
	list.doubtful = s.lost || !has && s.misled
	if !has {
		return list
	}
	for _, row := range s.rows {
		n := row[place]
		switch first := list.known[fold(n.text)]; {
		case n.text == "":
			list.doubtful = list.doubtful || key.required
		case first == nil:
			list.known[fold(n.text)] = []element{{n.text, tableName, n.Place, row}}
		case tableName == fittingsTable && isPort(s, row) && isPort(s, first[0].row):
			// the two ports of a three-way valve share its tag
		case tableName != curvesTable:
			r.fault(n.Place, quoted(n.text), fmt.Sprintf("a name of its own: line %d has this one", first[0].at.Line), "")
		}
	}
	return list
}

// isPort says whether a row of fittings.csv is a port of a three-way valve.
func isPort(s *sheet, row []cell) bool {
	place, has := s.places["fitting"]
	return has && ValvePort(row[place].text) != ""
}

// ports checks that each three-way valve has its two ports: a tag met at one of them alone, or twice at one, is a fault.
func (r *reader) ports() {
	met := map[string]string{} // by tag
	for _, row := range r.tables.Fittings {
		if port := ValvePort(row.Fitting.Value); port != "" && row.Tag.Given() {
			if strings.Contains(met[fold(row.Tag.Value)], port) {
				r.fault(row.Tag.Place, quoted(row.Tag.Value), "one port "+strings.ToUpper(port)+" of the valve", "")
			}
			met[fold(row.Tag.Value)] += port
		}
	}
	for _, row := range r.tables.Fittings {
		if ValvePort(row.Fitting.Value) != "" && len(met[fold(row.Tag.Value)]) == 1 {
			r.fault(row.Tag.Place, quoted(row.Tag.Value), "the valve's other port, with the same tag, in another run", "")
		}
	}
}

// together joins the names of elements. A point may share its name with a run or pump, since a reference to either is
// clear from its quantity; otherwise every element has a name of its own.
func (r *reader) together(points, runs, pumps, tags roll) roll {
	all := roll{known: map[string][]element{}}
	for _, group := range []roll{points, runs, pumps, tags} {
		all.doubtful = all.doubtful || group.doubtful
		for key, same := range group.known {
			e := same[0]
			for _, other := range all.known[key] {
				if e.table == fittingsTable || other.table != pointsTable {
					r.fault(e.at, quoted(e.name), fmt.Sprintf("a name of its own: line %d of %s has this one", other.at.Line, other.at.File), "")
					break
				}
			}
			all.known[key] = append(all.known[key], e)
		}
	}
	return all
}

// refer faults a name that is not among the known ones, and says whether it is.
func (r *reader) refer(name Text, known roll, want string) bool {
	if known.has(name.Value) {
		return true
	}
	if name.Given() && !known.doubtful && !errorValue.MatchString(name.Value) {
		r.fault(name.Place, quoted(name.Value), want, nearestHint(name.Value, known.all()))
	}
	return false
}

// ends checks the two ends of a run or pump.
func (r *reader) ends(from, to Text, points roll) {
	r.refer(from, points, "a point of points.csv")
	r.refer(to, points, "a point of points.csv")
	if from.Given() && fold(from.Value) == fold(to.Value) {
		r.fault(to.Place, quoted(to.Value), "another point than it starts from", "")
	}
}

// oneResistance checks that a fitting's loss is given in one way at most, and wholly.
func (r *reader) oneResistance(row FittingRow) {
	var given []string
	for _, c := range []struct {
		name  string
		given bool
	}{{"k", row.K.written()}, {"kv", row.Kv.written()}, {"rated flow", row.RatedFlow.written() || row.RatedDrop.written()}} {
		if c.given {
			given = append(given, c.name)
		}
	}
	switch {
	case len(given) > 1:
		r.fault(row.Fitting.Place, "a loss given as "+strings.Join(given, " and as "), "it given in one way", "")
	case row.RatedFlow.written() && !row.RatedDrop.written():
		r.fault(row.RatedFlow.Place, "a rated flow without a rated drop", "both or neither", "")
	case row.RatedDrop.written() && !row.RatedFlow.written():
		r.fault(row.RatedDrop.Place, "a rated drop without a rated flow", "both or neither", "")
	case row.RatedDensity.written() && !row.RatedFlow.written():
		r.fault(row.RatedDensity.Place, "a rated density without a rated flow and drop", "all three, or none", "")
	}
}

// splitNames takes apart a list of names with spaces between, where a name may itself hold spaces: the longest name that
// fits is taken each time.
func splitNames(list Text, known func(name string) bool) []Text {
	fields := strings.Fields(list.Value)
	var out []Text
	for start := 0; start < len(fields); {
		end := start + 1
		for k := len(fields); k > start+1; k-- {
			if known(strings.Join(fields[start:k], " ")) {
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
func (r *reader) overrides(elements roll) {
	s := r.sheets[conditionsTable]
	type target struct{ table, name, column string }
	set := map[target]bool{}
	for i, h := range s.header {
		if _, own := s.table.column(h.name); own {
			continue
		}
		e, c, fine := r.overrideColumn(h, elements)
		if !fine || !r.checkUnit(h, c.quantity) {
			continue
		}
		this := target{e.table, fold(e.name), c.name}
		if set[this] {
			r.fault(h.Place, "the column a second time", "it once", "")
			continue
		}
		set[this] = true
		s.noteUnit(h)
		r.overrideCells(s, i, e, c)
	}
}

// overrideCells reads one such column. A blank cell leaves the element as its own table has it.
func (r *reader) overrideCells(s *sheet, place int, e element, c column) {
	for k := range r.tables.Conditions { // one row for each of the sheet's
		at := s.rows[k][place]
		if at.text == "" {
			continue
		}
		o := Override{Tag: Text{e.name, at.Place}, Table: e.table, Quantity: c.name, Number: notGiven(at.Place, at.text)}
		if c.isNumber() {
			o.Number = r.number(s, c, at.text, at.Place, place)
		} else {
			o.Text = Text{at.text, at.Place}
			r.checkText(c, o.Text, true)
		}
		r.tables.Conditions[k].Overrides = append(r.tables.Conditions[k].Overrides, o)
	}
}

// settableColumns lists what a condition may set for some element, the longest name first.
func settableColumns() []string {
	var list []string
	for _, spec := range tables {
		for _, q := range settable[spec.name] {
			if !slices.Contains(list, q) {
				list = append(list, q)
			}
		}
	}
	slices.SortStableFunc(list, func(a, b string) int { return cmp.Compare(len(b), len(a)) })
	return list
}

// overrideColumn takes a header apart into the element it names and the column it sets: the longest name of a column
// that ends the header, and the element named before it that has such a column.
func (r *reader) overrideColumn(h heading, elements roll) (e element, c column, fine bool) {
	for _, q := range settableColumns() {
		name, ends := strings.CutSuffix(h.name, " "+q)
		if !ends {
			continue
		}
		if !r.refer(Text{name, h.Place}, elements, "a tag, run, pump or point before "+q) {
			return e, c, false
		}
		for _, e = range elements.known[fold(name)] {
			if slices.Contains(settable[e.table], q) {
				spec, _ := tableNamed(e.table)
				c, _ = spec.column(q)
				return e, c, true
			}
		}
		r.fault(h.Place, quoted(h.name), fmt.Sprintf("for %s, of %s.csv, one of %s", e.name, e.table, strings.Join(settable[e.table], ", ")), "")
		return e, c, false
	}
	spec, _ := tableNamed(conditionsTable)
	r.fault(h.Place, "a column of no known name", "one of "+strings.Join(spec.columnNames(), ", ")+
		", or an element and what it sets: "+strings.Join(settableColumns(), ", "), spec.columnHint(h.name))
	return e, c, false
}
