package main

import (
	"io"

	"github.com/spf13/cobra"

	"brinehead/cmd/brinehead/internal/report"
	"brinehead/cmd/brinehead/internal/study"
)

func newCheck(s streams) *cobra.Command {
	var o common
	var valve string
	c := &cobra.Command{
		Use:   "check JOB",
		Short: "Every condition of a job: operating points, NPSH margin, power, velocities, limits",
		Long: "Solves every condition of the job, says where each pump runs and what margin its suction keeps, and judges\n" +
			"the limits of limits.csv, or common practice where it names none of a kind.",
		Example: "  $ brinehead check testdata/jobs/seawater\n" +
			"  $ brinehead check testdata/jobs/seawater --condition \"ballast, tropics\"\n" +
			"  $ brinehead check testdata/jobs/seawater --format json\n" +
			"  $ brinehead check testdata/jobs/freshwater --valve V30 --condition \"sea passage, tropics\"",
		Args: oneJob,
		RunE: func(_ *cobra.Command, args []string) error {
			if valve != "" {
				return valveStroke(s, o, args[0], valve)
			}
			return check(s, o, args[0])
		},
	}
	addCommon(c, &o)
	c.Flags().StringVar(&valve, "valve", "", "tag of a three-way valve: its flows over the whole stroke, and the bypass orifice, in place of the check")
	return c
}

func check(s streams, o common, folder string) error {
	if err := o.parse(); err != nil {
		return err
	}
	j, err := o.readJob(folder)
	if err != nil {
		return err
	}
	answer, err := study.Checked(j, o.conditions, version())
	if err != nil {
		return err
	}
	stuck := answer.NotConverged()
	if o.out != "" && stuck == nil {
		files, err := report.CheckFiles(answer, o.output(j))
		if err != nil {
			return err
		}
		if err := writeFiles(o.out, files, folder, o.change); err != nil {
			return err
		}
	}
	err = s.show(o.format, shown{answer,
		func(w io.Writer) error { return report.WriteCheckText(w, answer, o.units) },
		func(w io.Writer) error { return report.WriteDutyCSV(w, answer, o.units) }})
	if err != nil {
		return err
	}
	if stuck != nil {
		return stuck
	}
	if !answer.Met() {
		return errNotMet
	}
	return nil
}

// valveStroke answers check --valve.
func valveStroke(s streams, o common, folder, valve string) error {
	if err := o.parse(); err != nil {
		return err
	}
	j, err := o.readJob(folder)
	if err != nil {
		return err
	}
	answer, err := study.Valve(j, valve, o.conditions)
	if err != nil {
		return err
	}
	stroke := shown{answer,
		func(w io.Writer) error { return report.WriteValveText(w, answer, o.units) },
		func(w io.Writer) error { return report.WriteValveCSV(w, answer, o.units) }}
	if err := writeCSV(o.out, "valve.csv", stroke, folder, o.change); err != nil {
		return err
	}
	return s.show(o.format, stroke)
}
