package main

import (
	"context"

	"isofacet/contour"
	"isofacet/io/linecsv"
)

func (d *drawing) tables() linecsv.Options {
	return linecsv.Options{XYDecimals: d.xy, Inferred: d.inferred.IsSet(), Workers: d.workers()}
}

// lineTable writes the isolines as CSV, a vertex a row.
func (d *drawing) lineTable(ctx context.Context, dest *destination) error {
	t := linecsv.NewLines(dest.w, d.tables())
	var batch []linecsv.Line
	positions := 0
	flush := func() error {
		err := t.WriteBatch(batch)
		clear(batch) // let go of the points
		batch, positions = batch[:0], 0
		return err
	}
	err := d.eachPart(ctx, func(l *contour.Line, inferred bool) error {
		batch = append(batch, linecsv.Line{Level: l.Level.Z, Rank: l.Level.Rank.String(), Closed: l.Closed, Inferred: inferred, Points: l.Points})
		if positions += len(l.Points); positions < batchPositions {
			return nil
		}
		return flush()
	})
	if err != nil {
		return err
	}
	if err := flush(); err != nil {
		return err
	}
	return t.Close()
}

// bandTable writes the bands as CSV, a vertex a row.
func (d *drawing) bandTable(dest *destination) error {
	t := linecsv.NewBands(dest.w, d.tables())
	all := make([]linecsv.Band, len(d.made))
	for i := range d.made {
		b := &d.made[i]
		all[i] = linecsv.Band{Lower: bound(b.Lower), Upper: bound(b.Upper), Polygon: b.Polygon}
	}
	if err := t.WriteBatch(all); err != nil {
		return err
	}
	return t.Close()
}

func bound(l *contour.Level) linecsv.Bound {
	if l == nil {
		return linecsv.Bound{}
	}
	return linecsv.At(l.Z)
}
