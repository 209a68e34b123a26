// Package fluids says what the water in a cooling system is: density, viscosity, vapour pressure, heat capacity and
// thermal conductivity of fresh and sea water.
//
// A state comes from [Fresh] or [Sea]; the functions behind them are exported too, over their own wider ranges, and
// each is held against the verification table of its publication. All quantities are SI, but for temperatures named
// celsius and salinities in g/kg. Nothing is clamped or extrapolated unsaid: outside its range a function returns a
// [*RangeError]. Glycol mixtures are not covered.
package fluids

import "fmt"

// Kind is a kind of water.
type Kind int

// The kinds of water.
const (
	FreshWater Kind = iota
	SeaWater
)

// String names the kind as job tables write it; a number that is no kind reads as one.
func (k Kind) String() string {
	switch k {
	case FreshWater:
		return "fresh"
	case SeaWater:
		return "sea"
	}
	return fmt.Sprintf("Kind(%d)", int(k))
}

// State is one water at one temperature and pressure. The zero value is no water: states come from [Fresh] and [Sea].
type State struct {
	Kind                Kind
	Celsius             float64
	AbsolutePascal      float64
	Salinity            float64 // absolute, g/kg; 0 for fresh water
	Density             float64 // kg/m3
	DynamicViscosity    float64 // Pa s
	VapourPressure      float64 // Pa, absolute
	HeatCapacity        float64 // J/(kg K), at constant pressure
	ThermalConductivity float64 // W/(m K); NaN for sea water below 0 degC, where no published equation reaches
}

// KinematicViscosity returns the dynamic viscosity over the density, m2/s.
func (s State) KinematicViscosity() float64 {
	return s.DynamicViscosity / s.Density
}

// RangeError tells that a method was asked for something outside its range.
type RangeError struct {
	Method   string // the method, such as "IAPWS-IF97 region 1"
	Quantity string // the quantity out of range
	Unit     string // its unit, empty where it has none
	Value    float64
	Low      float64
	High     float64
}

// Error says what was found and what the method allows.
func (e *RangeError) Error() string {
	unit := e.Unit
	if unit != "" {
		unit = " " + unit
	}
	return fmt.Sprintf("%s: %s %.9g%s is outside %.9g to %.9g%s", e.Method, e.Quantity, e.Value, unit, e.Low, e.High, unit)
}

// Source says where a property of a state comes from.
type Source struct {
	Property    string // as "density"
	Method      string // the equation
	Publication string
	Range       string
	Uncertainty string // stated by the publication, or measured against the reference formulation
}

const (
	freshRange      = "0 to 150 degC, vapour pressure to 2.6 MPa absolute"
	seaRangeText    = "-2 to 80 degC, 0 to 45 g/kg, vapour pressure to 2.6 MPa absolute"
	if97Publication = "IAPWS R7-97(2012), Industrial Formulation 1997 for the thermodynamic properties of water and steam"
)

// Sources returns the source of each property of a kind of water, none for a number that is no kind.
func Sources(k Kind) []Source {
	switch k {
	case FreshWater:
		return freshSources()
	case SeaWater:
		return seaSources()
	}
	return nil
}

func freshSources() []Source {
	return []Source{
		{"density", "region 1, eq. 7", if97Publication, freshRange, "within 16 ppm of IAPWS-95"},
		{"heat capacity", "region 1, eq. 7", if97Publication, freshRange, "within 0.09 % of IAPWS-95"},
		{"vapour pressure", "eq. 30", if97Publication, "0 to 150 degC", "within 0.014 % of IAPWS-95"},
		{"dynamic viscosity", "eq. 10 to 12", "IAPWS R12-08 (2008), viscosity of ordinary water substance", freshRange,
			"about 1 % (from memory)"},
		{"thermal conductivity", "eq. 15 to 17", "IAPWS R15-11 (2011), thermal conductivity of ordinary water substance", freshRange,
			"within 0.003 % of the release with its critical enhancement"},
	}
}

func seaSources() []Source {
	const gibbs = "IAPWS R13-08 (2008), thermodynamic properties of seawater, on IF97 region 1 (Advisory Note 5)"
	return []Source{
		{"density", "saline part, eq. 4", gibbs, seaRangeText,
			"within 16 ppm of R13-08 on IAPWS-95; above 40 degC under pressure up to 0.03 % is extrapolated"},
		{"heat capacity", "saline part, eq. 4", gibbs, seaRangeText, "within 0.06 % of R13-08 on IAPWS-95"},
		{"vapour pressure", "equal chemical potential of water in sea water and ideal steam", gibbs, "-2 to 80 degC, 0 to 45 g/kg",
			"within 0.03 % of the equation with real steam"},
		{"dynamic viscosity", "eq. 22 and 23", "Sharqawy, Lienhard and Zubair, Desalination and Water Treatment 16 (2010) 354-380",
			"-2 to 80 degC, 0 to 45 g/kg, atmospheric pressure", "1.5 % (stated)"},
		{"thermal conductivity", "eq. 1 to 5, added to IAPWS R15-11", "IAPWS, Guideline on the Thermal Conductivity of Seawater (2015)",
			"0 to 80 degC, 0 to 45 g/kg, vapour pressure to 2.6 MPa absolute", "not known here"},
	}
}
