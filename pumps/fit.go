package pumps

import (
	"fmt"
	"math"
	"slices"
	"sort"

	"gonum.org/v1/gonum/mat"
)

// Fit is a smooth curve through digitised points, with its own range: what lies outside is not known.
//
// The curve is a smoothing spline of cubic pieces with a penalty on its third differences (P. H. C. Eilers and
// B. D. Marx, Statistical Science 11 (1996) 89-121). Without smoothing it goes through every point; smoothed to the
// utmost it is the parabola of least squares. Between these it is chosen by leave-one-out: of all smoothings whose
// squared error at points left out is within one standard error of the best one's, the smoothest (L. Breiman and
// others, Classification and Regression Trees, 1984). The end points stay in, since leaving them out would ask for
// extrapolation. Curves that do not have the [Shape] asked for are passed over.
type Fit struct {
	low, high float64
	pieces    []piece
	width     float64
	residual  float64
	leftOut   []float64 // squared leave-one-out errors of the inner points, in order of x; nil for too few points
	shaped    bool
}

// Shape is what physics demands of a curve: that it turns once at most, and which way.
type Shape int

// The shapes. The zero value lets a curve turn once, either way.
const (
	AnyShape Shape = iota // a power: rising, or with its greatest or least between
	Hump                  // a head or an efficiency: nowhere a dip
	Valley                // an NPSH required: nowhere a hump
)

// piece is c0 + c1 t + c2 t2 + c3 t3, t = 0 to 1 along it.
type piece [4]float64

// NewFit fits a curve of a shape to the points (x, y), in any order. Two points make a straight line, three a parabola.
// Fewer than two, two of one x, or a number that is none is an error.
func NewFit(x, y []float64, shape Shape) (*Fit, error) {
	if len(x) != len(y) || len(x) < 2 {
		return nil, fmt.Errorf("%d points, want at least 2", len(x))
	}
	for i := range x {
		if math.IsNaN(x[i]+y[i]) || math.IsInf(x[i]+y[i], 0) {
			return nil, fmt.Errorf("point %d: %g, %g is no number", i+1, x[i], y[i])
		}
	}
	xs, ys, _ := inOrder(x, y)
	for i := range xs {
		if i > 0 && xs[i] == xs[i-1] {
			return nil, fmt.Errorf("two points at %g", xs[i])
		}
	}
	return chooseFit(xs, ys, shape), nil
}

// inOrder returns the points in order of x, and the place of each among those given.
func inOrder(x, y []float64) (xs, ys []float64, place []int) {
	place = make([]int, len(x))
	for i := range place {
		place[i] = i
	}
	sort.Slice(place, func(a, b int) bool { return x[place[a]] < x[place[b]] })
	xs, ys = make([]float64, len(x)), make([]float64, len(x))
	for i, k := range place {
		xs[i], ys[i] = x[k], y[k]
	}
	return xs, ys, place
}

// Range returns the least and the greatest x of the points.
func (f *Fit) Range() (low, high float64) { return f.low, f.high }

// Residual returns the root mean square distance of the curve from its points.
func (f *Fit) Residual() float64 { return f.residual }

// LeaveOneOut returns the root mean square distance of the inner points from the curves that leave them out in turn; NaN
// where there are too few points to leave one out. It is what the reading of a single point is worth.
func (f *Fit) LeaveOneOut() float64 {
	if f.leftOut == nil {
		return math.NaN()
	}
	mean, _ := meanAndError(f.leftOut)
	return math.Sqrt(mean)
}

// Shaped says whether the curve has the shape it was asked for; no smoothing of points that do not have it may.
func (f *Fit) Shaped() bool { return f.shaped }

// Method says in a word what curve was chosen: the smoothing spline, the parabola or the line of least squares.
func (f *Fit) Method() string {
	switch p := f.pieces[0]; {
	case len(f.pieces) > 1:
		return "spline"
	case p[2] == 0:
		return "line"
	}
	return "parabola"
}

// Within says whether x lies in the range of the points; the range counts as closed.
func (f *Fit) Within(x float64) bool { return f.low <= x && x <= f.high }

// At returns the curve and its slope at x. Outside the range it continues along the tangent at the end: a number to
// go on with, not to be reported; see Within.
func (f *Fit) At(x float64) (y, slope float64) {
	inside := math.Min(math.Max(x, f.low), f.high)
	place := (inside - f.low) / f.width
	k := min(int(place), len(f.pieces)-1)
	p, t := &f.pieces[k], place-float64(k)
	y = p[0] + t*(p[1]+t*(p[2]+t*p[3]))
	slope = (p[1] + t*(2*p[2]+t*3*p[3])) / f.width
	return y + slope*(x-inside), slope
}

// Greatest returns where in the range the curve is greatest, and how great; inner is false where that is an end.
func (f *Fit) Greatest() (x, y float64, inner bool) { return greatest(f.low, f.high, f.At) }

// greatest searches a curve between low and high: the best of a fine grid, then its slope's root by bisection.
func greatest(low, high float64, at func(x float64) (y, slope float64)) (x, y float64, inner bool) {
	const steps = 200
	best, bestY := 0, math.Inf(-1)
	place := func(i int) float64 { return low + (high-low)*float64(i)/steps }
	for i := range steps + 1 {
		if y, _ := at(place(i)); y > bestY {
			best, bestY = i, y
		}
	}
	a, b := place(max(best-1, 0)), place(min(best+1, steps))
	if _, slope := at(a); slope <= 0 {
		b = a
	} else if _, slope := at(b); slope >= 0 {
		a = b
	}
	for range 60 {
		middle := (a + b) / 2
		if _, slope := at(middle); slope > 0 {
			a = middle
		} else {
			b = middle
		}
	}
	x = (a + b) / 2
	y, _ = at(x)
	return x, y, low < x && x < high
}

// chooseFit tries the smoothings on points in order of x. Where none has the shape it is the parabola.
func chooseFit(x, y []float64, shape Shape) *Fit {
	rough := polynomial(x, y, min(len(x)-1, 2))
	rough.shaped = rough.has(shape)
	if len(x) <= 3 {
		return rough
	}
	rough.leftOut = polynomialMiss(x, y)
	var candidates []*Fit
	if rough.shaped {
		candidates = append(candidates, rough)
	}
	s := newSpline(x, y)
	for exponent := 5.0; exponent >= -8; exponent -= 0.5 { // from smooth to free
		fit := s.smooth(math.Pow(10, exponent))
		if fit != nil && fit.has(shape) {
			fit.shaped = true
			candidates = append(candidates, fit)
		}
	}
	least, margin := math.Inf(1), 0.0
	for _, c := range candidates {
		if m, err := meanAndError(c.leftOut); m < least {
			least, margin = m, err
		}
	}
	reading := 1e-6 * (slices.Max(y) - slices.Min(y)) // an error no reader of a curve can see
	for _, c := range candidates {
		if m, _ := meanAndError(c.leftOut); m <= math.Max(least+margin, reading*reading) {
			return c
		}
	}
	return rough
}

// meanAndError returns the mean and its standard error.
func meanAndError(v []float64) (mean, standardError float64) {
	n := float64(len(v))
	for _, a := range v {
		mean += a / n
	}
	for _, a := range v {
		standardError += (a - mean) * (a - mean)
	}
	if n < 2 {
		return mean, 0
	}
	return mean, math.Sqrt(standardError / (n * (n - 1)))
}

// has says whether the curve has a shape: how often its slope changes its sign, and from which to which.
func (f *Fit) has(shape Shape) bool {
	const steps = 200
	turns, last := 0, 0.0
	for i := range steps + 1 {
		_, slope := f.At(f.low + (f.high-f.low)*float64(i)/steps)
		if slope*last < 0 {
			turns++
			if shape == Hump && slope > 0 || shape == Valley && slope < 0 {
				return false
			}
		}
		if slope != 0 {
			last = slope
		}
	}
	return turns <= 1
}

// scaled returns the curve with x and y multiplied: y times yFactor at x times xFactor.
func (f *Fit) scaled(xFactor, yFactor float64) *Fit {
	if f == nil {
		return nil
	}
	g := *f
	g.low, g.high, g.width = f.low*xFactor, f.high*xFactor, f.width*xFactor
	g.residual, g.leftOut = f.residual*yFactor, nil
	g.pieces = slices.Clone(f.pieces)
	for k := range g.pieces {
		for j := range g.pieces[k] {
			g.pieces[k][j] *= yFactor
		}
	}
	return &g
}

// traced returns a curve of even cubic pieces that has the values and slopes of a function at their ends (Hermite's).
func traced(low, high float64, pieces int, at func(x float64) (y, slope float64)) *Fit {
	f := &Fit{low: low, high: high, width: (high - low) / float64(pieces), shaped: true}
	y, slope := at(low)
	for k := range pieces {
		next := high
		if k < pieces-1 {
			next = low + f.width*float64(k+1)
		}
		nextY, nextSlope := at(next)
		m0, m1, rise := slope*f.width, nextSlope*f.width, nextY-y
		f.pieces = append(f.pieces, piece{y, m0, 3*rise - 2*m0 - m1, m0 + m1 - 2*rise})
		y, slope = nextY, nextSlope
	}
	return f
}

// measure sets the residual of a fit on its points.
func (f *Fit) measure(x, y []float64) *Fit {
	sum := 0.0
	for i := range x {
		v, _ := f.At(x[i])
		sum += (v - y[i]) * (v - y[i])
	}
	f.residual = math.Sqrt(sum / float64(len(x)))
	return f
}

// polynomial returns the polynomial of least squares of degree 1 or 2 as a fit of one piece.
func polynomial(x, y []float64, degree int) *Fit {
	low, high := x[0], x[len(x)-1]
	a := mat.NewDense(len(x), degree+1, nil)
	for i := range x {
		t, power := (x[i]-low)/(high-low), 1.0
		for j := range degree + 1 {
			a.Set(i, j, power)
			power *= t
		}
	}
	var qr mat.QR
	qr.Factorize(a)
	var c mat.VecDense
	if err := qr.SolveVecTo(&c, false, mat.NewVecDense(len(y), y)); err != nil {
		panic("pumps: distinct points give a singular polynomial") // x is ordered and distinct
	}
	var p piece
	for j := range degree + 1 {
		p[j] = c.AtVec(j)
	}
	return (&Fit{low: low, high: high, width: high - low, pieces: []piece{p}}).measure(x, y)
}

// polynomialMiss returns the squared leave-one-out errors of the parabola at the inner points.
func polynomialMiss(x, y []float64) []float64 {
	var miss []float64
	for i := 1; i < len(x)-1; i++ {
		without := polynomial(slices.Delete(slices.Clone(x), i, i+1), slices.Delete(slices.Clone(y), i, i+1), 2)
		v, _ := without.At(x[i])
		miss = append(miss, (v-y[i])*(v-y[i]))
	}
	return miss
}

// spline holds the parts of the smoothing problem that do not depend on the smoothing.
type spline struct {
	x, y    []float64
	pieces  int
	basis   *mat.Dense // values of the B-splines at the points
	gram    *mat.SymDense
	penalty *mat.SymDense
}

func newSpline(x, y []float64) *spline {
	s := &spline{x: x, y: y, pieces: min(max(2*len(x), 6), 24)}
	unknowns := s.pieces + 3
	s.basis = mat.NewDense(len(x), unknowns, nil)
	low, high := x[0], x[len(x)-1]
	for i := range x {
		place := (x[i] - low) / (high - low) * float64(s.pieces)
		k := min(int(place), s.pieces-1)
		for j, b := range bSpline(place - float64(k)) {
			s.basis.Set(i, k+j, b)
		}
	}
	s.gram = mat.NewSymDense(unknowns, nil)
	s.gram.SymOuterK(1, s.basis.T())
	differences := mat.NewDense(unknowns-3, unknowns, nil)
	for i := range unknowns - 3 {
		for j, d := range []float64{-1, 3, -3, 1} {
			differences.Set(i, i+j, d)
		}
	}
	s.penalty = mat.NewSymDense(unknowns, nil)
	s.penalty.SymOuterK(1, differences.T())
	return s
}

// smooth solves for one weight of the penalty; nil where rounding defeats it.
func (s *spline) smooth(weight float64) *Fit {
	unknowns, points := s.gram.SymmetricDim(), len(s.x)
	a := mat.NewSymDense(unknowns, nil)
	for i := range unknowns {
		for j := i; j < unknowns; j++ {
			a.SetSym(i, j, s.gram.At(i, j)+weight*s.penalty.At(i, j))
		}
	}
	var cholesky mat.Cholesky
	if !cholesky.Factorize(a) {
		return nil
	}
	var influence mat.Dense // columns: the coefficients that one point's y brings
	if err := cholesky.SolveTo(&influence, s.basis.T()); err != nil {
		return nil
	}
	var c mat.VecDense
	c.MulVec(&influence, mat.NewVecDense(points, s.y))
	low, high := s.x[0], s.x[points-1]
	fit := &Fit{low: low, high: high, width: (high - low) / float64(s.pieces)}
	for k := range s.pieces {
		fit.pieces = append(fit.pieces, bSplinePiece(c.AtVec(k), c.AtVec(k+1), c.AtVec(k+2), c.AtVec(k+3)))
	}
	fit.measure(s.x, s.y)
	for i := 1; i < points-1; i++ {
		v, _ := fit.At(s.x[i])
		own := 0.0 // the share of a point in its own fitted value
		for j := range unknowns {
			own += s.basis.At(i, j) * influence.At(j, i)
		}
		if !(1-own > 1e-9) { // the fit follows the point whatever it says: its leave-one-out error is lost in rounding
			return nil
		}
		e := (v - s.y[i]) / (1 - own)
		fit.leftOut = append(fit.leftOut, e*e)
	}
	return fit
}

// bSpline returns the four cubic B-splines on evenly spaced knots that are not zero at t, 0 to 1 along a piece.
func bSpline(t float64) [4]float64 {
	u := 1 - t
	return [4]float64{u * u * u / 6, (3*t*t*t - 6*t*t + 4) / 6, (3*u*u*u - 6*u*u + 4) / 6, t * t * t / 6}
}

// bSplinePiece turns four coefficients of B-splines into the cubic of the piece they share.
func bSplinePiece(a, b, c, d float64) piece {
	return piece{(a + 4*b + c) / 6, (c - a) / 2, (a - 2*b + c) / 2, (d - a + 3*(b-c)) / 6}
}
