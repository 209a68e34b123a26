package main

import (
	"errors"
	"io"

	"github.com/spf13/cobra"

	"brinehead/cmd/brinehead/internal/report"
	"brinehead/cmd/brinehead/internal/study"
)

func newPump(s streams) *cobra.Command {
	var o common
	var pump, grade string
	c := &cobra.Command{
		Use:   "pump JOB",
		Short: "What a pump's sheet tells: fit, odd points, best efficiency, regions, power, acceptance band, trims",
		Long: "Reads the digitised curves of the job's pumps: how each quantity was fitted and how well, points that do not\n" +
			"belong, whether head, flow, efficiency and power agree, best efficiency and specific speeds, operating regions,\n" +
			"the greatest power beside the motor, the band of an acceptance grade, and what a trim would do by each method.",
		Example: "  $ brinehead pump testdata/jobs/seawater\n" +
			"  $ brinehead pump testdata/jobs/freshwater --pump P1 --grade 1B",
		Args: oneJob,
		RunE: func(_ *cobra.Command, args []string) error {
			return pumpSheets(s, o, args[0], pump, grade)
		},
	}
	addCommon(c, &o)
	c.Flags().StringVar(&pump, "pump", "", "only this pump")
	c.Flags().StringVar(&grade, "grade", "2B", "acceptance grade of the band: 1U, 1E, 1B, 2B, 2U, 3B of ISO 9906:2012, class 1, class 2 of 1999")
	return c
}

func pumpSheets(s streams, o common, folder, pump, grade string) error {
	if err := o.parse(); err != nil {
		return err
	}
	condition := ""
	switch len(o.conditions) {
	case 0:
	case 1:
		condition = o.conditions[0]
	default:
		return errors.New("pump: --condition may be given once: a sheet is read at one speed and in one water")
	}
	j, err := o.readJob(folder)
	if err != nil {
		return err
	}
	answer, err := study.Sheets(j, pump, condition, grade, version())
	if err != nil {
		return err
	}
	if o.out != "" {
		files, err := report.PumpFiles(answer, o.output(j))
		if err != nil {
			return err
		}
		if err := writeFiles(o.out, files, folder, o.change); err != nil {
			return err
		}
	}
	return s.show(o.format, shown{answer,
		func(w io.Writer) error { return report.WritePumpText(w, answer, o.units) },
		func(w io.Writer) error { return report.WritePumpCSV(w, answer, o.units) }})
}
