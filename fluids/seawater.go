package fluids

import "math"

// Range of [Sea].
const (
	SeaLowestCelsius  = -2.0
	SeaHighestCelsius = 80.0
	SeaSaltiest       = 45.0 // g/kg
)

// Sea returns the state of sea water at a temperature in degC, an absolute salinity in g/kg and an absolute
// pressure in Pa.
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

func saline(kelvin, pascal, salinity float64) Salt {
	const (
		salinityScale = StandardSalinity * 40 / 35 // g/kg, table 1
		kelvinScale   = 40.0
		pascalScale   = 100e6
	)
	square := salinity / salinityScale
	xi, tau, pi := math.Sqrt(square), (kelvin-zeroCelsius)/kelvinScale, (pascal-StandardAtmosphere)/pascalScale

	var xiPower [8]float64
	fillPowers(xiPower[:], xi)
	xiPower[1] = square // the terms i = 1 are xi2 ln(xi): what differentiation leaves of them is in potentialShare
	// tauPower[j+2] and piPower[k+1] hold the powers; those below the power 0 are met only with the factor 0.
	var tauPower [9]float64
	fillPowers(tauPower[2:], tau)
	var piPower [7]float64
	fillPowers(piPower[1:], pi)

	var volume, curvature, potential float64
	for n := range salineTerms {
		term := &salineTerms[n]
		j, k := float64(term.j), float64(term.k)
		value := term.g * xiPower[term.i]
		atTau, atPi := value*tauPower[term.j+2], piPower[term.k+1]
		volume += k * atTau * piPower[term.k]
		curvature += j * (j - 1) * value * tauPower[term.j] * atPi
		potential += potentialShare[term.i] * atTau * atPi
	}
	return Salt{
		Volume:         volume / pascalScale,
		HeatCapacity:   -kelvin * curvature / (kelvinScale * kelvinScale),
		WaterPotential: potential,
	}
}

// potentialShare is what g - S dg/dS keeps of a term in xi to the i: 1 - i/2, as S goes with xi squared; of the
// term xi2 ln(xi), counted as i = 1, it keeps -xi2/2.
var potentialShare = [8]float64{1, -0.5, 0, -0.5, -1, -1.5, -2, -2.5}

// salineTerms are exponents and coefficients of IAPWS R13-08, table 2: g in J/kg.
var salineTerms = [...]struct {
	i, j, k int
	g       float64
}{
	{1, 0, 0, 5812.81456626732},
	{2, 0, 0, 1416.27648484197},
	{3, 0, 0, -2432.14662381794},
	{4, 0, 0, 2025.80115603697},
	{5, 0, 0, -1091.66841042967},
	{6, 0, 0, 374.60123787784},
	{7, 0, 0, -48.5891069025409},
	{1, 1, 0, 851.226734946706},
	{2, 1, 0, 168.072408311545},
	{3, 1, 0, -493.407510141682},
	{4, 1, 0, 543.835333000098},
	{5, 1, 0, -196.028306689776},
	{6, 1, 0, 36.7571622995805},
	{2, 2, 0, 880.031352997204},
	{3, 2, 0, -43.0664675978042},
	{4, 2, 0, -68.5572509204491},
	{2, 3, 0, -225.267649263401},
	{3, 3, 0, -10.0227370861875},
	{4, 3, 0, 49.3667694856254},
	{2, 4, 0, 91.4260447751259},
	{3, 4, 0, 0.875600661808945},
	{4, 4, 0, -17.1397577419788},
	{2, 5, 0, -21.6603240875311},
	{4, 5, 0, 2.49697009569508},
	{2, 6, 0, 2.13016970847183},
	{2, 0, 1, -3310.49154044839},
	{3, 0, 1, 199.459603073901},
	{4, 0, 1, -54.7919133532887},
	{5, 0, 1, 36.0284195611086},
	{2, 1, 1, 729.116529735046},
	{3, 1, 1, -175.292041186547},
	{4, 1, 1, -22.6683558512829},
	{2, 2, 1, -860.764303783977},
	{3, 2, 1, 383.058066002476},
	{2, 3, 1, 694.244814133268},
	{3, 3, 1, -460.319931801257},
	{2, 4, 1, -297.728741987187},
	{3, 4, 1, 234.565187611355},
	{2, 0, 2, 384.794152978599},
	{3, 0, 2, -52.2940909281335},
	{4, 0, 2, -4.08193978912261},
	{2, 1, 2, -343.956902961561},
	{3, 1, 2, 83.1923927801819},
	{2, 2, 2, 337.409530269367},
	{3, 2, 2, -54.1917262517112},
	{2, 3, 2, -204.889641964903},
	{2, 4, 2, 74.726141138756},
	{2, 0, 3, -96.5324320107458},
	{3, 0, 3, 68.0444942726459},
	{4, 0, 3, -30.1755111971161},
	{2, 1, 3, 124.687671116248},
	{3, 1, 3, -29.483064349429},
	{2, 2, 3, -178.314556207638},
	{3, 2, 3, 25.6398487389914},
	{2, 3, 3, 113.561697840594},
	{2, 4, 3, -36.4872919001588},
	{2, 0, 4, 15.8408172766824},
	{3, 0, 4, -3.41251932441282},
	{2, 1, 4, -31.656964386073},
	{2, 2, 4, 44.2040358308},
	{2, 3, 4, -11.1282734326413},
	{2, 0, 5, -2.62480156590992},
	{2, 1, 5, 7.04658803315449},
	{2, 2, 5, -7.92001547211682},
}
