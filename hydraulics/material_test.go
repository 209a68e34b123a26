package hydraulics

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"
)

func TestMaterialsAreSound(t *testing.T) {
	spellings := map[string]string{}
	figures := 0
	for _, m := range Materials() {
		for _, name := range append([]string{m.Name}, m.Aliases...) {
			key := strings.Join(nameWords(name), " ")
			if other, ok := spellings[key]; ok {
				t.Errorf("%q means both %s and %s", name, other, m.Name)
			}
			spellings[key] = m.Name
			found, state, err := FindMaterial(strings.ToUpper(name))
			if err != nil || found.Name != m.Name || state != StateInService {
				t.Errorf("%q: found %q, %q, %v; want %s in service", name, found.Name, state, err, m.Name)
			}
		}
		states := map[MaterialState]float64{}
		for _, r := range m.Roughness {
			figures++
			// From glass-smooth to hard growth: a figure in the wrong unit falls outside.
			if !(1e-6 <= r.Height && r.Height <= 5e-3) {
				t.Errorf("%s, %s: roughness %g m", m.Name, r.State, r.Height)
			}
			if _, ok := states[r.State]; ok {
				t.Errorf("%s stands there twice as %s", m.Name, r.State)
			}
			states[r.State] = r.Height
			found, state, err := FindMaterial(m.Name + ", " + string(r.State))
			if err != nil || found.Name != m.Name || state != r.State {
				t.Errorf("%s, %s: found %q, %q, %v", m.Name, r.State, found.Name, state, err)
			}
			if again, err := found.RoughnessIn(state); err != nil || again != r {
				t.Errorf("%s, %s: roughness %v, %v; want %v", m.Name, r.State, again, err, r)
			}
		}
		if states[StateInService] < states[StateNew] && states[StateInService] > 0 ||
			states[StateCorroded] < states[StateInService] && states[StateCorroded] > 0 {
			t.Errorf("%s grows smoother with use: %v", m.Name, states)
		}
	}
	if len(Materials()) != 17 || figures != 40 {
		t.Errorf("%d materials with %d figures, want 17 with 40", len(Materials()), figures)
	}
	if notes := RoughnessNotes(); len(notes) != 8 || !strings.HasPrefix(notes[7], "mark: ") {
		t.Errorf("notes %q, want eight, of which the last explains the marks", notes)
	}
}

// The figures that the handbooks named in the catalogue's notes give, in mm.
func TestRoughnessAgainstHandbooks(t *testing.T) {
	for _, c := range []struct {
		name        string
		millimetres float64
		mark        Mark
		source      string // of the figure wanted here
	}{
		{"commercial steel, new", 0.045, MarkReadTwice, "Moody 1944 gives 0.00015 ft (from memory): 0.0457 mm"},
		{"galvanised steel, new", 0.15, MarkReadTwice, "Moody 1944 gives 0.0005 ft (from memory): 0.152 mm"},
		{"cast iron, new", 0.26, MarkReadTwice, "Moody 1944 gives 0.00085 ft (from memory): 0.259 mm"},
		{"copper, new", 0.0015, MarkReadTwice, "Moody 1944 gives 0.000005 ft for drawn tubing (from memory): 0.00152 mm"},
	} {
		m, state, err := FindMaterial(c.name)
		if err != nil {
			t.Error(err)
			continue
		}
		r, err := m.RoughnessIn(state)
		// Two digits of the handbooks: 2 % is half of the last one at 0.26.
		if err != nil || !(math.Abs(r.Height*1000-c.millimetres) <= 0.02*c.millimetres) || r.Mark != c.mark {
			t.Errorf("%s: got %v, %v; want %g mm, %s (%s)", c.name, r, err, c.millimetres, c.mark, c.source)
		}
	}
}

func TestFindMaterial(t *testing.T) {
	for _, c := range []struct {
		name, want  string
		state       MaterialState
		millimetres float64 // NaN where the catalogue has none
	}{
		{"90/10 copper-nickel, in service", "90/10 copper-nickel", StateInService, 0.02},
		{"CuNi 90-10", "90/10 copper-nickel", StateInService, 0.02},
		{"new 70/30 Cu-Ni", "70/30 copper-nickel", StateNew, 0.0015},
		{"galvanised steel in service", "galvanised steel", StateInService, 0.15},
		{"Galvanized  Steel (new)", "galvanised steel", StateNew, 0.15},
		{"carbon steel", "commercial steel", StateInService, 0.2},
		{"steel, badly corroded", "commercial steel", StateCorroded, 3},
		{"slightly rusted steel", "commercial steel", "slightly rusted", 0.4},
		{"rubber-lined steel", "rubber lined steel", StateInService, 0.07},
		{"titanium", "titanium", StateInService, 0.01},
		{"GRE", "GRP", StateInService, 0.03},
		{"cast iron - badly corroded", "cast iron", StateCorroded, 3},
		{"aluminium brass with in-service", "", "", 0},
		{"aluminium brass, slime", "aluminium brass", "slime", 0.2},
		{"epoxy coated steel", "epoxy coated steel", StateInService, math.NaN()}, // only the new one is known
		{"epoxy coated steel, new", "epoxy coated steel", StateNew, 0.01},
		{"super duplex", "super duplex stainless steel", StateInService, math.NaN()},
		{"galvanised steel, badly corroded", "galvanised steel", StateCorroded, math.NaN()},
	} {
		m, state, err := FindMaterial(c.name)
		if c.want == "" {
			if err == nil {
				t.Errorf("%q: found %s, want an error", c.name, m.Name)
			}
			continue
		}
		if err != nil || m.Name != c.want || state != c.state {
			t.Errorf("%q: found %q, %q, %v; want %q, %q", c.name, m.Name, state, err, c.want, c.state)
			continue
		}
		r, err := m.RoughnessIn(state)
		var unknown *UnknownNameError
		switch {
		case math.IsNaN(c.millimetres):
			if !errors.As(err, &unknown) {
				t.Errorf("%q: roughness %v, %v; want an UnknownNameError", c.name, r, err)
			}
		case err != nil || !(math.Abs(r.Height*1000-c.millimetres) <= 1e-12*c.millimetres): // the same figure, turned to metres
			t.Errorf("%q: roughness %v, %v; want %g mm", c.name, r, err, c.millimetres)
		}
	}
}

func TestMaterialErrors(t *testing.T) {
	for name, want := range map[string]string{
		"copper-nickel":                `material: found "copper-nickel", want a name in the catalogue, such as "90/10 copper-nickel", "70/30 copper-nickel"`,
		"galvanised stele":             `material: found "galvanised stele", want a name in the catalogue, such as "galvanised steel"`,
		"commercial steel, in servise": `material: found "commercial steel, in servise", want a name in the catalogue, such as "commercial steel, in service", "commercial steel, new"`,
		"steel, nw":                    `material: found "steel, nw", want a name in the catalogue, such as "commercial steel, new"`,
		"granite":                      `material: found "granite", want a name in the catalogue`,
		"":                             `material: found "", want a name in the catalogue`,
		"new":                          `material: found "new", want a name in the catalogue`,
	} {
		_, _, err := FindMaterial(name)
		var unknown *UnknownNameError
		if !errors.As(err, &unknown) || err.Error() != want {
			t.Errorf("%q:\ngot  %v\nwant %s", name, err, want)
		}
	}
	m, state, err := FindMaterial("epoxy coated steel")
	if err != nil {
		t.Fatal(err)
	}
	_, err = m.RoughnessIn(state)
	const want = `roughness of epoxy coated steel: found "epoxy coated steel, in service", want a name in the catalogue, such as "epoxy coated steel, new"`
	if err == nil || err.Error() != want {
		t.Errorf("got %v, want %s", err, want)
	}
}

func TestBadMaterialTablesAreRefused(t *testing.T) {
	const names = "material,aliases\nsteel,iron\n"
	const head = "materials,state,roughness_mm,source,mark\n"
	for _, c := range []struct{ names, roughness, want string }{
		{"", head, "want the columns"},
		{names, "", "want the columns"},
		{names, head + "stone,new,1,a,R\n", `roughness of "stone"`},
		{names, head + "steel,new,rough,a,R\n", `roughness_mm: found "rough"`},
		{names, head + "steel,new,NaN,a,R\n", `roughness_mm: found "NaN"`},
		{names, head + "steel,new,,a,R\n", "roughness of steel, new: want a figure"},
		{names, head + "steel,new,1,a,X\n", "a known mark"},
	} {
		if _, err := parseMaterials(c.names, c.roughness); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%q, %q: error %v, want %q", c.names, c.roughness, err, c.want)
		}
	}
}

// A name alone means a pipe in service. Figures: the rows of the catalogue, whose sources its notes name.
func ExampleFindMaterial() {
	for _, name := range []string{"carbon steel", "carbon steel, new"} {
		m, state, err := FindMaterial(name)
		if err != nil {
			fmt.Println(err)
			return
		}
		r, err := m.RoughnessIn(state)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Printf("%s, %s: %.3f mm, %s\n", m.Name, state, r.Height*1000, r.Mark.Meaning())
	}
	// Output:
	// commercial steel, in service: 0.200 mm, read in two sources that agree
	// commercial steel, new: 0.045 mm, read in two sources that agree
}

func FuzzFindMaterial(f *testing.F) {
	for _, seed := range []string{"steel", "new steel", "90/10 CuNi, in service", "", "new", "copper,brass"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, name string) {
		m, state, err := FindMaterial(name)
		var unknown *UnknownNameError
		if err != nil && !errors.As(err, &unknown) {
			t.Fatalf("error %v is no UnknownNameError", err)
		}
		if err == nil && (m.Name == "" || state == "") {
			t.Fatalf("found %q in state %q", m.Name, state)
		}
	})
}
