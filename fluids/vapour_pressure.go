package fluids

import "math"

// Ends of the saturation line of IAPWS R7-97(2012).
const (
	saturationLowestKelvin  = 273.15
	saturationHighestKelvin = criticalKelvin
	saturationLowestPascal  = 611.212677 // equation 30 at 273.15 K
	saturationHighestPascal = 22.064e6
)

// VapourPressure returns the pressure in Pa at which water at a temperature in K boils.
//
// Source: IAPWS R7-97(2012), eq. 30 and table 34.
// Range: 273.15 to 647.096 K; outside it, or for NaN, the result is NaN and a [*RangeError].
// Accuracy: table 35 of the release to its nine digits; within 0.014 % of IAPWS-95 to 150 degC, within 0.011 % of the
// equation of Wagner and Pruss (1993) to 95 degC.
func VapourPressure(kelvin float64) (pascal float64, err error) {
	if !(saturationLowestKelvin <= kelvin && kelvin <= saturationHighestKelvin) {
		return math.NaN(), &RangeError{"IAPWS-IF97 equation 30", "temperature", "K", kelvin, saturationLowestKelvin, saturationHighestKelvin}
	}
	return saturation(kelvin), nil
}

// BoilingTemperature returns the temperature in K at which water boils under an absolute pressure in Pa.
//
// Source: IAPWS R7-97(2012), eq. 31 and table 34.
// Range: 611.212677 Pa to 22.064 MPa; outside it, or for NaN, the result is NaN and a [*RangeError].
// Accuracy: table 36 of the release to its nine digits; it undoes [VapourPressure] within 1e-11.
func BoilingTemperature(pascal float64) (kelvin float64, err error) {
	if !(saturationLowestPascal <= pascal && pascal <= saturationHighestPascal) {
		return math.NaN(), &RangeError{"IAPWS-IF97 equation 31", "pressure", "Pa", pascal, saturationLowestPascal, saturationHighestPascal}
	}
	beta := math.Sqrt(math.Sqrt(pascal / 1e6)) // eq. 29a
	e := beta*(beta+n3) + n6
	f := beta*(n1*beta+n4) + n7
	g := beta*(n2*beta+n5) + n8
	d := 2 * g / (-f - math.Sqrt(f*f-4*e*g))
	sum := n10 + d
	return (sum - math.Sqrt(sum*sum-4*(n9+n10*d))) / 2, nil // eq. 31
}

// saturation is [VapourPressure] without its range.
func saturation(kelvin float64) float64 {
	theta := kelvin + n9/(kelvin-n10) // eq. 29b
	a := theta*(theta+n1) + n2
	b := theta*(n3*theta+n4) + n5
	c := theta*(n6*theta+n7) + n8
	beta := 2 * c / (-b + math.Sqrt(b*b-4*a*c))
	square := beta * beta
	return 1e6 * square * square // eq. 30
}

// Coefficients of IAPWS R7-97(2012), table 34.
const (
	n1  = 1167.0521452767
	n2  = -724213.16703206
	n3  = -17.073846940092
	n4  = 12020.82470247
	n5  = -3232555.0322333
	n6  = 14.91510861353
	n7  = -4823.2657361591
	n8  = 405113.40542057
	n9  = -0.23855557567849
	n10 = 650.17534844798
)

// SeaVapourPressure returns the pressure in Pa at which sea water at a temperature in degC and an absolute salinity in
// g/kg boils: there water has the same chemical potential in the sea water as in its steam.
//
// Salt lowers that potential by [Salt].WaterPotential; steam, taken as an ideal gas, follows with its pressure:
//
//	ln(p/p0) = potential/(R T),   p0 from eq. 30 of IAPWS-IF97
//
// The potential is taken at atmospheric pressure, which moves the result by less than 3e-6.
//
// Source: the boiling equation of IAPWS Advisory Note 5, eq. 7, solved for pressure.
// Range: -2 to 80 degC, 0 to 45 g/kg; outside it, or for NaN, the result is NaN and a [*RangeError]. Below 0 degC
// equation 30 leaves its own range, by 2 K.
// Accuracy: -0.005 to +0.030 % of the equation solved with real steam, the most at 80 degC and 45 g/kg, where steam is
// least ideal; -0.005 % below 0 degC, against supercooled water by IAPWS SR7-09. Within 0.06 % of the ratio fitted to
// measurements by Nayar et al., Desalination 390 (2016) 1-24, to 60 degC and 42 g/kg.
func SeaVapourPressure(celsius, salinity float64) (float64, error) {
	if err := seaRange("sea water vapour pressure", celsius, salinity); err != nil {
		return math.NaN(), err
	}
	return seaVapourPressure(celsius+zeroCelsius, salinity), nil
}

func seaVapourPressure(kelvin, salinity float64) float64 {
	potential := saline(kelvin, StandardAtmosphere, salinity).WaterPotential
	return saturation(kelvin) * math.Exp(potential/(gasConstant*kelvin))
}
