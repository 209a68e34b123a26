package hydraulics

import (
	"brinehead/fluids"
	"fmt"
	"math"
)

// Fitting is anything in a run beside straight pipe: an elbow, a valve, a strainer, a cooler. Its loss is given in
// one of three ways: by a flow coefficient Kv, by a rated flow and drop, or by the coefficient K.
type Fitting struct {
	Name  string
	Tag   string // unique name of this one, or empty
	Count int    // how many in a row; 0 counts as 1

	Coefficient  Coefficient // used where neither Kv nor RatedFlow is given
	Kv           float64     // m3/h of cold water at 1 bar (IEC 60534-1)
	RatedFlow    float64     // m3/s
	RatedDrop    float64     // Pa, at RatedFlow
	RatedDensity float64     // kg/m3, density of the water it was rated with; needed with RatedDrop

	Exponent  float64 // of the loss over flow for a rated drop, and over the free area for a blockage; 0 counts as 2
	Blockage  float64 // share of the open area that is blocked, 0 to below 1
	NonReturn bool    // water passes only from the start to the end of its run
}

// Coefficient is the loss of a fitting on a velocity head: h = (K + Viscous/Re) v2/2g, with the velocity v and the
// Reynolds number Re on Bore.
type Coefficient struct {
	K       float64 // dimensionless, negative only in a tee
	Viscous float64 // dimensionless, 0 or more
	Bore    float64 // m; 0 stands for the clear bore of the run as it then is
}

// Check returns an error where the fitting's figures make no sense.
func (f Fitting) Check() error {
	switch {
	case f.Count < 0:
		return fmt.Errorf("count %d, want 1 or more", f.Count)
	case !(0 <= f.Blockage && f.Blockage < 1):
		return fmt.Errorf("blockage %g %%, want 0 to below 100 %%", f.Blockage*100)
	case !(f.Kv >= 0) || !(f.RatedFlow >= 0) || !(f.RatedDrop >= 0):
		return fmt.Errorf("kv, rated flow and rated drop must not be negative")
	case f.RatedFlow > 0 && !(f.RatedDensity > 0):
		return fmt.Errorf("a rated drop needs the density it was rated with")
	case math.IsNaN(f.Coefficient.K) || math.IsInf(f.Coefficient.K, 0) || !(f.Coefficient.Viscous >= 0) || !(f.Coefficient.Bore >= 0):
		return fmt.Errorf("loss coefficient %g on a bore of %g mm", f.Coefficient.K, f.Coefficient.Bore*1e3)
	case f.Exponent != 0 && !(0.5 <= f.Exponent && f.Exponent <= 3):
		return fmt.Errorf("exponent %g, want 0.5 to 3", f.Exponent)
	}
	return nil
}

// Loss returns the head loss (m, of the flow's sign) of the fitting in the pipe at a flow (m3/s) of water of the
// kinematic viscosity nu (m2/s), and its derivative with respect to flow. A non-return fitting is taken as open.
//
//   - Coefficient: h = (K + Viscous/Re) v2/2g.
//   - Kv: h = 1e5/(1000 g) (3600 Q/Kv)2, the same in any water (IEC 60534-1).
//   - Rated: h = drop/(rho g) (Q/Qrated)^n at the density it was rated with.
//   - Blockage b: each of them divided by (1-b)^n. The free area governs the loss of a screen (I. E. Idelchik,
//     Handbook of Hydraulic Resistance, from memory); matted leaf or sheet does worse.
func (f Fitting) Loss(flow float64, pipe Pipe, nu float64) (loss, slope float64) {
	return f.law(pipe, nu).loss(flow)
}

// lossLaw is a fitting in its run: h = linear Q + power |Q|^(n-1) Q.
type lossLaw struct {
	linear   float64
	power    float64
	exponent float64
	soft     float64 // flow below which the power law turns linear, m3/s
}

func (f Fitting) law(pipe Pipe, nu float64) lossLaw {
	bore := f.Coefficient.Bore
	if bore == 0 {
		bore = pipe.ClearBore()
	}
	area := circle(bore)
	law := lossLaw{exponent: 2, soft: creepingReynolds * math.Pi / 4 * pipe.ClearBore() * nu}
	switch {
	case f.Kv > 0:
		law.power = 1e5 / (1000 * fluids.Gravity) * (3600 / f.Kv) * (3600 / f.Kv)
	case f.RatedFlow > 0:
		if f.Exponent != 0 {
			law.exponent = f.Exponent
		}
		law.power = f.RatedDrop / (f.RatedDensity * fluids.Gravity) / math.Pow(f.RatedFlow, law.exponent)
	default:
		law.power = f.Coefficient.K / (2 * fluids.Gravity * area * area)
		law.linear = f.Coefficient.Viscous * nu / (2 * fluids.Gravity * bore * area)
	}
	factor := float64(max(f.Count, 1))
	if f.Blockage > 0 {
		n := f.Exponent
		if n == 0 {
			n = 2
		}
		factor *= math.Pow(1-f.Blockage, -n)
	}
	law.power *= factor
	law.linear *= factor
	return law
}

// creepingReynolds is the Reynolds number on the run's bore at which a power law gives way to a straight line. At
// rest a power law has no slope, and a solver could not say which way the water goes; a real fitting does not
// follow it there either. At any flow a pump makes the difference is below 1e-8 of the loss.
const creepingReynolds = 1.0

// loss returns the head loss and its slope. |Q| is taken as sqrt(Q2 + soft2), smooth through rest.
func (l lossLaw) loss(flow float64) (loss, slope float64) {
	square := flow*flow + l.soft*l.soft
	if square == 0 {
		return 0, l.linear
	}
	var factor float64 // sqrt(square)^(n-1)
	if l.exponent == 2 {
		factor = math.Sqrt(square)
	} else {
		factor = math.Pow(square, (l.exponent-1)/2)
	}
	loss = l.linear*flow + l.power*factor*flow
	slope = l.linear + l.power*factor*(1+(l.exponent-1)*flow*flow/square)
	return loss, slope
}
