package hydraulics_test

import (
	"fmt"
	"math"

	"brinehead/fluids"
	"brinehead/hydraulics"
)

// coefficient names a fitting and gives its loss coefficient in a bore (m) of new steel.
func coefficient(name string, bore float64) float64 {
	e, err := hydraulics.FindFitting(name)
	if err != nil {
		fmt.Println(err)
		return math.NaN()
	}
	c, err := e.Coefficient(hydraulics.BareDimensions(bore, 4.5e-5))
	if err != nil {
		fmt.Println(err)
	}
	return c.K
}

// Crane TP-410 (2009), example 7-2: a valve of Kv 500 in a pipe of 154 mm: K 3.6, 240 bores and 37.0 m of pipe, with f_T
// rounded to 0.015.
func ExampleNewSteelFriction() {
	const bore, flow = 0.154, 0.1
	loss, _ := hydraulics.Fitting{Kv: 500}.Loss(flow, hydraulics.Pipe{Bore: bore}, 1e-6)
	velocity := flow / (math.Pi / 4 * bore * bore)
	k := loss / (velocity * velocity / (2 * fluids.Gravity))
	f, err := hydraulics.NewSteelFriction(bore)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("K %.1f, f_T %.3f, L/D %.0f, L %.1f m\n", k, f, k/f, k/f*bore)
	// Output:
	// K 3.6, f_T 0.015, L/D 241, L 37.2 m
}

// Crane TP-410 (2009), example 7-3: an angle valve in a pipe of 97.2 mm, K 2.475, Kv 240.2, 150 bores and 14.6 m of
// pipe. Crane's f_T is a rounded 0.0165.
func ExampleCatalogueEntry_Coefficient() {
	const bore = 0.0972
	k := coefficient("angle valve", bore)
	f, err := hydraulics.NewSteelFriction(bore)
	if err != nil {
		fmt.Println(err)
		return
	}
	// Kv is the flow (m3/h) of water of 1000 kg/m3 at 1 bar
	kv := 3600 * math.Pi / 4 * bore * bore * math.Sqrt(2*1e5/1000/k)
	fmt.Printf("f_T %.4f, K %.2f, Kv %.0f, L/D %.0f, L %.1f m\n", f, k, kv, k/f, k/f*bore)
	// Output:
	// f_T 0.0165, K 2.47, Kv 240, L/D 150, L 14.6 m
}

// Crane TP-410 (2009), example 7-4: a 150 by 100 mm gate valve with tapered ports of 13 degrees in a pipe of 146 mm. The
// SI edition prints 1.22 and the later one in inches 1.06, each after rounding on the way; without rounding the fluids
// library 1.0.22 has 1.147 with its own f_T.
func ExampleReducedSeat() {
	f, err := hydraulics.NewSteelFriction(0.146)
	if err != nil {
		fmt.Println(err)
		return
	}
	k, err := hydraulics.ReducedSeat(8*f, 0.100/0.146, 13.115*math.Pi/180)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("K %.3f\n", k)
	// Output:
	// K 1.149
}

// A butterfly valve of DN 200 throttled: how many velocity heads it takes.
func ExampleFindFitting() {
	e, err := hydraulics.FindFitting("Butterfly valve")
	if err != nil {
		fmt.Println(err)
		return
	}
	d := hydraulics.BareDimensions(0.2027, 4.5e-5)
	for _, opening := range []float64{1, 0.75, 0.5, 0.25} {
		d.Opening = opening
		c, err := e.Coefficient(d)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Printf("%3.0f %%: %.3g\n", opening*100, c.K)
	}
	_, err = hydraulics.FindFitting("buterfly valve")
	fmt.Println(err)
	// Output:
	// 100 %: 0.633
	//  75 %: 2.4
	//  50 %: 19.1
	//  25 %: 439
	// fitting: found "buterfly valve", want a name in the catalogue, such as "butterfly valve"
}
