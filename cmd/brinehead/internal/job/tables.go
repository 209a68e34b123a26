package job

import (
	"fmt"
	"io"
	"io/fs"
	"math"
	"path"
	"reflect"
	"slices"
	"strings"

	"github.com/gocarina/gocsv"
)

// ReadTables reads the tables of a job folder, with those of a change folder (nil for none) in place of its own, and
// checks what they say against the contract and against each other. The error is Faults, or what the file system says
// of a folder that cannot be listed.
func ReadTables(folder, change fs.FS) (*Tables, error) {
	t := &Tables{}
	r := &reader{tables: t, sheets: map[string]*sheet{}}
	if err := r.open(folder, false); err != nil {
		return nil, err
	}
	if change != nil {
		before := len(r.found)
		if err := r.open(change, true); err != nil {
			return nil, err
		}
		if len(r.found) == before {
			r.fault(Place{File: "change folder"}, "no table", "at least one table that the change rewrites: "+tableFiles(), "")
		}
	}
	for _, spec := range tables {
		if !slices.Contains(r.found, spec.name) && spec.required {
			r.fault(Place{File: spec.fileName()}, "no such table", "a table with the columns "+strings.Join(spec.columnNames(), ", "), "")
		}
	}
	r.rows()
	if r.faults == nil { // references among rows that are themselves in doubt would only repeat what is said already
		r.references()
	}
	if err := r.faults.Err(); err != nil {
		return nil, err
	}
	return t, nil
}

// reader gathers tables and faults.
type reader struct {
	tables *Tables
	sheets map[string]*sheet // by table
	found  []string          // tables found, right or wrong
	faults Faults
}

func (r *reader) fault(at Place, found, want, hint string) {
	r.faults = append(r.faults, Fault{at, found, want, hint})
}

func tableFiles() string {
	var names []string
	for _, t := range tables {
		names = append(names, t.fileName())
	}
	return strings.Join(names, ", ")
}

// open reads every table of a folder into sheets; those of a later folder take the place of those of an earlier one.
func (r *reader) open(folder fs.FS, isChange bool) error {
	entries, err := fs.ReadDir(folder, ".")
	if err != nil {
		return fmt.Errorf("the folder cannot be listed: %w", err)
	}
	seen := map[string]string{}
	for _, e := range entries {
		stem, isTable := strings.CutSuffix(strings.ToLower(e.Name()), ".csv")
		if !isTable {
			continue
		}
		spec, known := tableNamed(stem)
		if !known {
			r.fault(Place{File: e.Name()}, "a table of no known name", "one of "+tableFiles(), nearestHint(e.Name(), strings.Split(tableFiles(), ", ")))
			continue
		}
		if other, twice := seen[stem]; twice {
			r.fault(Place{File: e.Name()}, "the table a second time, beside "+other, "one of them", "")
			continue
		}
		seen[stem] = e.Name()
		r.found = append(r.found, spec.name)
		content, why := readFile(folder, e.Name())
		if why != "" {
			r.fault(Place{File: e.Name()}, why, "a CSV file that can be read", "")
			continue
		}
		s, faults := readSheet(spec, e.Name(), content)
		s.note.FromChange = isChange
		r.faults = append(r.faults, faults...)
		r.sheets[spec.name] = s
	}
	if len(seen) == 0 && !isChange {
		r.fault(Place{File: "job folder"}, "no tables", "at least "+requiredFiles(), "")
	}
	return nil
}

func requiredFiles() string {
	var names []string
	for _, t := range tables {
		if t.required {
			names = append(names, t.fileName())
		}
	}
	return strings.Join(names, ", ")
}

// readFile reads a file of bounded size, or says in words why it cannot.
func readFile(folder fs.FS, name string) (content []byte, why string) {
	file, err := folder.Open(path.Clean(name))
	if err != nil {
		return nil, "a file that cannot be opened"
	}
	defer file.Close()
	info, err := file.Stat()
	switch {
	case err != nil:
		return nil, "a file that cannot be opened"
	case info.IsDir():
		return nil, "a folder of that name"
	case !info.Mode().IsRegular():
		return nil, "something that is no plain file"
	}
	content, err = io.ReadAll(io.LimitReader(file, mostBytes+1))
	if err != nil {
		return nil, "a file that cannot be read to its end"
	}
	return content, ""
}

// rows turns the sheets into rows of their tables.
func (r *reader) rows() {
	t := r.tables
	for _, spec := range tables {
		s := r.sheets[spec.name]
		if s == nil || len(s.header) == 0 {
			continue // not there or not readable, which is told already
		}
		switch spec.name {
		case pointsTable:
			fill(r, s, &t.Points)
		case runsTable:
			fill(r, s, &t.Runs)
		case fittingsTable:
			fill(r, s, &t.Fittings)
		case pumpsTable:
			fill(r, s, &t.Pumps)
		case curvesTable:
			fill(r, s, &t.Curves)
		case conditionsTable:
			fill(r, s, &t.Conditions)
		case limitsTable:
			fill(r, s, &t.Limits)
			r.limitValues(s)
		case readingsTable:
			fill(r, s, &t.Readings)
			r.readingValues(s)
		}
		t.Files = append(t.Files, s.note)
		if spec.required && s.note.Rows == 0 && !s.broken {
			r.fault(Place{File: s.note.Name}, "no rows", "at least one", "")
		}
	}
}

// records lends a sheet's known columns to gocsv under their canonical names.
type records struct {
	rows [][]string
	next int
}

func (r *records) Read() ([]string, error) {
	if r.next == len(r.rows) {
		return nil, io.EOF
	}
	r.next++
	return r.rows[r.next-1], nil
}

func (r *records) ReadAll() ([][]string, error) { return r.rows, nil }

// fill checks the header of a sheet, has gocsv put the cells into the rows of a table, and then reads the numbers: gocsv
// by itself leaves a column it does not know at nothing, takes NaN for a number, and loses count of lines.
func fill[Row any](r *reader, s *sheet, rows *[]Row) {
	places := r.header(s) // column of each canonical name
	names := make([]string, 0, len(places))
	for _, c := range s.table.columns {
		if _, has := places[c.name]; has {
			names = append(names, c.name)
		}
	}
	in := &records{rows: [][]string{names}}
	for _, row := range s.rows {
		cells := make([]string, len(names))
		for i, name := range names {
			cells[i] = row[places[name]].text
		}
		in.rows = append(in.rows, cells)
	}
	if len(s.rows) == 0 || len(names) == 0 {
		return
	}
	if err := gocsv.UnmarshalCSV(in, rows); err != nil {
		r.fault(Place{File: s.note.Name}, "rows that do not fit the table: "+err.Error(), "the columns "+strings.Join(s.table.columnNames(), ", "), "")
		return
	}
	s.findDecimal(s.numbers(places))
	for i := range *rows {
		value := reflect.ValueOf(&(*rows)[i]).Elem()
		for f := range value.NumField() {
			name := value.Type().Field(f).Tag.Get("csv")
			c, known := s.table.column(name)
			if !known {
				continue
			}
			at := Place{File: s.note.Name, Line: s.rows[i][0].Line}
			column, has := places[name]
			if has {
				at = s.rows[i][column].Place
			}
			switch field := value.Field(f).Addr().Interface().(type) {
			case *Text:
				field.Place = at
				r.checkText(c, *field, has)
			case *Number:
				*field = r.number(s, c, field.raw, at, s.unitOf(c, column, has))
			}
		}
	}
}

// numbers returns the cells of a sheet's number columns, from which the decimal sign shows.
func (s *sheet) numbers(places map[string]int) []string {
	var cells []string
	for i := range s.header {
		isText := false
		for _, c := range s.table.columns {
			if k, has := places[c.name]; has && k == i && c.quantity.Name == words.Name {
				isText = true
			}
		}
		if isText {
			continue
		}
		for _, row := range s.rows {
			cells = append(cells, row[i].text)
		}
	}
	return cells
}

// header checks a sheet's header and returns where the columns of its table stand. Columns of conditions.csv that are not
// the table's own are left for overrides.
func (r *reader) header(s *sheet) map[string]int {
	places := map[string]int{}
	for i, h := range s.header {
		c, known := s.table.column(h.name)
		if !known {
			if s.table.name != conditionsTable {
				r.fault(h.Place, "a column of no known name", "one of "+strings.Join(s.table.columnNames(), ", "), nearestHint(h.name, s.table.columnNames()))
			}
			continue
		}
		if _, twice := places[c.name]; twice {
			r.fault(h.Place, "the column a second time", "it once", "")
			continue
		}
		places[c.name] = i
		r.checkUnit(h, c.quantity)
	}
	for _, c := range s.table.columns {
		if _, has := places[c.name]; c.required && !has {
			hint := ""
			for _, h := range s.header {
				if _, known := s.table.column(h.name); !known && nearest(h.name, []string{c.name}) != "" {
					hint = fmt.Sprintf("nearest is %q in column %d", h.Column, h.Col)
				}
			}
			r.fault(Place{File: s.note.Name, Line: s.header[0].Line}, "no column "+c.name, "it: the table cannot be read without", hint)
		}
	}
	return places
}

// checkUnit checks that a header has a unit of its quantity, or none where the column takes none.
func (r *reader) checkUnit(h heading, q Quantity) bool {
	if len(q.Units) == 0 {
		if h.hasUnit && h.unit != "-" {
			r.fault(h.Place, quoted(h.unit), "no unit: the column is a "+q.Name, "")
			return false
		}
		return true
	}
	if !h.hasUnit {
		if q.Name == ratio.Name || q.Name == speed.Name {
			return true
		}
		r.fault(h.Place, "no unit", "a unit of "+q.Name+" in square brackets: "+q.names(), fmt.Sprintf("write for example %q", h.Column+" ["+q.Units[0].Name+"]"))
		return false
	}
	if _, known := q.unit(h.unit); !known {
		r.fault(h.Place, quoted(h.unit), "a unit of "+q.Name+": "+q.names(), nearestHint(h.unit, strings.Split(q.names(), ", ")))
		return false
	}
	return true
}

// unitOf returns the unit of a column as its header has it; the first of the quantity where it has none that is known,
// which is a fault already told.
func (s *sheet) unitOf(c column, place int, has bool) Unit {
	if has {
		if u, known := c.quantity.unit(s.header[place].unit); known {
			return u
		}
	}
	if len(c.quantity.Units) > 0 {
		return c.quantity.Units[0]
	}
	return Unit{Factor: 1}
}

// checkText checks a word.
func (r *reader) checkText(c column, t Text, has bool) {
	switch {
	case !t.Given():
		if c.required && has {
			r.fault(t.Place, "a blank cell", wantWord(c), "")
		}
	case c.oneOf != nil && !slices.ContainsFunc(c.oneOf, func(w string) bool { return fold(w) == fold(t.Value) }):
		r.fault(t.Place, quoted(t.Value), wantWord(c), nearestHint(t.Value, c.oneOf))
	}
}

func wantWord(c column) string {
	if c.oneOf == nil {
		return "a name"
	}
	return "one of " + strings.Join(c.oneOf, ", ")
}

// number reads a cell of a number column into SI.
func (r *reader) number(s *sheet, c column, text string, at Place, u Unit) Number {
	if text == "" {
		if c.required && at.Col > 0 {
			r.fault(at, "a blank cell", c.within.words(u), "")
		}
		return notGiven(at)
	}
	value, want := s.parse(text)
	if want != "" {
		if want == "a number" {
			want = c.within.words(u)
			if want != "a number" {
				want = "a number, " + want
			}
		}
		r.fault(at, quoted(text), want, "")
		return notGiven(at)
	}
	si := u.ToSI(value)
	if math.IsInf(si, 0) || !c.within.holds(si) {
		r.fault(at, quoted(text), c.within.words(u), "")
		return notGiven(at)
	}
	if c.integer && si != math.Trunc(si) {
		r.fault(at, quoted(text), "a whole number, "+c.within.words(u), "")
		return notGiven(at)
	}
	return Number{Value: si, Given: true, Place: at, raw: text}
}

// limitValues turns the values of limits.csv by the unit of each row.
func (r *reader) limitValues(s *sheet) {
	for i := range r.tables.Limits {
		row := &r.tables.Limits[i]
		q, known := limitQuantities[fold(row.Limit.Value)]
		if !known || !row.Value.Given {
			continue // a fault already told
		}
		u, known := q.unit(row.Unit.Value)
		if !known {
			r.fault(row.Unit.Place, quoted(row.Unit.Value), "a unit of "+q.Name+": "+q.names(), "")
			continue
		}
		row.Value.Value = u.ToSI(row.Value.Value)
	}
}

// readingValues turns the values of readings.csv by the unit of each row.
func (r *reader) readingValues(s *sheet) {
	for i := range r.tables.Readings {
		row := &r.tables.Readings[i]
		known := false
		for _, q := range readingQuantities {
			if u, has := q.unit(row.Unit.Value); has {
				row.Value.Value, known = u.ToSI(row.Value.Value), true
				break
			}
		}
		if !known && row.Unit.Given() {
			r.fault(row.Unit.Place, quoted(row.Unit.Value), "a unit of pressure, flow, power, temperature, speed, length or current", "")
		}
	}
}
