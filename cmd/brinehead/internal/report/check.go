package report

import (
	"encoding/csv"
	"fmt"
	"io"
	"slices"
	"strconv"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
)

// textWidth is the width of a terminal that text is made for.
const textWidth = 80

// WriteCheckText writes the answer for reading: the verdict first, then what is not met and what could not be judged,
// then every condition's operating points. Where the answer is of one condition its runs and points follow.
func WriteCheckText(w io.Writer, a *study.Check, u Units) error {
	lines := summary(a)
	lines = append(lines, notMet(a, u)...)
	lines = append(lines, notJudged(a)...)
	for i := range a.Conditions {
		lines = append(lines, "")
		lines = append(lines, conditionLines(&a.Conditions[i], u, len(a.Conditions) == 1)...)
	}
	if len(a.SheetNotes) > 0 {
		lines = append(lines, "", "Pump sheets (brinehead pump shows them whole)")
		for _, n := range a.SheetNotes {
			lines = append(lines, wrap("  ", "    ", n)...)
		}
	}
	if len(a.Supplied) > 0 {
		lines = append(lines, "", fmt.Sprintf("%s from catalogues and defaults, where the tables leave it open", counted(len(a.Supplied), "figure")))
		if len(a.Conditions) == 1 {
			for _, s := range a.Supplied {
				lines = append(lines, wrap("  ", "    ", fmt.Sprintf("%s: %s %s [%s]", s.On, s.What, s.Figure, s.Source))...)
			}
		} else {
			lines = append(lines, "(--condition NAME lists them, --out DIR writes them to supplied.csv).")
		}
	}
	if len(a.Defaults) > 0 {
		lines = append(lines, "", "Judged by default, since limits.csv names none of the kind:")
		for _, d := range a.Defaults {
			lines = append(lines, wrap("  ", "    ", d.Limit+": "+d.Source)...)
		}
	}
	lines = append(lines, "")
	lines = append(lines, wrap("", "", Caution)...)
	_, err := io.WriteString(w, strings.Join(lines, "\n")+"\n")
	return err
}

// Caution stands under every result.
const Caution = "Results support, and never replace, the judgement of a licensed engineer, the maker's data and the rules of " +
	"class and flag. A strainer's blockage is modelled by its free area; matted leaf, sheet or weed does worse."

// summary says in one or two lines how the job stands.
func summary(a *study.Check) []string {
	count := map[study.Verdict]int{}
	for _, c := range a.Conditions {
		for _, f := range c.Findings {
			count[f.Verdict]++
		}
	}
	total := count[study.Met] + count[study.NotMet] + count[study.NotJudged]
	verdict := "EVERY LIMIT MET"
	switch {
	case count[study.NotMet] > 0:
		verdict = fmt.Sprintf("NOT MET: %d of %d limits", count[study.NotMet], total)
		if n := count[study.NotJudged]; n > 0 {
			verdict += fmt.Sprintf("; %d more NOT JUDGED", n)
		}
	case count[study.NotJudged] > 0:
		verdict = fmt.Sprintf("NOT JUDGED: %d of %d limits", count[study.NotJudged], total)
	}
	return []string{verdict, fmt.Sprintf("%s: %s, %s judged, %d met", a.Job, counted(len(a.Conditions), "condition"), counted(total-count[study.NotJudged], "limit"), count[study.Met])}
}

func counted(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}

// notMet lists the limits that are not met, condition by condition.
func notMet(a *study.Check, u Units) []string {
	var lines []string
	for _, c := range a.Conditions {
		for _, f := range c.Findings {
			if f.Verdict == study.NotMet {
				lines = append(lines, wrap("  ", "    ", fmt.Sprintf("%s: %s of %s: %s [%s]", c.Condition, f.Limit, f.On, reason(f, u), f.Origin()))...)
			}
		}
	}
	if lines != nil {
		lines = append([]string{"", "NOT MET"}, lines...)
	}
	return lines
}

// notJudged lists the limits that could not be judged, those of a condition that have one reason together.
func notJudged(a *study.Check) []string {
	var lines []string
	for _, c := range a.Conditions {
		for _, reason := range distinct(c.Findings, func(f study.Finding) string { return f.Reason }) {
			var limits []string
			for _, limit := range distinct(c.Findings, func(f study.Finding) string { return f.Limit }) {
				var things []string
				for _, f := range c.Findings {
					if f.Verdict == study.NotJudged && f.Reason == reason && f.Limit == limit {
						things = append(things, f.On)
					}
				}
				if things != nil {
					limits = append(limits, limit+" of "+strings.Join(things, ", "))
				}
			}
			if limits != nil {
				lines = append(lines, wrap("  ", "    ", c.Condition+": "+reason+": "+strings.Join(limits, "; "))...)
			}
		}
	}
	if lines != nil {
		lines = append([]string{"", "NOT JUDGED"}, lines...)
	}
	return lines
}

// distinct returns the different values of a text of the findings, in their order.
func distinct(findings []study.Finding, of func(study.Finding) string) []string {
	var list []string
	for _, f := range findings {
		if v := of(f); !slices.Contains(list, v) {
			list = append(list, v)
		}
	}
	return list
}

// reason words a finding in the units asked for.
func reason(f study.Finding, u Units) string {
	if f.Verdict == study.NotJudged {
		return f.Reason
	}
	return f.Worded(float64(u.Turn(f.Value, f.Unit)), float64(u.Turn(f.LimitValue, f.Unit)), u.Unit(f.Unit))
}

// conditionLines writes one condition.
func conditionLines(c *study.Condition, u Units, withRuns bool) []string {
	lines := wrap("", "  ", c.Condition+": "+waterText(c, u))
	pumps := pumpGrid(c, u)
	if len(pumps.rows) > 0 {
		lines = append(lines, pumps.lines("  ")...)
	}
	if withRuns && len(c.Runs) > 0 {
		lines = append(lines, "")
		lines = append(lines, runGrid(c, u).lines("  ")...)
		lines = append(lines, "")
		lines = append(lines, pointGrid(c, u).lines("  ")...)
	}
	if withRuns && c.Solution.Converged {
		lines = append(lines, "")
		lines = append(lines, wrap("  ", "    ", fmt.Sprintf("Solved in %d rounds: flows balance to %.1g of the greatest, heads to %.1g m (worst at %s).", c.Solution.Rounds,
			float64(c.Solution.MassResidual), float64(c.Solution.HeadResidual), worst(c.Solution.Worst)))...)
	}
	for _, n := range c.Notes {
		lines = append(lines, wrap("  ", "    ", "Note: "+n)...)
	}
	return lines
}

// pumpGrid is the operating points of a condition.
func pumpGrid(c *study.Condition, u Units) grid {
	pumps := grid{left: 1, head: []string{"pump", u.Unit("m3/h"), "head " + u.Unit("m"), "eff. %", "shaft " + u.Unit("kW"),
		"NPSHA", "NPSHR", "margin", "of best %"}}
	for _, p := range c.Pumps {
		row := []string{p.Pump, u.Text(p.Flow, "m3/h", 1), u.Text(p.Head, "m", 2), u.Text(100*p.Efficiency, "", 1), u.Text(p.ShaftPower, "kW", 1),
			u.Text(p.NPSHAvailable, "m", 2), u.Text(p.NPSHRequired, "m", 2), u.Text(p.NPSHMargin, "m", 2), u.Text(100*p.BestShare, "", 0)}
		if !p.Running {
			row = []string{p.Pump, "idle", "", "", "", "", "", "", ""}
			if p.Flow < 0 {
				row[1] = "leaks " + u.Text(-p.Flow, "m3/h", 1)
			}
		} else if p.Extrapolated {
			row[1] = "off curve"
		}
		pumps.rows = append(pumps.rows, row)
	}
	return pumps
}

func worst(name string) string {
	if name == "" {
		return "none"
	}
	return name
}

func waterText(c *study.Condition, u Units) string {
	text := fmt.Sprintf("%s water %s %s", c.Water.Kind, u.Text(c.Water.Temperature, "degC", 1), u.Unit("degC"))
	if c.Water.Salinity != 0 {
		text += fmt.Sprintf(", %.4g g/kg", float64(c.Water.Salinity))
	}
	text += fmt.Sprintf(", %.1f kg/m3", float64(c.Water.Density))
	if c.Draught.Known() {
		text += fmt.Sprintf(", draught %s %s", u.Text(c.Draught, "m", 2), u.Unit("m"))
	}
	return text
}

func runGrid(c *study.Condition, u Units) grid {
	g := grid{left: 1, head: []string{"run", u.Unit("m3/h"), u.Unit("m/s"), "Re", "f", "pipe " + u.Unit("m"), "fittings " + u.Unit("m")}}
	for _, r := range c.Runs {
		row := []string{r.Run, u.Text(r.Flow, "m3/h", 1), u.Text(r.Velocity, "m/s", 2), u.Text(r.Reynolds, "", 0), u.Text(r.FrictionFactor, "", 4),
			u.Text(r.PipeLoss, "m", 3), u.Text(r.FittingLoss, "m", 3)}
		if r.Shut {
			row = []string{r.Run, "shut", "", "", "", "", ""}
		}
		g.rows = append(g.rows, row)
	}
	return g
}

func pointGrid(c *study.Condition, u Units) grid {
	g := grid{left: 1, head: []string{"point", "total head " + u.Unit("m"), "gauge " + u.Unit("bar")}}
	for _, p := range c.Points {
		g.rows = append(g.rows, []string{p.Point, u.Text(p.Head, "m", 3), u.Text(p.GaugePressure, "bar", 3)})
	}
	return g
}

// csvTable is a CSV file in the making: what is not known is an empty cell.
type csvTable struct {
	units Units
	rows  [][]string
}

func (t *csvTable) add(cells ...string) { t.rows = append(t.rows, cells) }

// figure writes a value with six significant digits.
func (t *csvTable) figure(v study.Figure, metric string) string { return t.digits(v, metric, 6) }

// long writes a value with eight, for the properties of water, which are known that well.
func (t *csvTable) long(v study.Figure, metric string) string { return t.digits(v, metric, 8) }

func (t *csvTable) digits(v study.Figure, metric string, digits int) string {
	v = t.units.Turn(v, metric)
	if !v.Known() {
		return ""
	}
	return strconv.FormatFloat(float64(v), 'g', digits, 64)
}

// word makes a cell of the user's text harmless for a spreadsheet, which would take one that begins with an operator
// for a formula.
func word(text string) string {
	if text != "" && strings.ContainsRune("=+-@\t\r", rune(text[0])) {
		return "'" + text
	}
	return text
}

func (t *csvTable) write(w io.Writer) error {
	c := csv.NewWriter(w)
	if err := c.WriteAll(t.rows); err != nil {
		return err
	}
	return c.Error()
}

func (t *csvTable) unit(name, metric string) string { return name + " [" + t.units.Unit(metric) + "]" }

// WriteDutyCSV writes the operating points: a row for each pump of each condition.
func WriteDutyCSV(w io.Writer, a *study.Check, u Units) error {
	t := &csvTable{units: u}
	t.add("condition", "pump", "running", t.unit("flow", "m3/h"), t.unit("head", "m"), "efficiency [%]", t.unit("shaft power", "kW"),
		t.unit("NPSH available", "m"), t.unit("NPSH required", "m"), t.unit("NPSH margin", "m"), "share of best-efficiency flow [%]", "extrapolated")
	for _, c := range a.Conditions {
		for _, p := range c.Pumps {
			t.add(word(c.Condition), word(p.Pump), yesNo(p.Running), t.figure(p.Flow, "m3/h"), t.figure(p.Head, "m"), t.figure(100*p.Efficiency, ""),
				t.figure(p.ShaftPower, "kW"), t.figure(p.NPSHAvailable, "m"), t.figure(p.NPSHRequired, "m"), t.figure(p.NPSHMargin, "m"),
				t.figure(100*p.BestShare, ""), yesNo(p.Extrapolated))
		}
	}
	return t.write(w)
}

// WriteLossesCSV writes where the head goes: a row for each run and for each of its fittings, condition by condition.
func WriteLossesCSV(w io.Writer, a *study.Check, u Units) error {
	t := &csvTable{units: u}
	t.add("condition", "run", "tag", "element", t.unit("flow", "m3/h"), t.unit("velocity", "m/s"), "Reynolds number [-]", "friction factor [-]",
		t.unit("loss", "m"), "regime", t.unit("lowest absolute pressure", "bar"), t.unit("margin to boiling", "m"))
	for _, c := range a.Conditions {
		for _, r := range c.Runs {
			t.add(word(c.Condition), word(r.Run), "", "pipe", t.figure(r.Flow, "m3/h"), t.figure(r.Velocity, "m/s"), t.figure(r.Reynolds, ""),
				t.figure(r.FrictionFactor, ""), t.figure(r.PipeLoss, "m"), r.Regime,
				t.figure(r.LowestPressure, "bar"), t.figure(r.VapourMargin, "m"))
			for _, extra := range []struct {
				name string
				loss study.Figure
			}{{"tee", r.TeeLoss}, {"weight of its own water", r.Buoyancy}} {
				if extra.loss.Known() && extra.loss != 0 {
					t.add(word(c.Condition), word(r.Run), "", extra.name, t.figure(r.Flow, "m3/h"), "", "", "", t.figure(extra.loss, "m"), "", "", "")
				}
			}
			for _, f := range c.Fittings {
				if f.Run == r.Run {
					t.add(word(c.Condition), word(r.Run), word(f.Tag), word(f.Fitting), t.figure(r.Flow, "m3/h"), "", "", "", t.figure(f.Loss, "m"), "", "", "")
				}
			}
		}
	}
	return t.write(w)
}

// WriteFindingsCSV writes every limit judged.
func WriteFindingsCSV(w io.Writer, a *study.Check, u Units) error {
	t := &csvTable{units: u}
	t.add("condition", "limit", "on", "value", "limit value", "unit", "verdict", "reason", "source")
	for _, c := range a.Conditions {
		for _, f := range c.Findings {
			t.add(word(c.Condition), f.Limit, word(f.On), t.figure(f.Value, f.Unit), t.figure(f.LimitValue, f.Unit), u.Unit(f.Unit), string(f.Verdict),
				word(reason(f, u)), word(f.Source))
		}
	}
	return t.write(w)
}

// WriteSuppliedCSV writes every figure that comes from a catalogue or a default.
func WriteSuppliedCSV(w io.Writer, a *study.Check) error {
	t := &csvTable{}
	t.add("on", "what", "figure", "source")
	for _, s := range a.Supplied {
		t.add(word(s.On), s.What, s.Figure, word(s.Source))
	}
	return t.write(w)
}

func yesNo(b bool) string {
	if b {
		return "yes"
	}
	return "no"
}
