package main

import (
	"bytes"
	"io"

	"github.com/spf13/cobra"

	"brinehead/cmd/brinehead/internal/report"
	"brinehead/cmd/brinehead/internal/study"
)

func newCheck(s streams) *cobra.Command {
	var o common
	c := &cobra.Command{
		Use:   "check JOB",
		Short: "Every condition of a job: operating points, NPSH margin, power, velocities, limits",
		Long: "Solves every condition of the job, says where each pump runs and what margin its suction keeps, and judges\n" +
			"the limits of limits.csv, or common practice where it names none of a kind.",
		Example: "  $ brinehead check testdata/jobs/seawater\n" +
			"  $ brinehead check testdata/jobs/seawater --condition \"ballast, tropics\"\n" +
			"  $ brinehead check testdata/jobs/seawater --format json",
		Args: oneJob,
		RunE: func(_ *cobra.Command, args []string) error { return check(s, o, args[0]) },
	}
	addCommon(c, &o)
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
		files, err := report.CheckFiles(answer, o.units)
		if err != nil {
			return err
		}
		if err := writeFiles(o.out, files, folder, o.change); err != nil {
			return err
		}
	}
	var text bytes.Buffer // whole or not at all
	switch o.format {
	case "json":
		err = report.WriteCheckJSON(&text, answer)
	case "csv":
		err = report.WriteDutyCSV(&text, answer, o.units)
	default:
		err = report.WriteCheckText(&text, answer, o.units)
	}
	if err != nil {
		return err
	}
	if _, err := io.Copy(s.out, &text); err != nil {
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
