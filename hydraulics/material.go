package hydraulics

import (
	"brinehead/sources"
	_ "embed" // for the tables of names and roughness
	"fmt"
	"slices"
	"sync"
)

// MaterialState is the condition of a pipe's wall.
type MaterialState string

// The states most materials have figures for. Some have others, such as "slightly rusted" or "slime":
// see [Material].
const (
	StateNew       MaterialState = "new"
	StateInService MaterialState = "in service"
	StateCorroded  MaterialState = "badly corroded"
)

// Material is what a pipe's wall is made of, or covered with.
type Material struct {
	Name      string
	Aliases   []string    // other names a table may write
	Roughness []Roughness // by state, in the order of the catalogue; none where no source gave any
}

// Roughness is the equivalent sand roughness of a material in one state.
type Roughness struct {
	State  MaterialState
	Height float64 // m
	Source string  // letters stand for the notes of [RoughnessNotes]; the range read stands beside them
	Mark   Mark
}

// RoughnessIn returns the roughness of the material in a state. Where the catalogue has no figure for it none is put
// in its place: the error is an [*UnknownNameError] that names the states it has.
func (m Material) RoughnessIn(state MaterialState) (Roughness, error) {
	var known []string
	for _, r := range m.Roughness {
		if r.State == state {
			return r, nil
		}
		known = append(known, m.inState(r.State))
	}
	return Roughness{}, &UnknownNameError{Kind: "roughness of " + m.Name, Name: m.inState(state), Nearest: known,
		Hint: "name a state that has a figure, or give the roughness itself"}
}

// inState returns what a table writes to mean the material in a state.
func (m Material) inState(state MaterialState) string { return m.Name + ", " + string(state) }

// Materials returns the materials in the order of the catalogue.
func Materials() []Material {
	var all []Material
	for _, m := range materialCatalogue().materials {
		all = append(all, m.clone())
	}
	return all
}

func (m Material) clone() Material {
	m.Aliases, m.Roughness = slices.Clone(m.Aliases), slices.Clone(m.Roughness)
	return m
}

// RoughnessNotes returns the notes on the sources of [Materials].
func RoughnessNotes() []string { return slices.Clone(materialCatalogue().notes) }

// FindMaterial returns the material that a table names, and the state named before or behind it: "galvanised steel",
// "90/10 copper-nickel, new", "badly corroded cast iron". Case, spaces and punctuation do not matter.
//
// A name without a state means [StateInService], since ships do not stay new. That the material is known does not
// say that it has a roughness in that state: see [Material.RoughnessIn].
//
// The error is an [*UnknownNameError] with the nearest names by spelling.
func FindMaterial(name string) (Material, MaterialState, error) {
	catalogue := materialCatalogue()
	given := nameWords(name)
	for _, m := range catalogue.materials {
		for _, alias := range m.spellings() {
			words := nameWords(alias)
			extra := len(given) - len(words)
			if extra < 0 {
				continue
			}
			if slices.Equal(words, given[:len(words)]) {
				if state, ok := catalogue.state(given[len(words):]); ok {
					return m.clone(), state, nil
				}
			}
			if slices.Equal(words, given[extra:]) {
				if state, ok := catalogue.state(given[:extra]); ok {
					return m.clone(), state, nil
				}
			}
		}
	}
	return Material{}, "", &UnknownNameError{Kind: "material", Name: name, Nearest: catalogue.nearest(name),
		Hint: "write a material, and its state where it is not in service; or give the roughness itself"}
}

// spellings returns all that a table may write to mean the material.
func (m Material) spellings() []string { return append([]string{m.Name}, m.Aliases...) }

// nearest returns the nearest materials by spelling or, where the text is like none but longer, the nearest materials
// with their state.
func (t materialTables) nearest(name string) []string {
	var bare, inState []wayToWrite
	for _, m := range t.materials {
		for _, alias := range m.spellings() {
			bare = append(bare, wayToWrite{alias, m.Name})
			for _, r := range m.Roughness {
				inState = append(inState, wayToWrite{alias + ", " + string(r.State), m.inState(r.State)})
			}
		}
	}
	if names := nearestNames(name, bare); len(names) > 0 {
		return names
	}
	return nearestNames(name, inState)
}

// materialTables is what the tables of names and roughness hold.
type materialTables struct {
	materials []Material
	notes     []string
}

// state returns the state that the words name, [StateInService] where there are none.
func (t materialTables) state(given []string) (MaterialState, bool) {
	if len(given) == 0 {
		return StateInService, true
	}
	for _, m := range t.materials {
		for _, r := range m.Roughness {
			if slices.Equal(nameWords(string(r.State)), given) {
				return r.State, true
			}
		}
	}
	return "", false
}

//go:embed materials/names.csv
var materialNames string

//go:embed materials/roughness.csv
var roughnessTable string

// materialCatalogue reads the embedded tables once; what it returns is never written to.
var materialCatalogue = sync.OnceValue(func() materialTables {
	tables, err := parseMaterials(materialNames, roughnessTable)
	if err != nil {
		panic(fmt.Sprintf("embedded catalogue of materials cannot be read: %v", err))
	}
	return tables
})

func parseMaterials(names, roughness string) (materialTables, error) {
	var tables materialTables
	named, err := sources.Parse(names, "material", "aliases")
	if err != nil {
		return materialTables{}, err
	}
	for _, row := range named.Rows {
		tables.materials = append(tables.materials, Material{Name: row["material"], Aliases: row.List("aliases")})
	}
	table, err := sources.ParseMarked(roughness, "materials", "state", "roughness_mm")
	if err != nil {
		return materialTables{}, err
	}
	tables.notes = table.Notes
	for _, row := range table.Rows {
		r := Roughness{State: MaterialState(row["state"]), Source: row["source"], Mark: row.Mark()}
		if r.Height, err = row.Number("roughness_mm", millimetre); err != nil {
			return materialTables{}, err
		}
		if !(r.Height > 0) {
			return materialTables{}, fmt.Errorf("roughness of %s, %s: want a figure of more than 0", row["materials"], r.State)
		}
		for _, name := range row.List("materials") {
			i := slices.IndexFunc(tables.materials, func(m Material) bool { return m.Name == name })
			if i < 0 {
				return materialTables{}, fmt.Errorf("roughness of %q, which is no material", name)
			}
			tables.materials[i].Roughness = append(tables.materials[i].Roughness, r)
		}
	}
	return tables, nil
}
