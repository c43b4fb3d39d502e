package overlay

import (
	"context"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Ground is one side of a comparison: a surface, or, where that is nil, a level
// without limits.
type Ground struct {
	Surface *interp.Surface
	Level   float64
}

// Compare returns the figures from one ground to another, at least one of them a
// surface, within a region unless that is nil. Both surfaces are cut at the region
// first. Weights, if asked for, are those of the vertices of the surfaces given, not
// cut; a level has none. AreaFrom and AreaTo are areas of what was cut; for a level,
// what is covered.
//
// It returns the errors of Surface.Clip, and ctx.Err().
func Compare(ctx context.Context, from, to Ground, region *triangulate.Region, opt Options) (*Figures, error) {
	a, clipA, err := from.within(ctx, region, opt)
	if err != nil {
		return nil, err
	}
	b, clipB, err := to.within(ctx, region, opt)
	if err != nil {
		return nil, err
	}
	var f *Figures
	switch {
	case a == nil && b == nil:
		panic("overlay: Compare needs a surface")
	case a == nil:
		m := b.Mesh()
		f, err = OnMesh(ctx, m, Level(m, from.Level), b.Z(), opt)
	case b == nil:
		m := a.Mesh()
		f, err = OnMesh(ctx, m, a.Z(), Level(m, to.Level), opt)
	default:
		f, err = Between(ctx, a, b, opt)
	}
	if err != nil {
		return nil, err
	}
	if f.Weights != nil {
		f.Weights.From.spread(a, clipA)
		f.Weights.To.spread(b, clipB)
	}
	return f, nil
}

// within returns the ground's surface cut at the region, nil for a level.
func (g *Ground) within(ctx context.Context, region *triangulate.Region, opt Options) (*interp.Surface, *interp.Clip, error) {
	if g.Surface == nil || region == nil {
		return g.Surface, nil, nil
	}
	clip, err := g.Surface.Clip(ctx, region, triangulate.Options{Workers: opt.Workers})
	if err != nil {
		return nil, nil, err
	}
	return clip.Surface, clip, nil
}

func (w *VertexWeights) spread(s *interp.Surface, clip *interp.Clip) {
	if s == nil {
		*w = VertexWeights{}
	}
	if clip == nil {
		return
	}
	w.Cut, w.Fill, w.All = clip.Spread(w.Cut), clip.Spread(w.Fill), clip.Spread(w.All)
}

// DifferenceOf is Difference for two grounds within a region, as Compare cuts them.
func DifferenceOf(ctx context.Context, from, to Ground, region *triangulate.Region, opt Options) (*interp.Surface, error) {
	a, _, err := from.within(ctx, region, opt)
	if err != nil {
		return nil, err
	}
	b, _, err := to.within(ctx, region, opt)
	if err != nil {
		return nil, err
	}
	if a != nil && b != nil {
		return Difference(ctx, a, b, opt)
	}
	s := a
	if s == nil {
		s = b
	}
	z := make([]float64, len(s.Z()))
	for i, h := range s.Z() {
		if a == nil {
			z[i] = h - from.Level
		} else {
			z[i] = to.Level - h
		}
	}
	return interp.New(s.Mesh(), z)
}
