package hydraulics_test

import (
	"fmt"
	"math"

	"brinehead/fluids"
	"brinehead/hydraulics"
)

// Worked examples of pipe flow, each with the book's answer. "Read in a transcription" means that data and answer were
// read in a public transcription of the book's examples, not in the book; "from memory" that they were recalled. Where
// a last digit differs for another reason than these two the example says why: free fall is 9.80665 m/s2 here and
// 9.81 in the books, 0.03 % of a head; and the books read the friction factor off a chart or round it.

// pipeLoss is the friction loss of a pipe, m.
func pipeLoss(length, bore, roughness, flow, nu float64) float64 {
	h, _ := hydraulics.Pipe{Length: length, Bore: bore, Roughness: roughness}.Loss(flow, nu)
	return h
}

// fittingLoss is the loss of fittings of a coefficient k on the velocity in a bore, m.
func fittingLoss(k, bore, flow, nu float64) float64 {
	h, _ := hydraulics.Fitting{Coefficient: hydraulics.Coefficient{K: k}}.Loss(flow, hydraulics.Pipe{Bore: bore}, nu)
	return h
}

// darcy is the friction factor of a pipe at a flow.
func darcy(bore, roughness, flow, nu float64) float64 {
	f, err := hydraulics.Colebrook(hydraulics.Pipe{Bore: bore}.Reynolds(flow, nu), roughness/bore)
	if err != nil {
		fmt.Println(err)
	}
	return f
}

// velocity is the mean velocity in a bore, m/s.
func velocity(bore, flow float64) float64 { return flow / (math.Pi / 4 * bore * bore) }

// velocityHead is the head of the mean velocity in a bore, m.
func velocityHead(bore, flow float64) float64 {
	return velocity(bore, flow) * velocity(bore, flow) / (2 * fluids.Gravity)
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

// Y. A. Cengel and J. M. Cimbala, Fluid Mechanics, example 8-3 (read in a transcription): water of 999 kg/m3 and
// 1.138e-3 Pa s, 6 l/s through 60 m of stainless pipe of 50 mm, roughness 0.002 mm. The book: f 0.0172, 9.85 m,
// 96.5 kPa, 579 W. Ours is 0.3 % less: the book's figures are those of f 0.0172 at 3.06 m/s, where the unrounded
// velocity is 3.0558.
func ExamplePipe_Loss_stainless() {
	const rho, flow, nu = 999.0, 0.006, 1.138e-3 / 999
	loss := pipeLoss(60, 0.05, 2e-6, flow, nu)
	drop := rho * fluids.Gravity * loss
	fmt.Printf("f %.4f (%.6f)\n", darcy(0.05, 2e-6, flow, nu), darcy(0.05, 2e-6, flow, nu))
	fmt.Printf("%.2f m, %.1f kPa, %.0f W\n", loss, drop/1e3, drop*flow)
	// Output:
	// f 0.0172 (0.017188)
	// 9.82 m, 96.2 kPa, 577 W
}

// Cengel and Cimbala, examples 8-4 and 8-5 (read in a transcription): the bore of a smooth plastic duct that loses 20 m
// of air (nu 1.655e-5 m2/s) over 150 m at 0.35 m3/s, and the flow where the duct, its bore rounded to 0.267 m, is twice
// as long. The book: 0.267 m, f 0.0180, 6.24 m/s; the flow falls by 0.11 m3/s.
func ExamplePipe_Loss_duct() {
	const flow, nu = 0.35, 1.655e-5
	bore := root(0.1, 1, func(bore float64) float64 { return pipeLoss(150, bore, 0, flow, nu) - 20 })
	less := flow - root(0.01, 1, func(flow float64) float64 { return 20 - pipeLoss(300, 0.267, 0, flow, nu) })
	fmt.Printf("%.3f m, f %.4f, %.2f m/s\n", bore, darcy(bore, 0, flow, nu), velocity(bore, flow))
	fmt.Printf("%.2f m3/s less (%.3f)\n", less, less)
	// Output:
	// 0.267 m, f 0.0180, 6.24 m/s
	// 0.11 m3/s less (0.113)
}

// Cengel and Cimbala, example 8-6 (read in a transcription): water at 7 m/s and 150 kPa widens gradually from 60 to
// 90 mm, with K 0.133 on the velocity before and a kinetic energy 1.06 times the mean's. The book: 0.33 m lost, 168 kPa
// behind.
func ExampleFitting_Loss_enlargement() {
	const rho, alpha = 1000.0, 1.06
	flow := 7 * math.Pi / 4 * 0.06 * 0.06
	loss := fittingLoss(0.133, 0.06, flow, 1e-6)
	gain := alpha * (velocityHead(0.06, flow) - velocityHead(0.09, flow))
	behind := 150 + rho*fluids.Gravity*(gain-loss)/1e3
	fmt.Printf("%.2f m (%.4f), %.0f kPa (%.2f)\n", loss, loss, behind, behind)
	// Output: 0.33 m (0.3323), 168 kPa (167.58)
}

// Cengel and Cimbala, example 8-8 (read in a transcription): water of 999.7 kg/m3 and 1.307e-3 Pa s, 6 l/s through 89 m
// of cast iron of 50 mm, roughness 0.26 mm, with an inlet of K 0.5, two elbows of 0.3, a gate valve of 0.2 and an exit
// of 1.06, up 4 m. The book: f 0.0315, and the surface must stand at 31.8 m.
func ExamplePipe_Loss_castIron() {
	const flow, nu = 0.006, 1.307e-3 / 999.7
	surface := 4 + pipeLoss(89, 0.05, 0.26e-3, flow, nu) + fittingLoss(0.5+2*0.3+0.2+1.06, 0.05, flow, nu)
	fmt.Printf("f %.4f, %.1f m (%.2f)\n", darcy(0.05, 0.26e-3, flow, nu), surface, surface)
	// Output: f 0.0315, 31.8 m (31.83)
}

// B. S. Massey, Mechanics of Fluids, example 7.1 (read in a transcription): 50 l/s of nu 1.14e-6 m2/s through 300 m of
// 150 mm, roughness 0.15 mm. The book: 16.81 m. Ours is 0.8 % less: the book reads Fanning's factor off the chart as
// 0.00515, where a quarter of Colebrook's is 0.00511.
func ExamplePipe_Loss_chart() {
	const flow, nu = 0.05, 1.14e-6
	fmt.Printf("Fanning's f %.5f: %.2f m\n", darcy(0.15, 0.15e-3, flow, nu)/4, pipeLoss(300, 0.15, 0.15e-3, flow, nu))
	fmt.Printf("Fanning's f 0.00515: %.2f m\n", fittingLoss(4*0.00515*300/0.15, 0.15, flow, nu))
	// Output:
	// Fanning's f 0.00511: 16.68 m
	// Fanning's f 0.00515: 16.82 m
}

// Massey, example 7.3 (read in a transcription): the bore that loses 9 m over 180 m at 85 l/s, roughness and water as
// in example 7.1. The book: 0.187 m.
func ExamplePipe_Loss_bore() {
	bore := root(0.05, 0.5, func(bore float64) float64 { return pipeLoss(180, bore, 0.15e-3, 0.085, 1.14e-6) - 9 })
	fmt.Printf("%.3f m (%.4f)\n", bore, bore)
	// Output: 0.187 m (0.1873)
}

// B. R. Munson, D. F. Young and T. H. Okiishi, Fundamentals of Fluid Mechanics, example 8.8 (read in a transcription):
// 0.0267 ft3/s of water (1.94 slug/ft3, 2.34e-5 lbf s/ft2, 62.4 lbf/ft3) up 20 ft through 60 ft of copper of 0.0625 ft,
// roughness 5e-6 ft, out of a faucet of 0.5 inch. The book: Re 45 000; at the foot 10.7 psi without losses, 21.3 with
// the pipe's, 30.5 with four elbows of K 1.5, a globe valve of 10 and the faucet of 2. It rounds the
// Reynolds number and every pressure.
func ExamplePipe_Loss_copper() {
	const (
		foot = 0.3048
		bore = 0.0625 * foot
		flow = 0.0267 * foot * foot * foot
		nu   = 2.34e-5 / 1.94 * foot * foot
	)
	psi := func(head float64) float64 { return head / foot * 62.4 / 144 }
	none := 20*foot + velocityHead(0.5/12*foot, flow) - velocityHead(bore, flow)
	pipe := none + pipeLoss(60*foot, bore, 5e-6*foot, flow, nu)
	all := pipe + fittingLoss(4*1.5+10+2, bore, flow, nu)
	fmt.Printf("Re %.0f\n", hydraulics.Pipe{Bore: bore}.Reynolds(flow, nu))
	fmt.Printf("%.2f, %.2f, %.2f psi\n", psi(none), psi(pipe), psi(all))
	// Output:
	// Re 45095
	// 10.74, 21.34, 30.52 psi
}

// R. W. Fox and A. T. McDonald, Introduction to Fluid Mechanics, example 8.7 (read in a transcription): a standpipe of
// 80 ft feeds 680 ft of 4 inch pipe, f 0.031, with a gate valve as long as 8 bores, discharging into the air with one
// velocity head. The book: 350 gal/min, which its 32.2 ft/s2 put at 350.1.
func ExampleSolver_standpipe() {
	const foot, bore = 0.3048, 0.3048 / 3
	friction := constantFriction(0.031, 680*foot+8*bore, bore)
	jet := hydraulics.Fitting{Name: "jet", Coefficient: hydraulics.Coefficient{K: 1}}
	n := &hydraulics.Network{
		Viscosity: 1e-6,
		Points:    []hydraulics.Point{{Name: "standpipe", Fixed: true, Head: 80 * foot}, {Name: "air", Fixed: true}},
		Runs:      []hydraulics.Run{{Name: "main", From: 0, To: 1, Pipe: hydraulics.Pipe{Bore: bore}, Fittings: append(friction, jet)}},
	}
	flow := solve(n).RunFlows[0] / gpm
	fmt.Printf("%.0f gal/min (%.1f)\n", flow, flow)
	// Output: 350 gal/min (349.9)
}

// K. Subramanya, 1000 Solved Problems in Fluid Mechanics, example 11.31 (read in a transcription): a pump at 100 m lifts
// 20 l/s from 95 to 110 m, by 20 m of 150 mm with an inlet of K 0.5 and 300 m of 120 mm with an exit of 1, f 0.02;
// water of 9.79 kN/m3, atmosphere 10 m. The book: 4.57 kW to the water, 46.29 kPa absolute before the pump. The network
// ends on either side of the pump, which draws its flow here and puts it in there.
func ExampleSolver_suction() {
	const flow, weight = 0.020, 9.79 // m3/s, kN/m3
	inlet := hydraulics.Fitting{Name: "inlet", Coefficient: hydraulics.Coefficient{K: 0.5}}
	exit := hydraulics.Fitting{Name: "exit", Coefficient: hydraulics.Coefficient{K: 1}}
	n := &hydraulics.Network{
		Viscosity: 1e-6,
		Points: []hydraulics.Point{
			{Name: "sump", Fixed: true, Head: 95}, {Name: "before the pump", Draw: flow},
			{Name: "behind the pump", Draw: -flow}, {Name: "tank", Fixed: true, Head: 110}},
		Runs: []hydraulics.Run{
			{Name: "suction", From: 0, To: 1, Pipe: hydraulics.Pipe{Bore: 0.15}, Fittings: append(constantFriction(0.02, 20, 0.15), inlet)},
			{Name: "delivery", From: 2, To: 3, Pipe: hydraulics.Pipe{Bore: 0.12}, Fittings: append(constantFriction(0.02, 300, 0.12), exit)},
		},
	}
	heads := solve(n).Heads
	fmt.Printf("%.2f kW\n", weight*flow*(heads[2]-heads[1]))
	fmt.Printf("%.2f kPa absolute\n", weight*(10+heads[1]-100-velocityHead(0.15, flow)))
	// Output:
	// 4.57 kW
	// 46.29 kPa absolute
}

// F. M. White, Fluid Mechanics, example 6.7 (7th ed., from memory): 0.2 m3/s of oil of nu 1e-5 m2/s through 500 m of cast
// iron of 200 mm, roughness 0.26 mm. The book: f 0.0225, 117 m. Its f is 1 % below Colebrook's; a velocity rounded up
// from 6.37 to 6.4 m/s makes up for it.
func ExamplePipe_Loss_oil() {
	loss := pipeLoss(500, 0.2, 0.26e-3, 0.2, 1e-5)
	fmt.Printf("f %.4f, %.0f m (%.2f)\n", darcy(0.2, 0.26e-3, 0.2, 1e-5), loss, loss)
	// Output: f 0.0227, 117 m (117.39)
}

// White, example 6.8 (7th ed., from memory): the flow of oil of nu 2e-5 m2/s that loses 8 m in 100 m of 300 mm, roughness
// 0.0002 bores. The book: 4.84 m/s, 0.342 m3/s, f 0.0201.
func ExamplePipe_Loss_flow() {
	const bore, roughness, nu = 0.3, 0.0002 * 0.3, 2e-5
	flow := root(0.01, 1, func(flow float64) float64 { return 8 - pipeLoss(100, bore, roughness, flow, nu) })
	fmt.Printf("%.2f m/s, %.3f m3/s, f %.4f\n", velocity(bore, flow), flow, darcy(bore, roughness, flow, nu))
	// Output: 4.84 m/s, 0.342 m3/s, f 0.0201
}

// White, example 6.18 (7th ed., from memory): the three pipes of example 6.16 join reservoirs at 20, 100 and 40 m. The
// book: -52.4, 47.1 and 6.0 m3/h towards the junction, which stands at 34.3 m. Ours differs by up to 3 %, in the least
// flow: the book ends its trials where 0.7 m3/h more come to the junction than leave it.
func ExampleSolver_threeReservoirs() {
	pipe := func(from int, length, bore, roughness float64) hydraulics.Run {
		return hydraulics.Run{From: from, To: 3, Pipe: hydraulics.Pipe{Length: length, Bore: bore, Roughness: roughness}}
	}
	n := &hydraulics.Network{
		Viscosity: 1.02e-6,
		Points: []hydraulics.Point{
			{Name: "1", Fixed: true, Head: 20}, {Name: "2", Fixed: true, Head: 100}, {Name: "3", Fixed: true, Head: 40}, {Name: "J"}},
		Runs: []hydraulics.Run{pipe(0, 100, 0.08, 0.24e-3), pipe(1, 150, 0.06, 0.12e-3), pipe(2, 80, 0.04, 0.20e-3)},
	}
	out := solve(n)
	for i, flow := range out.RunFlows {
		fmt.Printf("%d %.2f m3/h\n", i+1, flow*3600)
	}
	fmt.Printf("junction %.2f m\n", out.Heads[3])
	// Output:
	// 1 -52.84 m3/h
	// 2 47.00 m3/h
	// 3 5.84 m3/h
	// junction 34.54 m
}
