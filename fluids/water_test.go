package fluids

import (
	"errors"
	"fmt"
	"math"
	"testing"
)

func fresh(arguments []float64) (any, error) { return Fresh(arguments[0], arguments[1]) }
func sea(arguments []float64) (any, error)   { return Sea(arguments[0], arguments[1], arguments[2]) }

// ranges says of one function, for each argument, a value inside and the two ends of its range. The low end of a
// pressure is the vapour pressure inside, so it is given for the other arguments as they stand.
var ranges = []struct {
	name      string
	of        func(arguments []float64) (any, error)
	arguments [][3]float64 // inside, low, high
}{
	{"Fresh", fresh, [][3]float64{{20, 0, 150}, {2.5e6, saturation(293.15), 2.6e6}}},
	{"Sea", sea, [][3]float64{{20, -2, 80}, {35, 0, 45}, {2e6, seaVapourPressure(293.15, 35), 2.6e6}}},
	{"LiquidWater", func(a []float64) (any, error) { return LiquidWater(a[0], a[1]) },
		[][3]float64{{300, 273.15, 623.15}, {50e6, saturation(300), 100e6}}},
	{"Saline", func(a []float64) (any, error) { return Saline(a[0], a[1], a[2]) },
		[][3]float64{{300, 261, 353.15}, {1e5, 0, 100e6}, {35, 0, 120}}},
	{"VapourPressure", func(a []float64) (any, error) { return VapourPressure(a[0]) }, [][3]float64{{300, 273.15, 647.096}}},
	{"BoilingTemperature", func(a []float64) (any, error) { return BoilingTemperature(a[0]) }, [][3]float64{{1e5, 611.212677, 22.064e6}}},
	{"SeaVapourPressure", func(a []float64) (any, error) { return SeaVapourPressure(a[0], a[1]) }, [][3]float64{{20, -2, 80}, {35, 0, 45}}},
	{"Viscosity", func(a []float64) (any, error) { return Viscosity(a[0], a[1]) }, [][3]float64{{300, 273.15, 1173.15}, {998, 0, 1200}}},
	{"SeaViscosity", func(a []float64) (any, error) { return SeaViscosity(a[0], a[1]) }, [][3]float64{{20, -2, 80}, {35, 0, 45}}},
	{"Conductivity", func(a []float64) (any, error) { return Conductivity(a[0], a[1]) }, [][3]float64{{300, 273.15, 1173.15}, {998, 0, 1200}}},
	{"SeaConductivityExcess", func(a []float64) (any, error) { return SeaConductivityExcess(a[0], a[1], a[2]) },
		[][3]float64{{300, 273.15, 523.15}, {1e5, 0, 140e6}, {35, 0, 170}}},
	{"AbsoluteSalinity", func(a []float64) (any, error) { return AbsoluteSalinity(a[0]) }, [][3]float64{{35, 2, 42}}},
}

// Every function takes both ends of its range and refuses the next number beyond, NaN and the infinities, with a
// RangeError that carries the value and both ends, and with no figure that could be taken for an answer.
func TestRanges(t *testing.T) {
	for _, c := range ranges {
		inside := make([]float64, len(c.arguments))
		for i := range c.arguments {
			inside[i] = c.arguments[i][0]
		}
		for i, argument := range c.arguments {
			call := func(x float64) (any, error) {
				arguments := append([]float64(nil), inside...)
				arguments[i] = x
				return c.of(arguments)
			}
			low, high := argument[1], argument[2]
			for _, x := range []float64{low, argument[0], high} {
				if _, err := call(x); err != nil {
					t.Errorf("%s: argument %d = %v refused: %v", c.name, i, x, err)
				}
			}
			for _, x := range []float64{math.Nextafter(low, math.Inf(-1)), math.Nextafter(high, math.Inf(1)), math.Inf(-1), math.Inf(1), math.NaN()} {
				got, err := call(x)
				var outside *RangeError
				if !errors.As(err, &outside) {
					t.Errorf("%s: argument %d = %v gave %v, error %v", c.name, i, x, got, err)
					continue
				}
				if !(outside.Value == x || math.IsNaN(x) && math.IsNaN(outside.Value)) || outside.Low != low || outside.High != high {
					t.Errorf("%s: argument %d = %v: the error says %v, %v to %v", c.name, i, x, outside.Value, outside.Low, outside.High)
				}
				switch got := got.(type) {
				case float64:
					if !math.IsNaN(got) {
						t.Errorf("%s: argument %d = %v gave %v beside its error", c.name, i, x, got)
					}
				case State:
					if got != (State{}) {
						t.Errorf("%s: argument %d = %v gave a state beside its error", c.name, i, x)
					}
				case Liquid:
					if got != (Liquid{}) {
						t.Errorf("%s: argument %d = %v gave %v beside its error", c.name, i, x, got)
					}
				case Salt:
					if got != (Salt{}) {
						t.Errorf("%s: argument %d = %v gave %v beside its error", c.name, i, x, got)
					}
				default:
					t.Errorf("%s returns a %T that this test does not know", c.name, got)
				}
			}
		}
	}
}

func TestRangeErrorSays(t *testing.T) {
	for _, c := range []struct {
		call func() error
		want string
	}{
		{func() error { _, err := Fresh(170, 1e6); return err }, "IAPWS-IF97 region 1: temperature 170 degC is outside 0 to 150 degC"},
		{func() error { _, err := Fresh(100, 50e3); return err }, "IAPWS-IF97 region 1: pressure 50000 Pa is outside 101417.978 to 2600000 Pa"},
		{func() error { _, err := Fresh(100, 2.7e6); return err }, "IAPWS-IF97 region 1: pressure 2700000 Pa is outside 101417.978 to 2600000 Pa"},
		{func() error { _, err := Sea(20, 60, 1e5); return err }, "IAPWS R13-08 sea water: salinity 60 g/kg is outside 0 to 45 g/kg"},
		{func() error { _, err := AbsoluteSalinity(50); return err }, "PSS-78: practical salinity 50 is outside 2 to 42"},
	} {
		if got := fmt.Sprint(c.call()); got != c.want {
			t.Errorf("got  %s\nwant %s", got, c.want)
		}
	}
}

// Below 0 degC no published equation gives the conductivity of sea water; every other figure is there.
func TestSeaBelowZeroLacksConductivityOnly(t *testing.T) {
	s, err := Sea(-1, 35, StandardAtmosphere)
	if err != nil {
		t.Fatal(err)
	}
	if !math.IsNaN(s.ThermalConductivity) {
		t.Errorf("conductivity %v, want NaN", s.ThermalConductivity)
	}
	for _, x := range []float64{s.Density, s.DynamicViscosity, s.VapourPressure, s.HeatCapacity} {
		if !(x > 0) {
			t.Errorf("a figure is missing: %+v", s)
		}
	}
}

func TestStatesDoNotAllocate(t *testing.T) {
	for name, state := range map[string]func(){
		"Fresh": func() { _, _ = Fresh(36, 3e5) },
		"Sea":   func() { _, _ = Sea(25, 35, 3e5) },
	} {
		if n := testing.AllocsPerRun(100, state); n != 0 {
			t.Errorf("%s allocates %g times", name, n)
		}
	}
}

// Every figure of a state has its source, told whole.
func TestSources(t *testing.T) {
	properties := []string{"density", "heat capacity", "vapour pressure", "dynamic viscosity", "thermal conductivity"}
	for _, kind := range []Kind{FreshWater, SeaWater} {
		sources := Sources(kind)
		if len(sources) != len(properties) {
			t.Errorf("%s: %d sources, want %d", kind, len(sources), len(properties))
			continue
		}
		for i, s := range sources {
			if s.Property != properties[i] || s.Method == "" || s.Publication == "" || s.Range == "" || s.Uncertainty == "" {
				t.Errorf("%s: source %d is %+v, want one of %s", kind, i, s, properties[i])
			}
		}
	}
	if got := fmt.Sprint(FreshWater, SeaWater); got != "fresh sea" {
		t.Errorf("kinds read %q", got)
	}
	for _, none := range []Kind{-1, SeaWater + 1} { // a number that is no kind must not pass for fresh water
		if got := Sources(none); got != nil {
			t.Errorf("%v has sources %+v", none, got)
		}
	}
	if got := fmt.Sprint(Kind(-1), SeaWater+1); got != "Kind(-1) Kind(2)" {
		t.Errorf("numbers that are no kind read %q", got)
	}
}
