package report

import (
	"fmt"
	"math"
	"strings"

	"brinehead/cmd/brinehead/internal/study"
)

// Units is the system a text or a CSV file is written in. JSON keeps the units its keys name.
type Units int

// The systems.
const (
	Metric Units = iota // m3/h, m, bar, kW, m/s, degC
	US                  // US gal/min, ft, psi, hp, ft/s, degF
)

// UnitSystems lists the names of the systems as flags take them.
var UnitSystems = []string{"metric", "us"}

// ParseUnits reads a name of UnitSystems.
func ParseUnits(name string) (Units, error) {
	for i, n := range UnitSystems {
		if strings.EqualFold(n, name) {
			return Units(i), nil
		}
	}
	return 0, fmt.Errorf("units: found %q, want one of %s", name, strings.Join(UnitSystems, ", "))
}

// turn is a unit with what takes a metric value to it: factor and then offset.
type turn struct {
	name           string
	factor, offset float64
}

// usCustomary holds for each metric unit of the answers its US customary one. Exact by definition: the US gallon is
// 231 cubic inches, the inch 25.4 mm, the pound 0.45359237 kg.
var usCustomary = map[string]turn{
	"m3/h": {"gpm (US)", 1e3 / 60 / 3.785411784, 0},
	"m":    {"ft", 1 / 0.3048, 0},
	"m/s":  {"ft/s", 1 / 0.3048, 0},
	"bar":  {"psi", 1e5 / 6894.757293168361, 0},
	"kW":   {"hp", 1e3 / 745.6998715822702, 0},
	"degC": {"degF", 1.8, 32},

	"kg/m3":     {"lb/ft3", 0.3048 * 0.3048 * 0.3048 / 0.45359237, 0},
	"mPa s":     {"cP", 1, 0},
	"mm2/s":     {"cSt", 1, 0},
	"kPa":       {"psi", 1e3 / 6894.757293168361, 0},
	"kJ/(kg K)": {"Btu/(lb degF)", 1 / 4.1868, 0}, // International Table Btu
	"W/(m K)":   {"Btu/(h ft degF)", 3600 * 0.3048 / (1055.05585262 * 1.8), 0},
}

// Unit returns the unit in which a value of the metric unit is written.
func (u Units) Unit(metric string) string {
	if t, has := usCustomary[metric]; has && u == US {
		return t.name
	}
	return metric
}

// Turn returns the value in the unit of Unit.
func (u Units) Turn(value study.Figure, metric string) study.Figure {
	if t, has := usCustomary[metric]; has && u == US {
		return study.Figure(t.factor)*value + study.Figure(t.offset)
	}
	return value
}

// Text writes a value with a fixed number of decimals, or with a dash where it is not known.
func (u Units) Text(value study.Figure, metric string, decimals int) string {
	v := u.Turn(value, metric)
	if !v.Known() {
		return "-"
	}
	text := fmt.Sprintf("%.*f", decimals, float64(v))
	if strings.Trim(text, "-0.") == "" { // no negative nought
		text = fmt.Sprintf("%.*f", decimals, math.Abs(float64(v)))
	}
	return text
}
