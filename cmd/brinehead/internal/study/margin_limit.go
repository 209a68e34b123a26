package study

import (
	"fmt"
	"math"

	"brinehead/cmd/brinehead/internal/job"
)

// MarginLimit is the end of one thing up to which a pump keeps the rules of its suction, all else as it stands.
type MarginLimit struct {
	What   string `json:"what"` // "least draught", "warmest water", "smallest suction bore", "highest speed", "greatest flow"
	Word   string `json:"word"` // "", "always" to the end of the search, "never"
	Value  Figure `json:"value"`
	Unit   string `json:"unit"`
	Reason string `json:"reason"` // what ends it, or how far was searched
}

// Ends of the searches.
const (
	warmestSearched  = 80.0 // degC: sea water; its properties end there
	hottestSearched  = 149.0
	deepestSearched  = 30.0 // m
	narrowestShare   = 0.3  // of the present bores
	widestShare      = 3.0
	slowestShare     = 0.3 // of the present speed
	fastestShare     = 1.6
	smallestImmersed = 1e-6 // m over a chest
)

// marginLimits solves for each end; nothing is read off a grid.
func (c *SuctionCase) marginLimits(j *job.Job, s *Condition, pump int, solve func(*job.Case) *Condition) (list []MarginLimit) {
	name := s.Pumps[pump].Pump
	rules := func(built *job.Case, err error) (Verdict, string) {
		if err != nil {
			return NotJudged, err.Error()
		}
		with := solve(built)
		if with.solved == nil {
			return NotJudged, with.Notes[len(with.Notes)-1]
		}
		found := npshRules(with, name)
		for _, f := range found {
			if f.Verdict != Met {
				return f.Verdict, fmt.Sprintf("%s: %s", f.Limit, f.Reason)
			}
		}
		return keeps(found), ""
	}
	if s.Draught.Known() {
		list = append(list, limitSearch("least draught", "m", float64(s.Draught), lowestChest(s)+smallestImmersed, deepestSearched, func(x float64) (Verdict, string) {
			return rules(c.make(func(row *job.ConditionRow) { row.Draught.Value = x }))
		}))
	}
	warmest, coldest := hottestSearched, 1.0
	if s.Water.Kind == "sea" {
		warmest, coldest = warmestSearched, -1.5
	}
	list = append(list, limitSearch("warmest water", "degC", float64(s.Water.Temperature), warmest, coldest, func(x float64) (Verdict, string) {
		return rules(c.make(func(row *job.ConditionRow) { row.Temperature.Value = x }))
	}))
	path := suctionPath(s, s.solved.Plant.Pumps[pump].From)
	bore := limitSearch("smallest suction bore", "% of the present", 1, narrowestShare, widestShare, func(x float64) (Verdict, string) {
		built := s.built.Clone()
		for _, p := range path {
			built.Network.Runs[p.run].Pipe.Bore *= x
		}
		return rules(built, nil)
	})
	bore.Value *= 100
	list = append(list, bore)
	if n := float64(s.Pumps[pump].Speed); n > 0 {
		list = append(list, limitSearch("highest speed", "rpm", n, n*fastestShare, n*slowestShare, func(x float64) (Verdict, string) {
			built := s.built.Clone()
			built.Pumps[pump].Speed = x
			return rules(built, nil)
		}))
	}
	return append(list, greatestFlow(s, pump))
}

// lowestChest returns the elevation of the highest sea inlet that is open: with less draught it draws air.
func lowestChest(s *Condition) float64 {
	top := math.Inf(-1)
	for i, p := range s.solved.Network.Points {
		if !s.built.SeaInlets[i] || !p.Fixed {
			continue
		}
		for _, r := range s.solved.Network.Runs {
			if !r.Shut && (r.From == i || r.To == i) {
				top = math.Max(top, s.built.Elevations[i])
			}
		}
	}
	if math.IsInf(top, -1) {
		return 0
	}
	return top
}

// limitSearch finds by bisection how far a thing may go from where it stands towards an end that harms; where it is not kept at
// present, how far it must go back towards the end that helps.
func limitSearch(what, unit string, present, harms, helps float64, judge func(x float64) (Verdict, string)) MarginLimit {
	l := MarginLimit{What: what, Unit: unit, Value: unknown}
	good, bad := present, harms
	if v, why := judge(present); v != Met {
		if v, _ := judge(helps); v != Met {
			l.Word, l.Reason = "never", fmt.Sprintf("not even at %s (%s)", short(helps, 4), why)
			return l
		}
		good, bad = helps, present
	} else if v, _ := judge(harms); v == Met {
		l.Word, l.Reason = "always", "to "+short(harms, 4)+", where the search ends"
		return l
	}
	for range 200 {
		middle := (good + bad) / 2
		if middle == good || middle == bad {
			break
		}
		if v, _ := judge(middle); v == Met {
			good = middle
		} else {
			bad = middle
		}
	}
	l.Value = Figure(good)
	_, l.Reason = judge(bad)
	return l
}

// greatestFlow finds the greatest flow of a pump at which its suction keeps the rules as they stand, whatever the delivery side does.
func greatestFlow(s *Condition, pump int) MarginLimit {
	l := MarginLimit{What: "greatest flow", Unit: "m3/h", Value: unknown}
	u := s.solved.Plant.Pumps[pump]
	low, high, known := u.NPSHRequiredRange()
	if !known {
		l.Word, l.Reason = "never", "the pump sheet gives no NPSH required"
		return l
	}
	rules := npshRules(s, u.Name)
	why := ""
	over := func(flow float64) bool {
		d, err := s.solved.Demand(pump, flow)
		if err != nil {
			why = err.Error()
			return true
		}
		required := u.NPSHRequired(flow)
		for _, f := range rules {
			value := d.NPSHAvailable - required
			if f.Limit == "NPSH ratio" {
				value = d.NPSHAvailable / required
			}
			if !(value >= float64(f.LimitValue)) {
				why = fmt.Sprintf("%s falls to %s", f.Limit, short(float64(f.LimitValue), 3))
				return true
			}
		}
		return false
	}
	inner := 1e-12 * (high - low) // the ends of the range by rounding
	low, high = low+inner, high-inner
	switch {
	case over(low):
		l.Word, l.Reason = "never", "not even at "+short(low*3600, 3)+" m3/h: "+why
		return l
	case !over(high):
		l.Word, l.Reason = "always", "to "+short(high*3600, 3)+" m3/h, where the NPSH required ends"
		return l
	}
	for range 200 {
		middle := (low + high) / 2
		if middle == low || middle == high {
			break
		}
		if over(middle) {
			high = middle
		} else {
			low = middle
		}
	}
	over(high)
	l.Value, l.Reason = Figure(low*3600), why
	return l
}
