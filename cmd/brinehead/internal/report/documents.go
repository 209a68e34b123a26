package report

import (
	"fmt"
	"math"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
)

// checkDocument is the report of `check`.
func checkDocument(a *study.Check, o Output, all []plot) *document {
	u := o.Units
	d := newDocument(o, "Check of the pumps", a.Job, joined(summary(a)))
	d.section("Result")
	d.add(block{text: "Limits that are not met:"})
	d.items(orOne(unwrapped(notMet(a, u)), "none"))
	unjudged := unwrapped(notJudged(a))
	d.add(block{text: "Limits that could not be judged, which is no pass:"})
	d.items(orOne(unjudged, "none"))
	d.section("Operating points")
	for i := range a.Conditions {
		c := &a.Conditions[i]
		d.table(c.Condition+": "+waterText(c, u), pumpGrid(c, u))
		d.items(c.Notes)
	}
	d.section("Verdicts, each with its rule")
	g := grid{left: 3, head: []string{"condition", "limit", "on", "value", "asked", "unit", "verdict", "rule"}}
	for _, c := range a.Conditions {
		for _, f := range c.Findings {
			g.rows = append(g.rows, []string{c.Condition, f.Limit, f.On, significant(u.Turn(f.Value, f.Unit)), significant(u.Turn(f.LimitValue, f.Unit)), u.Unit(f.Unit), string(f.Verdict), f.Origin()})
		}
	}
	d.table("Every limit judged", g)
	if worst, pump := leastMargin(a); worst != nil {
		d.section("NPSH line by line, where the margin is least")
		d.table(fmt.Sprintf("%s in %s, %s of the water pumped", worst.Pumps[pump].Pump, worst.Condition, u.Unit("m")), npshGrid(worst.NPSHLines(pump), worst.Pumps[pump], u))
		d.section("Losses in that condition")
		d.table("Runs of "+worst.Condition, runGrid(worst, u))
		d.table("Fittings of "+worst.Condition, fittingGrid(worst, u))
	}
	d.section("What was modelled, and the plots")
	drawn := map[string]bool{}
	for i := range all { // the network once, of the condition where the margin is least; curves of every condition
		schematic := strings.HasSuffix(all[i].name, "-schematic")
		if worst, _ := leastMargin(a); schematic && (drawn["schematic"] || worst != nil && !strings.Contains(all[i].caption, "in "+worst.Condition+":")) {
			continue
		} else if schematic {
			drawn["schematic"] = true
		}
		d.add(block{plot: &all[i]})
	}
	assumptions(d, a.Supplied, a.Defaults, a.SheetNotes)
	d.finish(o, unjudged)
	return d
}

func orOne(list []string, none string) []string {
	if len(list) == 0 {
		return []string{none}
	}
	return list
}

// significant writes a figure with four digits, which is what the inputs deserve.
func significant(f study.Figure) string {
	if !f.Known() {
		return "-"
	}
	return fmt.Sprintf("%.4g", float64(f))
}

// leastMargin finds the condition and pump with the least NPSH margin that is known.
func leastMargin(a *study.Check) (worst *study.Condition, pump int) {
	least := math.Inf(1)
	for i := range a.Conditions {
		for k, p := range a.Conditions[i].Pumps {
			if m := float64(p.NPSHMargin); p.Running && m < least {
				least, worst, pump = m, &a.Conditions[i], k
			}
		}
	}
	return worst, pump
}

func npshGrid(lines []study.NPSHLine, p study.Pump, u Units) grid {
	g := grid{left: 2, head: []string{"part", "run", u.Unit("m")}}
	for _, l := range lines {
		g.rows = append(g.rows, []string{l.What, l.Run, u.Text(l.Head, "m", 3)})
	}
	return grid{left: 2, head: g.head, rows: append(g.rows, []string{"NPSH available", "", u.Text(p.NPSHAvailable, "m", 3)},
		[]string{"NPSH required at " + u.Text(p.Flow, "m3/h", 1) + " " + u.Unit("m3/h"), "", u.Text(p.NPSHRequired, "m", 3)}, []string{"margin", "", u.Text(p.NPSHMargin, "m", 3)})}
}

func fittingGrid(c *study.Condition, u Units) grid {
	g := grid{left: 3, head: []string{"run", "tag", "fitting", "loss " + u.Unit("m"), "drop " + u.Unit("bar")}}
	for _, f := range c.Fittings {
		g.rows = append(g.rows, []string{f.Run, f.Tag, f.Fitting, u.Text(f.Loss, "m", 3), u.Text(f.Drop, "bar", 4)})
	}
	return g
}

// assumptions lists what the program put in, judged by default, and found odd.
func assumptions(d *document, supplied []study.Supplied, defaults []study.Default, odd []string) {
	d.section("Assumptions and defaults taken")
	d.items(odd)
	rules := grid{left: 2, head: []string{"limit judged by default", "source"}}
	for _, x := range defaults {
		rules.rows = append(rules.rows, []string{x.Limit, x.Source})
	}
	d.table("Rules of common practice, where the job gives none", rules)
	g := grid{left: 4, head: []string{"on", "what", "figure", "source"}}
	for _, s := range supplied {
		g.rows = append(g.rows, []string{s.On, s.What, s.Figure, s.Source})
	}
	d.table("Figures from catalogues and defaults, where the tables leave it open", g)
	if len(odd)+len(defaults)+len(supplied) == 0 {
		d.text("None: the job gives every figure and every rule itself.")
	}
}

// suctionDocument is the report of `suction`.
func suctionDocument(a *study.Suction, o Output, all []plot) *document {
	u := o.Units
	d := newDocument(o, "Suction dossier", a.Job, joined(suctionVerdict(a, u)))
	if a.Before != nil {
		d.section("Before the change")
		d.items(joined(suctionVerdict(a.Before, u)))
		d.table("Before: every pump in every case", marginGrid(a.Before, u))
	}
	d.section("Cases")
	d.items(unwrapped(caseLines(a, u)[1:]))
	d.section("Margins")
	d.table("Every pump in every case, NPSH required at the flow the pump then runs at", marginGrid(a, u))
	var unjudged []string
	for i, c := range a.Cases {
		if c.Reason != "" {
			unjudged = append(unjudged, fmt.Sprintf("case %d: %s", i+1, c.Reason))
		}
		for _, p := range c.Pumps {
			for _, f := range p.Rules {
				text := fmt.Sprintf("case %d, %s: %s: %s [%s]", i+1, p.Pump, f.Limit, reason(f, u), f.Source)
				if f.Verdict == study.NotJudged {
					unjudged = append(unjudged, text)
				}
				if f.Verdict == study.NotMet {
					d.items([]string{text})
				}
			}
		}
	}
	d.section("How dirty a strainer may get")
	d.table(fmt.Sprintf("Drops in %s; the alarm keeps %.0f %% of the rise in hand", u.Unit("bar"), 100*float64(a.Allowance)), strainerGrid(a, u))
	d.items(unwrapped(strainerRemarks(a, u)))
	if a.Before != nil {
		d.table("Before the change", strainerGrid(a.Before, u))
	}
	d.section("How far the margin holds, all else as it stands")
	g := grid{left: 3, head: []string{"case", "pump", "what", "answer", "unit", "what ends it"}}
	for i, c := range a.Cases {
		for _, p := range c.Pumps {
			for _, l := range p.Limits {
				answer := l.Word
				if answer == "" {
					answer = significant(u.Turn(l.Value, l.Unit))
				}
				g.rows = append(g.rows, []string{fmt.Sprint(i + 1), p.Pump, l.What, answer, u.Unit(l.Unit), l.Reason})
			}
		}
	}
	d.table("Solved for, not read off a grid", g)
	if remarks := unwrapped(suctionRemarks(a, u)); remarks != nil {
		d.section("Air, and other pumps on the same suction")
		d.items(remarks)
	}
	d.section("NPSH line by line, and the plots, where they matter most")
	d.text("Of the case with the least margin and of those in which a strainer may get least dirty; all others stand in the tables and plots beside this report.")
	for i, c := range a.Cases {
		for _, p := range c.Pumps {
			if len(p.Lines) > 0 && matters(a, i, p) {
				d.table(fmt.Sprintf("Case %d: %s in %s, %s of the water pumped", i+1, p.Pump, c.Condition, u.Unit("m")),
					npshGrid(p.Lines, study.Pump{Flow: p.Flow, NPSHAvailable: p.Available, NPSHRequired: p.Required, NPSHMargin: p.Margin}, u))
			}
		}
	}
	for i := range all {
		for k, c := range a.Cases {
			for _, p := range c.Pumps {
				if matters(a, k, p) && strings.HasPrefix(all[i].caption, fmt.Sprintf("%s: %s, %s:", a.Job, c.Condition, p.Pump)) && strings.HasPrefix(all[i].name, fmt.Sprintf("%d-", k+1)) {
					d.add(block{plot: &all[i]})
				}
			}
		}
	}
	assumptions(d, nil, a.Defaults, nil)
	d.finish(o, append(unjudged, "Whether a strainer's basket bears the drop: its maker says."),
		"Strainer: the loss goes with the free area to the power of minus two, or the row's exponent (I. E. Idelchik, from memory); matted leaf or sheet does worse.",
		"Submergence: G. E. Hecker (1987), as in the Hydraulic Institute, Engineering Data Book.")
	return d
}

// matters says whether a pump in a case has the least margin of all, or is the first in the case in which one of its strainers may get least
// dirty.
func matters(a *study.Suction, k int, p study.PumpSuction) bool {
	least := math.Inf(1)
	for _, c := range a.Cases {
		for _, q := range c.Pumps {
			if m := float64(q.Margin); m < least {
				least = m
			}
		}
	}
	if float64(p.Margin) == least {
		return true
	}
	for _, s := range a.Cases[k].Strainers {
		first := true
		for _, c := range a.Cases {
			for _, other := range c.Strainers {
				first = first && !(other.Strainer == s.Strainer && other.Limit.Drop < s.Limit.Drop)
			}
		}
		if first && s.Limit.Drop.Known() && a.Cases[k].Pumps[0].Pump == p.Pump {
			return true
		}
	}
	return false
}

// trimDocument is the report of `trim`.
func trimDocument(a *study.Trim, o Output, all []plot) *document {
	u := o.Units
	head := []string{fmt.Sprintf("No cut of %s: %s", strings.Join(a.Pumps, ", "), a.Refusal)}
	if a.Choice != nil {
		head = []string{fmt.Sprintf("Cut %s to %s mm in the end, first to %s mm and test (now %s mm)", strings.Join(a.Pumps, ", "), mm(a.Choice.Final), mm(a.Choice.First), mm(a.Present)),
			fmt.Sprintf("The methods differ by %.1f mm; the most cautious counts, rounded up to %s mm. A cut cannot be undone.", float64(a.Spread), mm(a.Choice.Step))}
	}
	d := newDocument(o, "Impeller trim", a.Job, head)
	d.section("Result")
	d.items(a.Notes)
	g := grid{left: 1, head: []string{"method", "diameter mm", "cut %", "answer", "what stops the next millimetre", "source"}}
	for _, r := range a.Results {
		word := r.Word
		if word == "" {
			word = "stopped"
		}
		g.rows = append(g.rows, []string{r.Method, u.Text(r.Diameter, "", 2), u.Text(100*r.Cut, "", 2), word, r.Reason, r.Source})
	}
	d.table("The smallest diameter that keeps every minimum flow and pressure", g)
	if len(a.States) > 0 {
		d.section("The pumps now, after the first cut and in the end")
		g := grid{left: 3, head: []string{"condition", "pump", "", u.Unit("m3/h"), "methods", "head " + u.Unit("m"), u.Unit("kW"), "eff. %", "margin " + u.Unit("m"), "of best %"}}
		for k, c := range a.States[0].Conditions {
			for i := range c.Pumps {
				for s, state := range a.States {
					if k >= len(state.Conditions) || i >= len(state.Conditions[k].Pumps) {
						continue
					}
					p := state.Conditions[k].Pumps[i]
					g.rows = append(g.rows, []string{c.Condition, p.Pump, []string{"now", "first", "end"}[s], u.Text(p.Flow, "m3/h", 1), u.Text(p.Low, "m3/h", 0) + " to " + u.Text(p.High, "m3/h", 0), u.Text(p.Head, "m", 2),
						u.Text(p.ShaftPower, "kW", 1), u.Text(100*p.Efficiency, "", 1), u.Text(p.NPSHMargin, "m", 2), u.Text(100*p.BestShare, "", 0)})
				}
			}
		}
		d.table("Every condition", g)
	}
	if side := unwrapped(sideEffectLines(a, u)); side != nil {
		d.section("Side effects")
		d.items(side)
	}
	d.section("Other ways to the same duty")
	ways := grid{left: 1, head: []string{"way", "what", "MWh a year", "fuel t", "CO2 t", "cost"}}
	each := grid{left: 3, head: []string{"way", "condition", "setting", "shaft power " + u.Unit("kW"), u.Unit("m3/h"), "hours"}}
	for _, w := range a.Options {
		ways.rows = append(ways.rows, []string{w.Option, strings.TrimSpace(w.What + " " + w.Reason), u.Text(w.Energy/1e3, "", 1), u.Text(w.Fuel, "", 1), u.Text(w.CO2, "", 1), u.Text(w.Cost, "", 0)})
		for _, c := range w.Conditions {
			each.rows = append(each.rows, []string{w.Option, c.Condition, strings.TrimSpace(c.Setting + " " + c.Reason), u.Text(c.Power, "kW", 1), u.Text(c.Flow, "m3/h", 0), u.Text(c.Hours, "", 0)})
		}
	}
	d.table("A year", ways)
	d.table("Condition by condition", each)
	factors := grid{left: 1, head: []string{"factor", "value", "unit", "source"}}
	for _, f := range a.Factors {
		factors.rows = append(factors.rows, []string{f.Name, figureText(f.Value), f.Unit, f.Source})
	}
	d.table("Factors", factors)
	d.section("Plots")
	d.plots(all)
	d.section("Cautions of the cut")
	if a.Choice != nil {
		d.items(a.Choice.Cautions)
	}
	d.items([]string{"NPSH required does not fall with a trim, and may rise.", "The cut is the maker's and the workshop's to agree; vanes must still overlap."})
	var unjudged []string
	if a.EnergyUnknown != "" {
		unjudged = append(unjudged, a.EnergyUnknown)
	}
	d.finish(o, append(unjudged, a.Notes...))
	return d
}

// compareDocument is the report of `compare`.
func compareDocument(a *study.Comparison, o Output, all []plot) *document {
	u := o.Units
	d := newDocument(o, "Before and after a change", a.Job+", change "+a.Change, joined(compareSummary(a)))
	d.section("Result")
	d.items(unwrapped(limitLines(a, u)))
	d.section("What the change rewrites")
	d.items(orOne(unwrapped(inputLines(a)), "nothing"))
	d.section("The worst of all conditions")
	d.items(unwrapped(worstLines(a, u)))
	d.section("Pumps before and after")
	for i := range a.Conditions {
		c := &a.Conditions[i]
		if c.Differs() {
			d.table(c.Condition, comparedPumps(c, u))
		} else {
			d.text("%s: no figure and no verdict is another.", c.Condition)
		}
	}
	d.section("What the harbour test is to show after the change")
	bands := grid{left: 3, head: []string{"condition", "reading", "on", "unit", "low", "best", "high"}}
	for _, c := range a.Test.Conditions {
		for _, r := range c.Readings {
			bands.rows = append(bands.rows, []string{c.Condition, r.Quantity, r.On, u.Unit(r.Unit), significant(u.Turn(r.Low, r.Unit)), significant(u.Turn(r.Best, r.Unit)), significant(u.Turn(r.High, r.Unit))})
		}
	}
	d.table("Flow and gauge readings, acceptance grade "+a.Test.Grade.Name, bands)
	tolerances := grid{left: 2, head: []string{"on", "what", "low", "best", "high", "unit", "source"}}
	for _, t := range a.Test.Tolerances {
		tolerances.rows = append(tolerances.rows, []string{t.On, t.What, significant(t.Low), significant(t.Best), significant(t.High), t.Unit, t.Source})
	}
	d.table("Tolerances of the inputs", tolerances)
	d.section("Plots")
	d.plots(all)
	d.finish(o, unwrapped(notJudgedAfter(a)))
	return d
}

// pumpDocument is the report of `pump`.
func pumpDocument(a *study.PumpSheets, o Output, all []plot) *document {
	u := o.Units
	d := newDocument(o, "Pump sheets", a.Job, []string{fmt.Sprintf("As in %s, water of %.1f kg/m3", a.Condition, float64(a.Density))})
	var odd []string
	for i := range a.Sheets {
		s := &a.Sheets[i]
		d.section(s.Pumps + ": curve " + s.Curve)
		d.items(s.Notes)
		d.items(unwrapped(factLines(s, u)))
		d.table("How the sheet was fitted, each quantity over its own flows", fitGrid(s, u))
		d.table("The curve, with the heads that grade "+s.Grade.Name+" accepts", pointsGrid(s, u))
		odd = append(odd, s.Notes...)
	}
	d.section("Plots")
	d.plots(all)
	d.finish(o, odd)
	return d
}
