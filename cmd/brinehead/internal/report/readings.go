package report

import (
	"bytes"
	"fmt"
	"io"
	"math"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
	"brinehead/curves/plots"
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
		lines = append(lines, explanationLines(c.Explained, u)...)
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

// explanationLines says what would explain the readings, the best first, with measured, calculated and calibrated figures side by side.
func explanationLines(e *study.Explanation, u Units) []string {
	if e == nil {
		return nil
	}
	lines := wrap("  ", "    ", fmt.Sprintf("What explains them, one fault at a time (chi-square %.3g of %s as calculated, at most %.3g where they agree): %s", float64(e.ChiSquared), counted(e.Readings, "reading"), float64(e.Limit), e.Verdict))
	for _, f := range e.Faults {
		text := fmt.Sprintf("%s: %s; chi-square %.3g", f.Name, f.Size, float64(f.ChiSquared))
		if f.Implausible != "" {
			text += "; " + f.Implausible
		}
		if f.Tell != "" {
			text += "; " + f.Tell
		}
		lines = append(lines, wrap("    ", "      ", text)...)
	}
	if len(e.Faults) > 0 {
		lines = append(lines, fittedGrid(e, u).lines("    ")...)
	}
	return lines
}

// fittedGrid sets measured, calculated and calibrated figures side by side.
func fittedGrid(e *study.Explanation, u Units) grid {
	g := grid{left: 2, head: []string{"reading", "unit", "measured", "calculated", "with the best fault"}}
	for _, r := range e.Rows {
		decimals := map[string]int{"m3/h": 1, "bar": 3, "kW": 1, "m/s": 2}[r.Unit]
		g.rows = append(g.rows, []string{r.Reading, u.Unit(r.Unit), u.Text(r.Measured, r.Unit, decimals), u.Text(r.Calculated, r.Unit, decimals), u.Text(r.Calibrated, r.Unit, decimals)})
	}
	return g
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

// WriteSheetText writes the form or the card for reading.
func WriteSheetText(w io.Writer, s *study.ReadingSheet, u Units) error {
	lines := append([]string{s.Job + ": " + sheetTitle(s), ""}, sheetGrid(s, u, true).lines("  ")...)
	_, err := io.WriteString(w, strings.Join(lines, "\n")+"\n")
	return err
}

// isCard says whether a sheet is a card, by condition, and no form.
func isCard(s *study.ReadingSheet) bool { return len(s.Rows) > 0 && s.Rows[0].Condition != "" }

func sheetTitle(s *study.ReadingSheet) string {
	if isCard(s) {
		return "readings to expect, by condition"
	}
	return "readings to take aboard, with what to expect over all conditions"
}

// sheetGrid is the rows of a form or a card; narrow for a terminal, else with room to write.
func sheetGrid(s *study.ReadingSheet, u Units, narrow bool) grid {
	card := isCard(s)
	g := grid{left: 3, head: []string{"quantity", "on", "unit", "from", "to", "at " + u.Unit("m"), "bore mm"}}
	if card {
		g = grid{left: 4, head: []string{"condition", "quantity", "on", "unit", "expected", "at " + u.Unit("m")}}
	} else if !narrow {
		g.head = append(g.head, "instrument", "class", "read", "by")
	}
	last := ""
	for _, r := range s.Rows {
		decimals := map[string]int{"bar": 2, "kW": 1}[r.Unit]
		row := []string{r.Quantity, r.On, u.Unit(r.Unit), u.Text(r.Low, r.Unit, decimals), u.Text(r.High, r.Unit, decimals), u.Text(r.Elevation, "m", 2), u.Text(r.Bore, "", 0)}
		switch {
		case card:
			name := r.Condition
			if narrow && r.Condition == last {
				name = ""
			} else if n := []rune(name); narrow && len(n) > 26 {
				name = string(n[:25]) + "…"
			}
			last = r.Condition
			row = []string{name, r.Quantity, r.On, u.Unit(r.Unit), u.Text(r.Low, r.Unit, decimals), u.Text(r.Elevation, "m", 2)}
		case !narrow:
			row = append(row, r.Range, r.Class, "", "")
		}
		g.rows = append(g.rows, row)
	}
	return g
}

// WriteSheetCSV writes the form with the columns of readings.csv, its values left open, and behind them what to expect.
func WriteSheetCSV(w io.Writer, s *study.ReadingSheet, u Units) error {
	t := &csvTable{units: u}
	t.add("condition", "quantity", "on", "value", "unit", "gauge elevation [m]", "uncertainty", "bore [mm]", "expected from", "expected to", "instrument", "class")
	for _, r := range s.Rows {
		t.add(word(r.Condition), r.Quantity, word(r.On), "", u.Unit(r.Unit), (&csvTable{}).figure(r.Elevation, "m"), "", t.figure(r.Bore, ""), t.figure(r.Low, r.Unit), t.figure(r.High, r.Unit), r.Range, r.Class)
	}
	return t.write(w)
}

// ReadingsFiles makes the table, the plots of the flows, and the report.
func ReadingsFiles(a *study.Readings, o Output) ([]File, error) {
	u := o.Units
	files, err := o.tables([]csvFile{{"readings-worked.csv", func(b *bytes.Buffer) error { return WriteReadingsCSV(b, a, u) }}})
	if err != nil {
		return nil, err
	}
	var all []plot
	taken := map[string]bool{}
	for _, c := range a.Conditions {
		for _, p := range c.Pumps {
			if len(p.Estimates) > 0 {
				chart := estimatesChart(a, c, p, u)
				all = append(all, plot{fileStem(c.Condition+" "+p.Pump, taken) + "-flows", "Flow of " + p.Pump + " in " + c.Condition + " by each kind of reading, with its band", chart.Write, nil})
			}
		}
	}
	return o.finish(files, all, readingsDocument(a, o, all))
}

func estimatesChart(a *study.Readings, c study.ConditionReadings, p study.PumpReadings, u Units) plots.IntervalChart {
	chart := plots.IntervalChart{Title: fmt.Sprintf("%s: %s, %s", a.Job, c.Condition, p.Pump), Subtitle: "flow by each kind of reading, with its band at 95 %", Quantity: "flow [" + u.Unit("m3/h") + "]"}
	turn := func(f study.Figure) float64 { return float64(u.Turn(f, "m3/h")) }
	for _, e := range p.Estimates {
		chart.Rows = append(chart.Rows, plots.Interval{Name: e.By, Low: turn(e.Low), Best: turn(e.Flow), High: turn(e.High)})
	}
	chart.Rows = append(chart.Rows, plots.Interval{Name: "weighted mean", Low: turn(p.Mean.Value - p.Mean.Uncertainty), Best: turn(p.Mean.Value), High: turn(p.Mean.Value + p.Mean.Uncertainty), Main: true},
		plots.Interval{Name: "calculated", Low: math.NaN(), Best: turn(p.Calculated.Flow), High: math.NaN(), Main: true})
	return chart
}

// readingsDocument is the report of `readings`.
func readingsDocument(a *study.Readings, o Output, all []plot) *document {
	u := o.Units
	d := newDocument(o, "Gauges against the calculation", a.Job, joined(readingsSummary(a)))
	var unjudged []string
	for _, c := range a.Conditions {
		d.section(c.Condition)
		for _, p := range c.Pumps {
			d.items(unwrapped(pumpReadingLines(p, u)))
			if p.Curve.Verdict == study.NotJudged {
				unjudged = append(unjudged, p.Pump+" in "+c.Condition+": "+p.Curve.Reason)
			}
		}
		if len(c.Gauges) > 0 {
			d.items(unwrapped(gaugeLines(c.Gauges, u)))
		}
		if c.Explained != nil {
			d.items(unwrapped(explanationLines(c.Explained, u)))
			d.table("Measured, calculated and calibrated", fittedGrid(c.Explained, u))
		}
		unjudged = append(unjudged, c.Unused...)
	}
	d.section("Plots")
	d.plots(all)
	d.finish(o, append(unjudged, "Air in the water, and faults that come together: one fault at a time is tried."),
		"Uncertainties: plus or minus at about 95 %, independent ones as the root of the sum of squares (JCGM 100:2008, from memory); agreement by chi-square.")
	return d
}

// SheetFiles makes the form or the card, as a table and as a page to print.
func SheetFiles(s *study.ReadingSheet, o Output) ([]File, error) {
	u, name := o.Units, "reading-sheet"
	if isCard(s) {
		name = "reading-card"
	}
	var b bytes.Buffer
	if err := WriteSheetCSV(&b, s, u); err != nil {
		return nil, err
	}
	d := newDocument(o, "Readings", s.Job, []string{sheetTitle(s)})
	d.section("Readings")
	d.table("Pressures are gauge: a vacuum is below 0. Elevations above the keel.", sheetGrid(s, u, false))
	d.section("Taken by")
	d.add(block{sign: []string{"Taken by", "Checked by"}})
	page, err := d.html()
	if err != nil {
		return nil, err
	}
	paper, err := d.pdf()
	if err != nil {
		return nil, err
	}
	return []File{{name + ".csv", b.Bytes()}, {name + ".html", page}, {name + ".pdf", paper}}, nil
}
