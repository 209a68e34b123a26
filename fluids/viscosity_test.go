package fluids

import (
	"math"
	"testing"
)

// IAPWS R12-08 (2008), table 4: viscosity in micropascal seconds without critical enhancement, eight or more digits.
func TestViscosityTable4(t *testing.T) {
	for _, c := range [][3]float64{
		{298.15, 998, 889.735100}, {298.15, 1200, 1437.649467}, {373.15, 1000, 307.883622}, {433.15, 1, 14.538324},
		{433.15, 1000, 217.685358}, {873.15, 1, 32.619287}, {873.15, 100, 35.802262}, {873.15, 600, 77.430195},
		{1173.15, 1, 44.217245}, {1173.15, 100, 47.640433}, {1173.15, 400, 64.154608},
	} {
		got, err := Viscosity(c[0], c[1])
		if err != nil {
			t.Fatal(err)
		}
		// Half the sixth decimal is up to 3.4e-8 of the smallest figure; elsewhere 1e-8.
		near(t, "viscosity", got*1e6, c[2], math.Max(1e-8, 0.5e-6/c[2]))
	}
}

// sr6 is the viscosity of liquid water at 0.1 MPa by IAPWS SR6-08(2011), eq. 7, for 253.15 to 383.15 K, in Pa s.
func sr6(kelvin float64) float64 {
	x := kelvin / 300
	return 1e-6 * (280.68*math.Pow(x, -1.9) + 511.45*math.Pow(x, -7.7) + 61.131*math.Pow(x, -19.6) + 0.45903*math.Pow(x, -40))
}

// The four terms of IAPWS SR6-08 lie within 0.003 % of R12-08 to 95 degC.
func TestViscosityAgainstSR6(t *testing.T) {
	for _, c := range [][2]float64{{260, 3058.36075057}, {298.15, 889.996773679}, {375, 276.207244913}} { // iapws 1.5.2, _Liquid
		near(t, "SR6-08", sr6(c[0]), c[1]*1e-6, 1e-11)
	}
	for celsius := 0.0; celsius <= 95; celsius++ {
		s, err := Fresh(celsius, StandardAtmosphere)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "viscosity", s.DynamicViscosity, sr6(celsius+zeroCelsius), 0.0035e-2)
	}
}

// Equations 22 and 23 of Sharqawy et al. (2010) in mPa s, computed in double precision from their coefficients by
// another program; printed to six decimals.
func TestSeaViscosityOfCorrelation(t *testing.T) {
	for _, c := range [][3]float64{
		{0, 35.16504, 1.906154}, {15, 20, 1.182280}, {15, 35.16504, 1.220279}, {25, 35.16504, 0.959168}, {40, 42, 0.719369},
	} {
		got, err := SeaViscosity(c[0], c[1])
		if err != nil {
			t.Fatal(err)
		}
		within(t, "sea viscosity", got*1e3, c[2], 0.5e-6)
	}
}

// F. J. Millero, The Sea 5 (1974), an independent correlation for 5 to 25 degC: its check value at 25 degC and 40 is
// 0.45 % below that of Sharqawy et al., well inside the 1.5 % they state.
func TestSeaViscosityAgainstMillero(t *testing.T) {
	got, err := SeaViscosity(25, 40)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "sea viscosity", got, 9.6541e-4, 0.5e-2)
}

// From 0 degC down to -2 the published range is left. The water part, equation 23, can be held there against
// IAPWS SR6-08, which was made for supercooled water too: it stays as near as it is above 0 degC.
func TestSeaViscosityBelowZero(t *testing.T) {
	greatest := 0.0
	for celsius := SeaLowestCelsius; celsius <= 0; celsius += 0.1 {
		got, err := SeaViscosity(celsius, 0)
		if err != nil {
			t.Fatal(err)
		}
		want := sr6(celsius + zeroCelsius)
		greatest = math.Max(greatest, math.Abs(got/want-1))
		near(t, "water part", got, want, 0.1e-2)
	}
	t.Logf("greatest deviation %.2g", greatest)
}

// The coefficients as the paper rounds them, over the whole range: M. H. Sharqawy, J. H. Lienhard V and S. M. Zubair
// (2010), eq. 22 and 23. Their rounding is worth 0.0019 % in all, and 4e-6 in what the salt adds, which is therefore
// held by itself: the printed check values of the correlation end at 40 degC.
func TestSeaViscosityOfPaper(t *testing.T) {
	for celsius := SeaLowestCelsius; celsius <= SeaHighestCelsius; celsius++ {
		shifted := celsius + 64.993
		water := 4.2844e-5 + 1/(0.157*shifted*shifted-91.296)
		a := 1.541 + 1.998e-2*celsius - 9.52e-5*celsius*celsius
		b := 7.974 - 7.561e-2*celsius + 4.724e-4*celsius*celsius
		for salinity := 0.0; salinity <= SeaSaltiest; salinity++ {
			s := salinity / 1000
			got, pure := seaViscosity(celsius, salinity), seaViscosity(celsius, 0)
			near(t, "viscosity", got, water*(1+a*s+b*s*s), 0.0019e-2)
			near(t, "viscosity over that without salt", got/pure, 1+a*s+b*s*s, 4e-6)
		}
	}
}

// What [SeaViscosity] says of the pressure it leaves out, by R12-08 in fresh water.
func TestViscosityUnderPressure(t *testing.T) {
	for _, c := range []struct{ celsius, change, within float64 }{
		{0, -0.31e-2, 0.005e-2}, {30, 0, 0.01e-2}, {80, 0.19e-2, 0.005e-2},
	} {
		low, err := Fresh(c.celsius, StandardAtmosphere)
		if err != nil {
			t.Fatal(err)
		}
		high, err := Fresh(c.celsius, HighestPascal)
		if err != nil {
			t.Fatal(err)
		}
		within(t, "change of viscosity", high.DynamicViscosity/low.DynamicViscosity-1, c.change, c.within)
	}
}
