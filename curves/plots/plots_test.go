package plots

import (
	"bytes"
	"encoding/xml"
	"errors"
	"image/png"
	"io"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"
)

// sample is a pump of 24 m at 400 m3/h with its system, in SI.
func sample() (HeadChart, NPSHChart) {
	flow := func(n int, low, high float64) []float64 {
		x := make([]float64, n)
		for i := range x {
			x[i] = (low + (high-low)*float64(i)/float64(n-1)) / 3600
		}
		return x
	}
	along := func(x []float64, f func(q float64) float64) []float64 {
		y := make([]float64, len(x))
		for i := range x {
			y[i] = f(x[i] * 3600 / 400)
		}
		return y
	}
	head := func(q float64) float64 { return 31 - 7*q*q }
	required := func(q float64) float64 { return 2 + 1.6*q*q }
	inside, outside, points := flow(41, 0, 560), flow(9, 560, 630), flow(8, 0, 560)
	h := HeadChart{Title: "demo: ballast", Subtitle: "sea water 32 degC",
		Pumps: []PumpLine{{Line: Line{"P1, P2", inside, along(inside, head)}, Digitised: Line{"", points, along(points, head)},
			Beyond: []Line{{"", outside, along(outside, head)}}}},
		Systems: []Line{{"system of P1, P2", inside, along(inside, func(q float64) float64 { return 2 + 22*q*q })}},
		Duty:    []Mark{{"P1, P2", "P1, P2: 400 m3/h, 24.0 m", 400.0 / 3600, 24}},
		Bounds:  []Bound{{"70 % of best", 280.0 / 3600, true}, {"120 % of best", 480.0 / 3600, false}}}
	n := NPSHChart{Title: h.Title, Subtitle: h.Subtitle,
		Available: []Line{{"available, P1, P2", inside, along(inside, func(q float64) float64 { return 12 - 2.5*q*q })}},
		Required:  []PumpLine{{Line: Line{"required, P1, P2", inside, along(inside, required)}, Digitised: Line{"", points, along(points, required)}}},
		Rule:      []Line{{"required and margin", inside, along(inside, func(q float64) float64 { return required(q) + 1 })}},
		Duty:      []Mark{{"P1, P2", "P1, P2: 9.5 m", 400.0 / 3600, 9.5}}, Bounds: h.Bounds}
	return h, n
}

type chart interface {
	Write(w io.Writer, format Format, size Size) error
}

func drawn(t *testing.T, c chart, f Format) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := c.Write(&b, f, Size{}); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// wellFormed reads an SVG to its end and returns its texts and the count of its paths.
func wellFormed(t *testing.T, svg []byte) (texts []string, paths int) {
	t.Helper()
	d := xml.NewDecoder(bytes.NewReader(svg))
	inText := false
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			return texts, paths
		}
		if err != nil {
			t.Fatalf("no well-formed XML: %v", err)
		}
		switch e := token.(type) {
		case xml.StartElement:
			inText = e.Name.Local == "text"
			if e.Name.Local == "path" {
				paths++
			}
		case xml.EndElement:
			inText = false
		case xml.CharData:
			if inText {
				texts = append(texts, string(e))
			}
		}
	}
}

// Everything a chart says is in it as text, and text can be selected.
func TestChartsSayWhatTheyShow(t *testing.T) {
	head, npsh := sample()
	for _, c := range []struct {
		chart chart
		want  []string
	}{
		{head, []string{"demo: ballast", "sea water 32 degC", "flow [m3/h]", "head [m]", "P1, P2", "system of P1, P2", "P1, P2: 400 m3/h, 24.0 m", "70 % of best", "120 % of best", "0", "600", "50"}},
		{npsh, []string{"NPSH [m]", "available, P1, P2", "required, P1, P2", "required and margin", "P1, P2: 9.5 m", "margin 5.9 m"}},
	} {
		texts, paths := wellFormed(t, drawn(t, c.chart, SVG))
		for _, want := range c.want {
			found := false
			for _, text := range texts {
				found = found || text == want
			}
			if !found {
				t.Errorf("no %q among %q", want, texts)
			}
		}
		if paths < 40 { // frame, grid, hatches, lines, rings
			t.Errorf("%d paths", paths)
		}
	}
}

func TestSameDataSameBytes(t *testing.T) {
	head, npsh := sample()
	for _, c := range []chart{head, npsh} {
		for _, f := range []Format{SVG, PNG} {
			if !bytes.Equal(drawn(t, c, f), drawn(t, c, f)) {
				t.Errorf("%s: other bytes the second time", f)
			}
		}
	}
}

// The PNG has the size asked for, at 150 dots to the inch, and is not blank.
func TestPNGSize(t *testing.T) {
	head, _ := sample()
	picture, err := png.Decode(bytes.NewReader(drawn(t, head, PNG)))
	if err != nil {
		t.Fatal(err)
	}
	if s := picture.Bounds().Size(); math.Abs(float64(s.X)-160/25.4*150) > 1 || math.Abs(float64(s.Y)-110/25.4*150) > 1 {
		t.Errorf("%v", s)
	}
	dark := 0
	for y := range picture.Bounds().Dy() {
		for x := range picture.Bounds().Dx() {
			if r, _, _, _ := picture.At(x, y).RGBA(); r < 0x8000 {
				dark++
			}
		}
	}
	if dark < 2000 {
		t.Errorf("%d dark dots", dark)
	}
	if pdf := drawn(t, head, PDF); !bytes.HasPrefix(pdf, []byte("%PDF-")) {
		t.Errorf("PDF begins with %q", pdf[:8])
	}
}

// No label covers another or an operating point, and none leaves the frame, on the sample charts.
func TestLabelsKeepClear(t *testing.T) {
	head, npsh := sample()
	for name, f := range map[string]*figure{"head": head.figure(), "NPSH": npsh.figure()} {
		f.plot().Draw(draw.New(vgimg.New(160*vg.Millimeter, 100*vg.Millimeter)))
		boxes := f.drawn.boxes
		if len(boxes) < 6 {
			t.Errorf("%s: %d labels and marks", name, len(boxes))
		}
		for i, a := range boxes {
			if frame := f.drawn.canvas.Rectangle; a.Min.X < frame.Min.X || a.Max.X > frame.Max.X || a.Min.Y < frame.Min.Y || a.Max.Y > frame.Max.Y {
				t.Errorf("%s: %v leaves the frame %v", name, a, frame)
			}
			for _, b := range boxes[:i] {
				if a.Min.X < b.Max.X && b.Min.X < a.Max.X && a.Min.Y < b.Max.Y && b.Min.Y < a.Max.Y {
					t.Errorf("%s: %v covers %v", name, a, b)
				}
			}
		}
	}
}

// User text cannot break out of the SVG.
func TestHostileText(t *testing.T) {
	head, _ := sample()
	evil := "</text><script>alert('\"&')</script>\x00\x1b\xff" + strings.Repeat("long ", 100)
	head.Title, head.Subtitle, head.Systems[0].Name, head.Pumps[0].Name, head.Duty[0].Label, head.Bounds[0].Name = evil, evil, evil, evil, evil, evil
	svg := drawn(t, head, SVG)
	texts, _ := wellFormed(t, svg)
	if bytes.Contains(svg, []byte("<script")) {
		t.Error("a script got in")
	}
	if !strings.HasPrefix(texts[0], "</text><script>alert(") || !strings.HasSuffix(texts[0], "…") {
		t.Errorf("title %q", texts[0])
	}
}

// Odd data give a drawing, never a panic.
func TestOddData(t *testing.T) {
	nan := math.NaN()
	for name, c := range map[string]chart{
		"nothing":      HeadChart{},
		"no NPSH":      NPSHChart{},
		"one point":    HeadChart{Pumps: []PumpLine{{Line: Line{"P", []float64{0.1}, []float64{20}}}}},
		"all NaN":      HeadChart{Systems: []Line{{"S", []float64{0, nan}, []float64{nan, 3}}}},
		"infinite":     HeadChart{Systems: []Line{{"S", []float64{0, 1}, []float64{math.Inf(1), 3}}}, Duty: []Mark{{"P", "P", math.Inf(1), nan}}},
		"all equal":    HeadChart{Systems: []Line{{"S", []float64{0.1, 0.1}, []float64{3, 3}}}},
		"negative":     HeadChart{Systems: []Line{{"S", []float64{0, 0.1}, []float64{-5, -3}}}},
		"ragged":       HeadChart{Systems: []Line{{"S", []float64{0, 0.1, 0.2}, []float64{1}}}},
		"tiny":         HeadChart{Systems: []Line{{"S", []float64{0, 1e-9}, []float64{0, 1e-9}}}},
		"huge":         HeadChart{Systems: []Line{{"S", []float64{0, 1e9}, []float64{0, 1e9}}}},
		"margin alone": NPSHChart{Required: []PumpLine{{Line: Line{"required, P", []float64{0, 0.2}, []float64{2, 3}}}}, Duty: []Mark{{"P", "P", 0.1, 8}}},
	} {
		for _, f := range []Format{SVG, PNG} {
			if b := drawn(t, c, f); len(b) < 500 {
				t.Errorf("%s: %d bytes of %s", name, len(b), f)
			}
		}
	}
	if err := (HeadChart{}).Write(io.Discard, "gif", Size{}); err == nil || !strings.Contains(err.Error(), `found format "gif", want svg, png or pdf`) {
		t.Errorf("%v", err)
	}
}

func TestSteps(t *testing.T) {
	for most, want := range map[float64][2]float64{630: {700, 8}, 35: {35, 8}, 0.07: {0.07, 8}, 9: {9, 10}, 1: {1, 6}} {
		ticks, bottom, top := steps(0, most)
		if !(math.Abs(top-want[0]) < 1e-9) || bottom != 0 || len(ticks) != int(want[1]) || ticks[0].Label[0] != '0' {
			t.Errorf("%g: %d ticks to %g, want %g to %g", most, len(ticks), top, want[1], want[0])
		}
	}
	if ticks, bottom, top := steps(-3.2, 11); bottom != -4 || top != 12 || ticks[0].Label != "-4" {
		t.Errorf("from -3.2 to 11: %g to %g, first %q", bottom, top, ticks[0].Label)
	}
}

func TestUnitsOfAxes(t *testing.T) {
	head, _ := sample()
	head.Units = Units{FlowName: "gpm (US)", FlowFactor: 15850.3, HeadName: "ft", HeadFactor: 3.28084}
	texts, _ := wellFormed(t, drawn(t, head, SVG))
	if all := strings.Join(texts, "|"); !strings.Contains(all, "|flow [gpm (US)]|") || !strings.Contains(all, "|head [ft]|") || !strings.Contains(all, "|2500|") {
		t.Errorf("%s", all)
	}
}
