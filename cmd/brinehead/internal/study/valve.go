package study

import (
	"fmt"
	"math"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/hydraulics"
)

// ValveTable is the answer to `check --valve`: a three-way valve over its stroke, in each condition.
type ValveTable struct {
	Job        string           `json:"job"`
	Valve      string           `json:"valve"`
	RunA       string           `json:"run_a"` // that of port A, open at 100 %
	RunB       string           `json:"run_b"` // that of port B, open at 0 %: the bypass
	Conditions []ValveCondition `json:"conditions"`
}

// ValveCondition is the valve over its stroke in one condition.
type ValveCondition struct {
	Condition string         `json:"condition"`
	Rows      []ValveRow     `json:"openings"`
	Orifice   *MatchingPlate `json:"bypass_orifice"`
	Note      string         `json:"note"` // why there is no orifice
}

// ValveRow is the plant at one opening.
type ValveRow struct {
	Opening Figure      `json:"opening"` // fraction, of port A
	A       Figure      `json:"flow_a_m3h"`
	B       Figure      `json:"flow_b_m3h"`
	Total   Figure      `json:"flow_total_m3h"`
	Pumps   []ValvePump `json:"pumps"`
	Notes   []string    `json:"notes"`
}

// ValvePump is a running pump at one opening.
type ValvePump struct {
	Pump       string `json:"pump"`
	Flow       Figure `json:"flow_m3h"`
	NPSHMargin Figure `json:"npsh_margin_m"`
	BestShare  Figure `json:"best_efficiency_share"`
}

// MatchingPlate is the orifice plate in the bypass that makes the valve pass the same on bypass as through port A.
type MatchingPlate struct {
	Run   string `json:"run"`
	Flow  Figure `json:"flow_m3h"` // that both ways then pass
	K     Figure `json:"k"`
	Hole  Figure `json:"hole_mm"` // null where ISO 5167 reaches no such plate
	Bore  Figure `json:"bore_mm"`
	Notes string `json:"note"`
}

// openings are the steps of a valve's stroke.
const openings = 10

// Valve moves a three-way valve over its stroke. The error is job.Faults, or names a tag that is no such valve.
func Valve(j *job.Job, tag string, only []string) (*ValveTable, error) {
	if len(only) == 0 {
		only = j.Conditions()
	}
	t := &ValveTable{Job: j.Name, Valve: tag}
	for _, row := range j.Tables.Fittings {
		if !strings.EqualFold(row.Tag.Value, tag) {
			continue
		}
		switch job.ValvePort(row.Fitting.Value) {
		case "a":
			t.RunA, t.Valve = row.Run.Value, row.Tag.Value
		case "b":
			t.RunB = row.Run.Value
		}
	}
	if t.RunA == "" || t.RunB == "" {
		return nil, fmt.Errorf("valve: found %q, want the tag of a three-way valve, whose ports stand in fittings.csv as \"three-way valve port A\" and \"three-way valve port B\"", tag)
	}
	for _, name := range only {
		c, err := t.condition(j, name)
		if err != nil {
			return nil, err
		}
		t.Conditions = append(t.Conditions, *c)
	}
	return t, nil
}

func (t *ValveTable) condition(j *job.Job, name string) (*ValveCondition, error) {
	c := &ValveCondition{Condition: name}
	for k := range openings + 1 {
		s, err := t.at(j, name, float64(k)/openings, 0)
		if err != nil {
			return nil, err
		}
		c.Condition = s.Condition
		c.Rows = append(c.Rows, t.row(s, float64(k)/openings))
	}
	c.Orifice, c.Note = t.match(j, name, c.Rows)
	return c, nil
}

// at solves a condition with the valve at an opening and a loss (k on the velocity in the run) added to the bypass.
func (t *ValveTable) at(j *job.Job, name string, opening, extra float64) (*Condition, error) {
	built, err := j.Build(name, job.SetOpening(t.Valve, opening))
	if err != nil {
		return nil, err
	}
	for i := range built.Network.Runs {
		if r := &built.Network.Runs[i]; r.Name == t.RunB && extra > 0 {
			r.Fittings = append(r.Fittings, hydraulics.Fitting{Name: "orifice plate", Coefficient: hydraulics.Coefficient{K: extra}})
		}
	}
	c := &Condition{Condition: built.Row.Condition.Value, built: built}
	if c.solved, err = c.solve(nil); err != nil {
		c.Notes = append(c.Notes, "no solution: "+err.Error())
		return c, nil
	}
	c.report(j)
	return c, nil
}

// flows returns the flow through either port.
func (t *ValveTable) flows(c *Condition) (a, b Figure) {
	a, b = unknown, unknown
	for _, r := range c.Runs {
		switch r.Run {
		case t.RunA:
			a = r.Flow
		case t.RunB:
			b = r.Flow
		}
	}
	return a, b
}

func (t *ValveTable) row(c *Condition, opening float64) ValveRow {
	a, b := t.flows(c)
	row := ValveRow{Opening: Figure(opening), A: a, B: b, Total: a + b, Notes: c.Notes}
	for _, p := range c.Pumps {
		if p.Running {
			row.Pumps = append(row.Pumps, ValvePump{p.Pump, p.Flow, p.NPSHMargin, p.BestShare})
		}
	}
	return row
}

// match sizes the orifice plate of the bypass by halving an interval of its loss.
func (t *ValveTable) match(j *job.Job, name string, rows []ValveRow) (*MatchingPlate, string) {
	want, bypass := rows[openings].Total, rows[0].Total
	switch {
	case !want.Known() || !bypass.Known():
		return nil, "the flow at one end of the stroke is not known, so that no orifice can be sized"
	case math.Abs(float64(bypass)) <= math.Abs(float64(want)):
		return nil, fmt.Sprintf("the bypass passes %s m3/h, no more than the %s m3/h through port A: it needs no orifice", short(float64(bypass), 4), short(float64(want), 4))
	}
	total := func(k float64) float64 {
		c, err := t.at(j, name, 0, k)
		if err != nil {
			return math.NaN()
		}
		a, b := t.flows(c)
		return math.Abs(float64(a + b))
	}
	low, high := 0.0, 1.0
	for total(high) > math.Abs(float64(want)) && high < 1e6 {
		high *= 4
	}
	for range 50 {
		if middle := (low + high) / 2; total(middle) > math.Abs(float64(want)) {
			low = middle
		} else {
			high = middle
		}
	}
	k := (low + high) / 2
	plate := &MatchingPlate{Run: t.RunB, Flow: want, K: Figure(k), Hole: unknown, Bore: unknown}
	c, err := t.at(j, name, 0, k)
	if err != nil || math.IsNaN(total(k)) {
		return nil, "the flow on bypass is not known over the losses tried, so that no orifice can be sized"
	}
	for _, r := range c.built.Network.Runs {
		if r.Name == t.RunB {
			bore := r.Pipe.ClearBore()
			plate.Bore = Figure(bore * 1e3)
			if hole, err := hydraulics.OrificeHole(k, bore, hydraulics.OrificeReynolds); err == nil {
				plate.Hole = Figure(hole * 1e3)
			} else {
				plate.Notes = "no plate of ISO 5167-2 has this loss: " + err.Error()
			}
		}
	}
	return plate, ""
}
