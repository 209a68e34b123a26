// Package sources reads the tables of figures that the catalogues are made of, and says how well each figure is known.
package sources

// Mark says how well a figure of the catalogues is known.
type Mark string

// The marks.
const (
	MarkRead       Mark = "R"  // read in the source named
	MarkReadTwice  Mark = "2R" // read in two sources that agree
	MarkFromMemory Mark = "M"  // from memory: the source is still to be opened
	MarkComputed   Mark = "C"  // computed here from published laws
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
	case MarkComputed:
		return "computed here from published laws"
	}
	return "unknown mark"
}
