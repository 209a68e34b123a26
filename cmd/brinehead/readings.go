package main

import (
	"fmt"
	"io"

	"github.com/spf13/cobra"

	"brinehead/cmd/brinehead/internal/report"
	"brinehead/cmd/brinehead/internal/study"
)

func newReadings(s streams) *cobra.Command {
	var o common
	var options study.ReadingsOptions
	c := &cobra.Command{
		Use:   "readings JOB",
		Short: "Measured gauges against the calculation: the head and flow they imply, and how sure that is",
		Long: "Works the total head of each running pump from its gauges, line by line, and the flow that gauges, power, drops\n" +
			"over fittings and flow meters imply, each with its band; says whether they agree, whether the pump stands on its\n" +
			"curve, and whether gauges at rest read true. Uncertainties are plus or minus at about 95 %.",
		Example: "  $ brinehead readings testdata/jobs/seawater --change testdata/changes/harbour-readings\n" +
			"  $ brinehead readings testdata/jobs/seawater --change testdata/changes/harbour-readings --volts 440 --power-factor 0.86 --motor-efficiency 0.93",
		Args: oneJob,
		RunE: func(_ *cobra.Command, args []string) error {
			return readings(s, o, args[0], options)
		},
	}
	addCommon(c, &o)
	f := c.Flags()
	f.StringVar(&options.Grade, "grade", study.DefaultGrade, "acceptance grade of a pump's head, ISO 9906")
	f.Float64Var(&options.Volts, "volts", 0, "of the motors, between phases [V]")
	f.Float64Var(&options.PowerFactor, "power-factor", 0, "of the motors, a fraction")
	f.Float64Var(&options.MotorEfficiency, "motor-efficiency", 0, "of the motors, a fraction")
	completeFrom(c, "grade", study.GradeNames())
	return c
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
	if err := writeCSV(o.out, "readings-worked.csv", out, folder, o.change); err != nil {
		return err
	}
	if err := s.show(o.format, out); err != nil {
		return err
	}
	if !answer.Met() {
		return errNotMet
	}
	return nil
}
