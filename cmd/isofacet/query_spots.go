package main

import (
	"errors"
	"fmt"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/status"
	"isofacet/interp"
	"isofacet/interp/flow"
	"isofacet/io/numtext"
	"isofacet/triangulate"
)

// checkSpots refuses what cannot be asked together: one table has one set of columns.
func (q *queryCommand) checkSpots() error {
	asked := len(q.at.Places)+len(q.at.Files) > 0
	switch {
	case q.spotsEvery.IsSet() && q.spotsEvery.Value.Sign() == 0:
		return status.Usage(errors.New("--spots-every 0: expected a distance above zero"), "as in --spots-every 25")
	case asked && q.wantsSpots():
		return status.Usage(errors.New("--spots with --at: expected one of the two: one table has one set of columns"), "run the command once for each")
	case !asked && !q.wantsSpots():
		return status.Usage(errors.New("--at is missing: expected a place X,Y or a file of places, or --spots"), "as in --at 431250,5621500")
	}
	return nil
}

func (q *queryCommand) wantsSpots() bool { return bool(q.spots) || q.spotsEvery.IsSet() }

// spotPlaces are the spot heights of a surface, as places to be asked about.
func (q *queryCommand) spotPlaces(l *loaded) (*places, error) {
	p := &places{names: []string{"spot", "id", "x", "y"}}
	var kinds, ids []string
	if q.spots {
		s := l.shown()
		count := map[interp.SpotKind]int{}
		level := 0
		in := s.Mesh().Inputs()
		first := l.surface.Mesh().Inputs()
		for _, spot := range s.Spots() {
			count[spot.Kind]++
			if spot.Level {
				level++
			}
			i := int(in[spot.Vertex])
			id := ""
			switch {
			case l.drawn.cut == nil:
				id = l.id(i)
			case i < len(first): // else a vertex that the cut made
				id = l.id(int(first[i]))
			}
			kinds, ids = append(kinds, spot.Kind.String()), append(ids, id)
			p.points = append(p.points, s.Mesh().Position(spot.Vertex))
		}
		text := fmt.Sprintf("spots: %s, %s, %s", counted(count[interp.Summit], "summit"), counted(count[interp.Hollow], "pit"), counted(count[interp.Saddle], "saddle"))
		if level > 0 {
			text += fmt.Sprintf("; %d of them on level ground, of which they are one place", level)
		}
		q.report.Note(text, "summits", count[interp.Summit], "pits", count[interp.Hollow], "saddles", count[interp.Saddle], "level", level)
	}
	if q.spotsEvery.IsSet() {
		b := orb.MultiPoint(l.shown().Mesh().Positions()).Bound()
		nodes, n := flow.Lattice(b, q.spotsEvery.Value)
		if n > 0 {
			return nil, status.Usage(fmt.Errorf("--spots-every %s: some %.3g places: expected at most %d", q.spotsEvery.Value, n, flow.LatticeMost), "use a larger distance; isofacet grid makes rasters")
		}
		sampler := l.surface.Sampler()
		for _, at := range nodes {
			if l.contains(at) && sampler.Next(at).Location.Place != triangulate.Outside {
				kinds, ids = append(kinds, "regular"), append(ids, "")
				p.points = append(p.points, at)
			}
		}
	}
	if len(p.points) == 0 {
		q.report.Warn("no-spots", "no spots: nothing inside the surface is higher or lower than all about it, and no regular place lies on it")
	}
	xy, _ := l.digits(q.decimals)
	p.row = func(dst []string, i int) []string {
		at := p.points[i]
		return append(dst, kinds[i], ids[i], string(numtext.Append(nil, at[0], xy)), string(numtext.Append(nil, at[1], xy)))
	}
	return p, nil
}
