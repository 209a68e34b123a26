package report

import (
	"fmt"
	"io"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
)

// WriteCatalogueCSV writes it as a table, with the notes on its sources above.
func WriteCatalogueCSV(w io.Writer, c *study.Catalogue) error {
	for _, n := range c.Notes {
		if _, err := fmt.Fprintf(w, "# %s\n", n); err != nil {
			return err
		}
	}
	t := &csvTable{}
	t.add(c.Head...)
	for _, row := range c.Rows {
		cells := make([]string, len(row))
		for i, cell := range row {
			cells[i] = word(cell)
		}
		t.add(cells...)
	}
	return t.write(w)
}

// WriteCatalogueText writes it for reading: as a table where that fits a terminal, else entry by entry.
func WriteCatalogueText(w io.Writer, c *study.Catalogue) error {
	table := grid{head: c.Head, rows: c.Rows, left: 2}.lines("")
	fits := true
	for _, line := range table {
		fits = fits && len([]rune(line)) <= textWidth
	}
	var lines []string
	if fits {
		lines = table
	} else {
		for _, row := range c.Rows {
			lines = append(lines, row[0])
			for i := 1; i < len(row); i++ {
				if row[i] != "" {
					lines = append(lines, wrap("  ", "    ", c.Head[i]+": "+row[i])...)
				}
			}
		}
	}
	if len(c.Notes) > 0 {
		lines = append(lines, "", "Sources and marks:")
		for _, n := range c.Notes {
			lines = append(lines, wrap("  ", "    ", n)...)
		}
	}
	_, err := io.WriteString(w, strings.Join(lines, "\n")+"\n")
	return err
}
