package hydraulics

import (
	"slices"
	"strings"
	"testing"
)

func TestMarkMeaning(t *testing.T) {
	for mark, want := range map[Mark]string{MarkRead: "read in the source named",
		MarkReadTwice: "read in two sources that agree", MarkFromMemory: "from memory, source still to be opened",
		"": "unknown mark", "M?": "unknown mark"} {
		if got := mark.Meaning(); got != want {
			t.Errorf("%q: got %q, want %q", mark, got, want)
		}
	}
}

func TestNameWords(t *testing.T) {
	for text, want := range map[string]string{
		"DN200":         "dn|200",
		"dn - 200":      "dn|200",
		"200A Sch40":    "200|a|sch|40",
		"219,1×8.18mm":  "219.1|x|8.18|mm",
		"B36.10M":       "b|36.10|m",
		"90/10 CuNi":    "90|10|cuni",
		"CuNi10Fe1.6Mn": "cuni|10|fe|1.6|mn",
		"8. 5":          "8|5",
		".5":            "5",
		" ,. ":          "",
		"":              "",
		"1.2.3":         "1.2.3", // no number, and refused as one
		"Ö\xff2":        "ö|2",
	} {
		if got := strings.Join(nameWords(text), "|"); got != want {
			t.Errorf("%q: got %q, want %q", text, got, want)
		}
	}
}

func TestNearestNames(t *testing.T) {
	known := []wayToWrite{{"copper", "copper"}, {"drawn copper", "copper"}, {"coppers", "coppers"}, {"brass", "brass"},
		{"cupper", "cupper"}, {"capper", "capper"}, {"Copper-Nickel", "alloy"}}
	for wanted, want := range map[string][]string{
		"COPPER":        {"copper", "coppers", "cupper"}, // three at most, each once, ties as they stand in the list
		"copper nickle": {"alloy"},
		"bras":          {"brass"},
		"granite":       nil,
		"":              nil,
	} {
		if got := nearestNames(wanted, known); !slices.Equal(got, want) {
			t.Errorf("%q: got %q, want %q", wanted, got, want)
		}
	}
}

func TestUnknownNameError(t *testing.T) {
	for _, c := range []struct {
		err  UnknownNameError
		want string
	}{
		{UnknownNameError{Kind: "material", Name: "granite", Hint: "not printed"}, `material: found "granite", want a name in the catalogue`},
		{UnknownNameError{Kind: "material", Name: "bras", Nearest: []string{"brass"}},
			`material: found "bras", want a name in the catalogue, such as "brass"`},
	} {
		if got := c.err.Error(); got != c.want {
			t.Errorf("got %s, want %s", got, c.want)
		}
	}
}
