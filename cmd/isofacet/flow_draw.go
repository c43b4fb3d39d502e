package main

import (
	"bufio"
	"cmp"
	"context"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/advice"
	"isofacet/contour"
	"isofacet/grid/decimal"
	"isofacet/interp/flow"
	"isofacet/io/picture"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// inOrder sorts half-edges by the places of their ends.
func inOrder(m *triangulate.Mesh, edges []triangulate.HalfEdge) []triangulate.HalfEdge {
	slices.SortFunc(edges, func(a, b triangulate.HalfEdge) int {
		return cmp.Or(exact.CompareXY(m.Position(m.Origin(a)), m.Position(m.Origin(b))), exact.CompareXY(m.Position(m.Dest(a)), m.Position(m.Dest(b))))
	})
	return edges
}

// rose draws the directions of all rounds and zones.
func (j *flowing) rose(d *destination) error {
	var arrows []picture.RoseArrow
	for _, s := range j.states {
		if s.plane == nil || !(s.plane.Gradient.Size() > 0) {
			continue
		}
		g := s.plane.Gradient
		arrows = append(arrows, picture.RoseArrow{Name: s.name(), Azimuth: g.Azimuth(), Spread: g.AzimuthSigma(), Size: float64(g.Size() * j.ratio), Faint: s.plane.Verdict() != flow.Sound})
	}
	notes := []string{"length: gradient of the plane through all wells; wedge: one standard uncertainty to either side; dashed: see the verdict"}
	err := picture.WriteRose(d.w, arrows, picture.RoseOptions{Title: "direction of flow: " + j.list[0].Name, Notes: append(notes, j.cautions()...)})
	if e, ok := errors.AsType[*picture.InputError](err); ok {
		return fmt.Errorf("--out rose=%s: %w", d.path, e)
	}
	return err
}

// drawMap draws isolines, wells, arrows and flow lines.
func (j *flowing) drawMap(ctx context.Context, d *destination) error {
	i := slices.IndexFunc(j.states, func(s *flowState) bool { return s.plane != nil })
	s := j.states[i]
	surface := s.l.shown()
	rims, err := (&ground{surface: surface}).rims(ctx, contour.Options{Workers: j.workers()})
	if err != nil {
		return err
	}
	inf := math.Inf(1)
	opt := picture.MapOptions{Title: s.l.title() + ": " + s.name(), Labels: j.labels(""), Rows: 6,
		Extent: orb.Bound{Min: orb.Point{inf, inf}, Max: orb.Point{-inf, -inf}},
		Notes: []string{fmt.Sprintf("plane through all wells: gradient %v towards %v degrees; %s", number{float64(s.plane.Gradient.Size() * j.ratio), j.slope},
			number{s.plane.Gradient.Azimuth(), 1}, s.plane.Verdict())}}
	opt.Notes = append(opt.Notes, j.cautions()...)
	for _, rim := range rims {
		opt.Extent = opt.Extent.Union(rim.Bound())
	}
	suggested := advice.Interval(s.l.set.Z)
	var levels contour.Levels
	if suggested.OK {
		levels, err = contour.Every(suggested.Value, decimal.FromInt(0), 5, s.l.zRange[0], s.l.zRange[1])
		if none, ok := errors.AsType[*contour.RangeError](err); ok {
			j.report.Note("map: no isolines: "+none.Error(), "file", d.path)
		} else if err != nil {
			return err
		}
		opt.Interval, opt.IndexEvery = suggested.Value.String(), 5
	}
	m, err := picture.NewMap(d.w, opt)
	if err != nil {
		return err
	}
	if len(levels) > 0 {
		if _, err := contour.EachLine(ctx, surface, levels, contour.Options{Workers: j.workers()}, func(l contour.Line) error {
			return m.Isoline(picture.Isoline{Level: l.Level.Number.String(), Index: l.Level.Rank == contour.Index, Points: l.Points})
		}); err != nil {
			return err
		}
	}
	return j.marks(s, m, rims)
}

// marks draws what lies on top of the isolines.
func (j *flowing) marks(s *flowState, m *picture.Map, rims []orb.Ring) error {
	if err := m.Outline(rims...); err != nil {
		return err
	}
	for i := range s.lines {
		if s.lines[i].inside {
			if err := m.Trail(s.lines[i].Points, "flow line from "+s.lines[i].name); err != nil {
				return err
			}
		}
	}
	long := 5.0
	if j.arrows.IsSet() {
		long = min(long, 0.7*j.arrows.Value.Float64()/m.PerMM())
	}
	for _, a := range s.arrows {
		if !math.IsNaN(a.azimuth) {
			if err := m.Arrow(a.at, a.azimuth, long); err != nil {
				return err
			}
		}
	}
	if err := m.Readings(s.l.set.Points); err != nil {
		return err
	}
	_, err := m.Close()
	return err
}

// nests writes the vertical gradients of every round: wells of all zones at one place.
func (j *flowing) nests(w io.Writer) error {
	b := bufio.NewWriter(w)
	b.WriteString("round,upper_well,lower_well,upper_head,lower_head,upper_middle,lower_middle,apart,vertical_gradient,sigma,direction\n")
	within := 20.0
	if j.nestWithin.IsSet() {
		within = j.nestWithin.Value.Float64()
	}
	found := 0
	for from := 0; from < len(j.states); {
		to := from
		var at []orb.Point
		var heads, middles, sigmas []float64
		var names []string
		for ; to < len(j.states) && j.states[to].round == j.states[from].round; to++ {
			s := j.states[to]
			own, err := j.sigmas(s.heads)
			if err != nil {
				return err
			}
			for i := range s.heads.Len() {
				sigma := math.NaN()
				if own != nil {
					sigma = own[i]
				}
				sigmas = append(sigmas, sigma)
				middle := math.NaN()
				if z, ok := j.depths.screenMiddle(s.heads.ID(i)); ok {
					middle = j.flowCommand.reading.measures.z.Of(z)
				}
				at, heads, middles = append(at, s.heads.Points[i]), append(heads, s.heads.Z[i]), append(middles, middle)
				names = append(names, s.heads.ID(i))
			}
		}
		for _, n := range flow.Nests(at, heads, middles, within, sigmas) {
			found++
			direction := "down"
			switch {
			case n.Gradient < 0:
				direction = "up"
			case n.Gradient == 0:
				direction = "none"
			}
			row := appendFields(nil, []string{j.states[from].round, names[n.Upper], names[n.Lower],
				number{heads[n.Upper], j.z}.String(), number{heads[n.Lower], j.z}.String(), number{middles[n.Upper], j.z}.String(), number{middles[n.Lower], j.z}.String(),
				number{n.Apart, j.xy}.String(), number{n.Gradient, j.slope}.String(), orBlank(number{n.Sigma, j.slope}), direction})
			row[len(row)-1] = '\n'
			b.Write(row)
		}
		from = to
	}
	if found == 0 {
		j.report.Warn("no-nests", fmt.Sprintf("no two wells within %v of each other have screens at different heights", within))
	}
	return b.Flush()
}
