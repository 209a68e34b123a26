package pumps_test

import (
	"fmt"

	"brinehead/pumps"
)

// R. L. Daugherty and J. B. Franzini, Fluid Mechanics with Engineering Applications, example 17.2: 600 rpm, 2000 gal/min at 150 ft
// a stage. The book: a specific speed of 626 in US units.
func ExampleSpecificSpeed() {
	metric := pumps.SpecificSpeed(600, 2000*gpm, 150*foot)
	fmt.Printf("%.0f US, %.1f metric, type number %.3f\n", pumps.SpecificSpeedUS(metric), metric, pumps.TypeNumber(600, 2000*gpm, 150*foot))
	// Output: 626 US, 12.1 metric, type number 0.229
}
