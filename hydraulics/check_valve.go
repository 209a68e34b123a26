package hydraulics

import (
	"fmt"
	"math"
)

// LiftVelocity returns the velocity (m/s) in the pipe above which a check valve stands fully open in water of a
// density (kg/m3), from its constant, Lift of the catalogue's entry:
//
//	v = c / sqrt(rho)
//
// Below it the disc floats and flutters: its loss coefficient is more than the catalogue's, and its pin wears.
//
// Source: Crane TP-410 (2009), appendix A, SI edition, as tabled in the fluids library 1.0.22: swing check with a
// sloping seat 45, straight 75, lift check of globe pattern 50, angle 170, stop check of globe pattern 70, angle 95,
// foot valve with poppet disc 20, with hinged disc 45; full-bore seats.
// Range: 1 <= constant <= 1000, 900 <= density <= 1100; outside it, or for NaN, the result is NaN and a [*fluids.RangeError].
func LiftVelocity(constant, density float64) (float64, error) {
	const method = "lift of a check valve"
	if err := fittingRange(method, "constant", "", constant, 1, 1000); err != nil {
		return math.NaN(), err
	}
	if err := fittingRange(method, "density", "kg/m3", density, 900, 1100); err != nil {
		return math.NaN(), err
	}
	return constant / math.Sqrt(density), nil
}

// checkValves are Crane's, with n of K = n f_T and the constant of [LiftVelocity].
//
// Source: Crane TP-410 (2009), appendix A, as tabled in the fluids library 1.0.22.
var checkValves = [...]struct {
	name    string
	aliases []string
	n, lift float64
	pattern string
	screwed bool // has a spindle that can shut it
}{
	{"swing check valve", []string{"check valve", "swing check", "non-return valve", "flap valve"}, 100, 45, "flap on a sloping seat", false},
	{"straight swing check valve", []string{"straight swing check"}, 50, 75, "flap across the bore", false},
	{"lift check valve", []string{"lift check", "piston check valve"}, 600, 50, "globe pattern", false},
	{"angle lift check valve", []string{"angle lift check"}, 55, 170, "angle pattern", false},
	{"screw-down non-return valve", []string{"SDNR valve", "SDNR", "screw-down check valve", "stop check valve", "globe SDNR valve"}, 400, 70, "globe pattern, spindle up", true},
	{"angle screw-down non-return valve", []string{"angle SDNR valve", "angle SDNR", "angle stop check valve"}, 200, 95, "angle pattern, spindle up", true},
	{"foot valve", []string{"foot valve with strainer", "poppet foot valve"}, 420, 20, "poppet disc, its strainer included", false},
	{"hinged foot valve", []string{"flap foot valve"}, 75, 45, "hinged disc, its strainer included", false},
}

func checkValveEntries() []CatalogueEntry {
	var entries []CatalogueEntry
	for _, v := range checkValves {
		e := CatalogueEntry{
			Method: methodLengthRatio, Source: sourceCrane, Mark: "R", NonReturn: true, Lift: v.lift,
			Scatter: 2, ScatterBelow: 0.8, ScatterSource: sourceDataBook + ": flanged check valve",
		}
		if v.screwed {
			e.Uses = []string{dimOpening}
		}
		e = e.named(v.name, v.aliases...)
		e = e.valid(fmt.Sprintf("n %g; %s; disc fully lifted, from about %.1f m/s in sea water", v.n, v.pattern, v.lift/math.Sqrt(1025)),
			onBore(craneValve{ratio: of(v.n)}.coefficient))
		entries = append(entries, e)
	}
	return entries
}
