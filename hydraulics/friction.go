package hydraulics

import (
	"brinehead/fluids"
	"math"
)

// Regime is the state of flow in a pipe.
type Regime int

// The regimes, told apart by the Reynolds number on the bore.
const (
	Laminar      Regime = iota // below LaminarLimit
	Transitional               // between the limits: no law holds, the value is a bridge
	Turbulent                  // from TurbulentLimit upward
)

// String names the regime as reports print it.
func (r Regime) String() string {
	return [...]string{"laminar", "transitional", "turbulent"}[r]
}

// Bounds of the friction laws.
const (
	LaminarLimit         = 2000.0 // Reynolds number up to which the flow counts as laminar
	TurbulentLimit       = 4000.0 // Reynolds number from which Colebrook's law is taken
	GreatestReynolds     = 1e8    // Colebrook's law is checked up to here
	GreatestRelRoughness = 0.05   // roughness over bore
)

// RegimeOf returns the regime at the Reynolds number re.
func RegimeOf(re float64) Regime {
	switch {
	case re < LaminarLimit:
		return Laminar
	case re < TurbulentLimit:
		return Transitional
	}
	return Turbulent
}

// FrictionFactor returns the Darcy friction factor of a round pipe and its derivative with respect to the
// Reynolds number re; rel is the roughness over the bore.
//
// Below LaminarLimit it is 64/re (Hagen-Poiseuille); from TurbulentLimit it is [Colebrook]. Between them no law
// holds: f re2, which is the head loss but for constants of the pipe, is bridged by the cubic that has the value
// and the slope of either law at its end. The ratio of the end slopes to the secant keeps that cubic monotone
// (F. N. Fritsch and R. E. Carlson, SIAM J. Numerical Analysis 17 (1980) 238-246), so that the loss of a pipe
// always grows with its flow.
//
// Range: 0 < re <= 1e8, 0 <= rel <= 0.05; outside it, or for NaN, the results are NaN and a [*fluids.RangeError].
func FrictionFactor(re, rel float64) (f, slope float64, err error) {
	const method = "Darcy friction factor"
	if !(0 < re && re <= GreatestReynolds) { // so written that NaN fails
		return math.NaN(), math.NaN(), &fluids.RangeError{Method: method, Quantity: "Reynolds number", Value: re, Low: 0, High: GreatestReynolds}
	}
	if !(0 <= rel && rel <= GreatestRelRoughness) {
		return math.NaN(), math.NaN(), &fluids.RangeError{Method: method, Quantity: "roughness over bore", Value: rel, Low: 0, High: GreatestRelRoughness}
	}
	loss, lossSlope := reducedLoss(re, rel)
	f = loss / (re * re)
	return f, (lossSlope - 2*f*re) / (re * re), nil
}

// Colebrook returns the Darcy friction factor of turbulent flow in a round pipe, the root f of
//
//	1/sqrt(f) = -2 log10( rel/3.7 + 2.51/(re sqrt(f)) )
//
// where re is the Reynolds number on the bore and rel the roughness over the bore.
//
// Source: C. F. Colebrook, J. Inst. Civil Engineers 11 (1939) 133-156.
// Range: 4000 <= re <= 1e8, 0 <= rel <= 0.05; outside it, or for NaN, the result is NaN and a [*fluids.RangeError].
// Accuracy: the root is found to better than 1e-14, relative; of the law itself, see the package comment.
func Colebrook(re, rel float64) (f float64, err error) {
	const method = "Colebrook friction factor"
	if !(TurbulentLimit <= re && re <= GreatestReynolds) {
		return math.NaN(), &fluids.RangeError{Method: method, Quantity: "Reynolds number", Value: re, Low: TurbulentLimit, High: GreatestReynolds}
	}
	if !(0 <= rel && rel <= GreatestRelRoughness) {
		return math.NaN(), &fluids.RangeError{Method: method, Quantity: "roughness over bore", Value: rel, Low: 0, High: GreatestRelRoughness}
	}
	f, _ = colebrook(re, rel)
	return f, nil
}

// colebrook is Colebrook without the range check, for iterates that pass through odd places. The second result,
// p = c b/(a + b x) in the terms below, gives the derivative: d ln(f)/d ln(re) = -2p/(1+p).
//
// With x = 1/sqrt(f), a = rel/3.7 and b = 2.51/re the law is F(x) = x + c ln(a + b x) = 0, c = 2/ln 10, which is
// nearly straight: F' = 1 + p and F” = -p2/c, p small. One step of successive substitution leaves an error below
// 0.05; Halley's step, with the logarithm at its start from that of the step before by the series of ln(1+d), one
// below 1e-6; Newton's, with the logarithm in full, rounding.
func colebrook(re, rel float64) (f, p float64) {
	const c = 2 / math.Ln10
	a, b := rel*(1/3.7), 2.51/re
	x0 := 1.8*roughLog10(re) - 1.5 // a smooth pipe's, within 0.1
	y0 := a + b*x0
	log0 := math.Log(y0)
	x := -c * log0
	d := b * (x - x0) / y0 // at most 0.05
	log := log0 + d*(1-d*(1./2-d*(1./3-d*(1./4-d*(1./5)))))
	p = c * b / (a + b*x)
	residual := x + c*log
	x -= 2 * residual * (1 + p) / (2*(1+p)*(1+p) + residual*p*p/c) // Halley
	y := a + b*x
	p = c * b / y
	x -= (x + c*math.Log(y)) / (1 + p) // Newton
	return 1 / (x * x), p
}

// roughLog10 returns log10(x) of a positive normal number within 0.03, from its exponent and a straight line
// through its mantissa; a first guess needs no more.
func roughLog10(x float64) float64 {
	bits := math.Float64bits(x)
	exponent := float64(int(bits>>52) - 1023)
	mantissa := math.Float64frombits(bits&(1<<52-1) | 1023<<52) // 1 to 2
	return (exponent + mantissa - 1 + 0.043) * (math.Ln2 / math.Ln10)
}

// reducedLoss returns f re2, the head loss of a pipe but for its constants, and its derivative with respect to
// re. Unlike f itself it is smooth down to no flow at all. re >= 0.
func reducedLoss(re, rel float64) (loss, slope float64) {
	switch RegimeOf(re) {
	case Laminar:
		return 64 * re, 64
	case Transitional:
		f, p := colebrook(TurbulentLimit, rel)
		return hermite(re, LaminarLimit, TurbulentLimit,
			64*LaminarLimit, f*TurbulentLimit*TurbulentLimit,
			64, 2*f*TurbulentLimit/(1+p))
	}
	f, p := colebrook(re, rel)
	return f * re * re, 2 * f * re / (1 + p)
}

// hermite returns the cubic that has the values ya, yb and the slopes sa, sb at a and b, and its slope, at x.
func hermite(x, a, b, ya, yb, sa, sb float64) (y, slope float64) {
	h := b - a
	t := (x - a) / h
	secant := (yb - ya) / h
	c2 := 3*secant - 2*sa - sb
	c3 := sa + sb - 2*secant
	return ya + h*t*(sa+t*(c2+t*c3)), sa + t*(2*c2+3*t*c3)
}
