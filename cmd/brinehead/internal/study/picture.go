package study

import (
	"math"
	"strconv"
	"strings"

	"brinehead/curves"
	"brinehead/pumps"
)

// Picture is what a plot of one pump, or of several that do the same, shows of a condition, in SI. Where a series ends
// is where it is known to end.
type Picture struct {
	Name string // of the pump, or of several: "P1, P2"

	Flow, Head                                      []float64 // the fitted curve over its digitised range
	BeyondFlow, BeyondHead                          []float64 // its continuation, to be drawn broken
	DigitisedFlow, DigitisedHead, DigitisedRequired []float64 // the points of the sheet, at the pump's speed
	SystemFlow, SystemHead, Available               []float64 // what the system asks, and the NPSH it leaves
	RequiredFlow, Required, Rule                    []float64 // NPSH required, and with the margin of the rule

	DutyFlow, DutyHead, DutyAvailable float64 // NaN where the operating point is off the curve
	Bounds                            []Bound
}

// Bound is a limit on a pump's own flow.
type Bound struct {
	Name  string
	Flow  float64 // m3/s
	Least bool
}

const picturePoints = 61

// Pictures returns what there is to plot of a condition: one picture for each running pump, those with one curve and one
// operating point drawn together. It is nil where the condition has no solution or no pump runs.
func (c *Condition) Pictures() []Picture {
	if c.solved == nil {
		return nil
	}
	var pictures []Picture
	var first []int // pump of each picture
	for i, u := range c.solved.Plant.Pumps {
		if !u.Running {
			continue
		}
		if k := c.alike(first, i); k >= 0 {
			pictures[k].Name += ", " + u.Name
			continue
		}
		first = append(first, i)
		pictures = append(pictures, c.picture(i))
	}
	return pictures
}

// alike returns which picture's pump has the curve of pump i and an operating point within half a per cent, or -1.
func (c *Condition) alike(first []int, i int) int {
	s := c.solved
	for k, j := range first {
		a, b := s.Plant.Pumps[i], s.Plant.Pumps[j]
		if a.Pump == b.Pump && a.Datum == b.Datum && math.Abs(s.PumpFlows[i]-s.PumpFlows[j]) <= 0.005*s.PumpFlows[j] {
			return k
		}
	}
	return -1
}

func (c *Condition) picture(i int) Picture {
	s := c.solved
	u := s.Plant.Pumps[i]
	p := Picture{Name: u.Name}
	low, high := u.Range()
	end := 1.12 * high
	p.Flow, p.Head = trace(low, high, func(q float64) float64 { h, _ := u.Head(q); return h })
	p.BeyondFlow, p.BeyondHead = trace(high, end, func(q float64) float64 { h, _ := u.Head(q); return h })
	n := speedRatio(u.Pump)
	for _, d := range u.Curve.Points {
		p.DigitisedFlow = append(p.DigitisedFlow, d.Flow*n)
		p.DigitisedHead = append(p.DigitisedHead, d.Head*n*n*(1-u.Wear))
		p.DigitisedRequired = append(p.DigitisedRequired, d.NPSHRequired*n*n)
	}
	if demand, err := s.SystemCurve(i, 0, end, picturePoints); err == nil {
		for _, d := range demand {
			p.SystemFlow = append(p.SystemFlow, d.Flow)
			p.SystemHead = append(p.SystemHead, d.Head)
			p.Available = append(p.Available, d.NPSHAvailable)
		}
	}
	if from, to, known := u.NPSHRequiredRange(); known {
		p.RequiredFlow, p.Required = trace(from, to, u.NPSHRequired)
		margin := c.ruleMargin(u.Name)
		for _, required := range p.Required {
			p.Rule = append(p.Rule, required+margin)
		}
	}
	p.DutyFlow, p.DutyHead, p.DutyAvailable = math.NaN(), math.NaN(), math.NaN()
	if d := c.Pumps[i]; d.Flow.Known() {
		p.DutyFlow, p.DutyHead, p.DutyAvailable = float64(d.Flow)/3600, float64(d.Head), float64(d.NPSHAvailable)
	}
	p.Bounds = c.bounds(u)
	return p
}

// speedRatio returns the speed of a pump over that of its sheet, 1 where either is not known.
func speedRatio(p pumps.Pump) float64 {
	if p.Speed > 0 && p.Curve.Speed > 0 {
		return p.Speed / p.Curve.Speed
	}
	return 1
}

// trace evaluates a function at even steps.
func trace(low, high float64, f func(float64) float64) (x, y []float64) {
	for k := range picturePoints {
		at := low + (high-low)*float64(k)/(picturePoints-1)
		x, y = append(x, at), append(y, f(at))
	}
	return x, y
}

// ruleMargin returns the NPSH margin a pump must keep in the condition, NaN where none is judged.
func (c *Condition) ruleMargin(pump string) float64 {
	for _, f := range c.Findings {
		if f.Limit == "NPSH margin" && strings.EqualFold(f.On, pump) {
			return float64(f.LimitValue)
		}
	}
	return math.NaN()
}

// bounds returns the limits on a pump's own flow.
func (c *Condition) bounds(u curves.Pump) []Bound {
	var list []Bound
	for _, f := range c.Findings {
		if !strings.EqualFold(f.On, u.Name) || !f.LimitValue.Known() {
			continue
		}
		switch f.Limit {
		case "minimum flow", "maximum flow":
			list = append(list, Bound{f.Limit, float64(f.LimitValue) / 3600, f.Limit == "minimum flow"})
		case "least share of best-efficiency flow", "greatest share of best-efficiency flow":
			if best := u.BestEfficiencyFlow(); !math.IsNaN(best) {
				least := strings.HasPrefix(f.Limit, "least")
				list = append(list, Bound{strconv.FormatFloat(float64(f.LimitValue), 'g', 4, 64) + " % of best", float64(f.LimitValue) / 100 * best, least})
			}
		}
	}
	return list
}

// Drawing is what a schematic shows of a condition: the network with its flows and pressures, in SI, NaN where a figure is
// not known.
type Drawing struct {
	Points []DrawnPoint
	Runs   []DrawnRun
	Pumps  []DrawnPump
}

// DrawnPoint is a point.
type DrawnPoint struct {
	Name, Kind          string
	Elevation, Pressure float64
}

// DrawnRun is a run with the kinds of its fittings that have a symbol.
type DrawnRun struct {
	Name     string
	From, To int
	Flow     float64
	Shut     bool
	Symbols  []string
}

// DrawnPump is a pump.
type DrawnPump struct {
	Name     string
	From, To int
	Flow     float64
	Running  bool
}

// Drawing returns the network of a condition, or nil where it has no solution.
func (c *Condition) Drawing() *Drawing {
	if c.solved == nil {
		return nil
	}
	d := &Drawing{}
	n := c.solved.Network
	for i, p := range n.Points {
		kind := "junction"
		switch {
		case c.built.SeaInlets[i]:
			kind = "sea"
		case c.built.Overboards[i]:
			kind = "overboard"
		case p.Fixed:
			kind = "tank"
		}
		d.Points = append(d.Points, DrawnPoint{p.Name, kind, c.built.Elevations[i], float64(c.Points[i].GaugePressure) * 1e5})
	}
	for i, r := range n.Runs {
		run := DrawnRun{r.Name, r.From, r.To, float64(c.Runs[i].Flow) / 3600, r.Shut, nil}
		for _, f := range r.Fittings {
			if s := symbolOf(f.Name, f.NonReturn); s != "" && len(run.Symbols) < 3 {
				run.Symbols = append(run.Symbols, s)
			}
		}
		d.Runs = append(d.Runs, run)
	}
	for i, u := range c.solved.Plant.Pumps {
		d.Pumps = append(d.Pumps, DrawnPump{u.Name, u.From, u.To, float64(c.Pumps[i].Flow) / 3600, u.Running})
	}
	return d
}

// symbolOf returns the symbol of a fitting by the words of its name; none for what is part of the pipe.
func symbolOf(name string, nonReturn bool) string {
	name = strings.ToLower(name)
	switch {
	case nonReturn:
		return "non-return"
	case strings.Contains(name, "strainer"):
		return "strainer"
	case strings.Contains(name, "cooler") || strings.Contains(name, "exchanger"):
		return "cooler"
	case strings.Contains(name, "orifice") || strings.Contains(name, "disc"):
		return "orifice"
	case strings.Contains(name, "valve"):
		return "valve"
	}
	return ""
}
