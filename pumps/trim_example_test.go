package pumps_test

import (
	"fmt"
	"math"

	"brinehead/pumps"
)

// Hydraulic Institute, Engineering Data Book, trimming by the square law: an impeller of 270 mm gives 454.2 m3/h at 24.38 m (2000 gal/min,
// 80 ft), and 20.42 m (67 ft) are wanted. The book: 247 mm (9.72 in), and 1835 gal/min at 9.75 in, which is 416.8 m3/h.
// The other two methods ask for a smaller cut; the type number (1750 rpm, ours) is asked for their limits.
func ExampleTrimMethod_Diameter() {
	r := math.Sqrt(20.42 / 24.38)
	for _, m := range pumps.TrimMethods() {
		lambda, err := m.Diameter(r, 0.5)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Printf("%s: %.1f mm\n", m, 270*lambda)
	}
	for _, c := range pumps.TrimCautions(247.0/270, 247.0/270, pumps.TypeNumber(1750, 454.2/3600, 24.38)) {
		fmt.Println(c.Text)
	}
	fmt.Printf("%.1f m3/h at 9.75 in\n", 454.2*9.75/10.625)
	// Output:
	// plain affinity: 247.1 mm
	// ISO 9906: 253.0 mm
	// Stepanoff's chart: 251.7 mm
	// a cut of 8.52 % is beyond the 5 % that ISO 9906 answers for
	// type number 1.07 is over 1: cut in steps, with a test between
	// 416.8 m3/h at 9.75 in
}

// US Department of Energy, Pumping Systems Tip Sheet 7 (from memory): a pump with an impeller of 14 in gives 3000 gal/min at 165 ft where
// 125 ft would do. The sheet takes plain affinity on the head at the same flow: 12.2 in, and from 156 to 118 hp at 80 %. ISO 9906 with an inlet
// edge of half the diameter cuts less, and says how far plain affinity would cut too deep.
func ExampleTrimMethod_Ratio() {
	r := math.Sqrt(125.0 / 165)
	plain, err := pumps.PlainAffinity.Diameter(r, 0)
	if err != nil {
		fmt.Println(err)
		return
	}
	iso, err := pumps.ISO9906.Diameter(r, 0.5)
	if err != nil {
		fmt.Println(err)
		return
	}
	left, err := pumps.ISO9906.Ratio(plain, 0.5)
	if err != nil {
		fmt.Println(err)
		return
	}
	horse := func(feet float64) float64 { return 3000 * feet / 3960 / 0.80 }
	fmt.Printf("%.1f in by plain affinity, %.1f in by ISO 9906; %.0f ft left with the first\n", 14*plain, 14*iso, 165*left*left)
	fmt.Printf("%.0f and %.0f hp\n", horse(165), horse(125))
	// Output:
	// 12.2 in by plain affinity, 12.7 in by ISO 9906; 112 ft left with the first
	// 156 and 118 hp
}
