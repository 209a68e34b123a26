package plots

import (
	"io"

	"gonum.org/v1/plot/vg"
)

// Onto draws a chart, by its Write, onto a page that someone else writes: a canvas whose origin is the chart's lower left corner, of a
// size in mm.
func Onto(canvas vg.Canvas, size Size, write func(w io.Writer, format Format, size Size) error) error {
	return write(page{canvas}, onPage, size)
}

// onPage is the format of a chart that goes onto another's page.
const onPage Format = "page"

// page carries a canvas where a writer is asked for; nothing is ever written to it.
type page struct{ vg.Canvas }

func (page) Write(b []byte) (int, error) { return len(b), nil }

// NaturalSize returns the size that a chart takes where none is given, in mm.
func NaturalSize(write func(w io.Writer, format Format, size Size) error) (Size, error) {
	var m measure
	err := write(&m, onPage, Size{})
	return m.size, err
}

// measure takes a chart's size and no more.
type measure struct{ size Size }

func (*measure) Write(b []byte) (int, error) { return len(b), nil }
