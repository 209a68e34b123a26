package pumps

import (
	"math"

	"brinehead/fluids"
)

// TypeNumber returns the type number K of a pump, without dimension:
//
//	K = 2 pi n Q^(1/2) / (g H)^(3/4)
//
// n is the speed in revolutions a second (here given in rpm), Q the flow of best efficiency in m3/s (of one inlet
// where the impeller has two), H its head in m (of one stage).
//
// Source: ISO 17769-1:2012 (from memory). NaN where a figure is not more than 0.
func TypeNumber(rpm, flow, head float64) float64 {
	if !(rpm > 0 && flow > 0 && head > 0) {
		return math.NaN()
	}
	return 2 * math.Pi * rpm / 60 * math.Sqrt(flow) / math.Pow(fluids.Gravity*head, 0.75)
}

// SpecificSpeed returns the specific speed nq = n Q^(1/2)/H^(3/4) in rpm, m3/s and m, at best efficiency. With the NPSH
// required in place of the head it is the suction specific speed. NaN where a figure is not more than 0.
//
// Source: the common definition (J. F. Gülich, Centrifugal Pumps, table of specific speeds, from memory).
func SpecificSpeed(rpm, flow, head float64) float64 {
	if !(rpm > 0 && flow > 0 && head > 0) {
		return math.NaN()
	}
	return rpm * math.Sqrt(flow) / math.Pow(head, 0.75)
}

// Exact units of the US customary specific speed: a US gallon a minute in m3/s, a foot in m.
const (
	usGallonPerMinute = 3.785411784e-3 / 60
	foot              = 0.3048
)

// SpecificSpeedUS turns a specific speed in rpm, m3/s and m into rpm, gpm (US) and ft: about 51.6 times as much.
func SpecificSpeedUS(metric float64) float64 {
	return metric * math.Pow(foot, 0.75) / math.Sqrt(usGallonPerMinute)
}

// Numbers are what one point, that of best efficiency, says of the kind of pump. What is not known is NaN.
type Numbers struct {
	BestFlow, BestHead, BestEfficiency float64 // m3/s, m, fraction
	TypeNumber                         float64
	SpecificSpeed                      float64 // rpm, m3/s, m
	SuctionSpecificSpeed               float64 // rpm, m3/s, m, of the whole flow
}

// Numbers works out the curve's type number and specific speeds.
func (c *Curve) Numbers() Numbers {
	nan := math.NaN()
	n := Numbers{nan, nan, nan, nan, nan, nan}
	flow, efficiency, known := c.BestEfficiency()
	if !known || !c.head.Within(flow) {
		return n
	}
	n.BestFlow, n.BestEfficiency = flow, efficiency
	n.BestHead, _ = c.head.At(flow)
	n.TypeNumber, n.SpecificSpeed = TypeNumber(c.Speed, flow, n.BestHead), SpecificSpeed(c.Speed, flow, n.BestHead)
	if c.npshRequired != nil && c.npshRequired.Within(flow) {
		required, _ := c.npshRequired.At(flow)
		n.SuctionSpecificSpeed = SpecificSpeed(c.Speed, flow, required)
	}
	return n
}
