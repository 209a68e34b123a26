package fluids

import "math"

// AbsoluteSalinity returns the reference-composition salinity in g/kg of sea water whose practical salinity
// (PSS-78, "PSU") is given.
//
// Source: F. J. Millero, R. Feistel, D. G. Wright and T. J. McDougall, Deep-Sea Research I 55 (2008) 50-72:
// S_R = (35.16504/35) S_P.
// Range: 2 to 42, where the practical scale is defined; outside it, or for NaN, the result is NaN and a [*RangeError].
// Accuracy: exact by definition for salt of the ocean's proportions; river water and enclosed seas carry other salts.
func AbsoluteSalinity(practical float64) (gPerKg float64, err error) {
	const low, high = 2.0, 42.0
	if !(low <= practical && practical <= high) {
		return math.NaN(), &RangeError{"PSS-78", "practical salinity", "", practical, low, high}
	}
	return StandardSalinity / 35 * practical, nil
}
