package main

import (
	"fmt"

	"isofacet/grid"
	"isofacet/io/picture"
)

// shadeDigits are the digits after the point of shades under --decimals auto: finer
// than an eye sees.
const shadeDigits = 4

// title names what a picture was made from.
func (l *loaded) title() string {
	if n := len(l.names); n > 1 {
		return fmt.Sprintf("%s and %d more", l.names[0], n-1)
	}
	return l.names[0]
}

// writePicture draws a quick look at a raster as PNG.
func (g *gridCommand) writePicture(d *destination, raster *grid.Grid, l *loaded) error {
	r, err := picture.WriteRaster(d.w, raster, picture.RasterOptions{Title: l.title(), PixelsMost: pictureSide})
	if err != nil {
		return err
	}
	text := fmt.Sprintf("picture: %s: %d x %d pixels", d.name(), r.Width, r.Height)
	if r.BlockCols > 1 || r.BlockRows > 1 {
		text += fmt.Sprintf(", each the mean of %.3g x %.3g nodes", r.BlockCols, r.BlockRows)
	}
	if r.Shaded && r.Exaggeration > 1 {
		text += fmt.Sprintf(", relief shaded with heights times %v", r.Exaggeration)
	}
	g.report.Note(text, "file", d.path, "width", r.Width, "height", r.Height, "exaggeration", r.Exaggeration)
	return nil
}
