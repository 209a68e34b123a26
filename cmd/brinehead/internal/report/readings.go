package report

import (
	"fmt"
	"io"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
)

// WriteReadingsText writes what readings say: the verdict of every pump first, then the working of its head, the flow by each
// kind of reading, gauges beside the calculation, and what was not used.
func WriteReadingsText(w io.Writer, a *study.Readings, u Units) error {
	lines := readingsSummary(a)
	for _, c := range a.Conditions {
		lines = append(lines, "")
		lines = append(lines, wrap("", "  ", c.Condition)...)
		if c.NotKnown != "" {
			lines = append(lines, wrap("  ", "    ", "The calculation has no figures here: "+c.NotKnown)...)
		}
		for _, p := range c.Pumps {
			lines = append(lines, pumpReadingLines(p, u)...)
		}
		lines = append(lines, gaugeLines(c.Gauges, u)...)
		for _, x := range c.Unused {
			lines = append(lines, wrap("  ", "    ", "Not used: "+x)...)
		}
	}
	lines = append(lines, "")
	lines = append(lines, wrap("", "", "Every +/- is at about 95 %, twice the standard uncertainty; one that the table gives is taken so. "+Caution)...)
	_, err := io.WriteString(w, strings.Join(lines, "\n")+"\n")
	return err
}

// readingsSummary says how every pump and every gauge at rest stands.
func readingsSummary(a *study.Readings) []string {
	var lines []string
	for _, c := range a.Conditions {
		for _, p := range c.Pumps {
			word := map[study.Verdict]string{study.Met: "ON ITS CURVE", study.NotMet: "NOT ON ITS CURVE", study.NotJudged: "NOT JUDGED"}[p.Curve.Verdict]
			lines = append(lines, wrap("", "  ", fmt.Sprintf("%s: %s in %q: %s", word, p.Pump, c.Condition, p.Curve.Reason))...)
			if p.Agreement.Verdict == study.NotMet {
				lines = append(lines, wrap("", "  ", fmt.Sprintf("READINGS DISAGREE: flows of %s in %q: %s", p.Pump, c.Condition, agreement(p.Agreement)))...)
			}
		}
		for _, g := range c.Gauges {
			if g.AtRest && g.Verdict == study.NotMet {
				lines = append(lines, wrap("", "  ", fmt.Sprintf("GAUGE OUT: %s of %s in %q: %s", g.Gauge, g.On, c.Condition, g.Reason))...)
			}
		}
	}
	if lines == nil {
		lines = []string{"NO PUMP RUNS"}
	}
	return lines
}

// agreement words whether the flows agree.
func agreement(x study.Agreement) string {
	if x.Verdict == study.NotJudged {
		return "there are not two with a band to hold against each other"
	}
	text := fmt.Sprintf("chi-square %.2f of %d estimates, at most %.2f if they agree (19 in 20)", float64(x.ChiSquared), x.Estimates, float64(x.Limit))
	switch {
	case x.Verdict == study.Met:
		return "they agree: " + text
	case x.Outlier != "":
		return text + "; without " + x.Outlier + " the others agree"
	case x.Estimates == 2:
		return text + "; of two, nothing says which is wrong"
	}
	return text + "; no single one explains it"
}

func plusMinus(m study.Measured, metric string, decimals int, u Units) string {
	if !m.Value.Known() {
		return "not known"
	}
	text := u.Text(m.Value, metric, decimals)
	if m.Uncertainty.Known() {
		text += " +/-" + u.Text(u.Turn(m.Uncertainty, metric)-u.Turn(0, metric), "", decimals)
	}
	return strings.TrimSpace(text + " " + u.Unit(metric))
}

func pumpReadingLines(p study.PumpReadings, u Units) []string {
	lines := wrap("  ", "    ", fmt.Sprintf("%s; calculated: %s %s, %s %s", p.Pump, u.Text(p.Calculated.Flow, "m3/h", 1), u.Unit("m3/h"), u.Text(p.Calculated.Head, "m", 2), u.Unit("m")))
	if p.Head != nil {
		for _, l := range p.Head.Lines {
			decimals := map[string]int{"bar": 3, "kg/m3": 1, "mm": 1}[l.Unit]
			if l.Unit == "m" {
				decimals = 2
			}
			lines = append(lines, wrap("    ", "      ", l.What+": "+plusMinus(study.Measured{Value: l.Value, Uncertainty: l.Uncertainty}, l.Unit, decimals, u))...)
		}
	}
	if len(p.Estimates) > 0 {
		g := grid{left: 1, head: []string{"flow by", u.Unit("m3/h"), "low", "high"}}
		for _, e := range p.Estimates {
			g.rows = append(g.rows, []string{e.By, u.Text(e.Flow, "m3/h", 0), u.Text(e.Low, "m3/h", 0), u.Text(e.High, "m3/h", 0)})
		}
		mean := "weighted mean"
		if p.Agreement.Outlier != "" {
			mean = "weighted mean of the others"
		}
		g.rows = append(g.rows, []string{mean, u.Text(p.Mean.Value, "m3/h", 0), u.Text(p.Mean.Value-p.Mean.Uncertainty, "m3/h", 0), u.Text(p.Mean.Value+p.Mean.Uncertainty, "m3/h", 0)})
		lines = append(lines, g.lines("    ")...)
		for _, e := range p.Estimates {
			if e.Note != "" {
				lines = append(lines, wrap("    ", "      ", e.By+": "+e.Note)...)
			}
		}
		lines = append(lines, wrap("    ", "      ", "Of these flows: "+agreement(p.Agreement))...)
	}
	if p.ShaftPower.Value.Known() {
		text := "shaft power measured: " + plusMinus(p.ShaftPower, "kW", 1, u)
		if p.Efficiency.Value.Known() {
			text += fmt.Sprintf("; pump efficiency %.1f +/-%.1f %%", 100*float64(p.Efficiency.Value), 100*float64(p.Efficiency.Uncertainty))
		}
		lines = append(lines, wrap("    ", "      ", text)...)
	}
	return append(lines, wrap("    ", "      ", fmt.Sprintf("%s: %s", p.Curve.Verdict, p.Curve.Reason))...)
}

func gaugeLines(gauges []study.GaugeReading, u Units) []string {
	if len(gauges) == 0 {
		return nil
	}
	g := grid{left: 2, head: []string{"gauge", "on", "at " + u.Unit("m"), "read " + u.Unit("bar"), "calculated", "difference", "at rest"}}
	var notes []string
	for _, x := range gauges {
		verdict := "no"
		if x.AtRest {
			verdict = string(x.Verdict)
		}
		g.rows = append(g.rows, []string{x.Gauge, x.On, u.Text(x.Elevation, "m", 2), u.Text(x.Read.Value, "bar", 2), u.Text(x.Calculated, "bar", 2), u.Text(x.Difference, "bar", 2), verdict})
		if x.AtRest && x.Verdict != study.Met {
			notes = append(notes, wrap("    ", "      ", fmt.Sprintf("%s of %s: %s", x.Gauge, x.On, x.Reason))...)
		}
	}
	return append(g.lines("  "), notes...)
}

// WriteReadingsCSV writes a row for every figure worked from readings.
func WriteReadingsCSV(w io.Writer, a *study.Readings, u Units) error {
	t := &csvTable{units: u}
	t.add("condition", "on", "figure", "by", "unit", "value", "low", "high", "verdict", "note")
	for _, c := range a.Conditions {
		for _, p := range c.Pumps {
			band := func(figure, by, unit string, m study.Measured, verdict study.Verdict, note string) {
				t.add(word(c.Condition), word(p.Pump), figure, word(by), u.Unit(unit), t.figure(m.Value, unit), t.figure(m.Value-m.Uncertainty, unit), t.figure(m.Value+m.Uncertainty, unit), string(verdict), word(note))
			}
			if p.Head != nil {
				band("total head", "gauges", "m", p.Head.Head, "", "")
			}
			for _, e := range p.Estimates {
				t.add(word(c.Condition), word(p.Pump), "flow", word(e.By), u.Unit("m3/h"), t.figure(e.Flow, "m3/h"), t.figure(e.Low, "m3/h"), t.figure(e.High, "m3/h"), "", word(e.Note))
			}
			band("flow", "weighted mean", "m3/h", p.Mean, p.Agreement.Verdict, agreement(p.Agreement))
			band("shaft power", "measured", "kW", p.ShaftPower, "", "")
			band("efficiency", "measured", "-", p.Efficiency, "", "")
			band("departure of head from the curve", "measured", "-", p.Curve.Departure, p.Curve.Verdict, p.Curve.Reason)
		}
		for _, g := range c.Gauges {
			t.add(word(c.Condition), word(g.On), g.Gauge, "calculation", u.Unit("bar"), t.figure(g.Difference, "bar"), "", "", string(g.Verdict), word(g.Reason))
		}
	}
	return t.write(w)
}
