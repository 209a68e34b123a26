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
	var text bytes.Buffer
	if o.out != "" {
		if err := report.WriteValveCSV(&text, answer, o.units); err != nil {
			return err
		}
		if err := writeFiles(o.out, []report.File{{Name: "valve.csv", Content: bytes.Clone(text.Bytes())}}, folder, o.change); err != nil {
			return err
		}
		text.Reset()
	}
	switch o.format {
	case "json":
		err = report.WriteValveJSON(&text, answer)
	case "csv":
		err = report.WriteValveCSV(&text, answer, o.units)
	default:
		err = report.WriteValveText(&text, answer, o.units)
	}
	if err != nil {
		return err
	}
	_, err = io.Copy(s.out, &text)
	return err
}
