package hydraulics_test

import (
	"fmt"
	"math"

	"brinehead/hydraulics"
)

// Y. A. Cengel and J. M. Cimbala, Fluid Mechanics, example 8-6: a pipe widens from 60 to 90 mm in a cone of 20 degrees,
// 7 m/s before it. The book reads K 0.133 off its table and has 0.33 m; Crane's K is 4.6 % more, and so is the loss.
func ExampleExpansion_gradual() {
	k, err := hydraulics.Expansion(60.0/90, 20*math.Pi/180)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("K %.3f, loss %.2f m\n", k, k*7*7/(2*9.81))
	// Output:
	// K 0.139, loss 0.35 m
}

// J. M. Coulson and J. F. Richardson, Chemical Engineering Volume 1, example 3.6: 7.2 m3/h through a sudden enlargement
// from 40 to 50 mm lose 16.7 mm.
//
// K. Subramanya, 1000 Solved Problems in Fluid Mechanics, example 11.1: 450 l/min through a sudden expansion from 60 to
// 90 mm, 20 kPa before it, water of 9.79 kN/m3: 21.73 kPa behind.
func ExampleExpansion_sudden() {
	const g = 9.81
	lost := func(flow, small, large float64) (loss, gained float64) {
		k, err := hydraulics.Expansion(small/large, math.Pi)
		if err != nil {
			fmt.Println(err)
		}
		v1, v2 := flow/(math.Pi/4*small*small), flow/(math.Pi/4*large*large)
		return k * v1 * v1 / (2 * g), (v1*v1 - v2*v2) / (2 * g)
	}
	loss, _ := lost(7.2/3600, 0.040, 0.050)
	fmt.Printf("loss %.1f mm\n", loss*1e3)
	loss, gained := lost(0.450/60, 0.060, 0.090)
	fmt.Printf("pressure behind %.2f kPa\n", 20+9.79*(gained-loss))
	// Output:
	// loss 16.7 mm
	// pressure behind 21.73 kPa
}

// Crane TP-410 (2009), example 7-19: water of 60 F runs from a tank by 11.5 ft of head through an entrance, a mitre, a
// gate valve, 10 ft of 3 inch and, after a sudden contraction, 20 ft of 2 inch pipe, schedule 40. Crane
// prints 137 gal/min, 1.3 % less: a ratio of bores rounded to 0.67 and a friction factor read as 0.021, where Colebrook
// has 0.0206, lose that much more.
func ExampleContraction() {
	const (
		foot  = 0.3048
		large = 3.068 * 0.0254
		small = 2.067 * 0.0254
	)
	contraction, err := hydraulics.Contraction(small/large, math.Pi)
	if err != nil {
		fmt.Println(err)
		return
	}
	k := func(fittings ...float64) (sum []hydraulics.Fitting) {
		for _, f := range fittings {
			sum = append(sum, hydraulics.Fitting{Coefficient: hydraulics.Coefficient{K: f}})
		}
		return sum
	}
	wide := hydraulics.Pipe{Length: 10 * foot, Bore: large, Roughness: 4.572e-5}
	narrow := hydraulics.Pipe{Length: 20 * foot, Bore: small, Roughness: 4.572e-5}
	n := &hydraulics.Network{
		Viscosity: 1.121e-6,
		Points:    []hydraulics.Point{{Name: "tank", Fixed: true, Head: 11.5 * foot}, {Name: "step"}, {Name: "open air", Fixed: true}},
		Runs: []hydraulics.Run{
			{Name: "3 in", From: 0, To: 1, Pipe: wide,
				Fittings: k(coefficient("sharp entrance", large), coefficient("single mitre", large), coefficient("gate valve", large))},
			{Name: "2 in", From: 1, To: 2, Pipe: narrow, Fittings: k(contraction, coefficient("exit", small))},
		},
	}
	fmt.Printf("%.0f gal/min\n", solve(n).RunFlows[0]/gpm)
	// Output:
	// 139 gal/min
}
