package hydraulics

import (
	"encoding/csv"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// catalogueTable is an embedded file: rows by column, and the notes above them.
type catalogueTable struct {
	notes []string // comment lines in order, without their sign
	rows  []catalogueRow
}

// catalogueRow is one row of a catalogue, by column.
type catalogueRow map[string]string

// parseCatalogueTable reads a file that has exactly the columns named.
func parseCatalogueTable(text string, columns ...string) (catalogueTable, error) {
	var table catalogueTable
	for line := range strings.Lines(text) {
		if note, ok := strings.CutPrefix(line, "#"); ok {
			table.notes = append(table.notes, strings.TrimSpace(note))
		}
	}
	reader := csv.NewReader(strings.NewReader(text))
	reader.Comment = '#'
	records, err := reader.ReadAll()
	if err != nil {
		return catalogueTable{}, err
	}
	if len(records) == 0 || !slices.Equal(records[0], columns) {
		return catalogueTable{}, fmt.Errorf("want the columns %q", columns)
	}
	for _, record := range records[1:] {
		row := catalogueRow{}
		for i, column := range columns {
			row[column] = record[i]
		}
		table.rows = append(table.rows, row)
	}
	return table, nil
}

// parseMarkedTable reads a file whose last columns, source and mark, say of every row where it is from and how well
// it is known.
func parseMarkedTable(text string, columns ...string) (catalogueTable, error) {
	table, err := parseCatalogueTable(text, append(slices.Clone(columns), "source", "mark")...)
	if err != nil {
		return catalogueTable{}, err
	}
	for _, row := range table.rows {
		if row["source"] == "" || !slices.Contains([]Mark{MarkRead, MarkReadTwice, MarkFromMemory}, row.mark()) {
			return catalogueTable{}, fmt.Errorf("found source %q and mark %q, want a source and a known mark",
				row["source"], row["mark"])
		}
	}
	return table, nil
}

func (r catalogueRow) mark() Mark { return Mark(r["mark"]) }

// list returns the names of a column that holds several, separated by semicolons.
func (r catalogueRow) list(column string) []string {
	var names []string
	for name := range strings.SplitSeq(r[column], ";") {
		if name = strings.TrimSpace(name); name != "" {
			names = append(names, name)
		}
	}
	return names
}

// number returns the figure of a column, 0 or more, turned from the unit given; or NaN where the cell is empty.
func (r catalogueRow) number(column string, unit float64) (float64, error) {
	if r[column] == "" {
		return math.NaN(), nil
	}
	value, err := strconv.ParseFloat(r[column], 64)
	if err != nil || !(value >= 0 && value < math.Inf(1)) {
		return math.NaN(), fmt.Errorf("%s: found %q, want a figure of 0 or more", column, r[column])
	}
	return value * unit, nil
}

// millimetre in metres: the catalogues' unit of length.
const millimetre = 1e-3
