package job

import (
	"cmp"
	"errors"
	"fmt"
	"slices"
	"strings"
)

// Place is where in a job folder something stands.
type Place struct {
	File      string
	Line, Col int    // from 1, Col in characters; 0 where the whole file or line is meant
	Column    string // the column's header as written, or empty
}

// Fault is one thing wrong in a job folder, in the user's words.
type Fault struct {
	Place
	Found string // what stands there
	Want  string // what should
	Hint  string // what to do about it, or empty
}

// Error prints the fault as "runs.csv:7:12: bore [mm]: found ..., want ...", and its hint on a line of its own.
func (f Fault) Error() string {
	var b strings.Builder
	if f.File != "" {
		b.WriteString(f.File)
		if f.Line > 0 {
			fmt.Fprintf(&b, ":%d", f.Line)
			if f.Col > 0 {
				fmt.Fprintf(&b, ":%d", f.Col)
			}
		}
		b.WriteString(": ")
	}
	if f.Column != "" {
		b.WriteString(f.Column + ": ")
	}
	fmt.Fprintf(&b, "found %s, want %s", f.Found, f.Want)
	if f.Hint != "" {
		b.WriteString("\n\thint: " + f.Hint)
	}
	return b.String()
}

// Faults are the faults of a job, told together.
type Faults []Fault

// mostFaults is how many faults are printed; the rest are counted.
const mostFaults = 50

// Error prints the faults in the order of file and line.
func (f Faults) Error() string {
	var lines []string
	for i, one := range f {
		if i == mostFaults {
			lines = append(lines, fmt.Sprintf("and %d more", len(f)-mostFaults))
			break
		}
		lines = append(lines, one.Error())
	}
	return strings.Join(lines, "\n")
}

// Err returns the faults in order as an error, or nil where there are none.
func (f Faults) Err() error {
	if len(f) == 0 {
		return nil
	}
	sorted := slices.Clone(f)
	slices.SortStableFunc(sorted, func(a, b Fault) int {
		return cmp.Or(cmp.Compare(a.File, b.File), cmp.Compare(a.Line, b.Line), cmp.Compare(a.Col, b.Col), cmp.Compare(a.Found, b.Found))
	})
	return slices.Compact(sorted)
}

// asFaults says whether an error is Faults and gives them.
func asFaults(err error, out *Faults) bool { return errors.As(err, out) }

// quoted puts what was found between quotation marks, shortened where it is long, or calls it blank.
func quoted(text string) string {
	const most = 40
	if r := []rune(text); len(r) > most {
		text = string(r[:most]) + "..."
	}
	if text == "" {
		return "a blank cell"
	}
	return fmt.Sprintf("%q", text)
}
