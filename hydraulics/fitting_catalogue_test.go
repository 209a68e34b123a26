package hydraulics

import (
	"encoding/csv"
	"errors"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"

	"brinehead/fluids"
)

// referenceRow is a row of a table in testdata/reference, read by the names of its columns.
type referenceRow struct {
	t      *testing.T
	header []string
	fields []string
}

func (r referenceRow) text(column string) string {
	i := slices.Index(r.header, column)
	if i < 0 {
		r.t.Fatalf("no column %q", column)
	}
	return r.fields[i]
}

func (r referenceRow) number(column string) float64 {
	v, err := strconv.ParseFloat(r.text(column), 64)
	if err != nil {
		r.t.Fatal(err)
	}
	return v
}

// referenceRows reads a table of testdata/reference and asserts its number of rows.
func referenceRows(t *testing.T, name string, want int) []referenceRow {
	t.Helper()
	file, err := os.Open("../testdata/reference/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	reader := csv.NewReader(file)
	reader.Comment = '#'
	all, err := reader.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []referenceRow
	for _, fields := range all[1:] {
		rows = append(rows, referenceRow{t, all[0], fields})
	}
	if len(rows) != want {
		t.Fatalf("%s: %d rows, want %d", name, len(rows), want)
	}
	return rows
}

func near(got, want, rel float64) bool { return math.Abs(got-want) <= rel*math.Abs(want) }

// entry finds a fitting that must be in the catalogue.
func entry(t *testing.T, name string) CatalogueEntry {
	t.Helper()
	e, err := FindFitting(name)
	if err != nil {
		t.Fatal(err)
	}
	return e
}

// sampleDimensions gives an entry what it needs, in a run of DN 200, with values every entry takes.
func sampleDimensions(e CatalogueEntry) Dimensions {
	d := BareDimensions(0.2, 4.5e-5)
	for _, need := range e.Needs {
		switch need {
		case dimRadiusRatio:
			d.RadiusRatio = 1
		case dimSecondBore:
			d.SecondBore = 0.15
		case dimHole:
			d.Hole = 0.1
		case dimFaceArea:
			d.FaceArea = 0.25
		case dimCuts:
			d.Cuts = 2
		}
	}
	if !slices.Contains(e.Needs, dimHole) && slices.Contains(e.Uses, dimOpenArea) {
		d.OpenArea = 0.5
	}
	return d
}

// Every entry says what the catalogue prints of it, under names no other entry has.
func TestCatalogueIsComplete(t *testing.T) {
	taken := map[string]string{}
	entries := CatalogueFittings()
	if len(entries) < 45 {
		t.Errorf("%d entries", len(entries))
	}
	for _, e := range entries {
		for _, n := range append([]string{e.Name}, e.Aliases...) {
			if other, ok := taken[fittingKey(n)]; ok {
				t.Errorf("%q names both %q and %q", n, other, e.Name)
			}
			taken[fittingKey(n)] = e.Name
			if found, err := FindFitting(n); err != nil || found.Name != e.Name {
				t.Errorf("FindFitting(%q) = %q, %v; want %q", n, found.Name, err, e.Name)
			}
		}
		for what, text := range map[string]string{"method": e.Method, "source": e.Source, "range": e.Valid, "source of scatter": e.ScatterSource} {
			if text == "" || strings.TrimSpace(text) != text || strings.HasSuffix(text, ".") || strings.Contains(text, "%!") {
				t.Errorf("%s: %s %q", e.Name, what, text)
			}
		}
		if !slices.Contains([]Mark{MarkRead, MarkReadTwice, MarkFromMemory, MarkComputed}, e.Mark) {
			t.Errorf("%s: mark %q", e.Name, e.Mark)
		}
		if (e.Mark == MarkFromMemory) != (strings.Contains(e.Source, "from memory")) && e.Mark != MarkComputed {
			t.Errorf("%s: mark %s beside the source %q", e.Name, e.Mark, e.Source)
		}
		if !(0 < e.Scatter && e.Scatter <= 2) || !(0 <= e.ScatterBelow && e.ScatterBelow < 1) || (e.Scatter > 1 && e.ScatterBelow == 0) {
			t.Errorf("%s: scatter %g, below %g", e.Name, e.Scatter, e.ScatterBelow)
		}
		if e.Exponent != 0 && !(1.7 <= e.Exponent && e.Exponent < 2) {
			t.Errorf("%s: exponent %g", e.Name, e.Exponent)
		}
	}
}

// The scatter figures of the Hydraulic Institute's Engineering Data Book.
func TestScatterOfTheDataBook(t *testing.T) {
	for _, c := range []struct {
		name         string
		above, below float64
	}{
		{"short-radius elbow 90", 0.35, 0},
		{"elbow 90", 0.30, 0},
		{"tee branch", 0.35, 0},
		{"gate valve", 0.50, 0},
		{"basket strainer", 0.50, 0},
		{"reducer", 0.50, 0},
		{"swing check valve", 2, 0.8},
	} {
		if e := entry(t, c.name); e.Scatter != c.above || e.ScatterBelow != c.below || !strings.Contains(e.ScatterSource, sourceDataBook) {
			t.Errorf("%s: +%g -%g (%s)", c.name, e.Scatter, e.ScatterBelow, e.ScatterSource)
		}
	}
}

// Each entry gives a finite coefficient on a sensible bore in pipes of DN 50 to DN 1000, and refuses what it has no
// use for, what it lacks, NaN and absurd bores.
func TestEveryEntryGivesACoefficient(t *testing.T) {
	for _, e := range CatalogueFittings() {
		if e.law == nil {
			var missing *DimensionError
			_, err := e.Coefficient(BareDimensions(0.2, 0))
			if !errors.As(err, &missing) || missing.Unused || len(missing.Dimensions) != 2 || !strings.HasPrefix(err.Error(), e.Name) {
				t.Errorf("%s: %v", e.Name, err)
			}
			continue
		}
		for _, bore := range []float64{0.05, 0.1, 0.2, 0.5, 1} {
			d := sampleDimensions(e)
			d.Bore, d.SecondBore, d.Hole = bore, d.SecondBore*bore/0.2, d.Hole*bore/0.2
			c, err := e.Coefficient(d)
			if err != nil || !(0 < c.K && c.K < 60) || !(c.Viscous >= 0) || !(LeastBore <= c.Bore && c.Bore <= GreatestBore) {
				t.Errorf("%s at %g mm: %+v, %v", e.Name, bore*1e3, c, err)
			}
		}
		for _, need := range e.Needs {
			d := BareDimensions(0.2, 0)
			_, err := e.Coefficient(d)
			var missing *DimensionError
			if !errors.As(err, &missing) || !slices.Contains(missing.Dimensions, need) {
				t.Errorf("%s without %s: %v", e.Name, need, err)
			}
		}
		for _, bore := range []float64{math.NaN(), 0, -1, 0.0019, 5.1, math.Inf(1)} {
			d := sampleDimensions(e)
			d.Bore = bore
			var outside *fluids.RangeError
			if _, err := e.Coefficient(d); !errors.As(err, &outside) {
				t.Errorf("%s on a bore of %g: %v", e.Name, bore, err)
			}
		}
		if !slices.Contains(e.Uses, dimOpening) {
			d := sampleDimensions(e)
			d.Opening = 0.5
			var idle *DimensionError
			if _, err := e.Coefficient(d); !errors.As(err, &idle) || !idle.Unused || !slices.Contains(idle.Dimensions, dimOpening) {
				t.Errorf("%s with an opening: %v", e.Name, err)
			}
		}
	}
}

// Dimensions of any value give a finite coefficient or an error, never NaN without one. Seed printed, worst logged.
func TestCoefficientIsFiniteOrRefused(t *testing.T) {
	const seed = 20
	t.Logf("seed %d", seed)
	rng := rand.New(rand.NewPCG(seed, 1))
	odd := []float64{math.NaN(), math.NaN(), math.NaN(), 0, -1, 1, 2, 1e-3, 0.3, 0.5, 3, 1e9, math.Inf(1), math.Inf(-1)}
	pick := func() float64 { return odd[rng.IntN(len(odd))] }
	given := 0
	for range 2000 {
		for _, e := range CatalogueFittings() {
			d := BareDimensions(0.2, 4.5e-5)
			for _, name := range append(slices.Clone(e.Needs), e.Uses...) {
				for field, value := range map[string]*float64{
					dimAngle: &d.Angle, dimRadiusRatio: &d.RadiusRatio, dimSecondBore: &d.SecondBore, dimOpening: &d.Opening,
					dimOpenArea: &d.OpenArea, dimHole: &d.Hole, dimPitch: &d.Pitch, dimFaceArea: &d.FaceArea,
					dimAreaRatio: &d.AreaRatio, dimMesh: &d.Mesh, dimCuts: &d.Cuts, dimLength: &d.Length,
				} {
					if field == name {
						*value = pick()
					}
				}
			}
			c, err := e.Coefficient(d)
			if err != nil {
				continue
			}
			given++
			if !(0 <= c.K && c.K < 1e5) || !(0 <= c.Viscous && c.Viscous < 1e4) || !(c.Bore > 0) {
				t.Fatalf("%s, %+v: %+v", e.Name, d, c)
			}
		}
	}
	if given < 2000 {
		t.Errorf("only %d rows were taken", given)
	}
	t.Logf("%d rows taken", given)
}

func TestShutValves(t *testing.T) {
	shut := 0
	for _, e := range CatalogueFittings() {
		if !slices.Contains(e.Uses, dimOpening) {
			continue
		}
		shut++
		d := sampleDimensions(e)
		d.Opening = 0
		if _, err := e.Coefficient(d); !errors.Is(err, ErrShut) || !strings.HasPrefix(err.Error(), e.Name) {
			t.Errorf("%s shut: %v", e.Name, err)
		}
		d.Opening = 1
		open, err := e.Coefficient(d)
		d.Opening = math.NaN()
		bare, err2 := e.Coefficient(d)
		if err != nil || err2 != nil || open != bare {
			t.Errorf("%s: wide open %+v, %v; opening not given %+v, %v", e.Name, open, err, bare, err2)
		}
		for _, x := range []float64{-0.1, 1.01, math.Inf(1)} {
			d.Opening = x
			var outside *fluids.RangeError
			if _, err := e.Coefficient(d); !errors.As(err, &outside) || !strings.Contains(err.Error(), "opening") {
				t.Errorf("%s opened to %g: %v", e.Name, x, err)
			}
		}
	}
	if shut != 11 {
		t.Errorf("%d valves can be shut, want 11", shut)
	}
}

func TestNonReturnFittings(t *testing.T) {
	for _, e := range CatalogueFittings() {
		names := strings.Join(append([]string{e.Name}, e.Aliases...), ";")
		want := strings.Contains(names, "check") || strings.Contains(names, "non-return") || strings.Contains(names, "foot valve")
		if e.NonReturn != want {
			t.Errorf("%s: non-return %t", e.Name, e.NonReturn)
		}
	}
}

func TestFindFitting(t *testing.T) {
	for name, want := range map[string]string{
		"Elbow 90": "elbow 90", "  ELBOW   90° ": "elbow 90", "elbow 90 deg": "elbow 90", "long radius elbow": "elbow 90",
		"Butterfly_Valve": "butterfly valve", "sdnr valve": "screw-down non-return valve", "bell-mouth": "bellmouth",
		"check valve": "swing check valve", "Ship's side valve": "ship-side valve",
	} {
		if e, err := FindFitting(name); err != nil || e.Name != want {
			t.Errorf("%q: found %q, %v; want %q", name, e.Name, err, want)
		}
	}
	for name, want := range map[string]string{
		"elbo 90": "elbow 90", "buterfly valv": "butterfly valve", "gatevalves": "gate valve", "strainr": "basket strainer",
	} {
		_, err := FindFitting(name)
		var unknown *UnknownNameError
		if !errors.As(err, &unknown) || unknown.Name != name || len(unknown.Nearest) == 0 || unknown.Nearest[0] != want {
			t.Errorf("%q: %v, want %q nearest", name, err, want)
		}
	}
	if _, err := FindFitting(""); err == nil {
		t.Error("no name finds a fitting")
	}
}

func TestDimensionErrorsReadWell(t *testing.T) {
	bend := entry(t, "bend")
	d := BareDimensions(0.2, 0)
	check := func(e CatalogueEntry, d Dimensions, want string) {
		t.Helper()
		if _, err := e.Coefficient(d); err == nil || err.Error() != want {
			t.Errorf("found %v\nwant  %s", err, want)
		}
	}
	check(bend, d, "bend: needs radius ratio")
	check(entry(t, "plate cooler"), d, "plate cooler: needs rated flow, rated drop")
	d.RadiusRatio = 0.2
	check(bend, d, "bend: radius over bore 0.2 is outside 0.5 to 20")
	d.RadiusRatio, d.Opening = 1, 0.4
	check(bend, d, "bend: has no use for opening, only for the bore of its run, radius ratio, angle")
	d = BareDimensions(0.2, 0)
	d.Angle = 1
	check(entry(t, "elbow 90"), d, "elbow 90: has no use for angle, only for the bore of its run")
	check(entry(t, "gate valve"), d, "gate valve: needs second bore beside angle")
	d = BareDimensions(0.2, 0)
	d.Opening = 0
	check(entry(t, "gate valve"), d, "gate valve: shut: opening 0 closes the run")
	d.Opening = 0.1
	check(entry(t, "butterfly valve"), d, "butterfly valve: opening 10 % is outside 22.23 to 100 %")
	d = BareDimensions(0.2, 0)
	d.Hole, d.FaceArea = 0.02, 0.2
	check(entry(t, "sea chest grating"), d, "sea chest grating: needs pitch beside hole, or open area")
}

// What Valid says stands for a dimension left out, does.
func TestDimensionsLeftOut(t *testing.T) {
	for _, c := range []struct {
		name  string
		needs func(d *Dimensions)
		told  func(d *Dimensions)
		says  string
	}{
		{"bend", func(d *Dimensions) { d.RadiusRatio = 2 }, func(d *Dimensions) { d.Angle = math.Pi / 2 }, "90 unless given"},
		{"single mitre", nil, func(d *Dimensions) { d.Angle = math.Pi / 2 }, "90 unless given"},
		{"mitre bend", func(d *Dimensions) { d.Cuts = 3 }, func(d *Dimensions) { d.Angle = math.Pi / 2 }, "90 degrees unless given"},
		{"reducer", func(d *Dimensions) { d.SecondBore = 0.15 }, func(d *Dimensions) { d.Angle = 30 * math.Pi / 180 }, "30 unless given"},
		{"expander", func(d *Dimensions) { d.SecondBore = 0.3 }, func(d *Dimensions) { d.Angle = 30 * math.Pi / 180 }, "30 unless given"},
		{"ball valve", func(d *Dimensions) { d.SecondBore = 0.15 }, func(d *Dimensions) { d.Angle = math.Pi }, "180 degrees unless given"},
		{"ball valve", nil, func(d *Dimensions) { d.SecondBore = 0.2 }, "full bore unless given"},
		{"basket strainer", nil, func(d *Dimensions) { d.AreaRatio = 4 }, "4 unless given"},
		{"duplex strainer", nil, func(d *Dimensions) { d.OpenArea = 0.4 }, "40 % unless given"},
		{"rubber bellows", nil, func(d *Dimensions) { d.Length = 0.2 }, "1 bore unless given"},
		{"perforated plate", func(d *Dimensions) { d.OpenArea = 0.5 }, func(d *Dimensions) { d.FaceArea = circle(0.2) }, "that of the run unless given"},
	} {
		e := entry(t, c.name)
		d := BareDimensions(0.2, 4.5e-5)
		if c.needs != nil {
			c.needs(&d)
		}
		silent, err := e.Coefficient(d)
		c.told(&d)
		told, err2 := e.Coefficient(d)
		if err != nil || err2 != nil || !near(silent.K, told.K, 1e-12) || !near(silent.Bore, told.Bore, 1e-12) || !strings.Contains(e.Valid, c.says) {
			t.Errorf("%s: %+v, %v; told %+v, %v; says %q", c.name, silent, err, told, err2, e.Valid)
		}
	}
}

// The roughness of a run counts in a bend beyond new steel's, and not below it.
func TestRoughnessOfBends(t *testing.T) {
	e := entry(t, "elbow 90")
	k := func(roughness float64) float64 {
		c, err := e.Coefficient(BareDimensions(0.2, roughness))
		if err != nil {
			t.Fatal(err)
		}
		return c.K
	}
	if steel := k(craneRoughness); k(0) != steel || k(1.5e-6) != steel || k(math.NaN()) != steel || !(k(1e-3) > 1.5*steel) {
		t.Errorf("smooth %g, new steel %g, 1 mm %g", k(0), steel, k(1e-3))
	}
	var outside *fluids.RangeError
	if _, err := e.Coefficient(BareDimensions(0.2, 0.0101)); !errors.As(err, &outside) {
		t.Errorf("roughness beyond 5 %% of the bore: %v", err)
	}
}

// Limits stand in the user's unit and are let through themselves.
func TestLimitsOfRanges(t *testing.T) {
	answer := func(what string, method func() (float64, error)) {
		t.Helper()
		if v, err := method(); err != nil || math.IsNaN(v) {
			t.Errorf("%s: %g, %v", what, v, err)
		}
	}
	for _, bore := range []float64{LeastBore, GreatestBore} {
		answer("bore", func() (float64, error) { return NewSteelFriction(bore) })
		answer("mitre bend", func() (float64, error) { c, err := MitreBend(2, math.Pi/2, bore); return c.K, err })
	}
	answer("touching holes", func() (float64, error) { return PerforatedShare(1e-4, 1e-4) })
	answer("pitch of 7 holes", func() (float64, error) { return PerforatedShare(0.5, 3.5) })
	refused(t, "hole of 0.09 mm", func() (float64, error) { return PerforatedShare(9.99e-5, 2e-4) })
	refused(t, "hole of 501 mm", func() (float64, error) { return PerforatedShare(0.5001, 0.6) })
	refused(t, "pitch of 7.01 holes", func() (float64, error) { return PerforatedShare(0.1, 0.701) })
	answer("bellows of 5 bores", func() (float64, error) { return Bellows(1, 0.2) })
	refused(t, "bellows of more", func() (float64, error) { return Bellows(1.001, 0.2) })
	for _, ratio := range []float64{0.5, 50} {
		answer("basket", func() (float64, error) { _, k, err := Strainer{0.2, 0.4, ratio, 0, true}.Loss(); return k, err })
	}
	answer("least ratio", func() (float64, error) { return OrificeLoss(0.02, 0.2, 5000) })
	answer("wide hole", func() (float64, error) { return OrificeDischarge(0.14, 0.2, 7841, CornerTappings) }) // 16 000 x 0.49 = 7840
	refused(t, "wide hole", func() (float64, error) { return OrificeDischarge(0.14, 0.2, 7839, CornerTappings) })
	answer("flange tappings", func() (float64, error) { return OrificeDischarge(0.1, 0.2, 8501, FlangeTappings) }) // 170 000 x 0.25 x 0.2 = 8500
	refused(t, "flange tappings", func() (float64, error) { return OrificeDischarge(0.1, 0.2, 8499, FlangeTappings) })

	for want, method := range map[string]func() error{
		"friction of new steel: bore 6000 mm is outside 2 to 5000 mm":     func() error { _, err := NewSteelFriction(6); return err },
		"mitre bend: bore 1 mm is outside 2 to 5000 mm":                   func() error { _, err := MitreBend(2, 1, 0.001); return err },
		"bellows: length 2000 mm is outside 0 to 1000 mm":                 func() error { _, err := Bellows(2, 0.2); return err },
		"perforated sheet: hole 600 mm is outside 0.1 to 500 mm":          func() error { _, err := PerforatedShare(0.6, 1); return err },
		"perforated sheet: pitch 4000 mm is outside 500 to 3500 mm":       func() error { _, err := PerforatedShare(0.5, 4); return err },
		"orifice plate: hole 400 mm is outside 50 to 375 mm":              func() error { _, err := OrificeLoss(0.4, 0.5, 1e6); return err },
		"orifice plate: bore 2000 mm is outside 50 to 1000 mm":            func() error { _, err := OrificeLoss(0.4, 2, 1e6); return err },
		"orifice discharge: Reynolds number 4000 is outside 5000 to +Inf": func() error { _, err := OrificeLoss(0.2, 0.5, 4000); return err },
	} {
		if err := method(); err == nil || err.Error() != want {
			t.Errorf("found %v\nwant  %s", err, want)
		}
	}
	d := BareDimensions(0.2, 0)
	d.OpenArea, d.FaceArea = 0.5, 100
	answer("face", func() (float64, error) { c, err := entry(t, "sea chest grating").Coefficient(d); return c.K, err })
	d.FaceArea = 100.1
	if _, err := entry(t, "sea chest grating").Coefficient(d); err == nil {
		t.Error("a grating of 100.1 square metres")
	}
	d = BareDimensions(0.2, 0)
	d.SecondBore = 6
	if _, err := entry(t, "expander").Coefficient(d); err == nil || err.Error() != "expander: second bore 6000 mm is outside 2 to 5000 mm" {
		t.Errorf("second bore: %v", err)
	}
}
