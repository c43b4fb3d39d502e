package gen

import (
	"math"
	"testing"
)

// The pieces tile the site, and at every corner of every piece the piece's
// plane is the surface: nothing was cut wrongly.
func TestPiecesTileTheSite(t *testing.T) {
	s, sum := pit(), 0.0
	for _, p := range pitPieces() {
		a := p.ring.area()
		if a < 0 {
			t.Errorf("a piece of %s runs clockwise", p.top.name)
		}
		sum += a
		for _, c := range p.ring {
			if d := s.top(c.u, c.v).z(c.u, c.v) - p.top.z(c.u, c.v); math.Abs(d) > 1e-6 {
				t.Errorf("%s at (%.3f, %.3f) is %g m off the surface", p.top.name, c.u, c.v, d)
			}
		}
	}
	if math.Abs(sum-siteEast*siteNorth) > 1e-6 {
		t.Errorf("pieces cover %v square metres of %v", sum, siteEast*siteNorth)
	}
}

// Volumes and areas against a plain sum over a half-metre lattice, whose
// error is well below the tolerance of 0.1 percent.
func TestVolumesAgainstALattice(t *testing.T) {
	const step = 0.5
	s := pit()
	dug, pit, heap, base := 0.0, 0.0, 0.0, 0.0
	for i := range int(siteEast / step) {
		for j := range int(siteNorth / step) {
			u, v := (float64(i)+0.5)*step, (float64(j)+0.5)*step
			g := ground.z(u, v)
			p := s.top(u, v)
			if p.name != "ground" {
				pit++
			}
			dug += g - p.z(u, v)
			if h := pileZ(u, v); h > g {
				heap += h - g
				base++
			}
		}
	}
	wantDug, wantPit := 0.0, 0.0
	for _, p := range pitPieces() {
		wantDug += p.ring.volume(ground) - p.ring.volume(p.top)
		if p.top.name != "ground" {
			wantPit += p.ring.area()
		}
	}
	for _, c := range []struct {
		name      string
		got, want float64
		relative  float64
	}{
		{"pit volume", dug * step * step, wantDug, 1e-3},
		{"pit area", pit * step * step, wantPit, 2e-3},
		{"stockpile volume", heap * step * step, pileVolume(), 1e-3},
		{"stockpile area", base * step * step, pileArea(), 5e-3},
	} {
		if math.Abs(c.got/c.want-1) > c.relative {
			t.Errorf("%s: lattice %.2f, formula %.2f", c.name, c.got, c.want)
		}
	}
}

// Hand-made cases of the cut, with areas that are plain to see.
func TestCut(t *testing.T) {
	square := polygon{{0, 0}, {1, 0}, {1, 1}, {0, 1}}
	for _, c := range []struct {
		name         string
		diff         plane
		below, above float64
	}{
		{"half", plane{1, 0, -0.5, ""}, 0.5, 0.5},
		{"diagonal", plane{1, -1, 0, ""}, 0.5, 0.5},
		{"corner", plane{1, 1, -1.5, ""}, 0.875, 0.125},
		{"all below", plane{1, 0, -2, ""}, 1, 0},
		{"all above", plane{1, 0, 2, ""}, 0, 1},
		{"along a side", plane{1, 0, 0, ""}, 0, 1},
		{"level and equal", plane{0, 0, 0, ""}, 1, 0},
	} {
		below, above := square.cut(c.diff)
		if math.Abs(below.area()-c.below) > 1e-12 || math.Abs(above.area()-c.above) > 1e-12 {
			t.Errorf("%s: areas %v and %v, want %v and %v", c.name, below.area(), above.area(), c.below, c.above)
		}
	}
	// The volume under z = x over the unit square is a half.
	if got := square.volume(plane{1, 0, 0, ""}); math.Abs(got-0.5) > 1e-15 {
		t.Errorf("volume %v, want 0.5", got)
	}
}

// Rims that nothing interrupts are closed, others end where the ramp is.
func TestMeetingLines(t *testing.T) {
	s, pieces := pit(), pitPieces()
	for _, c := range []struct {
		one, other string
		lines      int
		closed     bool
	}{
		{"water", "bank", 1, true},
		{"floor", "bank", 1, true},
		{"ground", "upper face", 1, false},
		{"bench", "lower face", 1, false},
		{"ramp", "ramp side", 2, false},
		{"ground", "ramp", 1, false},
		{"ground", "floor", 0, false},
	} {
		lines := meeting(s, pieces, c.one, c.other)
		if len(lines) != c.lines {
			t.Errorf("%s and %s meet in %d lines, want %d", c.one, c.other, len(lines), c.lines)
		}
		for _, l := range lines {
			if closed := distance(l[0], l[len(l)-1]) < 1e-3; closed != c.closed {
				t.Errorf("%s and %s: closed %v, want %v", c.one, c.other, closed, c.closed)
			}
			for _, p := range l {
				a, b := s.top(p.u, p.v).z(p.u, p.v), s.top(p.u+1e-6, p.v).z(p.u+1e-6, p.v)
				if math.Abs(a-b) > 1e-5 {
					t.Errorf("%s and %s: the surface jumps at (%.3f, %.3f)", c.one, c.other, p.u, p.v)
				}
			}
		}
	}
}

func TestFixed(t *testing.T) {
	for _, c := range []struct {
		n, places int
		want      string
	}{{1234, 3, "1.234"}, {-5, 2, "-0.05"}, {0, 3, "0.000"}, {7, 1, "0.7"}, {-1200, 3, "-1.200"}} {
		if got := fixed(c.n, c.places); got != c.want {
			t.Errorf("fixed(%d, %d) = %q, want %q", c.n, c.places, got, c.want)
		}
	}
}
