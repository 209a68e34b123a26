package main

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"runtime/debug"
	"slices"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/cmd/brinehead/internal/report"
	"brinehead/curves/plots"
	"brinehead/hydraulics"
)

// streams are where a command writes: results to out, all else to err.
type streams struct {
	out, err io.Writer
	colour   bool // text goes to a terminal, and may have its verdicts coloured
}

// Exit codes; a contract.
const (
	exitMet          = 0 // every limit judged is met
	exitNotMet       = 1 // a limit is not met, or could not be judged
	exitInput        = 2 // the input or the command line is wrong
	exitNotConverged = 3 // the calculation did not converge
)

// errNotMet ends a command whose answer is written and says that a limit is not met or not judged.
var errNotMet = errors.New("a limit is not met or could not be judged")

// run is main without the process: it returns the exit code.
func run(s streams, args []string) int {
	root := newRoot(s)
	root.SetArgs(args)
	err := root.Execute()
	code := exitCode(err)
	if err != nil && !errors.Is(err, errNotMet) {
		fmt.Fprintln(s.err, err)
	}
	return code
}

// exitCode is the one place where errors are told apart.
func exitCode(err error) int {
	var stuck *hydraulics.NotConverged
	switch {
	case err == nil:
		return exitMet
	case errors.Is(err, errNotMet):
		return exitNotMet
	case errors.As(err, &stuck):
		return exitNotConverged
	}
	return exitInput
}

func newRoot(s streams) *cobra.Command {
	root := &cobra.Command{
		Use:   "brinehead",
		Short: "Shows whether a ship's cooling-water pumps do their duty",
		Long: "Brinehead reads a job folder of tables (points, runs, fittings, pumps, pump curves, conditions) and says, for\n" +
			"every condition, where each pump runs, what margin its suction keeps, and which limits are met.\n\n" +
			"Exit codes: 0 every limit judged is met; 1 a limit is not met, or could not be judged; 2 the input or the\n" +
			"command line is wrong; 3 the calculation did not converge.",
		Version:           version(),
		SilenceErrors:     true,
		SilenceUsage:      true,
		CompletionOptions: cobra.CompletionOptions{HiddenDefaultCmd: true},
	}
	root.SetOut(s.out)
	root.SetErr(s.err)
	root.SetFlagErrorFunc(func(c *cobra.Command, err error) error {
		return fmt.Errorf("%w\n\thint: %s --help lists the flags", err, c.CommandPath())
	})
	root.AddCommand(newCatalogue(s), newCheck(s), newCompare(s), newMan(), newPump(s), newReadings(s), newSuction(s), newTrim(s), newWater(s))
	return root
}

// version is that of the module where it was built as one, or else "development".
func version() string {
	if info, ok := debug.ReadBuildInfo(); ok && info.Main.Version != "" && info.Main.Version != "(devel)" {
		return info.Main.Version
	}
	return "development"
}

// common are the flags that every command on a job takes.
type common struct {
	format     string
	out        string
	change     string
	conditions []string
	unitSystem string

	types, only         []string
	size, date, purpose string

	units    report.Units
	plotting report.Output
}

// formats are the values of --format.
var formats = []string{"text", "json", "csv"}

func addCommon(c *cobra.Command, o *common) {
	addAnswer(c, o)
	c.Flags().StringVar(&o.change, "change", "", "folder with the tables that a planned change rewrites")
}

// addAnswer adds the common flags but --change, for a command that names its change itself.
func addAnswer(c *cobra.Command, o *common) {
	f := c.Flags()
	f.StringVar(&o.format, "format", "text", "what to print: "+strings.Join(formats, ", "))
	f.StringVar(&o.out, "out", "", "folder to write tables and plots into")
	f.StringArrayVar(&o.conditions, "condition", nil, "only this condition (may be given again)")
	f.StringVar(&o.unitSystem, "units", "metric", "units of text and csv: "+strings.Join(report.UnitSystems, ", "))
	f.StringSliceVar(&o.types, "type", []string{"svg", "png"}, "types of the plots in --out: svg, png, pdf")
	f.StringSliceVar(&o.only, "only", nil, "only the files in --out whose names hold one of these, such as report,npsh")
	f.StringVar(&o.size, "size", "", "size of the plots in --out, mm, such as 160x110; without it each has its own")
	f.StringVar(&o.date, "date", "", "date that the report in --out bears, as you state it")
	f.StringVar(&o.purpose, "purpose", "", "purpose that the report in --out states")
	completeFrom(c, "format", formats)
	completeFrom(c, "units", report.UnitSystems)
	completeFrom(c, "type", []string{"svg", "png", "pdf"})
}

// completeFrom lets the shell complete a flag from a list.
func completeFrom(c *cobra.Command, flag string, values []string) {
	if err := c.RegisterFlagCompletionFunc(flag, cobra.FixedCompletions(values, cobra.ShellCompDirectiveNoFileComp)); err != nil {
		panic("a flag just made is not there: " + err.Error())
	}
}

// shown is an answer in the forms a command can print.
type shown struct {
	answer    any // for JSON
	text, csv func(io.Writer) error
}

// show prints an answer in a format of formats, whole or not at all.
func (s streams) show(format string, a shown) error {
	write := a.text
	switch format {
	case "json":
		write = func(w io.Writer) error { return report.WriteJSON(w, a.answer) }
	case "csv":
		write = a.csv
	}
	var text bytes.Buffer
	if err := write(&text); err != nil {
		return err
	}
	if s.colour && format == "text" {
		_, err := io.WriteString(s.out, coloured(text.String()))
		return err
	}
	_, err := io.Copy(s.out, &text)
	return err
}

// coloured colours the verdicts of a text; the words stay, so that nothing is told by colour alone.
func coloured(text string) string {
	const end = "\x1b[0m"
	return strings.NewReplacer(
		"NOT MET", "\x1b[1;31mNOT MET"+end, "NOT JUDGED", "\x1b[1;33mNOT JUDGED"+end, "NO CUT", "\x1b[1;31mNO CUT"+end,
		"EVERY LIMIT MET", "\x1b[1;32mEVERY LIMIT MET"+end, "EVERY SUCTION KEEPS ITS MARGIN", "\x1b[1;32mEVERY SUCTION KEEPS ITS MARGIN"+end,
	).Replace(text)
}

// writeCSV writes an answer's CSV into the folder of --out, where one is given.
func writeCSV(out, name string, a shown, inputs ...string) error {
	if out == "" {
		return nil
	}
	var text bytes.Buffer
	if err := a.csv(&text); err != nil {
		return err
	}
	return writeFiles(out, []report.File{{Name: name, Content: text.Bytes()}}, inputs...)
}

// oneOf refuses a flag's value that is not among those it may have.
func oneOf(flag, value string, values []string) error {
	if slices.Contains(values, value) {
		return nil
	}
	return fmt.Errorf("%s: found %q, want one of %s", flag, value, strings.Join(values, ", "))
}

// parse checks the flags that have a list of values.
func (o *common) parse() (err error) {
	if err := oneOf("format", o.format, formats); err != nil {
		return err
	}
	if o.units, err = report.ParseUnits(o.unitSystem); err != nil {
		return err
	}
	return o.parsePlotting()
}

// parsePlotting checks the flags of what --out writes.
func (o *common) parsePlotting() error {
	o.plotting = report.Output{Units: o.units, Only: o.only, Date: o.date, Purpose: o.purpose, Version: version()}
	for _, t := range o.types {
		if err := oneOf("type", t, []string{"svg", "png", "pdf"}); err != nil {
			return err
		}
		o.plotting.Types = append(o.plotting.Types, plots.Format(t))
	}
	if o.size == "" {
		return nil
	}
	width, height, both := strings.Cut(o.size, "x")
	w, err1 := strconv.ParseFloat(width, 64)
	h, err2 := strconv.ParseFloat(height, 64)
	if !both || err1 != nil || err2 != nil || !(40 <= w && w <= 1000 && 40 <= h && h <= 1000) {
		return fmt.Errorf("size: found %q, want width and height in mm, 40 to 1000 each, such as 160x110", o.size)
	}
	o.plotting.Size = plots.Size{Width: w, Height: h}
	return nil
}

// output is what --out writes of a job.
func (o *common) output(j *job.Job) report.Output {
	out := o.plotting
	out.Files = j.Tables.Files
	for _, c := range j.Tables.Conditions {
		if kind := strings.ToLower(c.Water.Value); !slices.Contains(out.Kinds, kind) {
			out.Kinds = append(out.Kinds, kind)
		}
	}
	return out
}

// oneJob wants the job folder as the one argument.
func oneJob(c *cobra.Command, args []string) error {
	if len(args) != 1 {
		return fmt.Errorf("%s needs the job folder, and nothing else: %s", c.Name(), c.UseLine())
	}
	return nil
}

// readJob reads the job folder and its change folder.
func (o *common) readJob(folder string) (*job.Job, error) {
	files, err := openFolder(folder)
	if err != nil {
		return nil, err
	}
	if o.change == "" {
		return job.Read(folderName(folder), files, nil)
	}
	change, err := openFolder(o.change)
	if err != nil {
		return nil, err
	}
	return job.Read(folderName(folder), files, change)
}
