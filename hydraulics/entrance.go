package hydraulics

import "math"

// roundedEntrances is the loss of an entrance flush in a wall against the radius of its rounding over the bore.
//
// Source: Crane TP-410 (2009), appendix A, as tabled in the fluids library 1.0.22.
var roundedEntrances = [...]struct{ radiusRatio, k float64 }{
	{0, 0.50}, {0.02, 0.28}, {0.04, 0.24}, {0.06, 0.15}, {0.10, 0.09}, {0.15, 0.04},
}

// RoundedEntrance returns the loss coefficient of an entrance flush in a wall, its edge rounded to a radius given
// over the bore: a straight line between the figures of Crane's table, and from 0.15 upwards its last, 0.04. No
// rounding is the sharp entrance, 0.5.
//
// Source: Crane TP-410 (2009), appendix A, as tabled in the fluids library 1.0.22.
// Range: 0 <= radiusRatio <= 1; outside it, or for NaN, the result is NaN and a [*fluids.RangeError].
// Accuracy: other authors give up to twice as much at small radii (Rennels & Hudson, Idelchik).
func RoundedEntrance(radiusRatio float64) (float64, error) {
	if err := fittingRange("rounded entrance", "radius over bore", "", radiusRatio, 0, 1); err != nil {
		return math.NaN(), err
	}
	for i := 1; i < len(roundedEntrances); i++ {
		a, b := roundedEntrances[i-1], roundedEntrances[i]
		if radiusRatio <= b.radiusRatio {
			return a.k + (b.k-a.k)*(radiusRatio-a.radiusRatio)/(b.radiusRatio-a.radiusRatio), nil
		}
	}
	return roundedEntrances[len(roundedEntrances)-1].k, nil
}

func entranceEntries() []CatalogueEntry {
	mouth := CatalogueEntry{Method: "tabled coefficient", Source: sourceCrane, Mark: "R"}
	sharp := mouth.named("sharp entrance", "entrance", "inlet", "sharp-edged entrance", "sharp inlet", "flush entrance").
		valid("flush in a wall, edge square", fixed(0.5))
	sharp.Scatter, sharp.ScatterSource = 0.15, "0.5 here and by Idelchik, 0.57 by Rennels & Hudson"
	rounded := mouth.named("rounded entrance", "rounded inlet").
		valid("radius of the rounding 0 to 1 bore, no less loss beyond 0.15", onBore(func(d Dimensions) (float64, error) {
			return RoundedEntrance(d.RadiusRatio)
		}))
	rounded.Needs, rounded.Method = []string{dimRadiusRatio}, "tabled against the radius of the rounding, straight lines between"
	rounded.Scatter, rounded.ScatterBelow, rounded.ScatterSource = 1, 0.25, "spread of four authors"
	bell := mouth.named("bellmouth", "bellmouth entrance", "bellmouth inlet").
		valid("rounded to a radius of 0.15 bore or more", fixed(0.04))
	bell.Scatter, bell.ScatterBelow, bell.ScatterSource = 1, 0.25, "spread of four authors at a radius of 0.2 bore, 0.03 to 0.11; a well rounded mouth lies low"
	projecting := mouth.named("projecting entrance", "projecting inlet", "inward projecting entrance").
		valid("pipe end standing out into the chest or tank", fixed(0.78))
	projecting.Scatter, projecting.ScatterSource = 0.30, "0.78 here, 0.85 to 1.0 for a thin wall by Idelchik and Rennels & Hudson"
	exit := CatalogueEntry{
		Method: "the whole velocity head is lost", Source: "J.-C. de Borda (1766); Crane TP-410 (2009), as in the fluids library 1.0.22", Mark: "R",
		Scatter: 0.06, ScatterSource: "kinetic energy of turbulent pipe flow, 1.02 to 1.06 times that of its mean velocity",
	}
	return []CatalogueEntry{sharp, rounded, bell, projecting,
		exit.named("exit", "pipe exit", "outlet", "overboard exit", "discharge exit").valid("sharp, projecting or rounded alike", fixed(1))}
}
