package report

import (
	"fmt"
	"io"
	"slices"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/cmd/brinehead/internal/study"
)

// WriteCompareText writes a comparison for reading: the verdict after the change and before it, what is not met or not judged
// and what it was before, what is gained, what the change rewrites, the worst figures, every condition, and the harbour test.
// Where one condition is compared its runs, points, and the way of each pump's water follow.
func WriteCompareText(w io.Writer, a *study.Comparison, u Units) error {
	lines := compareSummary(a)
	lines = append(lines, limitLines(a, u)...)
	lines = append(lines, inputLines(a)...)
	lines = append(lines, worstLines(a, u)...)
	whole := len(a.Conditions) == 1
	for i := range a.Conditions {
		lines = append(lines, "")
		lines = append(lines, comparedLines(&a.Conditions[i], u, whole)...)
	}
	if len(a.Conditions) > 1 {
		lines = append(lines, "")
		lines = append(lines, wrap("", "", "--condition NAME shows the runs and points of one condition, and where along the way of each pump's water the difference in head comes from.")...)
	}
	lines = append(lines, harbourLines(a, u, whole)...)
	lines = append(lines, "")
	lines = append(lines, wrap("", "", Caution)...)
	_, err := io.WriteString(w, strings.Join(lines, "\n")+"\n")
	return err
}

// compareSummary says how the job stands after the change, how it stood before, and what became of its limits.
func compareSummary(a *study.Comparison) []string {
	verdict := "EVERY LIMIT MET AFTER THE CHANGE"
	after, before := a.Verdicts.After, a.Verdicts.Before
	total := after.Met + after.NotMet + after.NotJudged
	switch {
	case total == 0:
		verdict = "NO LIMIT JUDGED AFTER THE CHANGE"
	case after.NotMet > 0:
		verdict = fmt.Sprintf("NOT MET AFTER THE CHANGE: %d of %s", after.NotMet, counted(total, "limit"))
		if after.NotJudged > 0 {
			verdict += fmt.Sprintf("; %d more NOT JUDGED", after.NotJudged)
		}
	case after.NotJudged > 0:
		verdict = fmt.Sprintf("NOT JUDGED AFTER THE CHANGE: %d of %s", after.NotJudged, counted(total, "limit"))
	}
	lines := []string{verdict}
	was := fmt.Sprintf("Before it: %d not met, %d not judged, of %d.", before.NotMet, before.NotJudged, before.Met+before.NotMet+before.NotJudged)
	became := fmt.Sprintf("Lost: %d, gained: %d, met neither before nor after: %d.", a.Verdicts.Lost, a.Verdicts.Gained, a.Verdicts.Still)
	lines = append(lines, wrap("", "  ", was+" "+became)...)
	lines = append(lines, wrap("", "  ", fmt.Sprintf("%s with %s: %s compared.", a.Job, a.Change, counted(len(a.Conditions), "condition")))...)
	if a.Same() {
		lines = append(lines, wrap("", "  ", "No difference: the change rewrites nothing, and no figure and no verdict is another.")...)
	} else if len(a.Inputs) == 0 {
		lines = append(lines, "The change rewrites nothing.")
	}
	for _, side := range []struct {
		names []string
		word  string
	}{{a.OnlyBefore, "before"}, {a.OnlyAfter, "after"}} {
		if len(side.names) > 0 {
			lines = append(lines, wrap("", "  ", fmt.Sprintf("Only %s the change, and not compared: %s.", side.word, quotedList(side.names)))...)
		}
	}
	return lines
}

func quotedList(names []string) string { return `"` + strings.Join(names, `", "`) + `"` }

// limitLines lists the limits that are not met or not judged after the change, with what they were before, and those gained.
func limitLines(a *study.Comparison, u Units) []string {
	var notMet, gained []string
	for _, l := range a.Limits() {
		name := fmt.Sprintf("%s: %s of %s: ", l.Condition, l.Limit, l.On)
		switch {
		case l.After == study.NotMet:
			notMet = append(notMet, wrap("  ", "    ", name+wasBefore(l, u)+"; now "+reason(*l.Findings[1], u))...)
		case l.Outcome == study.Gained && l.Before == study.NotMet:
			gained = append(gained, wrap("  ", "    ", name+wasBefore(l, u)+"; now "+reason(*l.Findings[1], u))...)
		}
	}
	gained = append(gained, grouped(a, func(l study.ConditionLimit) (group string, of bool) {
		return "not judged before (" + l.Reason.Before + "), now met", l.Outcome == study.Gained && l.Before == study.NotJudged
	})...)
	notJudged := notJudgedAfter(a)
	dropped := grouped(a, func(l study.ConditionLimit) (group string, of bool) {
		return string(l.Before) + " before, and no longer applies", l.Outcome == study.DroppedOff
	})
	var lines []string
	for _, section := range []struct {
		title string
		lines []string
	}{{"NOT MET", notMet}, {"NOT JUDGED", notJudged}, {"GAINED", gained}, {"NO LONGER JUDGED", dropped}} {
		if section.lines != nil {
			lines = append(lines, "", section.title)
			lines = append(lines, section.lines...)
		}
	}
	return lines
}

// notJudgedAfter lists the limits that could not be judged after the change.
func notJudgedAfter(a *study.Comparison) []string {
	return grouped(a, func(l study.ConditionLimit) (group string, of bool) {
		was := string(l.Before) + " before, now not judged: "
		switch l.Before {
		case "":
			was = "not there before, now not judged: "
		case study.NotJudged:
			was = "not judged before either: "
		}
		return was + l.Reason.After, l.After == study.NotJudged
	})
}

// wasBefore says what a limit was before the change.
func wasBefore(l study.ConditionLimit, u Units) string {
	switch l.Before {
	case study.Met, study.NotMet:
		f := *l.Findings[0]
		value := u.Turn(f.Value, f.Unit)
		unit := u.Unit(f.Unit)
		if unit == "-" {
			unit = ""
		}
		word := "met"
		if l.Before == study.NotMet {
			word = "not met before either"
			if l.After == study.Met {
				word = "not met before"
			}
			return strings.TrimSpace(fmt.Sprintf("%s, %.4g %s", word, float64(value), unit))
		}
		return strings.TrimSpace(fmt.Sprintf("%s before, %.4g %s", word, float64(value), unit))
	case study.NotJudged:
		return "not judged before (" + l.Reason.Before + ")"
	}
	return "not there before"
}

// grouped lists limits of one condition and one group together.
func grouped(a *study.Comparison, by func(study.ConditionLimit) (group string, of bool)) []string {
	var order []string
	limits, things := map[string][]string{}, map[string]map[string][]string{}
	for _, l := range a.Limits() {
		group, of := by(l)
		if !of {
			continue
		}
		group = l.Condition + ": " + group
		if things[group] == nil {
			order = append(order, group)
			things[group] = map[string][]string{}
		}
		if things[group][l.Limit] == nil {
			limits[group] = append(limits[group], l.Limit)
		}
		things[group][l.Limit] = append(things[group][l.Limit], l.On)
	}
	var lines []string
	for _, group := range order {
		var parts []string
		for _, limit := range limits[group] {
			parts = append(parts, limit+" of "+strings.Join(things[group][limit], ", "))
		}
		lines = append(lines, wrap("  ", "    ", group+": "+strings.Join(parts, "; "))...)
	}
	return lines
}

// inputLines lists what the change rewrites.
func inputLines(a *study.Comparison) []string {
	if len(a.Inputs) == 0 {
		return nil
	}
	lines := []string{"", "WHAT THE CHANGE REWRITES"}
	for _, c := range a.Inputs {
		at := strings.TrimSuffix(c.File, ".csv") + ": " + c.Row
		switch c.Kind {
		case job.Added:
			lines = append(lines, wrap("  ", "    ", at+": added: "+c.After)...)
		case job.Removed:
			lines = append(lines, wrap("  ", "    ", at+": removed: "+c.Before)...)
		default:
			lines = append(lines, wrap("  ", "    ", fmt.Sprintf("%s: %s: %s -> %s", at, c.Column, orNotGiven(c.Before), orNotGiven(c.After)))...)
		}
	}
	for _, s := range a.Supplied {
		lines = append(lines, wrap("  ", "    ", fmt.Sprintf("so that %s of %s: %s -> %s [%s]", s.What, s.On, orNone(s.Before), orNone(s.After), s.Source))...)
	}
	return lines
}

// orNone is a supplied figure, or says that none is.
func orNone(figure string) string {
	if figure == "" {
		return "none supplied"
	}
	return figure
}

func orNotGiven(text string) string {
	if text == "" {
		return "not given"
	}
	return text
}

// worstLines lists the worst figure of each kind on either side, with where it is met.
func worstLines(a *study.Comparison, u Units) []string {
	if len(a.Worst) == 0 {
		return nil
	}
	lines := []string{"", "THE WORST OF ALL CONDITIONS"}
	for _, x := range a.Worst {
		before, after := worstFigure(x.Before, x.Unit, u)+" before", worstFigure(x.After, x.Unit, u)+" after"
		text := fmt.Sprintf("%s: %s, %s%s", x.What, before, after, worstPlace(x.After))
		if x.Before.On != x.After.On || x.Before.Condition != x.After.Condition {
			text = fmt.Sprintf("%s: %s%s; %s%s", x.What, before, worstPlace(x.Before), after, worstPlace(x.After))
		}
		lines = append(lines, wrap("  ", "    ", text)...)
	}
	var missing []string
	for _, side := range []struct {
		word string
		of   func(study.WorstComparison) []string
	}{{"before", func(x study.WorstComparison) []string { return x.Before.NotKnown }}, {"after", func(x study.WorstComparison) []string { return x.After.NotKnown }}} {
		var names []string
		for _, x := range a.Worst {
			for _, n := range side.of(x) {
				if !slices.Contains(names, n) {
					names = append(names, n)
				}
			}
		}
		if names != nil {
			missing = append(missing, side.word+" in "+quotedList(names))
		}
	}
	if missing != nil {
		lines = append(lines, wrap("  ", "    ", "Not all of these are known "+strings.Join(missing, ", ")+": it may be worse there.")...)
	}
	return lines
}

func worstFigure(x study.Worst, unit string, u Units) string {
	if !x.Value.Known() {
		return "not known"
	}
	return u.Text(x.Value, unit, 2) + " " + u.Unit(unit)
}

func worstPlace(x study.Worst) string {
	if !x.Value.Known() {
		return ""
	}
	return fmt.Sprintf(", of %s in %q", x.On, x.Condition)
}

// change writes a difference with its sign, or a dash.
func change(p study.Pair, metric string, decimals int, u Units) string {
	if !p.Difference.Known() {
		return "-"
	}
	difference := u.Turn(p.After, metric) - u.Turn(p.Before, metric)
	text := fmt.Sprintf("%+.*f", decimals, float64(difference))
	if strings.Trim(text, "+-0.") == "" {
		return strings.TrimLeft(text, "+-")
	}
	return text
}

// percent writes the difference as a share of what was.
func percent(p study.Pair) string {
	if !p.Difference.Known() || p.Before == 0 {
		return "-"
	}
	share := study.Pair{Before: 0, After: 100 * p.Difference / p.Before, Difference: 100 * p.Difference / p.Before}
	return change(share, "", 1, Metric)
}

// comparedLines writes one condition before and after.
func comparedLines(c *study.ConditionComparison, u Units, whole bool) []string {
	lines := wrap("", "  ", c.Condition)
	if !c.Differs() {
		return append(lines, "  no figure and no verdict is another")
	}
	pumps := comparedPumps(c, u)
	if len(pumps.rows) > 0 {
		lines = append(lines, pumps.lines("  ")...)
	}
	for _, side := range []struct{ word, why string }{{"before", c.Unknown.Before}, {"after", c.Unknown.After}} {
		if side.why != "" {
			lines = append(lines, wrap("  ", "    ", fmt.Sprintf("Not known %s the change: %s", side.word, side.why))...)
		}
	}
	if !whole {
		return lines
	}
	runs := grid{left: 1, head: []string{"run", u.Unit("m3/h"), "after", "%", u.Unit("m/s"), "after", "loss " + u.Unit("m"), "after", "change"}}
	for _, r := range c.Runs {
		runs.rows = append(runs.rows, []string{r.Run, stateOr(r.State.Before, u.Text(r.Flow.Before, "m3/h", 1)), stateOr(r.State.After, u.Text(r.Flow.After, "m3/h", 1)), percent(r.Flow),
			u.Text(r.Velocity.Before, "m/s", 2), u.Text(r.Velocity.After, "m/s", 2), u.Text(r.Loss.Before, "m", 3), u.Text(r.Loss.After, "m", 3), change(r.Loss, "m", 3, u)})
	}
	points := grid{left: 1, head: []string{"point", "gauge " + u.Unit("bar"), "after", "change", "total head " + u.Unit("m"), "after", "change"}}
	for _, p := range c.Points {
		points.rows = append(points.rows, []string{p.Point, stateOr(p.State.Before, u.Text(p.GaugePressure.Before, "bar", 3)), stateOr(p.State.After, u.Text(p.GaugePressure.After, "bar", 3)),
			change(p.GaugePressure, "bar", 3, u), u.Text(p.Head.Before, "m", 3), u.Text(p.Head.After, "m", 3), change(p.Head, "m", 3, u)})
	}
	for _, g := range []grid{runs, points} {
		lines = append(lines, "")
		lines = append(lines, g.lines("  ")...)
	}
	for _, p := range c.Paths {
		lines = append(lines, "")
		lines = append(lines, pathLines(p, u)...)
	}
	return lines
}

// comparedPumps is the pumps of a condition before and after.
func comparedPumps(c *study.ConditionComparison, u Units) grid {
	pumps := grid{left: 1, head: []string{"pump", u.Unit("m3/h"), "after", "%", "head " + u.Unit("m"), "after", u.Unit("kW"), "after", "margin " + u.Unit("m"), "after"}}
	for _, p := range c.Pumps {
		pumps.rows = append(pumps.rows, []string{p.Pump, stateOr(p.State.Before, u.Text(p.Flow.Before, "m3/h", 1)), stateOr(p.State.After, u.Text(p.Flow.After, "m3/h", 1)), percentRunning(p),
			u.Text(p.Head.Before, "m", 2), u.Text(p.Head.After, "m", 2), u.Text(p.ShaftPower.Before, "kW", 1), u.Text(p.ShaftPower.After, "kW", 1),
			u.Text(p.NPSHMargin.Before, "m", 2), u.Text(p.NPSHMargin.After, "m", 2)})
	}
	return pumps
}

// stateOr writes a state in words where it is not the usual one, else the figure.
func stateOr(state, figure string) string {
	switch state {
	case "running", "open", "there":
		return figure
	case "held shut":
		return state
	case "not known", "off curve", "no solution", "idle", "shut", "not there", "cut off":
		return state
	}
	return figure
}

func percentRunning(p study.PumpComparison) string {
	if p.State.Before == "idle" || p.State.After == "idle" {
		return ""
	}
	return percent(p.Flow)
}

// pathLines takes a pump's head apart.
func pathLines(p study.PathComparison, u Units) []string {
	if p.Reason != "" {
		return wrap("  ", "    ", fmt.Sprintf("The head of %s cannot be taken apart on both sides (%s).", p.Pump, p.Reason))
	}
	way := fmt.Sprintf("from %s to %s", p.From.After, p.To.After)
	if p.From != (study.Sides{Before: p.From.After, After: p.From.After}) || p.To != (study.Sides{Before: p.To.After, After: p.To.After}) {
		way = fmt.Sprintf("before from %s to %s, after from %s to %s", p.From.Before, p.To.Before, p.From.After, p.To.After)
	}
	lines := wrap("  ", "    ", fmt.Sprintf("Where the head of %s goes, %s:", p.Pump, way))
	g := grid{left: 1, head: []string{"", "before " + u.Unit("m"), "after", "change", "itself", "flow"}}
	run := ""
	for _, e := range p.Elements {
		if e.Run != run {
			g.rows = append(g.rows, []string{e.Run, "", "", "", "", ""})
			run = e.Run
		}
		name := "  " + e.Element
		for side, on := range map[string]string{"before": e.On.Before, "after": e.On.After} {
			if on == "no" {
				name += " (not there " + side + ")"
			}
		}
		g.rows = append(g.rows, []string{name, u.Text(e.Loss.Before, "m", 3), u.Text(e.Loss.After, "m", 3), change(e.Loss, "m", 3, u),
			signed(e.ByElement, "m", 3, u), signed(e.ByFlow, "m", 3, u)})
	}
	g.rows = append(g.rows, []string{"static, end less beginning", u.Text(p.Static.Before, "m", 3), u.Text(p.Static.After, "m", 3), change(p.Static, "m", 3, u), "", ""},
		[]string{"head of " + p.Pump + ", the sum of all", u.Text(p.Head.Before, "m", 3), u.Text(p.Head.After, "m", 3), change(p.Head, "m", 3, u), "", ""})
	lines = append(lines, g.lines("  ")...)
	return append(lines, wrap("  ", "    ", "Itself: what the element brings at the flow as it was; flow: what comes of the other flow. The two add up to the change; for tees they are not told apart.")...)
}

func signed(f study.Figure, metric string, decimals int, u Units) string {
	return change(study.Pair{Before: 0, After: f, Difference: f}, metric, decimals, u)
}

// harbourLines says what the harbour test is to show.
func harbourLines(a *study.Comparison, u Units, whole bool) []string {
	if len(a.Test.Conditions) == 0 {
		return nil
	}
	lines := []string{"", "WHAT THE HARBOUR TEST IS TO SHOW AFTER THE CHANGE"}
	lines = append(lines, wrap("  ", "  ", fmt.Sprintf("Low and high: the least and the greatest of four solutions, resistance and pump head each at either side of its tolerances, all of them at once; acceptance grade %s. "+
		"A gauge is read at the elevation of its point.", a.Test.Grade.Name))...)
	for _, b := range a.Test.Conditions {
		lines = append(lines, wrap("  ", "    ", b.Condition+":")...)
		g := grid{left: 2, head: []string{"", "", "", "low", "best", "high"}}
		var reasons []string
		for _, r := range b.Readings {
			if !whole && (r.Quantity == "flow" || r.Quantity == "gauge") {
				continue
			}
			decimals := 2
			if r.Unit == "m3/h" {
				decimals = 0
			}
			g.rows = append(g.rows, []string{r.Quantity, r.On, u.Unit(r.Unit), u.Text(r.Low, r.Unit, decimals), u.Text(r.Best, r.Unit, decimals), u.Text(r.High, r.Unit, decimals)})
			if r.Reason != "" && !slices.Contains(reasons, r.Reason) {
				reasons = append(reasons, r.Reason)
			}
		}
		if len(g.rows) == 0 {
			lines = append(lines, "    nothing to read: no solution")
			continue
		}
		lines = append(lines, g.lines("    ")...)
		for _, name := range b.Boiling {
			lines = append(lines, wrap("    ", "      ", fmt.Sprintf("The low of %s lies below the vapour pressure: the water boils there first, and the test cannot show it.", name))...)
		}
		for _, why := range reasons {
			lines = append(lines, wrap("    ", "      ", "Not known: "+why)...)
		}
	}
	lines = append(lines, "  Tolerances taken:")
	for _, t := range gatheredTolerances(a.Test.Tolerances, u) {
		lines = append(lines, wrap("    ", "      ", t)...)
	}
	return append(lines, wrap("    ", "      ", "not varied: the splits of tees, levels, lengths, bores, water, and the speed of the pumps")...)
}

// gatheredTolerances words the tolerances, those that are alike together.
func gatheredTolerances(tolerances []study.Tolerance, u Units) []string {
	var order []string
	on := map[string][]string{}
	for _, t := range tolerances {
		var text string
		if t.Unit == "-" {
			text = fmt.Sprintf("%s %.3g to %.3g times [%s]", t.What, float64(t.Low), float64(t.High), t.Source)
		} else {
			text = fmt.Sprintf("%s %.3g to %.3g %s, best %.3g [%s]", t.What, float64(t.Low), float64(t.High), t.Unit, float64(t.Best), t.Source)
		}
		if on[text] == nil {
			order = append(order, text)
		}
		on[text] = append(on[text], t.On)
	}
	var list []string
	for _, text := range order {
		list = append(list, strings.Join(on[text], ", ")+": "+text)
	}
	return list
}

// WriteDifferencesCSV writes every figure of every condition before and after.
func WriteDifferencesCSV(w io.Writer, a *study.Comparison, u Units) error {
	t := &csvTable{units: u}
	t.add("condition", "what", "on", "quantity", "unit", "before", "after", "difference", "state before", "state after")
	for _, c := range a.Conditions {
		row := func(what, on, quantity, unit string, p study.Pair, state study.Sides) {
			difference := study.Figure(0)
			if difference = p.Difference; difference.Known() {
				difference = u.Turn(p.After, unit) - u.Turn(p.Before, unit)
			}
			t.add(word(c.Condition), what, word(on), quantity, u.Unit(unit), t.figure(p.Before, unit), t.figure(p.After, unit), (&csvTable{}).figure(difference, ""), state.Before, state.After)
		}
		for _, p := range c.Pumps {
			row("pump", p.Pump, "flow", "m3/h", p.Flow, p.State)
			row("pump", p.Pump, "head", "m", p.Head, p.State)
			row("pump", p.Pump, "shaft power", "kW", p.ShaftPower, p.State)
			row("pump", p.Pump, "NPSH available", "m", p.NPSHAvailable, p.State)
			row("pump", p.Pump, "NPSH required", "m", p.NPSHRequired, p.State)
			row("pump", p.Pump, "NPSH margin", "m", p.NPSHMargin, p.State)
			row("pump", p.Pump, "share of best-efficiency flow", "-", p.BestShare, p.State)
		}
		for _, r := range c.Runs {
			row("run", r.Run, "flow", "m3/h", r.Flow, r.State)
			row("run", r.Run, "velocity", "m/s", r.Velocity, r.State)
			row("run", r.Run, "pipe loss", "m", r.PipeLoss, r.State)
			row("run", r.Run, "fitting loss", "m", r.FittingLoss, r.State)
		}
		for _, f := range c.Fittings {
			row("fitting", fittingName(f), "loss", "m", f.Loss, f.State)
		}
		for _, p := range c.Points {
			row("point", p.Point, "total head", "m", p.Head, p.State)
			row("point", p.Point, "gauge pressure", "bar", p.GaugePressure, p.State)
		}
	}
	return t.write(w)
}

func fittingName(f study.FittingComparison) string {
	if f.Tag != "" {
		return f.Tag
	}
	return f.Run + ": " + f.Fitting
}

// WriteChangesCSV writes what the change rewrites.
func WriteChangesCSV(w io.Writer, a *study.Comparison) error {
	t := &csvTable{}
	t.add("table", "row", "kind", "column", "before", "after")
	for _, c := range a.Inputs {
		t.add(c.File, word(c.Row), string(c.Kind), word(c.Column), word(c.Before), word(c.After))
	}
	return t.write(w)
}

// WriteVerdictsCSV writes every limit with its verdict before and after.
func WriteVerdictsCSV(w io.Writer, a *study.Comparison, u Units) error {
	t := &csvTable{units: u}
	t.add("condition", "limit", "on", "outcome", "verdict before", "verdict after", "unit", "value before", "value after", "limit value before", "limit value after", "reason before", "reason after")
	for _, l := range a.Limits() {
		var reasons [2]string
		for i, f := range l.Findings {
			if f != nil {
				reasons[i] = reason(*f, u)
			}
		}
		t.add(word(l.Condition), l.Limit, word(l.On), string(l.Outcome), string(l.Before), string(l.After), u.Unit(l.Unit), t.figure(l.Value.Before, l.Unit), t.figure(l.Value.After, l.Unit),
			t.figure(l.LimitValue.Before, l.Unit), t.figure(l.LimitValue.After, l.Unit), word(reasons[0]), word(reasons[1]))
	}
	return t.write(w)
}

// WriteWaysCSV writes where each pump's head goes, before and after.
func WriteWaysCSV(w io.Writer, a *study.Comparison, u Units) error {
	t := &csvTable{units: u}
	t.add("condition", "pump", "run", "element", t.unit("before", "m"), t.unit("after", "m"), t.unit("difference", "m"), t.unit("by itself", "m"), t.unit("by flow", "m"), "reason")
	for _, c := range a.Conditions {
		for _, p := range c.Paths {
			row := func(run, element string, x study.Pair, byElement, byFlow study.Figure) {
				t.add(word(c.Condition), word(p.Pump), word(run), word(element), t.figure(x.Before, "m"), t.figure(x.After, "m"), t.figure(x.Difference, "m"), t.figure(byElement, "m"), t.figure(byFlow, "m"), word(p.Reason))
			}
			for _, e := range p.Elements {
				row(e.Run, e.Element, e.Loss, e.ByElement, e.ByFlow)
			}
			none := study.Unknown()
			row("", "static", p.Static, none, none)
			row("", "head of the pump", p.Head, none, none)
		}
	}
	return t.write(w)
}

// WriteHarbourCSV writes what the harbour test is to show.
func WriteHarbourCSV(w io.Writer, a *study.Comparison, u Units) error {
	t := &csvTable{units: u}
	t.add("condition", "quantity", "on", "unit", "low", "best", "high", "reason")
	for _, b := range a.Test.Conditions {
		for _, r := range b.Readings {
			t.add(word(b.Condition), r.Quantity, word(r.On), u.Unit(r.Unit), t.figure(r.Low, r.Unit), t.figure(r.Best, r.Unit), t.figure(r.High, r.Unit), word(r.Reason))
		}
	}
	return t.write(w)
}

// WriteTolerancesCSV writes the tolerances that the harbour test is worked with.
func WriteTolerancesCSV(w io.Writer, a *study.Comparison) error {
	t := &csvTable{}
	t.add("on", "what", "unit", "low", "best", "high", "source")
	for _, x := range a.Test.Tolerances {
		t.add(word(x.On), x.What, x.Unit, t.figure(x.Low, ""), t.figure(x.Best, ""), t.figure(x.High, ""), word(x.Source))
	}
	return t.write(w)
}
