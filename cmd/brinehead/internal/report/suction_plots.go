package report

import (
	"bytes"
	"fmt"
	"math"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
	"brinehead/curves/plots"
)

// SuctionFiles makes the tables and plots of the dossier.
func SuctionFiles(a *study.Suction, o Output) ([]File, error) {
	u := o.Units
	files, err := o.tables([]csvFile{
		{"suction.csv", func(b *bytes.Buffer) error { return WriteSuctionCSV(b, a, u) }},
		{"npsh-lines.csv", func(b *bytes.Buffer) error { return WriteNPSHCSV(b, a, u) }},
		{"strainers.csv", func(b *bytes.Buffer) error { return WriteStrainersCSV(b, a, u) }},
		{"margin-limits.csv", func(b *bytes.Buffer) error { return WriteMarginLimitsCSV(b, a, u) }},
	})
	if err != nil {
		return nil, err
	}
	var all []plot
	taken := map[string]bool{}
	for i := range a.Cases {
		c := &a.Cases[i]
		for _, p := range c.Pictures() {
			stem := fileStem(fmt.Sprintf("%d %s %s", i+1, c.Condition, p.Pump), taken)
			title := fmt.Sprintf("%s: %s, %s", a.Job, c.Condition, p.Pump)
			subtitle := fmt.Sprintf("water %s %s, running %s", u.Text(c.Temperature, "degC", 1), u.Unit("degC"), strings.Join(c.Running, " "))
			if c.Draught.Known() {
				subtitle = fmt.Sprintf("draught %s %s, ", u.Text(c.Draught, "m", 2), u.Unit("m")) + subtitle
			}
			all = append(all, suctionPlots(p, u, stem, title, subtitle)...)
		}
	}
	return o.finish(files, all, suctionDocument(a, o, all))
}

// suctionPlots draws the NPSH over flow, the margin over each strainer's blockage, and the profile of a pump's suction.
func suctionPlots(p study.SuctionPicture, u Units, stem, title, subtitle string) (all []plot) {
	npsh := plots.NPSHChart{Title: title, Subtitle: subtitle, Units: plotUnits(u)}
	for _, t := range p.Available {
		t.Name = "available, " + t.Name
		npsh.Available = append(npsh.Available, traceLine(t))
	}
	if len(p.Required.Flow) > 0 {
		npsh.Required = []plots.PumpLine{{Line: traceLine(p.Required), Digitised: traceLine(p.Points)}}
		npsh.Rule = []plots.Line{traceLine(p.Rule)}
	}
	for _, d := range p.Duty {
		npsh.Duty = append(npsh.Duty, plots.Mark{Name: d.Name, Label: fmt.Sprintf("%s %s", u.Text(study.Figure(d.Value), "m", 1), u.Unit("m")), Flow: d.Flow, Value: d.Value})
	}
	units := plotUnits(u).OrMetric()
	all = append(all, plot{stem + "-npsh", title + ": NPSH over flow, available and required", npsh.Write,
		seriesGrid("flow "+units.FlowName, "NPSH "+units.HeadName, units.FlowFactor, units.HeadFactor, append(pumpLines(npsh.Required), npsh.Available...)...)})
	for _, s := range p.Strainers {
		name := "-blockage"
		if len(p.Strainers) > 1 {
			name = "-" + fileStem(s.Strainer, map[string]bool{}) + name
		}
		if len(s.Margin.Flow) > 1 {
			all = append(all, plot{stem + name, title + ": NPSH margin over the blocked share of " + s.Strainer, marginChart(s, u, title, subtitle).Write,
				seriesGrid("blocked %", "margin "+units.HeadName, 100, units.HeadFactor, traceLine(s.Margin))})
		}
	}
	if len(p.Profile.Pipe.Flow) > 1 {
		profile := profileChart(p.Profile, u, title, subtitle)
		all = append(all, plot{stem + "-profile", title + ": pipe height, hydraulic grade, absolute pressure and vapour pressure from the sea to the pump", profile.Write,
			seriesGrid("way "+units.HeadName, "height or head "+units.HeadName, units.HeadFactor, units.HeadFactor, profile.Pipe, profile.Grade, profile.Absolute)})
	}
	return all
}

func marginChart(s study.StrainerPicture, u Units, title, subtitle string) plots.MarginChart {
	c := plots.MarginChart{Title: title, Subtitle: s.Strainer + ", " + subtitle, Units: plotUnits(u), Margins: []plots.Line{traceLine(s.Margin)}}
	if !math.IsNaN(s.Rule) {
		first, last := s.Margin.Flow[0], s.Margin.Flow[len(s.Margin.Flow)-1]
		c.Rule = line("margin asked", []float64{first, last}, []float64{s.Rule, s.Rule})
	}
	c.Marks = []plots.Mark{{Label: s.Present.Name, Flow: s.Present.Flow, Value: s.Present.Value}}
	if !math.IsNaN(s.Limit) {
		c.Bounds = append(c.Bounds, plots.Bound{Name: "limit", Flow: s.Limit})
	}
	if !math.IsNaN(s.Alarm) {
		c.Bounds = append(c.Bounds, plots.Bound{Name: "alarm", Flow: s.Alarm})
	}
	return c
}

func profileChart(p study.SuctionProfile, u Units, title, subtitle string) plots.ProfileChart {
	c := plots.ProfileChart{Title: title, Subtitle: subtitle + "; fittings drawn evenly along their run", Units: plotUnits(u),
		Pipe: line("pipe", p.Pipe.Flow, p.Pipe.Value), Grade: line("hydraulic grade", p.Grade.Flow, p.Grade.Value),
		Absolute: line("absolute pressure", p.Absolute.Flow, p.Absolute.Value), Vapour: line("vapour pressure", p.Vapour.Flow, p.Vapour.Value)}
	for _, n := range p.Names {
		c.Names = append(c.Names, plots.Mark{Label: n.Name, Flow: n.Flow, Value: n.Value})
	}
	return c
}
