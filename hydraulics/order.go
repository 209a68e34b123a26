package hydraulics

import "slices"

// bandOrder numbers the points that neighbours joins so that joined points get near numbers, which keeps the band
// of the network's matrix narrow: the reverse of the order of E. Cuthill and J. McKee (Proc. 24th National
// Conference ACM (1969) 157-172). It returns the points in that order.
func bandOrder(neighbours [][]int) []int {
	order := make([]int, 0, len(neighbours))
	seen := make([]bool, len(neighbours))
	byDegree := func(a, b int) int {
		if d := len(neighbours[a]) - len(neighbours[b]); d != 0 {
			return d
		}
		return a - b // a fixed order of equals, so that results repeat to the last bit
	}
	spread := func(start int) { // appends everything joined to start, breadth first
		seen[start] = true
		for next := len(order); ; next++ {
			if next == len(order) {
				order = append(order, start)
			}
			fresh := len(order)
			for _, n := range neighbours[order[next]] {
				if !seen[n] {
					seen[n] = true
					order = append(order, n)
				}
			}
			slices.SortFunc(order[fresh:], byDegree)
			if next == len(order)-1 {
				return
			}
		}
	}
	for start := range neighbours {
		if seen[start] {
			continue
		}
		// A far end makes a narrow band: the last point reached from anywhere is one, or nearly.
		from := len(order)
		spread(start)
		end := order[len(order)-1]
		for _, p := range order[from:] {
			seen[p] = false
		}
		order = order[:from]
		spread(end)
	}
	slices.Reverse(order)
	return order
}
