package job

import (
	"fmt"
	"math"
	"regexp"
	"slices"
	"strconv"
	"strings"
)

// Quantity is a kind of number, with the units the trade uses for it.
type Quantity struct {
	Name  string
	Units []Unit // the first is the one messages and starter tables prefer; none for a plain number
}

// Unit is a unit of a quantity: SI = Factor value + Offset.
type Unit struct {
	Name           string
	Aliases        []string
	Factor, Offset float64
}

// ToSI turns a value in the unit into SI (or the program's own unit; see the package comment).
func (u Unit) ToSI(value float64) float64 { return u.Factor*value + u.Offset }

// FromSI turns it back.
func (u Unit) FromSI(si float64) float64 { return (si - u.Offset) / u.Factor }

// Conversion factors, exact by definition unless a comment says otherwise.
const (
	inch             = 0.0254
	foot             = 12 * inch
	usGallon         = 231 * inch * inch * inch
	imperialGallon   = 4.54609e-3
	pound            = 0.45359237
	standardGravity  = 9.80665
	psi              = pound * standardGravity / (inch * inch)
	metreOfWater     = 1000 * standardGravity // conventional: water of 1000 kg/m3
	millimetreOfHg   = 133.322387415          // conventional (ISO 80000-4, from memory)
	horsePower       = 550 * foot * pound * standardGravity
	metricHorsePower = 75 * standardGravity
)

// Quantities of the tables. A speed is kept in rpm, a salinity in g/kg, a temperature in Celsius, a flow coefficient Kv
// in m3/h at 1 bar, a share as a fraction.
var (
	length           = Quantity{"length", []Unit{{"m", nil, 1, 0}, {"mm", nil, 1e-3, 0}, {"cm", nil, 1e-2, 0}, {"ft", []string{"feet"}, foot, 0}, {"in", []string{"inch", `"`}, inch, 0}}}
	flow             = Quantity{"flow", []Unit{{"m3/h", []string{"m³/h", "m3/hr", "m³/hr", "cbm/h", "cum/h", "m^3/h"}, 1.0 / 3600, 0}, {"l/s", nil, 1e-3, 0}, {"l/min", nil, 1e-3 / 60, 0}, {"m3/s", []string{"m³/s", "m^3/s"}, 1, 0}, {"gpm (US)", []string{"gpm", "us gpm", "usgpm"}, usGallon / 60, 0}, {"gpm (UK)", []string{"uk gpm", "igpm"}, imperialGallon / 60, 0}}}
	pressure         = Quantity{"gauge pressure", pressureUnits("g")}
	drop             = Quantity{"pressure difference", pressureUnits("")}
	absolutePressure = Quantity{"absolute pressure", pressureUnits("a")}
	power            = Quantity{"power", []Unit{{"kW", nil, 1e3, 0}, {"W", nil, 1, 0}, {"MW", nil, 1e6, 0}, {"hp", []string{"bhp"}, horsePower, 0}, {"PS", nil, metricHorsePower, 0}}}
	temperature      = Quantity{"temperature", []Unit{{"degC", []string{"°c", "c", "deg c", "celsius"}, 1, 0}, {"K", []string{"kelvin"}, 1, -273.15}, {"degF", []string{"°f", "f", "deg f", "fahrenheit"}, 1 / 1.8, -32 / 1.8}}}
	speed            = Quantity{"speed", []Unit{{"rpm", []string{"1/min", "r/min", "min-1"}, 1, 0}}}
	share            = Quantity{"share", []Unit{{"%", []string{"percent"}, 0.01, 0}, {"-", nil, 1, 0}}}
	velocity         = Quantity{"velocity", []Unit{{"m/s", nil, 1, 0}, {"ft/s", []string{"fps"}, foot, 0}}}
	capacity         = Quantity{"flow coefficient Kv", []Unit{{"m3/h", []string{"m³/h", "m3/hr", "m³/hr"}, 1, 0}}}
	salinity         = Quantity{"salinity", []Unit{{"g/kg", nil, 1, 0}}}
	angle            = Quantity{"angle", []Unit{{"deg", []string{"°", "degree", "degrees"}, math.Pi / 180, 0}, {"rad", nil, 1, 0}}}
	area             = Quantity{"area", []Unit{{"m2", []string{"m²"}, 1, 0}, {"mm2", []string{"mm²"}, 1e-6, 0}, {"cm2", []string{"cm²"}, 1e-4, 0}, {"in2", nil, inch * inch, 0}}}
	density          = Quantity{"density", []Unit{{"kg/m3", []string{"kg/m³"}, 1, 0}}}
	frequency        = Quantity{"frequency", []Unit{{"Hz", nil, 1, 0}}}
	voltage          = Quantity{"voltage", []Unit{{"V", nil, 1, 0}, {"kV", nil, 1e3, 0}}}
	current          = Quantity{"current", []Unit{{"A", nil, 1, 0}}}
	ratio            = Quantity{"ratio", []Unit{{"-", []string{""}, 1, 0}}}
	plain            = Quantity{"number", nil}
	words            = Quantity{"text", nil}
)

// quantities are those with units, for saying of what a misplaced unit is one.
var quantities = []Quantity{length, flow, {"pressure", pressureUnits("")}, pressure, absolutePressure, power, temperature, speed, share, velocity, salinity, density, current, voltage, frequency, angle, area}

// pressureUnits returns the units of pressure, which may bear the mark of a gauge pressure (g) or of an absolute one (a):
// "barg", "bar g", "bar(g)". A unit without a mark is taken as what its column holds; with the other mark it is refused.
func pressureUnits(mark string) []Unit {
	units := []Unit{{"bar", nil, 1e5, 0}, {"mbar", nil, 100, 0}, {"kPa", nil, 1e3, 0}, {"MPa", nil, 1e6, 0}, {"Pa", nil, 1, 0}, {"psi", nil, psi, 0},
		{"mH2O", []string{"mwc", "mh₂o"}, metreOfWater, 0}, {"mmHg", nil, millimetreOfHg, 0}}
	if mark != "" {
		for i, u := range units {
			units[i].Aliases = append(u.Aliases, u.Name+mark, u.Name+" "+mark, u.Name+"("+mark+")", u.Name+" ("+mark+")")
		}
	}
	return units
}

// takenAs says of unit spellings with more than one meaning which one is taken.
var takenAs = map[string]string{
	"gpm": "US gallons a minute (gpm (UK) are the imperial ones)",
	"hp":  "mechanical horsepower of 745.7 W (PS is the metric one)",
}

// unit finds a unit of the quantity by its name or alias, whatever the case, but that M for mega must be a capital.
func (q Quantity) unit(name string) (Unit, bool) {
	name = strings.Join(strings.Fields(name), " ")
	for _, u := range q.Units {
		if u.Name == name {
			return u, true
		}
	}
	for _, u := range q.Units {
		if strings.HasPrefix(u.Name, "M") && !strings.HasPrefix(name, "M") {
			continue
		}
		if strings.EqualFold(u.Name, name) || slices.ContainsFunc(u.Aliases, func(a string) bool { return strings.EqualFold(a, name) }) {
			return u, true
		}
	}
	return Unit{}, false
}

// hint says of what a unit that is none of the quantity's is one, or which of the quantity's is nearest.
func (q Quantity) hint(unit string) string {
	for _, u := range q.Units {
		if strings.HasPrefix(u.Name, "M") && strings.EqualFold(u.Name, unit) {
			return u.Name + " with a capital M is mega, with a small one milli"
		}
	}
	for _, other := range quantities {
		if _, known := other.unit(unit); known {
			return quoted(unit) + " is a unit of " + other.Name
		}
	}
	return nearestHint(unit, strings.Split(q.names(), ", "))
}

// names lists the units for messages.
func (q Quantity) names() string {
	var names []string
	for _, u := range q.Units {
		names = append(names, u.Name)
	}
	return strings.Join(names, ", ")
}

// interval is a range of SI values with open or closed ends.
type interval struct {
	low, high         float64
	lowOpen, highOpen bool
}

func (i interval) holds(x float64) bool {
	return (x > i.low || !i.lowOpen && x == i.low) && (x < i.high || !i.highOpen && x == i.high)
}

// words says the interval in a unit: "more than 0, at most 5000".
func (i interval) words(u Unit) string {
	var parts []string
	number := func(si float64) string { return fmt.Sprintf("%.6g", u.FromSI(si)) }
	if !math.IsInf(i.low, 0) {
		word := "at least "
		if i.lowOpen {
			word = "more than "
		}
		parts = append(parts, word+number(i.low))
	}
	if !math.IsInf(i.high, 0) {
		word := "at most "
		if i.highOpen {
			word = "less than "
		}
		parts = append(parts, word+number(i.high))
	}
	if parts == nil {
		return aNumber
	}
	return strings.Join(parts, ", ")
}

func between(low, high float64) interval { return interval{low: low, high: high} }
func above(low, high float64) interval   { return interval{low: low, high: high, lowOpen: true} }
func below(low, high float64) interval   { return interval{low: low, high: high, highOpen: true} }

var anyNumber = between(math.Inf(-1), math.Inf(1))

// flagQuantities are the quantities that a command line may give with a unit.
var flagQuantities = map[string]Quantity{"temperature": temperature, "pressure": pressure, "salinity": salinity, "length": length, "flow": flow}

var quantityForm = regexp.MustCompile(`^\s*([+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)\s*(.*?)\s*$`)

// ParseQuantity reads a number with or without a unit of a quantity of flagQuantities, as a command line gives it:
// "32", "90degF", "2.5 psi". Without one the unit is the quantity's first. It returns the value in SI and the unit.
func ParseQuantity(quantity, text string) (si float64, u Unit, err error) {
	q := flagQuantities[quantity]
	parts := quantityForm.FindStringSubmatch(text)
	if parts == nil {
		return math.NaN(), Unit{}, fmt.Errorf("found %q, want a number, with or without one of the units %s", text, q.names())
	}
	u = q.Units[0]
	if parts[2] != "" {
		var known bool
		if u, known = q.unit(parts[2]); !known {
			return math.NaN(), Unit{}, fmt.Errorf("found the unit %q, want one of %s", parts[2], q.names())
		}
	}
	value, err := strconv.ParseFloat(parts[1], 64)
	if err != nil {
		return math.NaN(), Unit{}, fmt.Errorf("found %q, want a number of ordinary size", text)
	}
	return u.ToSI(value), u, nil
}
