package main

import (
	"fmt"
	"io"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"brinehead/cmd/brinehead/internal/report"
	"brinehead/cmd/brinehead/internal/study"
)

// suctionFlags are the flags of suction beside the common ones.
type suctionFlags struct {
	pump                   string
	draughts, temperatures []string
	running                []string
	allowance              float64
	heel, trim, length     float64
}

func newSuction(s streams) *cobra.Command {
	var o common
	var flags suctionFlags
	c := &cobra.Command{
		Use:   "suction JOB",
		Short: "May this strainer be fitted, and how dirty may it get: NPSH, gauge readings, draught, temperature, speed",
		Long: "For every condition, or the cross of lists of draughts, temperatures and pumps running: each pump's NPSH available line\n" +
			"by line and its margin, how far the strainer may block before a limit is broken, as blockage, differential pressure and\n" +
			"suction gauge, and the draught, temperature, bore, speed and flow at which the margin ends. With --change: before and after.",
		Example: "  $ brinehead suction testdata/jobs/seawater\n" +
			"  $ brinehead suction testdata/jobs/seawater --change testdata/changes/fine-strainer\n" +
			"  $ brinehead suction testdata/jobs/seawater --condition \"ballast, tropics\" --draught 4.8,9.2 --temperature 32 --running \"P1 P2\" --running P1\n" +
			"  $ brinehead suction testdata/jobs/seawater --pump P1 --heel 10 --trim 1.5 --length 170",
		Args: oneJob,
		RunE: func(_ *cobra.Command, args []string) error {
			return suction(s, o, flags, args[0])
		},
	}
	addCommon(c, &o)
	f := c.Flags()
	f.StringVar(&flags.pump, "pump", "", "only this pump")
	f.StringSliceVar(&flags.draughts, "draught", nil, "draughts, m: each condition at each of them")
	f.StringSliceVar(&flags.temperatures, "temperature", nil, "water temperatures, degC: each condition at each of them")
	f.StringArrayVar(&flags.running, "running", nil, "pumps that run, separated by spaces (may be given again): each condition with each set")
	f.Float64Var(&flags.allowance, "allowance", 100*study.DefaultAllowance, "share of the strainer's rise in drop that the alarm keeps in hand, %")
	f.Float64Var(&flags.heel, "heel", 0, "heel to either side, deg")
	f.Float64Var(&flags.trim, "trim", 0, "trim by the stern between the draught marks, m")
	f.Float64Var(&flags.length, "length", 0, "length between the draught marks, m: wanted with --trim")
	return c
}

// options turns the flags.
func (f suctionFlags) options(o common) (out study.SuctionOptions, err error) {
	out = study.SuctionOptions{Conditions: o.conditions, Pump: f.pump, Allowance: f.allowance / 100, Heel: f.heel, Trim: f.trim, Length: f.length, Version: version()}
	if out.Draughts, err = numbers("draught", f.draughts, 0, 50); err != nil {
		return out, err
	}
	if out.Temperatures, err = numbers("temperature", f.temperatures, -5, 150); err != nil {
		return out, err
	}
	for _, set := range f.running {
		out.Running = append(out.Running, strings.Fields(set))
	}
	switch {
	case !(0 < f.allowance && f.allowance < 100):
		return out, fmt.Errorf("allowance: found %g %%, want more than 0, less than 100", f.allowance)
	case !(-45 < f.heel && f.heel < 45):
		return out, fmt.Errorf("heel: found %g deg, want between -45 and 45", f.heel)
	case f.trim != 0 && !(f.length > 0):
		return out, fmt.Errorf("trim: found %g m without the length between the draught marks, want --length", f.trim)
	}
	return out, nil
}

// numbers reads a flag's list of figures.
func numbers(flag string, texts []string, low, high float64) (values []float64, err error) {
	for _, t := range texts {
		v, err := strconv.ParseFloat(strings.TrimSpace(t), 64)
		if err != nil || !(low <= v && v <= high) {
			return nil, fmt.Errorf("%s: found %q, want figures from %g to %g, separated by commas", flag, t, low, high)
		}
		values = append(values, v)
	}
	return values, nil
}

func suction(s streams, o common, flags suctionFlags, folder string) error {
	if err := o.parse(); err != nil {
		return err
	}
	options, err := flags.options(o)
	if err != nil {
		return err
	}
	j, err := o.readJob(folder)
	if err != nil {
		return err
	}
	answer, err := study.Suctions(j, options)
	if err != nil {
		return err
	}
	if o.change != "" {
		o.change = ""
		before, err := o.readJob(folder)
		if err != nil {
			return err
		}
		if answer.Before, err = study.Suctions(before, options); err != nil {
			return fmt.Errorf("before the change: %w", err)
		}
	}
	if o.out != "" {
		files, err := report.SuctionFiles(answer, o.output(j))
		if err != nil {
			return err
		}
		if err := writeFiles(o.out, files, folder); err != nil {
			return err
		}
	}
	err = s.show(o.format, shown{answer,
		func(w io.Writer) error { return report.WriteSuctionText(w, answer, o.units) },
		func(w io.Writer) error { return report.WriteSuctionCSV(w, answer, o.units) }})
	if err != nil {
		return err
	}
	if !answer.Met() {
		return errNotMet
	}
	return nil
}
