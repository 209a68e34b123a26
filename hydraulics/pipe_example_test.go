package hydraulics_test

import (
	"fmt"
	"math"

	"brinehead/hydraulics"
)

// Worked examples of pipe flow. Marks: "transcribed" were read in public transcriptions of the book, "memory" recalled; all
// were worked again here. Where our last digit differs the reason is said: g is 9.80665 here and 9.81 there, and the books
// read the friction factor off a chart.

// pipeLoss is the friction loss of a pipe, m.
func pipeLoss(length, bore, roughness, flow, nu float64) float64 {
	h, _ := hydraulics.Pipe{Length: length, Bore: bore, Roughness: roughness}.Loss(flow, nu)
	return h
}

// root finds where a falling function crosses nought between low and high.
func root(low, high float64, f func(float64) float64) float64 {
	for range 100 {
		if middle := (low + high) / 2; f(middle) > 0 {
			low = middle
		} else {
			high = middle
		}
	}
	return (low + high) / 2
}

// Y. A. Cengel and J. M. Cimbala, Fluid Mechanics, example 8-3 (transcribed): water of 999 kg/m3 and 1.138e-3 Pa s, 0.006
// m3/s through 60 m of stainless pipe of 50 mm, roughness 0.002 mm. The book: f 0.0172, 9.85 m, 96.5 kPa; ours is 0.3 % less,
// since its f is rounded up.
func ExamplePipe_Loss_cengel() {
	const nu = 1.138e-3 / 999
	f, err := hydraulics.Colebrook(hydraulics.Pipe{Bore: 0.05}.Reynolds(0.006, nu), 0.002/50)
	h := pipeLoss(60, 0.05, 2e-6, 0.006, nu)
	fmt.Printf("f %.4f, %.2f m, %.1f kPa, %v\n", f, h, h*999*9.80665/1e3, err)
	// Output: f 0.0172, 9.82 m, 96.2 kPa, <nil>
}

// Cengel and Cimbala, example 8-4 (transcribed): the bore of a smooth plastic pipe that loses 20 m over 150 m of air (nu
// 1.655e-5) at 0.35 m3/s. The book: 0.267 m; example 8-5, that bore over 300 m: the flow falls by 0.11 m3/s.
func ExamplePipe_Loss_bore() {
	bore := root(0.1, 1, func(d float64) float64 { return pipeLoss(150, d, 0, 0.35, 1.655e-5) - 20 })
	flow := root(0.01, 1, func(q float64) float64 { return 20 - pipeLoss(300, bore, 0, q, 1.655e-5) })
	fmt.Printf("%.3f m, %.2f m3/s less\n", bore, 0.35-flow)
	// Output: 0.267 m, 0.11 m3/s less
}

// Cengel and Cimbala, example 8-8 (transcribed): water at 10 degC (999.7 kg/m3, 1.307e-3 Pa s), 6 l/s through 89 m of cast
// iron of 50 mm (0.26 mm) with losses of 0.5 + 2 x 0.3 + 0.2 + 1.06, to an outlet 4 m up. The book: f 0.0315, the surface must
// stand at 31.8 m.
func ExamplePipe_Loss_castIron() {
	const nu = 1.307e-3 / 999.7
	pipe := hydraulics.Pipe{Length: 89, Bore: 0.05, Roughness: 0.26e-3}
	losses, _ := hydraulics.Fitting{Coefficient: hydraulics.Coefficient{K: 0.5 + 2*0.3 + 0.2 + 1.06}}.Loss(0.006, pipe, nu)
	fmt.Printf("%.1f m\n", 4+pipeLoss(89, 0.05, 0.26e-3, 0.006, nu)+losses)
	// Output: 31.8 m
}

// B. S. Massey, Mechanics of Fluids, examples 7.1 and 7.3 (transcribed), nu 1.14e-6, roughness 0.15 mm: 50 l/s through 300 m
// of 150 mm lose 16.81 m by a friction factor read off the chart, 16.7 m exactly; and the bore that loses 9 m over 180 m at 85
// l/s is 0.187 m.
func ExamplePipe_Loss_massey() {
	fmt.Printf("%.1f m\n", pipeLoss(300, 0.15, 0.15e-3, 0.05, 1.14e-6))
	fmt.Printf("%.3f m\n", root(0.05, 0.5, func(d float64) float64 { return pipeLoss(180, d, 0.15e-3, 0.085, 1.14e-6) - 9 }))
	// Output:
	// 16.7 m
	// 0.187 m
}

// B. R. Munson, D. F. Young and T. H. Okiishi, Fundamentals of Fluid Mechanics, example 8.8 (transcribed): 12 gal/min up 20 ft
// through 60 ft of copper of 0.0625 ft (5e-6 ft), rho 1.94 slug/ft3, mu 2.34e-5 lb s/ft2, out of a faucet of 0.5 in. The book:
// p1 10.7 psi without losses, 21.3 with the pipe's, 30.5 with 4 elbows of 1.5, a globe valve of 10 and the faucet of 2.
func ExamplePipe_Loss_munson() {
	const foot, psi = 0.3048, 6894.757293168361
	weight := 62.4 * psi / (foot * 12 * 12) // N/m3: 62.4 lb/ft3
	flow := 0.0267 * foot * foot * foot
	nu := 2.34e-5 / 1.94 * foot * foot
	velocity := func(d float64) float64 { return flow / (math.Pi / 4 * d * d) }
	none := 20*foot + (math.Pow(velocity(0.5/12*foot), 2)-math.Pow(velocity(0.0625*foot), 2))/(2*9.80665)
	pipe := none + pipeLoss(60*foot, 0.0625*foot, 5e-6*foot, flow, nu)
	fittings, _ := hydraulics.Fitting{Coefficient: hydraulics.Coefficient{K: 4*1.5 + 10 + 2}}.Loss(flow, hydraulics.Pipe{Bore: 0.0625 * foot}, nu)
	fmt.Printf("%.1f, %.1f, %.1f psi\n", none*weight/psi, pipe*weight/psi, (pipe+fittings)*weight/psi)
	// Output: 10.7, 21.3, 30.5 psi
}

// R. W. Fox and A. T. McDonald, Introduction to Fluid Mechanics, example 8.7 (transcribed): a standpipe of 80 ft feeds 680 ft of
// 4-inch pipe with f 0.031 and a gate valve of 8 bores, discharging into the air. The book: 350 gal/min.
func ExampleSolver_standpipe() {
	const foot = 0.3048
	n := &hydraulics.Network{Viscosity: 1e-6, Points: []hydraulics.Point{{Name: "standpipe", Fixed: true, Head: 80 * foot}, {Name: "outlet", Fixed: true}},
		Runs: []hydraulics.Run{{Name: "main", From: 0, To: 1, Pipe: hydraulics.Pipe{Bore: foot / 3},
			Fittings: []hydraulics.Fitting{{Coefficient: hydraulics.Coefficient{K: 0.031*(680/(1.0/3)+8) + 1}}}}}} // and the jet's velocity head
	fmt.Printf("%.0f gal/min\n", solve(n).RunFlows[0]/gpm)
	// Output: 350 gal/min
}

// J. M. Coulson and J. F. Richardson, Chemical Engineering, volume 1, example 3.6 (transcribed): 7.2 m3/h through a sudden
// enlargement from 40 to 50 mm. The book: 16.7 mm. K. Subramanya, 1000 Solved Problems in Fluid Mechanics, example 11.1
// (transcribed): 450 l/min from 60 to 90 mm, 20 kPa before, 9.79 kN/m3. The book: 21.73 kPa behind.
func ExampleExpansion() {
	loss := func(small, large, flow float64) float64 {
		k, err := hydraulics.Expansion(small/large, math.Pi) // sudden: 180 degrees between the walls
		if err != nil {
			fmt.Println(err)
		}
		h, _ := hydraulics.Fitting{Coefficient: hydraulics.Coefficient{K: k, Bore: small}}.Loss(flow, hydraulics.Pipe{Bore: small}, 1e-6)
		return h
	}
	fmt.Printf("%.1f mm\n", loss(0.04, 0.05, 7.2/3600)*1e3)
	flow := 0.45 / 60
	head := func(d float64) float64 { v := flow / (math.Pi / 4 * d * d); return v * v / (2 * 9.80665) }
	fmt.Printf("%.2f kPa\n", 20+9.79*(head(0.06)-head(0.09)-loss(0.06, 0.09, flow)))
	// Output:
	// 16.7 mm
	// 21.73 kPa
}

// F. M. White, Fluid Mechanics, examples 6.7 and 6.8 (7th ed., memory): oil of nu 1e-5, 0.2 m3/s through 500 m of cast iron of
// 200 mm (0.26 mm): f 0.0225 off the chart and 117 m; and the flow of a fluid of nu 2e-5 through 100 m of 300 mm, e/d 0.0002, under
// 8 m: 4.84 m/s, 0.342 m3/s.
func ExamplePipe_Loss_white() {
	fmt.Printf("%.0f m\n", pipeLoss(500, 0.2, 0.26e-3, 0.2, 1e-5))
	q := root(0.01, 1, func(q float64) float64 { return 8 - pipeLoss(100, 0.3, 0.06e-3, q, 2e-5) })
	fmt.Printf("%.2f m/s, %.3f m3/s\n", q/(math.Pi/4*0.09), q)
	// Output:
	// 117 m
	// 4.84 m/s, 0.342 m3/s
}

// White, example 6.18 (memory): three reservoirs at 20, 100 and 40 m joined by the pipes of example 6.16. The book works by
// trial to -52.4, 47.1 and 6.0 m3/h and a junction at 34.3 m; the exact answer lies within its last trial.
func ExampleSolver_threeReservoirs() {
	pipe := func(to int, length, bore, roughness float64) hydraulics.Run {
		return hydraulics.Run{From: 0, To: to, Pipe: hydraulics.Pipe{Length: length, Bore: bore, Roughness: roughness}}
	}
	n := &hydraulics.Network{Viscosity: 1.02e-6, Points: []hydraulics.Point{{Name: "J"}, {Name: "1", Fixed: true, Head: 20}, {Name: "2", Fixed: true, Head: 100}, {Name: "3", Fixed: true, Head: 40}},
		Runs: []hydraulics.Run{pipe(1, 100, 0.08, 0.24e-3), pipe(2, 150, 0.06, 0.12e-3), pipe(3, 80, 0.04, 0.20e-3)}}
	out := solve(n)
	for i, q := range out.RunFlows {
		fmt.Printf("%d %.1f m3/h\n", i+1, -q*3600)
	}
	fmt.Printf("junction %.1f m\n", out.Heads[0])
	// Output:
	// 1 -52.8 m3/h
	// 2 47.0 m3/h
	// 3 5.8 m3/h
	// junction 34.5 m
}
