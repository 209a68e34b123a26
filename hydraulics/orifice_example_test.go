package hydraulics_test

import (
	"fmt"

	"brinehead/hydraulics"
)

// An invented bypass of 150 mm has to lose 20 velocity heads like the cooler it goes round; what hole does its
// throttling plate want, and what will a plate lose that was bored to a whole millimetre?
func ExampleOrificeHole() {
	hole, err := hydraulics.OrificeHole(20, 0.150, hydraulics.OrificeReynolds)
	if err != nil {
		fmt.Println(err)
		return
	}
	k, err := hydraulics.OrificeLoss(0.082, 0.150, hydraulics.OrificeReynolds)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("hole %.1f mm; bored to 82 mm it loses %.1f velocity heads\n", hole*1e3, k)
	// Output:
	// hole 81.3 mm; bored to 82 mm it loses 19.1 velocity heads
}
