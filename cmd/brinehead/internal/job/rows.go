package job

import "math"

// Text is a word of a table and where it stands. Spaces round it are gone and those inside are single.
type Text struct {
	Value string
	Place
}

// Given says whether the cell was not blank.
func (t Text) Given() bool { return t.Value != "" }

// UnmarshalCSV takes the cell; the place is filled in afterwards.
func (t *Text) UnmarshalCSV(cell string) error {
	t.Value = cell
	return nil
}

// Number is a number of a table, in SI (see the package comment for the exceptions), and where it stands.
type Number struct {
	Value float64 // NaN where it was not given
	Given bool
	Place
	raw string
}

// UnmarshalCSV takes the cell; it is read when its column's unit and the file's decimal sign are known.
func (n *Number) UnmarshalCSV(cell string) error {
	n.raw = cell
	return nil
}

// Or returns the number, or a default where it was not given.
func (n Number) Or(value float64) float64 {
	if n.Given {
		return n.Value
	}
	return value
}

// written says whether the cell holds anything, be it right or wrong.
func (n Number) written() bool { return n.raw != "" }

// notGiven is the number of a cell that is blank, or whose text is a fault.
func notGiven(at Place, text string) Number { return Number{Value: math.NaN(), Place: at, raw: text} }

// Tables are the tables of a job, row by row, with references checked.
type Tables struct {
	Points     []PointRow
	Runs       []RunRow
	Fittings   []FittingRow
	Pumps      []PumpRow
	Curves     []CurveRow
	Conditions []ConditionRow
	Limits     []LimitRow
	Readings   []ReadingRow
	Files      []FileNote
}

// PointRow is a row of points.csv.
type PointRow struct {
	Point     Text   `csv:"point"`
	Kind      Text   `csv:"kind"`
	Elevation Number `csv:"elevation"`
	Level     Number `csv:"level"`
	Pressure  Number `csv:"pressure"`
	Draw      Number `csv:"draw"`
	Straight  Text   `csv:"straight"`
	TeeAngle  Number `csv:"tee angle"`
	OffCentre Number `csv:"off centre"`
	AftOfMark Number `csv:"aft of mark"`
	Siphon    Text   `csv:"siphon"`
	Note      Text   `csv:"note"`
}

// RunRow is a row of runs.csv.
type RunRow struct {
	Run         Text   `csv:"run"`
	From        Text   `csv:"from"`
	To          Text   `csv:"to"`
	Length      Number `csv:"length"`
	Bore        Number `csv:"bore"`
	Standard    Text   `csv:"standard"`
	Size        Text   `csv:"size"`
	Material    Text   `csv:"material"`
	Roughness   Number `csv:"roughness"`
	Fouling     Number `csv:"fouling"`
	State       Text   `csv:"state"`
	Temperature Number `csv:"temperature"`
	HighPoint   Number `csv:"high point"`
	Design      Number `csv:"design pressure"`
	Note        Text   `csv:"note"`
}

// FittingRow is a row of fittings.csv.
type FittingRow struct {
	Run          Text   `csv:"run"`
	Fitting      Text   `csv:"fitting"`
	Tag          Text   `csv:"tag"`
	Count        Number `csv:"count"`
	K            Number `csv:"k"`
	Kv           Number `csv:"kv"`
	RatedFlow    Number `csv:"rated flow"`
	RatedDrop    Number `csv:"rated drop"`
	RatedDensity Number `csv:"rated density"`
	Exponent     Number `csv:"exponent"`
	Bore         Number `csv:"bore"`
	Blockage     Number `csv:"blockage"`
	Opening      Number `csv:"opening"`
	Heat         Number `csv:"heat"`
	Angle        Number `csv:"angle"`
	RadiusRatio  Number `csv:"radius ratio"`
	SecondBore   Number `csv:"second bore"`
	OpenArea     Number `csv:"open area"`
	Hole         Number `csv:"hole"`
	Pitch        Number `csv:"pitch"`
	FaceArea     Number `csv:"face area"`
	AreaRatio    Number `csv:"area ratio"`
	Mesh         Number `csv:"mesh"`
	Cuts         Number `csv:"cuts"`
	Length       Number `csv:"length"`
	Design       Number `csv:"design pressure"`
	Note         Text   `csv:"note"`
}

// PumpRow is a row of pumps.csv.
type PumpRow struct {
	Pump            Text   `csv:"pump"`
	From            Text   `csv:"from"`
	To              Text   `csv:"to"`
	Curve           Text   `csv:"curve"`
	Datum           Number `csv:"datum"`
	Impeller        Number `csv:"impeller"`
	Speed           Number `csv:"speed"`
	Motor           Number `csv:"motor"`
	Wear            Number `csv:"wear"`
	Leak            Number `csv:"leak"`
	Leakage         Number `csv:"internal leakage"`
	InletDiameter   Number `csv:"inlet diameter"`
	Frequency       Number `csv:"frequency"`
	Poles           Number `csv:"poles"`
	Slip            Number `csv:"slip"`
	Volts           Number `csv:"volts"`
	MotorEfficiency Number `csv:"motor efficiency"`
	PowerFactor     Number `csv:"power factor"`
	Design          Number `csv:"design pressure"`
	SuctionGauge    Number `csv:"suction gauge elevation"`
	Note            Text   `csv:"note"`
}

// CurveRow is a row of pump_curves.csv: one digitised point.
type CurveRow struct {
	Curve        Text   `csv:"curve"`
	Impeller     Number `csv:"impeller"`
	Speed        Number `csv:"speed"`
	Flow         Number `csv:"flow"`
	Head         Number `csv:"head"`
	Efficiency   Number `csv:"efficiency"`
	Power        Number `csv:"power"`
	NPSHRequired Number `csv:"npshr"`
}

// ConditionRow is a row of conditions.csv.
type ConditionRow struct {
	Condition   Text   `csv:"condition"`
	Water       Text   `csv:"water"`
	Temperature Number `csv:"temperature"`
	Salinity    Number `csv:"salinity"`
	Draught     Number `csv:"draught"`
	Atmosphere  Number `csv:"atmosphere"`
	Running     Text   `csv:"running"`
	Hours       Number `csv:"hours"` // of a year

	RunningList []Text     `csv:"-"` // the pumps named in Running
	NoneRuns    bool       `csv:"-"` // Running says none
	Overrides   []Override `csv:"-"` // what the condition sets for single elements
}

// Override is a cell of conditions.csv that sets one element's column in its condition.
type Override struct {
	Tag      Text   // of the element, as in its own table
	Table    string // the element's table
	Quantity string // the column it sets
	Number   Number // for a quantity
	Text     Text   // for a word
}

// LimitRow is a row of limits.csv, its value in SI by its own unit.
type LimitRow struct {
	Limit     Text   `csv:"limit"`
	On        Text   `csv:"on"`
	Value     Number `csv:"value"`
	Unit      Text   `csv:"unit"`
	Condition Text   `csv:"condition"`
	Note      Text   `csv:"note"`
}

// ReadingRow is a row of readings.csv, its value in SI by its own unit.
type ReadingRow struct {
	Condition      Text   `csv:"condition"`
	Quantity       Text   `csv:"quantity"`
	On             Text   `csv:"on"`
	Value          Number `csv:"value"`
	Unit           Text   `csv:"unit"`
	GaugeElevation Number `csv:"gauge elevation"`
	Uncertainty    Number `csv:"uncertainty"` // plus or minus, in the SI unit of Value; of a temperature, a difference
}

// FileNote says how a file was read.
type FileNote struct {
	Name, Separator, Decimal, Encoding string
	Rows                               int
	SHA256                             string
	FromChange                         bool     // it stands in the change folder
	Notes                              []string // what was taken one way of several: "flow [gpm]: taken as US gallons a minute"
}
