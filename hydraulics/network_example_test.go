package hydraulics_test

import (
	"fmt"
	"math"

	"brinehead/fluids"
	"brinehead/hydraulics"
)

// gpm is the US gallon a minute, m3/s.
const gpm = 3.785411784e-3 / 60

// solve builds and solves a network, or says why not.
func solve(n *hydraulics.Network) *hydraulics.Solution {
	solver, err := hydraulics.NewSolver(n)
	if err != nil {
		fmt.Println(err)
		return &hydraulics.Solution{}
	}
	var out hydraulics.Solution
	if err := solver.Solve(&out); err != nil {
		fmt.Println(err)
	}
	return &out
}

// constantFriction is a pipe whose friction factor the book fixes: its loss is f L/D velocity heads.
func constantFriction(darcy, length, bore float64) []hydraulics.Fitting {
	return []hydraulics.Fitting{{Name: "friction", Coefficient: hydraulics.Coefficient{K: darcy * length / bore}}}
}

// F. M. White, Fluid Mechanics, example 6.16 (7th ed.; data from memory, answer 10.2 m3/h): three pipes in series,
// a pressure drop of 150 kPa and a fall of 5 m.
func ExampleSolver_series() {
	const rho, nu = 1000.0, 1.02e-6
	total := 150e3/(rho*9.81) + 5
	n := &hydraulics.Network{
		Viscosity: nu,
		Points:    []hydraulics.Point{{Name: "A", Fixed: true, Head: total}, {Name: "1"}, {Name: "2"}, {Name: "B", Fixed: true}},
		Runs: []hydraulics.Run{
			{Name: "1", From: 0, To: 1, Pipe: hydraulics.Pipe{Length: 100, Bore: 0.08, Roughness: 0.24e-3}},
			{Name: "2", From: 1, To: 2, Pipe: hydraulics.Pipe{Length: 150, Bore: 0.06, Roughness: 0.12e-3}},
			{Name: "3", From: 2, To: 3, Pipe: hydraulics.Pipe{Length: 80, Bore: 0.04, Roughness: 0.20e-3}},
		},
	}
	fmt.Printf("%.1f m3/h\n", solve(n).RunFlows[0]*3600)
	// Output: 10.2 m3/h
}

// F. M. White, Fluid Mechanics, example 6.17 (7th ed.; data from memory): the same three pipes side by side under
// 20.3 m take 62.5 + 25.9 + 11.4 m3/h.
func ExampleSolver_parallel() {
	n := &hydraulics.Network{
		Viscosity: 1.02e-6,
		Points:    []hydraulics.Point{{Name: "A", Fixed: true, Head: 150e3/9810 + 5}, {Name: "B", Fixed: true}},
		Runs: []hydraulics.Run{
			{Name: "1", From: 0, To: 1, Pipe: hydraulics.Pipe{Length: 100, Bore: 0.08, Roughness: 0.24e-3}},
			{Name: "2", From: 0, To: 1, Pipe: hydraulics.Pipe{Length: 150, Bore: 0.06, Roughness: 0.12e-3}},
			{Name: "3", From: 0, To: 1, Pipe: hydraulics.Pipe{Length: 80, Bore: 0.04, Roughness: 0.20e-3}},
		},
	}
	for _, q := range solve(n).RunFlows {
		fmt.Printf("%.1f m3/h\n", q*3600)
	}
	// Output:
	// 62.5 m3/h
	// 25.9 m3/h
	// 11.4 m3/h
}

// J. F. Douglas and others, Fluid Mechanics, example 14.4: reservoir A stands 16 m above B and 24 m above C; one
// pipe of 120 m and 120 mm to a junction, 60 m of 75 mm from there to B, 40 m of 60 mm to C, Fanning's f 0.01.
// The book: 0.0206 = 0.0105 + 0.0101 m3/s.
func ExampleSolver_reservoirs() {
	n := &hydraulics.Network{
		Viscosity: 1e-6,
		Points: []hydraulics.Point{
			{Name: "A", Fixed: true, Head: 24}, {Name: "B", Fixed: true, Head: 8}, {Name: "C", Fixed: true}, {Name: "J"}},
		Runs: []hydraulics.Run{
			{Name: "AJ", From: 0, To: 3, Pipe: hydraulics.Pipe{Bore: 0.12}, Fittings: constantFriction(0.04, 120, 0.12)},
			{Name: "JB", From: 3, To: 1, Pipe: hydraulics.Pipe{Bore: 0.075}, Fittings: constantFriction(0.04, 60, 0.075)},
			{Name: "JC", From: 3, To: 2, Pipe: hydraulics.Pipe{Bore: 0.06}, Fittings: constantFriction(0.04, 40, 0.06)},
		},
	}
	for _, q := range solve(n).RunFlows {
		fmt.Printf("%.4f m3/s\n", q)
	}
	// Output:
	// 0.0206 m3/s
	// 0.0105 m3/s
	// 0.0101 m3/s
}

// C. J. Schaschke, Worked Examples in Fluid Mechanics, example 8.12: a square A B C D with dp = 16600 q2 (Pa, l/s)
// in each side. 3 l/s come in at A; 0.5 l/s more at B, and 0.9 l/s leave at D, the rest at C. The book: q in AB
// 1.175 l/s, pressure drops 22.918 (AB), 46.573 (BC), 55.288 (AD) and 14.203 kPa (DC).
func ExampleSolver_loop() {
	side := func(name string, from, to int) hydraulics.Run {
		return hydraulics.Run{Name: name, From: from, To: to, Pipe: hydraulics.Pipe{Bore: 0.1},
			Fittings: []hydraulics.Fitting{{Name: "side", RatedFlow: 1e-3, RatedDrop: 16600, RatedDensity: 1000}}}
	}
	n := &hydraulics.Network{
		Viscosity: 1e-6,
		Points: []hydraulics.Point{
			{Name: "A", Draw: -3e-3}, {Name: "B", Draw: -0.5e-3}, {Name: "C", Fixed: true}, {Name: "D", Draw: 0.9e-3}},
		Runs: []hydraulics.Run{side("AB", 0, 1), side("BC", 1, 2), side("AD", 0, 3), side("DC", 3, 2)},
	}
	for i, q := range solve(n).RunFlows {
		fmt.Printf("%s %.3f l/s %.2f kPa\n", n.Runs[i].Name, q*1e3, 16.6*q*math.Abs(q)*1e6)
	}
	// Output:
	// AB 1.175 l/s 22.92 kPa
	// BC 1.675 l/s 46.57 kPa
	// AD 1.825 l/s 55.29 kPa
	// DC 0.925 l/s 14.20 kPa
}

// The two-loop network of E. Alperovits and U. Shamir (Water Resources Research 13 (1977) 885-900) with the optimal
// diameters of D. A. Savic and G. A. Walters (J. Water Resources Planning and Management 123 (1997) 67-77), pressures
// of nodes 2 to 7 from memory: 53.25, 30.46, 43.45, 33.80, 30.44, 30.55 m. Their Hazen-Williams law, C 130, comes in
// as a rated loss with exponent 1.852; its constant differs a little from author to author (here 10.667), which
// moves the pressures by up to 0.03 m from the printed ones. The pipe of 1 inch, which carries next to nothing, is the hard part.
func ExampleSolver_twoLoops() {
	const inch = 0.0254
	pipe := func(name string, from, to int, inches float64) hydraulics.Run {
		drop := 10.667 * 1000 / math.Pow(130, 1.852) / math.Pow(inches*inch, 4.8704) // m at 1 m3/s
		return hydraulics.Run{Name: name, From: from - 1, To: to - 1, Pipe: hydraulics.Pipe{Bore: inches * inch},
			Fittings: []hydraulics.Fitting{{Name: "pipe", RatedFlow: 1, RatedDrop: drop * 1000 * fluids.Gravity, RatedDensity: 1000, Exponent: 1.852}}}
	}
	n := &hydraulics.Network{Viscosity: 1e-6, Points: []hydraulics.Point{{Name: "1", Fixed: true, Head: 210}}}
	elevation := []float64{210, 150, 160, 155, 150, 165, 160}
	for i, draw := range []float64{100, 100, 120, 270, 330, 200} {
		n.Points = append(n.Points, hydraulics.Point{Name: fmt.Sprint(i + 2), Draw: draw / 3600})
	}
	n.Runs = []hydraulics.Run{pipe("1-2", 1, 2, 18), pipe("2-3", 2, 3, 10), pipe("2-4", 2, 4, 16), pipe("4-5", 4, 5, 4),
		pipe("4-6", 4, 6, 16), pipe("6-7", 6, 7, 10), pipe("3-5", 3, 5, 10), pipe("5-7", 5, 7, 1)}
	out := solve(n)
	for i := 1; i < len(out.Heads); i++ {
		fmt.Printf("%d %.2f m\n", i+1, out.Heads[i]-elevation[i])
	}
	fmt.Printf("5-7 %.3f m3/h\n", out.RunFlows[7]*3600)
	// Output:
	// 2 53.25 m
	// 3 30.48 m
	// 4 43.45 m
	// 5 33.82 m
	// 6 30.45 m
	// 7 30.56 m
	// 5-7 -0.559 m3/h
}
