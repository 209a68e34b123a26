package hydraulics

import (
	"math"
	"testing"
)

// thermosyphon is a loop without a pump: a hot leg that rises 10 m, a cold one that falls as far, and a tank that holds
// the pressure. Only the weights of the two columns drive it.
func thermosyphon(ratio float64) *Network {
	pipe := Pipe{Length: 10, Bore: 0.1, Roughness: 5e-5}
	return &Network{Viscosity: 6e-7,
		Points: []Point{{Name: "bottom"}, {Name: "top", Fixed: true, Head: 12}},
		Runs: []Run{
			{Name: "hot", From: 0, To: 1, Pipe: pipe, Own: OwnWater{Viscosity: 3.5e-7, DensityRatio: ratio, Rise: 10},
				Fittings: []Fitting{{Name: "engine", Coefficient: Coefficient{K: 8}}}},
			{Name: "cold", From: 1, To: 0, Pipe: pipe, Fittings: []Fitting{{Name: "cooler", Coefficient: Coefficient{K: 12}}}},
		}}
}

// The head that drives the loop is that of the two columns, (1 - ratio) 10 m, and the losses use it up: by hand.
func TestThermosyphon(t *testing.T) {
	const ratio = 0.975
	n := thermosyphon(ratio)
	_, out := solveNew(t, n)
	q := out.RunFlows[0]
	if !(q > 0) || !(math.Abs(q-out.RunFlows[1]) < 1e-12) {
		t.Fatalf("flows %v: hot water must rise", out.RunFlows)
	}
	hot := n.Runs[0].PipeLoss(q, n.Viscosity) + n.Runs[0].FittingLoss(0, q, n.Viscosity)
	cold := n.Runs[1].PipeLoss(q, n.Viscosity) + n.Runs[1].FittingLoss(0, q, n.Viscosity)
	if driving := (1 - ratio) * 10; !(math.Abs(hot+cold-driving) < 1e-8) {
		t.Errorf("losses %g m, columns drive %g m", hot+cold, driving)
	}
	// The loss by hand: K and f L/D on the velocity head, the hot leg's in lighter water.
	v2 := math.Pow(q/(math.Pi/4*0.01), 2) / (2 * 9.80665)
	f := func(nu float64) float64 {
		f, _, err := FrictionFactor(q/(math.Pi/4*0.01)*0.1/nu, 5e-4)
		if err != nil {
			t.Fatal(err)
		}
		return f
	}
	want := ratio*(8+f(3.5e-7)*100)*v2 + (12+f(6e-7)*100)*v2
	if !(math.Abs(hot+cold-want) < 1e-7) {
		t.Errorf("losses %g m, by hand %g m", hot+cold, want)
	}
	// No difference, no flow; a colder leg turns it round.
	if _, out := solveNew(t, thermosyphon(1)); !(math.Abs(out.RunFlows[0]) < 1e-9) {
		t.Errorf("equal columns flow %g m3/s", out.RunFlows[0])
	}
	if _, out := solveNew(t, thermosyphon(1.025)); !(out.RunFlows[0] < 0) {
		t.Errorf("a heavier rising leg flows %g m3/s", out.RunFlows[0])
	}
	// At rest the hot column stands on the cold one with just the difference of their weights.
	n = thermosyphon(ratio)
	n.Runs[1].Shut = true
	if _, out := solveNew(t, n); out.RunFlows[0] != 0 || !(math.Abs(out.Heads[0]-(12-0.25)) < 1e-9) {
		t.Errorf("at rest: flow %g, bottom at %g m, want 11.75 m", out.RunFlows[0], out.Heads[0])
	}
}
