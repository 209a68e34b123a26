package report

import (
	"fmt"
	"io"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/cmd/brinehead/internal/study"
	"brinehead/curves/plots"
)

// Output says how results are written into a folder.
type Output struct {
	Units   Units
	Types   []plots.Format // of plots; empty for SVG and PNG
	Size    plots.Size     // of plots; zero for that of each chart
	Only    []string       // only files whose names hold one of these; empty for all
	Date    string         // as the user states it, for the report
	Purpose string         // likewise
	Version string
	Files   []job.FileNote // what was read, and from a change folder
	Kinds   []string       // of water in the job
}

// plot is a chart with what a page says of it.
type plot struct {
	name    string // of its file
	caption string
	write   func(w io.Writer, format plots.Format, size plots.Size) error
	data    *grid // what is plotted, for those who cannot see it
}

// wants says whether a file is asked for.
func (o Output) wants(name string) bool {
	for _, only := range o.Only {
		if strings.Contains(strings.ToLower(name), strings.ToLower(strings.TrimSpace(only))) {
			return true
		}
	}
	return len(o.Only) == 0
}

// drawn draws plots in every type.
func (o Output) drawn(list []plot) (files []File, err error) {
	types := o.Types
	if len(types) == 0 {
		types = []plots.Format{plots.SVG, plots.PNG}
	}
	for _, p := range list {
		for _, format := range types {
			name := p.name + "." + string(format)
			if !o.wants(name) {
				continue
			}
			var b strings.Builder
			if err := p.write(&b, format, o.Size); err != nil {
				return nil, fmt.Errorf("%s: %w", p.name, err)
			}
			files = append(files, File{name, []byte(b.String())})
		}
	}
	return files, nil
}

// document is a report: what both of its forms, HTML and PDF, show.
type document struct {
	title    string
	subtitle string
	head     []string // the statement of the result, the first line the verdict
	date     string
	version  string
	sections []section
}

type section struct {
	title  string
	blocks []block
}

// block is one thing on a page: a paragraph, items, a table, a plot, or lines to sign on.
type block struct {
	text  string
	items []string
	table *docTable
	plot  *plot
	sign  []string
}

// docTable is a table with its caption.
type docTable struct {
	caption string
	grid    grid
}

func (d *document) section(title string) { d.sections = append(d.sections, section{title: title}) }

func (d *document) add(b block) {
	s := &d.sections[len(d.sections)-1]
	s.blocks = append(s.blocks, b)
}

func (d *document) text(format string, values ...any) {
	d.add(block{text: fmt.Sprintf(format, values...)})
}

// items adds a list; nothing for an empty one.
func (d *document) items(list []string) {
	if len(list) > 0 {
		d.add(block{items: list})
	}
}

// table adds a table; nothing for one without rows.
func (d *document) table(caption string, g grid) {
	if len(g.rows) > 0 {
		d.add(block{table: &docTable{caption, g}})
	}
}

func (d *document) plots(list []plot) {
	for i := range list {
		d.add(block{plot: &list[i]})
	}
}

// unwrapped undoes the wrapping of text lines: a line that is set in deeper than the first goes on the one before. Blank lines and
// headings, which are not set in, are left out.
func unwrapped(lines []string) (items []string) {
	base := -1
	for _, l := range lines {
		text := strings.TrimLeft(l, " ")
		indent := len(l) - len(text)
		switch {
		case text == "" || indent == 0 && base != 0 && len(lines) > 1:
			continue
		case base < 0:
			base = indent
			items = append(items, text)
		case indent > base && len(items) > 0:
			items[len(items)-1] += " " + text
		default:
			items = append(items, text)
		}
	}
	return items
}

// joined undoes the wrapping of a paragraph or of several: a line that begins with two spaces goes on the one before.
func joined(lines []string) (paragraphs []string) {
	for _, l := range lines {
		if text := strings.TrimLeft(l, " "); text != l && len(paragraphs) > 0 {
			paragraphs[len(paragraphs)-1] += " " + text
		} else if text != "" {
			paragraphs = append(paragraphs, text)
		}
	}
	return paragraphs
}

// newDocument begins a report with what all of them say first.
func newDocument(o Output, title, jobName string, head []string) *document {
	d := &document{title: title, subtitle: "Job " + jobName, head: head, date: o.Date, version: o.Version}
	if o.Purpose != "" {
		d.section("Purpose")
		d.text("%s", o.Purpose)
	}
	return d
}

// finish ends a report: inputs, methods, what was not checked, cautions, and lines to sign on.
func (d *document) finish(o Output, unjudged []string, extra ...string) {
	d.section("Inputs as they were read")
	files := grid{left: 1, head: []string{"file", "rows", "separator", "decimal", "encoding", "from", "SHA-256"}}
	for _, f := range o.Files {
		from := "the job"
		if f.FromChange {
			from = "the change"
		}
		files.rows = append(files.rows, []string{f.Name, fmt.Sprint(f.Rows), f.Separator, f.Decimal, f.Encoding, from, f.SHA256})
	}
	d.table("Files, with what identifies their bytes", files)
	var notes []string
	for _, f := range o.Files {
		for _, n := range f.Notes {
			notes = append(notes, f.Name+": "+n)
		}
	}
	d.items(notes)
	d.section("Methods")
	d.items(append(methods(o.Kinds), extra...))
	d.section("What was not checked")
	d.items(append(unjudged, notChecked...))
	d.section("Cautions")
	d.text("Flooding, loss of cooling and blackout can follow from a wrong answer. %s", Caution)
	d.section("Signatures")
	d.add(block{sign: []string{"Prepared by", "Checked by", "Accepted by"}})
}

// notChecked is what no report of the program covers.
var notChecked = []string{
	"Strength, vibration, noise, and the wear of pipes and pumps to come.",
	"Transients: starting, stopping, water hammer, air on its way through the system.",
	"Approval by class or flag: the report prepares evidence, people approve.",
}

// methods lists what the figures rest on, with the publications.
func methods(kinds []string) []string {
	list := []string{
		"Pipe friction: Darcy-Weisbach with the factor of Colebrook (J. Inst. Civil Engineers 11, 1939), laminar below Reynolds number 2000, a monotone bridge to 4000.",
		"Fittings: each by the publication that stands beside it under the figures supplied; rated drops follow the square of flow or the row's own exponent.",
		"Network: all flows and heads in one solution by the global gradient method (E. Todini and S. Pilati, 1988, from memory), with a line search on the content; residuals stand beside each condition.",
		"Pumps: a smoothing spline or the parabola of least squares, chosen by leaving single points out; speed by the affinity laws; nothing beyond the digitised points is given as a figure.",
		"NPSH available: total head at the pump's suction less its datum, and the atmosphere less the vapour pressure, in metres of the water pumped (ISO 17769-1, from memory). NPSH required is the point of 3 % head loss.",
	}
	for _, kind := range kinds {
		list = append(list, study.WaterMethods(kind)...)
	}
	return list
}

// seriesGrid lists the points of lines for those who cannot see them, a dozen of each.
func seriesGrid(across, value string, xFactor, yFactor float64, lines ...plots.Line) *grid {
	g := &grid{left: 1, head: []string{"line", across, value}}
	for _, l := range lines {
		step := max(1, (len(l.Flow)-1)/12)
		for i := 0; i < len(l.Flow); i += step {
			g.rows = append(g.rows, []string{l.Name, short4(l.Flow[i] * xFactor), short4(l.Value[i] * yFactor)})
		}
	}
	return g
}

func short4(x float64) string {
	if x != x {
		return "-"
	}
	return fmt.Sprintf("%.4g", x)
}
