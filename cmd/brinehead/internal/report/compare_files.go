package report

import (
	"bytes"
	"fmt"
	"io"
	"math"
	"slices"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
	"brinehead/curves/plots"
)

// CompareFiles makes the tables and plots of a comparison: changes.csv, differences.csv, verdicts.csv, ways.csv, harbour.csv and
// tolerances.csv, and for each condition the plots of comparePlots, as SVG and PNG.
func CompareFiles(a *study.Comparison, o Output) ([]File, error) {
	u := o.Units
	files, err := o.tables([]csvFile{
		{"changes.csv", func(b *bytes.Buffer) error { return WriteChangesCSV(b, a) }},
		{"differences.csv", func(b *bytes.Buffer) error { return WriteDifferencesCSV(b, a, u) }},
		{"verdicts.csv", func(b *bytes.Buffer) error { return WriteVerdictsCSV(b, a, u) }},
		{"ways.csv", func(b *bytes.Buffer) error { return WriteWaysCSV(b, a, u) }},
		{"harbour.csv", func(b *bytes.Buffer) error { return WriteHarbourCSV(b, a, u) }},
		{"tolerances.csv", func(b *bytes.Buffer) error { return WriteTolerancesCSV(b, a) }},
	})
	if err != nil {
		return nil, err
	}
	var all []plot
	taken := map[string]bool{}
	for i := range a.Conditions {
		c := &a.Conditions[i]
		all = append(all, comparePlots(a, c, u, fileStem(c.Condition, taken))...)
	}
	return o.finish(files, all, compareDocument(a, o, all))
}

// comparePlots draws one condition before and after: both system curves on the pump curves, the flow of every run, and for each
// pump whose head can be taken apart what each element on the way loses, and the hydraulic grade.
func comparePlots(a *study.Comparison, c *study.ConditionComparison, u Units, stem string) (all []plot) {
	title := fmt.Sprintf("%s with %s: %s", a.Job, a.Change, c.Condition)
	pairs := picturePairs(c.Pictures())
	taken := map[string]bool{}
	for _, p := range pairs {
		chart := systemsChart(p, title, u)
		all = append(all, plot{stem + "-systems" + ofSeveral(len(pairs), p.name(), taken), "System curves of " + p.name() + " before and after on the pump curve in " + c.Condition, chart.Write, nil})
	}
	flows := flowsChart(c, title, u)
	all = append(all, plot{stem + "-flows", "Flow by run before and after in " + c.Condition, sized(flows.Write), pairGrid(flows)})
	shown := c.PathsToDraw()
	taken = map[string]bool{}
	for _, p := range shown {
		suffix := ofSeveral(len(shown), p.Pump, taken)
		losses, grade := lossesChart(p, title, u), gradeChart(p, title, u)
		all = append(all, plot{stem + "-losses" + suffix, "Loss by element on the way of " + p.Pump + " in " + c.Condition, sized(losses.Write), pairGrid(losses)},
			plot{stem + "-grade" + suffix, "Hydraulic grade on the way of " + p.Pump + " in " + c.Condition, sized(grade.Write), nil})
	}
	return all
}

// sized lets a chart that knows its own size be drawn where one is asked for.
func sized(write func(io.Writer, plots.Format) error) func(io.Writer, plots.Format, plots.Size) error {
	return func(w io.Writer, f plots.Format, _ plots.Size) error { return write(w, f) }
}

// pairGrid lists the figures of a chart of pairs.
func pairGrid(c plots.PairChart) *grid {
	g := &grid{left: 1, head: []string{"", "before", "after"}}
	for _, r := range c.Rows {
		g.rows = append(g.rows, []string{strings.TrimSpace(r.Group + " " + r.Name), short4(r.Before), short4(r.After)})
	}
	return g
}

// ofSeveral is what a file's name says of a pump, where there is a file for more than one.
func ofSeveral(count int, pump string, taken map[string]bool) string {
	if count < 2 {
		return ""
	}
	return "-" + fileStem(pump, taken)
}

// picturePair is what one pump, or several that do the same, shows before and after; nil where it does not run.
type picturePair struct{ before, after *study.Picture }

func (p picturePair) name() string {
	if p.after != nil {
		return p.after.Name
	}
	return p.before.Name
}

// picturePairs brings the pictures of both sides together by the pumps they are of.
func picturePairs(before, after []study.Picture) (pairs []picturePair) {
	share := func(a, b study.Picture) bool {
		return slices.ContainsFunc(strings.Split(a.Name, ", "), func(name string) bool { return slices.Contains(strings.Split(b.Name, ", "), name) })
	}
	for i := range after {
		pair := picturePair{after: &after[i]}
		for k := range before {
			if pair.before == nil && share(before[k], after[i]) {
				pair.before = &before[k]
			}
		}
		pairs = append(pairs, pair)
	}
	for k := range before {
		if !slices.ContainsFunc(after, func(p study.Picture) bool { return share(before[k], p) }) {
			pairs = append(pairs, picturePair{before: &before[k]})
		}
	}
	return pairs
}

// systemsChart lays what the system asks before and after on the pump curve, and on that of before where it was another.
func systemsChart(pair picturePair, title string, u Units) plots.HeadChart {
	chart := plots.HeadChart{Title: title, Subtitle: "pump curve, and what the system asks before and after", Units: plotUnits(u)}
	if p := pair.after; p != nil {
		chart.Pumps = append(chart.Pumps, plots.PumpLine{Line: line(p.Name, p.Flow, p.Head), Digitised: line("", p.DigitisedFlow, p.DigitisedHead),
			Beyond: []plots.Line{line("", p.BeyondFlow, p.BeyondHead)}})
		chart.Systems = append(chart.Systems, line("system after", p.SystemFlow, p.SystemHead))
		chart.Duty = append(chart.Duty, dutyMark(*p, "after", u))
	}
	if p := pair.before; p != nil {
		if pair.after == nil || !slices.Equal(p.Flow, pair.after.Flow) || !slices.Equal(p.Head, pair.after.Head) {
			chart.FormerPumps = append(chart.FormerPumps, line(p.Name+" before", p.Flow, p.Head))
		}
		chart.FormerSystems = append(chart.FormerSystems, line("system before", p.SystemFlow, p.SystemHead))
		chart.FormerDuty = append(chart.FormerDuty, dutyMark(*p, "before", u))
	}
	return chart
}

func dutyMark(p study.Picture, side string, u Units) plots.Mark {
	return plots.Mark{Name: p.Name, Flow: p.DutyFlow, Value: p.DutyHead, Label: fmt.Sprintf("%s: %s %s, %s %s", side,
		u.Text(study.Figure(p.DutyFlow*3600), "m3/h", 0), u.Unit("m3/h"), u.Text(study.Figure(p.DutyHead), "m", 1), u.Unit("m"))}
}

// flowsChart shows the flow of every run that is open on either side.
func flowsChart(c *study.ConditionComparison, title string, u Units) plots.PairChart {
	chart := plots.PairChart{Title: title, Subtitle: "flow by run", Quantity: "flow [" + u.Unit("m3/h") + "]", Decimals: 1}
	for _, r := range c.Runs {
		row := plots.PairRow{Name: r.Run, Before: float64(u.Turn(r.Flow.Before, "m3/h")), After: float64(u.Turn(r.Flow.After, "m3/h"))}
		if r.State.Before == r.State.After && r.State.Before != "open" {
			row.Note = r.State.Before
			if row.Note == "shut" {
				row.Before, row.After = math.NaN(), math.NaN()
			}
		} else if r.State.Before != "open" {
			row.Note = r.State.Before + " before"
		} else if r.State.After != "open" {
			row.Note = r.State.After + " after"
		}
		chart.Rows = append(chart.Rows, row)
	}
	return chart
}

// lossesChart shows what each element on a pump's way loses.
func lossesChart(p study.PathComparison, title string, u Units) plots.PairChart {
	chart := plots.PairChart{Title: title, Subtitle: fmt.Sprintf("head lost on the way of %s, from %s to %s", p.Pump, p.From.After, p.To.After), Quantity: "loss [" + u.Unit("m") + "]", Decimals: 2}
	for _, e := range p.Elements {
		chart.Rows = append(chart.Rows, plots.PairRow{Group: e.Run, Name: e.Element, Before: float64(u.Turn(e.Loss.Before, "m")), After: float64(u.Turn(e.Loss.After, "m"))})
	}
	return chart
}

// gradeChart shows the hydraulic grade along a pump's way; where the ways differ, that of the later one alone.
func gradeChart(p study.PathComparison, title string, u Units) plots.GradeChart {
	before, after := p.Profiles[0], p.Profiles[1]
	chart := plots.GradeChart{Title: title, Subtitle: "hydraulic grade along the way of " + p.Pump + ", over the elevation of the pipe", Units: plotUnits(u), Points: after.Points, Elevations: after.Elevations,
		After: plots.Grade{Start: after.Start, End: after.End}, Pumps: after.Pumps}
	if slices.Equal(before.Points, after.Points) {
		chart.Before = plots.Grade{Start: before.Start, End: before.End}
	} else {
		chart.Subtitle += " (before the change the water went another way)"
	}
	return chart
}
