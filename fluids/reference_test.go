package fluids

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"
)

// near fails the test where got is further than rel, relative, from want.
func near(t *testing.T, name string, got, want, rel float64) {
	t.Helper()
	if !(math.Abs(got-want) <= rel*math.Abs(want)) { // so written that NaN fails
		t.Errorf("%s: got %.10g, want %.10g within %.2g", name, got, want, rel)
	}
}

// within fails the test where got is further than most from want, in their unit.
func within(t *testing.T, name string, got, want, most float64) {
	t.Helper()
	if !(math.Abs(got-want) <= most) {
		t.Errorf("%s: got %.10g, want %.10g within %.2g", name, got, want, most)
	}
}

// worst keeps the greatest relative deviation met for a property, and where.
type worst struct {
	name string
	most float64 // the deviation that the doc comments state
	low  float64
	high float64
	seen int
}

// meet takes in one pair of figures; a NaN counts as a miss.
func (w *worst) meet(t *testing.T, at State, got, want float64) {
	t.Helper()
	w.seen++
	deviation := got/want - 1
	w.low, w.high = math.Min(w.low, deviation), math.Max(w.high, deviation)
	if !(math.Abs(deviation) <= w.most) {
		t.Errorf("%s at %g degC, %g g/kg, %g Pa: got %.9g, want %.9g: off by %.3g, stated %.3g",
			w.name, at.Celsius, at.Salinity, at.AbsolutePascal, got, want, deviation, w.most)
	}
}

// report logs the extremes and fails where the number of figures met is not the one counted in the file.
func (w *worst) report(t *testing.T, figures int) {
	t.Helper()
	t.Logf("%-28s %3d figures, deviation %+.2e to %+.2e, stated %.2e", w.name, w.seen, w.low, w.high, w.most)
	if w.seen != figures {
		t.Errorf("%s: met %d figures, the file has %d", w.name, w.seen, figures)
	}
}

// grid is a table of reference figures; a blank field is NaN.
type grid struct {
	columns map[string]int
	rows    [][]float64
}

// readGrid reads a file of testdata/reference, notes skipped.
func readGrid(t *testing.T, name string) grid {
	t.Helper()
	file, err := os.Open("../testdata/reference/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	reader := csv.NewReader(file)
	reader.Comment = '#'
	records, err := reader.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	g := grid{columns: map[string]int{}}
	for i, column := range records[0] {
		g.columns[column] = i
	}
	for _, record := range records[1:] {
		row := make([]float64, len(record))
		for i, field := range record {
			row[i] = math.NaN()
			if field == "" {
				continue
			}
			if row[i], err = strconv.ParseFloat(field, 64); err != nil {
				t.Fatal(err)
			}
		}
		g.rows = append(g.rows, row)
	}
	return g
}

// at returns a figure of a row and whether it is given.
func (g grid) at(t *testing.T, row []float64, column string) (float64, bool) {
	t.Helper()
	i, ok := g.columns[column]
	if !ok {
		t.Fatalf("no column %s", column)
	}
	return row[i], !math.IsNaN(row[i])
}

// count returns how many rows give a figure in a column.
func (g grid) count(t *testing.T, column string) (n int) {
	t.Helper()
	for _, row := range g.rows {
		if _, ok := g.at(t, row, column); ok {
			n++
		}
	}
	return n
}

// comparison sets a property of a state against a column of a grid.
type comparison struct {
	worst
	column string
	of     func(State) float64
}

func density(s State) float64        { return s.Density }
func heatCapacity(s State) float64   { return s.HeatCapacity }
func vapourPressure(s State) float64 { return s.VapourPressure }
func dynamic(s State) float64        { return s.DynamicViscosity }
func thermal(s State) float64        { return s.ThermalConductivity }

// compare holds every row of a grid against the states of the package.
func (g grid) compare(t *testing.T, state func(row []float64) (State, error), comparisons []comparison) {
	t.Helper()
	for _, row := range g.rows {
		s, err := state(row)
		if err != nil {
			t.Fatal(err)
		}
		for i := range comparisons {
			if want, ok := g.at(t, row, comparisons[i].column); ok {
				comparisons[i].meet(t, s, comparisons[i].of(s), want)
			}
		}
	}
	for i := range comparisons {
		comparisons[i].report(t, g.count(t, comparisons[i].column))
	}
}
