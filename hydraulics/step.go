package hydraulics

import "math"

// Contraction returns the loss coefficient, on the velocity in the smaller bore, where a pipe narrows to the ratio
// of bores named (smaller over larger) in a cone of the included angle a (rad); 180 degrees is a sudden step:
//
//	K = 0.8 sin(a/2) (1 - ratio2)           up to 45 degrees
//	K = 0.5 sqrt(sin(a/2)) (1 - ratio2)     above
//
// Source: Crane TP-410 (2009), chapter 2 and appendix A, as in the fluids library 1.0.22. The two forms differ by
// 1 % where they meet.
// Range: 0.0004 <= ratio <= 1, 0 <= angle <= pi; outside it, or for NaN, the result is NaN and a [*fluids.RangeError].
func Contraction(ratio, angle float64) (float64, error) {
	if err := stepRange("contraction", ratio, angle); err != nil {
		return math.NaN(), err
	}
	s, narrowing := math.Sin(angle/2), 1-ratio*ratio
	if angle <= math.Pi/4 {
		return 0.8 * s * narrowing, nil
	}
	return 0.5 * math.Sqrt(s) * narrowing, nil
}

// Expansion returns the loss coefficient, on the velocity in the smaller bore, where a pipe widens from the ratio
// of bores named (smaller over larger) in a cone of the included angle a (rad); 180 degrees is a sudden step:
//
//	K = 2.6 sin(a/2) (1 - ratio2)2          up to 45 degrees
//	K = (1 - ratio2)2                       above (J.-C. de Borda, 1766; L. Carnot)
//
// Source: Crane TP-410 (2009), chapter 2 and appendix A, as in the fluids library 1.0.22. The two forms differ by
// 0.5 % where they meet.
// Range: 0.0004 <= ratio <= 1, 0 <= angle <= pi; outside it, or for NaN, the result is NaN and a [*fluids.RangeError].
func Expansion(ratio, angle float64) (float64, error) {
	if err := stepRange("expansion", ratio, angle); err != nil {
		return math.NaN(), err
	}
	widening := 1 - ratio*ratio
	if angle <= math.Pi/4 {
		return 2.6 * math.Sin(angle/2) * widening * widening, nil
	}
	return widening * widening, nil
}

// leastBoreRatio is that of the narrowest pipe in the widest.
const leastBoreRatio = LeastBore / GreatestBore

func stepRange(method string, ratio, angle float64) error {
	if err := fittingRange(method, "ratio of bores", "", ratio, leastBoreRatio, 1); err != nil {
		return err
	}
	return fittingAngle(method, angle, 0, 180)
}

// reducerAngle stands for the angle of a butt-welded reducer where the row gives none, 30 degrees (common practice).
const reducerAngle = math.Pi / 6

// betweenBores is the law of a change of bore between the run and its second bore, whichever is the smaller.
func betweenBores(step func(ratio, angle float64) (float64, error), angle float64) func(Dimensions) (Coefficient, error) {
	return func(d Dimensions) (Coefficient, error) {
		if err := fittingBore("change of bore", "second bore", d.SecondBore); err != nil {
			return Coefficient{}, err
		}
		small := min(d.Bore, d.SecondBore)
		k, err := step(small/max(d.Bore, d.SecondBore), orElse(d.Angle, angle))
		return Coefficient{K: k, Bore: small}, err
	}
}

func stepEntries() []CatalogueEntry {
	step := CatalogueEntry{
		Needs: []string{dimSecondBore}, Source: sourceCrane, Mark: "R",
		Scatter: 0.50, ScatterSource: sourceDataBook + ": reducers",
	}
	cone := step
	cone.Uses = []string{dimAngle}
	narrows, widens := cone, cone
	narrows.Method = "0.8 sin(a/2) (1 - b^2) up to 45 degrees, 0.5 sqrt(sin(a/2)) (1 - b^2) above, b the ratio of bores, on the smaller"
	widens.Method = "2.6 sin(a/2) (1 - b^2)^2 up to 45 degrees, (1 - b^2)^2 above, b the ratio of bores, on the smaller"
	narrowsAtOnce, widensAtOnce := step, step
	narrowsAtOnce.Method = "0.5 (1 - b^2), b the ratio of bores, on the smaller"
	widensAtOnce.Method = "Borda-Carnot, (1 - b^2)^2, b the ratio of bores, on the smaller"
	const either = "second bore larger or smaller than the run's; "
	return []CatalogueEntry{
		narrows.named("reducer", "concentric reducer", "eccentric reducer", "conical contraction").
			valid(either+"water flows from the larger to the smaller; angle between the walls 0 to 180 degrees, 30 unless given (common practice)",
				betweenBores(Contraction, reducerAngle)),
		widens.named("expander", "increaser", "diffuser", "conical expansion", "enlargement").
			valid(either+"water flows from the smaller to the larger; angle between the walls 0 to 180 degrees, 30 unless given (common practice)",
				betweenBores(Expansion, reducerAngle)),
		narrowsAtOnce.named("sudden contraction", "step down").valid(either+"water flows from the larger to the smaller", betweenBores(Contraction, math.Pi)),
		widensAtOnce.named("sudden expansion", "sudden enlargement", "step up").valid(either+"water flows from the smaller to the larger", betweenBores(Expansion, math.Pi)),
	}
}
