package reference

import (
	"math"
	"strings"
	"testing"

	"github.com/paulmach/orb"
)

// line is one isoline as the program writes it.
type line struct {
	level  float64
	closed bool
	at     []orb.Point
}

func (l line) length() float64 {
	sum := 0.0
	for i := 1; i < len(l.at); i++ {
		sum += math.Hypot(l.at[i][0]-l.at[i-1][0], l.at[i][1]-l.at[i-1][1])
	}
	return sum
}

// isolines runs contour and puts the vertices of its table together. What holds
// for every line is checked here: pieces have a length, and a closed line ends
// where it begins, an open one does not.
func isolines(t *testing.T, args ...string) []line {
	t.Helper()
	text := isofacet(t, append([]string{"contour", "--format", "csv", "--decimals", "full"}, args...)...)
	var lines []line
	last := ""
	for _, r := range rows(t, "contour", text) {
		if name := r.get(t, "line"); name != last {
			lines, last = append(lines, line{level: r.number(t, "level")}), name
			switch closed := r.get(t, "closed"); closed {
			case "true":
				lines[len(lines)-1].closed = true
			case "false":
			default:
				t.Fatalf("%s: closed is %q, want true or false", r.name, closed)
			}
		}
		l := &lines[len(lines)-1]
		same(t, r.name+": level", r.number(t, "level"), l.level)
		p := r.point(t, "x", "y")
		if n := len(l.at); n > 0 && l.at[n-1] == p {
			t.Errorf("%s: the piece to %v has no length", r.name, p)
		}
		l.at = append(l.at, p)
	}
	for _, l := range lines {
		if len(l.at) < 2 || l.closed != (l.at[0] == l.at[len(l.at)-1]) {
			t.Errorf("line at level %v from %v to %v with %d vertices: closed is %v", l.level, l.at[0], l.at[len(l.at)-1], len(l.at), l.closed)
		}
	}
	return lines
}

// tally is what tables say of the lines of a level.
type tally struct {
	length       float64
	open, closed int
}

func tallies(lines []line) map[float64]tally {
	out := map[float64]tally{}
	for _, l := range lines {
		c := out[l.level]
		c.length += l.length()
		if l.closed {
			c.closed++
		} else {
			c.open++
		}
		out[l.level] = c
	}
	return out
}

// levels is the --levels list of a table.
func levels(t *testing.T, all []row, column string) string {
	t.Helper()
	var out []string
	for _, r := range all {
		out = append(out, r.get(t, column))
	}
	return strings.Join(out, ",")
}

// TestIsolines compares lengths and numbers of open and closed lines, at levels
// that no reading has. Source: computed for this project; the triangle contours of
// matplotlib 3.6.3 agree with the lengths within 2e-13.
func TestIsolines(t *testing.T) {
	each(t, func(t *testing.T, d dataset) {
		all := table(t, "datasets/"+d.name+"_isolines.csv")
		got := tallies(isolines(t, append(d.readings(t), "--levels", levels(t, all, "level"))...))
		same(t, "levels with lines", len(got), len(all))
		length := compare(t, "length of isolines")
		for _, r := range all {
			c := got[r.number(t, "level")]
			length.part(r.name, c.length, r.number(t, "total_length_unit"), 1e-9)
			same(t, r.name+": open lines", c.open, r.count(t, "open_lines"))
			same(t, r.name+": closed lines", c.closed, r.count(t, "closed_lines"))
		}
	})
}

// The diagonals of a lattice are those of the tie rule: north west to south east.
// Source: computed for this project, printed to 9 digits. The lines have the
// same ends as those of the squares, so open lines are as many.
func TestVolcanoIsolines(t *testing.T) {
	all := table(t, "datasets/volcano_isolines_tin.csv")
	squares := table(t, "datasets/volcano_isolines_contourpy.csv")
	got := tallies(isolines(t, append(volcano(t), "--levels", levels(t, all, "level_m"))...))
	same(t, "levels with lines", len(got), len(all))
	length := compare(t, "length of isolines")
	for _, r := range all {
		c := got[r.number(t, "level_m")]
		length.part(r.name, c.length, r.number(t, "length_m_other_diagonal"), 1e-8)
		same(t, r.name+": open lines", c.open, only(t, squares, "level_m", r.get(t, "level_m")).count(t, "open_lines"))
	}
}

// The other way, through the raster's squares: grid writes the readings as a
// raster, contour follows it, the mean of the four corners deciding a saddle.
// Source: contourpy 1.0.7, printed to 9 digits. At 180.5 the mean of one saddle's
// corners is the level itself, which counts as above here: there the two closed
// lines are one, of the same length.
func TestVolcanoIsolinesOfRaster(t *testing.T) {
	all := table(t, "datasets/volcano_isolines_contourpy.csv")
	raster := file(t, "volcano.csv", isofacet(t, append([]string{"grid", "--cell", "10", "--values-at", "corners"}, volcano(t)...)...))
	got := tallies(isolines(t, "--from-raster", raster, "--levels", levels(t, all, "level_m")))
	same(t, "levels with lines", len(got), len(all))
	length := compare(t, "length of isolines")
	for _, r := range all {
		c, closed := got[r.number(t, "level_m")], r.count(t, "closed_lines")
		if r.get(t, "level_m") == "180.5" {
			same(t, r.name+": closed lines of contourpy", closed, 2)
			closed = 1
		}
		length.part(r.name, c.length, r.number(t, "total_length_m_marching_squares"), 1e-8)
		same(t, r.name+": open lines", c.open, r.count(t, "open_lines"))
		same(t, r.name+": closed lines", c.closed, closed)
	}
}

// TestPlaneIsolines: on z = 2 + 0.03 x - 0.02 y every line is straight, level L
// along 0.03 x - 0.02 y = L - 2, from outline to outline, higher ground (towards
// larger x) on its left. Source: the plane's equation. A vertex is as exact as
// the heights in its edge allow: 1e-9 of the side.
func TestPlaneIsolines(t *testing.T) {
	plane := func(x, y float64) float64 { return 2 + 0.03*x - 0.02*y }
	const side = 1000.0
	pts := []orb.Point{{0, 0}, {side, 0}, {0, side}, {side, side}}
	for i := range 500 { // spread evenly: a Weyl sequence
		_, x := math.Modf(float64(i) * (math.Sqrt(5) - 1) / 2)
		_, y := math.Modf(float64(i) * (math.Sqrt2 - 1))
		pts = append(pts, orb.Point{x * side, y * side})
	}
	lines := isolines(t, readings(t, pts, plane), "--interval", "2.5")
	same(t, "number of lines", len(lines), 20) // heights from -18 to 32: -17.5, -15, ... 30
	place, length := compare(t, "place"), compare(t, "length")
	for _, l := range lines {
		if l.closed {
			t.Errorf("the line at level %v is closed", l.level)
		}
		for _, p := range l.at {
			place.near("level", plane(p[0], p[1]), l.level, 1e-9)
		}
		first, last := l.at[0], l.at[len(l.at)-1]
		length.part("level", l.length(), math.Hypot(last[0]-first[0], last[1]-first[1]), 1e-12)
		// Higher ground lies towards (3, -2), which is left of (-2, -3).
		if dx, dy := last[0]-first[0], last[1]-first[1]; !(dx < 0 && dy < 0) {
			t.Errorf("the line at level %v runs along (%v, %v), higher ground on its right", l.level, dx, dy)
		}
		for _, p := range []orb.Point{first, last} {
			if rim := min(p[0], side-p[0], p[1], side-p[1]); math.Abs(rim) > 1e-9*side {
				t.Errorf("the line at level %v ends at %v, inside", l.level, p)
			}
		}
	}
}

// TestSaddleSquare: on a unit square with corners 0, 1, 0, 1 both diagonals are
// right. The one taken joins the two corners of 1, so that the lines of 0.5 cut
// off the two of 0 and never cross. Source: tie rule; by hand.
func TestSaddleSquare(t *testing.T) {
	square := file(t, "square.csv", "x,y,z\n0,0,0\n1,0,1\n1,1,0\n0,1,1\n")
	lines := isolines(t, square, "--levels", "0.5")
	// Higher ground on the left.
	want := [][]orb.Point{{{0, 0.5}, {0.5, 0}}, {{1, 0.5}, {0.5, 1}}}
	same(t, "number of lines", len(lines), len(want))
	found := 0
	for _, l := range lines {
		same(t, "closed", l.closed, false)
		for _, w := range want {
			if len(l.at) == 2 && l.at[0] == w[0] && l.at[1] == w[1] {
				found++
			}
		}
	}
	same(t, "number of lines found", found, 2)
	// And the surface agrees: at the centre it is the diagonal's middle, 1.
	same(t, "value at the centre", query(t, "0.5,0.5", square)[0].number(t, "surface_z"), 1)
}

// TestFlatTop: 4 x 4 readings of 0 but for a flat top of 2 x 2 at 1. A value equal
// to the level counts as above it, so the line of 1 is the rim of the top: one
// ring, of length 4, without a piece of no length. Source: by hand.
func TestFlatTop(t *testing.T) {
	var pts []orb.Point
	for i := range 4 {
		for j := range 4 {
			pts = append(pts, orb.Point{float64(i), float64(j)})
		}
	}
	top := readings(t, pts, func(x, y float64) float64 {
		if min(x, y) >= 1 && max(x, y) <= 2 {
			return 1
		}
		return 0
	})
	lines := isolines(t, top, "--levels", "1")
	same(t, "number of lines", len(lines), 1)
	same(t, "closed", lines[0].closed, true)
	same(t, "length", lines[0].length(), 4)
	for _, p := range lines[0].at {
		if min(p[0], p[1]) < 1 || max(p[0], p[1]) > 2 {
			t.Errorf("the ring passes %v, off the top", p)
		}
	}
	// Turning left, with higher ground inside.
	same(t, "area of the ring", ringArea(lines[0].at), 1)
}
