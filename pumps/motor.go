package pumps

import (
	"fmt"
	"math"

	"brinehead/fluids"
)

// SynchronousSpeed returns the speed (rpm) of a motor's field, n = 120 f/p, from the frequency (Hz) and the number of poles.
func SynchronousSpeed(frequency float64, poles int) float64 { return 120 * frequency / float64(poles) }

// Slip returns the slip of a motor at full load as a share of its synchronous speed, where none is given: 2 per cent at 11 kW
// and 1 at 75, straight over the logarithm of the rating (W) and beyond (common practice, 4-pole motors, from memory).
func Slip(rating float64) float64 {
	at11, at75 := ruled("slip of a motor at full load", "11 kW")/100, ruled("slip of a motor at full load", "75 kW")/100
	slip := at11 + (at75-at11)*math.Log(rating/11e3)/math.Log(75.0/11)
	return math.Min(math.Max(slip, 0.003), 0.06)
}

// Motor is what is known of the motor of a pump; a figure that is not known is NaN.
type Motor struct {
	Rating      float64 // W, at the shaft
	Volts       float64 // between phases
	Efficiency  float64 // fraction
	PowerFactor float64
}

// CurrentBand is by what share an estimated current may be off, either way (common practice: 5 to 8 per cent).
const CurrentBand = 0.08

// leastLoad is the share of its rating below which a motor's current says little of its load.
const leastLoad = 0.5

// Current returns the current (A) a three-phase motor takes at a shaft power (W), I = P/(sqrt(3) U cos(phi) eta), good to
// [CurrentBand]. It is NaN with a reason where a figure is missing or the load is below half of the rating: efficiency and power
// factor then fall, and the current hardly moves.
func (m Motor) Current(shaftPower float64) (ampere float64, why string) {
	switch {
	case math.IsNaN(m.Volts + m.Efficiency + m.PowerFactor):
		return math.NaN(), "volts, efficiency and power factor of the motor are not all given"
	case math.IsNaN(shaftPower):
		return math.NaN(), "the shaft power is not known"
	case shaftPower < leastLoad*m.Rating:
		return math.NaN(), fmt.Sprintf("the motor has %.0f %% of its rating to do: below half load its current hardly follows the load", 100*shaftPower/m.Rating)
	}
	return shaftPower / (math.Sqrt(3) * m.Volts * m.PowerFactor * m.Efficiency), "" // three-phase power
}

// PowerPoint is the greatest shaft power over a span of a curve.
type PowerPoint struct {
	Flow, Power float64 // m3/s, W
	AtEnd       bool    // it lies at an end of what is digitised: beyond it may be greater
}

// GreatestPower returns where over its digitised range the pump takes most power in water of a density (kg/m3): at
// run-out with radial impellers, at low flow with high specific speed. Known is false where the sheet gives no power.
func (p Pump) GreatestPower(density float64) (most PowerPoint, known bool) {
	const steps = 200
	low, high := p.Range()
	first, last := math.NaN(), math.NaN() // flows with a known power
	most.Power = math.Inf(-1)
	for k := range steps + 1 {
		q := low + (high-low)*float64(k)/steps
		if w := p.At(q, density).ShaftPower; !math.IsNaN(w) {
			if math.IsNaN(first) {
				first = q
			}
			last = q
			if w > most.Power {
				most.Flow, most.Power = q, w
			}
		}
	}
	if math.IsNaN(first) {
		return PowerPoint{math.NaN(), math.NaN(), false}, false
	}
	most.AtEnd = most.Flow == last || most.Flow == first && first > low
	return most, true
}

// ShutOffHead returns the greatest head (m) of the pump against a shut valve: at no flow, or at the top of a hump, since the
// valve is shut through it. Known is false where the curve is not digitised down to no flow.
func (p Pump) ShutOffHead() (head float64, known bool) {
	low, high := p.Range()
	const restShare = 0.01 // of the greatest flow: a first point so near to no flow counts as that
	if low > restShare*high {
		return math.NaN(), false
	}
	const steps = 200
	head = math.Inf(-1)
	for k := range steps + 1 {
		h, _ := p.Head(low + (high-low)*float64(k)/steps)
		head = math.Max(head, h)
	}
	return head, true
}

// waterPower returns rho g Q H.
func waterPower(density, flow, head float64) float64 { return density * fluids.Gravity * flow * head }
