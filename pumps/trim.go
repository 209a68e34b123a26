package pumps

import (
	"fmt"
	"math"
	"slices"

	"brinehead/fluids"
)

// TrimMethod is a law of what a cut of the impeller does. All three keep corresponding points on parabolas through the
// origin (Q' = r Q, H' = r2 H); they differ in r, as a function of the diameter's ratio.
type TrimMethod int

// The methods, from the one that promises most head after a cut.
const (
	// PlainAffinity takes r = D'/D. Real impellers lose more (Hydraulic Institute, Engineering Data Book: for limited changes).
	PlainAffinity TrimMethod = iota
	// ISO9906 takes r = sqrt((D'2 - D12)/(D2 - D12)), D1 being the mean diameter of the vanes' inlet edge.
	//
	// Source: ISO 9906:2012, the annex on trimming (the method and its limits read in a second source, the formula from
	// memory, to be verified).
	ISO9906
	// Stepanoff takes as r the calculated ratio that A. J. Stepanoff's chart sets against the true one: the true cut is about
	// 0.8 of that of plain affinity (Centrifugal and Axial Flow Pumps, 1957, from memory, to be verified).
	Stepanoff
)

// TrimMethods are all of them.
var trimMethods = []TrimMethod{PlainAffinity, ISO9906, Stepanoff}

// TrimMethods returns all methods, in order.
func TrimMethods() []TrimMethod { return slices.Clone(trimMethods) }

// String names the method.
func (m TrimMethod) String() string {
	return [...]string{"plain affinity", "ISO 9906", "Stepanoff's chart"}[m]
}

// Source names the publication with how well it is known.
func (m TrimMethod) Source() string {
	return [...]string{
		"affinity laws, for limited changes: Hydraulic Institute, Engineering Data Book",
		"ISO 9906:2012, annex on trimming: method and limits read in a second source, formula from memory, verify",
		"A. J. Stepanoff, Centrifugal and Axial Flow Pumps, 1957: chart from memory, verify",
	}[m]
}

// stepanoffChart sets the true ratio of diameters against the one plain affinity asks. From memory.
var stepanoffChart = [][2]float64{ // calculated, true
	{0.65, 0.71}, {0.75, 0.80}, {0.85, 0.88}, {0.90, 0.92}, {0.95, 0.96}, {1, 1}}

// StandInInletShare is taken for D1/D where the inlet edge's diameter is not known (common practice: 0.4 to 0.6 of radial
// wheels).
const StandInInletShare = 0.5

// Ratio returns r of a cut to the share lambda = D'/D (inletShare < lambda <= 1) with D1/D = inletShare (0 to below 1;
// used by [ISO9906] only). Outside a method's range the error is a *fluids.RangeError.
func (m TrimMethod) Ratio(lambda, inletShare float64) (float64, error) {
	least := 0.5
	switch m {
	case ISO9906:
		if !(0 <= inletShare && inletShare < 1) {
			return math.NaN(), &fluids.RangeError{Method: "trim after ISO 9906", Quantity: "inlet edge diameter over impeller diameter", Value: inletShare, Low: 0, High: 1}
		}
		least = math.Max(least, inletShare)
	case Stepanoff:
		least = stepanoffChart[0][1]
	}
	if !(least < lambda && lambda <= 1) {
		return math.NaN(), &fluids.RangeError{Method: "trim by " + m.String(), Quantity: "trimmed over full diameter", Value: lambda, Low: least, High: 1}
	}
	switch m {
	case ISO9906:
		d2 := inletShare * inletShare
		return math.Sqrt((lambda*lambda - d2) / (1 - d2)), nil
	case Stepanoff:
		return chartLine(stepanoffChart, lambda, 1, 0), nil
	}
	return lambda, nil
}

// Diameter is the inverse of Ratio: the share lambda that gives r, 0 < r <= 1.
func (m TrimMethod) Diameter(r, inletShare float64) (float64, error) {
	least := 0.5
	if m == Stepanoff {
		least = stepanoffChart[0][0]
	}
	if !(least < r && r <= 1) {
		return math.NaN(), &fluids.RangeError{Method: "trim by " + m.String(), Quantity: "flow after over flow before", Value: r, Low: least, High: 1}
	}
	lambda := r
	switch m {
	case ISO9906:
		if !(0 <= inletShare && inletShare < 1) {
			return math.NaN(), &fluids.RangeError{Method: "trim after ISO 9906", Quantity: "inlet edge diameter over impeller diameter", Value: inletShare, Low: 0, High: 1}
		}
		d2 := inletShare * inletShare
		lambda = math.Sqrt(d2 + r*r*(1-d2))
	case Stepanoff:
		lambda = chartLine(stepanoffChart, r, 0, 1)
	}
	return lambda, nil
}

// chartLine reads a chart of two columns by straight lines, from the one to the other.
func chartLine(chart [][2]float64, x float64, from, to int) float64 {
	k := slices.IndexFunc(chart, func(p [2]float64) bool { return x <= p[from] })
	k = max(k, 1)
	a, b := chart[k-1], chart[k]
	return a[to] + (b[to]-a[to])*(x-a[from])/(b[from]-a[from])
}

// Efficiency after a cut: unchanged up to 3 per cent at type numbers up to 1.0 (ISO 9906, limits read in a second source);
// beyond, 0.2 points are lost for each per cent cut (0.15 to 0.25 at specific speeds 20 to 40: J. F. Gülich, Centrifugal
// Pumps, from memory, to be verified).
const (
	efficiencyKeptCut        = 0.03
	efficiencyKeptTypeNumber = 1.0
	efficiencyLossPerCut     = 0.2
)

// EfficiencyLoss returns by how many points (as a fraction) the best efficiency falls with a cut to lambda of the
// diameter, and the rule. The type number may be NaN: then the loss is taken.
func EfficiencyLoss(lambda, typeNumber float64) (loss float64, rule string) {
	if 1-lambda <= efficiencyKeptCut+1e-9 && typeNumber <= efficiencyKeptTypeNumber {
		return 0, "unchanged up to a cut of 3 % at type numbers up to 1.0: ISO 9906, read in a second source"
	}
	return efficiencyLossPerCut * (1 - lambda), "0.2 points lost for each per cent cut (0.15 to 0.25): J. F. Gülich, Centrifugal Pumps, from memory, verify"
}

// Trimmed returns the curve of the impeller cut to a diameter (m) below the curve's own, by a method; inletDiameter (m,
// NaN for not known) is that of the vanes' inlet edge. Head, flow and power go along the parabolas of the method, the
// efficiency falls by [EfficiencyLoss] in proportion; the NPSH required stays the same at the same flow, since the inlet is
// not cut (it may rise: see [TrimCautions]). The error says what range is left; see also [TrimCautions] for what refuses.
func (c *Curve) Trimmed(method TrimMethod, diameter, inletDiameter float64) (*Curve, error) {
	if !(c.Impeller > 0) {
		return nil, fmt.Errorf("the sheet does not say the diameter of its impeller")
	}
	lambda := diameter / c.Impeller
	share := StandInInletShare
	if !math.IsNaN(inletDiameter) {
		share = inletDiameter / c.Impeller
	}
	r, err := method.Ratio(lambda, share)
	if err != nil {
		return nil, err
	}
	kept := 1.0 // of the efficiency
	if best := c.Numbers(); !math.IsNaN(best.BestEfficiency) {
		loss, _ := EfficiencyLoss(lambda, best.TypeNumber)
		kept = 1 - loss/best.BestEfficiency
	}
	t := &Curve{Impeller: diameter, Speed: c.Speed, Origin: fmt.Sprintf("trimmed from %g mm by %s", roundMillimetres(c.Impeller), method),
		head: c.head.scaled(r, r*r), efficiency: c.efficiency.scaled(r, kept), power: c.power.scaled(r, r*r*r/kept), npshRequired: c.npshRequired}
	t.settle()
	return t, nil
}

func roundMillimetres(m float64) float64 { return math.Round(m*1e6) / 1e3 }

// TrimCaution is what speaks against a cut.
type TrimCaution struct {
	Refuses bool // the cut is not to be worked out as if it were sound
	Text    string
	Source  string
}

// Limits of trimming, each with its source beside it.
const (
	trimISOCut        = 0.05 // ISO 9906 (limits read in a second source)
	trimISOTypeNumber = 1.5  // the same
	trimLeastShare    = 0.80 // Lobanoff and Ross, Centrifugal Pumps, 2nd ed., p. 19, read
	trimLeastMixed    = 0.90 // the same, for high specific speed
	trimDeepCut       = 0.10 // efficiency suffers above all beyond: read in a trade article
	mixedTypeNumber   = 1.0  // about nq 50: in one cut only below (a pump maker's note, read)
)

// TrimCautions judges a cut to lambda of the digitised diameter it starts from, which leaves a share of the pump's full (greatest)
// diameter, for a pump of a type number (NaN where not known).
func TrimCautions(lambda, left, typeNumber float64) (list []TrimCaution) {
	add := func(when, refuses bool, text, source string) {
		if when {
			list = append(list, TrimCaution{refuses, text, source})
		}
	}
	cut := fmt.Sprintf("a cut of %.3g %%", 100*(1-lambda))
	add(typeNumber > trimISOTypeNumber, true, fmt.Sprintf("type number %.2f is that of a mixed-flow impeller, over %g: the laws of radial ones do not hold", typeNumber, trimISOTypeNumber), "ISO 9906, limits read in a second source")
	add(left < trimLeastShare-1e-9, true, cut+" leaves less than 80 % of the full diameter", "Lobanoff and Ross, Centrifugal Pumps, 2nd ed., p. 19")
	add(typeNumber > mixedTypeNumber && left < trimLeastMixed && left >= trimLeastShare, true, fmt.Sprintf("%s leaves less than 90 %% of the full diameter at the high type number %.2f", cut, typeNumber), "Lobanoff and Ross, Centrifugal Pumps, 2nd ed., p. 19")
	add(1-lambda > trimISOCut+1e-9, false, cut+" is beyond the 5 % that ISO 9906 answers for", "ISO 9906, limits read in a second source")
	add(1-lambda > trimDeepCut+1e-9, false, cut+" costs efficiency above all beyond 10 %: shroud gap, outlet angle", "Pump Clinic 43 (2010)")
	add(typeNumber > mixedTypeNumber && typeNumber <= trimISOTypeNumber, false, fmt.Sprintf("type number %.2f is over %g: cut in steps, with a test between", typeNumber, mixedTypeNumber), "a pump maker's note on trimming: specific speeds up to 50 in one cut")
	add(math.IsNaN(typeNumber) && lambda < 1, false, "the type number is not known (speed and best-efficiency point wanted): whether the impeller may be cut by these laws is not judged", "ISO 9906, limits read in a second source")
	return list
}
