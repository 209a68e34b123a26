package report

import (
	"bytes"
	"fmt"
	"math"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
	"brinehead/curves/plots"
)

// conditionPlots draws a condition's network, and head and NPSH over flow where a pump runs. A condition without a
// solution has none to draw.
func conditionPlots(a *study.Check, c *study.Condition, u Units, stem string) ([]File, error) {
	drawing := c.Drawing()
	if drawing == nil {
		return nil, nil
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
	var files []File
	type plot struct {
		name  string
		write func(*bytes.Buffer, plots.Format) error
	}
	all := []plot{{"schematic", func(b *bytes.Buffer, f plots.Format) error { return schematic.Write(b, f, plots.Size{}) }}}
	if len(pictures) > 0 {
		all = append(all,
			plot{"head", func(b *bytes.Buffer, f plots.Format) error { return head.Write(b, f, plots.Size{}) }},
			plot{"npsh", func(b *bytes.Buffer, f plots.Format) error { return npsh.Write(b, f, plots.Size{}) }})
	}
	for _, d := range all {
		for _, format := range []plots.Format{plots.SVG, plots.PNG} {
			var b bytes.Buffer
			if err := d.write(&b, format); err != nil {
				return nil, fmt.Errorf("%s: %w", d.name, err)
			}
			files = append(files, File{strings.Join([]string{stem, d.name}, "-") + "." + string(format), b.Bytes()})
		}
	}
	return files, nil
}

func line(name string, flow, value []float64) plots.Line {
	return plots.Line{Name: name, Flow: flow, Value: value}
}
