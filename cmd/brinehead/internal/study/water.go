package study

import (
	"fmt"

	"brinehead/fluids"
)

// WaterTable is the answer to `water`: the properties of one water at one or more temperatures.
type WaterTable struct {
	Kind     string        `json:"kind"`
	Salinity Figure        `json:"salinity_g_kg"`
	Pressure Figure        `json:"pressure_bar"` // gauge
	States   []WaterState  `json:"states"`
	Sources  []WaterSource `json:"sources"`
}

// WaterState is the water at one temperature.
type WaterState struct {
	Temperature         Figure `json:"temperature_degC"`
	Density             Figure `json:"density_kg_m3"`
	DynamicViscosity    Figure `json:"dynamic_viscosity_Pa_s"`
	KinematicViscosity  Figure `json:"kinematic_viscosity_m2_s"`
	VapourPressure      Figure `json:"vapour_pressure_Pa"`
	HeatCapacity        Figure `json:"heat_capacity_J_kg_K"`
	ThermalConductivity Figure `json:"thermal_conductivity_W_m_K"`
}

// WaterSource says where a property comes from and how well it is known.
type WaterSource struct {
	Property    string `json:"property"`
	Method      string `json:"method"`
	Publication string `json:"publication"`
	Range       string `json:"range"`
	Uncertainty string `json:"uncertainty"`
}

// WaterOptions is what `water` is asked for.
type WaterOptions struct {
	Kind         fluids.Kind
	Temperatures []float64 // Celsius, one at least
	Salinity     float64   // g/kg, of sea water
	Gauge        float64   // Pa over one standard atmosphere
}

// Waters answers `water`. The error is a *fluids.RangeError.
func Waters(o WaterOptions) (*WaterTable, error) {
	t := &WaterTable{Kind: o.Kind.String(), Pressure: Figure(o.Gauge / 1e5)}
	if o.Kind == fluids.SeaWater {
		t.Salinity = Figure(o.Salinity)
	}
	for _, celsius := range o.Temperatures {
		state, err := waterAt(o, celsius)
		if err != nil {
			return nil, fmt.Errorf("%s water: %w", o.Kind, err)
		}
		t.States = append(t.States, WaterState{Figure(celsius), Figure(state.Density), Figure(state.DynamicViscosity), Figure(state.KinematicViscosity()),
			Figure(state.VapourPressure), Figure(state.HeatCapacity), Figure(state.ThermalConductivity)})
	}
	for _, s := range fluids.Sources(o.Kind) {
		t.Sources = append(t.Sources, WaterSource(s))
	}
	return t, nil
}

func waterAt(o WaterOptions, celsius float64) (fluids.State, error) {
	pascal := fluids.StandardAtmosphere + o.Gauge
	if o.Kind == fluids.SeaWater {
		return fluids.Sea(celsius, o.Salinity, pascal)
	}
	return fluids.Fresh(celsius, pascal)
}

// WaterMethods says in sentences what the properties of a kind of water rest on.
func WaterMethods(kind string) (list []string) {
	for _, k := range []fluids.Kind{fluids.FreshWater, fluids.SeaWater} {
		if k.String() != kind {
			continue
		}
		for _, s := range fluids.Sources(k) {
			list = append(list, fmt.Sprintf("%s water, %s: %s, %s (%s)", kind, s.Property, s.Publication, s.Method, s.Uncertainty))
		}
	}
	return list
}
