package fluids

import "math"

// Conductivity returns the thermal conductivity of water in W/(m K) at a temperature in K and a density in kg/m3.
//
// Source: IAPWS R15-11 (2011), eq. 15 to 17 and tables 1 and 2, without the critical enhancement of eq. 18.
// Range: 273.15 to 1173.15 K, 0 to 1200 kg/m3; outside it, or for NaN, the result is NaN and a [*RangeError].
// Accuracy: table 4 of the release to its nine digits.
func Conductivity(kelvin, density float64) (float64, error) {
	if err := transportRange("IAPWS R15-11 thermal conductivity", kelvin, density); err != nil {
		return math.NaN(), err
	}
	return conductivity(kelvin, density), nil
}

func conductivity(kelvin, density float64) float64 {
	inverse, compression := criticalKelvin/kelvin, density/criticalDensity
	dilute := 1 / math.Sqrt(inverse) / // eq. 16
		(2.443221e-3 + inverse*(1.323095e-2+inverse*(6.770357e-3+inverse*(-3.454586e-3+inverse*4.096266e-4))))
	dense := math.Exp(compression * bivariate(conductivityTerms, inverse-1, compression-1)) // eq. 17
	return 1e-3 * dilute * dense                                                            // eq. 15
}

// conductivityTerms are the L_ij of IAPWS R15-11, table 2.
var conductivityTerms = [][]float64{
	{1.60397357, -0.646013523, 0.111443906, 0.102997357, -0.0504123634, 0.00609859258},
	{2.33771842, -2.78843778, 1.53616167, -0.463045512, 0.0832827019, -0.00719201245},
	{2.19650529, -4.54580785, 3.55777244, -1.40944978, 0.275418278, -0.0205938816},
	{-1.21051378, 1.60812989, -0.621178141, 0.0716373224},
	{-2.720337, 4.57586331, -3.18369245, 1.1168348, -0.19268305, 0.012913842},
}

// Range of [SeaConductivityExcess] in temperature; [Sea] begins below it.
const (
	seaConductivityLowestKelvin  = 273.15
	seaConductivityHighestKelvin = 523.15
)

// SeaConductivityExcess returns what salt adds to the thermal conductivity of water, in W/(m K) and below 0, at a
// temperature in K, an absolute pressure in Pa and an absolute salinity in g/kg.
//
// Source: IAPWS, Guideline on the Thermal Conductivity of Seawater (2015), eq. 1 to 5.
// Range: 273.15 to 523.15 K, 0 to 140 MPa, 0 to 170 g/kg; outside it, or for NaN, the result is NaN and a
// [*RangeError].
// Accuracy: the guideline's check value to its six digits.
func SeaConductivityExcess(kelvin, absolutePascal, salinity float64) (float64, error) {
	const method = "sea water thermal conductivity"
	const highestPascal, saltiest = 140e6, 170.0
	if !(seaConductivityLowestKelvin <= kelvin && kelvin <= seaConductivityHighestKelvin) {
		return math.NaN(), &RangeError{method, "temperature", "K", kelvin, seaConductivityLowestKelvin, seaConductivityHighestKelvin}
	}
	if !(0 <= absolutePascal && absolutePascal <= highestPascal) {
		return math.NaN(), &RangeError{method, "pressure", "Pa", absolutePascal, 0, highestPascal}
	}
	if !(0 <= salinity && salinity <= saltiest) {
		return math.NaN(), &RangeError{method, "salinity", "g/kg", salinity, 0, saltiest}
	}
	return seaConductivityExcess(kelvin, absolutePascal, salinity), nil
}

func seaConductivityExcess(kelvin, pascal, salinity float64) float64 {
	t, p := kelvin-zeroCelsius, pascal/1e6
	a := (-7.180891e-5 + 1.831971e-7*p) * math.Exp((1.048077e-3-4.494722e-6*p)*t) // eq. 2, 4
	b := (1.463375e-1 + 9.208586e-4*p) * math.Exp((-3.086908e-3+1.798489e-5*p)*t) // eq. 3, 5
	return a * math.Pow(salinity, 1+b)                                            // eq. 1
}
