package main

import (
	"context"
	"fmt"
	"math"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/status"
	"isofacet/contour"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/interp/overlay"
	"isofacet/interp/profile"
	"isofacet/interp/rule"
	"isofacet/io/lines"
	"isofacet/io/readings"
	"isofacet/triangulate"
	"isofacet/triangulate/exact"
)

// stageResult is a row of the stage table.
type stageResult struct {
	Region      string `json:"region"`
	Level       string `json:"level"`
	AreaBelow   number `json:"area_below"`
	VolumeBelow number `json:"volume_below"`
	AreaAbove   number `json:"area_above"`
	VolumeAbove number `json:"volume_above"`
	// What the rules make of the areas below, from the first level up.
	AverageEndArea number `json:"below_by_average_end_area"`
	Conic          number `json:"below_by_cones"`
}

// stages makes the table of areas and volumes by level, of the surface after, or of
// the one before if that is a level.
func (v *volumes) stages(ctx context.Context) error {
	s := v.to
	if s.kind == kindLevel {
		s = v.from
	}
	for _, r := range v.regions {
		surface := s.ground.Surface
		if r.region != nil {
			clip, err := surface.Clip(ctx, r.region, triangulate.Options{Workers: v.workers()})
			if err != nil {
				return v.regionError(r, err)
			}
			surface = clip.Surface
		}
		if surface.Mesh().NumTriangles() == 0 {
			continue // the figures say so
		}
		if err := v.stagesOf(ctx, r.name, surface); err != nil {
			return err
		}
	}
	v.report.Note(fmt.Sprintf("stages: %s of %s", counted(len(v.result.Stages), "level"), s.text), "levels", len(v.result.Stages))
	return nil
}

func (v *volumes) stagesOf(ctx context.Context, region string, s *interp.Surface) error {
	low, high := math.Inf(1), math.Inf(-1)
	for t := range s.Mesh().Triangles() {
		for _, c := range s.Mesh().Corners(t) {
			low, high = min(low, s.Z()[c]), max(high, s.Z()[c])
		}
	}
	step := v.stageStep.Value
	// From the last multiple below the lowest point to the first above the highest.
	levels, err := contour.Every(step, decimal.Number{}, 1, low-step.Float64(), high+step.Float64())
	if err != nil {
		return err
	}
	for len(levels) > 1 && levels[1].Z <= low {
		levels = levels[1:]
	}
	for n := len(levels); n > 1 && levels[n-2].Z >= high; n-- {
		levels = levels[:n-1]
	}
	var average, conic exact.Sum
	var before float64
	for i, l := range levels {
		if err := ctx.Err(); err != nil {
			return err
		}
		at := s.Volumes(l.Z)
		if i > 0 {
			h, areas := []float64{levels[i-1].Z, l.Z}, []float64{before, at.AreaBelow}
			a, err := rule.AverageEndArea(h, areas)
			if err != nil {
				return err
			}
			c, err := rule.Conic(h, areas)
			if err != nil {
				return err
			}
			average.Add(a)
			conic.Add(c)
		}
		before = at.AreaBelow
		v.result.Stages = append(v.result.Stages, stageResult{
			region, l.Number.String(), v.area(at.AreaBelow), v.volume(at.Below), v.area(at.AreaAbove), v.volume(at.Above),
			v.volume(average.Value()), v.volume(conic.Value()),
		})
	}
	return nil
}

// sectionsResult are the sections of all regions and what the rules make of them.
type sectionsResult struct {
	From, To number         `json:"-"`
	Rows     []sectionRow   `json:"rows"`
	Totals   []sectionTotal `json:"approximations"`
}

type sectionRow struct {
	Region  string `json:"region"`
	Station number `json:"station"`
	Cut     number `json:"cut_area"`
	Fill    number `json:"fill_area"`
	Width   number `json:"width_covered"`
}

// sectionTotal is what the rules say of a region, beside the exact figures.
type sectionTotal struct {
	Region     string       `json:"region"`
	Average    ruleVolumes  `json:"average_end_area"`
	Prismoidal ruleVolumes  `json:"prismoidal"`
	Exact      *ruleVolumes `json:"exact_of_all_the_region,omitempty"`
}

type ruleVolumes struct {
	Cut  number `json:"cut"`
	Fill number `json:"fill"`
	// Averaged counts the reaches that the prismoidal rule does not fit.
	Averaged int `json:"reaches_by_average_end_area,omitempty"`
}

// cutSections cuts the difference along the line.
func (v *volumes) cutSections(ctx context.Context) error {
	at, err := v.baseline(ctx)
	if err != nil {
		return err
	}
	line, err := profile.NewAlignment(at, 0)
	if err != nil {
		return err
	}
	left, right := v.reach(at, v.left.IsSet(), v.left.Value), v.reach(at, v.right.IsSet(), v.right.Value)
	out := &sectionsResult{From: number{line.Start(), v.xy}, To: number{line.End(), v.xy}}
	for i, r := range v.regions {
		difference, err := overlay.DifferenceOf(ctx, v.from.ground, v.to.ground, r.region, overlay.Options{Workers: v.workers()})
		if err != nil {
			return v.regionError(r, err)
		}
		cuts, err := rule.Sections(ctx, difference, line, v.volumeCommand.sections.Value.Float64(), left, right, v.workers())
		if err != nil {
			return err
		}
		total, err := v.sectionTotal(r, cuts)
		if err != nil {
			return err
		}
		exactly := v.result.Regions[i]
		total.Exact = &ruleVolumes{Cut: exactly.Cut.Volume, Fill: exactly.Fill.Volume}
		out.Totals = append(out.Totals, *total)
		for _, x := range cuts {
			out.Rows = append(out.Rows, sectionRow{r.name, number{x.Station, v.xy}, number{x.Cut, v.xy}, number{x.Fill, v.xy}, number{x.Width, v.xy}})
		}
	}
	v.result.Sections = out
	v.report.Note(fmt.Sprintf("sections: %d, from station %v to %v", len(out.Rows), out.From, out.To), "sections", len(out.Rows))
	return v.warnOfOverlaps(line, out.Rows, left, right)
}

// baseline returns the line that sections stand square to.
func (v *volumes) baseline(ctx context.Context) ([]orb.Point, error) {
	if v.follow == nil {
		var at []orb.Point
		for _, p := range v.along.Places {
			at = append(at, orb.Point{p.X, p.Y})
		}
		return at, nil
	}
	set, err := lines.Paths(ctx, []readings.Source{v.follow.Source}, lines.Options{Zeros: lines.UseZeros, Workers: v.workers()})
	if err != nil {
		return nil, err
	}
	v.tellLines(v.follow.Name, "line", set)
	if len(set.Lines) != 1 {
		return nil, status.With(status.WrongData, fmt.Errorf("%s: %s: expected one that sections stand square to", v.follow.Name, counted(len(set.Lines), "line")),
			"keep one line in the file, or type its places")
	}
	v.measureLines(set)
	return set.Lines[0].Points, nil
}

// reach is how far sections go to one side: as far as told, or beyond everything.
func (v *volumes) reach(line []orb.Point, set bool, value decimal.Number) float64 {
	if set {
		return value.Float64()
	}
	b := orb.LineString(line).Bound()
	for _, s := range v.sides() {
		if s.ground.Surface != nil {
			b = b.Union(orb.LineString(s.ground.Surface.Mesh().Positions()).Bound())
		}
	}
	return (b.Max[0] - b.Min[0]) + (b.Max[1] - b.Min[1])
}

func (v *volumes) sectionTotal(r *measuredRegion, cuts []rule.SectionAreas) (*sectionTotal, error) {
	var at, cut, fill []float64
	for _, x := range cuts {
		at, cut, fill = append(at, x.Station), append(cut, x.Cut), append(fill, x.Fill)
	}
	t := &sectionTotal{Region: r.name}
	for _, side := range []struct {
		areas               []float64
		average, prismoidal *number
	}{{cut, &t.Average.Cut, &t.Prismoidal.Cut}, {fill, &t.Average.Fill, &t.Prismoidal.Fill}} {
		a, err := rule.AverageEndArea(at, side.areas)
		if err != nil {
			return nil, err
		}
		p, averaged, err := rule.Prismoidal(at, side.areas)
		if err != nil {
			return nil, err
		}
		*side.average, *side.prismoidal = v.volume(a), v.volume(p)
		t.Prismoidal.Averaged = averaged
	}
	return t, nil
}

// warnOfOverlaps warns of sections that meet, on the inside of bends: what lies
// beyond is counted twice.
func (v *volumes) warnOfOverlaps(line *profile.Alignment, rows []sectionRow, left, right float64) error {
	if len(line.Points()) < 3 {
		return nil
	}
	var stations []float64
	for _, r := range rows[:len(rows)/len(v.regions)] {
		stations = append(stations, r.Station.v)
	}
	sections, err := line.Sections(stations, left, right)
	if err != nil {
		return err
	}
	if o := profile.Overlaps(sections); len(o) > 0 {
		v.report.Warn("sections-overlap", fmt.Sprintf("%s meet, the first at stations %v and %v: what lies beyond is counted twice: shorten them with --left and --right",
			pairs(len(o)), number{sections[o[0].First].Station, v.xy}, number{sections[o[0].Second].Station, v.xy}), "pairs", len(o))
	}
	return nil
}

func pairs(n int) string {
	if n == 1 {
		return "1 pair of sections"
	}
	return fmt.Sprintf("%d pairs of sections", n)
}
