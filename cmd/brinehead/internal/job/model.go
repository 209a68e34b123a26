package job

import (
	"errors"
	"fmt"
	"io/fs"
	"math"
	"slices"
	"strings"

	"brinehead/curves"
	"brinehead/fluids"
	"brinehead/hydraulics"
	"brinehead/pumps"
)

// Job is a job folder as the program works with it: its tables, its pump curves, and from them a plant for every
// condition.
type Job struct {
	Name   string // of the folder
	Tables *Tables

	curves  map[string][]*pumps.Curve // by name of the curve, one for each impeller and speed
	between *betweenCurves
	names   names
}

// names is what the catalogues know of the names in the tables, looked up once for all conditions.
type names struct {
	sizes     map[[2]string]sizeFound
	materials map[string]materialFound
	fittings  map[string]fittingFound
}

type sizeFound struct {
	size hydraulics.Size
	err  error
}

type materialFound struct {
	material hydraulics.Material
	state    hydraulics.MaterialState
	err      error
}

type fittingFound struct {
	entry hydraulics.CatalogueEntry
	err   error
}

// lookUp looks every name of the tables up.
func lookUp(t *Tables) names {
	n := names{map[[2]string]sizeFound{}, map[string]materialFound{}, map[string]fittingFound{}}
	for _, r := range t.Runs {
		key, material := [2]string{r.Standard.Value, r.Size.Value}, r.Material.Value
		if _, done := n.sizes[key]; !done && !r.Bore.Given {
			size, err := hydraulics.FindSize(key[0], key[1])
			n.sizes[key] = sizeFound{size, err}
		}
		if _, done := n.materials[material]; !done && r.Material.Given() {
			m, state, err := hydraulics.FindMaterial(material)
			n.materials[material] = materialFound{m, state, err}
		}
	}
	for _, r := range t.Fittings {
		if _, done := n.fittings[r.Fitting.Value]; !done {
			entry, err := hydraulics.FindFitting(r.Fitting.Value)
			n.fittings[r.Fitting.Value] = fittingFound{entry, err}
		}
	}
	return n
}

// Read reads the job in a folder, with the tables of a change folder in place of its own where change is not nil.
// The error is Faults.
func Read(name string, folder, change fs.FS) (*Job, error) {
	tables, err := ReadTables(folder, change)
	if err != nil {
		return nil, err
	}
	j := &Job{Name: name, Tables: tables, curves: map[string][]*pumps.Curve{}, between: &betweenCurves{}, names: lookUp(tables)}
	var faults Faults
	faults = append(faults, j.fitCurves()...)
	if faults == nil {
		for _, c := range tables.Conditions { // what only shows when the model is built is still a fault of the tables
			if _, err := j.Build(c.Condition.Value); err != nil {
				var more Faults
				if !asFaults(err, &more) {
					return nil, err
				}
				for _, f := range more {
					if !slices.Contains(faults, f) {
						faults = append(faults, f)
					}
				}
			}
		}
	}
	if err := faults.Err(); err != nil {
		return nil, err
	}
	return j, nil
}

// fitCurves sorts the rows of pump_curves.csv into sheets and fits them.
func (j *Job) fitCurves() Faults {
	type key struct {
		name            string
		impeller, speed float64
	}
	rows := map[key][]CurveRow{}
	var order []key
	for _, r := range j.Tables.Curves {
		k := key{fold(r.Curve.Value), r.Impeller.Or(0), r.Speed.Or(0)}
		if rows[k] == nil {
			order = append(order, k)
		}
		rows[k] = append(rows[k], r)
	}
	var faults Faults
	for _, k := range order {
		var points []pumps.SheetPoint
		for _, r := range rows[k] {
			points = append(points, pumps.SheetPoint{Flow: r.Flow.Value, Head: r.Head.Value,
				Efficiency: r.Efficiency.Or(math.NaN()), Power: r.Power.Or(math.NaN()), NPSHRequired: r.NPSHRequired.Or(math.NaN())})
		}
		curve, err := pumps.NewCurve(k.impeller, k.speed, points)
		if err != nil {
			first := rows[k][0].Curve
			faults = append(faults, Fault{Place: first.Place, Found: first.Value, Want: "points that make a curve: " + err.Error()})
			continue
		}
		j.curves[k.name] = append(j.curves[k.name], curve)
	}
	return faults
}

// fold returns a name as names are compared: in lower case, with single spaces.
func fold(name string) string { return strings.ToLower(strings.Join(strings.Fields(name), " ")) }

// Conditions returns the names of the job's conditions in the order of their rows.
func (j *Job) Conditions() []string {
	var names []string
	for _, c := range j.Tables.Conditions {
		names = append(names, c.Condition.Value)
	}
	return names
}

// Draughts returns the draughts of the job's conditions, NaN where one gives none.
func (j *Job) Draughts() []float64 {
	var draughts []float64
	for _, c := range j.Tables.Conditions {
		draughts = append(draughts, c.Draught.Or(math.NaN()))
	}
	return draughts
}

// condition finds a condition's row.
func (j *Job) condition(name string) (ConditionRow, error) {
	for _, c := range j.Tables.Conditions {
		if fold(c.Condition.Value) == fold(name) {
			return c, nil
		}
	}
	return ConditionRow{}, Faults{{Place: Place{Column: "condition"}, Found: quoted(name), Want: "a condition of the job: " + strings.Join(j.Conditions(), ", "),
		Hint: nearestHint(name, j.Conditions())}}
}

// Case is a job in one condition: its plant, and what the program itself has put in where the tables left it open.
type Case struct {
	*curves.Plant
	Row      ConditionRow
	Supplied []Supplied
	Walls    []Wall // by run

	HighPoints []float64 // by run, m above the keel; NaN where the table gives none
	Trims      []Trim    // by pump
	Design     Design
}

// Design holds the design pressures of the tables, Pa gauge; NaN where none is given.
type Design struct {
	Runs, Fittings, Pumps []float64 // by run, by fitting of one run after the other, by pump
}

// Openable returns the tags of the valves whose loss the catalogue knows at any opening.
func (j *Job) Openable() (tags []string) {
	for _, r := range j.Tables.Fittings {
		entry := j.names.fittings[r.Fitting.Value].entry
		if r.Tag.Given() && !r.K.Given && !r.Kv.Given && !r.RatedFlow.Given && slices.Contains(append(slices.Clone(entry.Needs), entry.Uses...), "opening") {
			tags = append(tags, r.Tag.Value)
		}
	}
	return tags
}

// Clone returns a case whose network can be changed without changing the first one's.
func (c *Case) Clone() *Case {
	out, plant := *c, *c.Plant
	plant.Network.Points = slices.Clone(plant.Network.Points)
	plant.Network.Runs = slices.Clone(plant.Network.Runs)
	for k := range plant.Network.Runs {
		plant.Network.Runs[k].Fittings = slices.Clone(plant.Network.Runs[k].Fittings)
	}
	plant.Network.Pumps = nil
	plant.Pumps = slices.Clone(plant.Pumps)
	out.Plant = &plant
	return &out
}

// Supplied is a figure that comes from a catalogue or a default, not from the tables.
type Supplied struct {
	On     string // the run, or the tag or name of a fitting
	What   string // "bore", "roughness", "loss coefficient", ...
	Figure string // with its unit
	Source string // the entry, its publication and mark
}

// Wall is what a run's material says of the velocities it bears in sea water; a bound no source has is not known.
type Wall struct {
	Material        string
	Least, Greatest hydraulics.Bound
}

// Build builds one condition: the tables with the condition's own values in place of theirs, and then those of set. An
// impeller smaller than all that are digitised is trimmed after ISO 9906. The error is Faults that name the rows concerned.
func (j *Job) Build(name string, set ...Override) (*Case, error) {
	return j.BuildTrimmed(name, pumps.ISO9906, set...)
}

// BuildTrimmed is Build with a method of trim.
func (j *Job) BuildTrimmed(name string, method pumps.TrimMethod, set ...Override) (*Case, error) {
	return j.BuildVaried(name, method, func(*ConditionRow) {}, set...)
}

// BuildVaried is BuildTrimmed with a change to the condition's row, which it gets a copy of: another draught, temperature, pumps
// running.
func (j *Job) BuildVaried(name string, method pumps.TrimMethod, vary func(*ConditionRow), set ...Override) (*Case, error) {
	row, err := j.condition(name)
	if err != nil {
		return nil, err
	}
	vary(&row)
	row.Overrides = append(slices.Clone(row.Overrides), set...)
	b := &builder{job: j, condition: row, trim: method, point: map[string]int{}, plant: &curves.Plant{}}
	b.water()
	b.points()
	b.runs()
	b.dryInlets()
	b.siphons()
	b.tees()
	b.pumps()
	if err := b.faults.Err(); err != nil {
		return nil, err
	}
	if err := b.plant.Check(); err != nil {
		place := row.Condition.Place
		return nil, Faults{{Place: Place{File: "runs.csv"}, Found: err.Error(),
			Want: fmt.Sprintf("a circuit that can be solved (condition %s, line %d of conditions.csv)", row.Condition.Value, place.Line)}}
	}
	return &Case{b.plant, row, b.supplied, b.walls, b.highPoints, b.trims, b.design}, nil
}

// builder gathers the plant of one condition and the faults met on the way.
type builder struct {
	job        *Job
	condition  ConditionRow
	plant      *curves.Plant
	point      map[string]int
	supplied   []Supplied
	walls      []Wall
	highPoints []float64
	trim       pumps.TrimMethod
	trims      []Trim
	design     Design
	faults     Faults
}

func (b *builder) supply(on, what, figure, source string) {
	b.supplied = append(b.supplied, Supplied{on, what, figure, source})
}

func (b *builder) fault(at Place, found, want, hint string) {
	b.faults = append(b.faults, Fault{Place: at, Found: found, Want: want, Hint: hint})
}

// number returns a row's value, or the condition's own for that element where it has one.
func (b *builder) number(element Text, quantity string, own Number) Number {
	for _, o := range slices.Backward(b.condition.Overrides) { // the last one set
		if o.Number.Given && o.Quantity == quantity && fold(o.Tag.Value) == fold(element.Value) {
			return o.Number
		}
	}
	return own
}

// text is number for words.
func (b *builder) text(element Text, quantity string, own Text) Text {
	for _, o := range b.condition.Overrides {
		if o.Text.Given() && o.Quantity == quantity && fold(o.Tag.Value) == fold(element.Value) {
			return o.Text
		}
	}
	return own
}

func (b *builder) water() {
	c := b.condition
	b.plant.Atmosphere = c.Atmosphere.Or(fluids.StandardAtmosphere)
	b.plant.Water = b.waterAt(c.Temperature)
}

// waterAt returns the condition's water at a temperature. Its pressure is the atmosphere's, or what keeps it liquid where
// that is more: within a circuit's pressures the density changes by parts in ten thousand.
func (b *builder) waterAt(temperature Number) fluids.State {
	c := b.condition
	var state fluids.State
	var err error
	if fold(c.Water.Value) == "sea" {
		state, err = fluids.Sea(temperature.Value, c.Salinity.Or(fluids.StandardSalinity), b.plant.Atmosphere)
	} else {
		pressure := b.plant.Atmosphere
		if vapour, boils := fluids.VapourPressure(temperature.Value + 273.15); boils == nil {
			pressure = math.Max(pressure, vapour)
		}
		state, err = fluids.Fresh(temperature.Value, pressure)
	}
	if err != nil {
		b.fault(temperature.Place, fmt.Sprintf("%g degC", temperature.Value), "water in the range of its properties: "+err.Error(), "")
	}
	return state
}

func (b *builder) points() {
	weight := b.plant.Water.Density * fluids.Gravity
	draught := b.condition.Draught
	for i, r := range b.job.Tables.Points {
		b.point[fold(r.Point.Value)] = i
		elevation := r.Elevation.Value
		p := hydraulics.Point{Name: r.Point.Value, Draw: b.number(r.Point, "draw", r.Draw).Or(0)}
		switch fold(r.Kind.Value) {
		case "sea":
			p.Fixed, p.Head = true, draught.Value
		case "overboard":
			p.Fixed, p.Head = true, math.Max(draught.Value, elevation)
		case "tank":
			p.Fixed = true
			level := b.number(r.Point, "level", r.Level).Or(elevation)
			p.Head = math.Max(level, elevation) + b.number(r.Point, "pressure", r.Pressure).Or(0)/weight
		}
		b.plant.Network.Points = append(b.plant.Network.Points, p)
		b.plant.Elevations = append(b.plant.Elevations, elevation)
		b.plant.SeaInlets = append(b.plant.SeaInlets, fold(r.Kind.Value) == "sea")
		b.plant.Overboards = append(b.plant.Overboards, fold(r.Kind.Value) == "overboard")
	}
}

func (b *builder) runs() {
	fittings := map[string][]FittingRow{}
	for _, r := range b.job.Tables.Fittings {
		key := fold(r.Run.Value)
		fittings[key] = append(fittings[key], r)
	}
	for _, r := range b.job.Tables.Runs {
		run := hydraulics.Run{Name: r.Run.Value, From: b.point[fold(r.From.Value)], To: b.point[fold(r.To.Value)],
			Pipe: hydraulics.Pipe{Length: r.Length.Value, Bore: b.bore(r), Fouling: b.number(r.Run, "fouling", r.Fouling).Or(0)},
			Shut: fold(b.text(r.Run, "state", r.State).Value) == "shut"}
		run.Pipe.Roughness = b.wall(r, run.Pipe)
		if t := b.number(r.Run, "temperature", r.Temperature); t.Given {
			own := b.waterAt(t)
			run.Own = hydraulics.OwnWater{Viscosity: own.KinematicViscosity(), DensityRatio: own.Density / b.plant.Water.Density,
				Rise: b.plant.Elevations[run.To] - b.plant.Elevations[run.From]}
		}
		if math.IsNaN(run.Pipe.Bore) {
			// an unknown size, told already
		} else if err := run.Pipe.Check(); err != nil {
			b.fault(r.Run.Place, r.Run.Value, "a pipe that can be: "+err.Error(), "")
		} else {
			for _, f := range fittings[fold(r.Run.Value)] {
				fitting, shut := b.fitting(f, run.Pipe)
				if f.Design.Given && !f.Tag.Given() {
					b.fault(f.Design.Place, f.Fitting.Value, "a tag beside its design pressure, by which the verdict names it", "")
				}
				b.design.Fittings = append(b.design.Fittings, f.Design.Or(math.NaN()))
				run.Fittings = append(run.Fittings, fitting)
				run.Shut = run.Shut || shut
			}
		}
		b.plant.Network.Runs = append(b.plant.Network.Runs, run)
		b.highPoints = append(b.highPoints, r.HighPoint.Or(math.NaN()))
		b.design.Runs = append(b.design.Runs, r.Design.Or(math.NaN()))
		if from, to := b.plant.Elevations[run.From], b.plant.Elevations[run.To]; r.HighPoint.Given && r.HighPoint.Value < math.Max(from, to) {
			b.fault(r.HighPoint.Place, fmt.Sprintf("%g m", r.HighPoint.Value), fmt.Sprintf("at least the elevations of the run's ends, %g and %g m", from, to), "")
		}
	}
}

// dryInlets faults a sea inlet above the draught whose run is open: it draws air. Behind a shut run it harms nothing.
func (b *builder) dryInlets() {
	draught := b.condition.Draught
	for i, r := range b.job.Tables.Points {
		if !b.plant.SeaInlets[i] || !draught.Given || r.Elevation.Value <= draught.Value {
			continue
		}
		if slices.ContainsFunc(b.plant.Network.Runs, func(run hydraulics.Run) bool { return (run.From == i || run.To == i) && !run.Shut }) {
			b.fault(draught.Place, fmt.Sprintf("%g m", draught.Value),
				fmt.Sprintf("a draught that covers the sea inlet %s at %g m: it draws air", r.Point.Value, r.Elevation.Value), "or shut its run in this condition")
		}
	}
}

// siphons takes the credit of a siphon away where points.csv says so: the water then falls from the high point of the
// overboard line, and the pump must lift it there.
func (b *builder) siphons() {
	for i, r := range b.job.Tables.Points {
		if fold(r.Siphon.Value) != "no" {
			continue
		}
		for k, run := range b.plant.Network.Runs {
			if run.From == i || run.To == i {
				p := &b.plant.Network.Points[i]
				if b.highPoints[k] > p.Head { // false for NaN
					p.Head = b.highPoints[k]
				}
			}
		}
	}
}

// tees makes the tees of the points that name the two runs that go straight through.
func (b *builder) tees() {
	runs := map[string]int{}
	for k, r := range b.job.Tables.Runs {
		runs[fold(r.Run.Value)] = k
	}
	known := func(name string) bool { _, has := runs[fold(name)]; return has }
	for i, r := range b.job.Tables.Points {
		if !r.Straight.Given() {
			continue
		}
		var meet []int
		for k, run := range b.plant.Network.Runs {
			if run.From == i || run.To == i {
				meet = append(meet, k)
			}
		}
		var straight []int
		for _, name := range splitNames(r.Straight, known) {
			if k, has := runs[fold(name.Value)]; has && slices.Contains(meet, k) {
				straight = append(straight, k)
			}
		}
		if len(meet) != 3 || len(straight) != 2 || straight[0] == straight[1] {
			b.fault(r.Straight.Place, quoted(r.Straight.Value), fmt.Sprintf("two of the runs that meet in %s, where just three do (%d here)", r.Point.Value, len(meet)), "")
			continue
		}
		side := meet[0] + meet[1] + meet[2] - straight[0] - straight[1]
		bore := func(k int) float64 { return b.plant.Network.Runs[k].Pipe.ClearBore() }
		if a, c := bore(straight[0]), bore(straight[1]); math.IsNaN(a + c + bore(side)) {
			continue // told already
		} else if math.Abs(a-c) > 0.02*a {
			b.fault(r.Straight.Place, quoted(r.Straight.Value), fmt.Sprintf("two runs of one bore, not of %.1f and %.1f mm", a*1e3, c*1e3), "a reducer beside the tee is a fitting of its own run")
			continue
		}
		tee := hydraulics.Tee{Bore: bore(straight[0]), Branch: math.Min(bore(side), bore(straight[0])), Angle: r.TeeAngle.Or(math.Pi / 2)}
		law, err := tee.Law()
		if err != nil || bore(side) > 1.02*tee.Bore {
			if err == nil {
				err = fmt.Errorf("the branch has %.1f mm, the straight runs %.1f mm", bore(side)*1e3, tee.Bore*1e3)
			}
			b.fault(r.Straight.Place, quoted(r.Straight.Value), "a tee that can be worked: "+err.Error(), "")
			continue
		}
		b.supply(r.Point.Value, "tee", fmt.Sprintf("%.0f deg, branch %.1f on %.1f mm", tee.Angle*180/math.Pi, tee.Branch*1e3, tee.Bore*1e3),
			"losses by the split of flow: A. Gardel (1957), formulas from memory; scatter 35 % (Hydraulic Institute, Engineering Data Book)")
		b.plant.Network.Tees = append(b.plant.Network.Tees, hydraulics.TeeLink{Point: i, First: straight[0], Second: straight[1], Branch: side, Law: law})
	}
}

// bore returns a run's bore: its own, or that of its size in its standard.
func (b *builder) bore(r RunRow) float64 {
	if r.Bore.Given {
		return r.Bore.Value
	}
	found := b.job.names.sizes[[2]string{r.Standard.Value, r.Size.Value}]
	size, err := found.size, found.err
	if err != nil {
		place := r.Size.Place
		if strings.HasPrefix(err.Error(), "pipe standard") {
			place = r.Standard.Place
		}
		b.unknownName(place, err, "brinehead catalogue sizes")
		return math.NaN()
	}
	b.supply(r.Run.Value, "bore", fmt.Sprintf("%.1f mm", size.Bore()*1e3), fmt.Sprintf("%s %s, %.6g x %.6g mm; %s", size.Standard, size.Name(),
		size.OutsideDiameter*1e3, size.Wall*1e3, size.Mark.Meaning()))
	return size.Bore()
}

// unknownName faults a name that a catalogue does not have, or that fits several of its entries.
func (b *builder) unknownName(at Place, err error, command string) {
	var unknown *hydraulics.UnknownNameError
	if !errors.As(err, &unknown) {
		b.fault(at, err.Error(), "a name of the catalogue", command)
		return
	}
	hint := "all of them: " + command
	if len(unknown.Nearest) > 0 {
		hint = `nearest: "` + strings.Join(unknown.Nearest, `", "`) + `"; ` + hint
	}
	b.fault(at, quoted(unknown.Name), "a name of the catalogue: "+unknown.Kind, hint)
}

// wall returns a run's roughness: its own, or that of its material; and notes what velocities the material bears.
func (b *builder) wall(r RunRow, pipe hydraulics.Pipe) float64 {
	wall := Wall{Least: hydraulics.Bound{Velocity: math.NaN()}, Greatest: hydraulics.Bound{Velocity: math.NaN()}}
	own := b.number(r.Run, "roughness", r.Roughness)
	roughness := own.Or(0)
	if r.Material.Given() {
		found := b.job.names.materials[r.Material.Value]
		material, state, err := found.material, found.state, found.err
		if err != nil {
			b.unknownName(r.Material.Place, err, "brinehead catalogue materials")
		} else {
			wall.Material = material.Name
			if least, greatest, err := hydraulics.VelocityBounds(material, pipe.ClearBore()); err == nil && fold(b.condition.Water.Value) == "sea" {
				wall.Least, wall.Greatest = least, greatest
			}
			if figure, err := material.RoughnessIn(state); err == nil && !own.Given {
				roughness = figure.Height
				b.supply(r.Run.Value, "roughness", fmt.Sprintf("%.6g mm", figure.Height*1e3), fmt.Sprintf("%s, %s: %s; %s", material.Name, state, figure.Source, figure.Mark.Meaning()))
			} else if err != nil && !own.Given {
				b.unknownName(r.Material.Place, err, "brinehead catalogue materials")
			}
		}
	} else if !own.Given && r.Length.Value > 0 {
		b.supply(r.Run.Value, "roughness", "0 mm", "none given: taken as smooth")
	}
	b.walls = append(b.walls, wall)
	return roughness
}

// ratingDensity is that of fresh water at 20 degC under one atmosphere, kg/m3, in which a rated drop is taken to have
// been measured where the row does not say (IAPWS-IF97; held by a test).
const ratingDensity = 998.2060935

// fitting returns a row's fitting in its pipe, and whether it shuts the run. A loss that the row gives is taken; else that
// of the catalogue's fitting of its name.
func (b *builder) fitting(r FittingRow, pipe hydraulics.Pipe) (f hydraulics.Fitting, shut bool) {
	opening := b.number(r.Tag, "opening", r.Opening)
	f = hydraulics.Fitting{
		Name: r.Fitting.Value, Tag: r.Tag.Value, Count: int(r.Count.Or(1)),
		Coefficient:  hydraulics.Coefficient{K: b.number(r.Tag, "k", r.K).Or(0), Bore: r.Bore.Or(0)},
		Kv:           b.number(r.Tag, "kv", r.Kv).Or(0),
		RatedFlow:    r.RatedFlow.Or(0),
		RatedDrop:    b.number(r.Tag, "rated drop", r.RatedDrop).Or(0),
		RatedDensity: r.RatedDensity.Or(ratingDensity),
		Exponent:     r.Exponent.Or(0),
		Blockage:     b.number(r.Tag, "blockage", r.Blockage).Or(0),
		NonReturn:    isNonReturn(r.Fitting.Value),
	}
	if port := ValvePort(r.Fitting.Value); port != "" {
		return b.threeWayPort(r, f, port, opening)
	}
	found := b.job.names.fittings[r.Fitting.Value]
	entry, unknown := found.entry, found.err
	f.NonReturn = f.NonReturn || entry.NonReturn
	if r.K.Given || r.Kv.Given || r.RatedFlow.Given {
		if entry.Exponent != 0 && r.RatedFlow.Given && !r.Exponent.Given {
			f.Exponent = entry.Exponent
			b.supply(nameOf(r), "exponent", fmt.Sprintf("%g", entry.Exponent), entry.Name+": "+entry.Source)
		}
		if r.K.Given && entry.Name == "orifice plate" {
			b.orificeHole(r, f, pipe)
		}
		if opening.Given && opening.Value != 0 && opening.Value != 1 {
			b.fault(opening.Place, fmt.Sprintf("%g %%", opening.Value*100), "0 or 100 %: the row gives the loss itself, and no table says how it grows as the valve closes",
				"leave the loss out for the catalogue's valve, or set k or kv in the condition")
		}
		return f, opening.Given && opening.Value == 0
	}
	if unknown != nil {
		b.unknownName(r.Fitting.Place, unknown, "brinehead catalogue fittings")
		return f, false
	}
	d := hydraulics.BareDimensions(pipe.ClearBore(), pipe.Roughness)
	for _, set := range []struct {
		to   *float64
		from Number
	}{{&d.Angle, r.Angle}, {&d.RadiusRatio, r.RadiusRatio}, {&d.SecondBore, r.SecondBore}, {&d.Opening, opening}, {&d.OpenArea, r.OpenArea},
		{&d.Hole, r.Hole}, {&d.Pitch, r.Pitch}, {&d.FaceArea, r.FaceArea}, {&d.AreaRatio, r.AreaRatio}, {&d.Mesh, r.Mesh}, {&d.Cuts, r.Cuts}, {&d.Length, r.Length}} {
		if set.from.Given {
			*set.to = set.from.Value
		}
	}
	coefficient, err := entry.Coefficient(d)
	switch {
	case errors.Is(err, hydraulics.ErrShut):
		return f, true
	case err != nil:
		b.fault(r.Fitting.Place, quoted(r.Fitting.Value), "dimensions its loss can be worked from: "+err.Error(), "brinehead catalogue fittings --find \""+entry.Name+"\" says what it needs")
		return f, false
	}
	f.Coefficient = coefficient
	figure := fmt.Sprintf("k %.4g", coefficient.K)
	if bore := coefficient.Bore; bore != 0 && math.Abs(bore-pipe.ClearBore()) > 1e-6*bore {
		figure += fmt.Sprintf(" on a bore of %.1f mm", bore*1e3)
	}
	b.supply(nameOf(r), "loss coefficient", figure, fmt.Sprintf("%s: %s; %s; mark %s; scatter %.0f %%", entry.Name, entry.Method, entry.Source, entry.Mark, entry.Scatter*100))
	return f, false
}

// ValvePort says which port of a three-way valve a fitting's name means: "a", "b", or none.
func ValvePort(name string) string {
	name = strings.NewReplacer(",", " ", "-", " ").Replace(fold(name))
	name = strings.Join(strings.Fields(name), " ")
	for _, port := range []string{"a", "b"} {
		if name == "three way valve port "+port {
			return port
		}
	}
	return ""
}

// SetOpening sets the opening (a fraction) of a tagged valve, for Build.
func SetOpening(tag string, opening float64) Override {
	return Override{Tag: Text{Value: tag}, Table: fittingsTable, Quantity: "opening", Number: Number{Value: opening, Given: true}}
}

// threeWayPort is one port of a three-way valve, mixing or diverting: its Kv fully open, times the share of the stroke by
// which it is open. Port A opens with the valve, port B closes. The characteristic is taken as linear, so that the two
// together pass the same at any opening (common practice for mixing valves; a maker's curve differs).
func (b *builder) threeWayPort(r FittingRow, f hydraulics.Fitting, port string, opening Number) (hydraulics.Fitting, bool) {
	if !r.Kv.Given || !r.Tag.Given() {
		b.fault(r.Fitting.Place, quoted(r.Fitting.Value), "a tag, the same at both ports, and the kv [m3/h] of the port fully open", "")
		return f, false
	}
	for _, other := range b.job.Tables.Fittings { // one opening sets both, whichever row has it
		if fold(other.Tag.Value) != fold(r.Tag.Value) || !other.Opening.Given {
			continue
		}
		if r.Opening.Given && other.Opening.Value != r.Opening.Value {
			b.fault(r.Opening.Place, fmt.Sprintf("%g %%", r.Opening.Value*100), fmt.Sprintf("one opening for both ports of the valve, not %g %% at the other", other.Opening.Value*100), "")
		} else if !opening.Given {
			opening = other.Opening
		}
	}
	share := opening.Or(1)
	if port == "b" {
		share = 1 - share
	}
	f.Kv *= share
	b.supply(nameOf(r)+" port "+strings.ToUpper(port), "kv", fmt.Sprintf("%.4g m3/h", f.Kv), fmt.Sprintf("%g m3/h fully open, %.0f %% open, linear characteristic (common practice)", r.Kv.Value, share*100))
	return f, share <= 0
}

// orificeHole works out the hole of an orifice plate whose loss the row gives: the plate to be made.
func (b *builder) orificeHole(r FittingRow, f hydraulics.Fitting, pipe hydraulics.Pipe) {
	bore := pipe.ClearBore()
	hole, err := hydraulics.OrificeHole(f.Coefficient.K, bore, hydraulics.OrificeReynolds)
	if err != nil {
		b.fault(r.K.Place, fmt.Sprintf("%g", f.Coefficient.K), "the loss of an orifice plate that can be made: "+err.Error(), "give it another name to use the loss as it stands")
		return
	}
	b.supply(nameOf(r), "hole for its k", fmt.Sprintf("%.1f mm", hole*1e3), fmt.Sprintf("orifice plate with a sharp edge in a bore of %.1f mm: ISO 5167-2:2003, 5.4.3, at Reynolds number %g", bore*1e3, hydraulics.OrificeReynolds))
}

// nameOf names a fitting for a reader: by its tag, or by its run and name.
func nameOf(r FittingRow) string {
	if r.Tag.Given() {
		return r.Tag.Value
	}
	return r.Run.Value + ": " + r.Fitting.Value
}

// isNonReturn says whether a fitting's name is that of a valve that passes water one way only.
func isNonReturn(name string) bool {
	name = strings.ReplaceAll(fold(name), "-", " ")
	return strings.Contains(name, "non return") || strings.Contains(name, "check valve")
}
