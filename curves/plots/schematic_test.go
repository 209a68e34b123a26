package plots

import (
	"bytes"
	"fmt"
	"io"
	"math"
	"strings"
	"testing"
)

// plant is a sea-water circuit: two chests, a strainer in each, two pumps, two coolers.
func plant() Schematic {
	return Schematic{Title: "demo: ballast", Subtitle: "sea water",
		Points: []SchematicPoint{{"LOW", "sea", 1, 4e4}, {"HIGH", "sea", 3, 2e4}, {"MAIN", "junction", 1.8, 3e4}, {"S1", "junction", 2.2, 3e4}, {"S2", "junction", 2.2, 3e4},
			{"D1", "junction", 2.9, 2e5}, {"D2", "junction", 2.9, 2e5}, {"HEADER", "junction", 3.4, 1.9e5}, {"OUT", "junction", 5.2, 8e4}, {"OVER", "overboard", 6.4, 0}},
		Runs: []SchematicRun{{"LOW SUCTION", 0, 2, 0.2, false, []string{"valve", "strainer"}}, {"HIGH SUCTION", 1, 2, 0, true, []string{"valve", "strainer"}},
			{"SUCTION 1", 2, 3, 0.1, false, []string{"valve"}}, {"SUCTION 2", 2, 4, 0, false, []string{"valve"}}, {"DELIVERY 1", 5, 7, 0.1, false, []string{"non-return"}},
			{"DELIVERY 2", 6, 7, 0, false, []string{"non-return"}}, {"COOLER 1", 7, 8, 0.05, false, []string{"valve", "cooler"}}, {"COOLER 2", 7, 8, 0.05, false, []string{"cooler", "orifice"}},
			{"OVERBOARD LINE", 8, 9, 0.1, false, nil}},
		Pumps: []SchematicPump{{"P1", 3, 5, 0.1, true}, {"P2", 4, 6, 0, false}}}
}

// Names, flows, pressures and heights are on the drawing as text.
func TestSchematicSaysWhatItShows(t *testing.T) {
	texts, paths := wellFormed(t, drawn(t, plant(), SVG))
	all := "|" + strings.Join(texts, "|") + "|"
	for _, want := range []string{"|demo: ballast|", "|LOW|", "|1.0 m, 0.40 bar|", "|HIGH SUCTION|shut|", "|P1|360 m3/h|", "|P2|idle|", "|COOLER 2|180 m3/h|", "|OVER|6.4 m, 0.00 bar|"} {
		if !strings.Contains(all, want) {
			t.Errorf("no %q in %s", want, all)
		}
	}
	if paths < 40 {
		t.Errorf("%d paths", paths)
	}
	unknown := plant()
	unknown.Runs[0].Flow, unknown.Points[2].Pressure = math.NaN(), math.NaN()
	texts, _ = wellFormed(t, drawn(t, unknown, SVG))
	if all := "|" + strings.Join(texts, "|") + "|"; !strings.Contains(all, "|LOW SUCTION|flow not known|") || !strings.Contains(all, "|MAIN|1.8 m|") || strings.Contains(all, "NaN") {
		t.Errorf("%s", all)
	}
}

// Water goes from left to right: every run leads to a column further on, unless it closes a loop.
func TestSchematicColumns(t *testing.T) {
	s := plant()
	edges := s.edges()
	column, count := s.columns(edges)
	for _, e := range edges {
		if e.back || column[e.to] <= column[e.from] {
			t.Errorf("%s to %s: columns %d and %d", s.Points[e.from].Name, s.Points[e.to].Name, column[e.from], column[e.to])
		}
	}
	if count != 7 || column[0] != 0 || column[9] != 6 {
		t.Errorf("%d columns, %v", count, column)
	}
	s.Runs = append(s.Runs, SchematicRun{Name: "RECIRCULATION", From: 8, To: 2, Flow: 0.02})
	edges = s.edges()
	if column, _ = s.columns(edges); column[8] != 5 || column[2] != 1 {
		t.Errorf("with a loop: %v", column)
	}
	backs := 0
	for _, e := range edges {
		if e.back {
			backs++
		}
	}
	if backs != 1 {
		t.Errorf("%d edges run back", backs)
	}
}

func TestSchematicSameBytes(t *testing.T) {
	for _, f := range []Format{SVG, PNG} {
		if !bytes.Equal(drawn(t, plant(), f), drawn(t, plant(), f)) {
			t.Errorf("%s: other bytes the second time", f)
		}
	}
}

// Odd networks give a drawing, hostile names stay text.
func TestOddSchematics(t *testing.T) {
	evil := "</text><script>x</script>" + strings.Repeat("long ", 80)
	big := Schematic{}
	for i := range 201 {
		big.Points = append(big.Points, SchematicPoint{fmt.Sprint(i), "junction", float64(i % 7), 1e5})
		if i > 0 {
			big.Runs = append(big.Runs, SchematicRun{Name: fmt.Sprint(i), From: i / 2, To: i, Flow: 0.01})
		}
	}
	big.Points[0].Kind = "tank"
	for name, s := range map[string]Schematic{
		"nothing":      {},
		"one point":    {Points: []SchematicPoint{{"A", "sea", 1, 0}}},
		"not a number": {Points: []SchematicPoint{{"A", "sea", math.NaN(), math.NaN()}, {"B", "tank", math.Inf(1), 1}}, Runs: []SchematicRun{{"R", 0, 1, math.Inf(1), false, nil}}},
		"to itself":    {Points: []SchematicPoint{{"A", "sea", 1, 0}}, Runs: []SchematicRun{{"R", 0, 0, 1, false, nil}}},
		"to nowhere":   {Points: []SchematicPoint{{"A", "sea", 1, 0}}, Runs: []SchematicRun{{"R", 0, 7, 1, false, nil}}, Pumps: []SchematicPump{{"P", -1, 0, 1, true}}},
		"a ring":       {Points: []SchematicPoint{{"A", "junction", 1, 0}, {"B", "junction", 1, 0}}, Runs: []SchematicRun{{"R", 0, 1, 1, false, nil}, {"S", 1, 0, -1, false, []string{"no such symbol"}}}},
		"hostile":      {Title: evil, Points: []SchematicPoint{{evil, evil, 1, 0}, {evil, "sea", 2, 0}}, Runs: []SchematicRun{{evil, 0, 1, 1, false, []string{evil}}}},
		"large":        big,
	} {
		svg := drawn(t, s, SVG)
		wellFormed(t, svg)
		if bytes.Contains(svg, []byte("<script")) {
			t.Errorf("%s: a script got in", name)
		}
	}
	if err := plant().Write(io.Discard, "gif", Size{}); err == nil {
		t.Error("an unknown format is drawn")
	}
}
