package job

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"math"
	"reflect"
	"slices"
	"strings"

	"github.com/gocarina/gocsv"
)

// ReadTables reads the tables of a job folder, with those of a change folder (nil for none) in place of its own, and
// checks what they say against the contract and against each other. The error is Faults: everything that is wrong, at once.
func ReadTables(folder, change fs.FS) (*Tables, error) {
	t := &Tables{}
	r := &reader{tables: t, sheets: map[string]*sheet{}}
	if listed := r.open(folder, false); listed {
		if change != nil {
			r.open(change, true)
		}
		r.missing()
		r.rows()
		r.references()
		r.notes()
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

// missing faults the tables that a job must have and that are in neither folder.
func (r *reader) missing() {
	for _, spec := range tables {
		if !slices.Contains(r.found, spec.name) && spec.required {
			r.fault(Place{File: spec.fileName()}, "no such table", "a table with the columns "+strings.Join(spec.columnNames(), ", "), "")
		}
	}
}

// open reads every table of a folder into sheets; those of a later folder take the place of those of an earlier one. It
// says whether the folder holds any table at all.
func (r *reader) open(folder fs.FS, isChange bool) bool {
	at, want := Place{File: "job folder"}, "at least "+requiredFiles()
	if isChange {
		at, want = Place{File: "change folder"}, "at least one table that the change rewrites: "+tableFiles()
	}
	entries, err := fs.ReadDir(folder, ".")
	if err != nil {
		r.fault(at, folderTrouble(err), "a folder of tables", "")
		return false
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
		content, why := readFile(folder, e)
		if why != "" {
			r.fault(Place{File: e.Name()}, why, "a CSV file that can be read", "")
			delete(r.sheets, spec.name) // a change's table that cannot be read leaves none in its place
			continue
		}
		s, faults := readSheet(spec, e.Name(), content, most)
		s.note.FromChange = isChange
		r.faults = append(r.faults, faults...)
		r.sheets[spec.name] = s
	}
	if len(seen) == 0 {
		r.fault(at, "no table", want, "")
	}
	return len(seen) > 0
}

// folderTrouble says in words why a folder cannot be listed.
func folderTrouble(err error) string {
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return "no such folder"
	case errors.Is(err, fs.ErrPermission):
		return "a folder that may not be read"
	}
	return "a folder that cannot be listed"
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

// readFile reads a file of bounded size, or says in words why it cannot. Anything but a plain file is refused before it
// is opened: a link may lead out of the folder, and a pipe would be waited for without end.
func readFile(folder fs.FS, entry fs.DirEntry) (content []byte, why string) {
	switch kind := entry.Type(); {
	case kind.IsDir():
		return nil, "a folder of that name"
	case kind&fs.ModeSymlink != 0:
		return nil, "a symbolic link"
	case !kind.IsRegular():
		return nil, "something that is no plain file"
	}
	file, err := folder.Open(entry.Name())
	if errors.Is(err, fs.ErrPermission) {
		return nil, "a file that may not be read"
	} else if err != nil {
		return nil, "a file that cannot be opened"
	}
	defer file.Close()
	content, err = io.ReadAll(io.LimitReader(file, int64(most.bytes)+1))
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
			r.limitValues()
		case readingsTable:
			fill(r, s, &t.Readings)
			r.readingValues()
		}
		if spec.required && s.note.Rows == 0 && !s.lost {
			r.fault(Place{File: s.note.Name}, "no rows", "at least one", "")
		}
	}
}

// notes gathers how each file was read, in the order of the contract.
func (r *reader) notes() {
	for _, spec := range tables {
		if s := r.sheets[spec.name]; s != nil {
			r.tables.Files = append(r.tables.Files, s.note)
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
	before := len(r.faults)
	places := r.header(s)
	s.places, s.misled = places, len(r.faults) > before
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
				*field = notGiven(at, field.raw)
				if has {
					*field = r.number(s, c, field.raw, at, column)
				}
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
				r.fault(h.Place, "a column of no known name", "one of "+strings.Join(s.table.columnNames(), ", "), s.table.columnHint(h.name))
			}
			continue
		}
		if _, twice := places[c.name]; twice {
			r.fault(h.Place, "the column a second time", "it once", "")
			continue
		}
		places[c.name] = i
		if r.checkUnit(h, c.quantity) {
			s.noteUnit(h)
		}
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
	if h.unit == "" {
		r.fault(h.Place, "no unit", "a unit of "+q.Name+" in square brackets: "+q.names(), fmt.Sprintf("write for example %q", h.name+" ["+q.Units[0].Name+"]"))
		return false
	}
	if _, known := q.unit(h.unit); !known {
		r.fault(h.Place, quoted(h.unit), "a unit of "+q.Name+": "+q.names(), q.hint(h.unit))
		return false
	}
	return true
}

// noteUnit notes a unit that was taken one way of several.
func (s *sheet) noteUnit(h heading) {
	if as, several := takenAs[fold(h.unit)]; several {
		s.note.Notes = append(s.note.Notes, h.Column+": taken as "+as)
	}
}

// unitOf returns the unit of a column as its header has it, and whether it is one of the quantity's; if not, that is a
// fault already told.
func (s *sheet) unitOf(c column, place int) (u Unit, known bool) {
	if len(c.quantity.Units) == 0 {
		return Unit{Factor: 1}, true
	}
	return c.quantity.unit(s.header[place].unit)
}

// checkText checks a word.
func (r *reader) checkText(c column, t Text, has bool) {
	switch {
	case !t.Given():
		if c.required && has {
			r.fault(t.Place, "a blank cell", wantWord(c), "")
		}
	case errorValue.MatchString(t.Value):
		r.fault(t.Place, quoted(t.Value), "a value: a spreadsheet's formula has failed here", "")
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

// number reads a cell of the number column c, which stands at a place of the sheet, into SI.
func (r *reader) number(s *sheet, c column, text string, at Place, place int) Number {
	u, unitKnown := s.unitOf(c, place)
	none, within := notGiven(at, text), aNumber
	if unitKnown {
		within = c.within.words(u)
	}
	if text == "" {
		if c.required {
			r.fault(at, "a blank cell", within, "")
		}
		return none
	}
	value, want, hint := s.parse(text)
	si := u.ToSI(value)
	switch {
	case want == aNumber && within != aNumber:
		r.fault(at, quoted(text), aNumber+", "+within, hint)
	case want != "":
		r.fault(at, quoted(text), want, hint)
	case !unitKnown: // in what the number is given is not known, and told already
	case math.IsInf(si, 0) || !c.within.holds(si):
		r.fault(at, quoted(text), within, "")
	case c.integer && si != math.Trunc(si):
		r.fault(at, quoted(text), "a whole number, "+within, "")
	default:
		return Number{Value: si, Given: true, Place: at, raw: text}
	}
	return none
}

// limitValues turns the values of limits.csv by the unit of each row.
func (r *reader) limitValues() {
	for i := range r.tables.Limits {
		row := &r.tables.Limits[i]
		if m, known := limitQuantities[fold(row.Limit.Value)]; known { // else a fault already told
			r.byOwnUnit(&row.Value, row.Unit, m)
		}
	}
}

// readingValues turns the values and uncertainties of readings.csv by the unit of each row.
func (r *reader) readingValues() {
	for i := range r.tables.Readings {
		row := &r.tables.Readings[i]
		m, known := readingQuantities[fold(row.Quantity.Value)]
		if !known {
			continue // a fault already told
		}
		if u, fine := r.byOwnUnit(&row.Value, row.Unit, m); fine && row.Uncertainty.Given {
			row.Uncertainty.Value *= u.Factor // a difference: without the unit's offset
		}
	}
}

// byOwnUnit turns a value whose unit stands in its own row, and checks its range.
func (r *reader) byOwnUnit(value *Number, unit Text, m measure) (u Unit, fine bool) {
	if !unit.Given() {
		return u, false // a fault already told
	}
	u, known := m.quantity.unit(unit.Value)
	if !known {
		r.fault(unit.Place, quoted(unit.Value), "a unit of "+m.quantity.Name+": "+m.quantity.names(), m.quantity.hint(unit.Value))
		return u, false
	}
	if !value.Given {
		return u, true
	}
	si := u.ToSI(value.Value)
	if !m.within.holds(si) {
		r.fault(value.Place, quoted(value.raw), m.within.words(u)+" "+u.Name, "")
		*value = notGiven(value.Place, value.raw)
		return u, true
	}
	value.Value = si
	return u, true
}
