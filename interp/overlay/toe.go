package overlay

import (
	"context"
	"errors"
	"fmt"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/triangulate"
)

// Base is what a pile within a toe ring is measured from.
type Base uint8

// The bases.
const (
	BaseLevel Base = iota // a level
	BasePlane             // the least squares plane through the ring's vertices
	BaseRing              // triangles between the ring's vertices
)

// ErrNoPlane is the error of a ring whose vertices are in line.
var ErrNoPlane = errors.New("vertices in line have no plane")

// Toe is the ring at the foot of a pile, or along the crest of a pit.
type Toe struct {
	Ring  orb.Ring // closed
	Z     []float64
	Base  Base
	Level float64 // for BaseLevel
}

// ToeFigures are what lies between the base and the surface within the ring.
type ToeFigures struct {
	*Figures
	// Plane is the base of BasePlane, Off how far the farthest vertex of the ring lies
	// above or below it.
	Plane Slope
	Off   float64
}

// Measure returns the figures from the toe's base to the surface, within the ring: the
// fill is the pile, the cut a pit. Weights are those of the surface; the base is taken
// as it is.
//
// It returns ErrNoPlane, *interp.CountError for heights that are not one a vertex,
// and the errors of NewRegion, Clip and Constrained.
func (t *Toe) Measure(ctx context.Context, s *interp.Surface, opt Options) (*ToeFigures, error) {
	region, err := triangulate.NewRegion([]orb.Ring{t.Ring}, nil)
	if err != nil {
		return nil, err
	}
	if t.Base != BaseLevel && len(t.Z) != len(t.Ring) {
		return nil, &interp.CountError{Values: len(t.Z), Want: len(t.Ring), Per: "vertex"}
	}
	if t.Base == BaseLevel {
		f, err := Compare(ctx, Ground{Level: t.Level}, Ground{Surface: s}, region, opt)
		return &ToeFigures{Figures: f}, err
	}
	clip, err := s.Clip(ctx, region, triangulate.Options{Workers: opt.Workers})
	if err != nil {
		return nil, err
	}
	out := &ToeFigures{}
	m := clip.Surface.Mesh()
	if t.Base == BasePlane {
		last := len(t.Ring) - 1 // repeats the first
		var ok bool
		if out.Plane, out.Off, ok = FitSlope(t.Ring[:last], t.Z[:last]); !ok {
			return nil, fmt.Errorf("a ring of %d vertices: %w", last, ErrNoPlane)
		}
		out.Figures, err = OnMesh(ctx, m, out.Plane.Heights(m), clip.Surface.Z(), opt)
	} else {
		var base *interp.Surface
		if base, err = t.between(ctx, region, opt); err == nil {
			out.Figures, err = Between(ctx, base, clip.Surface, opt)
		}
	}
	if err != nil {
		return nil, err
	}
	if out.Weights != nil {
		out.Weights.From = VertexWeights{}
		out.Weights.To.spread(clip.Surface, clip)
	}
	return out, nil
}

// between returns the surface of triangles between the ring's vertices.
func (t *Toe) between(ctx context.Context, region *triangulate.Region, opt Options) (*interp.Surface, error) {
	segs := make([]triangulate.Segment, len(t.Ring)-1)
	for i := range segs {
		segs[i] = triangulate.Segment{From: int32(i), To: int32(i + 1)}
	}
	mesh, err := triangulate.Constrained(ctx, t.Ring, segs, triangulate.Options{Workers: opt.Workers})
	if err != nil {
		return nil, err
	}
	mesh = mesh.Hide(func(tri triangulate.Triangle) bool { return !region.Contains(middle(mesh, tri)) })
	return interp.FromInputs(mesh, t.Z)
}
