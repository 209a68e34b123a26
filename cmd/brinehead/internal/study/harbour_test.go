package study

import (
	"math"
	"testing"

	"brinehead/hydraulics"
)

// A tolerance multiplies a fitting's loss by its factor at every flow, in whichever way the loss is given.
func TestScaleLoss(t *testing.T) {
	pipe, nu := hydraulics.Pipe{Length: 1, Bore: 0.2, Roughness: 1e-4}, 1e-6
	for name, f := range map[string]hydraulics.Fitting{
		"coefficient": {Coefficient: hydraulics.Coefficient{K: 2, Viscous: 800}},
		"kv":          {Kv: 350},
		"rated":       {RatedFlow: 0.1, RatedDrop: 5e4, RatedDensity: 998, Exponent: 1.8, Blockage: 0.4},
	} {
		for _, factor := range []float64{0.2, 0.85, 1, 1.15, 3} {
			scaled := f
			scaleLoss(&scaled, factor)
			for _, flow := range []float64{0.01, 0.1, -0.2} {
				was, _ := f.Loss(flow, pipe, nu)
				got, _ := scaled.Loss(flow, pipe, nu)
				if !(math.Abs(got-factor*was) <= 1e-12*math.Abs(was)) {
					t.Errorf("%s at %g m3/s: %g times the loss, want %g", name, flow, got/was, factor)
				}
			}
		}
	}
}
