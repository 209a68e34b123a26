package hydraulics

import (
	"brinehead/sources"
	_ "embed" // for the table of velocities
	"fmt"
	"math"
	"slices"
	"sync"
)

// VelocityLimit is one source's limits to the velocity of water for a material, a service and a span of bores.
type VelocityLimit struct {
	Materials []string // names of [Materials]; "any" alone for rows that hold for a line whatever it is made of
	Service   string   // [PipeService], or what else the row is for: "cooler tube", "intermittent service", ...
	BoreFrom  float64  // m, included
	BoreTo    float64  // m, not included; +Inf where the source names no end
	Least     float64  // m/s; NaN where the source has none
	Greatest  float64  // m/s; NaN where the source has none
	Source    string   // letters stand for the notes of [VelocityNotes]
	Mark      Mark
}

// PipeService is the service of limits that hold for a pipe run: sea water running through it continuously.
const PipeService = "pipe"

// Bound is one end of the span of velocities that suits a pipe run.
type Bound struct {
	Velocity float64 // m/s; NaN where no source has one
	Source   string
	Mark     Mark
}

// Known reports whether a source has the bound.
func (b Bound) Known() bool { return !math.IsNaN(b.Velocity) }

// The bores, in m, that a pipe run may have.
const (
	leastCatalogueBore    = 0.002
	greatestCatalogueBore = 5
)

// VelocityLimits returns every limit of the catalogue, those for tubes, fire mains, fresh water and kinds of line
// included.
func VelocityLimits() []VelocityLimit {
	var all []VelocityLimit
	for _, l := range velocityCatalogue().limits {
		all = append(all, l.clone())
	}
	return all
}

func (l VelocityLimit) clone() VelocityLimit {
	l.Materials = slices.Clone(l.Materials)
	return l
}

// VelocityNotes returns the notes on the sources of [VelocityLimits].
func VelocityNotes() []string { return slices.Clone(velocityCatalogue().notes) }

// PipeVelocityLimits returns what each source says of a pipe run of the material and bore (m) with sea water. It is
// empty where none says anything. The bore must lie from 2 mm to 5 m.
func PipeVelocityLimits(m Material, bore float64) ([]VelocityLimit, error) {
	if !(leastCatalogueBore <= bore && bore <= greatestCatalogueBore) {
		return nil, fmt.Errorf("velocity limits: bore %g m, want %g to %g m", bore, leastCatalogueBore,
			float64(greatestCatalogueBore))
	}
	var found []VelocityLimit
	for _, l := range velocityCatalogue().limits {
		if l.Service == PipeService && slices.Contains(l.Materials, m.Name) && l.BoreFrom <= bore && bore < l.BoreTo {
			found = append(found, l.clone())
		}
	}
	return found, nil
}

// VelocityBounds returns the least and greatest velocity that suit a pipe run of the material and bore (m) with sea
// water. Where sources differ the more cautious is taken, whatever its mark: the highest of the least velocities and
// the lowest of the greatest; [PipeVelocityLimits] lists them all. A bound that no source has is not [Bound.Known].
// The bore must lie from 2 mm to 5 m.
func VelocityBounds(m Material, bore float64) (least, greatest Bound, err error) {
	least, greatest = Bound{Velocity: math.NaN()}, Bound{Velocity: math.NaN()}
	limits, err := PipeVelocityLimits(m, bore)
	if err != nil {
		return least, greatest, err
	}
	for _, l := range limits {
		if l.Least > least.Velocity || !least.Known() && !math.IsNaN(l.Least) {
			least = Bound{l.Least, l.Source, l.Mark}
		}
		if l.Greatest < greatest.Velocity || !greatest.Known() && !math.IsNaN(l.Greatest) {
			greatest = Bound{l.Greatest, l.Source, l.Mark}
		}
	}
	return least, greatest, nil
}

// velocityTable is what the table of velocities holds.
type velocityTable struct {
	limits []VelocityLimit
	notes  []string
}

//go:embed materials/velocity-limits.csv
var velocityCSV string

// velocityCatalogue reads the embedded table once; what it returns is never written to.
var velocityCatalogue = sync.OnceValue(func() velocityTable {
	table, err := parseVelocityLimits(velocityCSV)
	if err != nil {
		panic(fmt.Sprintf("embedded catalogue of velocities cannot be read: %v", err))
	}
	return table
})

func parseVelocityLimits(text string) (velocityTable, error) {
	table, err := sources.ParseMarked(text, "materials", "service", "bore_from_mm", "bore_to_mm", "least_m_s",
		"greatest_m_s")
	if err != nil {
		return velocityTable{}, err
	}
	parsed := velocityTable{notes: table.Notes}
	for _, row := range table.Rows {
		l := VelocityLimit{Materials: row.List("materials"), Service: row["service"], Source: row["source"],
			Mark: row.Mark()}
		for _, cell := range []struct {
			column string
			unit   float64
			figure *float64
		}{
			{"bore_from_mm", millimetre, &l.BoreFrom},
			{"bore_to_mm", millimetre, &l.BoreTo},
			{"least_m_s", 1, &l.Least},
			{"greatest_m_s", 1, &l.Greatest},
		} {
			if *cell.figure, err = row.Number(cell.column, cell.unit); err != nil {
				return velocityTable{}, err
			}
		}
		if math.IsNaN(l.BoreTo) {
			l.BoreTo = math.Inf(1)
		}
		if !(l.BoreFrom < l.BoreTo) || l.Least > l.Greatest {
			return velocityTable{}, fmt.Errorf("velocity of %s: bores or velocities out of order", row["materials"])
		}
		parsed.limits = append(parsed.limits, l)
	}
	return parsed, nil
}
