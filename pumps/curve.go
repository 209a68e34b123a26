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

// Curve is one impeller at one speed, as digitised. Head, efficiency, power and NPSH required are fitted apart, each
// over the flows of its own points.
type Curve struct {
	Impeller float64 // m; 0 where the sheet does not say
	Speed    float64 // rpm; 0 where the sheet does not say
	Points   []SheetPoint

	head, efficiency, power, npshRequired *Fit // nil where fewer than two points give it, but for head

	droops bool // the head rises before it falls
}

// NewCurve fits the points of one sheet. It is an error where fewer than three points give a head, where two have
// one flow, where the head does not fall over the sheet, or where a figure is negative.
func NewCurve(impeller, speed float64, points []SheetPoint) (*Curve, error) {
	c := &Curve{Impeller: impeller, Speed: speed, Points: points}
	for _, q := range []struct {
		name string
		fit  **Fit
		of   func(SheetPoint) float64
		need int
	}{
		{"head", &c.head, func(p SheetPoint) float64 { return p.Head }, 3},
		{"efficiency", &c.efficiency, func(p SheetPoint) float64 { return p.Efficiency }, 0},
		{"power", &c.power, func(p SheetPoint) float64 { return p.Power }, 0},
		{"NPSH required", &c.npshRequired, func(p SheetPoint) float64 { return p.NPSHRequired }, 0},
	} {
		var x, y []float64
		for _, p := range points {
			if v := q.of(p); !math.IsNaN(v) {
				if !(p.Flow >= 0) || v < 0 {
					return nil, fmt.Errorf("flow %g m3/s with %s %g: neither may be negative", p.Flow, q.name, v)
				}
				x, y = append(x, p.Flow), append(y, v)
			}
		}
		if len(x) < max(q.need, 2) {
			if len(x) < q.need {
				return nil, fmt.Errorf("%d points give a %s, want at least %d", len(x), q.name, q.need)
			}
			continue // one point is no curve
		}
		fit, err := NewFit(x, y)
		if err != nil {
			return nil, fmt.Errorf("%s: %w", q.name, err)
		}
		*q.fit = fit
	}
	low, high := c.head.Range()
	first, _ := c.head.At(low)
	if last, _ := c.head.At(high); !(last < first) {
		return nil, fmt.Errorf("the head does not fall: %.4g m at %.4g m3/s, %.4g m at %.4g m3/s", first, low, last, high)
	}
	_, most, _ := c.head.Greatest()
	last, _ := c.head.At(high)
	c.droops = most > first+1e-3*(first-last) // a rise of a thousandth of the fall is within the reading
	return c, nil
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
	fit := c.efficiency
	if fit == nil {
		fit = c.power
	}
	if fit == nil {
		return math.NaN(), math.NaN(), false
	}
	low, high := fit.Range()
	if c.efficiency == nil {
		headLow, headHigh := c.head.Range()
		low, high = math.Max(low, headLow), math.Min(high, headHigh)
	}
	flow, efficiency, known = greatest(low, high, func(x float64) (float64, float64) {
		y, slope, _ := c.efficiencyAt(x)
		return y, slope
	})
	if !known {
		return math.NaN(), math.NaN(), false
	}
	return flow, efficiency, true
}
