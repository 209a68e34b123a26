package sources

import (
	"encoding/csv"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// Table is an embedded file: rows by column, and the notes above them.
type Table struct {
	Notes []string // comment lines in order, without their sign
	Rows  []Row
}

// Row is one row of a table, by column.
type Row map[string]string

// Parse reads a file that has exactly the columns named.
func Parse(text string, columns ...string) (Table, error) {
	var table Table
	for line := range strings.Lines(text) {
		if note, ok := strings.CutPrefix(line, "#"); ok {
			table.Notes = append(table.Notes, strings.TrimSpace(note))
		}
	}
	reader := csv.NewReader(strings.NewReader(text))
	reader.Comment = '#'
	records, err := reader.ReadAll()
	if err != nil {
		return Table{}, err
	}
	if len(records) == 0 || !slices.Equal(records[0], columns) {
		return Table{}, fmt.Errorf("want the columns %q", columns)
	}
	for _, record := range records[1:] {
		row := Row{}
		for i, column := range columns {
			row[column] = record[i]
		}
		table.Rows = append(table.Rows, row)
	}
	return table, nil
}

// ParseMarked reads a file whose last columns, source and mark, say of every row where it is from and how well
// it is known.
func ParseMarked(text string, columns ...string) (Table, error) {
	table, err := Parse(text, append(slices.Clone(columns), "source", "mark")...)
	if err != nil {
		return Table{}, err
	}
	for _, row := range table.Rows {
		if row["source"] == "" || !slices.Contains([]Mark{MarkRead, MarkReadTwice, MarkFromMemory}, row.Mark()) {
			return Table{}, fmt.Errorf("found source %q and mark %q, want a source and a known mark",
				row["source"], row["mark"])
		}
	}
	return table, nil
}

// Mark says how well the row is known.
func (r Row) Mark() Mark { return Mark(r["mark"]) }

// List returns the names of a column that holds several, separated by semicolons.
func (r Row) List(column string) []string {
	var names []string
	for name := range strings.SplitSeq(r[column], ";") {
		if name = strings.TrimSpace(name); name != "" {
			names = append(names, name)
		}
	}
	return names
}

// Number returns the figure of a column, 0 or more, turned from the unit given; or NaN where the cell is empty.
func (r Row) Number(column string, unit float64) (float64, error) {
	if r[column] == "" {
		return math.NaN(), nil
	}
	value, err := strconv.ParseFloat(r[column], 64)
	if err != nil || !(value >= 0 && value < math.Inf(1)) {
		return math.NaN(), fmt.Errorf("%s: found %q, want a figure of 0 or more", column, r[column])
	}
	return value * unit, nil
}
