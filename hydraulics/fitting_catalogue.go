package hydraulics

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"brinehead/fluids"
	"brinehead/spelling"
)

// Dimensions is what a row says of a fitting beside its name. NaN stands for "not given"; [BareDimensions] starts
// with all but the run's own figures so. The zero value has no bore and is refused.
type Dimensions struct {
	Bore        float64 // m, clear bore of the run the fitting sits in
	Roughness   float64 // m, of the run's wall
	Angle       float64 // rad: turned through by a bend or mitre, included between the walls of a cone
	RadiusRatio float64 // radius over bore: of a bend's centre line, of the rounding of an entrance
	SecondBore  float64 // m: the other bore of a reducer or expander, the seat of a reduced-bore valve
	Opening     float64 // 0 shut to 1 wide open, of the stroke or of the quarter turn
	OpenArea    float64 // open share of a perforated sheet, plate or grating, 0 to 1
	Hole        float64 // m, diameter of one hole
	Pitch       float64 // m, between the centres of holes in staggered rows at 60 degrees
	FaceArea    float64 // m2, whole area of a plate or grating, holes and bars together
	AreaRatio   float64 // open area of a strainer's basket over the area of the run
	Mesh        float64 // wires to the inch of a basket's lining
	Cuts        float64 // welds of a mitre bend
	Length      float64 // m, face to face
}

// BareDimensions returns the dimensions of a row that gives nothing beside the fitting's name, in a run of the
// clear bore and wall roughness (m) named.
func BareDimensions(bore, roughness float64) Dimensions {
	none := math.NaN()
	return Dimensions{Bore: bore, Roughness: roughness, Angle: none, RadiusRatio: none, SecondBore: none,
		Opening: none, OpenArea: none, Hole: none, Pitch: none, FaceArea: none, AreaRatio: none, Mesh: none,
		Cuts: none, Length: none}
}

// The names of the dimensions, as Needs and Uses of an entry and the errors spell them.
const (
	dimAngle       = "angle"
	dimRadiusRatio = "radius ratio"
	dimSecondBore  = "second bore"
	dimOpening     = "opening"
	dimOpenArea    = "open area"
	dimHole        = "hole"
	dimPitch       = "pitch"
	dimFaceArea    = "face area"
	dimAreaRatio   = "area ratio"
	dimMesh        = "mesh"
	dimCuts        = "cuts"
	dimLength      = "length"
	dimRatedFlow   = "rated flow" // of the row, not of Dimensions: see [Fitting]
	dimRatedDrop   = "rated drop"
)

// given returns the names of the dimensions the row has, bore and roughness apart.
func (d Dimensions) given() []string {
	var names []string
	for _, f := range []struct {
		name  string
		value float64
	}{
		{dimAngle, d.Angle}, {dimRadiusRatio, d.RadiusRatio}, {dimSecondBore, d.SecondBore}, {dimOpening, d.Opening},
		{dimOpenArea, d.OpenArea}, {dimHole, d.Hole}, {dimPitch, d.Pitch}, {dimFaceArea, d.FaceArea},
		{dimAreaRatio, d.AreaRatio}, {dimMesh, d.Mesh}, {dimCuts, d.Cuts}, {dimLength, d.Length},
	} {
		if !math.IsNaN(f.value) {
			names = append(names, f.name)
		}
	}
	return names
}

// orElse returns the value, or what stands for it where the row gives none.
func orElse(value, absent float64) float64 {
	if math.IsNaN(value) {
		return absent
	}
	return value
}

// CatalogueEntry is a fitting the tables may name: where its loss comes from, and how far that can be trusted.
type CatalogueEntry struct {
	Name    string
	Aliases []string
	Needs   []string // dimensions a row must give, beside the run's bore
	Uses    []string // dimensions a row may give; Valid says what stands for one left out

	Method string // the law, in one line
	Source string // author, work, edition, table or diagram
	Mark   Mark   // R read in the source, 2R in two that agree, M from memory, C computed here

	// Scatter is how far a single fitting may lie from the figure, as a fraction of it; ScatterBelow the same
	// downwards where it differs, 0 where it does not. ScatterSource says who says so.
	Scatter       float64
	ScatterBelow  float64
	ScatterSource string

	Valid     string  // range, and the figures that stand for dimensions left out
	NonReturn bool    // water passes only from the start to the end of its run
	Lift      float64 // of a non-return fitting, the constant of [LiftVelocity]; 0 for others
	Exponent  float64 // of a rated drop over flow, where the row gives none; 0 stands for 2

	law func(Dimensions) (Coefficient, error) // nil where Needs name what no Dimensions have
}

// ErrShut is returned for a valve of opening 0: it has no loss coefficient, its run is shut.
var ErrShut = errors.New("shut: opening 0 closes the run")

// DimensionError tells that a row lacks dimensions its fitting needs, or gives some it has no use for.
type DimensionError struct {
	Dimensions []string
	Unused     bool     // given without use; otherwise needed and not given
	Known      []string // what the fitting needs or uses; only with Unused
}

// Error says which dimensions are missing or idle.
func (e *DimensionError) Error() string {
	found := strings.Join(e.Dimensions, ", ")
	switch {
	case !e.Unused:
		return "needs " + found
	case len(e.Known) == 0:
		return fmt.Sprintf("has no use for %s, only for the bore of its run", found)
	}
	return fmt.Sprintf("has no use for %s, only for the bore of its run, %s", found, strings.Join(e.Known, ", "))
}

// Coefficient returns the loss coefficient of the fitting with the dimensions of a row. Errors: [*DimensionError]
// for a dimension missing or without use, [*fluids.RangeError] for one outside the method's range, [ErrShut] for a valve
// of opening 0.
func (e CatalogueEntry) Coefficient(d Dimensions) (Coefficient, error) {
	c, err := e.coefficient(d)
	var outside *fluids.RangeError
	switch {
	case errors.As(err, &outside): // the user knows the fitting, not the method behind it
		return Coefficient{}, &fluids.RangeError{Method: e.Name, Quantity: outside.Quantity, Unit: outside.Unit, Value: outside.Value, Low: outside.Low, High: outside.High}
	case err != nil:
		return Coefficient{}, fmt.Errorf("%s: %w", e.Name, err)
	}
	return c, nil
}

func (e CatalogueEntry) coefficient(d Dimensions) (Coefficient, error) {
	if err := fittingBore("run", "bore", d.Bore); err != nil {
		return Coefficient{}, err
	}
	given, known := d.given(), slices.Concat(e.Needs, e.Uses)
	if missing := without(e.Needs, given); len(missing) > 0 {
		return Coefficient{}, &DimensionError{Dimensions: missing}
	}
	if idle := without(given, known); len(idle) > 0 {
		return Coefficient{}, &DimensionError{idle, true, known}
	}
	if !math.IsNaN(d.Opening) {
		if err := fittingRange("valve", "opening", "%", d.Opening*100, 0, 100); err != nil {
			return Coefficient{}, err
		}
	}
	if d.Opening == 0 {
		return Coefficient{}, ErrShut
	}
	return e.law(d)
}

// without returns the names that are not among the others.
func without(names, others []string) []string {
	var rest []string
	for _, n := range names {
		if !slices.Contains(others, n) {
			rest = append(rest, n)
		}
	}
	return rest
}

// named returns the entry under another name, for families of fittings that share a method.
func (e CatalogueEntry) named(name string, aliases ...string) CatalogueEntry {
	e.Name, e.Aliases = name, aliases
	return e
}

// valid returns the entry with its range and law.
func (e CatalogueEntry) valid(text string, law func(Dimensions) (Coefficient, error)) CatalogueEntry {
	e.Valid, e.law = text, law
	return e
}

// The publications most entries name, each spelt once.
const (
	sourceRennels     = "D. C. Rennels and H. M. Hudson, Pipe Flow (2012), as printed in the fluids library 1.0.22"
	sourceCrane       = "Crane TP-410 (2009), as tabled in the fluids library 1.0.22"
	sourceCraneMemory = "Crane TP-410, appendix A, from memory"
	sourceDataBook    = "Hydraulic Institute, Engineering Data Book"
	methodLengthRatio = "K = n f_T, the friction of n bores of new steel pipe"
)

// onBore is a law whose coefficient stands on the velocity in the run and does not change with the water.
func onBore(law func(Dimensions) (float64, error)) func(Dimensions) (Coefficient, error) {
	return func(d Dimensions) (Coefficient, error) {
		k, err := law(d)
		return Coefficient{K: k, Bore: d.Bore}, err
	}
}

// fixed is the law of a fitting whose coefficient depends on nothing.
func fixed(k float64) func(Dimensions) (Coefficient, error) {
	return onBore(func(Dimensions) (float64, error) { return k, nil })
}

// fittingRange returns a [*fluids.RangeError] where the value lies outside low to high or is NaN.
func fittingRange(method, quantity, unit string, value, low, high float64) error {
	if !(low <= value && value <= high) {
		return &fluids.RangeError{Method: method, Quantity: quantity, Unit: unit, Value: value, Low: low, High: high}
	}
	return nil
}

// fittingBore returns a [*fluids.RangeError], in millimetres, where a bore (m) is none a pipe may have.
func fittingBore(method, quantity string, bore float64) error {
	return fittingRange(method, quantity, "mm", bore*1e3, LeastBore*1e3, GreatestBore*1e3)
}

// fittingAngle is [fittingRange] of an angle (rad) between limits in degrees, 0 or more. A billionth of a degree is let pass:
// degrees turned to radians and back do not always come out even.
func fittingAngle(method string, angle, low, high float64) error {
	const slack = 1e-9
	if deg := inDegrees(angle); !(angle >= 0 && low-slack <= deg && deg <= high+slack) {
		return &fluids.RangeError{Method: method, Quantity: "angle", Unit: "deg", Value: deg, Low: low, High: high}
	}
	return nil
}

func inDegrees(rad float64) float64 { return rad * 180 / math.Pi }

// CatalogueFittings returns all fittings the tables may name, family by family.
func CatalogueFittings() []CatalogueEntry {
	return slices.Concat(bendEntries(), mitreEntries(), stepEntries(), entranceEntries(), valveEntries(), checkValveEntries(),
		orificeEntries(), screenEntries(), coolerEntries(), bellowsEntries(), teeEntries())
}

// FindFitting returns the entry of a name or alias, without regard to case, spaces, hyphens, commas and the word
// or sign for degrees. The error is an [*UnknownNameError].
func FindFitting(name string) (CatalogueEntry, error) {
	key := fittingKey(name)
	entries := CatalogueFittings()
	for _, e := range entries {
		for _, n := range e.names() {
			if fittingKey(n) == key {
				return e, nil
			}
		}
	}
	return CatalogueEntry{}, &UnknownNameError{Kind: "fitting", Name: name, Nearest: nearestFittings(key, entries),
		Hint: "give the loss itself: k, kv, or a rated flow and drop"}
}

func (e CatalogueEntry) names() []string { return append([]string{e.Name}, e.Aliases...) }

// fittingKey is a name as it is compared: its letters and digits alone, "degrees" left out.
func fittingKey(name string) string {
	words := strings.FieldsFunc(strings.ToLower(name), func(r rune) bool { return strings.ContainsRune(" \t-_,/()°", r) })
	words = slices.DeleteFunc(words, func(w string) bool { return w == "deg" || w == "degree" || w == "degrees" })
	return strings.Join(words, "")
}

// nearestFittings returns up to three entries whose names take the fewest edits, each under its own name; one that takes
// more than a third of its letters is not near.
func nearestFittings(key string, entries []CatalogueEntry) []string {
	type candidate struct {
		name  string
		edits int
	}
	var all []candidate
	for _, e := range entries {
		best := math.MaxInt
		for _, n := range e.names() {
			best = min(best, spelling.Distance(key, fittingKey(n)))
		}
		all = append(all, candidate{e.Name, best})
	}
	slices.SortStableFunc(all, func(a, b candidate) int { return a.edits - b.edits })
	var names []string
	for _, c := range all[:min(3, len(all))] {
		if c.edits <= max(2, len(key)/3) {
			names = append(names, c.name)
		}
	}
	return names
}
