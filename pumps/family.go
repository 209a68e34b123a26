package pumps

import (
	"fmt"
	"math"
)

// between is the number of even pieces by which a curve between two digitised ones is traced: exact within some 1e-7.
const betweenPieces = 48

// Between returns the curve of an impeller diameter (m) between two digitised ones of one pump at one speed.
//
// Corresponding points lie on parabolas H = k Q2 through the origin, lines of one specific speed. Along each parabola Q2,
// and with it the head, goes in a straight line over D2 from the smaller impeller to the larger: so it does by plain
// affinity (Q2 as D2) and by ISO 9906 (Q2 as D2 - D12, whatever the inlet edge). The power P does so as P^(2/3), efficiency
// and NPSH required over the diameter itself. Each figure is known where both curves know it at the corresponding points.
//
// Source: the rule of corresponding points, A. J. Stepanoff, Centrifugal and Axial Flow Pumps (from memory).
//
// It is an error where the curves do not stand one over the other, are of different speeds, or the diameter is not
// between theirs.
func Between(small, large *Curve, diameter float64) (*Curve, error) {
	if !(0 < small.Impeller && small.Impeller < large.Impeller) {
		return nil, fmt.Errorf("two curves of diameters %g and %g m, want a smaller and a larger", small.Impeller, large.Impeller)
	}
	if !(small.Impeller <= diameter && diameter <= large.Impeller) {
		return nil, fmt.Errorf("%g mm is not between %g and %g mm", roundMillimetres(diameter), roundMillimetres(small.Impeller), roundMillimetres(large.Impeller))
	}
	if small.Speed != large.Speed {
		return nil, fmt.Errorf("the diameters %g and %g mm are digitised at different speeds, %g and %g rpm", roundMillimetres(small.Impeller), roundMillimetres(large.Impeller), small.Speed, large.Speed)
	}
	b := blend{small, large, (sq(diameter) - sq(small.Impeller)) / (sq(large.Impeller) - sq(small.Impeller)), (diameter - small.Impeller) / (large.Impeller - small.Impeller)}
	low, high, err := b.span(small.head, large.head)
	if err != nil {
		return nil, err
	}
	c := &Curve{Impeller: diameter, Speed: small.Speed, Origin: fmt.Sprintf("between %g and %g mm, along affinity parabolas", roundMillimetres(small.Impeller), roundMillimetres(large.Impeller))}
	c.head = b.trace(low, high, func(q, q1, q2 float64) float64 {
		h1, _ := small.head.At(q1)
		return h1 * sq(q/q1)
	})
	for _, f := range []struct {
		into         **Fit
		small, large *Fit
		mean         func(a, b float64) float64
	}{
		{&c.efficiency, small.efficiency, large.efficiency, b.straight},
		{&c.power, small.power, large.power, b.power},
		{&c.npshRequired, small.npshRequired, large.npshRequired, b.straight},
	} {
		if f.small == nil || f.large == nil {
			continue
		}
		from, to, err := b.span(f.small, f.large)
		if err != nil {
			continue // nowhere do both know it
		}
		*f.into = b.trace(math.Max(from, low), math.Min(to, high), func(q, q1, q2 float64) float64 {
			y1, _ := f.small.At(q1)
			y2, _ := f.large.At(q2)
			return f.mean(y1, y2)
		})
	}
	c.settle()
	return c, nil
}

func sq(x float64) float64 { return x * x }

// blend is a place between two curves, as a share of the way in the square of the diameter, and in the diameter itself.
type blend struct {
	small, large   *Curve
	square, linear float64
}

func (b blend) straight(a, c float64) float64 { return a + b.linear*(c-a) }

func (b blend) power(a, c float64) float64 {
	p, q := math.Cbrt(a*a), math.Cbrt(c*c)
	return math.Pow(p+b.square*(q-p), 1.5)
}

// flow returns the flow of the curve between on the parabola that meets the smaller curve at q1, and the flow of the larger
// one there.
func (b blend) flow(q1 float64) (q, q2 float64) {
	q2 = b.corresponding(q1)
	return math.Sqrt(sq(q1) + b.square*(sq(q2)-sq(q1))), q2
}

// corresponding returns the flow at which the larger curve meets the parabola through the smaller one's point at q1 > 0:
// the root of H2(q) q1^2 - H1(q1) q^2, which falls (a hump is lower than any parabola near no flow).
func (b blend) corresponding(q1 float64) float64 {
	h1, _ := b.small.head.At(q1)
	_, high := b.large.head.Range()
	return fallingRoot(0, 2*high, func(q float64) float64 {
		h, _ := b.large.head.At(q)
		return h*q1*q1 - h1*q*q
	})
}

// fallingRoot finds where a falling function passes nought, from 0 or more at low to 0 or less at high: regula falsi with the
// weight of an end that stands still halved (the Illinois rule), to rounding.
func fallingRoot(low, high float64, f func(x float64) float64) float64 {
	atLow, atHigh := f(low), f(high)
	last := 0
	for range 100 {
		if !(high-low > 1e-14*high) || atLow == 0 || atHigh == 0 {
			break
		}
		x := low + (high-low)*atLow/(atLow-atHigh)
		if !(low < x && x < high) {
			x = (low + high) / 2
		}
		if y := f(x); y >= 0 {
			low, atLow = x, y
			if last == 1 {
				atHigh /= 2
			}
			last = 1
		} else {
			high, atHigh = x, y
			if last == -1 {
				atLow /= 2
			}
			last = -1
		}
	}
	if math.Abs(atHigh) < math.Abs(atLow) {
		return high
	}
	return low
}

// span returns the flows over which the curve between is known for a quantity that two fits know, each over its own flows.
func (b blend) span(small, large *Fit) (low, high float64, err error) {
	q1Low, q1High := b.reach(small.low, large.low, math.Max), b.reach(small.high, large.high, math.Min)
	if !(q1Low < q1High) {
		return 0, 0, fmt.Errorf("the curves of %g and %g mm have no corresponding points", roundMillimetres(b.small.Impeller), roundMillimetres(b.large.Impeller))
	}
	if low = 0; q1Low > 0 {
		low, _ = b.flow(q1Low)
	}
	high, _ = b.flow(q1High)
	return low, high, nil
}

// reach returns the flow of the smaller curve at an end of what is known of both: of its own flow and that which
// corresponds to the larger one's, the greater at the low end, the lesser at the high one.
func (b blend) reach(small, large float64, end func(a, b float64) float64) float64 {
	if large <= 0 {
		return end(small, 0)
	}
	if large < 1e-9 {
		return end(small, large)
	}
	swapped := blend{small: b.large, large: b.small}
	return end(small, swapped.corresponding(large))
}

// trace makes a fit of a quantity of the curve between, from its value at corresponding points.
func (b blend) trace(low, high float64, value func(q, q1, q2 float64) float64) *Fit {
	const least = 1e-7 // of the greatest flow: near no flow the parabolas stand upright, and all quantities run level
	at := func(q float64) float64 {
		q = math.Max(q, least*high)
		q1 := fallingRoot(0, 2*math.Max(q, b.small.head.high), func(q1 float64) float64 {
			if q1 <= 0 {
				return q
			}
			f, _ := b.flow(q1)
			return q - f
		})
		return value(q, q1, b.corresponding(q1))
	}
	return traced(low, high, betweenPieces, func(q float64) (y, slope float64) {
		step := 1e-4 * (high - low) // differences of second order, one-sided at the ends
		switch y = at(q); {
		case q-step < low:
			slope = (-3*y + 4*at(q+step) - at(q+2*step)) / (2 * step)
		case q+step > high:
			slope = (3*y - 4*at(q-step) + at(q-2*step)) / (2 * step)
		default:
			slope = (at(q+step) - at(q-step)) / (2 * step)
		}
		return y, slope
	})
}
