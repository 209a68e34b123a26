package fluids_test

import (
	"fmt"

	"brinehead/fluids"
)

// ITTC Recommended Procedure 7.5-02-01-03, table 1, fresh water of 15 degC under one atmosphere: 999.1026 kg/m3,
// 0.001138 Pa s, 1.1386e-6 m2/s, 1705.8 Pa (of IAPWS-95; IF97 agrees to four digits).
func ExampleFresh() {
	water, err := fluids.Fresh(15, fluids.StandardAtmosphere)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("density              %.2f kg/m3\n", water.Density)
	fmt.Printf("dynamic viscosity    %.6f Pa s\n", water.DynamicViscosity)
	fmt.Printf("kinematic viscosity  %.4e m2/s\n", water.KinematicViscosity())
	fmt.Printf("vapour pressure      %.0f Pa\n", water.VapourPressure)
	// Output:
	// density              999.10 kg/m3
	// dynamic viscosity    0.001138 Pa s
	// kinematic viscosity  1.1386e-06 m2/s
	// vapour pressure      1706 Pa
}

// TEOS-10 by gsw 3.6.16, rho_t_exact(35.16504, 15, 0) and cp_t_exact: 1025.9760 kg/m3 and 3993.09 J/(kg K);
// ITTC 7.5-02-01-03, table 3: 0.001220 Pa s.
func ExampleSea() {
	water, err := fluids.Sea(15, fluids.StandardSalinity, fluids.StandardAtmosphere)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("density            %.1f kg/m3\n", water.Density)
	fmt.Printf("dynamic viscosity  %.6f Pa s\n", water.DynamicViscosity)
	fmt.Printf("heat capacity      %.0f J/(kg K)\n", water.HeatCapacity)
	_, err = fluids.Sea(95, fluids.StandardSalinity, fluids.StandardAtmosphere)
	fmt.Println(err)
	// Output:
	// density            1026.0 kg/m3
	// dynamic viscosity  0.001220 Pa s
	// heat capacity      3994 J/(kg K)
	// IAPWS R13-08 sea water: temperature 95 degC is outside -2 to 80 degC
}

// IAPWS R7-97(2012), table 35: the release's own verification values.
func ExampleVapourPressure() {
	for _, kelvin := range []float64{300, 500, 600} {
		pascal, err := fluids.VapourPressure(kelvin)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Printf("%.0f K  %.8e MPa\n", kelvin, pascal/1e6) // the nine digits the table prints
	}
	// Output:
	// 300 K  3.53658941e-03 MPa
	// 500 K  2.63889776e+00 MPa
	// 600 K  1.23443146e+01 MPa
}

// Millero et al. (2008): standard sea water.
func ExampleAbsoluteSalinity() {
	salinity, err := fluids.AbsoluteSalinity(35)
	fmt.Println(salinity, err)
	// Output: 35.16504 <nil>
}
