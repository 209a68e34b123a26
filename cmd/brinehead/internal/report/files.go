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
func CheckFiles(a *study.Check, o Output) ([]File, error) {
	u := o.Units
	files, err := o.tables([]csvFile{
		{"duty.csv", func(b *bytes.Buffer) error { return WriteDutyCSV(b, a, u) }},
		{"losses.csv", func(b *bytes.Buffer) error { return WriteLossesCSV(b, a, u) }},
		{"findings.csv", func(b *bytes.Buffer) error { return WriteFindingsCSV(b, a, u) }},
		{"supplied.csv", func(b *bytes.Buffer) error { return WriteSuppliedCSV(b, a) }},
	})
	if err != nil {
		return nil, err
	}
	var all []plot
	taken := map[string]bool{}
	for i := range a.Conditions {
		all = append(all, conditionPlots(a, &a.Conditions[i], u, fileStem(a.Conditions[i].Condition, taken))...)
	}
	return o.finish(files, all, checkDocument(a, o, all))
}

// csvFile is a table that is written as CSV.
type csvFile struct {
	name  string
	write func(*bytes.Buffer) error
}

// tables writes those of the tables that are asked for.
func (o Output) tables(list []csvFile) (files []File, err error) {
	for _, t := range list {
		if !o.wants(t.name) {
			continue
		}
		var b bytes.Buffer
		if err := t.write(&b); err != nil {
			return nil, fmt.Errorf("%s: %w", t.name, err)
		}
		files = append(files, File{t.name, b.Bytes()})
	}
	return files, nil
}

// finish adds to the tables their plots and the report in both forms.
func (o Output) finish(files []File, all []plot, d *document) ([]File, error) {
	drawn, err := o.drawn(all)
	if err != nil {
		return nil, err
	}
	files = append(files, drawn...)
	for _, form := range []struct {
		name  string
		write func() ([]byte, error)
	}{{"report.html", d.html}, {"report.pdf", d.pdf}} {
		if !o.wants(form.name) {
			continue
		}
		content, err := form.write()
		if err != nil {
			return nil, err
		}
		files = append(files, File{form.name, content})
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
