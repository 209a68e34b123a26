package hydraulics

import (
	"encoding/csv"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"unicode"
)

// Mark says how well a figure of the catalogues is known.
type Mark string

// The marks of the catalogues of sizes, materials and velocities.
const (
	MarkRead       Mark = "R"  // read in the source named
	MarkReadTwice  Mark = "2R" // read in two sources that agree
	MarkFromMemory Mark = "M"  // from memory: the source is still to be opened
)

// Meaning returns the mark in words; a mark that is none of the catalogues' is "unknown mark".
func (m Mark) Meaning() string {
	switch m {
	case MarkRead:
		return "read in the source named"
	case MarkReadTwice:
		return "read in two sources that agree"
	case MarkFromMemory:
		return "from memory, source still to be opened"
	}
	return "unknown mark"
}

// UnknownNameError refuses a name that no catalogue has, or one that fits several of its entries.
type UnknownNameError struct {
	Kind    string   // what was looked for: "pipe standard", "size of EN 10220", "series of JIS G3454", "material"
	Name    string   // as the user wrote it
	Nearest []string // names that may be written instead, the nearest first; empty where none is near
	Hint    string   // what else to do; may be empty
}

// Error names what was found and the nearest known names; the hint is left to whoever prints hints.
func (e *UnknownNameError) Error() string {
	text := fmt.Sprintf("%s: found %q, want a name in the catalogue", e.Kind, e.Name)
	if len(e.Nearest) > 0 {
		text += fmt.Sprintf(", such as %q", e.Nearest[0])
		for _, name := range e.Nearest[1:] {
			text += fmt.Sprintf(", %q", name)
		}
	}
	return text
}

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

// nameWords breaks a name into lower-case words and numbers, so that case, spaces, punctuation and joined writing
// make no difference: "DN200", "dn 200" and "DN-200" are all dn, 200. A point or comma between two digits is a
// decimal sign, and the sign of multiplication is the letter x.
func nameWords(text string) []string {
	text = strings.ToLower(strings.ReplaceAll(text, "×", "x"))
	var found []string
	var word []rune
	end := func() {
		if len(word) > 0 {
			found = append(found, string(word))
		}
		word = nil
	}
	letters := []rune(text)
	for i, c := range letters {
		inNumber := len(word) > 0 && unicode.IsDigit(word[len(word)-1])
		inWord := len(word) > 0 && unicode.IsLetter(word[len(word)-1])
		switch {
		case unicode.IsDigit(c):
			if inWord {
				end()
			}
			word = append(word, c)
		case unicode.IsLetter(c):
			if inNumber {
				end()
			}
			word = append(word, c)
		case (c == '.' || c == ',') && inNumber && i+1 < len(letters) && unicode.IsDigit(letters[i+1]):
			word = append(word, '.')
		default:
			end()
		}
	}
	end()
	return found
}

// spelling is one way to write a catalogue's name.
type spelling struct{ text, name string }

// nearestNames returns up to three names of the catalogue whose spellings lie nearest to what was written, the
// nearest first. A spelling that differs in more than a third of its letters is not near.
func nearestNames(wanted string, known []spelling) []string {
	type candidate struct {
		name     string
		distance int
	}
	var near []candidate
	want := []rune(strings.Join(nameWords(wanted), " "))
	for _, k := range known {
		text := []rune(strings.Join(nameWords(k.text), " "))
		most := max(len(want), len(text)) / 3
		if max(len(want)-len(text), len(text)-len(want)) > most {
			continue
		}
		if d := editDistance(want, text); d <= most {
			near = append(near, candidate{k.name, d})
		}
	}
	slices.SortStableFunc(near, func(a, b candidate) int { return a.distance - b.distance })
	var names []string
	for _, c := range near {
		if !slices.Contains(names, c.name) && len(names) < 3 {
			names = append(names, c.name)
		}
	}
	return names
}

// editDistance returns how many letters must be put in, taken out, changed or swapped with their neighbour to make b of
// a, no letter being touched twice.
//
// Source: F. J. Damerau, Communications of the ACM 7 (1964) 171-176; V. I. Levenshtein, Soviet Physics Doklady 10
// (1966) 707-710 (both cited from memory).
func editDistance(a, b []rune) int {
	distance := make([][]int, len(a)+1) // from the first i letters of a to the first j of b
	for i := range distance {
		distance[i] = make([]int, len(b)+1)
		for j := range distance[i] {
			if i == 0 || j == 0 {
				distance[i][j] = i + j
				continue
			}
			change := distance[i-1][j-1]
			if a[i-1] != b[j-1] {
				change++
			}
			distance[i][j] = min(change, distance[i-1][j]+1, distance[i][j-1]+1)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				distance[i][j] = min(distance[i][j], distance[i-2][j-2]+1)
			}
		}
	}
	return distance[len(a)][len(b)]
}
