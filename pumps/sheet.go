package pumps

import (
	"fmt"
	"math"
	"slices"

	"brinehead/fluids"
)

// FitNote says how one quantity of a sheet was fitted, in SI.
type FitNote struct {
	Quantity    string  // head, efficiency, power, NPSH required
	Points      int     // that give it
	Low, High   float64 // the flows it is known over, m3/s
	Method      string
	Residual    float64 // root mean square distance of the curve from its points
	LeaveOneOut float64 // the same from curves that leave the points out in turn; NaN for too few points
	Shaped      bool    // the curve has the shape that physics demands
}

// Fits says how each quantity of the sheet was fitted; those it does not give are left out.
func (c *Curve) Fits() (notes []FitNote) {
	for _, q := range sheetQuantities {
		if fit := *q.fit(c); fit != nil {
			x, _, _ := q.points(c.Points)
			low, high := fit.Range()
			notes = append(notes, FitNote{q.name, len(x), low, high, fit.Method(), fit.Residual(), fit.LeaveOneOut(), fit.Shaped()})
		}
	}
	return notes
}

// SheetStray is a digitised point that does not belong to the curve of its quantity. Its Index is that of the sheet.
type SheetStray struct {
	Quantity string
	Stray
}

// Strays finds the points of the sheet that do not belong; see [Strays].
func (c *Curve) Strays() (found []SheetStray) {
	for _, q := range sheetQuantities {
		x, y, which := q.points(c.Points)
		for _, s := range Strays(x, y, q.shape) {
			s.Index = which[s.Index]
			found = append(found, SheetStray{q.name, s})
		}
	}
	return found
}

// Balance is whether the head, flow, efficiency and power of a sheet agree through
//
//	rho g Q H = eta P
//
// at the points that give all of them.
type Balance struct {
	Points int     // that give head, efficiency and power, at a flow
	Ratio  float64 // eta P over rho g Q H, the middle one of the points; 1 where the sheet agrees with itself; NaN without points
	Spread float64 // greatest departure of a point's ratio from the middle one, as a share of it
	Slip   string  // what the mismatch most likely comes from; empty where there is none
}

// What a sheet's balance may miss before it is called a mismatch, and the best efficiency no pump of the trade passes
// (common practice; the reading of three quantities adds up to a per cent or two).
const (
	BalanceTolerance   = 0.03
	GreatestEfficiency = 0.92
)

// slips are the usual ones, by the ratio that each gives.
var slips = []struct {
	ratio float64
	text  string
}{
	{1 / 0.745699872, "the power is in hp, not in kW"},
	{1 / 0.73549875, "the power is in metric hp (PS), not in kW"},
	{1 / 0.2271247, "the flow is in gpm (US), given as m3/h turns it too small, or the other way round"},
	{0.2271247, "the flow is in gpm (US), not in m3/h"},
	{1 / 3.6, "the flow is in m3/h, not in l/s"},
	{3.6, "the flow is in l/s, not in m3/h"},
	{0.3048, "the head is in ft, not in m"},
	{1 / 0.3048, "the head is in m, not in ft"},
	{10.19716, "the head is in bar, not in m"},
	{1.025, "the power is that in sea water, of 1025 kg/m3, not in fresh water"},
	{1 / 1.025, "the head is that of a pressure in sea water turned with fresh water, or the power already divided by the density"},
	{1.728, "head and flow are for 50 Hz, the power for 60 Hz"},
	{1 / 1.728, "head and flow are for 60 Hz, the power for 50 Hz"},
	{100, "the efficiency is in per cent, not a fraction"},
}

// Balance works out whether the sheet agrees with itself.
func (c *Curve) Balance() Balance {
	var ratios []float64
	for _, p := range c.Points {
		water := sheetDensity * fluids.Gravity * p.Flow * p.Head
		if r := p.Efficiency * p.Power / water; water > 0 && r > 0 {
			ratios = append(ratios, r)
		}
	}
	b := Balance{Points: len(ratios), Ratio: math.NaN(), Spread: math.NaN()}
	if b.Points == 0 {
		return b
	}
	slices.Sort(ratios)
	b.Ratio = ratios[len(ratios)/2]
	b.Spread = math.Max(ratios[len(ratios)-1]/b.Ratio-1, 1-ratios[0]/b.Ratio)
	switch {
	case b.Spread > 2*BalanceTolerance && (b.Points > 2 || math.Abs(b.Ratio-1) > BalanceTolerance):
		b.Slip = "the columns are not of one impeller at one speed: the ratio changes over the flow"
	case math.Abs(b.Ratio-1) <= BalanceTolerance && !(math.Abs(b.Ratio-1.025) < 0.002 && b.Spread < 0.005):
		// it agrees; only a sheet of many digits tells sea water
	default:
		b.Slip = nearestSlip(b.Ratio)
	}
	return b
}

// nearestSlip names the slip whose ratio is within the tolerance, or what other speed or diameter would give it.
func nearestSlip(ratio float64) string {
	best, text := BalanceTolerance/2, ""
	for _, s := range slips {
		if off := math.Abs(ratio/s.ratio - 1); off <= best {
			best, text = off, s.text
		}
	}
	if text != "" {
		return text
	}
	n := math.Cbrt(ratio)
	return fmt.Sprintf("the power is that of another speed or diameter (%+.0f %%), or in another unit", 100*(n-1))
}
