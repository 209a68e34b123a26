package study

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"brinehead/hydraulics"
	"brinehead/pumps"
)

// Catalogue is the answer to `catalogue`: one list of what the tables may name, a row an entry.
type Catalogue struct {
	List  string              `json:"list"`
	Head  []string            `json:"columns"`
	Rows  [][]string          `json:"-"`
	Items []map[string]string `json:"entries"` // the rows by column
	Notes []string            `json:"notes"`   // sources, and what they disagree on
}

// catalogueList is a list of the catalogue.
type catalogueList struct {
	name, about string
	head        []string
	rows        func() [][]string
	notes       func(rows [][]string) []string // those that concern the rows
}

// catalogueLists are the lists in the order they are offered.
var catalogueLists = []catalogueList{
	{"sizes", "pipe sizes by standard: bore is outside less two walls",
		[]string{"standard", "size", "outside [mm]", "wall [mm]", "bore [mm]", "mark"}, sizeRows, sizeNotes},
	{"materials", "roughness by state, and velocities in sea water",
		[]string{"material", "state or service", "bore [mm]", "roughness [mm]", "least velocity [m/s]", "greatest velocity [m/s]", "source", "mark"}, materialRows, materialNotes},
	{"fittings", "fittings with their loss, its method and its scatter",
		[]string{"fitting", "other names", "needs", "may have", "method", "valid", "scatter", "source", "mark"}, fittingRows, markNotes},
	{"limits", "limits that can be judged with their defaults, rules of practice, acceptance grades",
		[]string{"limit", "on", "unit", "figure", "source", "mark"}, limitRows, limitNotes},
}

// CatalogueLists names the lists.
func CatalogueLists() []string {
	var names []string
	for _, l := range catalogueLists {
		names = append(names, l.name)
	}
	return names
}

// CatalogueOf returns a list with the entries that hold every word of find, whatever the case; with no name the lists
// themselves. The error says which lists there are, or that nothing was found.
func CatalogueOf(name, find string) (*Catalogue, error) {
	c := &Catalogue{List: name, Head: []string{"list", "what it holds", "entries"}}
	var all [][]string
	var notes func([][]string) []string
	if name == "" {
		c.List = "lists"
		for _, l := range catalogueLists {
			all = append(all, []string{l.name, l.about, fmt.Sprint(len(l.rows()))})
		}
	}
	for _, l := range catalogueLists {
		if l.name == name {
			c.Head, all, notes = l.head, l.rows(), l.notes
		}
	}
	if all == nil {
		return nil, fmt.Errorf("catalogue: found %q, want one of %s", name, strings.Join(CatalogueLists(), ", "))
	}
	words := strings.Fields(strings.ToLower(find))
	for _, row := range all {
		text, holds := strings.ToLower(strings.Join(row, " ")), true
		for _, w := range words {
			holds = holds && strings.Contains(text, w)
		}
		if !holds {
			continue
		}
		c.Rows = append(c.Rows, row)
		item := map[string]string{}
		for i, h := range c.Head {
			item[h] = row[i]
		}
		c.Items = append(c.Items, item)
	}
	if c.Rows == nil {
		return nil, fmt.Errorf("catalogue %s: nothing holds %q", c.List, find)
	}
	if notes != nil {
		c.Notes = notes(c.Rows)
	}
	return c, nil
}

// millimetres writes a length without the dust of its conversion.
func millimetres(m float64) string { return fmt.Sprintf("%.6g", m*1e3) }

// orBlank writes a number, or nothing where it is not known.
func orBlank(x float64) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return ""
	}
	return fmt.Sprintf("%g", x)
}

func sizeRows() (rows [][]string) {
	for _, s := range hydraulics.Sizes() {
		rows = append(rows, []string{s.Standard, s.Name(), millimetres(s.OutsideDiameter), millimetres(s.Wall), millimetres(s.Bore()), string(s.Mark)})
	}
	return rows
}

func sizeNotes(rows [][]string) (notes []string) {
	for _, s := range hydraulics.SizeStandards() {
		if !slices.ContainsFunc(rows, func(row []string) bool { return row[0] == s.Name }) {
			continue
		}
		for _, n := range s.Notes {
			notes = append(notes, s.Name+": "+n)
		}
	}
	return append(notes, markNotes(rows)...)
}

func materialRows() (rows [][]string) {
	for _, m := range hydraulics.Materials() {
		for _, r := range m.Roughness {
			rows = append(rows, []string{m.Name, string(r.State), "", millimetres(r.Height), "", "", r.Source, string(r.Mark)})
		}
		if len(m.Roughness) == 0 {
			rows = append(rows, []string{m.Name, "", "", "", "", "", "no roughness in any source", ""})
		}
	}
	for _, l := range hydraulics.VelocityLimits() {
		bores := "from " + millimetres(l.BoreFrom)
		if !math.IsInf(l.BoreTo, 1) {
			bores += " to " + millimetres(l.BoreTo)
		} else if l.BoreFrom == 0 {
			bores = ""
		}
		rows = append(rows, []string{strings.Join(l.Materials, ", "), l.Service, bores, "", orBlank(l.Least), orBlank(l.Greatest), l.Source, string(l.Mark)})
	}
	return rows
}

func materialNotes(rows [][]string) []string {
	return append(append(hydraulics.RoughnessNotes(), hydraulics.VelocityNotes()...), markNotes(rows)...)
}

func fittingRows() (rows [][]string) {
	for _, e := range hydraulics.CatalogueFittings() {
		scatter := fmt.Sprintf("%.0f %%", e.Scatter*100)
		if e.ScatterBelow != 0 {
			scatter = fmt.Sprintf("+%.0f, -%.0f %%", e.Scatter*100, e.ScatterBelow*100)
		}
		valid := e.Valid
		if e.NonReturn {
			valid += "; passes water from the start to the end of its run only"
		}
		rows = append(rows, []string{e.Name, strings.Join(e.Aliases, ", "), strings.Join(e.Needs, ", "), strings.Join(e.Uses, ", "),
			e.Method, valid, scatter + " (" + e.ScatterSource + ")", e.Source, string(e.Mark)})
	}
	return rows
}

func markNotes([][]string) (notes []string) {
	for _, m := range []hydraulics.Mark{hydraulics.MarkRead, hydraulics.MarkReadTwice, hydraulics.MarkFromMemory, hydraulics.MarkComputed} {
		notes = append(notes, "mark "+string(m)+": "+m.Meaning())
	}
	return notes
}

func limitRows() (rows [][]string) {
	defaults := map[string]string{"NPSH margin": "0.6 or 1.0", "NPSH ratio": "1.1 or 1.2", "maximum velocity": "by material, or 3.0", "minimum velocity": "by material", "minimum absolute pressure": "0.3",
		"least share of best-efficiency flow": "70", "greatest share of best-efficiency flow": "120", "maximum shaft power": "the motor's rating",
		"least allowable share of best-efficiency flow": "50", "greatest allowable share of best-efficiency flow": "125", "maximum shaft power along the curve": "the motor's rating",
		"least motor reserve": "110 to 135", "maximum shut-off pressure": "the design pressures"}
	for _, k := range limitKinds {
		rows = append(rows, []string{k.name, strings.Join(k.on, ", "), k.unit, defaults[k.name], defaultSources[k.name], ""})
	}
	for _, p := range pumps.Practices() {
		rows = append(rows, []string{p.Rule, p.AppliesTo, p.Unit, fmt.Sprintf("%g", p.Value), p.Source, string(p.Mark)})
	}
	for _, g := range pumps.Grades() {
		for _, t := range []struct {
			quantity string
			pumps.Tolerance
		}{{"flow", g.Flow}, {"head", g.Head}, {"power", g.Power}, {"efficiency", g.Efficiency}} {
			if t.Source != "" {
				rows = append(rows, []string{"acceptance grade " + g.Name + ", " + t.quantity, "test against the guaranteed figure", "%", tolerance(t.Tolerance), t.Source, string(t.Mark)})
			}
		}
	}
	return rows
}

// tolerance writes how far a figure may lie below and above, in per cent.
func tolerance(t pumps.Tolerance) string {
	side := func(sign string, x float64) string {
		if math.IsInf(x, 1) {
			return "no limit " + map[string]string{"-": "below", "+": "above"}[sign]
		}
		return fmt.Sprintf("%s%.3g", sign, 100*x)
	}
	return side("-", t.Below) + ", " + side("+", t.Above)
}

func limitNotes(rows [][]string) []string {
	return append(pumps.PracticeNotes(), markNotes(rows)...)
}
