package report

import (
	"bytes"
	"fmt"
	"strings"
	"unicode"

	"brinehead/cmd/brinehead/internal/study"
)

// File is a result ready to be written.
type File struct {
	Name    string // a plain file name, the same on every system
	Content []byte
}

// CheckFiles makes the tables and plots of an answer: duty.csv, losses.csv, findings.csv, supplied.csv, and for each condition with a
// solution a plot of head and one of NPSH over flow, as SVG and PNG.
func CheckFiles(a *study.Check, u Units) ([]File, error) {
	var files []File
	for _, t := range []struct {
		name  string
		write func(*bytes.Buffer) error
	}{
		{"duty.csv", func(b *bytes.Buffer) error { return WriteDutyCSV(b, a, u) }},
		{"losses.csv", func(b *bytes.Buffer) error { return WriteLossesCSV(b, a, u) }},
		{"findings.csv", func(b *bytes.Buffer) error { return WriteFindingsCSV(b, a, u) }},
		{"supplied.csv", func(b *bytes.Buffer) error { return WriteSuppliedCSV(b, a) }},
	} {
		var b bytes.Buffer
		if err := t.write(&b); err != nil {
			return nil, fmt.Errorf("%s: %w", t.name, err)
		}
		files = append(files, File{t.name, b.Bytes()})
	}
	taken := map[string]bool{}
	for i := range a.Conditions {
		plots, err := conditionPlots(a, &a.Conditions[i], u, fileStem(a.Conditions[i].Condition, taken))
		if err != nil {
			return nil, fmt.Errorf("plots of condition %s: %w", a.Conditions[i].Condition, err)
		}
		files = append(files, plots...)
	}
	return files, nil
}

// fileStem makes the beginning of a file name out of a user's name: letters, digits and dashes, not taken yet.
func fileStem(name string, taken map[string]bool) string {
	var b strings.Builder
	for _, r := range strings.ToLower(name) {
		switch {
		case unicode.IsLetter(r) || unicode.IsDigit(r):
			b.WriteRune(r)
		case b.Len() > 0 && !strings.HasSuffix(b.String(), "-"):
			b.WriteByte('-')
		}
	}
	runes := []rune(strings.Trim(b.String(), "-"))
	stem := string(runes[:min(len(runes), 60)])
	if stem == "" {
		stem = "condition"
	}
	for n, base := 2, stem; taken[stem]; n++ {
		stem = fmt.Sprintf("%s-%d", base, n)
	}
	taken[stem] = true
	return stem
}
