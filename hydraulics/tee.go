package hydraulics

import (
	"math"

	"brinehead/fluids"
)

// SplitLoss is a loss coefficient of a tee that follows the branch's share q of the combined flow:
//
//	K(q) = None (1-q)2 + Mixed q (1-q) + All q2
//
// on the velocity head of the leg that carries the combined flow. Negative values are gains: the faster stream
// drags the slower along.
type SplitLoss struct {
	None  float64 // nothing goes through the branch
	Mixed float64
	All   float64 // everything goes through the branch
}

// At returns the coefficient at a branch share of 0 to 1, and its derivative with respect to the share.
func (l SplitLoss) At(share float64) (k, slope float64) {
	rest := 1 - share
	return l.None*rest*rest + l.Mixed*share*rest + l.All*share*share,
		-2*l.None*rest + l.Mixed*(rest-share) + 2*l.All*share
}

// The tees the formulas are used for.
const (
	LeastTeeAreaRatio = 0.0025          // branch over run: bores of 1 to 20
	LeastTeeAngle     = math.Pi / 4     // rad
	GreatestTeeAngle  = 3 * math.Pi / 4 // rad
)

// CombiningTee returns the losses of a sharp-edged tee in which the branch joins the run, from the branch to the
// combined leg and from the run to it, where a is the area of the branch over that of the run and t the angle
// (rad) between the stream of the branch and that of the run, 0 in one line:
//
//	Kbranch = -0.92 (1-q)2 - q2 [1.2 (cos(t)/a - 1) + 0.8 (1 - 1/a2) - (1-a) cos(t)/a] + (2-a) q (1-q)
//	Krun    =  0.03 (1-q)2 - q2 [1 + 1.62 (cos(t)/a - 1) - 0.38 (1-a)] + (2-a) q (1-q)
//
// Source: A. Gardel, Les pertes de charge dans les écoulements au travers de branchements en té, Bulletin technique
// de la Suisse romande 83 (1957), for a crotch that is not rounded; formulas from memory. Two things speak for them:
// with no flow in the branch its head is that of [DividingTee], 0.92 = 0.95 - 0.03, and Crane's figures lie near.
// Range: LeastTeeAreaRatio <= a <= 1, LeastTeeAngle <= t <= GreatestTeeAngle; outside it, or for NaN, the results
// are NaN and a [*fluids.RangeError]. Gardel's tests ran from about a = 0.4 to 1 (from memory); as a falls further the
// losses turn into those of a small branch, proportional to the velocity head in it.
// Accuracy: 35 % of a flanged tee's loss (Hydraulic Institute, Engineering Data Book), and some 0.2 of the combined
// velocity head where the loss is near nothing. A rounded crotch loses up to a quarter less.
func CombiningTee(areaRatio, angle float64) (branch, run SplitLoss, err error) {
	if err := teeRange(areaRatio, angle); err != nil {
		return noSplitLoss(), noSplitLoss(), err
	}
	a, along := areaRatio, math.Cos(angle)/areaRatio
	branch = SplitLoss{
		None:  -0.92,
		Mixed: 2 - a,
		All:   -(1.2*(along-1) + 0.8*(1-1/(a*a)) - (1-a)*along),
	}
	run = SplitLoss{
		None:  0.03,
		Mixed: 2 - a,
		All:   -(1 + 1.62*(along-1) - 0.38*(1-a)),
	}
	return branch, run, nil
}

// DividingTee returns the losses of a sharp-edged tee in which the branch leaves the run, from the combined leg to
// the branch and to the run, where a is the area of the branch over that of the run and t the angle (rad) the water
// turns through into the branch, 0 in one line:
//
//	Kbranch = 0.95 (1-q)2 + q2 [1.3 tan(t/2) - 0.3 + (0.4 - 0.1 a)/a2] + 0.4 q (1-q) (1 + 1/a) tan(t/2)
//	Krun    = 0.03 (1-q)2 + 0.35 q2 - 0.2 q (1-q)
//
// Source, range and accuracy: as [CombiningTee].
func DividingTee(areaRatio, angle float64) (branch, run SplitLoss, err error) {
	if err := teeRange(areaRatio, angle); err != nil {
		return noSplitLoss(), noSplitLoss(), err
	}
	a, turn := areaRatio, math.Tan(angle/2)
	branch = SplitLoss{
		None:  0.95,
		Mixed: 0.4 * (1 + 1/a) * turn,
		All:   1.3*turn - 0.3 + (0.4-0.1*a)/(a*a),
	}
	run = SplitLoss{None: 0.03, Mixed: -0.2, All: 0.35}
	return branch, run, nil
}

func noSplitLoss() SplitLoss { return SplitLoss{math.NaN(), math.NaN(), math.NaN()} }

func teeRange(areaRatio, angle float64) error {
	const slack = 1e-9 // an area ratio comes from bores divided and squared
	if !(LeastTeeAreaRatio*(1-slack) <= areaRatio && areaRatio <= 1+slack) {
		return &fluids.RangeError{Method: "tee", Quantity: "area of the branch over the run's", Value: areaRatio, Low: LeastTeeAreaRatio, High: 1}
	}
	return fittingAngle("tee", angle, inDegrees(LeastTeeAngle), inDegrees(GreatestTeeAngle))
}

// Tee joins a straight run, made of a first and a second leg of one bore, and a branch.
type Tee struct {
	Bore   float64 // m, of the run
	Branch float64 // m, bore of the branch, not above Bore
	Angle  float64 // rad, between the branch and the second leg, both seen from the middle; pi/2 is square
}

// The legs of a tee, as they are numbered in it.
const (
	teeFirst = iota
	teeSecond
	teeBranch
)

// TeeLaw is a tee made ready for many flows. It gives the heads of its legs for every way water can pass through
// it, as continuous functions of the flows.
type TeeLaw struct {
	scale float64 // 1/(2 g A2) of the run, s2/m5

	// forms[combined][combining][leg] is the head of the leg beside the combined leg, over scale:
	// own Q2 + both Q P + other P2, with Q the flow of the leg and P that of the remaining one; 1 for combining.
	forms [3][2][3]teeForm
}

type teeForm struct{ own, both, other float64 }

// Law returns the law of the tee, or a [*fluids.RangeError] where its proportions lie outside those of [CombiningTee].
//
// Where the combined leg is the branch, which Gardel did not test, each head goes from its value with one leg of
// the run at rest to that with the other at rest, as the share of flow does: 0.95 to 1.3 velocity heads of an equal
// square tee in which two streams meet, against 1.25 to 2 of I. E. Idelchik (diagram for symmetrical tees, from
// memory); 0.58 to 1.2 in one that divides a stream from its branch, against 1 to 1.3. The scatter of tees covers it.
func (t Tee) Law() (TeeLaw, error) {
	if err := fittingBore("tee", "bore of the run", t.Bore); err != nil {
		return TeeLaw{}, err
	}
	ratio := (t.Branch / t.Bore) * (t.Branch / t.Bore)
	area := circle(t.Bore)
	law := TeeLaw{scale: 1 / (2 * fluids.Gravity * area * area)}
	// turned back, the branch makes the supplementary angle with the stream
	for combined, angle := range [2]float64{teeFirst: t.Angle, teeSecond: math.Pi - t.Angle} {
		other := teeSecond - combined
		for way, losses := range [2]func(a, t float64) (branch, run SplitLoss, err error){DividingTee, CombiningTee} {
			branch, run, err := losses(ratio, angle)
			if err != nil {
				return TeeLaw{}, err
			}
			law.forms[combined][way][teeBranch] = teeForm{branch.All, branch.Mixed, branch.None}
			law.forms[combined][way][other] = teeForm{run.None, run.Mixed, run.All}
			// With the run's other leg at rest the branch is the combined leg as well, of the opposite way.
			alone, rest := branch.All, branch.All-run.All
			mirror := 1 - way
			law.forms[teeBranch][mirror][combined].own = alone
			law.forms[teeBranch][mirror][other].other = rest
		}
	}
	for way := range law.forms[teeBranch] {
		for _, leg := range []int{teeFirst, teeSecond} {
			f := &law.forms[teeBranch][way][leg]
			f.both = f.own + f.other // a straight line in the share of flow
		}
	}
	return law, nil
}

// TeeHeads are the total heads (m) at the ends of a tee's second leg and branch, less that of its first leg, and
// their derivatives with respect to the flows of the first and the second leg (s/m2).
type TeeHeads struct {
	Second, Branch           float64
	SecondSlope, BranchSlope [2]float64
}

// Heads returns the heads of the legs at flows (m3/s) into the tee through its first and second leg; the branch
// carries what is left, -first-second. The heads are continuous in both flows, through every change of sign and
// at rest; their slopes are those of one side where a leg is at rest.
func (l TeeLaw) Heads(first, second float64) TeeHeads {
	flow := [3]float64{first, second, -first - second}
	combined := teeFirst
	for leg := range flow {
		if math.Abs(flow[leg]) > math.Abs(flow[combined]) {
			combined = leg
		}
	}
	way, sign := 1, 1.0 // the combined flow goes out
	if flow[combined] > 0 {
		way, sign = 0, -1
	}
	var head [3]float64
	var slope [3][3]float64 // of a leg's head with respect to the flows of all legs
	for leg := range flow {
		if leg == combined {
			continue
		}
		other := teeFirst + teeSecond + teeBranch - leg - combined
		f, q, p := l.forms[combined][way][leg], flow[leg], flow[other]
		head[leg] = sign * l.scale * (f.own*q*q + f.both*q*p + f.other*p*p)
		slope[leg][leg] = sign * l.scale * (2*f.own*q + f.both*p)
		slope[leg][other] = sign * l.scale * (f.both*q + 2*f.other*p)
	}
	// the branch's flow is minus the sum of the others
	beside := func(leg int) (h float64, d [2]float64) {
		for k := range d {
			d[k] = slope[leg][k] - slope[leg][teeBranch] - slope[teeFirst][k] + slope[teeFirst][teeBranch]
		}
		return head[leg] - head[teeFirst], d
	}
	var heads TeeHeads
	heads.Second, heads.SecondSlope = beside(teeSecond)
	heads.Branch, heads.BranchSlope = beside(teeBranch)
	return heads
}

func teeEntries() []CatalogueEntry {
	tee := CatalogueEntry{
		Method: methodLengthRatio + ", whatever the split of flow",
		Source: sourceCraneMemory, Mark: "M",
		Scatter: 0.35, ScatterSource: sourceDataBook + ": flanged tee",
	}
	return []CatalogueEntry{
		tee.named("tee through", "tee run", "tee straight through").valid("n 20; equal bores, water goes straight on; stands in the run it leaves by or comes from", lengthRatio(20)),
		tee.named("tee branch", "tee, through branch", "tee side", "tee").valid("n 60; equal bores, water turns into or out of the branch; stands in the branch's run", lengthRatio(60)),
	}
}
