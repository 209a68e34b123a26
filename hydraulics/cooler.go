package hydraulics

// Exponents of a cooler's loss over flow where a row gives a rated drop and none of its own.
const (
	// PlateCoolerExponent: the friction of corrugated channels falls with the power 0.15 to 0.22 of the Reynolds
	// number (H. Kumar, 1984; A. Muley and R. M. Manglik, 1999), that of the ports not at all: 1.75 to 1.95 all in.
	PlateCoolerExponent = 1.8

	// TubeCoolerExponent: turbulent tubes 1.75 to 1.8, with water boxes 1.8 to 1.9 (from memory).
	TubeCoolerExponent = 1.85
)

func coolerEntries() []CatalogueEntry {
	rated := CatalogueEntry{
		Needs:   []string{dimRatedFlow, dimRatedDrop},
		Scatter: 0.15, ScatterSource: "one fitted factor holds a given unit's loss within 10 to 20 % (Int. J. Chemical Engineering, 2019, 3693657)",
	}
	plates := rated.named("plate cooler", "cooler", "plate heat exchanger", "central cooler")
	plates.Method, plates.Mark, plates.Exponent = "rated drop, with the power 1.8 of flow", "C", PlateCoolerExponent
	plates.Source = "slopes of the friction laws of Kumar (1984) and of Muley and Manglik (1999), as in the fluids library 1.0.22"
	tubes := rated.named("tube cooler", "shell and tube cooler", "tubular cooler")
	tubes.Method, tubes.Mark, tubes.Exponent = "rated drop, with the power 1.85 of flow", "M", TubeCoolerExponent
	tubes.Source = "turbulent friction in smooth tubes with water boxes, from memory"
	const valid = "channels at Reynolds numbers beyond 300; clean as it was rated"
	return []CatalogueEntry{plates.valid(valid, nil), tubes.valid(valid, nil)}
}
