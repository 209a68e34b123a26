package fluids

import "math"

// Range of [Sea].
const (
	SeaLowestCelsius  = -2.0
	SeaHighestCelsius = 80.0
	SeaSaltiest       = 45.0 // g/kg
)

// Sea returns the state of sea water at a temperature in degC, an absolute salinity in g/kg and an absolute
// pressure in Pa. It does not ask whether the water would freeze.
//
// Density and heat capacity are those of [LiquidWater] and [Saline] together, as IAPWS Advisory Note 5 lays down for
// industry; viscosity is [SeaViscosity], vapour pressure is [SeaVapourPressure], conductivity is [Conductivity] with
// [SeaConductivityExcess], NaN below 0 degC.
//
// Why this formulation: the Gibbs function is the international standard of oceanography (TEOS-10) and holds every
// thermodynamic figure in one, so that sea water without salt is fresh water. The density of Sharqawy et al. (2010),
// eq. 8, lies up to 0.58 kg/m3 from it; EOS-80 lies within 0.01 kg/m3, but to 40 degC only and without pressure; the
// heat capacity of Jamieson et al. (1969) is 0.30 % low in cold water. The water is IF97 rather than IAPWS-95
// because the two kinds of water then agree, and because it needs no iteration.
//
// Range: -2 to 80 degC, 0 to 45 g/kg, from the vapour pressure to 2.6 MPa; outside it, or for NaN, the error is a
// [*RangeError]. Three corners go beyond what the releases cover. Below 0 degC IF97 is extrapolated by 2 K: sea water
// then lies within 2 ppm in density and 0.015 % in heat capacity of TEOS-10. Above 40 degC the saline part was made
// for atmospheric pressure; what it adds to the compression up to 2.6 MPa at 80 degC is 0.03 % of the density, and
// in proportion less at lower pressure. Its temperature ends at 353 K, 0.15 K before the range.
// Accuracy: greatest deviations from R13-08 on IAPWS-95 (below 0 degC on SR7-09) and from TEOS-10 by gsw, in
// testdata/reference/seawater.csv (the whole range at 101 325 Pa and 1 MPa):
//
//	density          -2 to +16 ppm, all of it IF97's water; to 40 degC -2 to +9 ppm of TEOS-10
//	heat capacity    -0.056 to +0.020 %; to 40 degC -0.023 to +0.019 % of TEOS-10
//	vapour pressure  -0.005 to +0.030 %
//	viscosity        1.5 % stated, see [SeaViscosity]
//	conductivity     none, the same equations are behind both
func Sea(celsius, salinity, absolutePascal float64) (State, error) {
	const method = "IAPWS R13-08 sea water"
	if err := seaRange(method, celsius, salinity); err != nil {
		return State{}, err
	}
	kelvin := celsius + zeroCelsius
	vapour := seaVapourPressure(kelvin, salinity)
	if !(vapour <= absolutePascal && absolutePascal <= HighestPascal) {
		return State{}, &RangeError{method, "pressure", "Pa", absolutePascal, vapour, HighestPascal}
	}
	water, salt := liquidWater(kelvin, absolutePascal), saline(kelvin, absolutePascal, salinity)
	return State{
		Kind:                SeaWater,
		Celsius:             celsius,
		AbsolutePascal:      absolutePascal,
		Salinity:            salinity,
		Density:             1 / (water.Volume + salt.Volume),
		DynamicViscosity:    seaViscosity(celsius, salinity),
		VapourPressure:      vapour,
		HeatCapacity:        water.HeatCapacity + salt.HeatCapacity,
		ThermalConductivity: seaConductivity(kelvin, absolutePascal, salinity, 1/water.Volume),
	}, nil
}

// seaRange tells whether sea water of this temperature and salinity is within the range of [Sea].
func seaRange(method string, celsius, salinity float64) error {
	if !(SeaLowestCelsius <= celsius && celsius <= SeaHighestCelsius) { // so written that NaN fails
		return &RangeError{method, "temperature", "degC", celsius, SeaLowestCelsius, SeaHighestCelsius}
	}
	if !(0 <= salinity && salinity <= SeaSaltiest) {
		return &RangeError{method, "salinity", "g/kg", salinity, 0, SeaSaltiest}
	}
	return nil
}

// seaConductivity is NaN below 0 degC, where no published equation reaches.
func seaConductivity(kelvin, pascal, salinity, waterDensity float64) float64 {
	if kelvin < seaConductivityLowestKelvin {
		return math.NaN()
	}
	return conductivity(kelvin, waterDensity) + seaConductivityExcess(kelvin, pascal, salinity)
}

// Salt holds what salt adds to the properties of water, per kilogram of sea water.
type Salt struct {
	Volume         float64 // m3/kg
	HeatCapacity   float64 // J/(kg K), at constant pressure
	WaterPotential float64 // J/kg, added to the chemical potential of water, never above 0
}

// Saline returns what salt adds to the properties of water at a temperature in K, an absolute pressure in Pa and
// an absolute salinity in g/kg.
//
// Source: IAPWS R13-08 (2008), eq. 4 and table 2.
// Range: 261 to 353.15 K (the release ends at 353), 0 to 100 MPa, 0 to 120 g/kg; outside it, or for NaN, a
// [*RangeError]. The release covers pressures other than atmospheric to 40 degC and 42 g/kg; beyond, what depends on
// pressure is extrapolated.
// Accuracy: table 8 of the release to its nine digits.
func Saline(kelvin, absolutePascal, salinity float64) (Salt, error) {
	const method = "IAPWS R13-08 saline part"
	const low, high, highestPascal, saltiest = 261.0, 353.15, 100e6, 120.0
	if !(low <= kelvin && kelvin <= high) {
		return Salt{}, &RangeError{method, "temperature", "K", kelvin, low, high}
	}
	if !(0 <= absolutePascal && absolutePascal <= highestPascal) {
		return Salt{}, &RangeError{method, "pressure", "Pa", absolutePascal, 0, highestPascal}
	}
	if !(0 <= salinity && salinity <= saltiest) {
		return Salt{}, &RangeError{method, "salinity", "g/kg", salinity, 0, saltiest}
	}
	return saline(kelvin, absolutePascal, salinity), nil
}

// saline is [Saline] without its range. Each row of the table is a polynomial in xi, the square root of the
// salinity; its value serves volume and heat capacity. What g - S dg/dS, the potential of the water, keeps of a
// polynomial p is -(xi/2) dp/dxi + p, as S goes with xi squared: with p = xi2 v that is -(xi3/2) dv/dxi, and of the
// logarithmic terms xi2 ln(xi) it is -xi2/2, which has a limit at no salt.
func saline(kelvin, pascal, salinity float64) Salt {
	const (
		salinityScale = StandardSalinity * 40 / 35 // g/kg, table 1
		kelvinScale   = 40.0
		pascalScale   = 100e6
	)
	square := salinity / salinityScale
	xi, tau, pi := math.Sqrt(square), (kelvin-zeroCelsius)/kelvinScale, (pascal-StandardAtmosphere)/pascalScale

	// tauPower[j+2] and piPower[k+1] are the powers; what stands before the power 0 meets only the factor 0.
	var tauPower [9]float64
	fillPowers(tauPower[2:], tau)
	var piPower [7]float64
	fillPowers(piPower[1:], pi)

	var volume, curvature float64
	potential := salineLog[0] + salineLog[1]*tau
	for n := range salineTerms {
		row := &salineTerms[n]
		value, slope := 0.0, 0.0
		for m := len(row.g) - 1; m >= 0; m-- { // Horner's rule for the polynomial and its derivative
			slope = slope*xi + value
			value = value*xi + row.g[m]
		}
		j, k := float64(row.j), float64(row.k)
		atTau, atPi := tauPower[row.j+2], piPower[row.k+1]
		volume += k * value * atTau * piPower[row.k]              // eq. 4, differentiated by pi
		curvature += j * (j - 1) * value * tauPower[row.j] * atPi // eq. 4, twice by tau
		potential += xi * slope * atTau * atPi
	}
	return Salt{
		Volume:         square * volume / pascalScale,
		HeatCapacity:   -kelvin * square * curvature / (kelvinScale * kelvinScale),
		WaterPotential: -square / 2 * potential,
	}
}

// salineLog are the coefficients of IAPWS R13-08, table 2, with i = 1 and k = 0, for j = 0 and 1: g in J/kg.
var salineLog = [2]float64{5812.81456626732, 851.226734946706}

// salineTerms are the other coefficients of IAPWS R13-08, table 2, in J/kg: those of one j and k in a row, for
// i = 2, 3 and so on. The two with i = 2, k = 0 and j = 0 or 1 shape enthalpy and entropy only.
var salineTerms = [...]struct {
	j, k int
	g    []float64
}{
	{0, 0, []float64{1416.27648484197, -2432.14662381794, 2025.80115603697, -1091.66841042967, 374.60123787784, -48.5891069025409}},
	{1, 0, []float64{168.072408311545, -493.407510141682, 543.835333000098, -196.028306689776, 36.7571622995805}},
	{2, 0, []float64{880.031352997204, -43.0664675978042, -68.5572509204491}},
	{3, 0, []float64{-225.267649263401, -10.0227370861875, 49.3667694856254}},
	{4, 0, []float64{91.4260447751259, 0.875600661808945, -17.1397577419788}},
	{5, 0, []float64{-21.6603240875311, 0, 2.49697009569508}},
	{6, 0, []float64{2.13016970847183}},
	{0, 1, []float64{-3310.49154044839, 199.459603073901, -54.7919133532887, 36.0284195611086}},
	{1, 1, []float64{729.116529735046, -175.292041186547, -22.6683558512829}},
	{2, 1, []float64{-860.764303783977, 383.058066002476}},
	{3, 1, []float64{694.244814133268, -460.319931801257}},
	{4, 1, []float64{-297.728741987187, 234.565187611355}},
	{0, 2, []float64{384.794152978599, -52.2940909281335, -4.08193978912261}},
	{1, 2, []float64{-343.956902961561, 83.1923927801819}},
	{2, 2, []float64{337.409530269367, -54.1917262517112}},
	{3, 2, []float64{-204.889641964903}},
	{4, 2, []float64{74.726141138756}},
	{0, 3, []float64{-96.5324320107458, 68.0444942726459, -30.1755111971161}},
	{1, 3, []float64{124.687671116248, -29.483064349429}},
	{2, 3, []float64{-178.314556207638, 25.6398487389914}},
	{3, 3, []float64{113.561697840594}},
	{4, 3, []float64{-36.4872919001588}},
	{0, 4, []float64{15.8408172766824, -3.41251932441282}},
	{1, 4, []float64{-31.656964386073}},
	{2, 4, []float64{44.2040358308}},
	{3, 4, []float64{-11.1282734326413}},
	{0, 5, []float64{-2.62480156590992}},
	{1, 5, []float64{7.04658803315449}},
	{2, 5, []float64{-7.92001547211682}},
}
