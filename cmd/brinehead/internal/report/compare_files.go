package report

import (
	"bytes"
	"fmt"
	"io"
	"math"
	"slices"

	"brinehead/cmd/brinehead/internal/study"
	"brinehead/curves/plots"
)

// CompareFiles makes the tables and plots of a comparison: changes.csv, differences.csv, verdicts.csv, ways.csv, harbour.csv and
// tolerances.csv, and for each condition the plots of comparePlots, as SVG and PNG.
func CompareFiles(a *study.Comparison, u Units) ([]File, error) {
	var files []File
	for _, t := range []struct {
		name  string
		write func(*bytes.Buffer) error
	}{
		{"changes.csv", func(b *bytes.Buffer) error { return WriteChangesCSV(b, a) }},
		{"differences.csv", func(b *bytes.Buffer) error { return WriteDifferencesCSV(b, a, u) }},
		{"verdicts.csv", func(b *bytes.Buffer) error { return WriteVerdictsCSV(b, a, u) }},
		{"ways.csv", func(b *bytes.Buffer) error { return WriteWaysCSV(b, a, u) }},
		{"harbour.csv", func(b *bytes.Buffer) error { return WriteHarbourCSV(b, a, u) }},
		{"tolerances.csv", func(b *bytes.Buffer) error { return WriteTolerancesCSV(b, a) }},
	} {
		var b bytes.Buffer
		if err := t.write(&b); err != nil {
			return nil, fmt.Errorf("%s: %w", t.name, err)
		}
		files = append(files, File{t.name, b.Bytes()})
	}
	taken := map[string]bool{}
	for i := range a.Conditions {
		c := &a.Conditions[i]
		plots, err := comparePlots(a, c, u, fileStem(c.Condition, taken))
		if err != nil {
			return nil, fmt.Errorf("plots of condition %s: %w", c.Condition, err)
		}
		files = append(files, plots...)
	}
	return files, nil
}

// drawn is a chart that can be written in a format.
type drawn struct {
	name  string
	write func(io.Writer, plots.Format, plots.Size) error
}

// comparePlots draws one condition before and after: both system curves on the pump curves, the flow of every run, and for each
// pump whose head can be taken apart what each element on the way loses, and the hydraulic grade.
func comparePlots(a *study.Comparison, c *study.ConditionComparison, u Units, stem string) ([]File, error) {
	title := fmt.Sprintf("%s with %s: %s", a.Job, a.Change, c.Condition)
	all := []drawn{}
	if chart, has := systemsChart(c, title, u); has {
		all = append(all, drawn{"systems", chart.Write})
	}
	flows := flowsChart(c, title, u)
	all = append(all, drawn{"flows", func(b io.Writer, f plots.Format, _ plots.Size) error { return flows.Write(b, f) }})
	shown := c.PathsToDraw()
	for _, p := range shown {
		suffix := ""
		if len(shown) > 1 {
			suffix = "-" + fileStem(p.Pump, map[string]bool{})
		}
		losses, grade := lossesChart(p, title, u), gradeChart(p, title, u)
		all = append(all, drawn{"losses" + suffix, func(b io.Writer, f plots.Format, _ plots.Size) error { return losses.Write(b, f) }},
			drawn{"grade" + suffix, func(b io.Writer, f plots.Format, _ plots.Size) error { return grade.Write(b, f) }})
	}
	var files []File
	for _, d := range all {
		of, err := draw(stem+"-"+d.name, d.write)
		if err != nil {
			return nil, err
		}
		files = append(files, of...)
	}
	return files, nil
}

// systemsChart lays what the system asks before and after on the pump curves. There is none where no pump runs.
func systemsChart(c *study.ConditionComparison, title string, u Units) (chart plots.HeadChart, has bool) {
	before, after := c.Pictures()
	chart = plots.HeadChart{Title: title, Subtitle: "pump curves, and what the system asks before and after", Units: plotUnits(u)}
	several := len(before) > 1 || len(after) > 1
	name := func(side string, p study.Picture) string {
		if several {
			return "system of " + p.Name + " " + side
		}
		return "system " + side
	}
	for _, p := range after {
		chart.Pumps = append(chart.Pumps, plots.PumpLine{Line: line(p.Name, p.Flow, p.Head), Digitised: line("", p.DigitisedFlow, p.DigitisedHead),
			Beyond: []plots.Line{line("", p.BeyondFlow, p.BeyondHead)}})
		chart.Systems = append(chart.Systems, line(name("after", p), p.SystemFlow, p.SystemHead))
		chart.Duty = append(chart.Duty, dutyMark(p, "after", several, u))
	}
	for _, p := range before {
		if !slices.ContainsFunc(after, func(q study.Picture) bool { return slices.Equal(p.Flow, q.Flow) && slices.Equal(p.Head, q.Head) }) {
			chart.FormerPumps = append(chart.FormerPumps, line(p.Name+" before", p.Flow, p.Head))
		}
		chart.FormerSystems = append(chart.FormerSystems, line(name("before", p), p.SystemFlow, p.SystemHead))
		chart.FormerDuty = append(chart.FormerDuty, dutyMark(p, "before", several, u))
	}
	return chart, len(before)+len(after) > 0
}

func dutyMark(p study.Picture, side string, several bool, u Units) plots.Mark {
	if several {
		side = p.Name + " " + side
	}
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
