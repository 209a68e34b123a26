package pumps

import (
	"brinehead/fluids"
	"fmt"
	"math"
)

// sheetDensity is the density that the powers of a sheet stand for, kg/m3.
const sheetDensity = 1000.0

// SheetPoint is one digitised point of a pump sheet. What the sheet does not give is NaN.
type SheetPoint struct {
	Flow         float64 // m3/s, 0 or more
	Head         float64 // m
	Efficiency   float64 // fraction
	Power        float64 // W at the shaft, in water of 1000 kg/m3
	NPSHRequired float64 // m
}

// Curve is one impeller at one speed: as digitised, between two digitised ones, or trimmed from one. Head, efficiency,
// power and NPSH required are fitted apart, each over the flows of its own points.
type Curve struct {
	Impeller float64 // m; 0 where the sheet does not say
	Speed    float64 // rpm; 0 where the sheet does not say
	Points   []SheetPoint
	Origin   string // how it was made, where it is not digitised itself; empty where it is

	head, efficiency, power, npshRequired *Fit // nil where fewer than two points give it, but for head

	droops bool // the head rises before it falls

	bestFlow, bestEfficiency float64 // NaN where not known
}

// quantity is what a sheet gives over flow.
type quantity struct {
	name  string
	shape Shape // that physics demands of it
	need  int   // how many points must give it
	of    func(SheetPoint) float64
	fit   func(*Curve) **Fit
}

// sheetQuantities are those that are fitted.
var sheetQuantities = []quantity{
	{"head", Hump, 3, func(p SheetPoint) float64 { return p.Head }, func(c *Curve) **Fit { return &c.head }},
	{"efficiency", Hump, 0, func(p SheetPoint) float64 { return p.Efficiency }, func(c *Curve) **Fit { return &c.efficiency }},
	{"power", AnyShape, 0, func(p SheetPoint) float64 { return p.Power }, func(c *Curve) **Fit { return &c.power }},
	{"NPSH required", Valley, 0, func(p SheetPoint) float64 { return p.NPSHRequired }, func(c *Curve) **Fit { return &c.npshRequired }},
}

// points returns flow and value of the points that give the quantity, and which they are.
func (q quantity) points(points []SheetPoint) (x, y []float64, which []int) {
	for i, p := range points {
		if v := q.of(p); !math.IsNaN(v) {
			x, y, which = append(x, p.Flow), append(y, v), append(which, i)
		}
	}
	return x, y, which
}

// NewCurve fits the points of one sheet. It is an error where fewer than three points give a head, where two have
// one flow, where the head does not fall over the sheet, or where a figure is negative.
func NewCurve(impeller, speed float64, points []SheetPoint) (*Curve, error) {
	c := &Curve{Impeller: impeller, Speed: speed, Points: points}
	for _, q := range sheetQuantities {
		x, y, _ := q.points(points)
		for i := range x {
			if !(x[i] >= 0) || y[i] < 0 {
				return nil, fmt.Errorf("flow %g m3/s with %s %g: neither may be negative", x[i], q.name, y[i])
			}
		}
		if len(x) < q.need {
			return nil, fmt.Errorf("%d points give a %s, want at least %d", len(x), q.name, q.need)
		}
		if len(x) < 2 {
			continue // one point is no curve
		}
		fit, err := NewFit(x, y, q.shape)
		if err != nil {
			return nil, fmt.Errorf("%s: %w", q.name, err)
		}
		*q.fit(c) = fit
	}
	low, high := c.head.Range()
	first, _ := c.head.At(low)
	if last, _ := c.head.At(high); !(last < first) {
		return nil, fmt.Errorf("the head does not fall: %.4g m at %.4g m3/s, %.4g m at %.4g m3/s", first, low, last, high)
	}
	c.settle()
	return c, nil
}

// WithHead returns the curve with every head multiplied by a factor at the same flows, efficiency, and NPSH required; a power that the
// sheet gives stays.
func (c *Curve) WithHead(factor float64) *Curve {
	out := *c
	out.head = c.head.scaled(1, factor)
	out.settle()
	return &out
}

// settle notes what the fits say once for all: whether the head rises before it falls, and where the efficiency is best.
func (c *Curve) settle() {
	c.bestFlow, c.bestEfficiency = c.findBest()
	low, high := c.head.Range()
	first, _ := c.head.At(low)
	last, _ := c.head.At(high)
	_, most, _ := c.head.Greatest()
	c.droops = most > first+1e-3*(first-last) // a rise of a thousandth of the fall is within the reading
}

// HeadFit returns the fitted head, m over m3/s.
func (c *Curve) HeadFit() *Fit { return c.head }

// NPSHRequiredFit returns the fitted NPSH required, m over m3/s, or nil.
func (c *Curve) NPSHRequiredFit() *Fit { return c.npshRequired }

// efficiencyAt returns the efficiency at a flow and its slope, from the sheet's efficiency or else from its power,
// and whether the sheet knows it there.
func (c *Curve) efficiencyAt(flow float64) (efficiency, slope float64, known bool) {
	switch {
	case c.efficiency != nil:
		efficiency, slope = c.efficiency.At(flow)
		return efficiency, slope, c.efficiency.Within(flow)
	case c.power != nil:
		head, headSlope := c.head.At(flow)
		power, powerSlope := c.power.At(flow)
		if !(power > 0) {
			return math.NaN(), math.NaN(), false
		}
		const weight = sheetDensity * fluids.Gravity
		efficiency = weight * flow * head / power
		slope = weight*(head+flow*headSlope)/power - efficiency*powerSlope/power
		return efficiency, slope, c.head.Within(flow) && c.power.Within(flow)
	}
	return math.NaN(), math.NaN(), false
}

// BestEfficiency returns the flow of the best efficiency and that efficiency. It is not known where the sheet gives
// no efficiency, or where the greatest lies at an end of the digitised range: the best point may be beyond.
func (c *Curve) BestEfficiency() (flow, efficiency float64, known bool) {
	return c.bestFlow, c.bestEfficiency, !math.IsNaN(c.bestFlow)
}

// findBest searches the best efficiency; NaN where it is not known.
func (c *Curve) findBest() (flow, efficiency float64) {
	fit := c.efficiency
	if fit == nil {
		fit = c.power
	}
	if fit == nil {
		return math.NaN(), math.NaN()
	}
	low, high := fit.Range()
	if c.efficiency == nil {
		headLow, headHigh := c.head.Range()
		low, high = math.Max(low, headLow), math.Min(high, headHigh)
	}
	flow, efficiency, inner := greatest(low, high, func(x float64) (float64, float64) {
		y, slope, _ := c.efficiencyAt(x)
		return y, slope
	})
	if !inner {
		return math.NaN(), math.NaN()
	}
	return flow, efficiency
}
