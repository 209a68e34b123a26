package report

import (
	"fmt"
	"math"

	"brinehead/cmd/brinehead/internal/study"
	"brinehead/curves/plots"
)

// conditionPlots draws a condition's network, and head and NPSH over flow where a pump runs. A condition without a
// solution has none to draw.
func conditionPlots(a *study.Check, c *study.Condition, u Units, stem string) []plot {
	drawing := c.Drawing()
	if drawing == nil {
		return nil
	}
	title := fmt.Sprintf("%s: %s", a.Job, c.Condition)
	units := plotUnits(u)
	head := plots.HeadChart{Title: title, Subtitle: waterText(c, u), Units: units}
	npsh := plots.NPSHChart{Title: title, Subtitle: waterText(c, u), Units: units}
	schematic := plots.Schematic{Title: title, Subtitle: waterText(c, u), Units: units}
	if u == US {
		schematic.PressureName, schematic.PressureFactor = usCustomary["bar"].name, usCustomary["bar"].factor*1e-5
	}
	for _, p := range drawing.Points {
		schematic.Points = append(schematic.Points, plots.SchematicPoint(p))
	}
	for _, r := range drawing.Runs {
		schematic.Runs = append(schematic.Runs, plots.SchematicRun(r))
	}
	for _, p := range drawing.Pumps {
		schematic.Pumps = append(schematic.Pumps, plots.SchematicPump(p))
	}
	pictures := c.Pictures()
	for _, p := range pictures {
		head.Pumps = append(head.Pumps, plots.PumpLine{Line: line(p.Name, p.Flow, p.Head), Digitised: line("", p.DigitisedFlow, p.DigitisedHead),
			Beyond: []plots.Line{line("", p.BeyondFlow, p.BeyondHead)}})
		head.Systems = append(head.Systems, line("system of "+p.Name, p.SystemFlow, p.SystemHead))
		npsh.Available = append(npsh.Available, line("available, "+p.Name, p.SystemFlow, p.Available))
		if len(p.RequiredFlow) > 0 {
			npsh.Required = append(npsh.Required, plots.PumpLine{Line: line("required, "+p.Name, p.RequiredFlow, p.Required),
				Digitised: line("", p.DigitisedFlow, p.DigitisedRequired)})
			npsh.Rule = append(npsh.Rule, line("required and margin", p.RequiredFlow, p.Rule))
		}
		if !math.IsNaN(p.DutyFlow) {
			head.Duty = append(head.Duty, plots.Mark{Name: p.Name, Flow: p.DutyFlow, Value: p.DutyHead,
				Label: fmt.Sprintf("%s: %s %s, %s %s", p.Name, u.Text(study.Figure(p.DutyFlow*3600), "m3/h", 0), u.Unit("m3/h"),
					u.Text(study.Figure(p.DutyHead), "m", 1), u.Unit("m"))})
			npsh.Duty = append(npsh.Duty, plots.Mark{Name: p.Name, Flow: p.DutyFlow, Value: p.DutyAvailable,
				Label: fmt.Sprintf("%s: %s %s", p.Name, u.Text(study.Figure(p.DutyAvailable), "m", 1), u.Unit("m"))})
		}
		for _, b := range p.Bounds {
			bound := plots.Bound{Name: b.Name, Flow: b.Flow, Least: b.Least}
			head.Bounds, npsh.Bounds = append(head.Bounds, bound), append(npsh.Bounds, bound)
		}
	}
	all := []plot{{stem + "-schematic", "The network in " + c.Condition + ": flows, and pressures at the points", schematic.Write, nil}}
	if len(pictures) > 0 {
		units := units.OrMetric()
		all = append(all,
			plot{stem + "-head", "Head over flow in " + c.Condition + ": pump curves, what the system asks, operating points", head.Write,
				seriesGrid("flow "+units.FlowName, "head "+units.HeadName, units.FlowFactor, units.HeadFactor, append(pumpLines(head.Pumps), head.Systems...)...)},
			plot{stem + "-npsh", "NPSH over flow in " + c.Condition + ": available and required", npsh.Write,
				seriesGrid("flow "+units.FlowName, "NPSH "+units.HeadName, units.FlowFactor, units.HeadFactor, append(pumpLines(npsh.Required), npsh.Available...)...)})
	}
	return all
}

// pumpLines are the lines of pump curves over their digitised ranges.
func pumpLines(list []plots.PumpLine) (lines []plots.Line) {
	for _, p := range list {
		lines = append(lines, p.Line)
	}
	return lines
}

func line(name string, flow, value []float64) plots.Line {
	return plots.Line{Name: name, Flow: flow, Value: value}
}
