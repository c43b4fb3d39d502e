package rule

import (
	"context"
	"fmt"

	"isofacet/interp"
	"isofacet/interp/profile"
	"isofacet/triangulate/exact"
)

// SectionAreas are the areas between two surfaces in a section square to a line.
type SectionAreas struct {
	Station   float64
	Cut, Fill float64
	Width     float64 // of what both surfaces cover
}

// Sections cuts the difference of two surfaces, to less from as a surface, square to a
// line at stations step apart from its start to its end, the last reach being shorter,
// as far as left and right of it, and returns the areas below and above 0. Between two
// breaks of a section the difference is linear; it is split at its zero.
//
// It returns errors of package profile, and an error wrapping ErrSections for a step
// that makes more than SectionsMost sections.
func Sections(ctx context.Context, difference *interp.Surface, line *profile.Alignment, step, left, right float64, workers int) ([]SectionAreas, error) {
	from, to := line.Start(), line.End()
	if n := (to - from) / step; !(step > 0) || n > SectionsMost {
		return nil, fmt.Errorf("sections %v apart on a line of length %v: expected at most %d: %w", step, to-from, SectionsMost, ErrSections)
	}
	var stations []float64
	for i := 0; ; i++ {
		at := from + float64(float64(i)*step)
		if at >= to {
			break
		}
		stations = append(stations, at)
	}
	stations = append(stations, to)
	cuts, err := line.Sections(stations, left, right)
	if err != nil {
		return nil, err
	}
	var lines []*profile.Alignment
	for i := range cuts {
		lines = append(lines, cuts[i].Line)
	}
	profiles, err := profile.Many(ctx, difference, nil, lines, workers)
	if err != nil {
		return nil, err
	}
	list := make([]SectionAreas, len(cuts))
	for i := range cuts {
		list[i] = sectionAreas(&profiles[i])
		list[i].Station = cuts[i].Station
	}
	return list, nil
}

// SectionsMost is the largest number of sections.
const SectionsMost = 1000000

func sectionAreas(p *profile.Profile) SectionAreas {
	var cut, fill, width exact.Sum // areas twice
	for i := 0; i+1 < len(p.Points); i++ {
		a, b := &p.Points[i], &p.Points[i+1]
		if a.Ahead != profile.Surface {
			continue
		}
		w := b.Station - a.Station
		width.Add(w)
		switch {
		case a.Z >= 0 && b.Z >= 0:
			fill.Add(w * (a.Z + b.Z))
		case a.Z <= 0 && b.Z <= 0:
			cut.Add(w * -(a.Z + b.Z))
		default:
			up, down := max(a.Z, b.Z), -min(a.Z, b.Z)
			fill.Add(float64(w*(up/(up+down))) * up)
			cut.Add(float64(w*(down/(up+down))) * down)
		}
	}
	return SectionAreas{Cut: cut.Mean(2), Fill: fill.Mean(2), Width: width.Value()}
}
