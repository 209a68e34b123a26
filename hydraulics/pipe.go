package hydraulics

import (
	"brinehead/fluids"
	"fmt"
	"math"
)

// Pipe is a straight round pipe.
type Pipe struct {
	Length    float64 // m, 0 or more; no length is no friction
	Bore      float64 // m, of the clean pipe
	Roughness float64 // m, equivalent sand roughness of the wall, fouled or not
	Fouling   float64 // m, thickness of the layer on the wall; it takes twice that off the bore
}

// Least and greatest bore a pipe may have, m; what lies outside is a slip of the unit.
const (
	LeastBore    = 0.002
	GreatestBore = 5.0
)

// ClearBore returns the bore that is left to the water, m.
func (p Pipe) ClearBore() float64 { return p.Bore - 2*p.Fouling }

// Area returns the area of the clear bore, m2.
func (p Pipe) Area() float64 { return circle(p.ClearBore()) }

// Reynolds returns the Reynolds number on the clear bore at a flow (m3/s, either sign) of water of the
// kinematic viscosity nu (m2/s).
func (p Pipe) Reynolds(flow, nu float64) float64 {
	return 4 * math.Abs(flow) / (math.Pi * p.ClearBore() * nu)
}

// Loss returns the Darcy-Weisbach friction loss (m, of the flow's sign) at a flow (m3/s) of water of the
// kinematic viscosity nu (m2/s), and its derivative with respect to flow:
//
//	h = f L/D v2/2g, f from [FrictionFactor]
//
// Source: J. Weisbach (1845), H. Darcy (1857). The friction factor's range is not checked here; see [Pipe.Check].
func (p Pipe) Loss(flow, nu float64) (loss, slope float64) {
	law := p.law(nu)
	return law.loss(flow)
}

// Check returns an error where the pipe is none: no length is allowed, a negative one is not; a bore outside
// LeastBore to GreatestBore, a layer that closes it, and a roughness beyond 5 % of the clear bore are not.
func (p Pipe) Check() error {
	switch {
	case !(p.Length >= 0) || math.IsInf(p.Length, 0):
		return fmt.Errorf("length %g m, want 0 or more", p.Length)
	case !(LeastBore <= p.Bore && p.Bore <= GreatestBore):
		return fmt.Errorf("bore %g mm, want %g to %g mm", p.Bore*1e3, LeastBore*1e3, GreatestBore*1e3)
	case !(0 <= p.Fouling && p.ClearBore() > 0):
		return fmt.Errorf("a layer of %g mm closes a bore of %g mm", p.Fouling*1e3, p.Bore*1e3)
	case !(0 <= p.Roughness && p.Roughness <= GreatestRelRoughness*p.ClearBore()):
		return fmt.Errorf("roughness %g mm, want at most %g %% of the clear bore, %.4g mm",
			p.Roughness*1e3, GreatestRelRoughness*100, GreatestRelRoughness*p.ClearBore()*1e3)
	}
	return nil
}

// frictionLaw is a pipe filled with a given water: h = scale (f re2), re = reynolds |Q|.
type frictionLaw struct {
	reynolds float64 // Reynolds number of 1 m3/s
	rel      float64
	scale    float64 // m
}

func (p Pipe) law(nu float64) frictionLaw {
	d := p.ClearBore()
	return frictionLaw{
		reynolds: p.Reynolds(1, nu),
		rel:      p.Roughness / d,
		scale:    p.Length / d * (nu / d) * (nu / d) / (2 * fluids.Gravity),
	}
}

// loss returns the head loss and its derivative with respect to flow.
func (l frictionLaw) loss(flow float64) (loss, slope float64) {
	if l.scale == 0 {
		return 0, 0
	}
	g, dg := reducedLoss(l.reynolds*math.Abs(flow), l.rel)
	return math.Copysign(l.scale*g, flow), l.scale * dg * l.reynolds
}

func circle(bore float64) float64 { return math.Pi / 4 * bore * bore }
