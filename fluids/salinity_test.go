package fluids

import "testing"

// Millero et al. (2008): practical salinity 35 is 35.16504 g/kg by definition of the scale; the factor is 1.004715.
func TestAbsoluteSalinity(t *testing.T) {
	for _, c := range [][2]float64{{35, 35.16504}, {10, 10.04715429}, {42, 42.198048}} {
		got, err := AbsoluteSalinity(c[0])
		if err != nil {
			t.Fatal(err)
		}
		within(t, "absolute salinity", got, c[1], 0.5e-8)
	}
}
