package report

import (
	"strings"
	"unicode/utf8"
)

// grid is a table of text: a head and rows, the columns named in left set to the left and all others to the right.
type grid struct {
	head []string
	rows [][]string
	left int // how many of the first columns are words
}

// lines returns the table's lines with columns as wide as they need, two spaces apart, behind an indent.
func (g grid) lines(indent string) []string {
	width := make([]int, len(g.head))
	all := append([][]string{g.head}, g.rows...)
	for _, row := range all {
		for i, cell := range row {
			width[i] = max(width[i], utf8.RuneCountInString(cell))
		}
	}
	var out []string
	for _, row := range all {
		var line strings.Builder
		line.WriteString(indent)
		for i, cell := range row {
			pad := strings.Repeat(" ", width[i]-utf8.RuneCountInString(cell))
			if i > 0 {
				line.WriteString("  ")
			}
			if i < g.left {
				line.WriteString(cell + pad)
			} else {
				line.WriteString(pad + cell)
			}
		}
		out = append(out, strings.TrimRight(line.String(), " "))
	}
	return out
}

// wrap breaks text at spaces into lines no wider than the terminal, the first behind one indent, the others behind
// another.
func wrap(first, rest, text string) []string {
	var out []string
	line, empty := first, true
	for _, word := range strings.Fields(text) {
		switch {
		case empty:
			line += word
		case utf8.RuneCountInString(line)+1+utf8.RuneCountInString(word) > textWidth:
			out = append(out, line)
			line = rest + word
		default:
			line += " " + word
		}
		empty = false
	}
	return append(out, line)
}
