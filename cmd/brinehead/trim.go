package main

import (
	"errors"
	"fmt"
	"io"

	"github.com/spf13/cobra"

	"brinehead/cmd/brinehead/internal/report"
	"brinehead/cmd/brinehead/internal/study"
)

// trimFlags are the flags of trim beside the common ones.
type trimFlags struct {
	pumps            []string
	limitTo, step    float64
	valve            string
	fuel, co2, price float64
}

func newTrim(s streams) *cobra.Command {
	var o common
	var f trimFlags
	c := &cobra.Command{
		Use:   "trim JOB",
		Short: "The impeller diameter that keeps every required flow, by each method, beside throttling and slower running",
		Long: "Finds the smallest diameter that keeps every minimum flow and minimum pressure in every condition, by each method of trim and\n" +
			"from digitised neighbours; the cautious cut, the first cut before a test, what stops the next millimetre, what else changes, and\n" +
			"the same duty by throttling, by slower running and by fewer pumps, with the energy of a year (hours in conditions.csv).",
		Example: "  $ brinehead trim testdata/jobs/seawater\n" +
			"  $ brinehead trim testdata/jobs/freshwater --pump P1 --pump P2 --step 0.5 --limit-to 275\n" +
			"  $ brinehead trim testdata/jobs/seawater --price 650",
		Args: oneJob,
		RunE: func(_ *cobra.Command, args []string) error {
			return trim(s, o, f, args[0])
		},
	}
	addCommon(c, &o)
	flags := c.Flags()
	flags.StringArrayVar(&f.pumps, "pump", nil, "pump to trim (may be given again); without it all that have the first one's curve and impeller")
	flags.Float64Var(&f.limitTo, "limit-to", 0, "no smaller than this diameter, mm")
	flags.Float64Var(&f.step, "step", 1, "what the workshop turns to, mm")
	flags.StringVar(&f.valve, "valve", "", "tag of the valve to throttle with")
	flags.Float64Var(&f.fuel, "fuel", study.DefaultFuel, "kg of fuel for a kWh at the consumer")
	flags.Float64Var(&f.co2, "co2", study.DefaultCO2, "kg of CO2 for a kg of fuel")
	flags.Float64Var(&f.price, "price", 0, "price of a tonne of fuel; without it no cost is worked out")
	return c
}

// options turns the flags.
func (f trimFlags) options() (study.TrimOptions, error) {
	switch {
	case !(f.limitTo >= 0 && f.limitTo <= 5000):
		return study.TrimOptions{}, fmt.Errorf("limit-to: found %g mm, want 0 to 5000", f.limitTo)
	case !(0.01 <= f.step && f.step <= 100):
		return study.TrimOptions{}, fmt.Errorf("step: found %g mm, want 0.01 to 100", f.step)
	case !(0 < f.fuel && f.fuel < 5) || !(0 < f.co2 && f.co2 < 10) || !(f.price >= 0 && f.price < 1e6):
		return study.TrimOptions{}, errors.New("fuel, co2 and price: want kg/kWh above 0 and below 5, kg/kg above 0 and below 10, and a price of 0 to a million")
	}
	o := study.TrimOptions{Pumps: f.pumps, LimitTo: f.limitTo / 1e3, Step: f.step / 1e3, Valve: f.valve, Price: f.price, Version: version()}
	if f.fuel != study.DefaultFuel {
		o.Fuel = f.fuel
	}
	if f.co2 != study.DefaultCO2 {
		o.CO2 = f.co2
	}
	return o, nil
}

func trim(s streams, o common, f trimFlags, folder string) error {
	if err := o.parse(); err != nil {
		return err
	}
	options, err := f.options()
	if err != nil {
		return err
	}
	if len(o.conditions) > 0 {
		return errors.New("trim: --condition is not taken: a cut must bear every condition")
	}
	j, err := o.readJob(folder)
	if err != nil {
		return err
	}
	answer, err := study.Trims(j, options)
	if err != nil {
		return err
	}
	if o.out != "" {
		files, err := report.TrimFiles(answer, o.output(j))
		if err != nil {
			return err
		}
		if err := writeFiles(o.out, files, folder, o.change); err != nil {
			return err
		}
	}
	err = s.show(o.format, shown{answer,
		func(w io.Writer) error { return report.WriteTrimText(w, answer, o.units) },
		func(w io.Writer) error { return report.WriteTrimCSV(w, answer, o.units) }})
	if err != nil {
		return err
	}
	if !answer.Met() {
		return errNotMet
	}
	return nil
}
