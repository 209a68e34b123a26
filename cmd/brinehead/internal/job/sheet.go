package job

import (
	"bytes"
	"crypto/sha256"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"golang.org/x/text/encoding/charmap"
)

// bounds keep a stray file from filling the memory.
type bounds struct {
	bytes, line int // of the file, and of one of its lines
	rows, cells int // of the table in all
}

// most is what is read of one table.
var most = bounds{bytes: 64 << 20, line: 1 << 20, rows: 1_000_000, cells: 4_000_000}

// exceeded says which bound a file of so many bytes breaks, and in which line where it is one; nothing where it breaks none.
func (b bounds) exceeded(content []byte) (found string, line int) {
	if len(content) > b.bytes {
		return fmt.Sprintf("more than %d bytes", b.bytes), 0
	}
	number := 0
	for text := range bytes.Lines(content) {
		if number++; len(text) > b.line {
			return fmt.Sprintf("a line of more than %d bytes", b.line), number
		}
	}
	return "", 0
}

// sheet is one file read as cells: a header and rows, every cell with its place, decimal sign found.
type sheet struct {
	table   table
	note    FileNote
	header  []heading
	rows    [][]cell
	decimal rune
	evidence
	places map[string]int // where the columns of the table stand, by their canonical names
	lost   bool           // rows could not be read
	misled bool           // its header is at fault, so that a column it lacks may be there in truth
}

// heading is a column's header taken apart.
type heading struct {
	Place
	name    string // folded, without the unit
	unit    string // between the brackets
	hasUnit bool
}

type cell struct {
	text string
	Place
}

// readSheet takes a file apart. Faults of the file as a whole leave the sheet empty.
func readSheet(t table, name string, content []byte, most bounds) (*sheet, Faults) {
	s := &sheet{table: t, note: FileNote{Name: name, Decimal: ".", SHA256: fmt.Sprintf("%x", sha256.Sum256(content))}, decimal: '.'}
	whole := func(f Fault) (*sheet, Faults) {
		s.lost = true
		return s, Faults{f}
	}
	file := Place{File: name}
	if found, line := most.exceeded(content); found != "" {
		return whole(Fault{Place{File: name, Line: line}, found, "a table of at most that", ""})
	}
	content, s.note.Encoding = decode(content)
	if s.note.Encoding == "" {
		return whole(Fault{file, "UTF-16 text", "UTF-8 or Windows-1252", "save the table as CSV UTF-8"})
	}
	content = bytes.ReplaceAll(bytes.ReplaceAll(content, []byte("\r\n"), []byte("\n")), []byte("\r"), []byte("\n"))
	separator := findSeparator(content)
	s.note.Separator = string(separator)
	reached := cursor{rest: content, line: 1, col: 1, character: 1}
	count := 0

	r := csv.NewReader(bytes.NewReader(content))
	r.Comma, r.Comment, r.FieldsPerRecord = separator, '#', -1
	for {
		record, err := r.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			s.rows = nil
			return whole(quoteFault(name, err))
		}
		count += len(record)
		if len(s.rows) >= most.rows || count > most.cells {
			s.rows = nil
			return whole(Fault{file, fmt.Sprintf("more than %d rows or %d cells", most.rows, most.cells), "a table of at most that", ""})
		}
		cells := make([]cell, len(record))
		for i, text := range record {
			line, col := r.FieldPos(i)
			cells[i] = cell{tidy(text), Place{File: name, Line: line, Col: reached.characters(line, col)}}
		}
		switch {
		case blank(cells) || isNote(cells):
		case s.header == nil:
			s.header = headings(cells)
		default:
			s.rows = append(s.rows, cells)
		}
	}
	if len(s.header) == 0 {
		return whole(Fault{file, "no header row", "a header that names the columns: " + strings.Join(t.columnNames(), ", "), ""})
	}
	s.note.Rows = len(s.rows)
	faults := append(s.square(), errorRows(name, content, separator)...)
	s.lost = len(faults) > 0
	return s, faults
}

// decode turns a file's bytes into UTF-8 and names the encoding found; none for UTF-16.
func decode(content []byte) (text []byte, encoding string) {
	switch {
	case bytes.HasPrefix(content, []byte("\xef\xbb\xbf")):
		return content[3:], "UTF-8 with byte order mark"
	case bytes.HasPrefix(content, []byte("\xff\xfe")) || bytes.HasPrefix(content, []byte("\xfe\xff")):
		return nil, ""
	case utf8.Valid(content):
		return content, "UTF-8"
	}
	text, _ = charmap.Windows1252.NewDecoder().Bytes(content) // every byte has a meaning: no error is possible
	return text, "Windows-1252"
}

// findSeparator looks at the first line that is neither a note nor blank: a tab before a semicolon before a comma, since
// headers hold neither of the first two otherwise.
func findSeparator(content []byte) rune {
	for line := range bytes.Lines(content) {
		if len(bytes.TrimSpace(line)) == 0 || line[0] == '#' {
			continue
		}
		for _, separator := range []byte{'\t', ';'} {
			if bytes.IndexByte(line, separator) >= 0 {
				return rune(separator)
			}
		}
		return ','
	}
	return ','
}

// quoteFault words the errors of encoding/csv, all of which are about quotation marks.
func quoteFault(name string, err error) Fault {
	place := Place{File: name}
	var parse *csv.ParseError
	if errors.As(err, &parse) {
		place.Line = parse.Line
	}
	return Fault{place, "a stray quotation mark", `a cell wholly between quotation marks, or without any`, `a quotation mark within a quoted cell is written twice: ""`}
}

// cursor goes through a file from cell to cell, so that finding the places of all of them takes one pass.
type cursor struct {
	rest           []byte // the file from the place on
	line           int
	col, character int // from 1: where the place is in its line
}

// characters goes on to a place, given by its line and its column in bytes, and returns the column in characters.
func (c *cursor) characters(line, col int) int {
	for c.line < line {
		_, c.rest, _ = bytes.Cut(c.rest, []byte("\n"))
		c.line, c.col, c.character = c.line+1, 1, 1
	}
	step := min(max(col-c.col, 0), len(c.rest))
	c.character += utf8.RuneCount(c.rest[:step])
	c.rest, c.col = c.rest[step:], c.col+step
	return c.character
}

// tidy takes spaces off the ends of a cell, makes those inside single, and turns the odd minus sign into a plain one.
func tidy(text string) string {
	return strings.ReplaceAll(strings.Join(strings.Fields(strings.ReplaceAll(text, "\ufeff", "")), " "), "−", "-")
}

func blank(cells []cell) bool {
	return !slices.ContainsFunc(cells, func(c cell) bool { return c.text != "" })
}

// isNote says whether a row is a note that a spreadsheet has put between quotation marks, since it holds a separator.
func isNote(cells []cell) bool {
	return strings.HasPrefix(cells[0].text, "#") && !errorValue.MatchString(cells[0].text) && blank(cells[1:])
}

// errorValue is what a spreadsheet writes where a formula has failed: #N/A, #REF!, #DIV/0!, #NAME?, #NV, #WERT!.
var errorValue = regexp.MustCompile(`^#(N/A|NV|[\p{Lu}\d/]+[!?])$`)

// errorRows faults the rows that begin with a spreadsheet's error: the sign # makes them pass for notes.
func errorRows(name string, content []byte, separator rune) Faults {
	var faults Faults
	number := 0
	for line := range bytes.Lines(content) {
		number++
		if first, _, more := bytes.Cut(line, []byte(string(separator))); more && errorValue.Match(bytes.TrimSpace(first)) {
			faults = append(faults, Fault{Place{File: name, Line: number, Col: 1}, quoted(tidy(string(first))), "a value: a spreadsheet's formula has failed here", ""})
		}
	}
	return faults
}

var headerForm = regexp.MustCompile(`^(.*?)\s*(?:\[([^\[\]]*)\])?$`)

// headings takes header cells apart into names and units.
func headings(cells []cell) []heading {
	var list []heading
	for _, c := range cells {
		parts := headerForm.FindStringSubmatch(c.text)
		h := heading{Place: c.Place, name: fold(parts[1]), unit: tidy(parts[2]), hasUnit: strings.HasSuffix(c.text, "]")}
		h.Column = c.text
		list = append(list, h)
	}
	for len(list) > 0 && list[len(list)-1].name == "" && !list[len(list)-1].hasUnit { // spreadsheets leave empty columns
		list = list[:len(list)-1]
	}
	return list
}

// square faults the rows that are not as long as the header, blank cells beyond it apart, and takes them out: what stands
// in which of their columns is not known.
func (s *sheet) square() Faults {
	var faults Faults
	var rows [][]cell
	for _, row := range s.rows {
		if len(row) < len(s.header) || !blank(row[len(s.header):]) {
			hint := ""
			if len(row) > len(s.header) {
				hint = decimalHint(s.note.Separator)
			}
			faults = append(faults, Fault{Place{File: s.note.Name, Line: row[0].Line}, fmt.Sprintf("%d cells", len(row)),
				fmt.Sprintf("%d, one for each column of the header", len(s.header)), hint})
			continue
		}
		row = row[:len(s.header)]
		for k := range row {
			row[k].Column = s.header[k].Column
		}
		rows = append(rows, row)
	}
	s.rows = rows
	return faults
}

func decimalHint(separator string) string {
	if separator == "," {
		return "a decimal comma needs another separator: save the table with semicolons"
	}
	return ""
}

// Forms that a number can have: with a decimal point, with a decimal comma, and with thousands set apart.
var (
	pointForm     = regexp.MustCompile(`^[+-]?(\d+(\.\d*)?|\.\d+)([eE][+-]?\d+)?$`)
	commaForm     = regexp.MustCompile(`^[+-]?(\d+(,\d*)?|,\d+)([eE][+-]?\d+)?$`)
	thousandsForm = regexp.MustCompile(`^[+-]?\d{1,3}(?:(,)\d{3}(?:,\d{3}|\.)|(\.)\d{3}(?:\.\d{3}|,))[\d.,]*$`)
	twoWaysForm   = regexp.MustCompile(`^[+-]?[1-9]\d{0,2}([.,])\d{3}$`)
)

// evidence is what the number cells of a file show of its decimal sign.
type evidence struct {
	point, comma                   bool // a number that has the sign as its decimal sign beyond doubt
	pointThousands, commaThousands bool // a number that has the sign between its thousands
}

// findDecimal finds the decimal sign among the cells of number columns: a comma where the separator is none and one of
// the cells has it as its decimal sign beyond doubt.
func (s *sheet) findDecimal(cells []string) {
	for _, text := range cells {
		if parts := thousandsForm.FindStringSubmatch(text); parts != nil {
			s.commaThousands = s.commaThousands || parts[1] != ""
			s.pointThousands = s.pointThousands || parts[2] != ""
			continue
		}
		if twoWaysForm.MatchString(text) {
			continue
		}
		s.point = s.point || strings.Contains(text, ".") && pointForm.MatchString(text)
		s.comma = s.comma || strings.Contains(text, ",") && commaForm.MatchString(text)
	}
	if s.note.Separator == "," {
		s.comma, s.point = false, true
	}
	if s.comma {
		s.decimal = ','
	}
	s.note.Decimal = string(s.decimal)
}

// twoWays says whether a number such as 1,234 or 1.234 could be one and a bit or more than a thousand, for all that the
// file shows.
func (s *sheet) twoWays(text string) bool {
	parts := twoWaysForm.FindStringSubmatch(text)
	switch {
	case parts == nil:
		return false
	case parts[1] == ",":
		return s.note.Separator != "," && !s.point && !s.comma || s.comma && s.commaThousands
	default:
		return !s.point && !s.comma || s.point && s.pointThousands
	}
}

// aNumber is what is wanted where there is none.
const aNumber = "a number"

// parse reads a number, or says what was wanted instead and what to do.
func (s *sheet) parse(text string) (value float64, want, hint string) {
	form, other, otherWant := pointForm, ",", "a number with a decimal point and no separators of thousands"
	if s.decimal == ',' {
		form, other, otherWant = commaForm, ".", "a decimal comma, as elsewhere in this file"
	}
	switch {
	case s.twoWays(text):
		bare := strings.NewReplacer(",", "", ".", "").Replace(text)
		return 0, "a number that can be read in one way only", fmt.Sprintf("write %s or %s0, as is meant", bare, text)
	case thousandsForm.MatchString(text):
		return 0, "a number without signs between its thousands", ""
	case strings.Contains(text, other) && (pointForm.MatchString(text) || commaForm.MatchString(text)):
		return 0, otherWant, decimalHint(s.note.Separator)
	case !form.MatchString(text):
		return 0, aNumber, ""
	}
	value, err := strconv.ParseFloat(strings.Replace(text, ",", ".", 1), 64)
	if err != nil {
		return 0, "a number of ordinary size", ""
	}
	return value, "", ""
}
