package fluids

import "math"

// Viscosity returns the dynamic viscosity of water in Pa s at a temperature in K and a density in kg/m3.
//
// Source: IAPWS R12-08 (2008), eq. 10 to 12 and tables 1 and 2, the critical enhancement taken as 1, which the
// release allows away from the critical point.
// Range: 273.15 to 1173.15 K, 0 to 1200 kg/m3; outside it, or for NaN, the result is NaN and a [*RangeError].
// Accuracy: table 4 of the release to its last digit. The formulation itself is good to about 1 % in the liquid
// (from memory).
func Viscosity(kelvin, density float64) (float64, error) {
	if err := transportRange("IAPWS R12-08 viscosity", kelvin, density); err != nil {
		return math.NaN(), err
	}
	return viscosity(kelvin, density), nil
}

// transportRange holds the range that the tables of IAPWS R12-08 and R15-11 share.
func transportRange(method string, kelvin, density float64) error {
	const low, high, densest = 273.15, 1173.15, 1200.0
	if !(low <= kelvin && kelvin <= high) {
		return &RangeError{method, "temperature", "K", kelvin, low, high}
	}
	if !(0 <= density && density <= densest) {
		return &RangeError{method, "density", "kg/m3", density, 0, densest}
	}
	return nil
}

// Reference constants of IAPWS R12-08 and R15-11.
const (
	criticalKelvin  = 647.096
	criticalDensity = 322.0 // kg/m3
)

func viscosity(kelvin, density float64) float64 {
	inverse, compression := criticalKelvin/kelvin, density/criticalDensity
	dilute := 100 / math.Sqrt(inverse) / // eq. 11
		(1.67752 + inverse*(2.20462+inverse*(0.6366564+inverse*-0.241605)))
	dense := math.Exp(compression * bivariate(viscosityTerms, inverse-1, compression-1)) // eq. 12
	return 1e-6 * dilute * dense                                                         // eq. 10
}

// bivariate returns the sum of terms[i][j] x^i y^j.
func bivariate(terms [][]float64, x, y float64) float64 {
	sum := 0.0
	for i := len(terms) - 1; i >= 0; i-- {
		row := 0.0
		for j := len(terms[i]) - 1; j >= 0; j-- {
			row = row*y + terms[i][j]
		}
		sum = sum*x + row
	}
	return sum
}

// viscosityTerms are the H_ij of IAPWS R12-08, table 2.
var viscosityTerms = [][]float64{
	{0.520094, 0.222531, -0.281378, 0.161913, -0.0325372},
	{0.0850895, 0.999115, -0.906851, 0.257399},
	{-1.08374, 1.88797, -0.772479},
	{-0.289555, 1.26613, -0.489837, 0, 0.0698452, 0, -0.00435673},
	{0, 0, -0.25704, 0, 0, 0.00872102},
	{0, 0.120573, 0, 0, 0, 0, -0.000593264},
}

// SeaViscosity returns the dynamic viscosity of sea water in Pa s at atmospheric pressure, at a temperature in degC
// and an absolute salinity in g/kg.
//
// Source: M. H. Sharqawy, J. H. Lienhard V and S. M. Zubair, Desalination and Water Treatment 16 (2010) 354-380,
// eq. 22 and 23, with the coefficients in the digits of the authors' own code.
// Range: -2 to 80 degC, 0 to 45 g/kg; outside it, or for NaN, the result is NaN and a [*RangeError]. The paper's own
// range is 0 to 180 degC and 0 to 150 g/kg; from 0 down to -2 degC the water part stays within 0.1 % of IAPWS
// SR6-08, which was made for supercooled water too, and the salt part is a smooth quadratic.
// Accuracy: 1.5 % stated. Within 0.02 % of ITTC 7.5-02-01-03, table 3, which is the same correlation; 0.45 % above
// Millero (1974) at 25 degC and 40 g/kg; without salt within 0.12 % of IAPWS R12-08. Pressure is left out: by
// R12-08 2.6 MPa thins fresh water by 0.31 % at 0 degC, less as it warms, and from about 30 degC thickens it, by 0.19 %
// at 80 degC.
func SeaViscosity(celsius, salinity float64) (float64, error) {
	if err := seaRange("sea water viscosity", celsius, salinity); err != nil {
		return math.NaN(), err
	}
	return seaViscosity(celsius, salinity), nil
}

func seaViscosity(t, salinity float64) float64 {
	s := salinity / 1000 // kg/kg
	shifted := t + 64.992620050
	water := 4.2844324477e-5 + 1/(0.15700386464*shifted*shifted-91.296496657) // eq. 23
	a := 1.5409136040 + t*(1.9981117208e-2-t*9.5203865864e-5)
	b := 7.9739318223 + t*(-7.5614568881e-2+t*4.7237011074e-4)
	return water * (1 + s*(a+s*b)) // eq. 22
}
