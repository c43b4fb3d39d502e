package lines

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/paulmach/orb"
)

// Checks of a whole line. A line comes with a height for every point, NaN where
// none was read, or with none at all, and as long as it was read; it leaves with
// repeats dropped and heights everywhere or nowhere, or it is a fault. Of several
// troubles of one line the first is told.

// checker holds what checks look at and lead to.
type checker struct {
	what   string // line or ring
	rings  bool
	plane  bool // heights do not matter
	zeros  Zeros
	set    *Set
	faults Faults
	found  []*Fault // of the source at hand
}

func newChecker(what string, z Zeros) *checker {
	return &checker{what: what, rings: what == "ring", zeros: z, set: &Set{}}
}

// keep adds a line to the set if nothing is wrong with it.
func (c *checker) keep(l *Line) {
	c.set.Vertices += len(l.Points)
	if c.plane {
		l.Z = nil
	}
	f := c.heights(l)
	if f == nil {
		f = c.dropRepeats(l)
	}
	if f == nil {
		f = c.shape(l)
	}
	if f != nil {
		f.Name = l.Name
		c.add(f)
		return
	}
	c.warnOfZeros(l)
	c.warnOfLong(l)
	c.set.Lines = append(c.set.Lines, *l)
}

func (c *checker) add(f *Fault) { c.found = append(c.found, f) }

// endSource puts the faults of a source in the order of the source.
func (c *checker) endSource() {
	slices.SortStableFunc(c.found, func(a, b *Fault) int {
		return cmp.Or(a.Row-b.Row, a.Feature-b.Feature, a.Part-b.Part, a.Position-b.Position)
	})
	for _, f := range c.found {
		c.faults.add(f)
	}
	c.found = nil
}

// result is the set, or the faults.
func (c *checker) result() (*Set, error) {
	if err := c.faults.err(); err != nil {
		return nil, err
	}
	return c.set, nil
}

// call is the line as messages call it.
func (c *checker) call(l *Line) string {
	if l.Feature > 0 && strings.HasPrefix(l.Name, featureName(l.Feature)) {
		return c.what // its place says as much
	}
	return called(c.what, l.Name)
}

// fault is a trouble at point k of a line, or of a line as a whole that begins there.
func (c *checker) fault(l *Line, k int, kind Kind, expected, format string, args ...any) *Fault {
	at := l.At(k)
	switch kind {
	case NoHeights, ZeroHeights, OnePosition, FewCorners:
		at.Position = 0
	}
	return &Fault{Place: at, Kind: kind, Seen: c.call(l) + " " + fmt.Sprintf(format, args...), Expected: expected}
}

// heights finds out whether the line has heights everywhere or nowhere.
func (c *checker) heights(l *Line) *Fault {
	if l.Z == nil {
		return c.withoutHeights(l)
	}
	missing, first, zero := 0, 0, 0
	for k, z := range l.Z {
		if math.IsNaN(z) {
			if missing++; missing == 1 {
				first = k
			}
		} else if z == 0 {
			zero++
		}
	}
	n := len(l.Z)
	switch {
	case missing == n:
		l.Z = nil
		return c.withoutHeights(l)
	case missing > 0:
		expected := "a height at every vertex"
		if c.rings {
			expected += ", or at none"
		}
		return c.fault(l, first, HeightsCount, expected, "has no height here, but at %d of its %s", n-missing, vertices(n))
	case zero == n && c.zeros == RefuseZeros:
		expected := "measured heights, or to be told that 0 is meant"
		if c.rings {
			expected = "measured heights, none, or to be told that 0 is meant"
		}
		return c.fault(l, 0, ZeroHeights, expected, "has height 0 at %s", all(n))
	}
	return nil
}

func (c *checker) withoutHeights(l *Line) *Fault {
	if c.rings || c.plane {
		return nil
	}
	return c.fault(l, 0, NoHeights, "a height at every vertex of a breakline; only boundaries and voids go without", "has no heights")
}

// dropRepeats drops every vertex at the position of the one before.
func (c *checker) dropRepeats(l *Line) *Fault {
	kept := 0
	for k := 1; k < len(l.Points); k++ {
		if l.Points[k] == l.Points[kept] {
			if l.Z != nil && l.Z[k] != l.Z[kept] {
				return c.twoHeights(l, k, kept)
			}
			c.set.Repeated++
			continue
		}
		if kept++; kept == k {
			continue
		}
		l.Points[kept] = l.Points[k]
		l.numbers[kept] = l.numbers[k]
		if l.Z != nil {
			l.Z[kept] = l.Z[k]
		}
		if l.ids != nil {
			l.ids[kept] = l.ids[k]
		}
		if l.Readings != nil {
			l.Readings[kept] = l.Readings[k]
		}
	}
	n := kept + 1
	l.Points, l.numbers = l.Points[:n], l.numbers[:n]
	if l.Z != nil {
		l.Z = l.Z[:n]
		if last := n - 1; last > 0 && l.Points[last] == l.Points[0] && l.Z[last] != l.Z[0] {
			return c.twoHeights(l, last, 0)
		}
	}
	if l.ids != nil {
		l.ids = l.ids[:n]
	}
	if l.Readings != nil {
		l.Readings = l.Readings[:n]
	}
	return nil
}

func (c *checker) twoHeights(l *Line, k, before int) *Fault {
	return c.fault(l, k, TwoHeights, "one height at one place", "has height %s at the place of %s, which has %s",
		plain(l.Z[k]), l.spot(before), plain(l.Z[before]))
}

// shape checks that a line goes somewhere, and that a ring is one.
func (c *checker) shape(l *Line) *Fault {
	n := len(l.Points)
	corners := distinct(l.Points)
	l.Closed = corners == 3 && l.Points[0] == l.Points[n-1]
	switch {
	case !c.rings && corners == 1:
		return c.fault(l, 0, OnePosition, "at least two", "has one position, (%s, %s)", plain(l.Points[0][0]), plain(l.Points[0][1]))
	case c.rings && corners < 3:
		return c.fault(l, 0, FewCorners, "at least 3", "has %s", counted(corners, "distinct position"))
	case c.rings && !l.Closed:
		return c.fault(l, n-1, NotClosed, "the first position again at the end of a ring", "is not closed: gap %s to its beginning, %s",
			rough(distance(l.Points[n-1], l.Points[0])), l.spot(0))
	}
	return nil
}

// distinct counts the distinct positions of a chain, up to 3. Neighbours differ.
func distinct(p []orb.Point) int {
	if len(p) < 3 {
		return len(p)
	}
	for _, q := range p[2:] {
		if q != p[0] && q != p[1] {
			return 3
		}
	}
	return 2
}

// distance is for people and for warnings; no decision about geometry uses it.
func distance(a, b orb.Point) float64 {
	dx, dy := b[0]-a[0], b[1]-a[1]
	return math.Sqrt(float64(dx*dx) + float64(dy*dy))
}

// warnOfZeros tells of zeros among heights: gaps in a table often read as 0.
func (c *checker) warnOfZeros(l *Line) {
	if c.zeros == UseZeros {
		return
	}
	zero, first := 0, 0
	lo, hi := math.Inf(1), math.Inf(-1)
	for k, z := range l.Z {
		if z == 0 {
			if zero++; zero == 1 {
				first = k
			}
			continue
		}
		lo, hi = min(lo, z), max(hi, z)
	}
	if zero > 0 && zero < len(l.Z) {
		c.warn(l, first, fmt.Sprintf("has height 0 at %d of its %s; the others are from %s to %s",
			zero, vertices(len(l.Z)), plain(lo), plain(hi)))
	}
}

// warn adds a warning about point k of a line.
func (c *checker) warn(l *Line, k int, text string) {
	at := l.At(k)
	text = c.call(l) + " " + text
	if at.Feature > 0 {
		text = at.within() + ": " + text
	}
	c.set.warn(at.File, at.Row, text)
}

func vertices(n int) string {
	if n == 1 {
		return "1 vertex"
	}
	return fmt.Sprintf("%d vertices", n)
}

func all(n int) string {
	if n == 1 {
		return "its one vertex"
	}
	return fmt.Sprintf("all %d vertices", n)
}

func featureName(n int) string { return fmt.Sprintf("feature %d", n) }
