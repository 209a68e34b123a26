package pumps

import (
	"brinehead/fluids"
	"math"
)

// Pump is a digitised curve as it stands aboard: at its speed, with its wear.
type Pump struct {
	Curve *Curve
	Speed float64 // rpm; 0 for that of the curve
	Wear  float64 // share of the head lost at unchanged power, 0 to below 1
}

// Duty is what a pump does at one flow. A figure the sheet does not know at that flow is NaN.
type Duty struct {
	Flow, Head   float64 // m3/s, m; the head is NaN beyond the digitised range
	Efficiency   float64 // fraction, of the worn pump
	ShaftPower   float64 // W
	NPSHRequired float64 // m
	BestShare    float64 // flow over the flow of best efficiency
	Extrapolated bool    // the flow lies beyond the digitised heads
}

// ratio returns the speed over that of the curve.
func (p Pump) ratio() float64 {
	if p.Speed == 0 || p.Curve.Speed == 0 {
		return 1
	}
	return p.Speed / p.Curve.Speed
}

// Head returns the head (m) at a flow (m3/s, 0 or more) and its slope. By the affinity laws flow goes with the speed
// n, head with n2 at corresponding points (ISO 9906:2012, clause on test speed, from memory). Beyond the digitised
// range the head continues along the tangent, and not rising: a solver must be able to pass there. Whether a result
// lies there is for [Pump.At] to say.
func (p Pump) Head(flow float64) (head, slope float64) {
	n := p.ratio()
	x := flow / n
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
	share := (1 - p.Wear) * n
	return head * share * n, slope * share
}

// Droops says whether the digitised head rises from its first point before it falls: such a curve may meet a system twice.
func (p Pump) Droops() bool { return p.Curve.droops }

// Range returns the least and the greatest flow (m3/s) of the digitised heads at the pump's speed.
func (p Pump) Range() (low, high float64) {
	low, high = p.Curve.head.Range()
	return low * p.ratio(), high * p.ratio()
}

// NPSHRequiredRange is Range for the NPSH required; known is false where the sheet gives none.
func (p Pump) NPSHRequiredRange() (low, high float64, known bool) {
	if p.Curve.npshRequired == nil {
		return math.NaN(), math.NaN(), false
	}
	low, high = p.Curve.npshRequired.Range()
	return low * p.ratio(), high * p.ratio(), true
}

// NPSHRequired returns the NPSH required (m) at a flow (m3/s), or NaN where the sheet does not know it. It goes with
// the square of the speed at corresponding points (affinity; away from the tested speed an approximation).
func (p Pump) NPSHRequired(flow float64) float64 {
	n := p.ratio()
	fit := p.Curve.npshRequired
	if fit == nil || !fit.Within(flow/n) {
		return math.NaN()
	}
	y, _ := fit.At(flow / n)
	return y * n * n
}

// BestEfficiencyFlow returns the flow (m3/s) of the best efficiency at the pump's speed, or NaN where the sheet does
// not know it.
func (p Pump) BestEfficiencyFlow() float64 {
	flow, _, _ := p.Curve.BestEfficiency()
	return flow * p.ratio()
}

// At returns what the pump does at a flow (m3/s) in water of a density (kg/m3). The shaft power is that of the sheet
// with the cube of the speed and in proportion to the density; wear takes head and efficiency, not power.
func (p Pump) At(flow, density float64) Duty {
	n := p.ratio()
	x := flow / n
	d := Duty{Flow: flow, Head: math.NaN(), Efficiency: math.NaN(), ShaftPower: math.NaN(),
		NPSHRequired: p.NPSHRequired(flow), BestShare: flow / p.BestEfficiencyFlow(),
		Extrapolated: !p.Curve.head.Within(x)}
	if d.Extrapolated {
		return d
	}
	d.Head, _ = p.Head(flow)
	d.ShaftPower = p.shaftPower(x) * n * n * n * density / sheetDensity
	if efficiency, _, known := p.Curve.efficiencyAt(x); known {
		d.Efficiency = efficiency * (1 - p.Wear)
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
	efficiency, _, known := c.efficiencyAt(x)
	if !known || !(efficiency > 0) {
		return math.NaN()
	}
	head, _ := c.head.At(x)
	return sheetDensity * fluids.Gravity * x * head / efficiency
}
