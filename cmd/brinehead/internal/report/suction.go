package report

import (
	"fmt"
	"io"
	"math"
	"slices"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
)

// WriteSuctionText writes the dossier for reading: the verdict and the worst case first, then every case, how dirty the strainer may get, the other
// limits, and the NPSH of the worst case line by line.
func WriteSuctionText(w io.Writer, a *study.Suction, u Units) error {
	lines := suctionVerdict(a, u)
	if a.Before != nil {
		lines = append(lines, "", "Before the change:")
		for _, l := range suctionVerdict(a.Before, u) {
			lines = append(lines, wrap("  ", "    ", l)...)
		}
	}
	lines = append(append(lines, ""), caseLines(a, u)...)
	lines = append(append(lines, ""), marginGrid(a, u).lines("  ")...)
	for i := range a.Cases {
		for _, p := range a.Cases[i].Pumps {
			for _, f := range p.Rules {
				if f.Verdict != study.Met {
					lines = append(lines, wrap("  ", "    ", fmt.Sprintf("case %d, %s: %s: %s [%s]", i+1, p.Pump, f.Limit, reason(f, u), f.Origin()))...)
				}
			}
		}
	}
	if slices.ContainsFunc(a.Cases, func(c study.SuctionCase) bool {
		return slices.ContainsFunc(c.Pumps, func(p study.PumpSuction) bool { return p.Gauge.Boils })
	}) {
		lines = append(lines, wrap("  ", "    ", "boils: the pressure at the gauge would lie below that of the vapour; the flow shown is not reached, and the pump loses its suction before")...)
	}
	lines = append(append(lines, ""), strainerLines(a, u, "How dirty a strainer may get")...)
	if a.Before != nil {
		lines = append(append(lines, ""), strainerLines(a.Before, u, "How dirty it might get before the change")...)
	}
	lines = append(append(lines, ""), marginLimitLines(a, u)...)
	lines = append(lines, suctionRemarks(a, u)...)
	lines = append(lines, worstNPSHLines(a, u)...)
	lines = append(lines, "", "Rules judged by default:")
	if len(a.Defaults) == 0 {
		lines[len(lines)-1] = "The rules are those of limits.csv."
	}
	for _, d := range a.Defaults {
		lines = append(lines, wrap("  ", "    ", d.Limit+": "+d.Source)...)
	}
	lines = append(append(lines, ""), wrap("", "", "NPSH required is the point of 3 % head loss: a pump with no margin cavitates already. "+Caution)...)
	_, err := io.WriteString(w, strings.Join(lines, "\n")+"\n")
	return err
}

// suctionVerdict says in a few lines how the suctions stand.
func suctionVerdict(a *study.Suction, u Units) []string {
	count, total := map[study.Verdict]int{}, 0
	for _, c := range a.Cases {
		if c.Reason != "" {
			count[study.NotJudged]++
			total++
		}
		for _, p := range c.Pumps {
			count[p.Verdict]++
			total++
		}
	}
	verdict := "EVERY SUCTION KEEPS ITS MARGIN"
	switch {
	case count[study.NotMet] > 0:
		verdict = fmt.Sprintf("NOT MET: %d of %d suctions do not keep their margin", count[study.NotMet], total)
		if n := count[study.NotJudged]; n > 0 {
			verdict += fmt.Sprintf("; %d more NOT JUDGED", n)
		}
	case count[study.NotJudged] > 0:
		verdict = fmt.Sprintf("NOT JUDGED: %d of %d suctions", count[study.NotJudged], total)
	case total == 0:
		verdict = "NOT JUDGED: no pump runs"
	}
	lines := []string{verdict}
	if w := a.Worst; w != nil {
		text := "worst case: " + w.Condition
		if w.Pump != "" {
			text += ", " + w.Pump
		}
		if w.Margin.Known() {
			text += fmt.Sprintf(", NPSH margin %s %s", u.Text(w.Margin, "m", 2), u.Unit("m"))
		}
		lines = append(lines, wrap("", "  ", fmt.Sprintf("%s; %s (%s)", a.Job, text, w.Verdict))...)
	}
	return append(lines, strainerVerdict(a, u)...)
}

// strainerVerdict says of each strainer the least drop of all cases that it may reach.
func strainerVerdict(a *study.Suction, u Units) (lines []string) {
	var names []string
	for _, c := range a.Cases {
		for _, s := range c.Strainers {
			if !slices.Contains(names, s.Strainer) {
				names = append(names, s.Strainer)
			}
		}
	}
	for _, name := range names {
		least, in, refused := study.StrainerLimit{}, 0, ""
		for i, c := range a.Cases {
			for _, s := range c.Strainers {
				switch {
				case s.Strainer != name:
				case s.Word == "never" || s.Word == string(study.NotJudged):
					refused = fmt.Sprintf("%s: %s in case %d, not even clean: %s", name, strings.ToUpper(s.Word), i+1, s.Governs)
				case s.Limit.Drop.Known() && (in == 0 || s.Limit.Drop < least.Limit.Drop):
					least, in = s, i+1
				}
			}
		}
		text := refused
		if refused == "" && in > 0 {
			text = fmt.Sprintf("%s may reach %s %s, %s %% blocked (case %d, the least of all); alarm at %s %s", name, u.Text(least.Limit.Drop, "bar", 2), u.Unit("bar"),
				u.Text(100*least.Limit.Blockage, "", 0), in, u.Text(least.Alarm.Drop, "bar", 2), u.Unit("bar"))
		}
		if text != "" {
			lines = append(lines, wrap("", "  ", text)...)
		}
	}
	return lines
}

func caseLines(a *study.Suction, u Units) []string {
	lines := []string{"Cases"}
	for i, c := range a.Cases {
		text := fmt.Sprintf("%d  %s:", i+1, c.Condition)
		if c.Draught.Known() {
			text += fmt.Sprintf(" draught %s %s,", u.Text(c.Draught, "m", 2), u.Unit("m"))
		}
		if c.Temperature.Known() {
			text += fmt.Sprintf(" water %s %s,", u.Text(c.Temperature, "degC", 1), u.Unit("degC"))
		}
		text += " running " + strings.Join(c.Running, " ")
		if c.TrimMethod != "" {
			text += ", trimmed by " + c.TrimMethod
		}
		if c.Reason != "" {
			text = fmt.Sprintf("%d  %s: NOT JUDGED: %s", i+1, c.Condition, strings.Join(strings.Fields(c.Reason), " "))
		}
		lines = append(lines, wrap("  ", "     ", text)...)
	}
	return lines
}

func marginGrid(a *study.Suction, u Units) grid {
	g := grid{left: 2, head: []string{"case", "pump", u.Unit("m3/h"), "NPSHA " + u.Unit("m"), "NPSHR", "margin", "ratio", "gauge " + u.Unit("bar"), "verdict"}}
	for i, c := range a.Cases {
		for _, p := range c.Pumps {
			flow := u.Text(p.Flow, "m3/h", 1)
			if !p.Flow.Known() {
				flow = "off curve"
			}
			gauge := u.Text(p.Gauge.Pressure, "bar", 2)
			if p.Gauge.Boils {
				gauge = "boils"
			}
			g.rows = append(g.rows, []string{fmt.Sprint(i + 1), p.Pump, flow, u.Text(p.Available, "m", 2), u.Text(p.Required, "m", 2), u.Text(p.Margin, "m", 2),
				u.Text(p.Ratio, "", 2), gauge, string(p.Verdict)})
		}
	}
	return g
}

// gaugeText says what a suction gauge shows, as a vacuum too where it stands below the atmosphere.
func gaugeText(g study.SuctionGauge, u Units) string {
	if g.Boils {
		return "boils"
	}
	text := fmt.Sprintf("%s %s", u.Text(g.Pressure, "bar", 2), u.Unit("bar"))
	if g.Vacuum > 0 {
		text += fmt.Sprintf(" (%.0f mmHg vacuum)", float64(g.Vacuum))
	}
	return text
}

func strainerLines(a *study.Suction, u Units, title string) []string {
	lines := wrap("", "  ", fmt.Sprintf("%s (drop in %s; the alarm keeps %.0f %% of the rise in hand)", title, u.Unit("bar"), 100*float64(a.Allowance)))
	g := strainerGrid(a, u)
	if len(g.rows) == 0 {
		return append(lines, "  no strainer on any pump's suction, or no flow to tell it by")
	}
	return append(append(lines, g.lines("  ")...), strainerRemarks(a, u)...)
}

// strainerRemarks says what governs each strainer, and what the gauges then show.
func strainerRemarks(a *study.Suction, u Units) []string {
	var governs []string
	for i, c := range a.Cases {
		for _, s := range c.Strainers {
			text := fmt.Sprintf("case %d, %s: %s", i+1, s.Strainer, s.Governs)
			for _, p := range s.Limit.Pumps {
				text += fmt.Sprintf("; %s gauge at %s %s: %s", p.Pump, u.Text(p.Gauge.Elevation, "m", 2), u.Unit("m"), gaugeText(p.Gauge, u))
			}
			for _, p := range s.Alarm.Pumps {
				text += fmt.Sprintf("; alarm %s: %s", p.Pump, gaugeText(p.Gauge, u))
			}
			governs = append(governs, wrap("  ", "    ", text)...)
			for _, n := range s.Notes {
				governs = append(governs, wrap("    ", "    ", n)...)
			}
		}
	}
	return append(governs, wrap("  ", "    ", "Whether the basket itself bears the drop is not judged: ask its maker (baskets burst above some 1 bar: a strainer maker's page).")...)
}

// strainerGrid is every strainer in every case: drops clean, now, at the limit and at the alarm.
func strainerGrid(a *study.Suction, u Units) grid {
	g := grid{left: 2, head: []string{"case", "strainer", "clean", "now", "limit", "blocked %", u.Unit("m3/h"), "alarm", "blocked %"}}
	for i, c := range a.Cases {
		for _, s := range c.Strainers {
			row := []string{fmt.Sprint(i + 1), s.Strainer, u.Text(s.Clean.Drop, "bar", 3), u.Text(s.Present.Drop, "bar", 3), u.Text(s.Limit.Drop, "bar", 3),
				u.Text(100*s.Limit.Blockage, "", 1), u.Text(s.Limit.Flow, "m3/h", 0), u.Text(s.Alarm.Drop, "bar", 3), u.Text(100*s.Alarm.Blockage, "", 1)}
			if s.Word != "" {
				row[4] = s.Word
			}
			g.rows = append(g.rows, row)
		}
	}
	return g
}

func marginLimitLines(a *study.Suction, u Units) []string {
	lines := []string{"How far the margin holds, all else as it stands"}
	var kinds []string
	for _, c := range a.Cases {
		for _, p := range c.Pumps {
			for _, l := range p.Limits {
				if !slices.Contains(kinds, l.What) {
					kinds = append(kinds, l.What)
				}
			}
		}
	}
	g := grid{left: 2, head: []string{"case", "pump"}}
	short := map[string]string{"least draught": "draught " + u.Unit("m"), "warmest water": u.Unit("degC"), "smallest suction bore": "bore %", "highest speed": "rpm", "greatest flow": u.Unit("m3/h")}
	for _, k := range kinds {
		g.head = append(g.head, short[k])
	}
	for i, c := range a.Cases {
		for _, p := range c.Pumps {
			row := []string{fmt.Sprint(i + 1), p.Pump}
			for _, k := range kinds {
				cell := "-"
				for _, l := range p.Limits {
					if l.What == k {
						if cell = l.Word; cell == "" {
							cell = u.Text(l.Value, l.Unit, map[string]int{"m": 2, "degC": 1}[l.Unit])
						}
					}
				}
				row = append(row, cell)
			}
			g.rows = append(g.rows, row)
		}
	}
	if len(kinds) == 0 {
		return append(lines, "  no margin to tell it by")
	}
	lines = append(lines, g.lines("  ")...)
	return append(lines, wrap("  ", "    ", "Least draught, warmest water, smallest suction bore (all runs from the sea alike, per cent of the present), highest speed, greatest flow. "+
		"always: to the end of the search; never: not even at its other end. The reasons stand in margin-limits.csv and in JSON.")...)
}

// suctionRemarks says what air, vacuum and a second pump do.
func suctionRemarks(a *study.Suction, u Units) []string {
	var lines []string
	said := map[string]bool{}
	for i, c := range a.Cases {
		for _, p := range c.Pumps {
			for _, v := range p.Vacuum {
				if text := fmt.Sprintf("case %d: below the atmosphere, where air leaks in: %s", i+1, v); !said[text] {
					said[text] = true
					lines = append(lines, wrap("  ", "    ", text)...)
				}
			}
			for _, e := range p.Starting {
				text := fmt.Sprintf("case %d: when %s starts, the margin of %s becomes %s %s (%s)", i+1, e.Pump, p.Pump, u.Text(e.Margin, "m", 2), u.Unit("m"), e.Verdict)
				if e.Reason != "" {
					text += ": " + e.Reason
				}
				lines = append(lines, wrap("  ", "    ", text)...)
			}
		}
		for _, ch := range c.Chests {
			text := fmt.Sprintf("case %d: %s lies %s %s deep", i+1, ch.Chest, u.Text(ch.Upright, "m", 2), u.Unit("m"))
			if ch.Inclined != ch.Upright {
				text += fmt.Sprintf(", %s inclined", u.Text(ch.Inclined, "m", 2))
			}
			if ch.Wanted.Known() {
				text += fmt.Sprintf("; %s wanted against an air-drawing vortex", u.Text(ch.Wanted, "m", 2))
			}
			if deep := min(ch.Upright, ch.Inclined); deep < ch.Wanted && deep > 0 {
				text += ": LESS THAN WANTED"
			}
			if ch.Doubt != "" {
				text += "; not judged inclined: " + ch.Doubt
			}
			if ch.DrawsAir {
				text += "; IT DRAWS AIR"
			}
			lines = append(lines, wrap("  ", "    ", text)...)
		}
	}
	if lines != nil {
		lines = append([]string{"", "Air, and other pumps on the same suction"}, lines...)
	}
	return lines
}

// worstNPSHLines takes the NPSH of the worst case apart, and of each pump in a single case.
func worstNPSHLines(a *study.Suction, u Units) []string {
	least := study.Figure(math.Inf(1))
	for _, c := range a.Cases {
		for _, p := range c.Pumps {
			if p.Margin < least {
				least = p.Margin
			}
		}
	}
	var lines []string
	for _, c := range a.Cases {
		for _, p := range c.Pumps {
			if len(p.Lines) == 0 || len(a.Cases) > 1 && p.Margin != least {
				continue
			}
			lines = append(lines, "")
			lines = append(lines, wrap("", "  ", fmt.Sprintf("NPSH of %s in %s, line by line (%s of the water pumped)", p.Pump, c.Condition, u.Unit("m")))...)
			g := grid{left: 2, head: []string{"", "", u.Unit("m")}}
			for _, l := range p.Lines {
				g.rows = append(g.rows, []string{l.What, l.Run, u.Text(l.Head, "m", 3)})
			}
			g.rows = append(g.rows, []string{"NPSH available", "", u.Text(p.Available, "m", 3)}, []string{"NPSH required at " + u.Text(p.Flow, "m3/h", 1) + " " + u.Unit("m3/h"), "", u.Text(p.Required, "m", 3)},
				[]string{"margin", "", u.Text(p.Margin, "m", 3)})
			lines = append(lines, g.lines("  ")[1:]...)
		}
	}
	return lines
}

// WriteSuctionCSV writes a row for each pump of each case.
func WriteSuctionCSV(w io.Writer, a *study.Suction, u Units) error {
	t := &csvTable{units: u}
	t.add("state", "condition", t.unit("draught", "m"), t.unit("temperature", "degC"), "running", "trim method", "pump", t.unit("flow", "m3/h"), t.unit("NPSH available", "m"),
		t.unit("NPSH required", "m"), t.unit("NPSH margin", "m"), "NPSH ratio", t.unit("gauge elevation", "m"), t.unit("suction gauge", "bar"), "vacuum [mmHg]", "verdict", "reason")
	eachSuction(a, func(state string, c study.SuctionCase) {
		head := []string{state, word(c.Condition), t.figure(c.Draught, "m"), t.figure(c.Temperature, "degC"), word(strings.Join(c.Running, " ")), c.TrimMethod}
		if c.Reason != "" {
			t.add(append(head, "", "", "", "", "", "", "", "", "", string(study.NotJudged), word(c.Reason))...)
		}
		for _, p := range c.Pumps {
			var reasons []string
			for _, f := range p.Rules {
				if f.Verdict != study.Met {
					reasons = append(reasons, f.Limit+": "+reason(f, u))
				}
			}
			t.add(append(head[:6:6], word(p.Pump), t.figure(p.Flow, "m3/h"), t.figure(p.Available, "m"), t.figure(p.Required, "m"), t.figure(p.Margin, "m"), t.figure(p.Ratio, ""),
				t.figure(p.Gauge.Elevation, "m"), t.figure(p.Gauge.Pressure, "bar"), t.figure(p.Gauge.Vacuum, ""), string(p.Verdict), word(strings.Join(reasons, "; ")))...)
		}
	})
	return t.write(w)
}

// eachSuction goes through the cases, those before the change first.
func eachSuction(a *study.Suction, f func(state string, c study.SuctionCase)) {
	state := "as it stands"
	if a.Before != nil {
		state = "after"
		for _, c := range a.Before.Cases {
			f("before", c)
		}
	}
	for _, c := range a.Cases {
		f(state, c)
	}
}

// WriteStrainersCSV writes a row for each strainer of each case.
func WriteStrainersCSV(w io.Writer, a *study.Suction, u Units) error {
	t := &csvTable{units: u}
	t.add("state", "condition", "running", "strainer", "at", "blockage [%]", t.unit("drop", "bar"), t.unit("flow", "m3/h"), "pump", t.unit("NPSH margin", "m"), t.unit("gauge elevation", "m"),
		t.unit("suction gauge", "bar"), "vacuum [mmHg]", "word", "governs")
	eachSuction(a, func(state string, c study.SuctionCase) {
		for _, s := range c.Strainers {
			for _, at := range []struct {
				name string
				study.StrainerState
			}{{"clean", s.Clean}, {"present", s.Present}, {"alarm", s.Alarm}, {"limit", s.Limit}} {
				for _, p := range at.Pumps {
					t.add(state, word(c.Condition), word(strings.Join(c.Running, " ")), word(s.Strainer), at.name, t.long(100*at.Blockage, ""), t.figure(at.Drop, "bar"), t.figure(at.Flow, "m3/h"),
						word(p.Pump), t.figure(p.Margin, "m"), t.figure(p.Gauge.Elevation, "m"), t.figure(p.Gauge.Pressure, "bar"), t.figure(p.Gauge.Vacuum, ""), s.Word, word(s.Governs))
				}
			}
			if s.Word != "" {
				t.add(state, word(c.Condition), word(strings.Join(c.Running, " ")), word(s.Strainer), "limit", "", "", "", "", "", "", "", "", s.Word, word(s.Governs))
			}
		}
	})
	return t.write(w)
}

// WriteMarginLimitsCSV writes a row for each thing that ends a margin.
func WriteMarginLimitsCSV(w io.Writer, a *study.Suction, u Units) error {
	t := &csvTable{units: u}
	t.add("state", "condition", "running", "pump", "what", "word", "value", "unit", "reason")
	eachSuction(a, func(state string, c study.SuctionCase) {
		for _, p := range c.Pumps {
			for _, l := range p.Limits {
				t.add(state, word(c.Condition), word(strings.Join(c.Running, " ")), word(p.Pump), l.What, l.Word, t.figure(l.Value, l.Unit), u.Unit(l.Unit), word(l.Reason))
			}
		}
	})
	return t.write(w)
}

// WriteNPSHCSV writes every NPSH available line by line.
func WriteNPSHCSV(w io.Writer, a *study.Suction, u Units) error {
	t := &csvTable{units: u}
	t.add("state", "condition", "running", "pump", "run", "what", t.unit("head", "m"))
	eachSuction(a, func(state string, c study.SuctionCase) {
		for _, p := range c.Pumps {
			for _, l := range append(p.Lines[:len(p.Lines):len(p.Lines)], study.NPSHLine{What: "NPSH available", Head: p.Available}, study.NPSHLine{What: "NPSH required", Head: p.Required}) {
				t.add(state, word(c.Condition), word(strings.Join(c.Running, " ")), word(p.Pump), word(l.Run), word(l.What), t.figure(l.Head, "m"))
			}
		}
	})
	return t.write(w)
}
