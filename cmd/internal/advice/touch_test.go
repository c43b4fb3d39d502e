package advice

import (
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate"
)

func TestTouchWithin(t *testing.T) {
	line := []triangulate.Segment{{From: 0, To: 1}}
	ends := []orb.Point{{0, 0}, {30, 10}}
	for _, c := range []struct {
		name     string
		pts      []orb.Point
		segs     []triangulate.Segment
		decimals int
		want     string // empty for none
		reason   string
	}{
		{"no lines", ends, nil, 3, "", "no lines"},
		{"nothing near", append(ends, orb.Point{15, 6}), line, 3, "", "no place lies within 0.0005 of a line and not on it"},
		{"exactly on it", append(ends, orb.Point{15, 5}), line, 3, "", "no place"},
		// A third of the way: (10, 3.3333...) rounded to three decimals is 0.0003 off.
		{"rounded", append(ends, orb.Point{10, 3.333}), line, 3, "0.0005", "1 place lies within half a unit"},
		{"rounded, one decimal fewer carried", append(ends, orb.Point{10, 3.33}), line, 2, "0.005", "1 place lies"},
		{"off by more than rounding", append(ends, orb.Point{10, 3.33}), line, 3, "", "no place"},
		{"two of them", append(ends, orb.Point{10, 3.333}, orb.Point{20, 6.667}), line, 3, "0.0005", "2 places lie"},
		{"whole numbers", append(ends, orb.Point{7, 2}), line, 0, "0.5", "1 place"},
		{"more decimals than numbers have", ends, line, 30000, "", "all the digits"},
	} {
		s := TouchWithin(c.pts, c.segs, c.decimals)
		got := ""
		if s.OK {
			got = s.Value.String()
		}
		if got != c.want || !strings.Contains(s.Reason, c.reason) {
			t.Errorf("%s: %q because %s, want %q because ...%s", c.name, got, s.Reason, c.want, c.reason)
		}
	}
}
