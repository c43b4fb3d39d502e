package main

import (
	"context"
	"errors"
	"fmt"
	"math"

	"isofacet/cmd/internal/report"
	"isofacet/cmd/internal/status"
	"isofacet/interp/overlay"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

// volumeResult is what is written, and what the run record says.
type volumeResult struct {
	VolumeUnit string `json:"volume_unit"`
	AreaUnit   string `json:"area_unit"`

	From     *sideResult      `json:"from"`
	To       *sideResult      `json:"to"`
	Regions  []regionResult   `json:"regions"`
	Sections *sectionsResult  `json:"sections,omitempty"`
	Stages   []stageResult    `json:"stages,omitempty"`
	Cautions []string         `json:"cautions"`
	Warnings []report.Warning `json:"warnings"`
}

type sideResult struct {
	Kind      string  `json:"kind"`
	Name      string  `json:"name"`
	Triangles int     `json:"triangles,omitempty"`
	Area      *number `json:"area,omitempty"`
}

// regionResult are the figures within one region.
type regionResult struct {
	Region  string     `json:"region"`
	Cut     partResult `json:"cut"`
	Fill    partResult `json:"fill"`
	Net     number     `json:"net"`
	Same    number     `json:"area_without_difference"`
	Covered number     `json:"area_covered_by_both"`
	// Area is that of the polygon or ring, null where there is none.
	Area        *number `json:"area_of_region"`
	ShareOf     *number `json:"share_of_region"`
	ShareOfFrom *number `json:"share_of_from"`
	ShareOfTo   *number `json:"share_of_to"`

	Base        *baseResult      `json:"base,omitempty"`
	Uncertainty *spreadResult    `json:"standard_uncertainty,omitempty"`
	Simulation  *simulatedResult `json:"simulation,omitempty"`
}

type partResult struct {
	Volume number `json:"volume"`
	Area   number `json:"area"`
	// null where z is in another unit than x and y.
	SlopeAreaFrom *number `json:"slope_area_from"`
	SlopeAreaTo   *number `json:"slope_area_to"`
}

type baseResult struct {
	Kind  string  `json:"kind"`
	Level string  `json:"level,omitempty"`
	DzDx  *number `json:"dz_dx,omitempty"`
	DzDy  *number `json:"dz_dy,omitempty"`
	Off   *number `json:"largest_distance_of_a_vertex,omitempty"`
}

type spreadResult struct {
	Cut  number `json:"cut"`
	Fill number `json:"fill"`
	Net  number `json:"net"`
}

type simulatedResult struct {
	Draws     int          `json:"draws"`
	Mean      spreadResult `json:"mean"`
	Deviation spreadResult `json:"standard_deviation"`
}

// shareDigits are those of shares: a ten-thousandth of a percent.
const shareDigits = 6

// measure finds the figures of every region.
func (v *volumes) measure(ctx context.Context) error {
	v.result.From, v.result.To = v.sideResult(v.from), v.sideResult(v.to)
	v.result.Regions = []regionResult{}
	if v.from == nil && v.toe.values == nil {
		return nil // a stage table alone
	}
	bytes := uint64(0)
	for _, s := range v.sides() {
		if s.ground.Surface != nil {
			bytes += uint64(s.ground.Surface.Mesh().NumVertices()) * bytesOverlayVertex
		}
	}
	if err := v.announce("laying the surfaces over each other", bytes); err != nil {
		return err
	}
	for _, r := range v.regions {
		one, err := v.measureRegion(ctx, r)
		if err != nil {
			return err
		}
		v.result.Regions = append(v.result.Regions, *one)
	}
	return nil
}

// bytesOverlayVertex is what a vertex takes with its surface, a cut copy of it, and
// what laying it over another takes.
const bytesOverlayVertex = 350

func (v *volumes) sideResult(s *surfaceSide) *sideResult {
	if s == nil {
		return nil
	}
	r := &sideResult{Kind: s.kind, Name: s.text}
	if s.ground.Surface != nil {
		r.Triangles = s.ground.Surface.Mesh().NumTriangles()
		area := v.area(s.ground.Surface.Area())
		r.Area = &area
	}
	return r
}

func (v *volumes) measureRegion(ctx context.Context, r *measuredRegion) (*regionResult, error) {
	progress, finish := v.display.Stage("measuring")
	opt := overlay.Options{Workers: v.workers(), Weights: v.uncertain(), Progress: progress}
	var f *overlay.Figures
	var base *baseResult
	var err error
	if r.toe != nil {
		var t *overlay.ToeFigures
		if t, err = r.toe.Measure(ctx, v.to.ground.Surface, opt); err == nil {
			f, base = t.Figures, v.base(r.toe, t)
		}
	} else {
		f, err = overlay.Compare(ctx, v.from.ground, v.to.ground, r.region, opt)
	}
	finish()
	if err != nil {
		return nil, v.regionError(r, err)
	}
	out := &regionResult{
		Region: r.name, Cut: v.part(&f.Cut), Fill: v.part(&f.Fill), Net: v.volume(f.Net),
		Same: v.area(f.Same.Area), Covered: v.area(f.Covered), Base: base,
	}
	if err := v.shares(ctx, r, f, out); err != nil {
		return nil, err
	}
	if v.uncertain() {
		if err := v.uncertainty(ctx, r, f, out); err != nil {
			return nil, err
		}
	}
	v.report.Note(fmt.Sprintf("%s: cut %v, fill %v, net %v, over %v of area", r.name, out.Cut.Volume, out.Fill.Volume, out.Net, out.Covered),
		"region", r.name, "cut", out.Cut.Volume, "fill", out.Fill.Volume, "net", out.Net, "covered", out.Covered)
	return out, nil
}

func (v *volumes) regionError(r *measuredRegion, err error) error {
	if errors.Is(err, overlay.ErrNoPlane) {
		return status.With(status.WrongData, fmt.Errorf("ring %q: %w", r.name, err), "--toe-base level=Z or ring")
	}
	if r.region == nil {
		return err
	}
	return fmt.Errorf("polygon %q: %w", r.name, err)
}

func (v *volumes) part(p *overlay.Part) partResult {
	r := partResult{Volume: v.volume(p.Volume), Area: v.area(p.Area)}
	if v.units.slopes {
		from, to := v.area(p.AreaFrom), v.area(p.AreaTo)
		r.SlopeAreaFrom, r.SlopeAreaTo = &from, &to
	}
	return r
}

func (v *volumes) base(t *overlay.Toe, f *overlay.ToeFigures) *baseResult {
	switch t.Base {
	case overlay.BaseLevel:
		return &baseResult{Kind: "level", Level: v.toeBase.value.level.String()}
	case overlay.BasePlane:
		return &baseResult{Kind: "plane", DzDx: &number{f.Plane.DzDx, slopeDigits}, DzDy: &number{f.Plane.DzDy, slopeDigits}, Off: &number{f.Off, v.z}}
	}
	return &baseResult{Kind: "ring"}
}

// shares says how much of the area both surfaces cover, and warns where that is not
// all of what was asked for.
func (v *volumes) shares(ctx context.Context, r *measuredRegion, f *overlay.Figures, out *regionResult) error {
	share := func(of float64) *number {
		if !(of > 0) {
			return nil
		}
		s := f.Covered / of
		if math.Abs(s-1) < 1e-9 {
			s = 1 // areas added up in two ways
		}
		return &number{min(s, 1), shareDigits}
	}
	if v.from != nil && v.from.kind != kindLevel {
		out.ShareOfFrom = share(f.AreaFrom)
	}
	if v.to.kind != kindLevel {
		out.ShareOfTo = share(f.AreaTo)
	}
	where, of := "the surfaces", 1.0
	if r.region != nil {
		area, err := enclosed(ctx, r.rings, triangulate.Options{Workers: v.workers()})
		if err != nil {
			return err
		}
		enclosing := v.area(area)
		out.Area, out.ShareOf = &enclosing, share(area)
		where = fmt.Sprintf("polygon %q", r.name)
		if r.toe != nil {
			where = fmt.Sprintf("ring %q", r.name)
		}
		if out.ShareOf != nil {
			of = out.ShareOf.v
		}
	} else {
		for _, s := range []*number{out.ShareOfFrom, out.ShareOfTo} {
			if s != nil {
				of = min(of, s.v)
			}
		}
	}
	switch {
	case f.Covered == 0:
		v.report.Warn("no-overlap", fmt.Sprintf("%s: no place is covered by both: all volumes are 0: are x and y in the same system and order?", where), "region", r.name)
	case of < 1:
		v.report.Warn("overlap", fmt.Sprintf("%s: both sides cover %.2f %% of the area: volumes are of that part only", where, 100*of), "region", r.name, "share", of)
	}
	return nil
}

// uncertain tells whether anything is known of the uncertainty of heights.
func (v *volumes) uncertain() bool {
	if v.heightSigma.IsSet() {
		return true
	}
	for _, s := range v.sides() {
		if s.l != nil && s.l.set.Has(readings.Sigma) {
			return true
		}
	}
	return false
}

// sigmasOf returns the standard uncertainties of a side's heights: those of readings
// are their own where they have some. nil is none.
func (v *volumes) sigmasOf(s *surfaceSide) ([]float64, error) {
	switch {
	case s == nil || s.ground.Surface == nil:
		return nil, nil
	case s.l != nil && (v.heightSigma.IsSet() || s.l.set.Has(readings.Sigma)):
		return s.l.sigmas(&v.reading, &trusting{sigma: v.heightSigma})
	case v.heightSigma.IsSet():
		return overlay.Level(s.ground.Surface.Mesh(), v.heightSigma.Value.Float64()), nil
	}
	return nil, nil
}

// toReadings hands weights of what boundary and voids left on to the whole surface.
func (s *surfaceSide) toReadings(w *overlay.VertexWeights) {
	if s == nil || s.l == nil || s.l.drawn.cut == nil || w.All == nil {
		return
	}
	cut := s.l.drawn.cut
	w.Cut, w.Fill, w.All = cut.Spread(w.Cut), cut.Spread(w.Fill), cut.Spread(w.All)
}

// uncertainty adds that of the volumes to a region's figures.
func (v *volumes) uncertainty(ctx context.Context, r *measuredRegion, f *overlay.Figures, out *regionResult) error {
	from, err := v.sigmasOf(v.from)
	if err != nil {
		return err
	}
	to, err := v.sigmasOf(v.to)
	if err != nil {
		return err
	}
	v.from.toReadings(&f.Weights.From)
	v.to.toReadings(&f.Weights.To)
	out.Uncertainty = v.spread(f.Weights.Uncertainty(from, to))
	if v.simulate.text == "" {
		return nil
	}
	_, finish := v.display.Stage("drawing heights")
	s, err := overlay.Simulate(ctx, v.from.ground, v.to.ground, r.region, from, to, v.simulate.value, overlay.Options{Workers: v.workers()})
	finish()
	if err != nil {
		return err
	}
	out.Simulation = &simulatedResult{s.Draws, *v.spread(s.Mean), *v.spread(s.Deviation)}
	return nil
}

func (v *volumes) spread(s overlay.Spread) *spreadResult {
	return &spreadResult{v.volume(s.Cut), v.volume(s.Fill), v.volume(s.Net)}
}
