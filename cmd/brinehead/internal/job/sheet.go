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

// Bounds of what is read, so that a stray file cannot fill the memory.
const (
	mostBytes = 64 << 20
	mostRows  = 1_000_000
)

// sheet is one file read as cells: a header and rows, every cell with its place, decimal sign found.
type sheet struct {
	table   table
	note    FileNote
	header  []heading
	rows    [][]cell
	decimal rune
	broken  bool // the file could not be read to its end
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
func readSheet(t table, name string, content []byte) (*sheet, Faults) {
	s := &sheet{table: t, note: FileNote{Name: name, SHA256: fmt.Sprintf("%x", sha256.Sum256(content))}, decimal: '.'}
	whole := func(found, want, hint string) (*sheet, Faults) {
		return s, Faults{{Place{File: name}, found, want, hint}}
	}
	if len(content) > mostBytes {
		return whole(fmt.Sprintf("%d MiB", len(content)>>20), fmt.Sprintf("at most %d MiB", mostBytes>>20), "")
	}
	content, s.note.Encoding = decode(content)
	if s.note.Encoding == "" {
		return whole("UTF-16 text", "UTF-8 or Windows-1252", "save the table as CSV UTF-8")
	}
	content = bytes.ReplaceAll(bytes.ReplaceAll(content, []byte("\r\n"), []byte("\n")), []byte("\r"), []byte("\n"))
	lines := bytes.Split(content, []byte("\n"))
	separator := findSeparator(lines)
	s.note.Separator = string(separator)

	r := csv.NewReader(bytes.NewReader(content))
	r.Comma, r.Comment, r.FieldsPerRecord = separator, '#', -1
	for {
		record, err := r.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			s.broken, s.rows = true, nil
			return s, Faults{quoteFault(name, err)}
		}
		if len(s.rows) >= mostRows {
			return whole(fmt.Sprintf("more than %d rows", mostRows), "fewer", "")
		}
		cells := make([]cell, len(record))
		for i, text := range record {
			line, col := r.FieldPos(i)
			cells[i] = cell{tidy(text), Place{File: name, Line: line, Col: characters(lines, line, col)}}
		}
		if s.header == nil {
			s.header = headings(cells)
		} else if !blank(cells) {
			s.rows = append(s.rows, cells)
		}
	}
	if len(s.header) == 0 {
		return whole("no header row", "a header that names the columns: "+strings.Join(t.columnNames(), ", "), "")
	}
	s.note.Rows = len(s.rows)
	return s, s.square()
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
func findSeparator(lines [][]byte) rune {
	for _, line := range lines {
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

// characters turns a column in bytes, from 1, into one in characters.
func characters(lines [][]byte, line, col int) int {
	if line > len(lines) {
		return col
	}
	text := lines[line-1]
	return utf8.RuneCount(text[:min(col-1, len(text))]) + 1
}

// tidy takes spaces off the ends of a cell, makes those inside single, and turns the odd minus sign into a plain one.
func tidy(text string) string {
	return strings.ReplaceAll(strings.Join(strings.Fields(strings.ReplaceAll(text, "\ufeff", "")), " "), "−", "-")
}

func blank(cells []cell) bool {
	return !slices.ContainsFunc(cells, func(c cell) bool { return c.text != "" })
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

var numberForm = regexp.MustCompile(`^[+-]?(\d+(\.\d*)?|\.\d+)([eE][+-]?\d+)?$`)
var commaForm = regexp.MustCompile(`^[+-]?\d*,\d+([eE][+-]?\d+)?$`)

// findDecimal finds the decimal sign among cells of number columns: a comma where the separator is none and one of the
// cells has it in the place of a decimal sign.
func (s *sheet) findDecimal(cells []string) {
	if s.note.Separator != "," && slices.ContainsFunc(cells, commaForm.MatchString) {
		s.decimal = ','
	}
	s.note.Decimal = string(s.decimal)
}

// parse reads a number, or says what was wanted instead.
func (s *sheet) parse(text string) (value float64, want string) {
	plainText := text
	if s.decimal == ',' {
		if strings.Contains(text, ".") {
			return 0, "a decimal comma, as elsewhere in this file"
		}
		plainText = strings.Replace(text, ",", ".", 1)
	} else if strings.Contains(text, ",") {
		return 0, "a number with a decimal point and no separators of thousands"
	}
	if !numberForm.MatchString(plainText) {
		return 0, "a number"
	}
	value, err := strconv.ParseFloat(plainText, 64)
	if err != nil {
		return 0, "a number of ordinary size"
	}
	return value, ""
}
