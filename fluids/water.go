// Package fluids says what the water in a cooling system is: density, viscosity, vapour pressure, heat capacity and
// thermal conductivity of fresh and sea water.
package fluids

import "fmt"

// Kind is a kind of water.
type Kind int

// The kinds of water.
const (
	FreshWater Kind = iota
	SeaWater
)

// String names the kind as job tables write it.
func (k Kind) String() string {
	return [...]string{"fresh", "sea"}[k]
}

// State is one water at one temperature and pressure. The zero value is no water: states come from [Fresh] and [Sea].
type State struct {
	Kind                Kind
	Celsius             float64
	AbsolutePascal      float64
	Salinity            float64 // absolute, g/kg; 0 for fresh water
	Density             float64 // kg/m3
	DynamicViscosity    float64 // Pa s
	VapourPressure      float64 // Pa, absolute
	HeatCapacity        float64 // J/(kg K), at constant pressure
	ThermalConductivity float64 // W/(m K); NaN for sea water below 0 degC, where no published equation reaches
}

// KinematicViscosity returns the dynamic viscosity over the density, m2/s.
func (s State) KinematicViscosity() float64 {
	return s.DynamicViscosity / s.Density
}

// RangeError tells that a method was asked for something outside its range.
type RangeError struct {
	Method   string // the method, such as "IAPWS-IF97 region 1"
	Quantity string // the quantity out of range
	Unit     string // its unit, empty where it has none
	Value    float64
	Low      float64
	High     float64
}

// Error says what was found and what the method allows.
func (e *RangeError) Error() string {
	unit := e.Unit
	if unit != "" {
		unit = " " + unit
	}
	return fmt.Sprintf("%s: %s %.9g%s is outside %.9g to %.9g%s", e.Method, e.Quantity, e.Value, unit, e.Low, e.High, unit)
}
