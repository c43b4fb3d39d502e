package reference

import (
	"encoding/json"
	"math"
	"os"
	"slices"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate/exact"
)

func fileRows(t *testing.T, path string) []row {
	t.Helper()
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return rows(t, path, string(text))
}

func length(a, b orb.Point) float64 { return math.Hypot(b[0]-a[0], b[1]-a[1]) }

// outline returns every rim of a surface: the rings of the one band below a level that
// nothing reaches.
func outline(t *testing.T, args ...string) []orb.Ring {
	t.Helper()
	text := isofacet(t, append([]string{"contour", "--bands", "--levels", "1000000", "--format", "geojson", "--decimals", "full"}, args...)...)
	var written struct {
		Features []struct {
			Geometry struct {
				Type        string
				Coordinates json.RawMessage
			}
		}
	}
	if err := json.Unmarshal([]byte(text), &written); err != nil {
		t.Fatal(err)
	}
	var rims []orb.Ring
	for _, f := range written.Features {
		polygons := make([]orb.Polygon, 1)
		var into any = &polygons[0]
		if f.Geometry.Type == "MultiPolygon" {
			into = &polygons
		}
		if err := json.Unmarshal(f.Geometry.Coordinates, into); err != nil {
			t.Fatal(err)
		}
		for _, p := range polygons {
			rims = append(rims, p...)
		}
	}
	if len(rims) == 0 {
		t.Fatal("no outline")
	}
	return rims
}

// within tells whether p lies inside an odd number of rings, and how far from the
// nearest of them it is.
func within(rings []orb.Ring, p orb.Point) (inside bool, off float64) {
	off = math.Inf(1)
	for _, ring := range rings {
		for i := 1; i < len(ring); i++ {
			a, b := ring[i-1], ring[i]
			if (a[1] <= p[1]) != (b[1] <= p[1]) && (exact.Orient(a, b, p) < 0) == (b[1] > a[1]) {
				inside = !inside
			}
			off = min(off, fromSegment(a, b, p))
		}
	}
	return inside, off
}

func fromSegment(a, b, p orb.Point) float64 {
	dx, dy := b[0]-a[0], b[1]-a[1]
	at := min(max(((p[0]-a[0])*dx+(p[1]-a[1])*dy)/(dx*dx+dy*dy), 0), 1)
	return math.Hypot(p[0]-a[0]-at*dx, p[1]-a[1]-at*dy)
}

// properCrossings counts pairs of segments that cross between their ends, by exact
// signs.
func properCrossings(lines []line) int {
	type segment struct{ a, b orb.Point }
	var all []segment
	for _, l := range lines {
		for i := 1; i < len(l.at); i++ {
			s := segment{l.at[i-1], l.at[i]}
			if s.b[0] < s.a[0] {
				s.a, s.b = s.b, s.a
			}
			all = append(all, s)
		}
	}
	slices.SortFunc(all, func(p, q segment) int { return exact.CompareXY(p.a, q.a) })
	n := 0
	for i, s := range all {
		for _, o := range all[i+1:] {
			if o.a[0] > s.b[0] {
				break
			}
			if max(o.a[1], o.b[1]) < min(s.a[1], s.b[1]) || min(o.a[1], o.b[1]) > max(s.a[1], s.b[1]) {
				continue
			}
			if exact.Orient(s.a, s.b, o.a)*exact.Orient(s.a, s.b, o.b) < 0 && exact.Orient(o.a, o.b, s.a)*exact.Orient(o.a, o.b, s.b) < 0 {
				n++
			}
		}
	}
	return n
}
