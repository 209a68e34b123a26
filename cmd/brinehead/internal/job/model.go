package job

import (
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

	curves map[string][]*pumps.Curve // by name of the curve, one for each impeller and speed
}

// Read reads the job in a folder, with the tables of a change folder in place of its own where change is not nil.
// The error is Faults, or what the file system says of a folder that cannot be read.
func Read(name string, folder, change fs.FS) (*Job, error) {
	tables, err := ReadTables(folder, change)
	if err != nil {
		return nil, err
	}
	j := &Job{Name: name, Tables: tables, curves: map[string][]*pumps.Curve{}}
	var faults Faults
	faults = append(faults, j.fitCurves()...)
	if faults == nil {
		for _, c := range tables.Conditions { // what only shows when the model is built is still a fault of the tables
			if _, err := j.Plant(c.Condition.Value); err != nil {
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

// Condition returns a condition's row; the name must be one of Conditions.
func (j *Job) Condition(name string) ConditionRow {
	row, _ := j.condition(name)
	return row
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

// Plant builds the plant of one condition: the tables with the condition's own values in place of theirs. The error
// is Faults that name the rows concerned.
func (j *Job) Plant(name string) (*curves.Plant, error) {
	row, err := j.condition(name)
	if err != nil {
		return nil, err
	}
	b := &builder{job: j, condition: row, point: map[string]int{}, plant: &curves.Plant{}}
	b.water()
	b.points()
	b.runs()
	b.pumps()
	if err := b.faults.Err(); err != nil {
		return nil, err
	}
	if err := b.plant.Check(); err != nil {
		place := row.Condition.Place
		return nil, Faults{{Place: Place{File: "runs.csv"}, Found: err.Error(),
			Want: fmt.Sprintf("a circuit that can be solved (condition %s, line %d of conditions.csv)", row.Condition.Value, place.Line)}}
	}
	return b.plant, nil
}

// builder gathers the plant of one condition and the faults met on the way.
type builder struct {
	job       *Job
	condition ConditionRow
	plant     *curves.Plant
	point     map[string]int
	faults    Faults
}

func (b *builder) fault(at Place, found, want, hint string) {
	b.faults = append(b.faults, Fault{Place: at, Found: found, Want: want, Hint: hint})
}

// number returns a row's value, or the condition's own for that element where it has one.
func (b *builder) number(element Text, quantity string, own Number) Number {
	for _, o := range b.condition.Overrides {
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
			if draught.Given && elevation > draught.Value {
				b.fault(b.condition.Draught.Place, fmt.Sprintf("%g m", draught.Value),
					fmt.Sprintf("a draught that covers the sea inlet %s at %g m: it draws air", r.Point.Value, elevation), "")
			}
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
	}
}

func (b *builder) runs() {
	fittings := map[string][]hydraulics.Fitting{}
	for _, r := range b.job.Tables.Fittings {
		key := fold(r.Run.Value)
		fittings[key] = append(fittings[key], b.fitting(r))
	}
	for _, r := range b.job.Tables.Runs {
		run := hydraulics.Run{Name: r.Run.Value, From: b.point[fold(r.From.Value)], To: b.point[fold(r.To.Value)],
			Pipe: hydraulics.Pipe{Length: r.Length.Value, Bore: r.Bore.Value, Roughness: b.number(r.Run, "roughness", r.Roughness).Or(0),
				Fouling: b.number(r.Run, "fouling", r.Fouling).Or(0)},
			Fittings: fittings[fold(r.Run.Value)],
			Shut:     fold(b.text(r.Run, "state", r.State).Value) == "shut"}
		if t := b.number(r.Run, "temperature", r.Temperature); t.Given {
			own := b.waterAt(t)
			run.Own = hydraulics.OwnWater{Viscosity: own.KinematicViscosity(), DensityRatio: own.Density / b.plant.Water.Density,
				Rise: b.plant.Elevations[run.To] - b.plant.Elevations[run.From]}
		}
		if err := run.Pipe.Check(); err != nil {
			b.fault(r.Run.Place, r.Run.Value, "a pipe that can be: "+err.Error(), "")
		}
		b.plant.Network.Runs = append(b.plant.Network.Runs, run)
	}
}

// ratingDensity is that of fresh water at 20 degC under one atmosphere, kg/m3, in which a rated drop is taken to have
// been measured where the row does not say (IAPWS-IF97; held by a test).
const ratingDensity = 998.2060935

func (b *builder) fitting(r FittingRow) hydraulics.Fitting {
	element := r.Tag
	f := hydraulics.Fitting{
		Name: r.Fitting.Value, Tag: r.Tag.Value, Count: int(r.Count.Or(1)),
		Coefficient:  hydraulics.Coefficient{K: b.number(element, "k", r.K).Or(0), Bore: r.Bore.Or(0)},
		Kv:           b.number(element, "kv", r.Kv).Or(0),
		RatedFlow:    r.RatedFlow.Or(0),
		RatedDrop:    b.number(element, "rated drop", r.RatedDrop).Or(0),
		RatedDensity: r.RatedDensity.Or(ratingDensity),
		Exponent:     r.Exponent.Or(0),
		Blockage:     b.number(element, "blockage", r.Blockage).Or(0),
		NonReturn:    isNonReturn(r.Fitting.Value),
	}
	if !r.K.Given && !r.Kv.Given && !r.RatedFlow.Given {
		b.fault(r.Fitting.Place, r.Fitting.Value, "a loss: k, kv [m3/h], or rated flow [m3/h] with rated drop [bar]", "")
	}
	return f
}

// isNonReturn says whether a fitting's name is that of a valve that passes water one way only.
func isNonReturn(name string) bool {
	name = strings.ReplaceAll(fold(name), "-", " ")
	return strings.Contains(name, "non return") || strings.Contains(name, "check valve")
}

func (b *builder) pumps() {
	running := b.condition.RunningList
	for _, r := range b.job.Tables.Pumps {
		from, to := b.point[fold(r.From.Value)], b.point[fold(r.To.Value)]
		p := curves.Pump{Name: r.Pump.Value, From: from, To: to,
			Datum:   r.Datum.Or(b.plant.Elevations[from]),
			Running: len(running) == 0 || slices.ContainsFunc(running, func(t Text) bool { return fold(t.Value) == fold(r.Pump.Value) }),
			Motor:   r.Motor.Or(math.NaN()),
			Pump: pumps.Pump{Curve: b.curve(r), Speed: b.number(r.Pump, "speed", r.Speed).Or(0),
				Wear: b.number(r.Pump, "wear", r.Wear).Or(0)}}
		b.plant.Pumps = append(b.plant.Pumps, p)
	}
}

// curve finds the digitised curve of a pump: of its impeller, and of the speed nearest to its own.
func (b *builder) curve(r PumpRow) *pumps.Curve {
	sheets := b.job.curves[fold(r.Curve.Value)]
	impeller := b.number(r.Pump, "impeller", r.Impeller)
	if impeller.Given {
		sheets = slices.DeleteFunc(slices.Clone(sheets), func(c *pumps.Curve) bool {
			return c.Impeller != 0 && math.Abs(c.Impeller-impeller.Value) > 1e-6
		})
	}
	diameters := func(list []*pumps.Curve) (text []string) {
		for _, c := range list {
			if d := fmt.Sprintf("%g mm", c.Impeller*1e3); !slices.Contains(text, d) {
				text = append(text, d)
			}
		}
		return text
	}
	switch all := diameters(b.job.curves[fold(r.Curve.Value)]); {
	case len(sheets) == 0:
		b.fault(impeller.Place, fmt.Sprintf("%g mm", impeller.Value*1e3), "a digitised diameter of "+r.Curve.Value+": "+strings.Join(all, ", "), "")
		return nil
	case len(diameters(sheets)) > 1:
		b.fault(r.Curve.Place, r.Curve.Value, "an impeller diameter, since the curve has several: "+strings.Join(all, ", "), "fill in the column impeller [mm]")
		return nil
	}
	speed := b.number(r.Pump, "speed", r.Speed)
	if !speed.Given {
		if len(sheets) > 1 {
			b.fault(r.Curve.Place, r.Curve.Value, "a speed, since the curve is digitised at several", "fill in the column speed [rpm]")
		}
		return sheets[0]
	}
	return slices.MinFunc(sheets, func(a, c *pumps.Curve) int {
		return int(math.Copysign(1, math.Abs(a.Speed-speed.Value)-math.Abs(c.Speed-speed.Value)))
	})
}
