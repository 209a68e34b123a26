package study

import (
	"fmt"
	"math"
	"strings"

	"brinehead/curves"
	"brinehead/pumps"
)

// drive fills in what a pump's curve, speed and motor say of it beside its operating point, and notes what is doubtful.
func (c *Condition) drive(p *Pump, u curves.Pump, d curves.Duty) {
	p.NPSHRequiredHigh = Figure(d.NPSHRequiredHigh)
	p.curve(u)
	p.MotorLoad = Figure(d.ShaftPower / u.Motor.Rating)
	ampere, _ := u.Motor.Current(d.ShaftPower)
	p.MotorCurrent, p.CurrentBand = Figure(ampere), unknown
	if p.MotorCurrent.Known() {
		p.CurrentBand = pumps.CurrentBand
	}
	most, _ := u.GreatestPower(c.solved.Water.Density)
	p.GreatestPower, p.GreatestAt, p.GreatestAtEnd = Figure(most.Power/1e3), Figure(most.Flow*3600), most.AtEnd
	if !d.Running {
		p.GreatestPower, p.GreatestAt, p.GreatestAtEnd, p.MotorLoad = unknown, unknown, false, unknown
		return
	}
	c.speedNote(u)
}

// curve fills in what curve the pump has, and its speed.
func (p *Pump) curve(u curves.Pump) {
	p.Speed, p.Impeller, p.CurveOrigin = unknown, unknown, "digitised"
	if u.Curve.Origin != "" {
		p.CurveOrigin = u.Curve.Origin
	}
	if n := u.Speed; n > 0 {
		p.Speed = Figure(n)
	} else if n := u.Curve.Speed; n > 0 {
		p.Speed = Figure(n)
	}
	if u.Curve.Impeller > 0 {
		p.Impeller = Figure(math.Round(u.Curve.Impeller*1e6) / 1e3)
	}
}

// Speed off the sheet's by more than this share is beyond what affinity is held good for (ISO 9906 tests between 50 and 120 % of the
// rated speed for head, 80 and 120 % for efficiency: from memory, to be verified).
const affinitySpeedShare = 0.20

func (c *Condition) speedNote(u curves.Pump) {
	if !(u.Speed > 0 && u.Curve.Speed > 0) {
		if u.Speed > 0 {
			c.Notes = append(c.Notes, fmt.Sprintf("%s: the sheet of its curve does not say at what speed it holds; the pump's own %.0f rpm is not applied", u.Name, u.Speed))
		}
		return
	}
	if n := u.Speed / u.Curve.Speed; math.Abs(n-1) > affinitySpeedShare {
		c.Notes = append(c.Notes, fmt.Sprintf("%s runs at %.0f %% of the speed of its sheet: beyond 20 %% off it the affinity laws lose efficiency and NPSH required (ISO 9906, from memory, verify)", u.Name, 100*n))
	}
}

// TrimDuty is what a pump with a trimmed impeller does by one method of trim.
type TrimDuty struct {
	Method     string `json:"method"`
	Source     string `json:"source"`
	Flow       Figure `json:"flow_m3h"`
	Head       Figure `json:"head_m"`
	ShaftPower Figure `json:"shaft_power_kW"`
	NPSHMargin Figure `json:"npsh_margin_m"`
	BestShare  Figure `json:"best_efficiency_share"`
}

// weigh sets the methods of trim beside each other: what each gives for the pumps, and the limits they do not agree on, which
// are then not judged.
func (c *Condition) weigh(all map[pumps.TrimMethod]*Condition) {
	for i := range c.Pumps {
		trim := c.built.Trims[i]
		if !trim.ByLaw() {
			continue
		}
		p := &c.Pumps[i]
		for _, m := range pumps.TrimMethods() {
			d := TrimDuty{Method: m.String(), Source: m.Source(), Flow: unknown, Head: unknown, ShaftPower: unknown, NPSHMargin: unknown, BestShare: unknown}
			if other := all[m]; len(other.Pumps) > i {
				o := other.Pumps[i]
				d.Flow, d.Head, d.ShaftPower, d.NPSHMargin, d.BestShare = o.Flow, o.Head, o.ShaftPower, o.NPSHMargin, o.BestShare
			}
			p.Trim = append(p.Trim, d)
		}
		if p.Running {
			c.Notes = append(c.Notes, trimNote(*p))
		}
	}
	for k := range c.Findings {
		c.Findings[k].weigh(all)
	}
}

// trimNote says what the methods give for one pump.
func trimNote(p Pump) string {
	var parts []string
	for _, t := range p.Trim {
		if t.Flow.Known() {
			parts = append(parts, fmt.Sprintf("%s %.0f m3/h at %.1f m", t.Method, float64(t.Flow), float64(t.Head)))
		} else {
			parts = append(parts, t.Method+" no figure")
		}
	}
	return fmt.Sprintf("%s, trimmed to %g mm: %s", p.Pump, float64(p.Impeller), strings.Join(parts, "; "))
}

// trimNotes says what is to be known of trimmed impellers, once for a job.
func (c *Condition) trimNotes() (notes []string) {
	for i, t := range c.built.Trims {
		if !t.ByLaw() {
			continue
		}
		name := c.built.Pumps[i].Name
		notes = append(notes, fmt.Sprintf("%s is trimmed to %.5g mm from the digitised %.5g mm, a cut of %.3g %%. The figures are those of %s; a limit that not all methods meet, or miss, is not judged. The spread of the methods is the width of the answer. "+
			"NPSH required does not fall with a trim, and may rise", name, t.Diameter*1e3, t.From*1e3, 100*(1-t.Diameter/t.From), pumps.ISO9906))
		for _, w := range t.Cautions {
			notes = append(notes, fmt.Sprintf("%s: %s (%s)", name, w.Text, w.Source))
		}
		if t.StandIn {
			notes = append(notes, fmt.Sprintf("%s: the inlet edge's diameter is not given; half of the full diameter stands in for it (common practice 0.4 to 0.6). The column inlet diameter [mm] of pumps.csv makes ISO 9906 surer", name))
		}
	}
	return notes
}

// weigh sets a finding beside those of the other methods of trim. One that could not be judged stays so, for its own reason.
func (f *Finding) weigh(all map[pumps.TrimMethod]*Condition) {
	if f.Verdict == NotJudged {
		return
	}
	var words []string
	agree := true
	for _, m := range pumps.TrimMethods() {
		for _, o := range all[m].Findings {
			if o.Limit == f.Limit && o.On == f.On && o.Source == f.Source {
				agree = agree && o.Verdict == f.Verdict
				words = append(words, fmt.Sprintf("%s: %s (%s)", m, o.Reason, o.Verdict))
				break
			}
		}
	}
	if !agree {
		f.Verdict, f.Reason = NotJudged, "the methods of trim do not agree: "+strings.Join(words, "; ")
	}
}
