package main

import (
	"context"
	"errors"
	"fmt"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/status"
	"isofacet/grid/decimal"
	"isofacet/interp/overlay"
	"isofacet/io/lines"
	"isofacet/triangulate"
)

// toeBase is what a pile is measured from.
type toeBase struct {
	base  overlay.Base
	level decimal.Number
}

func parseToeBase(text string) (toeBase, error) {
	switch text {
	case "plane":
		return toeBase{base: overlay.BasePlane}, nil
	case "ring":
		return toeBase{base: overlay.BaseRing}, nil
	}
	n, err := decimal.Parse(text[min(len(levelPrefix), len(text)):])
	if err != nil || len(text) < len(levelPrefix) || text[:len(levelPrefix)] != levelPrefix {
		return toeBase{}, errors.New("level=Z, plane or ring")
	}
	return toeBase{base: overlay.BaseLevel, level: n}, nil
}

// volumes is one run.
type volumes struct {
	*volumeCommand
	from, to *surfaceSide // from is nil for a toe, or a stage table alone
	follow   *input       // the line that sections stand square to, nil if it is typed
	regions  []*measuredRegion
	units    *volumeUnits
	result   volumeResult
	xy, z    int // digits after the point
	areas    int
	volumes  int
}

// A measuredRegion is where volumes are measured: everywhere, within a polygon, or
// within a toe ring.
type measuredRegion struct {
	name   string
	region *triangulate.Region // nil for everywhere
	rings  []orb.Ring
	toe    *overlay.Toe
}

// name opens the inputs.
func (v *volumes) name() error {
	var err error
	if v.volumeCommand.from.set {
		if v.from, err = v.nameSide("from", v.volumeCommand.from.text, v.fromVertices.text); err != nil {
			return err
		}
	}
	if v.to, err = v.nameSide("to", v.volumeCommand.to.text, v.toVertices.text); err != nil {
		return err
	}
	if v.along.File != "" {
		v.follow, err = v.input(v.along.File)
	}
	return err
}

// sides are those there are.
func (v *volumes) sides() []*surfaceSide {
	if v.from == nil {
		return []*surfaceSide{v.to}
	}
	return []*surfaceSide{v.from, v.to}
}

// make reads, measures and writes.
func (v *volumes) make(ctx context.Context, out *outputs) error {
	for i, s := range v.sides() {
		v.again = i > 0 // lines and limits hold for both
		err := v.readSide(ctx, &v.reading, s, v.noData.String())
		v.again = false
		if err != nil {
			return err
		}
		v.xy, v.z = max(v.xy, s.xy+2), max(v.z, s.z+2)
		text := s.option + ": " + s.details
		if s.ground.Surface != nil {
			text += fmt.Sprintf(", area %v", number{s.ground.Surface.Area(), v.decimals.Resolve(s.xy + 2)})
		}
		v.report.Note(text, "side", s.option, "kind", s.kind)
	}
	if v.from != nil {
		if err := v.agreeSides(&v.reading, v.from, v.to); err != nil {
			return err
		}
	}
	v.xy, v.z = v.decimals.Resolve(v.xy), v.decimals.Resolve(v.z)
	if err := v.settleVolumeUnits(); err != nil {
		return err
	}
	if err := v.readRegions(ctx); err != nil {
		return err
	}
	if err := v.measure(ctx); err != nil {
		return err
	}
	if v.sections.IsSet() {
		if err := v.cutSections(ctx); err != nil {
			return err
		}
	}
	if v.stageStep.IsSet() {
		if err := v.stages(ctx); err != nil {
			return err
		}
	}
	return v.write(ctx, out)
}

// readRegions reads polygons and toe rings.
func (v *volumes) readRegions(ctx context.Context) error {
	names, toe := v.inside.values, v.toe.values != nil
	if toe {
		names = v.toe.values
	}
	if names == nil {
		v.regions = []*measuredRegion{{name: "all"}}
		return nil
	}
	set, err := v.readLines(ctx, names, &v.reading, "ring", lines.Rings)
	if err != nil {
		return err
	}
	v.xy = max(v.xy, v.decimals.Resolve(set.DecimalsXY+2))
	for i := range set.Lines {
		l := &set.Lines[i]
		ring := orb.Ring(l.Points)
		last := len(v.regions) - 1
		if !toe && last >= 0 && v.regions[last].name == l.Name && set.Lines[i-1].Feature == l.Feature {
			v.regions[last].rings = append(v.regions[last].rings, ring) // a hole, or another part
			continue
		}
		r := &measuredRegion{name: l.Name, rings: []orb.Ring{ring}}
		if toe {
			if r.toe, err = v.toeOf(l); err != nil {
				return err
			}
		}
		v.regions = append(v.regions, r)
	}
	for _, r := range v.regions {
		if r.region, err = triangulate.NewRegion(r.rings, nil); err != nil {
			return ringError(set, &lines.Set{}, err)
		}
	}
	return nil
}

// toeOf makes a toe of a ring. A ring without heights takes those of the surface.
func (v *volumes) toeOf(l *lines.Line) (*overlay.Toe, error) {
	b := v.toeBase.value
	t := &overlay.Toe{Ring: orb.Ring(l.Points), Z: l.Z, Base: b.base, Level: b.level.Float64()}
	if b.base == overlay.BaseLevel || t.Z != nil {
		return t, nil
	}
	s := v.to.ground.Surface.Sampler()
	for k, p := range t.Ring {
		at := s.At(p)
		if at.Location.Place == triangulate.Outside {
			return nil, status.With(status.WrongData, fmt.Errorf("%s: ring %q leaves the surface at (%v, %v) and has no heights: expected a ring on it, or heights", l.At(k), l.Name, p[0], p[1]),
				"draw the ring within the surface, or give its vertices heights")
		}
		t.Z = append(t.Z, at.Z)
	}
	v.report.Note(fmt.Sprintf("toe: ring %q has no heights: the surface's are taken", l.Name), "ring", l.Name)
	return t, nil
}

// recordSides puts the account of all readings into the record.
func (v *volumes) recordSides() {
	if v.rec == nil {
		return
	}
	all := &record.Readings{}
	for _, s := range v.sides() {
		if s.l == nil {
			continue
		}
		c := s.l.set.Counts
		all.Read, all.Used, all.Merged = all.Read+c.Read, all.Used+c.Used, all.Merged+c.Merged
		all.LeftOut, all.Refused = all.LeftOut+c.LeftOut, all.Refused+c.Refused
		all.NotUsed = append(all.NotUsed, v.notUsed([]*input{s.in}, s.l.set)...)
	}
	v.rec.Stable.Readings = all
	v.rec.Stable.Result = &v.result
}

// write writes all outputs, what goes to standard output last.
func (v *volumes) write(ctx context.Context, out *outputs) error {
	slices.SortStableFunc(out.list, func(a, b *destination) int { return boolCompare(a.path == "-", b.path == "-") })
	v.result.Cautions = volumeCautions
	if v.uncertain() {
		v.result.Cautions = append(slices.Clone(v.result.Cautions), "The stated uncertainty comes from the heights alone, taken as independent; what nobody measured between them is not in it.")
	}
	v.result.Warnings = v.report.Warnings()
	if err := v.settleWarnings(); err != nil {
		return err
	}
	maps := &differenceMaps{volumes: v}
	for _, d := range out.list {
		if err := out.write(d, func(d *destination) error {
			switch d.part {
			case partFigures:
				return v.writeFigures(d)
			case partStages:
				return v.writeStages(d)
			case partSections:
				return v.writeSections(d)
			}
			return maps.write(ctx, d)
		}); err != nil {
			return err
		}
	}
	if err := v.settleWarnings(); err != nil {
		return err
	}
	v.recordSides()
	return out.commit()
}

// volumeCautions go with the figures.
var volumeCautions = []string{
	"Volumes rest on the surfaces named and their outlines; between measured points a surface is straight, and may miss what nobody measured.",
	"Not a survey by itself: where payment or safety depends on it, a licensed professional reviews and signs, and local rules decide.",
	"Have buried lines marked before anyone digs.",
}
