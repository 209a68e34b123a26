package report

import (
	"bytes"
	"fmt"

	"brinehead/cmd/brinehead/internal/study"
	"brinehead/curves/plots"
)

// TrimFiles makes the tables and plots of a trim.
func TrimFiles(a *study.Trim, o Output) ([]File, error) {
	u := o.Units
	files, err := o.tables([]csvFile{
		{"trim.csv", func(b *bytes.Buffer) error { return WriteTrimCSV(b, a, u) }},
		{"trim-methods.csv", func(b *bytes.Buffer) error { return WriteTrimMethodsCSV(b, a, u) }},
		{"side-effects.csv", func(b *bytes.Buffer) error { return WriteSideEffectsCSV(b, a, u) }},
		{"other-ways.csv", func(b *bytes.Buffer) error { return WriteOptionsCSV(b, a, u) }},
	})
	if err != nil {
		return nil, err
	}
	var all []plot
	if p := a.Picture(); p != nil {
		curve, power := trimChart(a, p, u), trimPowerChart(a, p, u)
		units := plotUnits(u).OrMetric()
		all = append(all, plot{"trim-curve", "Head over flow now, after the first cut and in the end, with the band of the methods and the system curves", curve.Write,
			seriesGrid("flow "+units.FlowName, "head "+units.HeadName, units.FlowFactor, units.HeadFactor, append([]plots.Line{curve.Own.Line}, curve.Family...)...)},
			plot{"trim-power", "Shaft power over flow now, in the end, and at the lower speed that would do", power.Write, nil})
	}
	if a.EnergyUnknown == "" {
		all = append(all, plot{"trim-energy", "Energy of a year by way to the duty", energyChart(a).Write, nil})
	}
	return o.finish(files, all, trimDocument(a, o, all))
}

func trimChart(a *study.Trim, p *study.TrimPicture, u Units) plots.FamilyChart {
	c := plots.FamilyChart{Title: fmt.Sprintf("%s: %s", a.Job, p.Pump), Units: plotUnits(u), Subtitle: "impeller now, first cut and in the end; band of the methods; systems in the end",
		Own: plots.PumpLine{Line: traceLine(p.Final)}, Family: []plots.Line{traceLine(p.Present)}, Digitised: []plots.Line{traceLine(p.Points)},
		Band: plots.Band{Name: "methods of trim", Low: traceLine(p.Low), High: traceLine(p.High)}}
	if len(p.First.Flow) > 0 {
		c.Family = append(c.Family, traceLine(p.First))
	}
	for _, s := range p.Systems {
		c.Systems = append(c.Systems, traceLine(s))
	}
	for _, d := range p.Duty {
		c.Duty = append(c.Duty, plots.Mark{Label: fmt.Sprintf("%s %s, %s %s", u.Text(study.Figure(d.Flow*3600), "m3/h", 0), u.Unit("m3/h"), u.Text(study.Figure(d.Value), "m", 1), u.Unit("m")), Flow: d.Flow, Value: d.Value})
	}
	return c
}

func trimPowerChart(a *study.Trim, p *study.TrimPicture, u Units) plots.PowerChart {
	c := plots.PowerChart{Title: fmt.Sprintf("%s: %s", a.Job, p.Pump), Subtitle: "shaft power of one pump over its flow, marks in the governing condition", Units: powerUnits(u), Motor: p.Motor}
	for _, t := range p.Power {
		c.Power = append(c.Power, traceLine(t))
	}
	for _, m := range p.PowerMarks {
		c.Marks = append(c.Marks, plots.Mark{Label: fmt.Sprintf("%s %s %s", m.Name, u.Text(study.Figure(m.Value/1e3), "kW", 1), u.Unit("kW")), Flow: m.Flow, Value: m.Value})
	}
	return c
}

func energyChart(a *study.Trim) plots.BarChart {
	c := plots.BarChart{Title: fmt.Sprintf("%s: energy of a year", a.Job), Subtitle: "at the terminals of the motors of all pumps, by way to the duty", Unit: "MWh"}
	for _, o := range a.Options {
		c.Bars = append(c.Bars, plots.Bar{Name: o.Option, Value: float64(o.Energy) / 1e3, Note: o.Reason})
	}
	return c
}
