package study

import (
	"math"
	"slices"
	"strings"

	"brinehead/fluids"
)

// SuctionPicture is what the plots of one pump's suction in one case show, in SI.
type SuctionPicture struct {
	Pump      string
	Available []Trace // NPSH over flow, with the strainer clean, as it is, and at its limit
	Required  Trace
	Rule      Trace
	Points    Trace // digitised
	Duty      []DutyMark

	Strainers []StrainerPicture
	Profile   SuctionProfile
}

// DutyMark is an operating point on the NPSH available.
type DutyMark struct {
	Name        string
	Flow, Value float64
}

// StrainerPicture is the margin over one strainer's blockage.
type StrainerPicture struct {
	Strainer     string
	Margin       Trace
	Rule         float64
	Limit, Alarm float64 // blockage, NaN where there is none
	Present      DutyMark
}

// SuctionProfile is the suction from its source to the pump: distance, and what stands there.
type SuctionProfile struct {
	Pipe, Grade, Absolute, Vapour Trace
	Names                         []DutyMark
}

// Pictures returns what there is to plot of a case, a picture a pump; nil where there is no answer.
func (c *SuctionCase) Pictures() (pictures []SuctionPicture) {
	if c.Reason != "" {
		return nil
	}
	for _, p := range c.Pumps {
		pictures = append(pictures, c.picture(p))
	}
	return pictures
}

func (c *SuctionCase) picture(p PumpSuction) SuctionPicture {
	s := c.solved
	i := slices.IndexFunc(s.Pumps, func(q Pump) bool { return q.Pump == p.Pump })
	u := s.solved.Plant.Pumps[i]
	out := SuctionPicture{Pump: p.Pump}
	_, end := u.Range()
	margin := s.ruleMargin(p.Pump)
	if from, to, known := u.NPSHRequiredRange(); known {
		out.Required = traceOf("required", from, to, u.NPSHRequired)
		out.Rule = traceOf("required and margin", from, to, func(q float64) float64 { return u.NPSHRequired(q) + margin })
	}
	n := speedRatio(s.solved.Plant.Pumps[i].Pump)
	for _, d := range u.Curve.Points {
		out.Points.Flow, out.Points.Value = append(out.Points.Flow, d.Flow*n), append(out.Points.Value, d.NPSHRequired*n*n)
	}
	available := func(name string, blocked func() *Condition) {
		with := blocked()
		if with == nil || with.solved == nil {
			return
		}
		if demand, err := with.solved.SystemCurve(i, 0, end, picturePoints); err == nil {
			t := Trace{Name: name}
			for _, d := range demand {
				t.Flow, t.Value = append(t.Flow, d.Flow), append(t.Value, d.NPSHAvailable)
			}
			out.Available = append(out.Available, t)
		}
		if d := with.Pumps[i]; d.Flow.Known() {
			out.Duty = append(out.Duty, DutyMark{name, float64(d.Flow) / 3600, float64(d.NPSHAvailable)})
		}
	}
	available("present", func() *Condition { return s })
	for _, l := range c.Strainers {
		if !slices.Contains(feeds(s, u.From), l.run) {
			continue
		}
		at := func(blockage Figure) func() *Condition {
			return func() *Condition {
				built := s.built.Clone()
				built.Network.Runs[l.run].Fittings[l.fitting].Blockage = float64(blockage)
				solved, err := built.Solve()
				if err != nil {
					return nil
				}
				with := Condition{built: built, solved: solved}
				with.Pumps = slices.Clone(s.Pumps)
				if d := solved.Duty(i); !d.Extrapolated {
					with.Pumps[i].Flow, with.Pumps[i].NPSHAvailable = Figure(d.Flow*3600), Figure(d.NPSHAvailable)
				} else {
					with.Pumps[i].Flow = unknown
				}
				return &with
			}
		}
		const same = 1e-6 // of the blockage: two lines would be one
		if present := s.solved.Network.Runs[l.run].Fittings[l.fitting].Blockage; present > same {
			available(l.Strainer+" clean", at(0))
		}
		if l.Limit.Blockage.Known() {
			available(l.Strainer+" at its limit", at(l.Limit.Blockage))
		}
		out.Strainers = append(out.Strainers, l.picture(p, margin))
	}
	if s.Pumps[i].Flow.Known() {
		out.Profile = s.suctionProfile(i)
	}
	return out
}

// picture returns the margin of one pump over the blockage.
func (l *StrainerLimit) picture(p PumpSuction, rule float64) StrainerPicture {
	out := StrainerPicture{Strainer: l.Strainer, Rule: rule, Limit: float64(l.Limit.Blockage), Alarm: float64(l.Alarm.Blockage)}
	out.Margin.Name = p.Pump
	for _, st := range l.states {
		for _, q := range st.Pumps {
			if q.Pump == p.Pump && q.Margin.Known() {
				out.Margin.Flow, out.Margin.Value = append(out.Margin.Flow, float64(st.Blockage)), append(out.Margin.Value, float64(q.Margin))
			}
		}
	}
	out.Present = DutyMark{"present", float64(l.Present.Blockage), float64(p.Margin)}
	return out
}

// suctionProfile goes the way of the suction: friction falls evenly along a run, its fittings stand evenly along it.
func (c *Condition) suctionProfile(pump int) SuctionProfile {
	s := c.solved
	var p SuctionProfile
	weight := s.Water.Density * fluids.Gravity
	distance := 0.0
	put := func(z, head, velocityHead float64) {
		grade := head - velocityHead
		for _, t := range []struct {
			to *Trace
			y  float64
		}{{&p.Pipe, z}, {&p.Grade, grade}, {&p.Absolute, grade - z + s.Atmosphere/weight}, {&p.Vapour, s.Water.VapourPressure / weight}} {
			t.to.Flow, t.to.Value = append(t.to.Flow, distance), append(t.to.Value, t.y)
		}
	}
	for _, step := range suctionPath(c, s.Plant.Pumps[pump].From) {
		r := s.Network.Runs[step.run]
		from, to := r.From, r.To
		if !step.forward {
			from, to = r.To, r.From
		}
		v := s.RunFlows[step.run] / r.Pipe.Area()
		velocityHead := v * v / (2 * fluids.Gravity)
		z := func(share float64) float64 {
			return s.Elevations[from] + share*(s.Elevations[to]-s.Elevations[from])
		}
		start, head := distance, s.Heads[from]
		sign := 1.0
		if !step.forward {
			sign = -1
		}
		if r.Pipe.Length == 0 {
			put(z(0), head, velocityHead)
		}
		parts := float64(len(r.Fittings) + 1)
		friction := sign * r.PipeLoss(s.RunFlows[step.run], s.Network.Viscosity)
		for k := range len(r.Fittings) + 1 {
			put(z(float64(k)/parts), head, velocityHead)
			distance = start + r.Pipe.Length*float64(k+1)/parts
			head -= friction / parts
			put(z(float64(k+1)/parts), head, velocityHead)
			if k < len(r.Fittings) {
				head -= sign * r.FittingLoss(k, s.RunFlows[step.run], s.Network.Viscosity)
				if strings.Contains(strings.ToLower(r.Fittings[k].Name), "strainer") {
					p.Names = append(p.Names, DutyMark{strings.TrimSpace(r.Fittings[k].Name + " " + r.Fittings[k].Tag), distance, head - velocityHead})
				}
			}
		}
	}
	if n := len(p.Grade.Flow); n > 0 && !math.IsNaN(p.Grade.Value[n-1]) {
		p.Names = append(p.Names, DutyMark{s.Plant.Pumps[pump].Name, p.Grade.Flow[n-1], p.Grade.Value[n-1]})
	}
	return p
}
