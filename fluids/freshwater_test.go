package fluids

import (
	"math"
	"math/rand/v2"
	"testing"
)

// IAPWS R7-97(2012), table 5: nine digits, so half a last digit is at most 5e-9 of the figure.
func TestLiquidWaterTable5(t *testing.T) {
	for _, c := range []struct {
		kelvin, megapascal float64
		v, h, s, cp, w     float64 // m3/kg, kJ/kg, kJ/(kg K), kJ/(kg K), m/s
	}{
		{300, 3, 0.100215168e-2, 0.115331273e3, 0.392294792, 0.417301218e1, 0.150773921e4},
		{300, 80, 0.971180894e-3, 0.184142828e3, 0.368563852, 0.401008987e1, 0.163469054e4},
		{500, 3, 0.120241800e-2, 0.975542239e3, 0.258041912e1, 0.465580682e1, 0.124071337e4},
	} {
		got, err := LiquidWater(c.kelvin, c.megapascal*1e6)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "volume", got.Volume, c.v, 1e-8)
		near(t, "enthalpy", got.Enthalpy, c.h*1e3, 1e-8)
		near(t, "entropy", got.Entropy, c.s*1e3, 1e-8)
		near(t, "heat capacity", got.HeatCapacity, c.cp*1e3, 1e-8)
		near(t, "speed of sound", got.SoundSpeed, c.w, 1e-8)
	}
}

// IAPWS SR6-08(2011), liquid water at 0.1 MPa, by iapws 1.5.2 _Liquid(298.15): another fit to IAPWS-95. The
// tolerances are what is asked of the package: 10 ppm in density, 0.1 % in the others.
func TestLiquidWaterAgainstSR6(t *testing.T) {
	got, err := LiquidWater(298.15, 0.1e6)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "density", 1/got.Volume, 997.0470134, 1e-5)
	near(t, "enthalpy", got.Enthalpy, 104919.358043, 1e-3)
	near(t, "heat capacity", got.HeatCapacity, 4181.44617856, 1e-3)
	near(t, "speed of sound", got.SoundSpeed, 1496.699222, 1e-3)
}

// The derivatives of one Gibbs function hang together: dh/dT = cp and ds/dT = cp/T at constant pressure, and at
// constant temperature dh/dp - T ds/dp = v. Central differences of 0.01 K and 1 kPa are good to about 1e-6.
func TestLiquidWaterIsOneGibbsFunction(t *testing.T) {
	const seed = 1
	random := rand.New(rand.NewPCG(seed, 0))
	var worstOfAll float64
	for range 1000 {
		kelvin, pascal := 274+330*random.Float64(), 15e6+80e6*random.Float64()
		warm, cold := liquidWater(kelvin+0.01, pascal), liquidWater(kelvin-0.01, pascal)
		high, low := liquidWater(kelvin, pascal+1e3), liquidWater(kelvin, pascal-1e3)
		here := liquidWater(kelvin, pascal)
		for _, pair := range [][2]float64{
			{(warm.Enthalpy - cold.Enthalpy) / 0.02, here.HeatCapacity},
			{(warm.Entropy - cold.Entropy) / 0.02 * kelvin, here.HeatCapacity},
			{(high.Enthalpy - low.Enthalpy - kelvin*(high.Entropy-low.Entropy)) / 2e3, here.Volume},
		} {
			worstOfAll = math.Max(worstOfAll, math.Abs(pair[0]/pair[1]-1))
		}
	}
	t.Logf("seed %d: worst deviation %.2g", seed, worstOfAll)
	if !(worstOfAll <= 2e-6) {
		t.Errorf("derivatives disagree by %.2g", worstOfAll)
	}
}

// testdata/reference/freshwater.csv; the bounds are the deviations that [Fresh] states.
func TestFreshAgainstReference(t *testing.T) {
	g := readGrid(t, "freshwater.csv")
	if len(g.rows) != 51 {
		t.Errorf("%d rows, want 51", len(g.rows))
	}
	g.compare(t, func(row []float64) (State, error) {
		celsius, _ := g.at(t, row, "temperature_degC")
		pascal, _ := g.at(t, row, "pressure_Pa")
		return Fresh(celsius, pascal)
	}, []comparison{
		{worst{name: "density", most: 16e-6}, "density_kg_m3", density},
		{worst{name: "heat capacity", most: 0.82e-3}, "heat_capacity_J_kg_K", heatCapacity},
		{worst{name: "vapour pressure", most: 0.14e-3}, "vapour_pressure_Pa", vapourPressure},
		{worst{name: "viscosity", most: 0.03e-3}, "viscosity_Pa_s", dynamic},
		{worst{name: "conductivity", most: 0.03e-3}, "conductivity_W_m_K", thermal},
	})
}

// ITTC Recommended Procedure 7.5-02-01-03, table 1 (fresh water at 101 325 Pa). Its densities are those of
// IAPWS-95; IF97 lies up to 0.009 kg/m3 above them to 40 degC. Viscosities are printed to four and five digits.
func TestFreshAgainstITTC(t *testing.T) {
	for _, c := range []struct{ celsius, density float64 }{
		{10, 999.7025}, {15, 999.1026}, {20, 998.2072}, {25, 997.0476}, {30, 995.6495}, {35, 994.0333}, {40, 992.2164},
	} {
		s, err := Fresh(c.celsius, StandardAtmosphere)
		if err != nil {
			t.Fatal(err)
		}
		within(t, "density", s.Density, c.density, 0.01)
	}
	s, err := Fresh(15, StandardAtmosphere)
	if err != nil {
		t.Fatal(err)
	}
	within(t, "viscosity at 15 degC", s.DynamicViscosity, 0.001138, 0.5e-6)
	within(t, "kinematic viscosity at 15 degC", s.KinematicViscosity(), 1.1386e-6, 0.5e-10)
	within(t, "vapour pressure at 15 degC", s.VapourPressure, 1705.8, 0.1) // eq. 30 is 0.03 Pa below IAPWS-95 here
	if s, err = Fresh(20, StandardAtmosphere); err != nil {
		t.Fatal(err)
	}
	within(t, "viscosity at 20 degC", s.DynamicViscosity, 0.001002, 0.5e-6)
	within(t, "kinematic viscosity at 20 degC", s.KinematicViscosity(), 1.0034e-6, 0.5e-10)
}

// Laws of liquid water over the range of [Fresh]: densest near 4 degC, thinner and with higher vapour pressure as
// it warms, denser under pressure.
func TestFreshLaws(t *testing.T) {
	state := func(celsius, pascal float64) State {
		s, err := Fresh(celsius, pascal)
		if err != nil {
			t.Fatal(err)
		}
		return s
	}
	for tenth := 1; tenth <= 1500; tenth++ {
		celsius := float64(tenth) / 10
		cold, warm := state(celsius-0.1, HighestPascal), state(celsius, HighestPascal)
		if celsius > 4 && warm.Density >= cold.Density {
			t.Errorf("density does not fall towards %g degC", celsius)
		}
		if warm.DynamicViscosity >= cold.DynamicViscosity || warm.VapourPressure <= cold.VapourPressure {
			t.Errorf("viscosity rises or vapour pressure falls towards %g degC", celsius)
		}
		if boiling := state(celsius, warm.VapourPressure); boiling.Density >= warm.Density {
			t.Errorf("pressure does not squeeze water at %g degC", celsius)
		}
	}
	densest := 0.0 // IAPWS-95 has its greatest density at 3.98 degC under one atmosphere
	for hundredth := 0; hundredth <= 1000; hundredth++ {
		if celsius := float64(hundredth) / 100; state(celsius, StandardAtmosphere).Density > state(densest, StandardAtmosphere).Density {
			densest = celsius
		}
	}
	within(t, "temperature of greatest density", densest, 3.98, 0.05)
}

func BenchmarkFresh(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Fresh(36, 3e5); err != nil {
			b.Fatal(err)
		}
	}
}
