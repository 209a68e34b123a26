package hydraulics

import (
	"fmt"
	"runtime"
	"testing"
)

// growth makes a network of about so many runs: every point but the tank draws a little.
func growth(shape string, runs int) *Network {
	n := &Network{Viscosity: 1e-6, Points: []Point{{Name: "tank", Fixed: true, Head: 30}}}
	point := func() int {
		n.Points = append(n.Points, Point{Name: fmt.Sprint(len(n.Points)), Draw: 1e-5})
		return len(n.Points) - 1
	}
	run := func(from, to int) {
		n.Runs = append(n.Runs, Run{Name: fmt.Sprint(len(n.Runs)), From: from, To: to, Pipe: Pipe{Length: 4, Bore: 0.2, Roughness: 5e-5},
			Fittings: []Fitting{{Name: "elbow", Coefficient: Coefficient{K: 0.3}}}})
	}
	switch shape {
	case "tree": // a main with branches, branches of branches
		main := 0
		for len(n.Runs) < runs {
			next := point()
			run(main, next)
			main = next
			branch := next
			for range 3 {
				b := point()
				run(branch, b)
				branch = b
				run(branch, point())
			}
		}
	case "ladder": // two mains with rungs
		a, b := point(), point()
		run(0, a)
		run(a, b)
		for len(n.Runs) < runs {
			c, d := point(), point()
			run(a, c)
			run(b, d)
			run(c, d)
			a, b = c, d
		}
	case "grid":
		side := 1
		for 2*side*(side-1) < runs {
			side++
		}
		at := make([]int, side*side)
		for i := range at {
			at[i] = point()
			if i%side > 0 {
				run(at[i-1], at[i])
			}
			if i >= side {
				run(at[i-side], at[i])
			}
		}
		run(0, at[0])
	}
	return n
}

// How cost and memory grow with the size of a network, solved from nothing. For ship-like shapes, the tree and the ladder,
// they must go with the number of runs; a square grid's band is as wide as its side.
func BenchmarkGrowth(b *testing.B) {
	for _, shape := range []string{"tree", "ladder", "grid"} {
		for _, runs := range []int{10, 100, 1000, 10000} {
			b.Run(fmt.Sprintf("%s/%d", shape, runs), func(b *testing.B) {
				n := growth(shape, runs)
				count := float64(len(n.Runs))
				var before, after runtime.MemStats
				runtime.ReadMemStats(&before)
				for range b.N {
					s, err := NewSolver(n)
					if err != nil {
						b.Fatal(err)
					}
					var out Solution
					if err := s.Solve(&out); err != nil {
						b.Fatal(err)
					}
				}
				runtime.ReadMemStats(&after)
				b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/count, "ns/run")
				b.ReportMetric(float64(after.TotalAlloc-before.TotalAlloc)/float64(b.N)/count, "B/run")
			})
		}
	}
}

// The shapes are solved rightly at every size the benchmark has: mass and heads in balance.
func TestGrowthShapes(t *testing.T) {
	for _, shape := range []string{"tree", "ladder", "grid"} {
		for _, runs := range []int{10, 100, 1000} {
			n := growth(shape, runs)
			_, out := solveNew(t, n)
			if err := checkSolution(n, out); err != nil {
				t.Errorf("%s of %d: %v", shape, runs, err)
			}
			if shape != "grid" && (len(n.Runs) < runs || len(n.Runs) > runs+10) {
				t.Errorf("%s of %d has %d runs", shape, runs, len(n.Runs))
			}
		}
	}
}
