package report

import (
	"bytes"
	"fmt"

	"brinehead/cmd/brinehead/internal/study"
)

// CompareFiles makes the tables and plots of a comparison: changes.csv, differences.csv, verdicts.csv, ways.csv, harbour.csv and
// tolerances.csv, and for each condition the plots of comparePlots, as SVG and PNG.
func CompareFiles(a *study.Comparison, u Units) ([]File, error) {
	var files []File
	for _, t := range []struct {
		name  string
		write func(*bytes.Buffer) error
	}{
		{"changes.csv", func(b *bytes.Buffer) error { return WriteChangesCSV(b, a) }},
		{"differences.csv", func(b *bytes.Buffer) error { return WriteDifferencesCSV(b, a, u) }},
		{"verdicts.csv", func(b *bytes.Buffer) error { return WriteVerdictsCSV(b, a, u) }},
		{"ways.csv", func(b *bytes.Buffer) error { return WriteWaysCSV(b, a, u) }},
		{"harbour.csv", func(b *bytes.Buffer) error { return WriteHarbourCSV(b, a, u) }},
		{"tolerances.csv", func(b *bytes.Buffer) error { return WriteTolerancesCSV(b, a) }},
	} {
		var b bytes.Buffer
		if err := t.write(&b); err != nil {
			return nil, fmt.Errorf("%s: %w", t.name, err)
		}
		files = append(files, File{t.name, b.Bytes()})
	}
	return files, nil
}
