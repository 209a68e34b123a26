package report

import (
	"encoding/json"
	"io"
)

// WriteJSON writes an answer of package study with the keys it gives its fields. They are a contract; see the README.
func WriteJSON(w io.Writer, answer any) error {
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	e.SetEscapeHTML(false)
	return e.Encode(answer)
}
