package contour

import (
	"slices"

	"github.com/paulmach/orb"
)

// part is what one unit of work found of a level.
type part struct {
	lines         []Line
	withoutLength int64
	loose         []fragment // that others continue
}

// take makes a line of a fragment that is whole, and keeps any other.
func (p *part) take(src source, level Level, f fragment) {
	switch {
	case f.after == f.first:
		p.add(level, f.points, true)
	case f.after == noPassage && src.begins(f.first):
		p.add(level, f.points, false)
	default:
		p.loose = append(p.loose, f)
	}
}

// add makes a line of its points by the edges that it passes.
func (p *part) add(level Level, points []orb.Point, closed bool) {
	l, ok := newLine(level, points, closed)
	if !ok {
		p.withoutLength++
		return
	}
	p.lines = append(p.lines, l)
}

// newLine takes out pieces without length and spikes, and gives a closed line its start. closed says that the line closes by
// the edges that it passes; a line that goes from the outline to the outline at one and the same place is closed as
// well. It returns false if nothing is left. It changes points and may keep them.
func newLine(level Level, points []orb.Point, closed bool) (Line, bool) {
	if !closed {
		points = reduceOpen(points)
		if len(points) < 2 {
			return Line{}, false
		}
		if points[0] != points[len(points)-1] {
			return Line{Level: level, Points: points}, true
		}
	}
	ring := reduceClosed(points)
	if len(ring) == 0 {
		return Line{}, false
	}
	ring = append(ring, ring[0])
	return Line{Level: level, Closed: true, Depression: clockwise(ring), Points: ring}, true
}

// join puts the parts of a level together: loose fragments end to start, and all lines in order.
func join(src source, level Level, parts []part) traced {
	var all part
	if len(parts) == 1 {
		all = parts[0]
	} else {
		for _, p := range parts {
			all.lines = append(all.lines, p.lines...)
			all.withoutLength += p.withoutLength
			all.loose = append(all.loose, p.loose...)
		}
	}
	joinLoose(src, level, &all)
	slices.SortFunc(all.lines, func(a, b Line) int { return comparePoints(a.Points, b.Points) })
	return traced{lines: all.lines, withoutLength: all.withoutLength}
}

// joinLoose makes lines of the loose fragments.
func joinLoose(src source, level Level, p *part) {
	if len(p.loose) == 0 {
		return
	}
	at := make(map[passage]int, len(p.loose)) // by first passage
	for i, f := range p.loose {
		at[f.first] = i
	}
	used := make([]bool, len(p.loose))
	follow := func(i int) (points []orb.Point, closed bool) {
		first := p.loose[i].first
		for {
			used[i] = true
			for _, q := range p.loose[i].points {
				points = appendPoint(points, q)
			}
			after := p.loose[i].after
			next, ok := at[after]
			if !ok || after == first || used[next] {
				return points, after == first
			}
			i = next
		}
	}
	for _, begins := range [...]bool{true, false} { // what begins on the outline first: the rest is closed
		for i, f := range p.loose {
			if !used[i] && src.begins(f.first) == begins {
				points, closed := follow(i)
				p.add(level, points, closed)
			}
		}
	}
}
