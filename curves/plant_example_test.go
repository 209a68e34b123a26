package curves_test

import (
	"fmt"

	"brinehead/curves"
	"brinehead/fluids"
)

const (
	foot = 0.3048
	psi  = 6894.757293168361
)

// npsh puts a book's own figures into the definition: pressures in Pa, specific weight in N/m3, lengths in m.
func npsh(atmosphere, vapour, weight, suctionHead, datum float64) float64 {
	p := curves.Plant{Atmosphere: atmosphere, Water: fluids.State{Density: weight / fluids.Gravity, VapourPressure: vapour}, Pumps: []curves.Pump{{Datum: datum}}}
	return p.NPSHAvailable(0, suctionHead)
}

// NPSH available, four worked examples.
func ExamplePlant_NPSHAvailable() {
	const cubicFoot = foot * foot * foot
	pound := psi * 0.0254 * 0.0254 // force, N

	// Crane, Technical Paper 410, example 7-32: a tank under 5 psi gauge, the pump 25 ft above its level, 6 ft of loss,
	// water of 60 degF (0.256 psi, 62.364 lb/ft3). The book: 13.89 ft.
	weight := 62.364 * pound / cubicFoot
	fmt.Printf("%.2f ft\n", npsh((14.696+5)*psi, 0.256*psi, weight, -6*foot, 25*foot)/foot)

	// F. M. White, Fluid Mechanics, example 11.3 (from memory): 14.7 psia, 6 ft of loss, NPSH required 40 ft; with the inlet
	// 12.7 ft below the surface in water of 60 degF (0.26 psi, 62.4 lb/ft3) the pump has just that.
	fmt.Printf("%.1f ft\n", npsh(14.7*psi, 0.26*psi, 62.4*pound/cubicFoot, -6*foot, -12.68*foot)/foot)

	// L. Bachus and A. Custodio, Know and Understand Centrifugal Pumps, chapter 2: 33.9 ft of atmosphere and 6 ft of height,
	// less 0.839 ft of vapour pressure and two losses of 2 ft. The book: 35.061 ft.
	fmt.Printf("%.3f ft\n", npsh(33.9*62.4*pound/cubicFoot*foot, 0.839*62.4*pound/cubicFoot*foot, 62.4*pound/cubicFoot, (6-2-2)*foot, 0)/foot)

	// C. J. Schaschke, Worked Examples in Fluid Mechanics, example 9.6: 0.94 of 101.3 kPa, vapour pressure 18 kPa, 970 kg/m3,
	// a lift of 3 m, 0.5 m of loss, NPSH required 5 m. The book: the level may fall to 0.385 m above the lowest.
	fmt.Printf("%.2f m\n", npsh(0.94*101.3e3, 18e3, 970*9.81, 0.385-0.5, 3))
	// Output:
	// 13.89 ft
	// 40.0 ft
	// 35.061 ft
	// 5.00 m
}
