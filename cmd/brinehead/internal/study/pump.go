package study

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"brinehead/cmd/brinehead/internal/job"
	"brinehead/curves"
	"brinehead/pumps"
)

// PumpSheets is the answer to `pump`: what the program makes of the sheet of each pump of a job.
type PumpSheets struct {
	Job       string      `json:"job"`
	Version   string      `json:"version"`
	Condition string      `json:"condition"` // whose speeds, wear and water were taken
	Density   Figure      `json:"density_kg_m3"`
	Sheets    []PumpSheet `json:"pumps"`
}

// PumpSheet is one pump, or several that are the same.
type PumpSheet struct {
	Pumps    string `json:"pumps"`
	Curve    string `json:"curve"`
	Origin   string `json:"curve_origin"`
	Impeller Figure `json:"impeller_mm"`
	Speed    Figure `json:"speed_rpm"`
	Tested   Figure `json:"sheet_speed_rpm"`

	Fits    []SheetFit   `json:"fits"`
	Strays  []SheetStray `json:"strays"`
	Balance *Balance     `json:"balance"` // null where the sheet does not give head, efficiency and power at one flow
	Numbers Numbers      `json:"numbers"`
	Regions []Region     `json:"regions"`
	ShutOff Figure       `json:"shut_off_head_m"`
	Power   SheetPower   `json:"power"`
	Grade   AcceptedBand `json:"grade"`
	Points  []CurvePoint `json:"points"`
	Trims   []TrimRow    `json:"trims"`
	Notes   []string     `json:"notes"`

	pump   curves.Pump
	family []*pumps.Curve // digitised diameters at the speed of its own curve, from the smallest
	grade  pumps.Grade
}

// SheetFit says how a quantity was fitted, at the speed of the sheet.
type SheetFit struct {
	Quantity    string `json:"quantity"`
	Unit        string `json:"unit"`
	Points      int    `json:"points"`
	Low         Figure `json:"from_m3h"`
	High        Figure `json:"to_m3h"`
	Method      string `json:"method"`
	Residual    Figure `json:"residual"`
	LeaveOneOut Figure `json:"leave_one_out"`
	Shaped      bool   `json:"shaped"`
}

// SheetStray is a digitised point that does not belong.
type SheetStray struct {
	Quantity string `json:"quantity"`
	Unit     string `json:"unit"`
	Flow     Figure `json:"flow_m3h"`
	Value    Figure `json:"value"`
	Others   Figure `json:"others"` // what the other points say
	Allowed  Figure `json:"allowed"`
}

// Balance is whether head, flow, efficiency and power agree.
type Balance struct {
	Points int    `json:"points"`
	Ratio  Figure `json:"ratio"` // eta P over rho g Q H
	Spread Figure `json:"spread"`
	Slip   string `json:"slip"`
}

// Numbers are best efficiency and specific speeds, at the pump's own speed where that has one.
type Numbers struct {
	BestFlow       Figure `json:"best_flow_m3h"`
	BestHead       Figure `json:"best_head_m"`
	BestEfficiency Figure `json:"best_efficiency"`
	TypeNumber     Figure `json:"type_number"`
	Specific       Figure `json:"specific_speed"`
	SpecificUS     Figure `json:"specific_speed_us"`
	Suction        Figure `json:"suction_specific_speed"`
	SuctionUS      Figure `json:"suction_specific_speed_us"`
}

// Region is a span of flows.
type Region struct {
	Name   string `json:"region"`
	From   Figure `json:"from_m3h"`
	To     Figure `json:"to_m3h"`
	Source string `json:"source"`
}

// SheetPower is the greatest power along the curve beside the motor.
type SheetPower struct {
	Greatest Figure `json:"greatest_kW"`
	At       Figure `json:"at_m3h"`
	AtEnd    bool   `json:"at_end"`
	Motor    Figure `json:"motor_kW"`
	Wanted   Figure `json:"motor_wanted_kW"` // by the margin of ISO 5199 on the power of best efficiency
}

// AcceptedBand is the acceptance grade of the band of heads.
type AcceptedBand struct {
	Name   string `json:"grade"`
	Source string `json:"source"`
	Flow   Figure `json:"flow"` // shares, either way
	Head   Figure `json:"head"`
}

// CurvePoint is the pump at one flow, with the band of heads that the grade accepts.
type CurvePoint struct {
	Flow         Figure `json:"flow_m3h"`
	Head         Figure `json:"head_m"`
	Low          Figure `json:"head_low_m"`
	High         Figure `json:"head_high_m"`
	Efficiency   Figure `json:"efficiency"`
	ShaftPower   Figure `json:"shaft_power_kW"`
	NPSHRequired Figure `json:"npsh_required_m"`
}

// TrimRow is the best-efficiency point after a cut, by each method.
type TrimRow struct {
	Cut      Figure      `json:"cut"` // share of the diameter it starts from
	Diameter Figure      `json:"diameter_mm"`
	Methods  []TrimPoint `json:"methods"`
	Cautions []string    `json:"cautions"`
	Refused  bool        `json:"refused"`
}

// TrimPoint is where best efficiency goes by one method.
type TrimPoint struct {
	Method string `json:"method"`
	Flow   Figure `json:"flow_m3h"`
	Head   Figure `json:"head_m"`
}

// Sheets reads the sheets of a job's pumps as they stand in a condition (the first where none is named), all of them or the one
// named, with the band of an acceptance grade.
func Sheets(j *job.Job, pump, condition, grade, version string) (*PumpSheets, error) {
	if condition == "" {
		condition = j.Conditions()[0]
	}
	built, err := j.Build(condition)
	if err != nil {
		return nil, err
	}
	accepted, err := pumps.FindGrade(grade)
	if err != nil {
		return nil, err
	}
	answer := &PumpSheets{Job: j.Name, Version: version, Condition: built.Row.Condition.Value, Density: Figure(built.Water.Density)}
	var names []string
	var done []curves.Pump
	for i, u := range built.Pumps {
		names = append(names, u.Name)
		if pump != "" && !strings.EqualFold(pump, u.Name) {
			continue
		}
		k := slices.IndexFunc(done, func(d curves.Pump) bool { return d.Pump == u.Pump && sameFigure(d.Motor.Rating, u.Motor.Rating) })
		if k >= 0 {
			answer.Sheets[k].Pumps += ", " + u.Name
			continue
		}
		done = append(done, u)
		answer.Sheets = append(answer.Sheets, pumpSheet(j, built, i, accepted))
	}
	if done == nil {
		return nil, fmt.Errorf("pump: found %q, want one of %s", pump, strings.Join(names, ", "))
	}
	return answer, nil
}

func sameFigure(a, b float64) bool { return a == b || math.IsNaN(a) && math.IsNaN(b) }

// sheetUnits are the units of the quantities of a sheet, and what takes SI to them.
var sheetUnits = map[string]struct {
	unit   string
	factor float64
}{"head": {"m", 1}, "efficiency": {"%", 100}, "power": {"kW", 1e-3}, "NPSH required": {"m", 1}}

func pumpSheet(j *job.Job, built *job.Case, i int, grade pumps.Grade) PumpSheet {
	u, row := built.Pumps[i], j.Tables.Pumps[i]
	s := PumpSheet{Pumps: u.Name, Curve: row.Curve.Value, pump: u, grade: grade, family: j.Family(row.Curve.Value, u.Curve.Speed)}
	var p Pump
	p.curve(u)
	s.Origin, s.Impeller, s.Speed = p.CurveOrigin, p.Impeller, p.Speed
	s.Tested = orUnknown(u.Curve.Speed)
	for _, c := range s.sheetsUsed() {
		s.addFits(c)
	}
	s.numbers()
	s.Grade = AcceptedBand{grade.Standard + " " + grade.Name, grade.Flow.Source + "; " + grade.Flow.Mark.Meaning(), Figure(grade.Flow.Below), Figure(grade.Head.Below)}
	shut, _ := u.ShutOffHead()
	s.ShutOff = Figure(shut)
	s.power(built.Water.Density)
	low, high := u.Range()
	const rows = 12
	for k := range rows + 1 {
		q := low + (high-low)*float64(k)/rows
		d := u.At(q, built.Water.Density)
		least, most := grade.Band(u.Pump, q)
		s.Points = append(s.Points, CurvePoint{Figure(q * 3600), Figure(d.Head), Figure(least), Figure(most), Figure(d.Efficiency), Figure(d.ShaftPower / 1e3), Figure(d.NPSHRequired)})
	}
	s.trims(row, built.Trims[i])
	return s
}

func orUnknown(x float64) Figure {
	if x == 0 {
		return unknown
	}
	return Figure(x)
}

// sheetsUsed returns the digitised curves that the pump's own rests on.
func (s *PumpSheet) sheetsUsed() []*pumps.Curve {
	own := s.pump.Curve
	if own.Origin == "" {
		return []*pumps.Curve{own}
	}
	k := slices.IndexFunc(s.family, func(c *pumps.Curve) bool { return c.Impeller > own.Impeller })
	if k <= 0 {
		return s.family[:min(1, len(s.family))]
	}
	return s.family[k-1 : k+1]
}

// addFits notes how one digitised curve was fitted, and what is odd about it.
func (s *PumpSheet) addFits(c *pumps.Curve) {
	of := ""
	if len(s.sheetsUsed()) > 1 {
		of = fmt.Sprintf(" (%g mm)", math.Round(c.Impeller*1e6)/1e3)
	}
	for _, f := range c.Fits() {
		u := sheetUnits[f.Quantity]
		s.Fits = append(s.Fits, SheetFit{f.Quantity + of, u.unit, f.Points, Figure(f.Low * 3600), Figure(f.High * 3600), f.Method,
			Figure(f.Residual * u.factor), Figure(f.LeaveOneOut * u.factor), f.Shaped})
	}
	for _, x := range c.Strays() {
		u := sheetUnits[x.Quantity]
		s.Strays = append(s.Strays, SheetStray{x.Quantity + of, u.unit, Figure(x.X * 3600), Figure(x.Y * u.factor), Figure(x.Others * u.factor), Figure(x.Uncertainty * u.factor)})
	}
	if b := c.Balance(); b.Points > 0 && (s.Balance == nil || b.Slip != "") {
		s.Balance = &Balance{b.Points, Figure(b.Ratio), Figure(b.Spread), b.Slip}
	}
	s.Notes = append(s.Notes, sheetNotes(s.Curve+of, c)...)
}

// sheetNotes says what is odd about a digitised curve.
func sheetNotes(name string, c *pumps.Curve) (notes []string) {
	for _, x := range c.Strays() {
		u := sheetUnits[x.Quantity]
		notes = append(notes, fmt.Sprintf("%s: %s %s %s at %s m3/h does not belong to the curve of the other points, which have %s there, give or take %s: read it again on the sheet",
			name, x.Quantity, short(x.Y*u.factor, 3), u.unit, short(x.X*3600, 3), short(x.Others*u.factor, 3), short(x.Uncertainty*u.factor, 2)))
	}
	for _, f := range c.Fits() {
		if !f.Shaped {
			notes = append(notes, fmt.Sprintf("%s: no smooth curve through the points of %s has the shape that physics demands (a hump for head and efficiency, a valley for NPSH required); a parabola of least squares stands in", name, f.Quantity))
		}
	}
	if b := c.Balance(); b.Slip != "" {
		notes = append(notes, fmt.Sprintf("%s: efficiency times power is %s times the water power rho g Q H of its heads and flows, over %g %% off: %s", name, short(b.Ratio, 3), 100*pumps.BalanceTolerance, b.Slip))
	}
	if _, best, known := c.BestEfficiency(); known && best > pumps.GreatestEfficiency {
		notes = append(notes, fmt.Sprintf("%s: its best efficiency of %.0f %% is more than pumps of the trade reach (%.0f %%, common practice): another unit, density or diameter?", name, 100*best, 100*pumps.GreatestEfficiency))
	}
	return notes
}

func (s *PumpSheet) numbers() {
	n, r := s.pump.Curve.Numbers(), speedRatio(s.pump.Pump)
	s.Numbers = Numbers{Figure(n.BestFlow * r * 3600), Figure(n.BestHead * r * r), Figure(n.BestEfficiency), Figure(n.TypeNumber), Figure(n.SpecificSpeed),
		Figure(pumps.SpecificSpeedUS(n.SpecificSpeed)), Figure(n.SuctionSpecificSpeed), Figure(pumps.SpecificSpeedUS(n.SuctionSpecificSpeed))}
	if !s.Numbers.BestFlow.Known() {
		s.Notes = append(s.Notes, "the sheet does not show its best efficiency (none given, or greatest at the end of what is digitised): regions, type number and specific speed are not known")
		return
	}
	if !s.Numbers.TypeNumber.Known() {
		s.Notes = append(s.Notes, "the sheet gives no speed: type number and specific speed are not known")
	}
	preferred, allowable := pumps.PreferredRegion(n.SpecificSpeed), pumps.AllowableRegion()
	s.Regions = []Region{
		{"preferred", s.Numbers.BestFlow * Figure(preferred.From), s.Numbers.BestFlow * Figure(preferred.To), defaultSources["least share of best-efficiency flow"]},
		{"allowable", s.Numbers.BestFlow * Figure(allowable.From), s.Numbers.BestFlow * Figure(allowable.To), defaultSources["least allowable share of best-efficiency flow"]},
	}
	if n.SuctionSpecificSpeed > 213 {
		s.Notes = append(s.Notes, fmt.Sprintf("suction specific speed %.0f is over 213 (11000 US), which many specifications refuse (WaterWorld 2009, whose writer calls the rule an over-simplification)", n.SuctionSpecificSpeed))
	}
	_, required, known := s.pump.NPSHRequiredRange()
	if _, high := s.pump.Range(); known && required < high*(1-1e-9) {
		s.Notes = append(s.Notes, fmt.Sprintf("NPSH required is known to %.0f m3/h only, head to %.0f", required*3600, high*3600))
	}
}

func (s *PumpSheet) power(density float64) {
	most, known := s.pump.GreatestPower(density)
	s.Power = SheetPower{Figure(most.Power / 1e3), Figure(most.Flow * 3600), most.AtEnd, Figure(s.pump.Motor.Rating / 1e3), unknown}
	if !known {
		s.Notes = append(s.Notes, "the sheet gives neither efficiency nor power: the motor's load is not known")
		return
	}
	if best := s.pump.BestEfficiencyFlow(); !math.IsNaN(best) {
		if w := s.pump.At(best, density).ShaftPower; !math.IsNaN(w) {
			s.Power.Wanted = Figure(w * pumps.MotorMargin(w) / 1e3)
		}
	}
	if most.AtEnd {
		s.Notes = append(s.Notes, fmt.Sprintf("the greatest power lies at the end of what is digitised, %.0f m3/h: beyond it may be more", most.Flow*3600))
	}
	if most.Power > s.pump.Motor.Rating {
		s.Notes = append(s.Notes, fmt.Sprintf("the motor of %.4g kW does not carry the pump along its whole curve: %.1f kW at %.0f m3/h", s.pump.Motor.Rating/1e3, most.Power/1e3, most.Flow*3600))
	}
}

// trims works out what cuts of the pump's impeller would do by each method.
func (s *PumpSheet) trims(row job.PumpRow, trimmed job.Trim) {
	c := s.pump.Curve
	if !(c.Impeller > 0) || !s.Numbers.BestFlow.Known() {
		s.Notes = append(s.Notes, "what a trim would do is not judged: the sheet gives no diameter of the impeller, or no best efficiency")
		return
	}
	if trimmed.ByLaw() {
		s.Notes = append(s.Notes, fmt.Sprintf("the impeller is trimmed already, from %.4g mm; check gives every method's figures", trimmed.From*1e3))
		return
	}
	full := c.Impeller
	if len(s.family) > 0 {
		full = s.family[len(s.family)-1].Impeller
	}
	inlet := row.InletDiameter.Or(pumps.StandInInletShare * full)
	if !row.InletDiameter.Given {
		s.Notes = append(s.Notes, fmt.Sprintf("the inlet edge's diameter is not given: %.4g mm stands in, half of the full diameter (common practice 0.4 to 0.6)", inlet*1e3))
	}
	for _, cut := range []float64{0.025, 0.05, 0.075, 0.10} {
		t := TrimRow{Cut: Figure(cut), Diameter: Figure(c.Impeller * (1 - cut) * 1e3)}
		for _, w := range pumps.TrimCautions(1-cut, c.Impeller*(1-cut)/full, float64(s.Numbers.TypeNumber)) {
			t.Refused = t.Refused || w.Refuses
			t.Cautions = append(t.Cautions, w.Text+" ("+w.Source+")")
		}
		for _, m := range pumps.TrimMethods() {
			p := TrimPoint{Method: m.String(), Flow: unknown, Head: unknown}
			if r, err := m.Ratio(1-cut, inlet/c.Impeller); err == nil && !t.Refused {
				p.Flow, p.Head = s.Numbers.BestFlow*Figure(r), s.Numbers.BestHead*Figure(r*r)
			}
			t.Methods = append(t.Methods, p)
		}
		if len(s.family) > 1 {
			t.Methods = append(t.Methods, s.neighbours(c.Impeller*(1-cut)))
		}
		s.Trims = append(s.Trims, t)
	}
}

// neighbours returns where best efficiency goes by the digitised diameters on either side of one; no figure beyond them.
func (s *PumpSheet) neighbours(diameter float64) TrimPoint {
	p := TrimPoint{Method: "digitised", Flow: unknown, Head: unknown}
	for k := 1; k < len(s.family); k++ {
		c, err := pumps.Between(s.family[k-1], s.family[k], diameter)
		if err != nil {
			continue
		}
		n, r := c.Numbers(), 1.0
		if s.pump.Speed > 0 && c.Speed > 0 {
			r = s.pump.Speed / c.Speed
		}
		p.Flow, p.Head = Figure(n.BestFlow*r*3600), Figure(n.BestHead*r*r)
	}
	return p
}

// SheetNotes says what is odd about the digitised curves of a job, those that its pumps name, each once.
func SheetNotes(j *job.Job) (notes []string) {
	for _, name := range j.CurveNames() {
		family := j.Sheets(name)
		for _, c := range family {
			of := name
			if len(family) > 1 {
				of = fmt.Sprintf("%s, %g mm, %g rpm", name, math.Round(c.Impeller*1e6)/1e3, c.Speed)
			}
			notes = append(notes, sheetNotes(of, c)...)
		}
	}
	return notes
}
