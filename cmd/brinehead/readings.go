package main

import (
	"errors"
	"fmt"
	"io"

	"github.com/spf13/cobra"

	"brinehead/cmd/brinehead/internal/report"
	"brinehead/cmd/brinehead/internal/study"
)

func newReadings(s streams) *cobra.Command {
	var o common
	var options study.ReadingsOptions
	var sheet, card bool
	c := &cobra.Command{
		Use:   "readings JOB",
		Short: "Measured gauges against the calculation: the head and flow they imply, and how sure that is",
		Long: "Works the total head of each running pump from its gauges, line by line, and the flow that gauges, power, drops\n" +
			"over fittings and flow meters imply, each with its band; says whether they agree, whether the pump stands on its\n" +
			"curve, and whether gauges at rest read true. Uncertainties are plus or minus at about 95 %.",
		Example: "  $ brinehead readings testdata/jobs/seawater --change testdata/changes/harbour-readings\n" +
			"  $ brinehead readings testdata/jobs/seawater --change testdata/changes/harbour-readings --volts 440 --power-factor 0.86 --motor-efficiency 0.93\n" +
			"  $ brinehead readings --sheet testdata/jobs/seawater\n" +
			"  $ brinehead readings --card testdata/jobs/seawater --condition \"ballast, tropics\"",
		Args: oneJob,
		RunE: func(_ *cobra.Command, args []string) error {
			switch {
			case sheet && card:
				return errors.New("readings: --sheet and --card are two things: want one of them")
			case sheet || card:
				return readingSheet(s, o, args[0], card)
			}
			return readings(s, o, args[0], options)
		},
	}
	addCommon(c, &o)
	f := c.Flags()
	f.StringVar(&options.Grade, "grade", study.DefaultGrade, "acceptance grade of a pump's head, ISO 9906")
	f.Float64Var(&options.Volts, "volts", 0, "of the motors, between phases [V]")
	f.Float64Var(&options.PowerFactor, "power-factor", 0, "of the motors, a fraction")
	f.Float64Var(&options.MotorEfficiency, "motor-efficiency", 0, "of the motors, a fraction")
	f.BoolVar(&sheet, "sheet", false, "the form of the readings to take aboard, in place of working them")
	f.BoolVar(&card, "card", false, "the readings to expect, by condition, in place of working them")
	completeFrom(c, "grade", study.GradeNames())
	return c
}

// readingSheet answers readings --sheet and --card.
func readingSheet(s streams, o common, folder string, card bool) error {
	if err := o.parse(); err != nil {
		return err
	}
	j, err := o.readJob(folder)
	if err != nil {
		return err
	}
	var answer *study.ReadingSheet
	if card {
		answer, err = study.Card(j, o.conditions)
	} else {
		answer, err = study.Sheet(j)
	}
	if err != nil {
		return err
	}
	if o.out != "" {
		files, err := report.SheetFiles(answer, o.output(j))
		if err != nil {
			return err
		}
		if err := writeFiles(o.out, files, folder, o.change); err != nil {
			return err
		}
	}
	return s.show(o.format, shown{answer,
		func(w io.Writer) error { return report.WriteSheetText(w, answer, o.units) },
		func(w io.Writer) error { return report.WriteSheetCSV(w, answer, o.units) }})
}

func readings(s streams, o common, folder string, options study.ReadingsOptions) error {
	if err := o.parse(); err != nil {
		return err
	}
	for _, f := range []struct {
		flag        string
		value, most float64
	}{{"volts", options.Volts, 20000}, {"power-factor", options.PowerFactor, 1}, {"motor-efficiency", options.MotorEfficiency, 1}} {
		if !(0 <= f.value && f.value <= f.most) {
			return fmt.Errorf("%s: found %g, want at least 0, at most %g", f.flag, f.value, f.most)
		}
	}
	j, err := o.readJob(folder)
	if err != nil {
		return err
	}
	options.Conditions, options.Version = o.conditions, version()
	answer, err := study.Read(j, options)
	if err != nil {
		return err
	}
	out := shown{answer,
		func(w io.Writer) error { return report.WriteReadingsText(w, answer, o.units) },
		func(w io.Writer) error { return report.WriteReadingsCSV(w, answer, o.units) }}
	if o.out != "" {
		files, err := report.ReadingsFiles(answer, o.output(j))
		if err != nil {
			return err
		}
		if err := writeFiles(o.out, files, folder, o.change); err != nil {
			return err
		}
	}
	if err := s.show(o.format, out); err != nil {
		return err
	}
	if !answer.Met() {
		return errNotMet
	}
	return nil
}
