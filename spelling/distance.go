// Package spelling tells how far two names lie apart, so that a message can offer the nearest known one.
package spelling

// Distance counts the letters to be put in, taken out, changed or swapped with their neighbour to make a of b, no letter
// being touched twice (optimal string alignment).
//
// Source: F. J. Damerau, Communications of the ACM 7 (1964) 171-176; V. I. Levenshtein, Soviet Physics Doklady 10 (1966)
// 707-710 (both cited from memory).
func Distance(a, b string) int {
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
