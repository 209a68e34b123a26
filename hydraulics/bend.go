package hydraulics

import "math"

// craneRoughness is the roughness of the new steel pipe of Crane TP-410, 0.0018 in.
const craneRoughness = 0.0018 * 0.0254

// RoughFriction returns the Darcy friction factor of a rough pipe at great Reynolds numbers,
//
//	f = 0.25 / log10(rel/3.7)2
//
// where rel is the roughness over the bore: Colebrook's law with its viscous term gone.
//
// Source: C. F. Colebrook, J. Inst. Civil Engineers 11 (1939) 133-156.
// Range: 1e-7 <= rel <= 0.05; outside it, or for NaN, the result is NaN and a [*fluids.RangeError].
func RoughFriction(rel float64) (float64, error) {
	if err := fittingRange("friction of a fully rough pipe", "roughness over bore", "", rel, 1e-7, GreatestRelRoughness); err != nil {
		return math.NaN(), err
	}
	log := math.Log10(rel / 3.7)
	return 0.25 / (log * log), nil
}

// NewSteelFriction returns Crane's f_T at a bore (m): the friction factor of new steel pipe at great Reynolds
// numbers, [RoughFriction] at a roughness of 0.0018 in. It scales the loss of a fitting with its size, and is taken
// at the bore whatever the wall of the pipe.
//
// Source: Crane TP-410 (2009), chapter 2 and the table of f_T in appendix A, which rounds to three decimals and
// is met within 0.001 from 1/2 to 24 inches.
// Range: LeastBore to GreatestBore; outside it, or for NaN, the result is NaN and a [*fluids.RangeError].
func NewSteelFriction(bore float64) (float64, error) {
	if err := fittingBore("friction of new steel", "bore", bore); err != nil {
		return math.NaN(), err
	}
	return RoughFriction(craneRoughness / bore)
}

// Bend returns the loss coefficient of a smooth bend or elbow turning through an angle (rad), of a centre line
// radius over bore r, in a pipe of the Darcy friction factor f, the friction of its own length included:
//
//	K = f a r + (0.10 + 2.4 f) sin(a/2) + 6.6 f (sqrt(sin(a/2)) + sin(a/2)) / r^(4a/pi)
//
// wall friction, secondary flow and separation in this order.
//
// Source: D. C. Rennels and H. M. Hudson, Pipe Flow (Wiley, 2012), chapter on elbows and bends; form as printed in
// the documentation of the fluids library 1.0.22.
// Range: 0 <= angle <= pi, 0.5 <= r <= 20 (the upper end chosen here), 0.001 <= f <= 0.1; outside it, or for NaN, the
// result is NaN and a [*fluids.RangeError].
// Accuracy: four published methods lie within about 20 % of each other at r 1 to 5.
func Bend(angle, radiusRatio, friction float64) (float64, error) {
	const method = "bend"
	if err := fittingAngle(method, angle, 0, 180); err != nil {
		return math.NaN(), err
	}
	if err := fittingRange(method, "radius over bore", "", radiusRatio, 0.5, 20); err != nil {
		return math.NaN(), err
	}
	if err := fittingRange(method, "friction factor", "", friction, 1e-3, 0.1); err != nil {
		return math.NaN(), err
	}
	s := math.Sin(angle / 2)
	wall := friction * angle * radiusRatio
	secondary := (0.10 + 2.4*friction) * s
	separation := 6.6 * friction * (math.Sqrt(s) + s) / math.Pow(radiusRatio, 4*angle/math.Pi)
	return wall + secondary + separation, nil
}

// bendFriction is the friction factor a catalogue bend is computed with: the fully rough one of the run's wall, and
// not less than new steel's. A smooth wall is never fully rough at the flows of a ship, and new steel's figure is
// near its friction at Reynolds numbers of 3e5 to 1e6.
func bendFriction(d Dimensions) (float64, error) {
	steel, err := NewSteelFriction(d.Bore)
	if err != nil || math.IsNaN(d.Roughness) || d.Roughness <= craneRoughness {
		return steel, err
	}
	return RoughFriction(d.Roughness / d.Bore)
}

// catalogueBend is the law of a bend of the angle (degrees) and radius over bore; NaN for what the row must give.
func catalogueBend(angle, radiusRatio float64) func(Dimensions) (Coefficient, error) {
	return onBore(func(d Dimensions) (float64, error) {
		f, err := bendFriction(d)
		if err != nil {
			return math.NaN(), err
		}
		return Bend(orElse(d.Angle, angle*math.Pi/180), orElse(d.RadiusRatio, radiusRatio), f)
	})
}

// lengthRatio is the law of a fitting that loses as much as n bores of straight new steel pipe:
//
//	K = n f_T
//
// Source: Crane TP-410 (2009), appendix A.
func lengthRatio(n float64) func(Dimensions) (Coefficient, error) {
	return onBore(func(d Dimensions) (float64, error) {
		f, err := NewSteelFriction(d.Bore)
		return n * f, err
	})
}

func bendEntries() []CatalogueEntry {
	bend := CatalogueEntry{
		Method: "wall friction, secondary flow and separation in a smooth bend (Rennels & Hudson); friction factor fully rough at the run's roughness, at least new steel's",
		Source: sourceRennels, Mark: "R",
		Scatter: 0.30, ScatterSource: "taken as " + sourceDataBook + " for the long-radius elbow",
	}
	short := bend.named("short-radius elbow 90", "short-radius elbow", "SR elbow", "SR elbow 90").
		valid("radius 1 bore", catalogueBend(90, 1))
	short.Scatter, short.ScatterSource = 0.35, sourceDataBook+": flanged 90 degree elbow"
	free := bend.named("bend", "bend 90", "pipe bend", "pulled bend").
		valid("angle 0 to 180 degrees, 90 unless given; radius 0.5 to 20 bores", catalogueBend(90, math.NaN()))
	free.Needs, free.Uses = []string{dimRadiusRatio}, []string{dimAngle}

	screwed := CatalogueEntry{
		Method: methodLengthRatio, Source: sourceCraneMemory, Mark: "M",
		Scatter: 0.40, ScatterSource: "judged here, a little above " + sourceDataBook + " for flanged elbows",
	}
	long := bend.named("elbow 90", "elbow", "90 elbow", "long-radius elbow", "long-radius elbow 90", "LR elbow", "LR elbow 90").
		valid("radius 1.5 bores, as butt-welded elbows are made", catalogueBend(90, 1.5))
	long.ScatterSource = sourceDataBook + ": long-radius elbow"
	return []CatalogueEntry{
		long,
		short,
		bend.named("elbow 45", "45 elbow", "long-radius elbow 45", "LR elbow 45").
			valid("radius 1.5 bores", catalogueBend(45, 1.5)),
		bend.named("return bend", "elbow 180", "180 elbow", "180 bend").
			valid("180 degrees, radius 1.5 bores", catalogueBend(180, 1.5)),
		free,
		screwed.named("screwed elbow 90", "screwed elbow", "threaded elbow", "threaded elbow 90").
			valid("n 30; tabled from 1/2 to 24 inches", lengthRatio(30)),
		screwed.named("screwed elbow 45", "threaded elbow 45").
			valid("n 16; tabled from 1/2 to 24 inches", lengthRatio(16)),
	}
}
