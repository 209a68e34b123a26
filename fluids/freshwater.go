package fluids

import "math"

// Range of [Fresh].
const (
	FreshLowestCelsius  = 0.0
	FreshHighestCelsius = 150.0
	HighestPascal       = 2.6e6 // absolute: 25 bar gauge and a little
)

const region1 = "IAPWS-IF97 region 1"

// Fresh returns the state of liquid fresh water at a temperature in degC and an absolute pressure in Pa.
// Water with an inhibitor and no glycol counts as fresh.
//
// Density and heat capacity are [LiquidWater], viscosity is [Viscosity], vapour pressure is [VapourPressure],
// conductivity is [Conductivity].
//
// Range: 0 to 150 degC, from the vapour pressure to 2.6 MPa; outside it, or for NaN, the error is a [*RangeError].
// Accuracy: greatest deviations from IAPWS-95, and from R12-08 and R15-11 with their critical enhancement, in
// testdata/reference/freshwater.csv (0 to 150 degC at 101 325 Pa and 2.6 MPa):
//
//	density          -4 to +16 ppm; beyond 10 ppm from 45 to 90 degC, where IF97 itself departs from IAPWS-95
//	heat capacity    -0.053 to +0.082 %
//	vapour pressure  -0.014 to +0.001 %
//	viscosity        -0.001 to +0.003 %
//	conductivity     -0.001 to +0.003 %
func Fresh(celsius, absolutePascal float64) (State, error) {
	if !(FreshLowestCelsius <= celsius && celsius <= FreshHighestCelsius) { // so written that NaN fails
		return State{}, &RangeError{region1, "temperature", "degC", celsius, FreshLowestCelsius, FreshHighestCelsius}
	}
	kelvin := celsius + zeroCelsius
	vapour := saturation(kelvin)
	if !(vapour <= absolutePascal && absolutePascal <= HighestPascal) {
		return State{}, &RangeError{region1, "pressure", "Pa", absolutePascal, vapour, HighestPascal}
	}
	liquid := liquidWater(kelvin, absolutePascal)
	density := 1 / liquid.Volume
	return State{
		Kind:                FreshWater,
		Celsius:             celsius,
		AbsolutePascal:      absolutePascal,
		Density:             density,
		DynamicViscosity:    viscosity(kelvin, density),
		VapourPressure:      vapour,
		HeatCapacity:        liquid.HeatCapacity,
		ThermalConductivity: conductivity(kelvin, density),
	}, nil
}

// Liquid holds the thermodynamic properties of liquid water per kilogram. Enthalpy and entropy count from the
// liquid at the triple point.
type Liquid struct {
	Volume       float64 // m3/kg
	Enthalpy     float64 // J/kg
	Entropy      float64 // J/(kg K)
	HeatCapacity float64 // J/(kg K), at constant pressure
	SoundSpeed   float64 // m/s
}

// LiquidWater returns the properties of liquid water at a temperature in K and an absolute pressure in Pa.
//
// Source: IAPWS R7-97(2012), Industrial Formulation 1997, region 1, eq. 7 and tables 2 and 3.
// Range: 273.15 to 623.15 K, from the vapour pressure to 100 MPa; outside it, or for NaN, a [*RangeError].
// Accuracy: table 5 of the release to its nine digits.
func LiquidWater(kelvin, absolutePascal float64) (Liquid, error) {
	const low, high, highestPascal = 273.15, 623.15, 100e6
	if !(low <= kelvin && kelvin <= high) {
		return Liquid{}, &RangeError{region1, "temperature", "K", kelvin, low, high}
	}
	if vapour := saturation(kelvin); !(vapour <= absolutePascal && absolutePascal <= highestPascal) {
		return Liquid{}, &RangeError{region1, "pressure", "Pa", absolutePascal, vapour, highestPascal}
	}
	return liquidWater(kelvin, absolutePascal), nil
}

// gasConstant is the specific gas constant of water and its steam, J/(kg K): IAPWS R7-97(2012), eq. 1.
const gasConstant = 461.526

// liquidWater is [LiquidWater] without its range. The sums are moments of the terms of eq. 7, from which the
// derivatives of table 4 follow by division: each power is then taken once for all of them.
func liquidWater(kelvin, pascal float64) Liquid {
	pi, tau := pascal/16.53e6, 1386/kelvin
	a, b := 7.1-pi, tau-1.222

	var aPower [region1HighestI + 1]float64
	fillPowers(aPower[:], a)
	var bPower [region1HighestJ + 1]float64
	fillPowers(bPower[:], b)
	var bInverse [region1LowestJ + 1]float64
	fillPowers(bInverse[:], 1/b)

	var gamma, byI, byII, byJ, byJJ, byIJ float64
	for n := range region1Terms {
		term := &region1Terms[n]
		i, j := float64(term.i), float64(term.j)
		value := term.n * aPower[term.i]
		if term.j < 0 {
			value *= bInverse[-term.j]
		} else {
			value *= bPower[term.j]
		}
		gamma += value // eq. 7
		timesI, timesJ := i*value, j*value
		byI += timesI
		byII += i * timesI
		byJ += timesJ
		byJJ += j * timesJ
		byIJ += i * timesJ
	}
	gammaPi, gammaPiPi := -byI/a, (byII-byI)/(a*a)   // table 4
	gammaTau, gammaTauTau := byJ/b, (byJJ-byJ)/(b*b) // table 4
	gammaPiTau := -byIJ / (a * b)                    // table 4
	cross := gammaPi - tau*gammaPiTau                // table 3, speed of sound
	soundRatio := cross*cross/(tau*tau*gammaTauTau) - gammaPiPi
	return Liquid{ // table 3
		Volume:       gammaPi * gasConstant * kelvin / 16.53e6,
		Enthalpy:     tau * gammaTau * gasConstant * kelvin,
		Entropy:      (tau*gammaTau - gamma) * gasConstant,
		HeatCapacity: -tau * tau * gammaTauTau * gasConstant,
		SoundSpeed:   math.Sqrt(gasConstant * kelvin * gammaPi * gammaPi / soundRatio),
	}
}

// fillPowers sets powers[n] to x to the n. Even and odd powers go side by side, so that a product need not wait
// for the one before it.
func fillPowers(powers []float64, x float64) {
	even, odd, square := 1.0, x, x*x
	for len(powers) >= 2 {
		powers[0], powers[1] = even, odd
		even, odd, powers = even*square, odd*square, powers[2:]
	}
	if len(powers) == 1 {
		powers[0] = even
	}
}

const (
	region1HighestI = 32
	region1HighestJ = 17
	region1LowestJ  = 41 // of the negative powers
)

// region1Terms are exponents and coefficients of IAPWS R7-97(2012), table 2.
var region1Terms = [...]struct {
	i, j int
	n    float64
}{
	{0, -2, 0.14632971213167},
	{0, -1, -0.84548187169114},
	{0, 0, -3.756360367204},
	{0, 1, 3.3855169168385},
	{0, 2, -0.95791963387872},
	{0, 3, 0.15772038513228},
	{0, 4, -0.016616417199501},
	{0, 5, 0.00081214629983568},
	{1, -9, 0.00028319080123804},
	{1, -7, -0.00060706301565874},
	{1, -1, -0.018990068218419},
	{1, 0, -0.032529748770505},
	{1, 1, -0.021841717175414},
	{1, 3, -5.283835796993e-05},
	{2, -3, -0.00047184321073267},
	{2, 0, -0.00030001780793026},
	{2, 1, 4.7661393906987e-05},
	{2, 3, -4.4141845330846e-06},
	{2, 17, -7.2694996297594e-16},
	{3, -4, -3.1679644845054e-05},
	{3, 0, -2.8270797985312e-06},
	{3, 6, -8.5205128120103e-10},
	{4, -5, -2.2425281908e-06},
	{4, -2, -6.5171222895601e-07},
	{4, 10, -1.4341729937924e-13},
	{5, -8, -4.0516996860117e-07},
	{8, -11, -1.2734301741641e-09},
	{8, -6, -1.7424871230634e-10},
	{21, -29, -6.8762131295531e-19},
	{23, -31, 1.4478307828521e-20},
	{29, -38, 2.6335781662795e-23},
	{30, -39, -1.1947622640071e-23},
	{31, -40, 1.8228094581404e-24},
	{32, -41, -9.3537087292458e-26},
}
