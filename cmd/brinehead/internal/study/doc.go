// Package study answers the engineer's questions about a job: is every limit met, and if not, which and why.
//
// Its answers are plain data in the units their names state, ready to be written as text, JSON or CSV. What is not
// known is no number: a Figure that holds NaN, written as null.
package study

import (
	"encoding/json"
	"math"
)

// Figure is a number that may be unknown: NaN or infinite, which JSON writes as null.
type Figure float64

// Unknown is the figure that is not known.
var unknown = Figure(math.NaN())

// Known says whether the figure is a finite number.
func (f Figure) Known() bool { return !math.IsNaN(float64(f)) && !math.IsInf(float64(f), 0) }

// MarshalJSON writes the figure with the digits that computing can warrant, or null.
func (f Figure) MarshalJSON() ([]byte, error) {
	if !f.Known() {
		return []byte("null"), nil
	}
	return json.Marshal(roundTo(float64(f), 9))
}

// UnmarshalJSON reads what MarshalJSON writes.
func (f *Figure) UnmarshalJSON(text []byte) error {
	if string(text) == "null" {
		*f = unknown
		return nil
	}
	return json.Unmarshal(text, (*float64)(f))
}

// roundTo rounds to a number of significant digits, so that the last bits of a sum do not show.
func roundTo(x float64, digits int) float64 {
	if x == 0 {
		return 0
	}
	scale := math.Pow(10, float64(digits-1)-math.Floor(math.Log10(math.Abs(x))))
	return math.Round(x*scale) / scale
}

// Unknown returns the figure that is not known.
func Unknown() Figure { return unknown }
