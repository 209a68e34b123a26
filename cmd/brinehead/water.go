package main

import (
	"fmt"
	"io"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/cmd/brinehead/internal/report"
	"brinehead/cmd/brinehead/internal/study"
	"brinehead/fluids"
)

// waterFlags are the flags of water.
type waterFlags struct {
	kind, temperature, to, step string
	pressure, salinity          string
	practical                   string
	format, out, unitSystem     string
}

func newWater(s streams) *cobra.Command {
	var o waterFlags
	c := &cobra.Command{
		Use:   "water",
		Short: "Properties of fresh or sea water, with the source and uncertainty of each",
		Long: "Density, viscosity, vapour pressure, heat capacity and thermal conductivity of fresh water (0 to 150 degC) or sea water\n" +
			"(-2 to 80 degC, 0 to 45 g/kg), at one temperature or at even steps. Fresh water with an inhibitor and no glycol counts as\n" +
			"fresh. Quantities may carry a unit: 90degF, 25psi; without one they are degC, bar gauge and g/kg.",
		Example: "  $ brinehead water --kind sea --temperature 32\n" +
			"  $ brinehead water --kind fresh --temperature 20 --to 95 --step 15 --pressure 3bar\n" +
			"  $ brinehead water --kind sea --temperature 77degF --practical-salinity 35 --units us",
		Args: cobra.NoArgs,
		RunE: func(*cobra.Command, []string) error { return water(s, o) },
	}
	f := c.Flags()
	f.StringVar(&o.kind, "kind", "sea", "fresh or sea")
	f.StringVar(&o.temperature, "temperature", "20", "temperature, degC unless it carries a unit")
	f.StringVar(&o.to, "to", "", "last temperature of a table that begins at --temperature")
	f.StringVar(&o.step, "step", "5", "step of the table, in the unit of --temperature")
	f.StringVar(&o.pressure, "pressure", "0", "gauge pressure over one standard atmosphere, bar unless it carries a unit")
	f.StringVar(&o.salinity, "salinity", "", fmt.Sprintf("absolute salinity of sea water, g/kg (default %g)", fluids.StandardSalinity))
	f.StringVar(&o.practical, "practical-salinity", "", "practical salinity (PSU) in place of --salinity, 2 to 42")
	f.StringVar(&o.format, "format", "text", "what to print: "+strings.Join(formats, ", "))
	f.StringVar(&o.unitSystem, "units", "metric", "units of text and csv: "+strings.Join(report.UnitSystems, ", "))
	f.StringVar(&o.out, "out", "", "folder to write water.csv into")
	completeFrom(c, "kind", []string{"fresh", "sea"})
	completeFrom(c, "format", formats)
	completeFrom(c, "units", report.UnitSystems)
	return c
}

func water(s streams, o waterFlags) error {
	if err := oneOf("format", o.format, formats); err != nil {
		return err
	}
	units, err := report.ParseUnits(o.unitSystem)
	if err != nil {
		return err
	}
	options, err := o.options()
	if err != nil {
		return err
	}
	answer, err := study.Waters(options)
	if err != nil {
		return err
	}
	table := shown{answer,
		func(w io.Writer) error { return report.WriteWaterText(w, answer, units) },
		func(w io.Writer) error { return report.WriteWaterCSV(w, answer, units) }}
	if err := writeCSV(o.out, "water.csv", table); err != nil {
		return err
	}
	return s.show(o.format, table)
}

// mostStates bounds a table of states.
const mostStates = 10_000

// options reads the flags.
func (o waterFlags) options() (study.WaterOptions, error) {
	var w study.WaterOptions
	switch o.kind {
	case "fresh":
		w.Kind = fluids.FreshWater
		if o.salinity != "" || o.practical != "" {
			return w, fmt.Errorf("salinity: found one for fresh water, want --kind sea, or none")
		}
	case "sea":
		w.Kind = fluids.SeaWater
	default:
		return w, oneOf("kind", o.kind, []string{"fresh", "sea"})
	}
	var err error
	if w.Salinity, err = o.absoluteSalinity(); err != nil {
		return w, err
	}
	if w.Gauge, _, err = job.ParseQuantity("pressure", o.pressure); err != nil {
		return w, fmt.Errorf("pressure: %w", err)
	}
	first, unit, err := job.ParseQuantity("temperature", o.temperature)
	if err != nil {
		return w, fmt.Errorf("temperature: %w", err)
	}
	w.Temperatures = []float64{first}
	if o.to == "" {
		return w, nil
	}
	last, _, err := job.ParseQuantity("temperature", o.to)
	if err != nil {
		return w, fmt.Errorf("to: %w", err)
	}
	step, err := strconv.ParseFloat(o.step, 64)
	step *= unit.Factor
	if err != nil || !(step > 0) || !(last >= first) || !((last-first)/step < mostStates) {
		return w, fmt.Errorf("step: found %q, want more than 0 and at most %d steps up from --temperature to --to", o.step, mostStates)
	}
	for i := 1; first+float64(i)*step <= last+1e-9; i++ {
		w.Temperatures = append(w.Temperatures, first+float64(i)*step)
	}
	return w, nil
}

// absoluteSalinity is that of the flags, or standard sea water's.
func (o waterFlags) absoluteSalinity() (float64, error) {
	switch {
	case o.salinity != "" && o.practical != "":
		return 0, fmt.Errorf("salinity: found both --salinity and --practical-salinity, want one")
	case o.practical != "":
		practical, err := strconv.ParseFloat(o.practical, 64)
		if err != nil {
			return 0, fmt.Errorf("practical-salinity: found %q, want a number", o.practical)
		}
		return fluids.AbsoluteSalinity(practical)
	case o.salinity != "":
		salinity, _, err := job.ParseQuantity("salinity", o.salinity)
		if err != nil {
			return 0, fmt.Errorf("salinity: %w", err)
		}
		return salinity, nil
	}
	return fluids.StandardSalinity, nil
}
