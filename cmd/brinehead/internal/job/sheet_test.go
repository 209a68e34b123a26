package job

import (
	"math"
	"strconv"
	"strings"
	"testing"
	"testing/fstest"
)

// One number among others of its file: what it is read as, or that it is refused. A number is refused rather than guessed
// where the file does not show which of its signs is which.
func TestDecimalSign(t *testing.T) {
	refused := math.NaN()
	for _, c := range []struct {
		separator, text, others string
		want                    float64
	}{
		{",", "1.234", "", 1.234}, // a comma between the fields leaves the point as the decimal sign
		{",", "1,234", "", refused},
		{",", "1,5", "", refused},
		{",", "1.234", "1.234.567", refused},
		{";", "1.234", "", refused},
		{";", "1,234", "", refused},
		{"\t", "1,234", "", refused},
		{";", "-1,234", "", refused},
		{";", "1.234", "6.5", 1.234},
		{";", "1,234", "6,5", 1.234},
		{";", "1,234", "6.5", refused},
		{";", "1.234", "6,5", refused},
		{";", "1,234", "0,5 1,234,567", refused},
		{";", "1.234", "0.5 1.234.567", refused},
		{";", "1,234,567", "", refused},
		{";", "1.234,5", "", refused},
		{";", "1.234,5", "6,5", refused},
		{";", "1,234.5", "6.5", refused},
		{";", "0,123", "", 0.123}, // no thousand begins with a nought
		{";", "0.123", "", 0.123},
		{";", "1,2340", "", 1.234},
		{";", "1234,567", "", 1234.567}, // nor has four digits before its sign
		{";", "1,5", "", 1.5},
		{";", ",5", "", 0.5},
		{";", "5,", "6,5", 5},
		{";", "1,5", "2.5", 1.5}, // and 2.5 is refused: see testdata/bad/mixed-decimals
		{";", "1,5e3", "", 1500},
		{",", "1e3", "", 1000},
		{",", "+1.5E-3", "", 1.5e-3},
		{",", "1 234", "", refused},
		{",", "1_000", "", refused},
		{",", "0x1F", "", refused},
		{",", "1e400", "", refused},
		{",", "1/2", "", refused},
		{",", "#REF!", "", refused},
		{",", "Infinity", "", refused},
		{",", ".", "", refused},
		{",", "e3", "", refused},
	} {
		s := &sheet{note: FileNote{Separator: c.separator}, decimal: '.'}
		s.findDecimal(append(strings.Fields(c.others), c.text))
		got, want, _ := s.parse(c.text)
		switch {
		case math.IsNaN(c.want) && want == "":
			t.Errorf("%q beside %q, separator %q: read as %g, want a refusal", c.text, c.others, c.separator, got)
		case !math.IsNaN(c.want) && (want != "" || got != c.want):
			t.Errorf("%q beside %q, separator %q: read as %g (%s), want %g", c.text, c.others, c.separator, got, want, c.want)
		}
	}
}

// What a spreadsheet makes of a note when it saves the table is still a note, and what it writes for a failed formula is
// none, though it begins with the same sign.
func TestNotesOfSpreadsheets(t *testing.T) {
	spec, _ := tableNamed(runsTable)
	s, faults := readSheet(spec, "runs.csv", []byte("\"# lengths, as drawn\",,\nrun,from,to\n\"# first, of two\",,\nR1,A,B\n#R2,A,B\n#N/A,A,B\n#N/A: not available\n"), most)
	if len(s.rows) != 1 || s.rows[0][0].text != "R1" || s.rows[0][0].Line != 4 {
		t.Errorf("rows %+v", s.rows)
	}
	if len(faults) != 1 || faults[0].Line != 6 {
		t.Errorf("faults %v, want one in line 6", faults)
	}
}

// A file within every bound is read, one beyond any of them refused as a whole. A long row finds the places of its cells
// in one pass.
func TestBounds(t *testing.T) {
	spec, _ := tableNamed(runsTable)
	text := "run,from\nR1,A\nR2,B\n"
	if s, faults := readSheet(spec, "runs.csv", []byte(text), bounds{bytes: len(text), line: len("run,from\n"), rows: 2, cells: 6}); len(faults) > 0 || len(s.rows) != 2 || s.lost {
		t.Errorf("at the bounds: %v", faults)
	}
	for want, b := range map[string]bounds{
		"runs.csv: found more than 18 bytes, want a table of at most that":            {len(text) - 1, 9, 2, 6},
		"runs.csv:1: found a line of more than 8 bytes, want a table of at most that": {len(text), 8, 2, 6},
		"runs.csv: found more than 1 rows or 6 cells, want a table of at most that":   {len(text), 9, 1, 6},
		"runs.csv: found more than 2 rows or 5 cells, want a table of at most that":   {len(text), 9, 2, 5},
	} {
		if s, faults := readSheet(spec, "runs.csv", []byte(text), b); faults.Error() != want || !s.lost || len(s.rows) > 0 {
			t.Errorf("%+v: %v and %d rows, want %s", b, faults, len(s.rows), want)
		}
	}
	s, faults := readSheet(spec, "runs.csv", []byte("\"run\"\n\"ö\nä\""+strings.Repeat(",", 400_000)+"é,y\n"), most)
	if len(s.rows) != 0 || len(faults) != 1 || faults[0].Found != "400002 cells" {
		t.Errorf("a long row: %v", faults)
	}
}

// A unit with several meanings is taken as one of them, and the file's note says as which.
func TestNotesOfUnits(t *testing.T) {
	files := good(t, "")
	files["pump_curves.csv"].Data = []byte(strings.Replace(string(files["pump_curves.csv"].Data), "flow [m3/h]", "flow [GPM]", 1))
	tables, err := ReadTables(files, nil)
	if err != nil {
		t.Fatal(err)
	}
	for _, n := range tables.Files {
		want := ""
		if n.Name == "pump_curves.csv" {
			want = "flow [GPM]: taken as US gallons a minute (gpm (UK) are the imperial ones)"
		}
		if strings.Join(n.Notes, "; ") != want {
			t.Errorf("%s: %q, want %q", n.Name, n.Notes, want)
		}
	}
}

// The values of limits and readings are in the unit of their own row, an uncertainty without the unit's offset.
func TestUnitsOfRows(t *testing.T) {
	files := good(t, "")
	files["limits.csv"] = &fstest.MapFile{Data: []byte("limit,on,value,unit\nMinimum  Flow,P1,90,l/s\nmaximum outlet temperature,CLR,104,degF\nNPSH ratio,*,1.1,-\nleast share of best-efficiency flow,P1,70,%\n")}
	files["readings.csv"] = &fstest.MapFile{Data: []byte("condition,quantity,on,value,unit,uncertainty\nclean,temperature,CLR,310.15,K,2\nclean,temperature,CLR,50,degF,1.8\nclean,suction gauge,P1,-150,mmHg,7.5\n")}
	tables, err := ReadTables(files, nil)
	if err != nil {
		t.Fatal(err)
	}
	near := func(got, want float64) bool { return math.Abs(got-want) <= 1e-12*math.Max(1, math.Abs(want)) } // of values of 0.09 and more: nine digits at least
	for i, want := range []float64{0.09, 40, 1.1, 0.7} {
		if got := tables.Limits[i].Value; !got.Given || !near(got.Value, want) {
			t.Errorf("limit %d: %+v, want %g", i, got, want)
		}
	}
	for i, want := range [][2]float64{{37, 2}, {10, 1}, {-150 * 133.322387415, 7.5 * 133.322387415}} {
		if r := tables.Readings[i]; !near(r.Value.Value, want[0]) || !near(r.Uncertainty.Value, want[1]) {
			t.Errorf("reading %d: %g +- %g, want %g +- %g", i, r.Value.Value, r.Uncertainty.Value, want[0], want[1])
		}
	}
}

// readsTwoWays is the rule of twoWaysForm in other words: at most three digits that do not begin with a nought, one sign,
// three digits.
func readsTwoWays(text string) bool {
	text = strings.TrimLeft(text, "+-")
	at := strings.IndexAny(text, ".,")
	if at < 1 || at > 3 || len(text) != at+4 || text[0] == '0' {
		return false
	}
	_, err := strconv.ParseUint(text[:at]+text[at+1:], 10, 64)
	return err == nil
}

// Whatever a cell holds, it is a finite number or refused; a number written anew in the file's own sign is read as the
// same; and one that stands alone in a file without commas between fields and reads two ways is never taken.
func FuzzNumber(f *testing.F) {
	for _, text := range []string{"1", "1.5", "1,5", "1,234", "1.234", "1.234,5", "1,234,567", "1e3", "-0", "NaN", "Inf", "0x1p-2", "1_0", "#N/A", "٣", "1e999", "", "+.5e-3", "9007199254740993"} {
		f.Add(text, byte(';'))
		f.Add(text, byte(','))
	}
	f.Fuzz(func(t *testing.T, text string, separator byte) {
		text = tidy(text)
		s := &sheet{note: FileNote{Separator: string(rune(separator))}, decimal: '.'}
		s.findDecimal([]string{text})
		value, want, _ := s.parse(text)
		if want != "" {
			return
		}
		if math.IsNaN(value) || math.IsInf(value, 0) {
			t.Errorf("%q is read as %g", text, value)
		}
		if separator != ',' && len(text) < 9 && readsTwoWays(text) {
			t.Errorf("%q is taken for %g, though it reads two ways", text, value)
		}
		anew := strings.Replace(strconv.FormatFloat(value, 'e', -1, 64), ".", string(s.decimal), 1)
		if again, want, _ := s.parse(anew); want != "" || again != value {
			t.Errorf("%q is read as %g, and written anew as %q: %g (%s)", text, value, anew, again, want)
		}
	})
}

// Whatever a header says, taking it apart and writing it anew gives the same parts; a unit found is found again by its
// own name, and turns a value there and back.
func FuzzUnitHeader(f *testing.F) {
	for _, q := range quantities {
		for _, u := range q.Units {
			f.Add("rated flow [" + u.Name + "]")
			for _, a := range u.Aliases {
				f.Add("Flow[" + a + "]")
			}
		}
	}
	for _, text := range []string{"", "[]", "bore", "bore [mm", "bore mm]", "bore [[mm]]", "a [b] [c]", "STR1 blockage [%]", "\ufeffrun", "T\u00a0level [ m ]", "bore (mm)"} {
		f.Add(text)
	}
	f.Fuzz(func(t *testing.T, text string) {
		for _, h := range headings([]cell{{text: tidy(text)}}) {
			if h.unit == "" {
				continue
			}
			anew := headings([]cell{{text: h.name + " [" + h.unit + "]"}})
			if len(anew) != 1 || anew[0].name != h.name || anew[0].unit != h.unit {
				t.Errorf("%q: %q and %q, written anew: %+v", text, h.name, h.unit, anew)
			}
			for _, q := range quantities {
				u, known := q.unit(h.unit)
				if !known {
					continue
				}
				if same, known := q.unit(u.Name); !known || same.Name != u.Name {
					t.Errorf("%s: %q is %q, which is %q", q.Name, h.unit, u.Name, same.Name)
				}
				if back := u.FromSI(u.ToSI(12.5)); !(math.Abs(back-12.5) <= 1e-10) { // an offset of 459.67 leaves twelve digits
					t.Errorf("%s: 12.5 %s there and back is %.17g", q.Name, u.Name, back)
				}
			}
		}
	})
}
