// Package samples holds two invented scenarios with known answers, so that
// commands can be tried, documented and tested from any folder.
//
//	text, err := fs.ReadFile(samples.FS, samples.GravelPitShots)
//
// gravel-pit: a day's survey of a pit with benches, a ramp, a pond and a
// stockpile, 1552 rows in metres, columns point, northing, easting, elevation,
// code (northing first). Codes: GR spot height on the ground, CR crest, TOE
// toe, HR edge of the haul road, PE edge of the pond, SP stockpile, BP
// boundary post, shot on top of the post and so 1.1 m above the ground. Three
// shots are stored twice with equal heights. Two heights are wrong; the
// decisions file leaves them out.
//
// landfill: 24 monitoring wells in two zones and five rounds of depths to
// water in feet. Two wells fall dry, two were obstructed once, one was pumped
// shortly before, and product floats in two.
//
// The answers files give the geometry and the heads that the readings were
// made from. Names, places and numbers are invented; likeness to a real site
// is chance.
//
// Coordinates are plane, x east and y north. Nothing here is licensed apart
// from the rest of the module.
//
// The files are made by internal/gen: go generate writes them anew, and a
// test fails when they are not what it makes.
package samples
