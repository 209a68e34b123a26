package hydraulics_test

import (
	"fmt"
	"math"

	"brinehead/fluids"
	"brinehead/hydraulics"
)

// Crane TP-410 (2009), example 7-35: 100 gal/min join 300 gal/min in an equal 4 inch tee, square. Crane prints K -0.042
// of the branch and 0.325 of the run, and losses of -0.067 and 0.513 ft. Gardel's tests give some 0.2 and 0.08 velocity
// heads less, the scatter of two series of tests: a gain of a quarter head to the branch instead of next to none.
func ExampleCombiningTee() {
	branch, run, err := hydraulics.CombiningTee(1, math.Pi/2)
	if err != nil {
		fmt.Println(err)
		return
	}
	const share = 100.0 / 400
	kBranch, _ := branch.At(share)
	kRun, _ := run.At(share)
	fmt.Printf("K branch %.3f, run %.3f\n", kBranch, kRun)

	const foot = 0.3048
	velocity := 10.08 * foot
	head := velocity * velocity / (2 * fluids.Gravity) / foot
	fmt.Printf("loss branch %.2f ft, run %.2f ft\n", kBranch*head, kRun*head)
	// Output:
	// K branch -0.255, run 0.243
	// loss branch -0.40 ft, run 0.38 ft
}

// An invented cooling main of DN 300 that feeds a cooler through a DN 200 branch: the heads beyond the tee, less that
// before it, as the branch takes more of 600 m3/h.
func ExampleTeeLaw_Heads() {
	law, err := hydraulics.Tee{Bore: 0.3, Branch: 0.2, Angle: math.Pi / 2}.Law()
	if err != nil {
		fmt.Println(err)
		return
	}
	const flow = 600.0 / 3600
	for _, share := range []float64{0, 0.25, 0.5, 1} {
		h := law.Heads(flow, -(1-share)*flow)
		fmt.Printf("%3.0f %%: run %+.3f m, branch %+.3f m\n", share*100, h.Second, h.Branch)
	}
	// Output:
	//   0 %: run -0.009 m, branch -0.269 m
	//  25 %: run -0.000 m, branch -0.270 m
	//  50 %: run -0.013 m, branch -0.358 m
	// 100 %: run -0.099 m, branch -0.794 m
}
