package hydraulics

import (
	_ "embed"
	"encoding/csv"
	"errors"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"sync"

	"brinehead/fluids"
)

//go:embed fittings/opening.csv
var openingCSV string

// throttlePoint is a row of fittings/opening.csv.
type throttlePoint struct {
	opening float64 // share of the stroke or quarter turn
	k       float64
}

// throttleCurves returns the rows of fittings/opening.csv by valve, from wide open to nearly shut. The file is part
// of the program: a fault in it is ours.
var throttleCurves = sync.OnceValue(func() map[string][]throttlePoint {
	r := csv.NewReader(strings.NewReader(openingCSV))
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		panic(fmt.Sprintf("fittings/opening.csv: %v", err))
	}
	curves := make(map[string][]throttlePoint)
	for _, row := range rows[1:] {
		var n [3]float64
		for i := range n {
			if n[i], err = strconv.ParseFloat(row[1+i], 64); err != nil {
				panic(fmt.Sprintf("fittings/opening.csv: %v", err))
			}
		}
		curves[row[0]] = append(curves[row[0]], throttlePoint{n[0] / n[1], n[2]})
	}
	return curves
})

// throttled returns the loss coefficient a valve of the curve named adds to its wide-open one by being open only
// in part: straight lines in ln K over the opening, which cannot overshoot, less the curve's own figure wide open.
func throttled(valve string, opening float64) (float64, error) {
	curve := throttleCurves()[valve]
	least := curve[len(curve)-1].opening
	if !(least <= opening && opening <= 1) {
		return math.NaN(), &fluids.RangeError{Method: valve + " valve", Quantity: "opening", Unit: "%", Value: opening * 100, Low: math.Ceil(least*1e4) / 100, High: 100}
	}
	i := 1
	for opening < curve[i].opening {
		i++
	}
	a, b := curve[i-1], curve[i]
	share := (a.opening - opening) / (a.opening - b.opening)
	return a.k*math.Pow(b.k/a.k, share) - curve[0].k, nil
}

// ReducedSeat returns the loss coefficient, on the velocity in the pipe, of a valve whose seat is narrower than the
// pipe by the ratio of bores named, seat over pipe, from that of the same valve with a full bore; the cones before
// and behind the seat have the included angle a (rad), 180 degrees for square shoulders:
//
//	K = (Kfull + contraction + expansion) / ratio4
//
// Source: Crane TP-410 (2009), appendix A, formulas 5 and 6 for gate, ball and plug valves, as in the fluids
// library 1.0.22; with [Contraction] and [Expansion].
// Range: 0 <= full <= 1e6, 0.2 <= ratio <= 1 (the lower end chosen here), 0 <= angle <= pi; outside it, or for NaN, the
// result is NaN and a [*fluids.RangeError].
func ReducedSeat(full, ratio, angle float64) (float64, error) {
	const method = "reduced seat"
	if err := fittingRange(method, "full-bore coefficient", "", full, 0, 1e6); err != nil {
		return math.NaN(), err
	}
	if err := fittingRange(method, "seat over pipe bore", "", ratio, 0.2, 1); err != nil {
		return math.NaN(), err
	}
	in, err := Contraction(ratio, angle)
	if err != nil {
		return math.NaN(), err
	}
	out, err := Expansion(ratio, angle)
	return (full + in + out) / (ratio * ratio * ratio * ratio), err
}

// butterflyRatio is n of K = n f_T for a wide-open butterfly valve on the centre line, by bore (m).
//
// Source: Crane TP-410 (2009), appendix A: 45 to 8 inches, 35 from 10 to 14, 25 from 16 to 24, as tabled in the
// fluids library 1.0.22, which changes over at 9 and 15 inches.
func butterflyRatio(bore float64) float64 {
	switch {
	case bore <= 9*0.0254:
		return 45
	case bore <= 15*0.0254:
		return 35
	default:
		return 25
	}
}

// craneValve is a valve of K = n(bore) f_T wide open, with its throttle curve where there is one.
type craneValve struct {
	ratio    func(bore float64) float64
	throttle string // curve of fittings/opening.csv; empty for none
}

func (v craneValve) coefficient(d Dimensions) (float64, error) {
	f, err := NewSteelFriction(d.Bore)
	if err != nil {
		return math.NaN(), err
	}
	k := v.ratio(d.Bore) * f
	if !math.IsNaN(d.SecondBore) {
		if k, err = ReducedSeat(k, d.SecondBore/d.Bore, orElse(d.Angle, math.Pi)); err != nil {
			return math.NaN(), err
		}
	}
	if !math.IsNaN(d.Angle) && math.IsNaN(d.SecondBore) {
		return math.NaN(), &DimensionError{Dimensions: []string{dimSecondBore + " beside " + dimAngle}}
	}
	if math.IsNaN(d.Opening) || d.Opening == 1 {
		return k, nil
	}
	if v.throttle == "" {
		return math.NaN(), errors.New("no table of its loss part open is known, only opening 0 and 100 %; give k or kv")
	}
	more, err := throttled(v.throttle, d.Opening)
	return k + more, err
}

// of is the ratio of a valve for which it is the same at every bore.
func of(n float64) func(float64) float64 { return func(float64) float64 { return n } }

func valveEntries() []CatalogueEntry {
	full := CatalogueEntry{
		Uses: []string{dimOpening}, Method: methodLengthRatio, Source: sourceCrane, Mark: "R",
		Scatter: 0.50, ScatterSource: "judged here, as " + sourceDataBook + " for gate valves",
	}
	// valve is a craneValve's entry; the texts name its n and where its loss part open comes from.
	valve := func(n, partOpen string, ratio func(float64) float64, curve, name string, aliases ...string) CatalogueEntry {
		e := full.named(name, aliases...).valid("n "+n+"; opening 100 % unless given, otherwise 0 or 100 %",
			onBore(craneValve{ratio, curve}.coefficient))
		if curve != "" {
			e.Method = "K = n f_T wide open, the friction of n bores of new steel pipe; part open more, by a table over opening, straight lines in ln K"
			e.Source += "; part open: " + partOpen
			points := throttleCurves()[curve]
			least := points[len(points)-1]
			e.Valid = fmt.Sprintf("n %s; opening 100 %% unless given, otherwise 0 or %g to 100 %%", n, math.Ceil(least.opening*1e4)/100)
		}
		return e
	}
	reduced := func(e CatalogueEntry) CatalogueEntry {
		e.Uses = append(slices.Clone(e.Uses), dimSecondBore, dimAngle)
		e.Valid += "; second bore is the seat, full bore unless given, with cones of an angle of 180 degrees unless given"
		return e
	}
	const perry = "table after Perry"
	gate := reduced(valve("8", "Mechanical Engineer's Data Handbook, p. 151, and two more tables", of(8), "gate",
		"gate valve", "gate", "sluice valve"))
	gate.ScatterSource = sourceDataBook + ": gate valve; two families of figures part open differ by a factor 2 to 4"
	globe := valve("340", perry+", plug disc", of(340), "globe", "globe valve", "globe", "screw-down valve", "stop valve")
	globe.Scatter, globe.ScatterSource = 0.60, "judged here: 4 to 10 for cast standard patterns (Valve Selection Handbook, table 2-3)"
	angle := valve("150", "", of(150), "", "angle valve", "angle globe valve", "angle stop valve")
	angle.Scatter, angle.ScatterBelow, angle.ScatterSource = 1, 0.5, "judged here: K 2 to 5 (Valve Selection Handbook, table 2-3)"
	side := angle.named("ship-side valve", "ship's side valve", "sea suction valve", "sea inlet valve", "overboard valve")
	side.Valid = "screw-down angle valve, " + side.Valid
	butterfly := valve("45 to DN 200, 35 to DN 350, 25 above", "I. E. Idelchik, Handbook of Hydraulic Resistance (1986), diagram 9-17, thin disc",
		butterflyRatio, "butterfly", "butterfly valve", "butterfly")
	butterfly.Scatter, butterfly.ScatterBelow = 1, 0.62
	butterfly.ScatterSource = "makers' valves of DN 50 to 600 from 30 degrees up, 0.39 to 1.94 times the figure; the larger the valve the less"
	butterfly.Valid = "disc on the centre line; " + butterfly.Valid
	return []CatalogueEntry{
		gate, globe, angle, side,
		reduced(valve("3", perry+" and J. Weisbach", of(3), "plug", "ball valve", "ball", "ball cock")),
		reduced(valve("18", perry+" and J. Weisbach", of(18), "plug", "plug valve", "plug cock", "cock", "plug")),
		butterfly,
		valve("149", perry, of(149), "diaphragm", "diaphragm valve", "diaphragm", "weir diaphragm valve"),
		valve("39", "", of(39), "", "straight-through diaphragm valve", "full-bore diaphragm valve"),
	}
}
