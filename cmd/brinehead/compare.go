package main

import (
	"fmt"
	"io"

	"github.com/spf13/cobra"

	"brinehead/cmd/brinehead/internal/report"
	"brinehead/cmd/brinehead/internal/study"
)

func newCompare(s streams) *cobra.Command {
	var o common
	var test []string
	var grade string
	c := &cobra.Command{
		Use:   "compare JOB CHANGE",
		Short: "Before and after a change: inputs, flows, margins, power, limits gained and lost, and what the harbour test is to show",
		Long: "Solves every condition of the job as it is and with the tables of the change folder in place of its own, says what\n" +
			"the change rewrites, what becomes of every flow, margin, power, pressure and limit, where along the way of each\n" +
			"pump's water the difference in head comes from, and between which bounds flow meters and gauges are to read\n" +
			"afterwards.",
		Example: "  $ brinehead compare testdata/jobs/seawater testdata/changes/fine-strainer\n" +
			"  $ brinehead compare testdata/jobs/seawater testdata/changes/pipe-renewal --condition \"ballast, tropics\"\n" +
			"  $ brinehead compare testdata/jobs/seawater testdata/changes/pipe-renewal --test \"loaded, tropics\" --grade 1B",
		Args: func(c *cobra.Command, args []string) error {
			if len(args) != 2 {
				return fmt.Errorf("compare needs the job folder and the change folder, and nothing else: %s", c.UseLine())
			}
			return nil
		},
		RunE: func(_ *cobra.Command, args []string) error {
			return compare(s, o, args[0], args[1], study.CompareOptions{Conditions: o.conditions, Test: test, Grade: grade, Version: version()})
		},
	}
	addAnswer(c, &o)
	c.Flags().StringArrayVar(&test, "test", nil, "condition of the harbour test, of those compared (may be given again); all where none is given")
	c.Flags().StringVar(&grade, "grade", study.DefaultGrade, "acceptance grade of the pump's head in the harbour test, ISO 9906")
	completeFrom(c, "grade", study.GradeNames())
	return c
}

func compare(s streams, o common, folder, change string, options study.CompareOptions) error {
	if err := o.parse(); err != nil {
		return err
	}
	before, err := o.readJob(folder)
	if err != nil {
		return err
	}
	o.change = change
	after, err := o.readJob(folder)
	if err != nil {
		return err
	}
	answer, err := study.Compared(before, after, folderName(change), options)
	if err != nil {
		return err
	}
	stuck := answer.NotConverged()
	if o.out != "" && stuck == nil {
		files, err := report.CompareFiles(answer, o.output(after))
		if err != nil {
			return err
		}
		if err := writeFiles(o.out, files, folder, change); err != nil {
			return err
		}
	}
	err = s.show(o.format, shown{answer,
		func(w io.Writer) error { return report.WriteCompareText(w, answer, o.units) },
		func(w io.Writer) error { return report.WriteDifferencesCSV(w, answer, o.units) }})
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
