package hydraulics

import "math"

// Bellows returns the loss coefficient of a rubber or metal bellows without a liner, of a length between its faces
// and a bore (m):
//
//	K = 3 f_T length/bore
//
// three times the friction of new steel pipe of its length.
//
// Source: Standards of the Expansion Joint Manufacturers Association, for unlined bellows, from memory.
// Range: 0 <= length <= 5 bores, bore as [NewSteelFriction]; outside it, or for NaN, the result is NaN and a
// [*fluids.RangeError].
func Bellows(length, bore float64) (float64, error) {
	f, err := NewSteelFriction(bore)
	if err != nil {
		return math.NaN(), err
	}
	if err := fittingRange("bellows", "length", "mm", length*1e3, 0, 5*bore*1e3); err != nil {
		return math.NaN(), err
	}
	return 3 * f * length / bore, nil
}

func bellowsEntries() []CatalogueEntry {
	e := CatalogueEntry{
		Name: "rubber bellows", Aliases: []string{"bellows", "expansion bellows", "flexible bellows", "expansion joint", "flexible connection"},
		Uses:   []string{dimLength},
		Method: "K = 3 f_T length/bore, three times the friction of new steel pipe",
		Source: "Standards of the Expansion Joint Manufacturers Association, from memory", Mark: "M",
		Scatter: 1, ScatterSource: "judged here",
	}
	return []CatalogueEntry{e.valid("no liner, drawn straight; length 0 to 5 bores, 1 bore unless given (common practice)",
		onBore(func(d Dimensions) (float64, error) { return Bellows(orElse(d.Length, d.Bore), d.Bore) }))}
}
