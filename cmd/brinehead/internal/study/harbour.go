package study

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/hydraulics"
	"brinehead/pumps"
)

// HarbourTest is what flow meters and gauges are to show after the change, with the inputs as they are given (best) and with
// all of their tolerances taken at once to either side. Every corner is solved anew; nothing is estimated.
type HarbourTest struct {
	Grade      Grade       `json:"grade"`
	Tolerances []Tolerance `json:"tolerances"`
	Conditions []TestBand  `json:"conditions"`
}

// Grade is an acceptance grade of a pump's head, as fractions of it.
type Grade struct {
	Name   string `json:"grade"`
	Below  Figure `json:"head_below"`
	Above  Figure `json:"head_above"`
	Source string `json:"source"`
}

// Grades are those of ISO 9906:2012, Table 8: names read in summaries, figures from memory. The 5 % of 2B are also those of
// class 2 of the edition of 1999, which were read in a pump maker's lexicon.
var grades = []Grade{
	{"1B", 0.03, 0.03, "ISO 9906:2012, Table 8, grade 1B: head +3/-3 %; from memory"},
	{"1E", 0.03, 0.03, "ISO 9906:2012, Table 8, grade 1E: head +3/-3 %; from memory"},
	{"1U", 0, 0.06, "ISO 9906:2012, Table 8, grade 1U: head +6/-0 %; from memory"},
	{"2B", 0.05, 0.05, "ISO 9906:2012, Table 8, grade 2B: head +5/-5 %; from memory, the same as class 2 of the edition of 1999, read in a pump lexicon"},
	{"2U", 0, 0.10, "ISO 9906:2012, Table 8, grade 2U: head +10/-0 %; from memory"},
	{"3B", 0.07, 0.07, "ISO 9906:2012, Table 8, grade 3B: head +7/-7 %; from memory"},
}

// DefaultGrade is the grade that is taken where none is named.
const DefaultGrade = "2B"

// GradeNames lists the grades.
func GradeNames() (names []string) {
	for _, g := range grades {
		names = append(names, g.Name)
	}
	return names
}

// GradeNamed finds a grade by its name, the default one for an empty name.
func GradeNamed(name string) (Grade, error) {
	if name == "" {
		name = DefaultGrade
	}
	for _, g := range grades {
		if strings.EqualFold(g.Name, name) {
			return g, nil
		}
	}
	return Grade{}, fmt.Errorf("grade: found %q, want one of %s", name, strings.Join(GradeNames(), ", "))
}

// Tolerance is how far one input is taken to either side. Low is the side that lets more water through: a smooth pipe, an easy
// fitting; for a pump, the lesser head.
type Tolerance struct {
	On     string `json:"on"`
	What   string `json:"what"` // roughness, loss, head
	Unit   string `json:"unit"` // mm, or - for a factor on the figure
	Low    Figure `json:"low"`
	Best   Figure `json:"best"`
	High   Figure `json:"high"`
	Source string `json:"source"`
}

// TestBand is what one condition is expected to show.
type TestBand struct {
	Condition string        `json:"condition"`
	Readings  []TestReading `json:"readings"`
	Corners   []Corner      `json:"corners"`
	Boiling   []string      `json:"boiling"` // points whose low lies below the vapour pressure: no gauge can show it
}

// TestReading is one reading to expect. Low and high of a pump's flow are those of the corners of least and greatest flow; of
// everything else the least and the greatest of all corners, not known where any corner is not.
type TestReading struct {
	Quantity string `json:"quantity"` // pump flow, flow; suction gauge, discharge gauge, gauge, at the elevation of their point
	On       string `json:"on"`       // the pump, run or point
	Unit     string `json:"unit"`
	Low      Figure `json:"low"`
	Best     Figure `json:"best"`
	High     Figure `json:"high"`
	Reason   string `json:"reason"` // why a bound is not known; empty where both are
}

// Corner is a solution with resistance and pumps at one side of their tolerances.
type Corner struct {
	Resistance string `json:"resistance"` // low or high
	PumpHead   string `json:"pump_head"`  // low or high
	Unknown    string `json:"not_known"`  // why its figures are not known; empty where they are

	condition *Condition
}

// How far inputs are taken for a harbour test where no better figure is known.
const (
	roughnessFactor = 2.0  // either way; see the comment of package hydraulics
	givenLoss       = 0.15 // of a loss that the table gives: a maker's rating, a k, a Kv
)

const (
	roughnessSource = "twice and half the figure (common practice: the roughness of a pipe in service is known within a factor of two)"
	givenSource     = "the table's own figure, within 15 % (one fitted factor holds a cooler's loss within 10 to 20 %, Int. J. Chemical Engineering, 2019, 3693657; taken for other ratings too, judged here)"
)

// harbourTest works the bands of the conditions asked for.
func (a *Comparison) harbourTest(after *job.Job, asked []string, grade Grade) (HarbourTest, error) {
	t := HarbourTest{Grade: grade}
	for _, name := range asked {
		if !holds(after.Conditions(), name) {
			_, err := after.Build(name)
			return t, err
		}
		if a.after == nil || !slices.ContainsFunc(a.after.Conditions, func(c Condition) bool { return sameName(c.Condition, name) }) {
			return t, fmt.Errorf("test: found %q, want a condition that is compared: give --condition %q too", name, name)
		}
	}
	if a.after == nil {
		return t, nil
	}
	heads := scaledCurves{}
	for i := range a.after.Conditions {
		c := &a.after.Conditions[i]
		if len(asked) > 0 && !holds(asked, c.Condition) {
			continue
		}
		band := TestBand{Condition: c.Condition}
		for _, corner := range []Corner{{Resistance: "high", PumpHead: "low"}, {Resistance: "high", PumpHead: "high"}, {Resistance: "low", PumpHead: "low"}, {Resistance: "low", PumpHead: "high"}} {
			tolerances, err := corner.solve(after, c, grade, heads)
			if err != nil {
				return t, err
			}
			for _, one := range tolerances {
				if !slices.Contains(t.Tolerances, one) {
					t.Tolerances = append(t.Tolerances, one)
				}
			}
			band.Corners = append(band.Corners, corner)
		}
		band.readings(c)
		t.Conditions = append(t.Conditions, band)
	}
	return t, nil
}

// solve builds the condition anew with its inputs at the corner, and solves it. The error is that of building.
func (k *Corner) solve(after *job.Job, best *Condition, grade Grade, heads scaledCurves) ([]Tolerance, error) {
	built, err := after.Build(best.Condition)
	if err != nil {
		return nil, err
	}
	var all []Tolerance
	high := k.Resistance == "high"
	for i := range built.Network.Runs { // in the order of runs.csv
		r := &built.Network.Runs[i]
		if r.Pipe.Length > 0 {
			t := roughnessBand(r, after.Tables.Runs[i])
			all = append(all, t)
			r.Pipe.Roughness = side(t, high) / 1e3
			if err := r.Pipe.Check(); err != nil {
				k.Unknown = r.Name + ": " + err.Error()
			}
		}
		rows := rowsOfRun(after, r.Name)
		for n := range r.Fittings {
			t := lossBand(r, &r.Fittings[n], rows[n])
			all = append(all, t)
			scaleLoss(&r.Fittings[n], side(t, high))
		}
	}
	for i := range built.Pumps {
		u := &built.Pumps[i]
		t := Tolerance{On: u.Name, What: "head", Unit: "-", Low: 1 - grade.Below, Best: 1, High: 1 + grade.Above, Source: grade.Source}
		all = append(all, t)
		if u.Curve, err = heads.of(u.Curve, side(t, k.PumpHead == "high")); err != nil {
			return nil, err
		}
	}
	c := &Condition{Condition: best.Condition, Water: best.Water, Draught: best.Draught, built: built}
	k.condition = c
	if k.Unknown != "" {
		return all, nil
	}
	if c.solved, err = c.solve(best.solved); err != nil {
		k.Unknown = "no solution: " + reasonOf(err)
		return all, nil
	}
	c.report(after)
	k.Unknown = c.unknownWhy()
	return all, nil
}

func side(t Tolerance, high bool) float64 {
	if high {
		return float64(t.High)
	}
	return float64(t.Low)
}

// roughnessBand says how rough a run may be: half and twice its figure, and where a catalogue's material gave the figure at
// least from its roughness new to that in service, since new pipe does not stay new.
func roughnessBand(r *hydraulics.Run, row job.RunRow) Tolerance {
	best := r.Pipe.Roughness * 1e3
	t := Tolerance{On: r.Name, What: "roughness", Unit: "mm", Low: Figure(best / roughnessFactor), Best: Figure(best), High: Figure(best * roughnessFactor), Source: roughnessSource}
	if best == 0 {
		t.Source = "taken as smooth, since the table gives no roughness"
		return t
	}
	if row.Roughness.Given || !row.Material.Given() {
		return t
	}
	material, _, err := hydraulics.FindMaterial(row.Material.Value)
	if err != nil {
		return t
	}
	figure := func(state hydraulics.MaterialState) (hydraulics.Roughness, bool) {
		f, err := material.RoughnessIn(state)
		return f, err == nil
	}
	if f, known := figure(hydraulics.StateNew); known && f.Height*1e3 < float64(t.Low) {
		t.Low = Figure(f.Height * 1e3)
		t.Source += fmt.Sprintf("; low: %s, new (%s)", material.Name, f.Mark.Meaning())
	}
	if f, known := figure(hydraulics.StateInService); known && f.Height*1e3 > float64(t.High) {
		t.High = Figure(f.Height * 1e3)
		t.Source += fmt.Sprintf("; high: %s, in service (%s)", material.Name, f.Mark.Meaning())
	}
	return t
}

// lossBand says what a fitting's loss may be, as a factor on it: the catalogue's scatter, or for a loss that the table gives
// the program's own figure.
func lossBand(r *hydraulics.Run, f *hydraulics.Fitting, row job.FittingRow) Tolerance {
	t := Tolerance{On: f.Tag, What: "loss", Unit: "-", Low: 1 - givenLoss, Best: 1, High: 1 + givenLoss, Source: givenSource}
	if t.On == "" {
		t.On = r.Name + ": " + f.Name
	}
	entry, err := hydraulics.FindFitting(f.Name)
	if err != nil || row.K.Given || row.Kv.Given || row.RatedFlow.Given {
		return t
	}
	below := entry.ScatterBelow
	if below == 0 {
		below = entry.Scatter
	}
	t.Low, t.High = Figure(1-below), Figure(1+entry.Scatter)
	t.Source = fmt.Sprintf("%s: +%.0f/-%.0f %% (%s)", entry.Name, 100*entry.Scatter, 100*below, entry.ScatterSource)
	return t
}

// rowsOfRun lists the rows of a run's fittings, in the order its model has them.
func rowsOfRun(j *job.Job, run string) (rows []job.FittingRow) {
	for _, r := range j.Tables.Fittings {
		if sameName(r.Run.Value, run) {
			rows = append(rows, r)
		}
	}
	return rows
}

// scaleLoss multiplies a fitting's loss at every flow. A Kv goes with the root, since the loss goes with its square.
func scaleLoss(f *hydraulics.Fitting, factor float64) {
	f.Coefficient.K *= factor
	f.Coefficient.Viscous *= factor
	f.RatedDrop *= factor
	f.Kv /= math.Sqrt(factor)
}

// scaledCurves keeps curves whose every digitised head is multiplied by a factor, each fitted once.
type scaledCurves map[scaledCurve]*pumps.Curve

type scaledCurve struct {
	curve  *pumps.Curve
	factor float64
}

func (s scaledCurves) of(c *pumps.Curve, factor float64) (*pumps.Curve, error) {
	key := scaledCurve{c, factor}
	if s[key] == nil {
		points := slices.Clone(c.Points)
		for i := range points {
			points[i].Head *= factor
		}
		scaled, err := pumps.NewCurve(c.Impeller, c.Speed, points)
		if err != nil {
			return nil, err
		}
		s[key] = scaled
	}
	return s[key], nil
}

// readings fills in what to expect.
func (b *TestBand) readings(best *Condition) {
	if best.solved == nil {
		return
	}
	for i, p := range best.Pumps {
		if p.Running {
			b.Readings = append(b.Readings, b.reading("pump flow", p.Pump, "m3/h", p.Flow, func(c *Condition) Figure { return c.Pumps[i].Flow }))
		}
	}
	for i, r := range best.Runs {
		if !r.Shut {
			b.Readings = append(b.Readings, b.reading("flow", r.Run, "m3/h", r.Flow, func(c *Condition) Figure { return c.Runs[i].Flow }))
		}
	}
	for i, p := range best.Points {
		if !best.solved.Network.Points[i].Fixed {
			r := b.reading(best.gaugeName(i), p.Point, "bar", p.GaugePressure, func(c *Condition) Figure { return c.Points[i].GaugePressure })
			b.Readings = append(b.Readings, r)
			if boils := (best.solved.Water.VapourPressure - best.solved.Atmosphere) / 1e5; float64(r.Low) < boils { // false for NaN
				b.Boiling = append(b.Boiling, p.Point)
			}
		}
	}
}

// gaugeName says which gauge of a running pump a point's is.
func (c *Condition) gaugeName(point int) string {
	for _, u := range c.solved.Plant.Pumps {
		if u.Running && u.From == point {
			return "suction gauge"
		}
		if u.Running && u.To == point {
			return "discharge gauge"
		}
	}
	return "gauge"
}

// reading takes one reading from every corner.
func (b *TestBand) reading(quantity, on, unit string, best Figure, figure func(*Condition) Figure) TestReading {
	r := TestReading{Quantity: quantity, On: on, Unit: unit, Low: unknown, Best: best, High: unknown}
	at := func(k Corner) Figure {
		if k.Unknown != "" {
			return unknown
		}
		return figure(k.condition)
	}
	least, greatest := Figure(math.Inf(1)), Figure(math.Inf(-1))
	for _, k := range b.Corners {
		f := at(k)
		least, greatest = Figure(math.Min(float64(least), float64(f))), Figure(math.Max(float64(greatest), float64(f))) // NaN stays
		if quantity == "pump flow" && k.Resistance == "high" && k.PumpHead == "low" {
			r.Low = f
		}
		if quantity == "pump flow" && k.Resistance == "low" && k.PumpHead == "high" {
			r.High = f
		}
	}
	if quantity != "pump flow" {
		r.Low, r.High = least, greatest
	}
	if r.Low.Known() && r.High.Known() {
		return r
	}
	for _, k := range b.Corners {
		if k.Unknown != "" && r.Reason == "" {
			r.Reason = fmt.Sprintf("with %s resistance and %s pump head: %s", k.Resistance, k.PumpHead, k.Unknown)
		}
	}
	return r
}
