package job

import (
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"golang.org/x/text/encoding/charmap"
)

// good returns the tables of testdata/good, those of another folder in place of them; a file named -NAME takes NAME out.
func good(t testing.TB, folder string) fstest.MapFS {
	t.Helper()
	files := fstest.MapFS{}
	for _, dir := range []string{"testdata/good", folder} {
		if dir == "" {
			continue
		}
		entries, err := os.ReadDir(dir)
		if err != nil {
			t.Fatal(err)
		}
		for _, e := range entries {
			content, err := os.ReadFile(filepath.Join(dir, e.Name()))
			if err != nil {
				t.Fatal(err)
			}
			files[e.Name()] = &fstest.MapFile{Data: content}
			if gone, is := strings.CutPrefix(e.Name(), "-"); is {
				delete(files, gone)
				delete(files, e.Name())
			}
		}
	}
	return files
}

// Every bad job of testdata/bad carries the messages it must bring, all of them and no other, in lines that begin with
// #! below the bad line (or in expect.txt where no line is bad).
func TestBadJobs(t *testing.T) {
	cases, err := os.ReadDir("testdata/bad")
	if err != nil {
		t.Fatal(err)
	}
	if len(cases) < 90 {
		t.Fatalf("%d bad jobs, want at least 90", len(cases))
	}
	for _, c := range cases {
		files := good(t, filepath.Join("testdata/bad", c.Name()))
		var want []string
		names := slices.Sorted(mapKeys(files))
		for _, name := range names {
			for line := range strings.Lines(string(files[name].Data)) {
				if text, is := strings.CutPrefix(line, "#! "); is {
					want = append(want, strings.TrimSuffix(text, "\n"))
				}
			}
		}
		delete(files, "expect.txt")
		_, err := Read(c.Name(), files, nil)
		got := ""
		if err != nil {
			got = err.Error()
		}
		if got != strings.Join(want, "\n") {
			t.Errorf("%s:\n%s\nwant:\n%s", c.Name(), got, strings.Join(want, "\n"))
		}
	}
}

func mapKeys(files fstest.MapFS) func(yield func(string) bool) {
	return func(yield func(string) bool) {
		for name := range files {
			if !yield(name) {
				return
			}
		}
	}
}

func TestGoodJob(t *testing.T) {
	tables, err := ReadTables(good(t, ""), nil)
	if err != nil {
		t.Fatal(err)
	}
	r := tables.Runs[0]
	if r.Run.Value != "SUCTION" || r.Length.Value != 6.5 || r.Bore.Value != 0.2 || !(math.Abs(r.Roughness.Value-1e-4) < 1e-18) ||
		r.Bore.Place != (Place{"runs.csv", 2, 19, "bore [mm]"}) || r.Fouling.Given || !math.IsNaN(r.Fouling.Value) {
		t.Errorf("%+v", r)
	}
	if o := tables.Conditions[1].Overrides; len(o) != 1 || o[0].Tag.Value != "STR1" || o[0].Quantity != "blockage" || o[0].Table != "fittings" || o[0].Number.Value != 0.5 {
		t.Errorf("%+v", o)
	}
	if o := tables.Conditions[0].Overrides; len(o) != 0 {
		t.Errorf("a blank override: %+v", o)
	}
	if n := tables.Files[1]; n.Name != "runs.csv" || n.Separator != "," || n.Decimal != "." || n.Encoding != "UTF-8" || n.Rows != 2 || len(n.SHA256) != 64 {
		t.Errorf("%+v", n)
	}
}

// One table in every dialect gives the same rows, whatever the order of its columns and rows.
func TestDialects(t *testing.T) {
	want, err := ReadTables(good(t, ""), nil)
	if err != nil {
		t.Fatal(err)
	}
	base := string(good(t, "")["runs.csv"].Data)
	comma := strings.NewReplacer(",", ";", ".", ",").Replace(base)
	latin, err := charmap.Windows1252.NewEncoder().String("# Länge über alles\n" + base)
	if err != nil {
		t.Fatal(err)
	}
	for name, c := range map[string]struct{ text, separator, decimal, encoding string }{
		"semicolon and decimal comma": {comma, ";", ",", "UTF-8"},
		"semicolon and decimal point": {strings.ReplaceAll(base, ",", ";"), ";", ".", "UTF-8"},
		"tab":                         {strings.ReplaceAll(base, ",", "\t"), "\t", ".", "UTF-8"},
		"byte order mark":             {"\ufeff" + base, ",", ".", "UTF-8 with byte order mark"},
		"Windows-1252":                {latin, ",", ".", "Windows-1252"},
		"Windows line ends":           {strings.ReplaceAll(base, "\n", "\r\n"), ",", ".", "UTF-8"},
		"old Mac line ends":           {strings.ReplaceAll(base, "\n", "\r"), ",", ".", "UTF-8"},
		"notes and blank lines":       {"# note\n\n" + strings.ReplaceAll(base, "\n", "\n\n# note, with a comma\n"), ",", ".", "UTF-8"},
		"no last line end":            {strings.TrimSuffix(base, "\n"), ",", ".", "UTF-8"},
		"spaces and case":             {strings.NewReplacer("run,", " RUN ,", "SUCTION,", "  SUCTION , ").Replace(base), ",", ".", "UTF-8"},
		"other unit":                  {strings.NewReplacer("bore [mm]", "bore [cm]", ",200,", ",20,").Replace(base), ",", ".", "UTF-8"},
		"columns shuffled":            {"bore [mm],to,roughness [mm],run,length [m],from\n200,S,0.1,SUCTION,6.5,SEA\n200,OUT,0.1,DISCHARGE,40,D\n", ",", ".", "UTF-8"},
		"rows shuffled":               {"run,from,to,length [m],bore [mm],roughness [mm]\nDISCHARGE,D,OUT,40,200,0.1\nSUCTION,SEA,S,6.5,200,0.1\n", ",", ".", "UTF-8"},
		"spare columns and rows":      {strings.ReplaceAll(base, "\n", ",,\n") + ",,,,,,,\n", ",", ".", "UTF-8"},
	} {
		files := good(t, "")
		files["runs.csv"] = &fstest.MapFile{Data: []byte(c.text)}
		got, err := ReadTables(files, nil)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		for _, w := range want.Runs {
			k := slices.IndexFunc(got.Runs, func(r RunRow) bool { return r.Run.Value == w.Run.Value })
			if len(got.Runs) != len(want.Runs) || k < 0 || got.Runs[k].From.Value != w.From.Value || got.Runs[k].To.Value != w.To.Value ||
				got.Runs[k].Length.Value != w.Length.Value || !(math.Abs(got.Runs[k].Bore.Value-w.Bore.Value) < 1e-15) || got.Runs[k].Roughness.Value != w.Roughness.Value {
				t.Errorf("%s: %+v, want %+v", name, got.Runs, w)
			}
		}
		if n := got.Files[1]; n.Separator != c.separator || n.Decimal != c.decimal || n.Encoding != c.encoding || n.Rows != 2 {
			t.Errorf("%s: %+v", name, n)
		}
	}
}

// A change folder replaces whole tables; references are checked on the whole.
func TestChangeFolder(t *testing.T) {
	finer := fstest.MapFS{"Fittings.CSV": {Data: []byte("run,fitting,tag,k\nSUCTION,finer strainer,STR1,9\n")}}
	tables, err := ReadTables(good(t, ""), finer)
	if err != nil {
		t.Fatal(err)
	}
	if len(tables.Fittings) != 1 || tables.Fittings[0].K.Value != 9 || len(tables.Runs) != 2 {
		t.Errorf("%+v", tables.Fittings)
	}
	for _, n := range tables.Files {
		if n.FromChange != (n.Name == "Fittings.CSV") {
			t.Errorf("%+v", n)
		}
	}
	for want, change := range map[string]fstest.MapFS{
		"change folder: found no table":        {"notes.txt": {Data: []byte("nothing")}},
		`found "GONE", want a run of runs.csv`: {"fittings.csv": {Data: []byte("run,fitting,tag,k\nGONE,strainer,STR1,9\n")}},
	} {
		if _, err := ReadTables(good(t, ""), change); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%v, want %q", err, want)
		}
	}
}

func TestOddFolders(t *testing.T) {
	if _, err := ReadTables(fstest.MapFS{}, nil); err == nil || !strings.Contains(err.Error(), "job folder: found no table, want at least points.csv") {
		t.Errorf("an empty folder: %v", err)
	}
	files := good(t, "")
	files["runs.csv"] = &fstest.MapFile{Mode: fs.ModeDir}
	if _, err := ReadTables(files, nil); err == nil || !strings.Contains(err.Error(), "runs.csv: found a folder of that name") {
		t.Errorf("a folder for a table: %v", err)
	}
	files = good(t, "")
	files["RUNS.csv"] = files["runs.csv"]
	if _, err := ReadTables(files, nil); err == nil || !strings.Contains(err.Error(), "the table a second time") {
		t.Errorf("a table twice: %v", err)
	}
	files = good(t, "")
	files["runs.csv"] = &fstest.MapFile{Data: []byte("\xff\xfer\x00u\x00n\x00")}
	if _, err := ReadTables(files, nil); err == nil || !strings.Contains(err.Error(), "UTF-16") {
		t.Errorf("UTF-16: %v", err)
	}
	files["runs.csv"] = &fstest.MapFile{Data: make([]byte, most.bytes+1)}
	if _, err := ReadTables(files, nil); err == nil || !strings.Contains(err.Error(), "runs.csv: found more than 67108864 bytes") {
		t.Errorf("a huge file: %v", err)
	}
}

// noFile is a file system whose files, or whose folder, cannot be opened for the reason given.
type noFile struct {
	fstest.MapFS
	name   string
	reason error
}

func (n noFile) Open(name string) (fs.File, error) {
	if name == n.name {
		return nil, &fs.PathError{Op: "open", Path: name, Err: n.reason}
	}
	return n.MapFS.Open(name)
}

func (n noFile) ReadDir(name string) ([]fs.DirEntry, error) {
	if name == n.name {
		return nil, &fs.PathError{Op: "open", Path: name, Err: n.reason}
	}
	return n.MapFS.ReadDir(name)
}

// Whatever stands in the way of a folder or file is said in words, as Faults, and never waited for.
func TestUnreadable(t *testing.T) {
	odd := errors.New("EIO")
	for _, c := range []struct {
		what           string
		folder, change fs.FS
		want           string
	}{
		{"no folder", noFile{good(t, ""), ".", fs.ErrNotExist}, nil, "job folder: found no such folder, want a folder of tables"},
		{"a folder shut to us", noFile{good(t, ""), ".", fs.ErrPermission}, nil, "job folder: found a folder that may not be read, want a folder of tables"},
		{"a broken folder", noFile{good(t, ""), ".", odd}, nil, "job folder: found a folder that cannot be listed, want a folder of tables"},
		{"no change folder", good(t, ""), noFile{nil, ".", fs.ErrNotExist}, "change folder: found no such folder, want a folder of tables"},
		{"a file shut to us", noFile{good(t, ""), "runs.csv", fs.ErrPermission}, nil, "runs.csv: found a file that may not be read, want a CSV file that can be read"},
		{"a broken file", noFile{good(t, ""), "runs.csv", odd}, nil, "runs.csv: found a file that cannot be opened, want a CSV file that can be read"},
		{"a pipe", with(good(t, ""), "runs.csv", fs.ModeNamedPipe), nil, "runs.csv: found something that is no plain file, want a CSV file that can be read"},
		{"a change that is a link", good(t, ""), with(fstest.MapFS{}, "runs.csv", fs.ModeSymlink), "runs.csv: found a symbolic link, want a CSV file that can be read"},
		{"a change whose points cannot be known", good(t, ""),
			with(fstest.MapFS{"runs.csv": {Data: []byte("run,from,to,length [m],bore [mm]\nSUCTION,NEW,S,6.5,200\nDISCHARGE,D,OUT,40,200\n")}}, "points.csv", fs.ModeSymlink),
			"points.csv: found a symbolic link, want a CSV file that can be read"},
	} {
		_, err := ReadTables(c.folder, c.change)
		var faults Faults
		if !errors.As(err, &faults) || err.Error() != c.want {
			t.Errorf("%s: %v, want %s", c.what, err, c.want)
		}
	}
}

// with puts something that is no plain file among the files.
func with(files fstest.MapFS, name string, mode fs.FileMode) fstest.MapFS {
	files[name] = &fstest.MapFile{Mode: mode}
	return files
}

// On a disk a link is refused even where it leads to a table, and a pipe is not opened.
func TestLinkOnDisk(t *testing.T) {
	folder := t.TempDir()
	for name, file := range good(t, "") {
		if err := os.WriteFile(filepath.Join(folder, name), file.Data, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	if err := os.Rename(filepath.Join(folder, "runs.csv"), filepath.Join(folder, "elsewhere")); err != nil {
		t.Fatal(err)
	}
	if err := os.Symlink("elsewhere", filepath.Join(folder, "runs.csv")); err != nil {
		t.Skip("no symbolic links here: ", err)
	}
	if _, err := ReadTables(os.DirFS(folder), nil); err == nil || err.Error() != "runs.csv: found a symbolic link, want a CSV file that can be read" {
		t.Errorf("%v", err)
	}
}

// Every spelling of a unit means one unit of its quantity, and that one.
func TestUnitSpellings(t *testing.T) {
	for _, q := range append([]Quantity{drop, capacity, ratio}, quantities...) {
		for _, u := range q.Units {
			for _, spelling := range append([]string{u.Name}, u.Aliases...) {
				if got, known := q.unit(spelling); !known || got.Name != u.Name {
					t.Errorf("%s: %q is %q, want %q", q.Name, spelling, got.Name, u.Name)
				}
			}
		}
	}
	for _, c := range []struct {
		q    Quantity
		unit string
	}{{pressure, "bara"}, {pressure, "psia"}, {drop, "barg"}, {drop, "bara"}, {absolutePressure, "bar(g)"}, {power, "mW"}, {pressure, "mPa"}, {flow, "m3"}, {length, ""}} {
		if u, known := c.q.unit(c.unit); known {
			t.Errorf("%s: %q counts as %s", c.q.Name, c.unit, u.Name)
		}
	}
}

// Many faults are told up to a bound, and counted beyond it.
func TestManyFaults(t *testing.T) {
	files := good(t, "")
	b := bytes.NewBuffer(files["points.csv"].Data)
	for i := range 80 {
		fmt.Fprintf(b, "X%d,junction,high,\n", i)
	}
	files["points.csv"] = &fstest.MapFile{Data: b.Bytes()}
	_, err := ReadTables(files, nil)
	if err == nil || strings.Count(err.Error(), "\n") != mostFaults || !strings.HasSuffix(err.Error(), "and 30 more") {
		t.Errorf("%v", err)
	}
	var faults Faults
	if !errors.As(err, &faults) || len(faults) != 80 || faults[79].Line != 85 {
		t.Errorf("%d faults as data", len(faults))
	}
}

func TestNearest(t *testing.T) {
	names := []string{"minimum flow", "maximum flow", "basket strainer", "P1"}
	for found, want := range map[string]string{"minimun flow": "minimum flow", "baskt strainer": "basket strainer", "p2": "P1", "Basket": "basket strainer", "quay": ""} {
		if got := nearest(found, names); got != want {
			t.Errorf("%q: %q, want %q", found, got, want)
		}
	}
	// A short name that a long one begins with is not near it, nor is a letter near another.
	for _, c := range []struct{ found, name string }{{"s1 bypass", "S1"}, {"s1", "S1 bypass"}, {"x", "S"}} {
		if got := nearest(c.found, []string{c.name}); got != "" {
			t.Errorf("%q: %q, want none", c.found, got)
		}
	}
}

// Units against their definitions, worked out by hand: the inch is 25.4 mm, the US gallon 231 cubic inches, the imperial
// gallon 4.54609 l, the pound 0.45359237 kg, all exact.
func TestUnits(t *testing.T) {
	for _, c := range []struct {
		q        Quantity
		unit     string
		from, si float64
	}{
		{length, "m", 1, 1}, {length, "MM", 1, 1e-3}, {length, "cm", 1, 0.01}, {length, "ft", 1, 0.3048}, {length, "in", 1, 0.0254},
		{flow, "m3/h", 3600, 1}, {flow, "m³/h", 3600, 1}, {flow, "cbm/h", 3600, 1}, {flow, "m3/hr", 3600, 1}, {flow, "l/s", 1000, 1}, {flow, "l/min", 60000, 1}, {flow, "m3/s", 1, 1},
		{flow, "gpm", 1000, 3.785411784 / 60}, {flow, "gpm (US)", 1000, 3.785411784 / 60}, {flow, "gpm (UK)", 1000, 4.54609 / 60},
		{pressure, "bar", 1, 1e5}, {pressure, "mbar", 1, 100}, {pressure, "kPa", 1, 1000}, {pressure, "MPa", 1, 1e6}, {pressure, "Pa", 1, 1},
		{pressure, "psi", 1, 6894.757293168361}, {pressure, "mH2O", 1, 9806.65}, {pressure, "mmHg", 1, 133.322387415},
		{power, "kW", 1, 1000}, {power, "W", 1, 1}, {power, "hp", 1, 745.6998715822702}, {power, "PS", 1, 735.49875},
		{temperature, "degC", 20, 20}, {temperature, "°C", 20, 20}, {temperature, "K", 273.15, 0}, {temperature, "degF", 212, 100}, {temperature, "degF", 32, 0},
		{speed, "rpm", 1480, 1480}, {share, "%", 50, 0.5}, {share, "-", 0.5, 0.5}, {velocity, "m/s", 1, 1}, {velocity, "ft/s", 1, 0.3048},
		{capacity, "m3/h", 100, 100}, {salinity, "g/kg", 35, 35},
	} {
		u, known := c.q.unit(c.unit)
		if !known {
			t.Errorf("%s: no unit %s", c.q.Name, c.unit)
			continue
		}
		if got := u.ToSI(c.from); !(math.Abs(got-c.si) <= 1e-14*math.Max(math.Abs(c.si), 1e-2)) {
			t.Errorf("%g %s: %.17g, want %.17g", c.from, c.unit, got, c.si)
		}
		if back := u.FromSI(u.ToSI(c.from)); !(math.Abs(back-c.from) <= 1e-12*math.Abs(c.from)) {
			t.Errorf("%s there and back: %.17g, want %g", c.unit, back, c.from)
		}
	}
	if _, known := pressure.unit("mpa"); known {
		t.Error("mpa counts as a unit, though it could be MPa or mPa")
	}
}

// Nothing a table holds may bring the reader down, and what it accepts it accepts again.
func FuzzReadTables(f *testing.F) {
	for _, dir := range []string{"testdata/good", "testdata/bad/mixed-decimals", "testdata/bad/stray-quote", "testdata/bad/decimal-comma-bare"} {
		for _, name := range []string{"runs.csv", "conditions.csv"} {
			if content, err := os.ReadFile(filepath.Join(dir, name)); err == nil {
				f.Add(content)
			}
		}
	}
	base := good(f, "")
	f.Fuzz(func(t *testing.T, content []byte) {
		for _, name := range []string{"runs.csv", "conditions.csv"} {
			files := fstest.MapFS{}
			for n, file := range base {
				files[n] = file
			}
			files[name] = &fstest.MapFile{Data: content}
			job, err := Read("fuzz", files, nil)
			if err != nil {
				continue
			}
			for _, r := range job.Tables.Runs {
				if math.IsNaN(r.Length.Value) || math.IsInf(r.Length.Value, 0) || r.Length.Value < 0 {
					t.Errorf("accepted a length of %g", r.Length.Value)
				}
			}
			for _, c := range job.Conditions() {
				if _, err := job.Build(c); err != nil {
					t.Errorf("read, but no case: %v", err)
				}
			}
		}
	})
}
