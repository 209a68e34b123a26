package report

import (
	"fmt"
	"io"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
)

// waterColumns are the properties as text and CSV show them: name, metric unit, value and decimals.
var waterColumns = []struct {
	name, unit string
	scale      study.Figure
	decimals   int
	of         func(study.WaterState) study.Figure
}{
	{"temperature", "degC", 1, 2, func(s study.WaterState) study.Figure { return s.Temperature }},
	{"density", "kg/m3", 1, 3, func(s study.WaterState) study.Figure { return s.Density }},
	{"dynamic viscosity", "mPa s", 1e3, 4, func(s study.WaterState) study.Figure { return s.DynamicViscosity }},
	{"kinematic viscosity", "mm2/s", 1e6, 4, func(s study.WaterState) study.Figure { return s.KinematicViscosity }},
	{"vapour pressure", "kPa", 1e-3, 4, func(s study.WaterState) study.Figure { return s.VapourPressure }},
	{"heat capacity", "kJ/(kg K)", 1e-3, 4, func(s study.WaterState) study.Figure { return s.HeatCapacity }},
	{"thermal conductivity", "W/(m K)", 1, 4, func(s study.WaterState) study.Figure { return s.ThermalConductivity }},
}

// WriteWaterText writes one state as a list, several as a table, with where each figure comes from.
func WriteWaterText(w io.Writer, t *study.WaterTable, u Units) error {
	head := t.Kind + " water"
	if t.Salinity != 0 {
		head += fmt.Sprintf(" of %.6g g/kg", float64(t.Salinity))
	}
	lines := []string{head + fmt.Sprintf(", %s %s gauge", u.Text(t.Pressure, "bar", 3), u.Unit("bar")), ""}
	if len(t.States) == 1 {
		g := grid{left: 1, head: []string{"property", "value", "unit"}}
		for _, c := range waterColumns {
			g.rows = append(g.rows, []string{c.name, u.Text(c.scale*c.of(t.States[0]), c.unit, c.decimals), u.Unit(c.unit)})
		}
		lines = append(lines, g.lines("  ")[1:]...)
	} else {
		short := []string{"", "density", "dyn. visc.", "kin. visc.", "vapour pr.", "heat cap.", "conductiv."}
		g := grid{head: short}
		units := make([]string, len(waterColumns))
		for i, c := range waterColumns {
			units[i] = u.Unit(c.unit)
		}
		g.rows = append(g.rows, units)
		for _, s := range t.States {
			var row []string
			for _, c := range waterColumns {
				row = append(row, u.Text(c.scale*c.of(s), c.unit, c.decimals))
			}
			g.rows = append(g.rows, row)
		}
		lines = append(lines, g.lines("")...)
	}
	lines = append(lines, "", "Sources:")
	for _, s := range t.Sources {
		lines = append(lines, wrap("  ", "    ", fmt.Sprintf("%s: %s, %s; %s; uncertainty: %s", s.Property, s.Publication, s.Method, s.Range, s.Uncertainty))...)
	}
	_, err := io.WriteString(w, strings.Join(lines, "\n")+"\n")
	return err
}

// WriteWaterCSV writes a row for each temperature; the sources stand in notes above.
func WriteWaterCSV(w io.Writer, t *study.WaterTable, u Units) error {
	for _, s := range t.Sources {
		if _, err := fmt.Fprintf(w, "# %s: %s, %s; uncertainty: %s\n", s.Property, s.Publication, s.Method, s.Uncertainty); err != nil {
			return err
		}
	}
	c := &csvTable{units: u}
	head := []string{"water", "salinity [g/kg]", c.unit("gauge pressure", "bar")}
	for _, column := range waterColumns {
		head = append(head, c.unit(column.name, column.unit))
	}
	c.add(head...)
	for _, s := range t.States {
		row := []string{t.Kind, c.figure(t.Salinity, ""), c.figure(t.Pressure, "bar")}
		for _, column := range waterColumns {
			row = append(row, c.long(column.scale*column.of(s), column.unit))
		}
		c.add(row...)
	}
	return c.write(w)
}
