package report

import (
	"fmt"
	"io"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
)

// WriteTrimText writes the answer for reading: the diameter to ask for or why there is none, each method, what stops it, the plant before and
// after, side effects, and the other ways to the duty.
func WriteTrimText(w io.Writer, a *study.Trim, u Units) error {
	var lines []string
	names := strings.Join(a.Pumps, ", ")
	if a.Choice != nil {
		lines = append(lines, wrap("", "  ", fmt.Sprintf("CUT %s TO %s mm IN THE END, FIRST TO %s mm AND TEST (now %s mm)", names, mm(a.Choice.Final), mm(a.Choice.First), mm(a.Present)))...)
		lines = append(lines, wrap("", "  ", fmt.Sprintf("%s: the methods differ by %.1f mm; the most cautious counts, rounded up to %s mm. A cut cannot be undone.", a.Job, float64(a.Spread), mm(a.Choice.Step)))...)
	} else {
		lines = append(lines, wrap("", "  ", fmt.Sprintf("NO CUT of %s: %s", names, a.Refusal))...)
	}
	for _, n := range a.Notes {
		lines = append(lines, wrap("  ", "    ", "Note: "+n)...)
	}
	if len(a.Results) > 0 {
		lines = append(append(lines, ""), methodLines(a, u)...)
	}
	if len(a.States) > 0 {
		lines = append(append(lines, ""), stateLines(a, u)...)
	}
	lines = append(lines, sideEffectLines(a, u)...)
	lines = append(append(lines, ""), optionLines(a, u)...)
	if a.Choice != nil && len(a.Choice.Cautions) > 0 {
		lines = append(lines, "", "Cautions")
		for _, c := range a.Choice.Cautions {
			lines = append(lines, wrap("  ", "    ", c)...)
		}
	}
	lines = append(append(lines, ""), wrap("", "", "NPSH required does not fall with a trim, and may rise. The cut is the maker's and the workshop's to agree. "+Caution)...)
	_, err := io.WriteString(w, strings.Join(lines, "\n")+"\n")
	return err
}

// mm writes a diameter without needless digits.
func mm(f study.Figure) string { return fmt.Sprintf("%.5g", float64(f)) }

func methodLines(a *study.Trim, u Units) []string {
	inlet := fmt.Sprintf("inlet edge %s mm", mm(a.Inlet))
	if a.StandIn {
		inlet += ", a stand-in: half of the full diameter (common practice 0.4 to 0.6)"
	}
	lines := wrap("", "  ", fmt.Sprintf("The smallest diameter that keeps every minimum flow and pressure, by each method (from %s mm; type number %.2f; %s)", mm(a.From), float64(a.TypeNumber), inlet))
	g := grid{left: 1, head: []string{"method", "mm", "cut %", "answer"}}
	for _, r := range a.Results {
		word := r.Word
		if word == "" {
			word = "stopped"
		}
		g.rows = append(g.rows, []string{r.Method, u.Text(r.Diameter, "", 2), u.Text(100*r.Cut, "", 2), word})
	}
	lines = append(lines, g.lines("  ")...)
	said := map[string]bool{}
	for _, r := range a.Results {
		text := r.Reason
		if r.Governs != nil && r.Governs.Limit != "" {
			text = fmt.Sprintf("what stops the next millimetre: %s of %s in %s [%s]", r.Governs.Limit, r.Governs.On, r.Governs.Condition, r.Governs.Source)
		}
		if !said[text] {
			said[text] = true
			lines = append(lines, wrap("  ", "    ", text)...)
		}
	}
	for _, r := range a.Results {
		lines = append(lines, wrap("    ", "      ", r.Method+": "+r.Source)...)
	}
	return lines
}

func stateLines(a *study.Trim, u Units) []string {
	lines := []string{fmt.Sprintf("The pumps now (%s mm), after the first cut (%s mm) and in the end (%s mm)", mm(a.States[0].Diameter), mm(a.States[1].Diameter), mm(a.States[2].Diameter))}
	for k, c := range a.States[0].Conditions {
		lines = append(lines, wrap("  ", "    ", c.Condition)...)
		g := grid{left: 2, head: []string{"pump", "", u.Unit("m3/h"), "methods", "head " + u.Unit("m"), u.Unit("kW"), "eff. %", "margin", "of best %"}}
		for i := range c.Pumps {
			for s, state := range a.States {
				if k >= len(state.Conditions) || i >= len(state.Conditions[k].Pumps) {
					continue
				}
				p := state.Conditions[k].Pumps[i]
				span := "-"
				if p.Low.Known() && p.High-p.Low > 0.05 {
					span = u.Text(p.Low, "m3/h", 0) + " to " + u.Text(p.High, "m3/h", 0)
				}
				name := p.Pump
				if s > 0 {
					name = ""
				}
				flow := u.Text(p.Flow, "m3/h", 1)
				if !p.Flow.Known() {
					flow = "off curve"
				}
				g.rows = append(g.rows, []string{name, []string{"now", "first", "end"}[s], flow, span, u.Text(p.Head, "m", 2), u.Text(p.ShaftPower, "kW", 1), u.Text(100*p.Efficiency, "", 1),
					u.Text(p.NPSHMargin, "m", 2), u.Text(100*p.BestShare, "", 0)})
			}
		}
		lines = append(lines, g.lines("    ")...)
	}
	return lines
}

func sideEffectLines(a *study.Trim, u Units) []string {
	var lost, pressures, heads []string
	for _, e := range a.SideEffects {
		text := fmt.Sprintf("%s: %s of %s: from %s to %s %s, asked %s (%s)", e.Condition, e.Limit, e.On, u.Text(e.Before, e.Unit, 2), u.Text(e.After, e.Unit, 2), u.Unit(e.Unit), u.Text(e.Asked, e.Unit, 2), e.Is)
		switch {
		case e.Was == study.Met && e.Is != study.Met:
			lost = append(lost, wrap("  ", "    ", text)...)
		case e.Limit == "minimum pressure":
			pressures = append(pressures, wrap("  ", "    ", text)...)
		case e.Was != study.Met && e.Is == study.Met:
			heads = append(heads, wrap("  ", "    ", text)...)
		}
	}
	var lines []string
	for _, part := range []struct {
		title string
		list  []string
	}{{"Limits that the cut breaks", lost}, {"Limits that the cut heals", heads}, {"Pressures with a low-pressure alarm or standby start", pressures}} {
		if part.list != nil {
			lines = append(append(lines, "", part.title), part.list...)
		}
	}
	if len(a.SideEffects) > 0 && lost == nil {
		lines = append(lines, "", "The cut breaks no limit that is met now.")
	}
	return lines
}

func optionLines(a *study.Trim, u Units) []string {
	lines := []string{"Other ways to the same duty (shaft power of all pumps, drive loss included)"}
	g := grid{left: 1, head: []string{"way", "MWh a year", "fuel t", "CO2 t", "cost"}}
	for _, o := range a.Options {
		g.rows = append(g.rows, []string{o.Option, u.Text(o.Energy/1e3, "", 1), u.Text(o.Fuel, "", 1), u.Text(o.CO2, "", 1), u.Text(o.Cost, "", 0)})
	}
	lines = append(lines, g.lines("  ")...)
	if a.EnergyUnknown != "" {
		lines = append(lines, wrap("  ", "    ", a.EnergyUnknown)...)
	}
	for _, o := range a.Options {
		text := o.Option
		if o.What != "" {
			text += ": " + o.What
		}
		if o.Reason != "" {
			text += ": " + o.Reason
		}
		lines = append(lines, wrap("  ", "    ", text)...)
		var rows []string
		for _, c := range o.Conditions {
			row := c.Condition
			if c.Setting != "" {
				row += ": " + c.Setting
			}
			if c.Reason != "" {
				row += ": " + c.Reason
			} else {
				row += fmt.Sprintf(": %s %s, %s %s", u.Text(c.Power, "kW", 1), u.Unit("kW"), u.Text(c.Flow, "m3/h", 0), u.Unit("m3/h"))
			}
			rows = append(rows, wrap("    ", "      ", row)...)
		}
		lines = append(lines, rows...)
	}
	lines = append(lines, "  Factors")
	for _, f := range a.Factors {
		lines = append(lines, wrap("    ", "      ", fmt.Sprintf("%s: %s %s [%s]", f.Name, figureText(f.Value), f.Unit, f.Source))...)
	}
	return lines
}

// figureText writes a given figure as it was given.
func figureText(f study.Figure) string {
	if !f.Known() {
		return "-"
	}
	return fmt.Sprintf("%g", float64(f))
}

// WriteTrimCSV writes the pumps in every condition with every diameter.
func WriteTrimCSV(w io.Writer, a *study.Trim, u Units) error {
	t := &csvTable{units: u}
	t.add("state", "diameter [mm]", "condition", "pump", "trimmed", t.unit("flow", "m3/h"), t.unit("lowest flow of the methods", "m3/h"), t.unit("highest flow of the methods", "m3/h"), t.unit("head", "m"),
		t.unit("shaft power", "kW"), "efficiency [%]", t.unit("NPSH margin", "m"), "share of best-efficiency flow [%]")
	for _, s := range a.States {
		for _, c := range s.Conditions {
			for _, p := range c.Pumps {
				t.add(s.State, t.long(s.Diameter, ""), word(c.Condition), word(p.Pump), yesNo(p.Trimmed), t.figure(p.Flow, "m3/h"), t.figure(p.Low, "m3/h"), t.figure(p.High, "m3/h"), t.figure(p.Head, "m"),
					t.figure(p.ShaftPower, "kW"), t.figure(100*p.Efficiency, ""), t.figure(p.NPSHMargin, "m"), t.figure(100*p.BestShare, ""))
			}
		}
	}
	return t.write(w)
}

// WriteTrimMethodsCSV writes the diameter by each method.
func WriteTrimMethodsCSV(w io.Writer, a *study.Trim, _ Units) error {
	t := &csvTable{}
	t.add("method", "answer", "diameter [mm]", "cut [%]", "stopped by", "on", "condition", "reason", "source")
	for _, r := range a.Results {
		g := study.Governance{}
		if r.Governs != nil {
			g = *r.Governs
		}
		t.add(r.Method, r.Word, t.long(r.Diameter, ""), t.figure(100*r.Cut, ""), g.Limit, word(g.On), word(g.Condition), word(r.Reason), word(r.Source))
	}
	return t.write(w)
}

// WriteOptionsCSV writes the ways to the duty, condition by condition and over a year.
func WriteOptionsCSV(w io.Writer, a *study.Trim, u Units) error {
	t := &csvTable{units: u}
	t.add("way", "what", "condition", "setting", t.unit("shaft power", "kW"), t.unit("flow", "m3/h"), "hours", "energy [kWh]", "fuel [t]", "CO2 [t]", "cost", "reason")
	for _, o := range a.Options {
		for _, c := range o.Conditions {
			t.add(o.Option, word(o.What), word(c.Condition), word(c.Setting), t.figure(c.Power, "kW"), t.figure(c.Flow, "m3/h"), t.figure(c.Hours, ""), "", "", "", "", word(c.Reason))
		}
		t.add(o.Option, word(o.What), "a year", "", "", "", "", t.figure(o.Energy, ""), t.figure(o.Fuel, ""), t.figure(o.CO2, ""), t.figure(o.Cost, ""), word(o.Reason))
	}
	return t.write(w)
}

// WriteSideEffectsCSV writes every limit whose value the cut changes.
func WriteSideEffectsCSV(w io.Writer, a *study.Trim, u Units) error {
	t := &csvTable{units: u}
	t.add("condition", "limit", "on", "unit", "before", "after", "limit value", "was", "is", "reason")
	for _, e := range a.SideEffects {
		t.add(word(e.Condition), e.Limit, word(e.On), u.Unit(e.Unit), t.figure(e.Before, e.Unit), t.figure(e.After, e.Unit), t.figure(e.Asked, e.Unit), string(e.Was), string(e.Is), word(e.Reason))
	}
	return t.write(w)
}
