package job

import (
	"strings"
	"unicode/utf8"

	"brinehead/spelling"
)

// nearestHint says which of the names is nearest to what was found, or nothing where none is near.
func nearestHint(found string, names []string) string {
	if name := nearest(found, names); name != "" {
		return `nearest is "` + name + `"`
	}
	return ""
}

// nearest returns the name with the least edit distance, where that is at most a third of its length (two at least, but
// one in a name of up to three letters); the first of equals. A name that begins with what was found, or the other way round, counts as near
// where both have three letters or more.
func nearest(found string, names []string) string {
	best, bestDistance := "", 1<<30
	for _, name := range names {
		a, b := fold(found), fold(name)
		d := spelling.Distance(a, b)
		if min(utf8.RuneCountInString(a), utf8.RuneCountInString(b)) >= 3 && (strings.HasPrefix(b, a) || strings.HasPrefix(a, b)) {
			d = min(d, 1)
		}
		most := max(2, utf8.RuneCountInString(name)/3)
		if utf8.RuneCountInString(name) <= 3 {
			most = 1
		}
		if d <= most && d < bestDistance && d < utf8.RuneCountInString(name) { // else no letter of the name is left
			best, bestDistance = name, d
		}
	}
	return best
}
