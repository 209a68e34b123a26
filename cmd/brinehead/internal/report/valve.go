package report

import (
	"fmt"
	"io"
	"math"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
)

// WriteValveText writes a valve's stroke for reading.
func WriteValveText(w io.Writer, t *study.ValveTable, u Units) error {
	lines := []string{fmt.Sprintf("%s: three-way valve %s; port A %s, port B %s", t.Job, t.Valve, t.RunA, t.RunB)}
	for _, c := range t.Conditions {
		g := grid{head: []string{"open %", "A " + u.Unit("m3/h"), "B " + u.Unit("m3/h"), "total", "least margin " + u.Unit("m"), "most of best %"}}
		for _, r := range c.Rows {
			margin, share := study.Figure(math.Inf(1)), study.Figure(0)
			for _, p := range r.Pumps { // a figure that is not known makes the outcome unknown
				margin, share = study.Figure(math.Min(float64(margin), float64(p.NPSHMargin))), study.Figure(math.Max(float64(share), float64(p.BestShare)))
			}
			g.rows = append(g.rows, []string{fmt.Sprintf("%.0f", 100*float64(r.Opening)), u.Text(r.A, "m3/h", 1), u.Text(r.B, "m3/h", 1), u.Text(r.Total, "m3/h", 1),
				u.Text(margin, "m", 2), u.Text(100*share, "", 0)})
		}
		lines = append(lines, "", c.Condition)
		lines = append(lines, g.lines("  ")...)
		if o := c.Orifice; o != nil {
			hole := "a loss that no plate of ISO 5167-2 has"
			if o.Hole.Known() {
				hole = fmt.Sprintf("an orifice plate with a hole of %.1f mm in the bore of %.1f mm", float64(o.Hole), float64(o.Bore))
			}
			lines = append(lines, wrap("  ", "    ", fmt.Sprintf("To pass on bypass the %s %s that port A passes, %s needs k %.3g more: %s.", u.Text(o.Flow, "m3/h", 1), u.Unit("m3/h"), o.Run, float64(o.K), hole))...)
		} else if c.Note != "" {
			lines = append(lines, wrap("  ", "    ", c.Note)...)
		}
	}
	lines = append(lines, "")
	lines = append(lines, wrap("", "", "Ports with a linear characteristic (common practice); a maker's curve differs. "+Caution)...)
	_, err := io.WriteString(w, strings.Join(lines, "\n")+"\n")
	return err
}

// WriteValveCSV writes a row for each opening of each condition.
func WriteValveCSV(w io.Writer, t *study.ValveTable, u Units) error {
	c := &csvTable{units: u}
	c.add("condition", "valve", "opening [%]", c.unit("flow A", "m3/h"), c.unit("flow B", "m3/h"), c.unit("total flow", "m3/h"), "pump", c.unit("pump flow", "m3/h"), c.unit("NPSH margin", "m"))
	for _, condition := range t.Conditions {
		for _, r := range condition.Rows {
			start := []string{word(condition.Condition), word(t.Valve), c.figure(100*r.Opening, ""), c.figure(r.A, "m3/h"), c.figure(r.B, "m3/h"), c.figure(r.Total, "m3/h")}
			for _, p := range r.Pumps {
				c.add(append(start[:6:6], word(p.Pump), c.figure(p.Flow, "m3/h"), c.figure(p.NPSHMargin, "m"))...)
			}
			if len(r.Pumps) == 0 {
				c.add(append(start[:6:6], "", "", "")...)
			}
		}
	}
	return c.write(w)
}
