package hydraulics

import (
	"brinehead/sources"
	"cmp"
	"embed"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"sync"
)

// Size is one pipe of a dimension standard.
type Size struct {
	Standard        string  // "EN 10220"
	Nominal         string  // "DN200", "200A": a name, never a bore
	Series          string  // "Sch 40", "heavy wall"
	OutsideDiameter float64 // m
	Wall            float64 // m, nominal
	Source          string  // where wall and diameter were read; letters stand for the notes of the [SizeStandard]
	Mark            Mark
}

// Bore returns the clear diameter of the new pipe, m: the outside diameter less two walls.
func (s Size) Bore() float64 { return s.OutsideDiameter - 2*s.Wall }

// Name returns what a table writes to mean this size of its standard: "DN200 Sch 40".
func (s Size) Name() string { return s.Nominal + " " + s.Series }

// SizeStandard describes one catalogue of pipe sizes.
type SizeStandard struct {
	Name    string
	Aliases []string // other names a table may write
	Series  []string // series or schedules, in the order of the catalogue
	Notes   []string // sources, what they disagree on, and the meaning of series and marks
}

// Sizes returns the pipe sizes of every standard, standard by standard and series by series.
func Sizes() []Size {
	var all []Size
	for _, c := range sizeCatalogues() {
		all = append(all, c.sizes...)
	}
	return all
}

// SizeStandards returns the standards whose sizes are known, in the order of [Sizes].
func SizeStandards() []SizeStandard {
	var all []SizeStandard
	for _, c := range sizeCatalogues() {
		c.Aliases, c.Series, c.Notes = slices.Clone(c.Aliases), slices.Clone(c.Series), slices.Clone(c.Notes)
		all = append(all, c.SizeStandard)
	}
	return all
}

// FindSize returns the pipe that a table names by standard and size, without regard to case, spaces and
// punctuation.
//
// The size is a nominal size ("DN 200", "200A") or an outside diameter and a wall in millimetres that the standard
// has ("219.1x8"). The series or schedule may stand behind either text: "DN 200 Sch 40", or "JIS G3454 Sch 40" with
// "200A". It may be left out where the standard has just one pipe of the nominal size.
//
// The error is an [*UnknownNameError]. For a size that does not exist it names the nearest that do, by diameter; for
// a series that is wanting or unknown, those to choose from; for a standard, the nearest by spelling.
func FindSize(standard, size string) (Size, error) {
	catalogue, inStandard, err := findSizeCatalogue(standard)
	if err != nil {
		return Size{}, err
	}
	wanted, err := catalogue.readSize(size)
	if err != nil {
		return Size{}, err
	}
	if wanted.series, err = catalogue.findSeries(inStandard, wanted.rest); err != nil {
		return Size{}, err
	}
	found := slices.DeleteFunc(slices.Clone(catalogue.sizes), func(s Size) bool { return !wanted.is(s) })
	switch {
	case len(found) == 0:
		return Size{}, catalogue.noSize(size, wanted)
	case wanted.byName() && len(found) > 1:
		return Size{}, &UnknownNameError{Kind: "series of " + catalogue.Name, Name: size, Nearest: sizeNames(found),
			Hint: "name one of the series"}
	}
	return found[0], nil // by outside diameter and wall several series may hold the same pipe
}

// sizeCatalogue is one standard with its sizes in the order of its file.
type sizeCatalogue struct {
	SizeStandard
	sizes []Size
}

//go:embed sizes/*.csv
var sizeFiles embed.FS

// sizeCatalogues reads the embedded files once; what it returns is never written to.
var sizeCatalogues = sync.OnceValue(func() []sizeCatalogue {
	catalogues := []sizeCatalogue{
		{SizeStandard: SizeStandard{Name: "EN 10220", Aliases: []string{"ISO 4200", "EN 10220 / ISO 4200",
			"EN 10220 series 1", "ISO 4200 series 1", "DIN EN 10220", "BS EN 10220"}}},
		{SizeStandard: SizeStandard{Name: "ASME B36.10M", Aliases: []string{"ASME B36.10", "ANSI B36.10", "B36.10M",
			"B36.10"}}},
		{SizeStandard: SizeStandard{Name: "ASME B36.19M", Aliases: []string{"ASME B36.19", "ANSI B36.19", "B36.19M",
			"B36.19"}}},
		{SizeStandard: SizeStandard{Name: "JIS G3454", Aliases: []string{"JIS G3454 STPG", "JIS G3454 STPG 370",
			"JIS G3454 STPG 410", "STPG", "STPG 370", "STPG 410"}}},
		{SizeStandard: SizeStandard{Name: "JIS G3452", Aliases: []string{"JIS G3452 SGP", "SGP"}}},
		{SizeStandard: SizeStandard{Name: "DIN 86019", Aliases: []string{"DIN 86019 CuNi"}}},
		{SizeStandard: SizeStandard{Name: "EEMUA 144", Aliases: []string{"EEMUA 234", "EEMUA 144/234"}}},
		{SizeStandard: SizeStandard{Name: "GRE", Aliases: []string{"GRP", "GRE/GRP", "GRP/GRE", "FRP"}}},
	}
	for i := range catalogues {
		if err := catalogues[i].read(); err != nil {
			panic(fmt.Sprintf("embedded catalogue of %s cannot be read: %v", catalogues[i].Name, err))
		}
	}
	return catalogues
})

// read fills the catalogue from the file named after its standard.
func (c *sizeCatalogue) read() error {
	file := strings.NewReplacer(" ", "-", ".", "-").Replace(strings.ToLower(c.Name)) + ".csv"
	text, err := sizeFiles.ReadFile("sizes/" + file)
	if err != nil {
		return err
	}
	return c.parse(string(text))
}

func (c *sizeCatalogue) parse(text string) error {
	table, err := sources.ParseMarked(text, "nominal", "outside_diameter_mm", "wall_mm", "series")
	if err != nil {
		return err
	}
	c.Notes = table.Notes
	for _, row := range table.Rows {
		s := Size{Standard: c.Name, Nominal: row["nominal"], Series: row["series"], Source: row["source"],
			Mark: row.Mark()}
		if s.OutsideDiameter, err = row.Number("outside_diameter_mm", millimetre); err != nil {
			return err
		}
		if s.Wall, err = row.Number("wall_mm", millimetre); err != nil {
			return err
		}
		if !(s.Wall > 0 && s.Bore() > 0) {
			return fmt.Errorf("%s: want a wall and a bore of more than 0", s.Name())
		}
		if !(nominalNumber(s.Nominal) > 0) {
			return fmt.Errorf("nominal: found %q, want one such as DN200 or 200A", s.Nominal)
		}
		if !slices.Contains(c.Series, s.Series) {
			c.Series = append(c.Series, s.Series)
		}
		c.sizes = append(c.sizes, s)
	}
	return nil
}

// findSizeCatalogue returns the catalogue whose name begins the text, and the words behind the name.
func findSizeCatalogue(text string) (found sizeCatalogue, rest []string, err error) {
	given := nameWords(text)
	longest := 0
	var names []string
	var known []wayToWrite
	for _, c := range sizeCatalogues() {
		names = append(names, c.Name)
		for _, name := range append([]string{c.Name}, c.Aliases...) {
			known = append(known, wayToWrite{name, name})
			words := nameWords(name)
			if len(words) > longest && len(words) <= len(given) && slices.Equal(words, given[:len(words)]) {
				found, rest, longest = c, given[len(words):], len(words)
			}
		}
	}
	if longest == 0 {
		return found, nil, &UnknownNameError{Kind: "pipe standard", Name: text, Nearest: nearestNames(text, known),
			Hint: "known are " + strings.Join(names, ", ")}
	}
	return found, rest, nil
}

// wantedSize is a size as a user wrote it. NaN stands for what was not given.
type wantedSize struct {
	nominal, outsideDiameter, wall float64  // the number of the nominal size; m; m
	rest                           []string // words not yet understood
	series                         string   // of the catalogue; empty for any
}

func (w wantedSize) byName() bool { return !math.IsNaN(w.nominal) }

// is reports whether a size is the one wanted. Lengths on both sides are decimals of a millimetre, read and turned into
// metres alike, and therefore equal to the bit where they are the same.
func (w wantedSize) is(s Size) bool {
	if w.series != "" && w.series != s.Series {
		return false
	}
	if w.byName() {
		return nominalNumber(s.Nominal) == w.nominal
	}
	return s.OutsideDiameter == w.outsideDiameter && s.Wall == w.wall
}

// distance returns how far a size lies from the one wanted: in diameter, nominal or outside, and in wall.
func (w wantedSize) distance(s Size) (diameter, wall float64) {
	if w.byName() {
		return math.Abs(nominalNumber(s.Nominal) - w.nominal), 0
	}
	return math.Abs(s.OutsideDiameter - w.outsideDiameter), math.Abs(s.Wall - w.wall)
}

// readSize takes the nominal size, or outside diameter and wall, from the text; the words before and behind remain.
func (c sizeCatalogue) readSize(text string) (wantedSize, error) {
	given := slices.DeleteFunc(nameWords(text), func(word string) bool { return word == "mm" || word == "ø" })
	none := math.NaN()
	at := func(i int) string {
		if i < len(given) {
			return given[i]
		}
		return ""
	}
	for i, word := range given {
		wanted := wantedSize{nominal: none, outsideDiameter: none, wall: none}
		var taken int
		switch number := sizeNumber(word); {
		case word == "dn":
			wanted.nominal, taken = sizeNumber(at(i+1)), 2
		case at(i+1) == "a":
			wanted.nominal, taken = number, 2
		case at(i+1) == "x":
			wanted.outsideDiameter, wanted.wall, taken = number*millimetre, sizeNumber(at(i+2))*millimetre, 3
		}
		if wanted.nominal > 0 || wanted.outsideDiameter > 0 && wanted.wall > 0 {
			wanted.rest = slices.Concat(given[:i], given[i+taken:])
			return wanted, nil
		}
	}
	e := &UnknownNameError{Kind: "size of " + c.Name, Name: text,
		Hint: `write a nominal size such as "DN 200", or outside diameter and wall in mm such as "219.1x8"`}
	for _, word := range given { // a bare number may be nominal or outside diameter: offered, never taken
		if number := sizeNumber(word); number > 0 {
			e.Nearest = c.nearest(wantedSize{nominal: number, outsideDiameter: none, wall: none})
			break
		}
	}
	return wantedSize{}, e
}

// sizeNumber returns the number that one of [nameWords] is, 0 or more; NaN where it is none, or the word for infinity.
func sizeNumber(word string) float64 {
	number, err := strconv.ParseFloat(word, 64)
	if err != nil || !(number < math.Inf(1)) {
		return math.NaN()
	}
	return number
}

// nominalNumber returns the number in a nominal size of a catalogue, such as 200 of DN200 and of 200A, or NaN.
func nominalNumber(nominal string) float64 { return sizeNumber(strings.Trim(nominal, "DNA")) }

// findSeries returns the series that the words behind standard and size name, or none where there are no words.
func (c sizeCatalogue) findSeries(inStandard, inSize []string) (string, error) {
	words := inSize
	if !slices.Equal(seriesWords(inStandard), seriesWords(inSize)) { // the same series may be named in both
		words = slices.Concat(inStandard, inSize)
	}
	if len(words) == 0 {
		return "", nil
	}
	for _, series := range c.Series {
		if slices.Equal(seriesWords(nameWords(series)), seriesWords(words)) {
			return series, nil
		}
	}
	return "", &UnknownNameError{Kind: "series of " + c.Name, Name: strings.Join(words, " "),
		Nearest: slices.Clone(c.Series)}
}

// seriesWords drops the words that tell no series from another.
func seriesWords(given []string) []string {
	return slices.DeleteFunc(slices.Clone(given), func(word string) bool {
		return word == "sch" || word == "schedule" || word == "wall"
	})
}

// noSize says that the standard lacks the size, and what it has nearest to it.
func (c sizeCatalogue) noSize(text string, wanted wantedSize) error {
	e := &UnknownNameError{Kind: "size of " + c.Name, Name: text, Nearest: c.nearest(wanted)}
	if wanted.series != "" {
		e.Kind = wanted.series + " " + e.Kind
	}
	anySeries := wanted
	anySeries.series = ""
	others := slices.DeleteFunc(slices.Clone(c.sizes), func(s Size) bool { return !anySeries.is(s) })
	switch {
	case len(others) > 0:
		e.Hint = "the size exists as " + strings.Join(sizeNames(others), ", ")
	case !wanted.byName():
		e.Hint = "where pipe with another wall is fitted, give its bore itself"
	}
	return e
}

// nearest returns up to three names of sizes that exist, written as the wanted one was, the nearest first.
func (c sizeCatalogue) nearest(wanted wantedSize) []string {
	sizes := slices.DeleteFunc(slices.Clone(c.sizes), func(s Size) bool {
		return wanted.series != "" && wanted.series != s.Series
	})
	slices.SortStableFunc(sizes, func(a, b Size) int {
		diameterA, wallA := wanted.distance(a)
		diameterB, wallB := wanted.distance(b)
		return cmp.Or(cmp.Compare(diameterA, diameterB), cmp.Compare(wallA, wallB))
	})
	const most = 3
	var names []string
	for _, s := range sizes {
		name := s.Nominal
		switch {
		case !wanted.byName():
			name = fmt.Sprintf("%gx%g", inMillimetres(s.OutsideDiameter), inMillimetres(s.Wall))
		case wanted.series != "":
			name = s.Name()
		}
		if len(names) < most && !slices.Contains(names, name) {
			names = append(names, name)
		}
	}
	return names
}

// inMillimetres undoes the turning of a catalogue's figure into metres, to its last digit of a hundredth.
func inMillimetres(metres float64) float64 { return math.Round(metres*1e5) / 100 }

func sizeNames(sizes []Size) []string {
	var names []string
	for _, s := range sizes {
		names = append(names, s.Name())
	}
	return names
}
