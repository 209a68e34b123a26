package pumps

import (
	"math"
)

// Pump is a curve as it stands aboard: at its speed, with its wear.
type Pump struct {
	Curve   *Curve
	Speed   float64 // rpm; 0 for that of the curve
	Wear    float64 // share of the head lost at unchanged power, 0 to below 1
	Leakage float64 // growth of the leakage within the pump since it was new, as a share of the best-efficiency flow at its head, 0 to below 1
}

// Duty is what a pump does at one flow. A figure the sheet does not know at that flow is NaN.
type Duty struct {
	Flow, Head       float64 // m3/s, m; the head is NaN beyond the digitised range
	Efficiency       float64 // fraction, of the worn pump
	ShaftPower       float64 // W
	NPSHRequired     float64 // m
	NPSHRequiredHigh float64 // m, the higher one of what speed may do to it; see [Pump.NPSHRequiredHigh]
	BestShare        float64 // flow over the flow of best efficiency
	Extrapolated     bool    // the flow lies beyond the digitised heads
}

// ratio returns the speed over that of the curve.
func (p Pump) ratio() float64 {
	if p.Speed == 0 || p.Curve.Speed == 0 {
		return 1
	}
	return p.Speed / p.Curve.Speed
}

// leak returns c of the leakage c sqrt(H) at the curve's own speed, in m3/s and m: none where the best efficiency is not known.
func (p Pump) leak() float64 {
	if p.Leakage == 0 {
		return 0
	}
	flow, _, known := p.Curve.BestEfficiency()
	if !known {
		return 0
	}
	head, _ := p.Curve.head.At(flow)
	return p.Leakage * flow / math.Sqrt(head)
}

// sheetHead returns the curve's head and its slope at a flow of the sheet. Beyond the digitised range the head continues along
// the tangent, and not rising: a solver must be able to pass there.
func (p Pump) sheetHead(x float64) (head, slope float64) {
	low, high := p.Curve.head.Range()
	head, slope = p.Curve.head.At(x)
	switch {
	case x < low && slope > 0: // a hump's rising side does not go on to lower flows for ever
		head, _ = p.Curve.head.At(low)
		slope = 0
	case x > high:
		atHigh, endSlope := p.Curve.head.At(high)
		atLow, _ := p.Curve.head.At(low)
		if least := (atHigh - atLow) / (high - low); endSlope > least { // falls at least as fast as over the range
			head, slope = atHigh+least*(x-high), least
		}
	}
	return head, slope
}

// through returns the flow through the impeller, at the speed of the sheet, of a pump that delivers a flow there: what
// leaks back through the wearing rings, c sqrt(H), goes round within. It is the root of x - c sqrt(H(x)) = delivered.
func (p Pump) through(delivered float64) float64 {
	c := p.leak()
	if c == 0 {
		return delivered
	}
	short := func(x float64) float64 {
		h, _ := p.sheetHead(x)
		return delivered - x + c*math.Sqrt(math.Max(h, 0))
	}
	_, most, _ := p.Curve.head.Greatest()
	return fallingRoot(delivered, delivered+c*math.Sqrt(most)*(1+1e-9)+1e-12, short)
}

// Head returns the head (m) at a flow (m3/s, 0 or more) and its slope. By the affinity laws flow goes with the speed
// n, head with n2 at corresponding points (ISO 9906:2012, clause on test speed, from memory). Wear takes its share of the head;
// leakage moves the curve to lower flows, by an amount that grows with the root of the head. Whether a result lies beyond the
// digitised range is for [Pump.At] to say.
func (p Pump) Head(flow float64) (head, slope float64) {
	n := p.ratio()
	x := p.through(flow / n)
	head, slope = p.sheetHead(x)
	if c := p.leak(); c > 0 && head > 0 {
		slope /= 1 - c*slope/(2*math.Sqrt(head)) // d(delivered)/dx
	}
	share := (1 - p.Wear) * n
	return head * share * n, slope * share
}

// Droops says whether the digitised head rises from its first point before it falls: such a curve may meet a system twice.
func (p Pump) Droops() bool { return p.Curve.droops }

// delivered returns the flow that the pump delivers, at its speed, when a flow of the sheet passes its impeller; 0 at the least.
func (p Pump) delivered(x float64) float64 {
	h, _ := p.sheetHead(x)
	return math.Max(x-p.leak()*math.Sqrt(math.Max(h, 0)), 0) * p.ratio()
}

// Range returns the least and the greatest flow (m3/s) of the digitised heads at the pump's speed.
func (p Pump) Range() (low, high float64) {
	low, high = p.Curve.head.Range()
	return p.delivered(low), p.delivered(high)
}

// NPSHRequiredRange is Range for the NPSH required; known is false where the sheet gives none.
func (p Pump) NPSHRequiredRange() (low, high float64, known bool) {
	if p.Curve.npshRequired == nil {
		return math.NaN(), math.NaN(), false
	}
	low, high = p.Curve.npshRequired.Range()
	return p.delivered(low), p.delivered(high), true
}

// NPSHRequired returns the NPSH required (m) at a flow (m3/s), or NaN where the sheet does not know it. It goes with
// the square of the speed at corresponding points (affinity; away from the tested speed an approximation). What leaks passes
// the inlet too.
func (p Pump) NPSHRequired(flow float64) float64 { return p.npshRequired(flow, 2) }

// leastNPSHExponent is the least power of the speed with which the NPSH required was found to go.
const leastNPSHExponent = 1.3

// NPSHRequiredHigh returns the higher of the NPSH required with the square of the speed and with its power 1.3: a pump that runs
// slower than tested may ask for more than affinity says, by up to what the two differ.
//
// Source: ISO 9906:2012, which lets the exponent lie between 1.3 and 2 (from memory, to be verified).
func (p Pump) NPSHRequiredHigh(flow float64) float64 {
	return math.Max(p.npshRequired(flow, 2), p.npshRequired(flow, leastNPSHExponent))
}

func (p Pump) npshRequired(flow, exponent float64) float64 {
	n := p.ratio()
	fit := p.Curve.npshRequired
	x := p.through(flow / n)
	if fit == nil || !fit.Within(x) {
		return math.NaN()
	}
	y, _ := fit.At(x)
	return y * math.Pow(n, exponent)
}

// BestEfficiencyFlow returns the flow (m3/s) of the best efficiency at the pump's speed, as the sheet of the pump without wear
// has it, or NaN where it does not know it.
func (p Pump) BestEfficiencyFlow() float64 {
	flow, _, _ := p.Curve.BestEfficiency()
	return flow * p.ratio()
}

// At returns what the pump does at a flow (m3/s) in water of a density (kg/m3). The shaft power is that of the sheet
// with the cube of the speed and in proportion to the density; wear takes head and efficiency, not power, and leakage takes
// power for what goes round within.
func (p Pump) At(flow, density float64) Duty {
	n := p.ratio()
	x := p.through(flow / n)
	d := Duty{Flow: flow, Head: math.NaN(), Efficiency: math.NaN(), ShaftPower: math.NaN(),
		NPSHRequired: p.NPSHRequired(flow), NPSHRequiredHigh: p.NPSHRequiredHigh(flow), BestShare: flow / p.BestEfficiencyFlow(),
		Extrapolated: !p.Curve.head.Within(x)}
	if d.Extrapolated {
		return d
	}
	d.Head, _ = p.Head(flow)
	d.ShaftPower = p.shaftPower(x) * n * n * n * density / sheetDensity
	if efficiency, _, known := p.Curve.efficiencyAt(x); known && x > 0 {
		d.Efficiency = efficiency * (1 - p.Wear) * flow / (x * n)
	} else if known {
		d.Efficiency = efficiency
	}
	return d
}

// shaftPower returns the sheet's power at a flow of the sheet, NaN where it is not known. A power that the sheet
// gives comes before one from its efficiency, which has none at no flow.
func (p Pump) shaftPower(x float64) float64 {
	c := p.Curve
	if c.power != nil {
		if !c.power.Within(x) {
			return math.NaN()
		}
		y, _ := c.power.At(x)
		return y
	}
	// Near no flow an efficiency within a few times its own residual says nothing of the power.
	const leastResiduals = 5
	efficiency, _, known := c.efficiencyAt(x)
	if !known || !(x > 0 && efficiency > leastResiduals*c.efficiency.Residual()) {
		return math.NaN()
	}
	head, _ := c.head.At(x)
	return waterPower(sheetDensity, x, head) / efficiency
}
