package hydraulics

import (
	"fmt"
	"math"
)

// Mitre returns the loss coefficient of two pipes welded together at an angle (rad), one cut without vanes:
//
//	K = 0.42 sin(a/2) + 2.56 sin(a/2)^3
//
// Source: D. C. Rennels and H. M. Hudson, Pipe Flow (Wiley, 2012), as printed in the documentation of the fluids
// library 1.0.22.
// Range: 0 <= angle <= 150 degrees; outside it, or for NaN, the result is NaN and a [*fluids.RangeError].
// Accuracy: at 90 degrees four published methods give 0.84 to 1.34, this one 1.20.
func Mitre(angle float64) (float64, error) {
	if err := fittingAngle("mitre", angle, 0, 150); err != nil {
		return math.NaN(), err
	}
	s := math.Sin(angle / 2)
	return 0.42*s + 2.56*s*s*s, nil
}

// MitreBend returns the loss of a bend of radius 1.5 bores made of straight pieces, in a pipe of a bore (m), by the
// number of its cuts (welds) and the angle it turns through in all, 90 or 45 degrees:
//
//	K = K1/Re + Kinf (1 + 0.0254/bore)
//
// Source: W. B. Hooper, Chemical Engineering, 24 August 1981, 96-100; constants as tabled in the fluids library
// 1.0.22 (Hooper).
// Range: 2 to 5 cuts at 90 degrees, 2 cuts at 45 degrees, bore LeastBore to GreatestBore; one cut is a [Mitre].
// Outside it, or for NaN, the coefficient is NaN and the error tells what is known.
func MitreBend(cuts, angle, bore float64) (Coefficient, error) {
	const method = "mitre bend"
	none := Coefficient{K: math.NaN(), Viscous: math.NaN(), Bore: bore}
	if err := fittingBore(method, "bore", bore); err != nil {
		return none, err
	}
	for _, m := range []struct{ angle, cuts, viscous, rough float64 }{
		{90, 2, 800, 0.35},
		{90, 3, 800, 0.30},
		{90, 4, 800, 0.27},
		{90, 5, 800, 0.25},
		{45, 2, 500, 0.15},
	} {
		if math.Abs(inDegrees(angle)-m.angle) < 1e-6 && cuts == m.cuts {
			return Coefficient{K: m.rough * (1 + 0.0254/bore), Viscous: m.viscous, Bore: bore}, nil
		}
	}
	return none, fmt.Errorf("%s: %g cuts over %.4g degrees: known are 2 to 5 cuts over 90 degrees and 2 over 45; one cut is a single mitre",
		method, cuts, inDegrees(angle))
}

func mitreEntries() []CatalogueEntry {
	single := CatalogueEntry{
		Name: "single mitre", Aliases: []string{"mitre", "miter", "single miter", "mitre 90"},
		Uses:   []string{dimAngle},
		Method: "0.42 sin(a/2) + 2.56 sin(a/2)^3 of one cut (Rennels & Hudson)", Source: sourceRennels, Mark: "R",
		Scatter: 0.30, ScatterSource: "spread of four published methods at 90 degrees, 0.84 to 1.34",
	}
	segments := CatalogueEntry{
		Name: "mitre bend", Aliases: []string{"miter bend", "segmented bend", "lobster-back bend"},
		Needs: []string{dimCuts}, Uses: []string{dimAngle},
		Method: "two-K method by number of cuts (Hooper)",
		Source: "W. B. Hooper, Chemical Engineering, 24 August 1981, as tabled in the fluids library 1.0.22", Mark: "R",
		Scatter: 0.40, ScatterSource: "judged here, a little above " + sourceDataBook + " for flanged elbows",
	}
	return []CatalogueEntry{
		single.valid("angle 0 to 150 degrees, 90 unless given", onBore(func(d Dimensions) (float64, error) {
			return Mitre(orElse(d.Angle, math.Pi/2))
		})),
		segments.valid("radius 1.5 bores; 2 to 5 cuts over 90 degrees or 2 over 45; 90 degrees unless given",
			func(d Dimensions) (Coefficient, error) {
				return MitreBend(d.Cuts, orElse(d.Angle, math.Pi/2), d.Bore)
			}),
	}
}
