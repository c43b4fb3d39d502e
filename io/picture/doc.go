// Package picture draws quick looks: a Map of isolines or bands as SVG, and a raster as PNG, so that anyone can see a
// result at once. They are not map sheets: the scale is whatever fits.
//
// In: polylines with the texts of their levels, polygons of bands, rims, readings; or a grid. Out: one picture with a frame, the
// coordinates of two corners, a bar of round length, an arrow to the north and a legend.
//
//	m, err := picture.NewMap(out, picture.MapOptions{Extent: bound, Interval: "0.5", IndexEvery: 5, Labels: labels})
//	...
//	for _, l := range lines {
//		err = m.Isoline(picture.Isoline{Level: l.Level.Number.String(), Index: l.Level.Rank == contour.Index, Points: l.Points})
//	}
//	err = m.Outline(rims...)
//	report, err := m.Close()
//
//	report, err := picture.WriteRaster(out, g, picture.RasterOptions{Title: "pit.csv"})
//
// # Maps
//
// Sizes are millimetres. The frame fits into 180 by 220 unless told otherwise; its corners are round coordinates outside the
// extent. Lines of index levels are heavy, the others thin. Index lines carry the text of their level every 110 mm or so, on a
// straight stretch and clear of each other; without index lines all lines do. What is drawn first lies below: bands, then lines,
// then rims and readings. A group of lines has its level as title, which viewers show under the pointer.
//
// Lines are simplified to what can be seen: what is drawn lies within a tenth of a pixel (0.026 mm, 96 pixels an inch) of the line
// given. Lines that a hundredth of a millimetre holds are not drawn, nor readings that would hide behind another
// one's dot; Report counts both.
//
// # Rasters
//
// The colour tells the value: blue, green, sand, ivory from low to high, mixed in amounts of light and lighter with every
// step, so that a grey print or an eye that does not tell hues apart reads it too. Heights are shaded as relief
// (Lambert, light from the north-west 45 degrees high), multiplied by the round number that the legend tells, so that gentle
// ground shows. Slopes and directions are not shaded; directions have colours that close. Nodes without a value are hatched in grey. More than
// 2000 nodes a side become means of blocks (directions: one of each block); small rasters get whole pixels a cell.
//
// # Guarantees
//
// The same input gives the same bytes of a map and the same pixels of a raster on every processor; letters are filled by whole numbers
// for that. The bytes of a PNG depend on Go's version as well. Maps are well-formed XML whatever
// titles and labels hold. A value or coordinate that is not finite is refused with an *InputError. Not checked: that lines lie inside the
// extent, and that levels are what their texts say. Letters of a map are the reader's sans-serif, so that their widths are guessed;
// those of a raster are Go Regular.
//
// # Cost
//
// A Map takes some 50 ns a point and holds one line, the places of labels and a map of dots, both bounded by the paper. A
// raster takes some 20 ns a node and 250 ns a pixel, most of it PNG, and holds its blocks and the picture.
//
// Sources: J. H. Lambert, Photometria, 1760; sRGB by IEC 61966-2-1; SVG 1.1; PNG by ISO/IEC 15948.
package picture
