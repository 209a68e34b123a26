package job

import (
	"strings"
	"unicode/utf8"
)

// nearestHint says which of the names is nearest to what was found, or nothing where none is near.
func nearestHint(found string, names []string) string {
	if name := nearest(found, names); name != "" {
		return `nearest is "` + name + `"`
	}
	return ""
}

// nearest returns the name with the least edit distance, where that is at most a third of its length (two at least, but
// one in a name of up to three letters); the first of equals. A name that begins with what was found, or the other way round, counts as near.
func nearest(found string, names []string) string {
	best, bestDistance := "", 1<<30
	for _, name := range names {
		a, b := fold(found), fold(name)
		d := distance(a, b)
		if a != "" && (strings.HasPrefix(b, a) || strings.HasPrefix(a, b) && b != "") {
			d = min(d, 1)
		}
		most := max(2, utf8.RuneCountInString(name)/3)
		if utf8.RuneCountInString(name) <= 3 {
			most = 1
		}
		if d <= most && d < bestDistance {
			best, bestDistance = name, d
		}
	}
	return best
}

// distance counts the letters to be put in, taken out, changed or swapped with their neighbour to make a of b (optimal
// string alignment; F. J. Damerau, Communications of the ACM 7 (1964) 171-176).
func distance(a, b string) int {
	x, y := []rune(a), []rune(b)
	rows := [3][]int{make([]int, len(y)+1), make([]int, len(y)+1), make([]int, len(y)+1)}
	for j := range rows[1] {
		rows[1][j] = j
	}
	for i := 1; i <= len(x); i++ {
		before, last, row := rows[0], rows[1], rows[2]
		row[0] = i
		for j := 1; j <= len(y); j++ {
			change := last[j-1]
			if x[i-1] != y[j-1] {
				change++
			}
			row[j] = min(change, last[j]+1, row[j-1]+1)
			if i > 1 && j > 1 && x[i-1] == y[j-2] && x[i-2] == y[j-1] {
				row[j] = min(row[j], before[j-2]+1)
			}
		}
		rows[0], rows[1], rows[2] = last, row, before
	}
	return rows[1][len(y)]
}
