package fluids

import (
	"math"
	"testing"
)

// IAPWS R7-97(2012), table 35 (equation 30) and table 36 (equation 31): nine digits.
func TestSaturationTables(t *testing.T) {
	for _, c := range [][2]float64{{300, 0.353658941e-2}, {500, 0.263889776e1}, {600, 0.123443146e2}} {
		pascal, err := VapourPressure(c[0])
		if err != nil {
			t.Fatal(err)
		}
		near(t, "equation 30", pascal, c[1]*1e6, 1e-8)
	}
	for _, c := range [][2]float64{{0.1, 0.372755919e3}, {1, 0.453035632e3}, {10, 0.584149488e3}} {
		kelvin, err := BoilingTemperature(c[0] * 1e6)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "equation 31", kelvin, c[1], 1e-8)
	}
}

// Equations 30 and 31 are one quadratic surface solved two ways, so they undo each other to rounding.
func TestBoilingUndoesVapourPressure(t *testing.T) {
	for kelvin := 273.15; kelvin <= 647; kelvin += 0.5 {
		pascal, err := VapourPressure(kelvin)
		if err != nil {
			t.Fatal(err)
		}
		back, err := BoilingTemperature(pascal)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "temperature there and back", back, kelvin, 1e-11)
	}
}

// W. Wagner and A. Pruss, J. Phys. Chem. Ref. Data 22 (1993) 783-787, eq. 1: the saturation equation of IAPWS SR1-86,
// a fit of its own. The two differ by 0.006 to 0.010 % to 95 degC.
func TestVapourPressureAgainstWagnerPruss(t *testing.T) {
	for celsius := 0.01; celsius <= 95; celsius++ {
		kelvin := celsius + zeroCelsius
		tau := 1 - kelvin/647.096
		want := 22.064e6 * math.Exp(647.096/kelvin*(-7.85951783*tau+1.84408259*math.Pow(tau, 1.5)-11.7866497*math.Pow(tau, 3)+
			22.6807411*math.Pow(tau, 3.5)-15.9618719*math.Pow(tau, 4)+1.80122502*math.Pow(tau, 7.5)))
		pascal, err := VapourPressure(kelvin)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "vapour pressure", pascal, want, 0.011e-2)
	}
}

// K. G. Nayar, M. H. Sharqawy, L. D. Banchik and J. H. Lienhard V, Desalination 390 (2016) 1-24: sea water over fresh,
// exp(-4.5818e-4 S - 2.0443e-6 S2), fitted to measurements. It lies within 0.054 % of equal chemical potential
// to 60 degC and 42 g/kg.
func TestSeaVapourPressureAgainstNayar(t *testing.T) {
	greatest := 0.0
	for celsius := 0.0; celsius <= 60; celsius += 5 {
		for salinity := 0.0; salinity <= 42; salinity += 3 {
			pascal, err := SeaVapourPressure(celsius, salinity)
			if err != nil {
				t.Fatal(err)
			}
			want := saturation(celsius+zeroCelsius) * math.Exp(-4.5818e-4*salinity-2.0443e-6*salinity*salinity)
			greatest = math.Max(greatest, math.Abs(pascal/want-1))
			near(t, "sea vapour pressure", pascal, want, 0.06e-2)
		}
	}
	t.Logf("greatest deviation from Nayar's ratio: %.2g", greatest)
}

// What [SeaVapourPressure] says of the pressure at which it takes the potential: at the vapour pressure itself the
// result is within 3e-6.
func TestSeaVapourPressureHardlyKnowsPressure(t *testing.T) {
	greatest := 0.0
	for celsius := SeaLowestCelsius; celsius <= SeaHighestCelsius; celsius++ {
		for salinity := 0.0; salinity <= SeaSaltiest; salinity++ {
			kelvin := celsius + zeroCelsius
			pascal := seaVapourPressure(kelvin, salinity)
			there := saturation(kelvin) * math.Exp(saline(kelvin, pascal, salinity).WaterPotential/(gasConstant*kelvin))
			greatest = math.Max(greatest, math.Abs(pascal/there-1))
			near(t, "sea vapour pressure", pascal, there, 3e-6)
		}
	}
	t.Logf("greatest deviation %.2g", greatest)
}
