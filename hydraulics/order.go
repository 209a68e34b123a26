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

// takeOffTwigs takes off, again and again, the points that have one neighbour left or none. It returns them in that order,
// and for each point what it hung on when it went, -1 for nothing. Points that stand in a loop, or between two, stay.
func takeOffTwigs(neighbours [][]int) (order, on []int) {
	left := make([]int, len(neighbours)) // neighbours still there
	gone := make([]bool, len(neighbours))
	on = make([]int, len(neighbours))
	for i, near := range neighbours {
		left[i], on[i] = len(near), -1
		if left[i] <= 1 {
			order = append(order, i)
			gone[i] = true
		}
	}
	for next := 0; next < len(order); next++ {
		point := order[next]
		for _, n := range neighbours[point] {
			if on[n] == point {
				continue // it hung on this one
			}
			on[point] = n
			if left[n]--; left[n] <= 1 && !gone[n] {
				order = append(order, n)
				gone[n] = true
			}
		}
	}
	return order, on
}
