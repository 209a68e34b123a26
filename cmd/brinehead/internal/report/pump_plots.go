package report

import (
	"bytes"
	"fmt"
	"math"

	"brinehead/cmd/brinehead/internal/study"
	"brinehead/curves/plots"
)

// PumpFiles makes the table and plots of the sheets: pump.csv and, for each, its family of curves and its power.
func PumpFiles(a *study.PumpSheets, o Output) ([]File, error) {
	u := o.Units
	files, err := o.tables([]csvFile{{"pump.csv", func(b *bytes.Buffer) error { return WritePumpCSV(b, a, u) }}})
	if err != nil {
		return nil, err
	}
	var all []plot
	taken := map[string]bool{}
	for i := range a.Sheets {
		s := &a.Sheets[i]
		stem := fileStem(s.Pumps, taken)
		p := s.Picture(float64(a.Density))
		family, power := familyChart(a, p, u), powerChart(a, p, u)
		all = append(all, plot{stem + "-curve", s.Pumps + ": head over flow with the band of grade " + p.Grade + ", regions and even efficiencies", family.Write, nil})
		if s.Power.Greatest.Known() {
			all = append(all, plot{stem + "-power", s.Pumps + ": shaft power over flow beside the motor's rating", power.Write, nil})
		}
	}
	return o.finish(files, all, pumpDocument(a, o, all))
}

func traceLine(t study.Trace) plots.Line { return line(t.Name, t.Flow, t.Value) }

func familyChart(a *study.PumpSheets, p study.SheetPicture, u Units) plots.FamilyChart {
	c := plots.FamilyChart{Title: fmt.Sprintf("%s: %s", a.Job, p.Title), Units: plotUnits(u),
		Subtitle: "digitised curves, band of grade " + p.Grade + ", preferred and allowable region",
		Own:      plots.PumpLine{Line: traceLine(p.Own), Beyond: []plots.Line{traceLine(p.Beyond)}},
		Band:     plots.Band{Name: "grade " + p.Grade, Low: traceLine(p.Low), High: traceLine(p.High)}}
	for _, f := range p.Family {
		c.Family = append(c.Family, traceLine(f))
	}
	for _, d := range p.Points {
		c.Digitised = append(c.Digitised, traceLine(d))
	}
	for _, l := range p.Levels {
		c.Levels = append(c.Levels, line(l.Name, l.Trace.Flow, l.Trace.Value))
	}
	for _, b := range p.Bounds {
		c.Bounds = append(c.Bounds, plots.Bound{Name: b.Name, Flow: b.Flow, Least: b.Least})
	}
	return c
}

func powerChart(a *study.PumpSheets, p study.SheetPicture, u Units) plots.PowerChart {
	c := plots.PowerChart{Title: fmt.Sprintf("%s: %s", a.Job, p.Title), Subtitle: fmt.Sprintf("shaft power in water of %.1f kg/m3", float64(a.Density)), Units: powerUnits(u),
		Power: []plots.Line{traceLine(p.Power)}, Motor: p.Motor}
	if !math.IsNaN(p.Greatest.Flow) {
		c.Marks = []plots.Mark{{Label: fmt.Sprintf("greatest %s %s", u.Text(study.Figure(p.Greatest.Power/1e3), "kW", 1), u.Unit("kW")), Flow: p.Greatest.Flow, Value: p.Greatest.Power}}
	}
	for _, b := range p.Bounds {
		c.Bounds = append(c.Bounds, plots.Bound{Name: b.Name, Flow: b.Flow, Least: b.Least})
	}
	return c
}

// plotUnits returns the units of the axes of flow and head.
func plotUnits(u Units) plots.Units {
	if u != US {
		return plots.Units{}
	}
	flow, head := usCustomary["m3/h"], usCustomary["m"]
	return plots.Units{FlowName: flow.name, FlowFactor: 3600 * flow.factor, HeadName: head.name, HeadFactor: head.factor}
}

// powerUnits returns the units of the axes of flow and power.
func powerUnits(u Units) plots.Units {
	units := plotUnits(u)
	units.HeadName, units.HeadFactor = "kW", 1e-3
	if u == US {
		units.HeadName, units.HeadFactor = usCustomary["kW"].name, usCustomary["kW"].factor*1e-3
	}
	return units
}
