package hydraulics

import (
	"fmt"
	"math"
)

// PerforatedPlate returns the loss coefficient of a thin plate or grating with sharp edges that stands across a
// duct, on the velocity before it, where f is its open share:
//
//	K = (0.707 (1-f)^0.375 + 1 - f)2 / f2
//
// Source: I. E. Idelchik, Handbook of Hydraulic Resistance, diagram 8-1 (form from memory). R. D. Blevins, Applied
// Fluid Dynamics Handbook (1984), square edge, prints figures of two digits within 17 %.
// Range: 0.02 <= open <= 1, Reynolds number of a hole beyond 1e5; outside it, or for NaN, the result is NaN and a
// [*fluids.RangeError]. A plate as thick as its holes loses up to a third less.
func PerforatedPlate(open float64) (float64, error) {
	return plateLoss("perforated plate", open, 0.707*math.Pow(1-open, 0.375))
}

// InletGrating returns the loss coefficient of a thin grating over an opening in a ship's side or a tank, through
// which water comes in from all around, on the mean velocity through its whole face, where f is its open share:
//
//	K = (0.707 + 1 - f)2 / f2
//
// [PerforatedPlate] with the contraction of unlimited water before it; at f = 1 it is the sharp entrance, 0.5.
//
// Source: I. E. Idelchik, Handbook of Hydraulic Resistance, chapter 3, entrance through a perforated screen (form
// from memory).
// Range: 0.02 <= open <= 1; outside it, or for NaN, the result is NaN and a [*fluids.RangeError].
func InletGrating(open float64) (float64, error) {
	return plateLoss("inlet grating", open, 0.707)
}

// plateLoss adds the loss of drawing the water in to that of its jets spreading behind the holes.
func plateLoss(method string, open, contraction float64) (float64, error) {
	if err := fittingRange(method, "open area", "%", open*100, 2, 100); err != nil {
		return math.NaN(), err
	}
	root := (contraction + 1 - open) / open
	return root * root, nil
}

// PerforatedShare returns the open share of a sheet with round holes in staggered rows at 60 degrees, from the
// diameter of a hole and the pitch between centres (m): pi/(2 sqrt(3)) (hole/pitch)2, by geometry.
//
// Range: 0.1 mm <= hole <= 0.5 m, hole <= pitch <= 7 holes; outside it, or for NaN, the result is NaN and a
// [*fluids.RangeError].
func PerforatedShare(hole, pitch float64) (float64, error) {
	if err := fittingRange("perforated sheet", "hole", "mm", hole*1e3, 0.1, 500); err != nil {
		return math.NaN(), err
	}
	if err := fittingRange("perforated sheet", "pitch", "mm", pitch*1e3, hole*1e3, 7*hole*1e3); err != nil {
		return math.NaN(), err
	}
	return math.Pi / (2 * math.Sqrt(3)) * (hole / pitch) * (hole / pitch), nil
}

// The parts of a strainer's loss beside its basket, on the velocity in the pipe.
const (
	strainerBody   = 1.5 // the jet from the inlet lost in the body, 1, and a sharp entrance into the outlet, 0.5
	changeoverCock = 30  // n of K = n f_T, each of the two three-way cocks of a duplex strainer; Crane TP-410
)

// Shares of the basket where a row gives none (common practice).
const (
	usualOpenArea  = 0.40 // perforated sheet with holes of 3 to 6 mm
	usualAreaRatio = 4    // open area of a main sea strainer's basket over its pipe: 4 to 6, at least 2.5
)

// Strainer is a basket strainer.
type Strainer struct {
	Bore      float64 // m, of the pipe
	OpenArea  float64 // open share of the basket's sheet
	AreaRatio float64 // open area of the basket over the area of the pipe
	Mesh      float64 // wires to the inch of a lining; NaN or 0 for none
	Duplex    bool    // two baskets with change-over cocks, one in use
}

// Loss returns the loss coefficients of the clean strainer, on the velocity in the pipe: of body and cocks, which
// dirt does not change, and of the basket, which the blocked share b of its open area divides by (1-b)2.
//
// The body is taken to lose the jet of its inlet and to feed its outlet as a sharp entrance; the basket is a
// [PerforatedPlate] at the velocity through its sheet; the cocks of a duplex strainer are Crane's three-way plug
// cocks, straight through. A mesh lining multiplies the whole, as strainer makers state it.
//
// Source: composed here of J.-C. de Borda, Idelchik's diagram 8-1 and Crane TP-410; mesh factors of Eaton and
// Weamco strainer data, see meshFactor.
// Range: OpenArea 0.02 to 1, AreaRatio 0.5 to 50, Mesh none or 40 to 325, Bore as [NewSteelFriction]; outside it,
// or for NaN, the results are NaN and a [*fluids.RangeError].
// Accuracy: half of the figure either way (Hydraulic Institute, Engineering Data Book).
func (s Strainer) Loss() (body, basket float64, err error) {
	none := math.NaN()
	sheet, err := PerforatedPlate(s.OpenArea)
	if err != nil {
		return none, none, err
	}
	if err := fittingRange("basket strainer", "open area of the basket over the pipe's", "", s.AreaRatio, 0.5, 50); err != nil {
		return none, none, err
	}
	factor, err := meshFactor(s.Mesh)
	if err != nil {
		return none, none, err
	}
	f, err := NewSteelFriction(s.Bore)
	if err != nil {
		return none, none, err
	}
	body = strainerBody
	if s.Duplex {
		body += 2 * changeoverCock * f
	}
	face := s.AreaRatio / s.OpenArea // whole sheet over the pipe
	return body * factor, sheet / (face * face) * factor, nil
}

// meshFactors tell how much more a perforated basket loses with a lining of so many wires to the inch.
//
// Source: Eaton strainer technical data; Weamco bulletin FTPD-112 gives 1.3 and 1.5 at 40 and 60, and the same at 80
// and 100.
var meshFactors = [...]struct{ mesh, factor float64 }{
	{40, 1.2}, {60, 1.4}, {80, 1.6}, {100, 1.7}, {200, 2.0}, {325, 2.5},
}

// meshFactor returns the factor of a lining, straight lines between the figures known; 1 for none.
func meshFactor(mesh float64) (float64, error) {
	if mesh == 0 || math.IsNaN(mesh) {
		return 1, nil
	}
	first, last := meshFactors[0], meshFactors[len(meshFactors)-1]
	if err := fittingRange("basket lining", "mesh", "", mesh, first.mesh, last.mesh); err != nil {
		return math.NaN(), err
	}
	i := 1
	for mesh > meshFactors[i].mesh {
		i++
	}
	a, b := meshFactors[i-1], meshFactors[i]
	return a.factor + (b.factor-a.factor)*(mesh-a.mesh)/(b.mesh-a.mesh), nil
}

// openShare is the open share of a row's sheet: as given, or from hole and pitch, or else what usually stands for it.
func openShare(d Dimensions, usual float64) (float64, error) {
	hole, pitch := !math.IsNaN(d.Hole), !math.IsNaN(d.Pitch)
	switch {
	case !math.IsNaN(d.OpenArea):
		return d.OpenArea, nil
	case hole && pitch:
		return PerforatedShare(d.Hole, d.Pitch)
	case hole:
		return math.NaN(), &DimensionError{Dimensions: []string{dimPitch + " beside " + dimHole + ", or " + dimOpenArea}}
	case pitch:
		return math.NaN(), &DimensionError{Dimensions: []string{dimHole + " beside " + dimPitch + ", or " + dimOpenArea}}
	case math.IsNaN(usual):
		return math.NaN(), &DimensionError{Dimensions: []string{dimOpenArea + ", or " + dimHole + " and " + dimPitch}}
	}
	return usual, nil
}

// plate is the law of a plate or grating on the velocity through its whole face.
func plate(loss func(open float64) (float64, error)) func(Dimensions) (Coefficient, error) {
	return func(d Dimensions) (Coefficient, error) {
		open, err := openShare(d, math.NaN())
		if err != nil {
			return Coefficient{}, err
		}
		k, err := loss(open)
		if err != nil {
			return Coefficient{}, err
		}
		face := orElse(d.FaceArea, circle(d.Bore))
		if err := fittingRange("plate", "face area", "m2", face, circle(LeastBore), 100); err != nil {
			return Coefficient{}, err
		}
		return Coefficient{K: k, Bore: math.Sqrt(4 * face / math.Pi)}, nil
	}
}

func strainerLaw(duplex bool) func(Dimensions) (Coefficient, error) {
	return onBore(func(d Dimensions) (float64, error) {
		open, err := openShare(d, usualOpenArea)
		if err != nil {
			return math.NaN(), err
		}
		body, basket, err := Strainer{d.Bore, open, orElse(d.AreaRatio, usualAreaRatio), d.Mesh, duplex}.Loss()
		return body + basket, err
	})
}

func screenEntries() []CatalogueEntry {
	sheet := []string{dimOpenArea, dimHole, dimPitch}
	perforated := CatalogueEntry{
		Name: "perforated plate", Aliases: []string{"perforated sheet", "strum plate"},
		Uses:   append([]string{dimFaceArea}, sheet...),
		Method: "thin sharp-edged plate across the flow, ((0.707 (1-f)^0.375 + 1 - f)/f)^2 on the velocity before it, f the open share",
		Source: "I. E. Idelchik, Handbook of Hydraulic Resistance, diagram 8-1, form from memory; Blevins' table within 17 %", Mark: "C",
		Scatter: 0.20, ScatterBelow: 0.35, ScatterSource: "Blevins beside Idelchik 17 %; a plate as thick as its holes loses up to a third less",
	}
	grating := CatalogueEntry{
		Name: "sea chest grating", Aliases: []string{"sea grating", "inlet grating", "sea chest strainer plate"},
		Needs:  []string{dimFaceArea},
		Uses:   sheet,
		Method: "thin grating fed from open water, ((1.707 - f)/f)^2 on the velocity through its face, f the open share",
		Source: "I. E. Idelchik, Handbook of Hydraulic Resistance, chapter 3, form from memory", Mark: "M",
		Scatter: 0.30, ScatterSource: "judged here",
	}
	basket := CatalogueEntry{
		Uses:   append([]string{dimAreaRatio, dimMesh}, sheet...),
		Method: "inlet jet lost in the body, sheet as a perforated plate, sharp entrance into the outlet",
		Source: "composed here: Borda, Idelchik diagram 8-1; mesh linings after Eaton and Weamco strainer data", Mark: "C",
		Scatter: 0.50, ScatterSource: sourceDataBook + ": basket strainer",
	}
	defaults := fmt.Sprintf("clean; open area of the basket 0.5 to 50 times the pipe's, %d unless given; sheet open by %.0f %% unless given or hole and pitch are (common practice); lining 40 to 325 mesh; a rated drop is better",
		usualAreaRatio, usualOpenArea*100)
	simplex := basket.named("basket strainer", "strainer", "simplex strainer", "sea strainer", "simplex basket strainer")
	duplex := basket.named("duplex strainer", "duplex basket strainer", "twin strainer", "double strainer")
	duplex.Method += "; two three-way change-over cocks, K = 30 f_T each"
	duplex.Source += "; Crane TP-410 (2009)"
	const open = "open area 2 to 100 %, or hole and pitch in staggered rows; "
	return []CatalogueEntry{
		perforated.valid(open+"face area that of the run unless given; holes' Reynolds number beyond 1e5", plate(PerforatedPlate)),
		grating.valid(open+"clear of growth", plate(InletGrating)),
		simplex.valid(defaults, strainerLaw(false)),
		duplex.valid(defaults, strainerLaw(true)),
	}
}
