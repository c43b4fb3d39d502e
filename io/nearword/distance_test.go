package nearword_test

import (
	"testing"

	"isofacet/io/nearword"
)

func TestDistance(t *testing.T) {
	for _, c := range []struct {
		a, b string
		want int
	}{
		{"", "", 0}, {"", "abc", 3}, {"abc", "", 3}, {"abc", "abc", 0},
		{"kitten", "sitting", 3}, // the usual example of the measure
		{"intreval", "interval", 1}, {"ca", "abc", 3}, {"cel", "cell", 1},
	} {
		if got := nearword.Distance(c.a, c.b); got != c.want || nearword.Distance(c.b, c.a) != c.want {
			t.Errorf("from %q to %q: %d, want %d both ways", c.a, c.b, got, c.want)
		}
	}
}
