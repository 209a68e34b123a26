package spelling

import "testing"

func TestDistance(t *testing.T) {
	for _, c := range []struct {
		a, b string
		want int
	}{
		{"", "", 0}, {"pipe", "pipe", 0}, {"", "pipe", 4}, {"pipe", "pip", 1}, {"pipe", "pipes", 1}, {"pipe", "pope", 1},
		{"pipe", "ippe", 1}, {"sgp", "spg", 1}, {"abcd", "dcba", 3}, {"ca", "abc", 3}, // 2 if a letter could be touched twice
		{"kitten", "sitting", 3}, {"für", "fur", 1},
	} {
		if got := Distance(c.a, c.b); got != c.want {
			t.Errorf("%q to %q: %d, want %d", c.a, c.b, got, c.want)
		}
		if got := Distance(c.b, c.a); got != c.want {
			t.Errorf("%q to %q: %d, want %d", c.b, c.a, got, c.want)
		}
	}
}
