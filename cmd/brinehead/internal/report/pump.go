package report

import (
	"fmt"
	"io"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
)

// WritePumpText writes what the program makes of each pump's sheet.
func WritePumpText(w io.Writer, a *study.PumpSheets, u Units) error {
	var lines []string
	for i := range a.Sheets {
		if i > 0 {
			lines = append(lines, "")
		}
		lines = append(lines, sheetLines(&a.Sheets[i], a, u)...)
	}
	lines = append(lines, "")
	lines = append(lines, wrap("", "", Caution)...)
	_, err := io.WriteString(w, strings.Join(lines, "\n")+"\n")
	return err
}

func sheetLines(s *study.PumpSheet, a *study.PumpSheets, u Units) []string {
	head := s.Pumps + ": curve " + s.Curve + ", " + s.Origin
	if s.Impeller.Known() {
		head += fmt.Sprintf(", impeller %.5g mm", float64(s.Impeller))
	}
	if s.Speed.Known() {
		head += fmt.Sprintf(", %.5g rpm", float64(s.Speed))
	}
	if s.Tested.Known() && fmt.Sprintf("%.5g", float64(s.Tested)) != fmt.Sprintf("%.5g", float64(s.Speed)) {
		head += fmt.Sprintf(" (sheet %.5g rpm)", float64(s.Tested))
	}
	lines := wrap("", "  ", fmt.Sprintf("%s; as in %s, water of %.1f kg/m3", head, a.Condition, float64(a.Density)))
	if len(s.Notes) > 0 {
		lines = append(lines, "")
		for _, n := range s.Notes {
			lines = append(lines, wrap("  ", "    ", "Note: "+n)...)
		}
	}
	lines = append(append(lines, ""), factLines(s, u)...)
	lines = append(append(lines, ""), wrap("  ", "    ", fmt.Sprintf("How the sheet was fitted, each quantity over its own flows (%s): a smoothing spline or the parabola, whichever leaves single points out best", u.Unit("m3/h")))...)
	fits := fitGrid(s, u)
	lines = append(lines, fits.lines("    ")...)
	if b := s.Balance; b != nil && b.Slip == "" {
		lines = append(lines, wrap("  ", "    ", fmt.Sprintf("Efficiency times power over rho g Q H: %s over %s: the sheet agrees with itself.", u.Text(b.Ratio, "", 3), counted(b.Points, "point")))...)
	}
	lines = append(append(lines, ""), wrap("  ", "    ", fmt.Sprintf("Curve, with the heads that grade %s accepts (%g %% of flow, %g %% of head)", s.Grade.Name, 100*float64(s.Grade.Flow), 100*float64(s.Grade.Head)))...)
	points := pointsGrid(s, u)
	lines = append(lines, points.lines("    ")...)
	lines = append(lines, wrap("    ", "      ", "["+s.Grade.Source+"]")...)
	if len(s.Trims) > 0 {
		lines = append(append(lines, ""), wrap("  ", "    ", fmt.Sprintf("Best-efficiency point (%s, %s) after a cut, by each method of trim: the spread is the width of the answer", u.Unit("m3/h"), u.Unit("m")))...)
		trims := grid{head: []string{"cut %", "mm"}}
		for _, m := range s.Trims[0].Methods {
			trims.head = append(trims.head, m.Method)
		}
		for _, t := range s.Trims {
			row := []string{u.Text(100*t.Cut, "", 1), u.Text(t.Diameter, "", 1)}
			for _, p := range t.Methods {
				cell := "-"
				if t.Refused {
					cell = "refused"
				}
				if p.Flow.Known() {
					cell = u.Text(p.Flow, "m3/h", 0) + ", " + u.Text(p.Head, "m", 1)
				}
				row = append(row, cell)
			}
			trims.rows = append(trims.rows, row)
		}
		lines = append(lines, trims.lines("    ")...)
		said := map[string]bool{}
		for _, t := range s.Trims {
			for _, c := range t.Cautions {
				if !said[c] {
					said[c] = true
					lines = append(lines, wrap("    ", "      ", c)...)
				}
			}
		}
	}
	return lines
}

// factLines says what the sheet tells of the pump.
func factLines(s *study.PumpSheet, u Units) (lines []string) {
	n := s.Numbers
	for _, fact := range []string{
		fmt.Sprintf("best efficiency %s %% at %s %s, %s %s", u.Text(100*n.BestEfficiency, "", 1), u.Text(n.BestFlow, "m3/h", 0), u.Unit("m3/h"), u.Text(n.BestHead, "m", 2), u.Unit("m")),
		fmt.Sprintf("type number K %s (ISO 17769), specific speed nq %s (%s US), suction specific speed %s (%s US)", u.Text(n.TypeNumber, "", 3), u.Text(n.Specific, "", 1),
			u.Text(n.SpecificUS, "", 0), u.Text(n.Suction, "", 0), u.Text(n.SuctionUS, "", 0)),
		fmt.Sprintf("head against a shut valve %s %s", u.Text(s.ShutOff, "m", 2), u.Unit("m")),
		fmt.Sprintf("greatest shaft power %s %s at %s %s; motor %s %s, wanted %s %s (margin of ISO 5199 on the power at best efficiency, from memory, verify)",
			u.Text(s.Power.Greatest, "kW", 1), u.Unit("kW"), u.Text(s.Power.At, "m3/h", 0), u.Unit("m3/h"), u.Text(s.Power.Motor, "kW", 1), u.Unit("kW"), u.Text(s.Power.Wanted, "kW", 1), u.Unit("kW")),
	} {
		lines = append(lines, wrap("  ", "    ", fact)...)
	}
	for _, r := range s.Regions {
		lines = append(lines, wrap("  ", "    ", fmt.Sprintf("%s region %s to %s %s [%s]", r.Name, u.Text(r.From, "m3/h", 0), u.Text(r.To, "m3/h", 0), u.Unit("m3/h"), r.Source))...)
	}
	return lines
}

// fitGrid says how each quantity was fitted.
func fitGrid(s *study.PumpSheet, u Units) grid {
	fits := grid{left: 1, head: []string{"quantity", "points", "from", "to", "curve", "residual", "left out"}}
	for _, f := range s.Fits {
		unit := u.Unit(f.Unit)
		fits.rows = append(fits.rows, []string{f.Quantity, fmt.Sprint(f.Points), u.Text(f.Low, "m3/h", 0), u.Text(f.High, "m3/h", 0), f.Method,
			u.Text(f.Residual, f.Unit, 3) + " " + unit, u.Text(f.LeaveOneOut, f.Unit, 3) + " " + unit})
	}
	return fits
}

// pointsGrid is the curve with its band.
func pointsGrid(s *study.PumpSheet, u Units) grid {
	points := grid{head: []string{u.Unit("m3/h"), "head " + u.Unit("m"), "lowest", "highest", "eff. %", "shaft " + u.Unit("kW"), "NPSHR " + u.Unit("m")}}
	for _, p := range s.Points {
		points.rows = append(points.rows, []string{u.Text(p.Flow, "m3/h", 0), u.Text(p.Head, "m", 2), u.Text(p.Low, "m", 2), u.Text(p.High, "m", 2),
			u.Text(100*p.Efficiency, "", 1), u.Text(p.ShaftPower, "kW", 1), u.Text(p.NPSHRequired, "m", 2)})
	}
	return points
}

// WritePumpCSV writes the curves with their bands, a row a flow.
func WritePumpCSV(w io.Writer, a *study.PumpSheets, u Units) error {
	t := &csvTable{units: u}
	t.add("pumps", "curve", "impeller [mm]", "speed [rpm]", t.unit("flow", "m3/h"), t.unit("head", "m"), t.unit("lowest accepted head", "m"), t.unit("highest accepted head", "m"),
		"efficiency [%]", t.unit("shaft power", "kW"), t.unit("NPSH required", "m"))
	for _, s := range a.Sheets {
		for _, p := range s.Points {
			t.add(word(s.Pumps), word(s.Curve), t.figure(s.Impeller, ""), t.figure(s.Speed, ""), t.figure(p.Flow, "m3/h"), t.figure(p.Head, "m"), t.figure(p.Low, "m"), t.figure(p.High, "m"),
				t.figure(100*p.Efficiency, ""), t.figure(p.ShaftPower, "kW"), t.figure(p.NPSHRequired, "m"))
		}
	}
	return t.write(w)
}
