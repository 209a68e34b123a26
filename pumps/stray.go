package pumps

import (
	"math"
	"slices"
	"sort"
)

// Stray is a point that does not belong to the curve that the others make.
type Stray struct {
	Index       int // among the points as given
	X, Y        float64
	Others      float64 // what a curve through the other points has there
	Uncertainty float64 // how far from that a point may lie and still belong
}

// How far a point may stray: so many times the scatter of the others about curves that leave them out in turn, and at
// least so much of the range of y, which no reader of a printed curve does better (1 part in 100 of the axis by ruler,
// common practice). Where the others leave a gap wider than usual it may be more, by the square of the gap's width: so the error of a
// smooth curve drawn over it grows. A point written to one decimal may also stray by that.
const (
	strayScatter    = 4
	strayReading    = 0.02
	strayResolution = 1.5
)

// Strays finds single points that do not belong: one that lies far from the curve through all others. They are looked for one
// by one among those with the greatest leave-one-out errors, a quarter of the points at most; the two end points cannot be
// judged, since the others say nothing of them. Fewer than six points say too little.
func Strays(x, y []float64, shape Shape) (found []Stray) {
	xs, ys, place := inOrder(x, y)
	most := len(x) / 4
	for len(xs) >= 6 && len(found) < most {
		worst, far := -1, 1.0
		var stray Stray
		for _, i := range suspects(chooseFit(xs, ys, shape).leftOut) {
			otherX, otherY := slices.Delete(slices.Clone(xs), i, i+1), slices.Delete(slices.Clone(ys), i, i+1)
			others := chooseFit(otherX, otherY, shape)
			expected, _ := others.At(xs[i])
			gap := math.Max((xs[i+1]-xs[i-1])/medianGap(xs), 1)
			allowed := math.Max(strayScatter*others.LeaveOneOut(), strayReading*(slices.Max(otherY)-slices.Min(otherY)))
			allowed = math.Max(allowed, strayResolution*resolution(ys)) * gap * gap
			if share := math.Abs(ys[i]-expected) / allowed; share > far {
				worst, far = i, share
				stray = Stray{place[i], xs[i], ys[i], expected, allowed}
			}
		}
		if worst < 0 {
			return found
		}
		found = append(found, stray)
		xs, ys, place = slices.Delete(xs, worst, worst+1), slices.Delete(ys, worst, worst+1), slices.Delete(place, worst, worst+1)
	}
	return found
}

// suspects returns the places of the three points with the greatest leave-one-out errors.
func suspects(leftOut []float64) []int {
	var places []int
	for i := range leftOut {
		places = append(places, i+1) // the first point is none of the inner ones
	}
	sort.Slice(places, func(a, b int) bool { return leftOut[places[a]-1] > leftOut[places[b]-1] })
	return places[:min(len(places), 3)]
}

// medianGap returns the middle one of the gaps that points leave when one between two others is taken out.
func medianGap(x []float64) float64 {
	var gaps []float64
	for i := 1; i < len(x)-1; i++ {
		gaps = append(gaps, x[i+1]-x[i-1])
	}
	slices.Sort(gaps)
	return gaps[len(gaps)/2]
}

// resolution returns the last decimal that all values are written to, 10^-4 at the finest and nought below it.
func resolution(values []float64) float64 {
	for step := 1.0; step > 0.5e-4; step /= 10 {
		if !slices.ContainsFunc(values, func(v float64) bool { return math.Abs(v/step-math.Round(v/step)) > 1e-6 }) {
			return step
		}
	}
	return 0
}
