package hydraulics

import (
	"brinehead/spelling"
	"fmt"
	"slices"
	"strings"
	"unicode"
)

// UnknownNameError refuses a name that no catalogue has, or one that fits several of its entries.
type UnknownNameError struct {
	Kind    string   // what was looked for: "pipe standard", "size of EN 10220", "series of JIS G3454", "material"
	Name    string   // as the user wrote it
	Nearest []string // names that may be written instead, the nearest first; empty where none is near
	Hint    string   // what else to do; may be empty
}

// Error names what was found and the nearest known names; the hint is left to whoever prints hints.
func (e *UnknownNameError) Error() string {
	text := fmt.Sprintf("%s: found %q, want a name in the catalogue", e.Kind, e.Name)
	if len(e.Nearest) > 0 {
		text += fmt.Sprintf(", such as %q", e.Nearest[0])
		for _, name := range e.Nearest[1:] {
			text += fmt.Sprintf(", %q", name)
		}
	}
	return text
}

// nameWords breaks a name into lower-case words and numbers, so that case, spaces, punctuation and joined writing
// make no difference: "DN200", "dn 200" and "DN-200" are all dn, 200. A point or comma between two digits is a
// decimal sign, and the sign of multiplication is the letter x.
func nameWords(text string) []string {
	text = strings.ToLower(strings.ReplaceAll(text, "×", "x"))
	var found []string
	var word []rune
	end := func() {
		if len(word) > 0 {
			found = append(found, string(word))
		}
		word = nil
	}
	letters := []rune(text)
	for i, c := range letters {
		inNumber := len(word) > 0 && unicode.IsDigit(word[len(word)-1])
		inWord := len(word) > 0 && unicode.IsLetter(word[len(word)-1])
		switch {
		case unicode.IsDigit(c):
			if inWord {
				end()
			}
			word = append(word, c)
		case unicode.IsLetter(c):
			if inNumber {
				end()
			}
			word = append(word, c)
		case (c == '.' || c == ',') && inNumber && i+1 < len(letters) && unicode.IsDigit(letters[i+1]):
			word = append(word, '.')
		default:
			end()
		}
	}
	end()
	return found
}

// wayToWrite is one way to write a catalogue's name.
type wayToWrite struct{ text, name string }

// nearestNames returns up to three names of the catalogue whose spellings lie nearest to what was written, the
// nearest first. A spelling that differs in more than a third of its letters is not near.
func nearestNames(wanted string, known []wayToWrite) []string {
	type candidate struct {
		name     string
		distance int
	}
	var near []candidate
	want := strings.Join(nameWords(wanted), " ")
	for _, k := range known {
		text := strings.Join(nameWords(k.text), " ")
		most := max(len(want), len(text)) / 3
		if max(len(want)-len(text), len(text)-len(want)) > most {
			continue
		}
		if d := spelling.Distance(want, text); d <= most {
			near = append(near, candidate{k.name, d})
		}
	}
	slices.SortStableFunc(near, func(a, b candidate) int { return a.distance - b.distance })
	var names []string
	for _, c := range near {
		if !slices.Contains(names, c.name) && len(names) < 3 {
			names = append(names, c.name)
		}
	}
	return names
}
