package main

import (
	"context"
	"fmt"
	"math"
	"slices"

	"github.com/paulmach/orb"

	"isofacet/contour"
	"isofacet/io/picture"
)

// picture draws a quick look as SVG: bands if they are wanted, isolines, outline,
// readings.
func (d *drawing) picture(ctx context.Context, dest *destination) error {
	rims, err := d.g.rims(ctx, contour.Options{Workers: d.workers()})
	if err != nil {
		return err
	}
	bands := dest.part == partBands && len(d.levels) > 0
	m, err := picture.NewMap(dest.w, d.mapOptions(rims, bands))
	if err != nil {
		return err
	}
	if bands {
		for i := range d.made {
			if err := m.Band(d.made[i].Polygon, d.levelsBelow(&d.made[i])); err != nil {
				return err
			}
		}
	}
	err = d.eachPart(ctx, func(l *contour.Line, inferred bool) error {
		return m.Isoline(picture.Isoline{Level: l.Level.Number.String(), Index: l.Level.Rank == contour.Index, Inferred: inferred, Points: l.Points})
	})
	if err != nil {
		return err
	}
	if err := m.Outline(rims...); err != nil {
		return err
	}
	if d.showReadings {
		points := d.g.l.set.Points
		if d.g.l.drawn.region != nil {
			points = slices.DeleteFunc(slices.Clone(points), func(p orb.Point) bool { return !d.g.l.contains(p) })
		}
		if err := m.Readings(points); err != nil {
			return err
		}
	}
	r, err := m.Close()
	if err != nil {
		return err
	}
	text := fmt.Sprintf("picture: %s: 1 mm on paper is %.4g on the ground", dest.name(), r.Scale)
	if r.TooSmall > 0 {
		text += fmt.Sprintf("; %d too small to see", r.TooSmall)
	}
	d.report.Note(text, "file", dest.path, "scale", r.Scale, "too_small", r.TooSmall, "dots", r.Dots, "covered", r.Covered)
	return nil
}

// mapOptions says what the picture shows beside its lines.
func (d *drawing) mapOptions(rims []orb.Ring, bands bool) picture.MapOptions {
	inf := math.Inf(1)
	opt := picture.MapOptions{
		Title:  d.title(),
		Extent: orb.Bound{Min: orb.Point{inf, inf}, Max: orb.Point{-inf, -inf}},
		Labels: d.g.labels, Interval: d.interval.text, IndexEvery: d.indexEvery.value,
	}
	for _, rim := range rims {
		opt.Extent = opt.Extent.Union(rim.Bound())
	}
	if bands {
		for _, l := range d.levels {
			opt.Bands = append(opt.Bands, l.Number.String())
		}
	}
	if d.inferred.IsSet() {
		opt.Notes = append(opt.Notes, "dashed: inferred, further than "+d.inferred.String()+" from the nearest reading")
	}
	return opt
}

// title names what the picture was made from.
func (d *drawing) title() string {
	if d.g.raster != nil {
		return d.fromRaster.text
	}
	return d.g.l.title()
}

// levelsBelow returns how many levels are at or below the values of a band.
func (d *drawing) levelsBelow(b *contour.Band) int {
	if b.Lower == nil {
		return 0
	}
	n, _ := slices.BinarySearchFunc(d.levels, b.Lower, func(l contour.Level, of *contour.Level) int { return l.Number.Cmp(of.Number) })
	return n + 1
}
