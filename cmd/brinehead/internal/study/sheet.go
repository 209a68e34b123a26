package study

import (
	"fmt"
	"math"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/fluids"
)

// ReadingSheet is the form to fill in aboard, or, with the expected figures, the card of a condition.
type ReadingSheet struct {
	Job  string     `json:"job"`
	Rows []SheetRow `json:"rows"`
}

// SheetRow is one reading to take.
type SheetRow struct {
	Condition string `json:"condition"` // of a card; empty on a form
	Quantity  string `json:"quantity"`
	On        string `json:"on"`
	Unit      string `json:"unit"`
	Elevation Figure `json:"gauge_elevation_m"`
	Bore      Figure `json:"bore_mm"` // of the pipe at a tapping
	Low       Figure `json:"low"`     // of all conditions on a form; the one figure of a card
	High      Figure `json:"high"`    // likewise
	Range     string `json:"range"`   // of an instrument that suits
	Class     string `json:"class"`
}

// Sheet makes the form: every gauge of every pump, flows, drops, power and current, with what to expect over all conditions. The error is
// job.Faults.
func Sheet(j *job.Job) (*ReadingSheet, error) { return sheet(j, nil, false) }

// Card makes the expected readings by condition, of all of them or of those named. The error is job.Faults.
func Card(j *job.Job, conditions []string) (*ReadingSheet, error) { return sheet(j, conditions, true) }

func sheet(j *job.Job, conditions []string, card bool) (*ReadingSheet, error) {
	check, err := Checked(j, conditions, "")
	if err != nil {
		return nil, err
	}
	s := &ReadingSheet{Job: j.Name}
	at := map[string]int{}
	for i := range check.Conditions {
		c := &check.Conditions[i]
		for _, row := range expected(j, c) {
			key := row.Quantity + "|" + row.On
			if card {
				row.Condition = c.Condition
				s.Rows = append(s.Rows, row)
				continue
			}
			k, known := at[key]
			if !known {
				at[key] = len(s.Rows)
				s.Rows = append(s.Rows, row)
				continue
			}
			o := &s.Rows[k]
			o.Low, o.High = least(o.Low, row.Low), greatestOf(o.High, row.High)
		}
	}
	for i := range s.Rows {
		s.Rows[i].instrument()
	}
	return s, nil
}

func least(a, b Figure) Figure {
	if !a.Known() || b < a {
		return b
	}
	return a
}

func greatestOf(a, b Figure) Figure {
	if !a.Known() || b > a {
		return b
	}
	return a
}

// instrument names a range and a class that suit what is expected: gauges that show a vacuum where the pressure may fall below the
// atmosphere, the figure within the middle of the range (common practice).
func (r *SheetRow) instrument() {
	switch r.Quantity {
	case "suction gauge", "discharge gauge":
		top := 1.0
		for _, full := range []float64{1, 1.6, 2.5, 4, 6, 10, 16, 25} {
			if top = full; float64(r.High) <= 0.75*full || math.IsNaN(float64(r.High)) {
				break
			}
		}
		low := "0"
		if r.Low < 0.2 || r.Quantity == "suction gauge" {
			low = "-1"
		}
		r.Range, r.Class = fmt.Sprintf("%s to %g bar", low, top), "1.0 or better"
	case "flow":
		r.Range, r.Class = "clamp-on, straight lengths 10 and 5 bores", "3 %"
	case "differential":
		r.Range, r.Class = "differential gauge", "1.6 or better"
	case "shaft power", "motor current":
		r.Range, r.Class = "power meter or clamp", "2 %"
	}
}

// expected lists what a condition's instruments would show.
func expected(j *job.Job, c *Condition) (rows []SheetRow) {
	if c.solved == nil {
		return nil
	}
	known := c.unknownWhy() == ""
	figure := func(x float64) Figure {
		if !known {
			return unknown
		}
		return Figure(x)
	}
	add := func(quantity, on, unit string, elevation, bore float64, value Figure) {
		rows = append(rows, SheetRow{Quantity: quantity, On: on, Unit: unit, Elevation: Figure(elevation), Bore: Figure(bore), Low: value, High: value})
	}
	weight := c.solved.Water.Density * fluids.Gravity
	for i, u := range c.solved.Plant.Pumps {
		if !u.Running {
			continue
		}
		zs := j.Tables.Pumps[i].SuctionGauge.Or(u.Datum)
		for _, g := range []struct {
			quantity string
			point    int
			z        float64
		}{{"suction gauge", u.From, zs}, {"discharge gauge", u.To, c.solved.Elevations[u.To]}} {
			b := bench{job: j, condition: c}
			bore, _ := b.bore(g.point)
			add(g.quantity, u.Name, "bar", g.z, bore*1e3, figure((c.solved.GaugePressure(g.point)+(c.solved.Elevations[g.point]-g.z)*weight)/1e5))
		}
		add("flow", u.Name, "m3/h", math.NaN(), math.NaN(), c.Pumps[i].Flow)
		if c.Pumps[i].ShaftPower.Known() {
			add("shaft power", u.Name, "kW", math.NaN(), math.NaN(), c.Pumps[i].ShaftPower)
		}
		if c.Pumps[i].MotorCurrent.Known() {
			add("motor current", u.Name, "A", math.NaN(), math.NaN(), c.Pumps[i].MotorCurrent)
		}
	}
	for _, f := range c.Fittings {
		lower := strings.ToLower(f.Fitting)
		if f.Tag != "" && (strings.Contains(lower, "strainer") || strings.Contains(lower, "cooler") || strings.Contains(lower, "exchanger")) && f.Drop != 0 {
			add("differential", f.Tag, "bar", math.NaN(), math.NaN(), f.Drop)
		}
	}
	return rows
}
