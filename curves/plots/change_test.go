package plots

import (
	"bytes"
	"fmt"
	"image/png"
	"math"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"
)

// writer is a chart that knows its own size.
type writer interface {
	Write(w *bytes.Buffer, format Format) error
}

// pairs and grades lend the charts of a change to the tests of both.
type pairs struct{ PairChart }
type grades struct{ GradeChart }

func (c pairs) Write(w *bytes.Buffer, f Format) error  { return c.PairChart.Write(w, f) }
func (c grades) Write(w *bytes.Buffer, f Format) error { return c.GradeChart.Write(w, f) }

func samplePairs() PairChart {
	return PairChart{Title: "demo with renewal", Subtitle: "flow by run", Quantity: "flow [m3/h]", Decimals: 1, Rows: []PairRow{
		{Group: "SUCTION", Name: "pipe", Before: 400, After: 372.4},
		{Group: "SUCTION", Name: "strainer", Before: 12, After: 12},
		{Group: "DISCHARGE", Name: "valve", Before: math.NaN(), After: 88, Note: "not known before"},
		{Group: "DISCHARGE", Name: "bypass", Before: math.NaN(), After: math.NaN(), Note: "shut"},
		{Group: "DISCHARGE", Name: "cross", Before: -40, After: 25},
	}}
}

func sampleGrade() GradeChart {
	return GradeChart{Title: "demo with renewal", Subtitle: "grade", Points: []string{"SEA", "SUCTION MAIN OF BOTH THE MAIN PUMPS", "DELIVERY", "OVERBOARD"}, Elevations: []float64{1, 2, 3, 6},
		Before: Grade{[]float64{6, 4, 26}, []float64{4, 26, 6}}, After: Grade{[]float64{6, 3, 22}, []float64{3, 22, 6}}, Pumps: []string{"", "P1", ""}}
}

func written(t *testing.T, c writer, f Format) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := c.Write(&b, f); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// Everything the charts of a change say is in them as text: names, groups, changes, and why a figure is not there. A difference
// of figures that are not both known is not written.
func TestChangeChartsSayWhatTheyShow(t *testing.T) {
	for _, c := range []struct {
		chart writer
		want  []string
		never []string
	}{
		{pairs{samplePairs()}, []string{"demo with renewal", "flow by run", "flow [m3/h]", "before", "after", "change", "SUCTION", "DISCHARGE", "pipe", "-27.6", "0.0", "not known before", "shut", "+65.0", "-50", "400"}, []string{"+88.0", "NaN"}},
		{grades{sampleGrade()}, []string{"head over the keel [m]", "before", "after", "pipe", "P1", "SEA", "SUCTION MAIN OF BOTH THE", "MAIN PUMPS", "OVERBOARD", "30"}, nil},
	} {
		texts, _ := wellFormed(t, written(t, c.chart, SVG))
		for _, want := range c.want {
			if !slices.Contains(texts, want) {
				t.Errorf("no %q among %q", want, texts)
			}
		}
		for _, never := range c.never {
			if slices.Contains(texts, never) {
				t.Errorf("%q among %q", never, texts)
			}
		}
		if !bytes.Equal(written(t, c.chart, SVG), written(t, c.chart, SVG)) {
			t.Error("other bytes the second time")
		}
	}
}

// A row chart grows with its rows, and the grade chart with its points.
func TestChangeChartsGrow(t *testing.T) {
	size := func(c writer) (width, height int) {
		picture, err := png.DecodeConfig(bytes.NewReader(written(t, c, PNG)))
		if err != nil {
			t.Fatal(err)
		}
		return picture.Width, picture.Height
	}
	few, many, grade, long := samplePairs(), samplePairs(), sampleGrade(), sampleGrade()
	for k := range 30 {
		many.Rows = append(many.Rows, PairRow{Group: "DISCHARGE", Name: fmt.Sprint(k), Before: float64(k), After: 7})
		long.Points, long.Elevations = append(long.Points, fmt.Sprint(k)), append(long.Elevations, 5)
	}
	_, low := size(pairs{few})
	if _, high := size(pairs{many}); math.Abs(float64(high-low)-30*13*150/72.0) > 2 {
		t.Errorf("%d dots high, with 30 rows more %d", low, high)
	}
	narrow, _ := size(grades{grade})
	if wide, _ := size(grades{long}); wide < 3*narrow {
		t.Errorf("%d dots wide, with 30 points more %d", narrow, wide)
	}
}

// Before and after are drawn apart on the head chart: former lines broken, former operating points open, both labelled, and no
// label covers another.
func TestHeadChartOfAChange(t *testing.T) {
	head, _ := sample()
	head.FormerSystems = []Line{{"system before", head.Systems[0].Flow, slices.Clone(head.Systems[0].Value)}}
	for i := range head.FormerSystems[0].Value {
		head.FormerSystems[0].Value[i] *= 0.8
	}
	head.FormerDuty = []Mark{{Name: "P1, P2", Label: "before: 430 m3/h, 22.6 m", Flow: 430.0 / 3600, Value: 22.6}}
	f := head.figure()
	if len(f.marks) != 1 || len(f.formerMarks) != 1 || f.formerMarks[0].Value != 22.6 {
		t.Errorf("%+v, %+v", f.marks, f.formerMarks)
	}
	broken := 0
	for _, s := range f.strokes {
		if s.weight == former && len(s.weight.style(s.colour).Dashes) > 0 {
			broken++
		}
	}
	if broken != 1 {
		t.Errorf("%d broken lines", broken)
	}
	f.plot().Draw(draw.New(vgimg.New(160*vg.Millimeter, 110*vg.Millimeter)))
	for i, a := range f.drawn.boxes {
		for _, b := range f.drawn.boxes[:i] {
			if a.Min.X < b.Max.X && b.Min.X < a.Max.X && a.Min.Y < b.Max.Y && b.Min.Y < a.Max.Y {
				t.Errorf("%v covers %v", a, b)
			}
		}
	}
	if texts, _ := wellFormed(t, drawn(t, head, SVG)); !slices.Contains(texts, "system before") || !slices.Contains(texts, "before: 430 m3/h, 22.6 m") {
		t.Errorf("%q", texts)
	}
}

// Odd data give a drawing, never a panic, and never an endless axis.
func TestOddChanges(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	row := func(before, after float64) PairChart {
		return PairChart{Rows: []PairRow{{Name: "R", Before: before, After: after}}}
	}
	for name, c := range map[string]writer{
		"nothing":    pairs{},
		"not known":  pairs{row(nan, nan)},
		"infinite":   pairs{row(inf, -inf)},
		"noughts":    pairs{row(0, 0)},
		"negative":   pairs{row(-1e9, 1e-9)},
		"tiny":       pairs{row(1e-12, 2e-12)},
		"long names": pairs{PairChart{Title: strings.Repeat("long ", 50), Rows: []PairRow{{Group: strings.Repeat("g", 300), Name: strings.Repeat("n", 300), Note: strings.Repeat("o", 300), Before: nan, After: 1}}}},
		"no grade":   grades{},
		"one point":  grades{GradeChart{Points: []string{"A"}, Elevations: []float64{1}}},
		"no before":  grades{GradeChart{Points: []string{"A", "B"}, Elevations: []float64{1, 2}, After: Grade{[]float64{3}, []float64{2}}, Pumps: []string{""}}},
		"ragged":     grades{GradeChart{Points: []string{"A", "B"}, Elevations: []float64{1, 2}, After: Grade{[]float64{3, 4}, []float64{2}}, Pumps: []string{"", "P", "Q"}}},
		"deep":       grades{GradeChart{Points: []string{"A", "B"}, Elevations: []float64{1, 2}, After: Grade{[]float64{-1e7}, []float64{2}}}},
		"NaN grade":  grades{GradeChart{Points: []string{"A", "B"}, Elevations: []float64{1, nan}, After: Grade{[]float64{nan}, []float64{inf}}}},
	} {
		for _, f := range []Format{SVG, PNG} {
			if b := written(t, c, f); len(b) < 300 {
				t.Errorf("%s: %d bytes of %s", name, len(b), f)
			}
		}
	}
}
