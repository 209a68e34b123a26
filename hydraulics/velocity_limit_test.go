package hydraulics

import (
	"math"
	"slices"
	"strings"
	"testing"
)

func TestVelocityLimitsAreSound(t *testing.T) {
	var names []string
	for _, m := range Materials() {
		names = append(names, m.Name)
	}
	services := map[string]int{}
	for _, l := range VelocityLimits() {
		services[l.Service]++
		isLine := slices.Equal(l.Materials, []string{"any"})
		for _, name := range l.Materials {
			if !isLine && !slices.Contains(names, name) {
				t.Errorf("%s: %q is no material", l.Service, name)
			}
		}
		if len(l.Materials) == 0 || isLine && l.Service == PipeService {
			t.Errorf("%v holds for a pipe run of no material", l)
		}
		for _, v := range []float64{l.Least, l.Greatest} {
			if !(math.IsNaN(v) || 0.3 <= v && v <= 15) { // from barely moving to a fire main under test
				t.Errorf("%v: velocity %g m/s", l, v)
			}
		}
		if math.IsNaN(l.Least) && math.IsNaN(l.Greatest) {
			t.Errorf("%v gives no figure", l)
		}
	}
	if len(VelocityLimits()) != 33 || services[PipeService] != 14 || services["cooler tube"] != 7 {
		t.Errorf("%d rows, %v; want 33, of which 14 for pipes and 7 for cooler tubes", len(VelocityLimits()), services)
	}
	if notes := VelocityNotes(); !strings.HasPrefix(notes[len(notes)-1], "mark: ") {
		t.Errorf("notes %q, want the last to explain the marks", notes)
	}
}

func TestVelocityBounds(t *testing.T) {
	none := math.NaN()
	for _, c := range []struct {
		material        string
		bore            float64 // m
		least, greatest float64 // m/s
		marks           string  // of least and greatest
		why             string
	}{
		{"90/10 copper-nickel", 0.2, 1, 3, "R R", "NORSOK P-001 as quoted is more cautious than the 3.5 of BS MA 18"},
		{"90/10 copper-nickel", 0.05, 1, 3, "R R", "never the 2.5 of a cooler tube, nor the 10 of intermittent service"},
		{"90/10 copper-nickel", 0.022, 1, 3, "R R", "never the 3.6 nor 2.5 of tubes from 20 to 30 mm"},
		{"70/30 copper-nickel", 0.2, 1, 4, "R R", "BS MA 18 as quoted, from 100 mm"},
		{"70/30 copper-nickel", 0.1, 1, 4, "R R", "100 mm belongs to 100 mm and larger"},
		{"70/30 copper-nickel", 0.0999, 1, none, "R ", "below 100 mm the source is silent"},
		{"galvanised steel", 0.0999, none, 2.5, " M", "class guidance below 100 mm"},
		{"galvanised steel", 0.1, none, 3, " M", "class guidance from 100 mm"},
		{"copper", 0.05, none, 1, " M", "never the fresh water figures of up to 2"},
		{"aluminium brass", 0.022, none, 3, " M", "never the 2.4 of a tube"},
		{"stainless steel", 0.1, 1.5, 5, "M M", ""},
		{"super duplex stainless steel", 0.1, 0.9, 7, "M M", ""},
		{"titanium", 0.1, 0.9, 10, "M M", ""},
		{"GRP", 0.3, 0.9, 3.7, "R R", "a maker's typical design is more cautious than the 5 of continuous service"},
		{"brass", 0.022, none, none, " ", "only a tube is known"},
		{"commercial steel", 0.2, none, none, " ", "no source"},
		{"rubber lined steel", 0.2, none, none, " ", "known from memory only, and doubtful"},
	} {
		m, _, err := FindMaterial(c.material)
		if err != nil {
			t.Error(err)
			continue
		}
		least, greatest, err := VelocityBounds(m, c.bore)
		same := func(b Bound, want float64) bool {
			return b.Known() == !math.IsNaN(want) && (!b.Known() || b.Velocity == want && b.Source != "")
		}
		if marks := string(least.Mark) + " " + string(greatest.Mark); err != nil || !same(least, c.least) ||
			!same(greatest, c.greatest) || marks != c.marks {
			t.Errorf("%s of %g m: got %v to %v, %v; want %g to %g, %s (%s)", c.material, c.bore, least, greatest, err, c.least,
				c.greatest, c.marks, c.why)
		}
	}
}

// The bound is one of the rows that hold, none of them is more cautious, and the span between the two is not empty.
func TestVelocityBoundsAreTheMostCautious(t *testing.T) {
	rows, several := 0, 0
	for _, m := range Materials() {
		for _, bore := range []float64{0.002, 0.02, 0.03, 0.05, 0.0999, 0.1, 0.5, 5} {
			limits, err := PipeVelocityLimits(m, bore)
			if err != nil {
				t.Fatal(err)
			}
			least, greatest, err := VelocityBounds(m, bore)
			if err != nil {
				t.Fatal(err)
			}
			if len(limits) > 1 {
				several++
			}
			for _, l := range limits {
				rows++
				if l.Service != PipeService || !slices.Contains(l.Materials, m.Name) || bore < l.BoreFrom || bore >= l.BoreTo {
					t.Errorf("%s of %g m: %v does not hold for it", m.Name, bore, l)
				}
				if l.Least > least.Velocity || l.Greatest < greatest.Velocity || !math.IsNaN(l.Least) && !least.Known() ||
					!math.IsNaN(l.Greatest) && !greatest.Known() {
					t.Errorf("%s of %g m: %v is more cautious than %v to %v", m.Name, bore, l, least, greatest)
				}
			}
			if least.Velocity >= greatest.Velocity {
				t.Errorf("%s of %g m: no velocity from %v to %v", m.Name, bore, least, greatest)
			}
		}
	}
	if several != 24 { // both copper-nickels and GRP, at eight bores
		t.Errorf("%d rows hold, several at once %d times, want 24", rows, several)
	}
}

func TestVelocityBoundsRefuseBores(t *testing.T) {
	for _, bore := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), -0.1, 0, 0.00199, 5.01, 200} {
		least, greatest, err := VelocityBounds(Materials()[0], bore)
		if err == nil || least.Known() || greatest.Known() || !strings.Contains(err.Error(), "want 0.002 to 5 m") {
			t.Errorf("bore %g m: %v to %v, %v; want an error", bore, least, greatest, err)
		}
	}
}

func TestBadVelocityTablesAreRefused(t *testing.T) {
	const head = "materials,service,bore_from_mm,bore_to_mm,least_m_s,greatest_m_s,source,mark\n"
	for _, c := range []struct{ text, want string }{
		{"", "want the columns"},
		{head + "copper,pipe,0,,fast,1,a,R\n", `least_m_s: found "fast"`},
		{head + "copper,pipe,0,,,NaN,a,R\n", `greatest_m_s: found "NaN"`},
		{head + "copper,pipe,,100,,1,a,R\n", "out of order"},
		{head + "copper,pipe,100,100,,1,a,R\n", "out of order"},
		{head + "copper,pipe,0,,2,1,a,R\n", "out of order"},
		{head + "copper,pipe,0,,,1,,R\n", "want a source"},
	} {
		if _, err := parseVelocityLimits(c.text); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%q: error %v, want %q", c.text, err, c.want)
		}
	}
}
