// Package job reads job files: what isofacet is to do with many inputs, in one
// vocabulary with its command line.
//
//	[settings]                  # for every task whose command takes them
//	columns = "id,x,y,z,-,round"
//	vertical-datum = "NAVD 88"
//
//	[[task]]
//	name    = "heads"
//	command = "contour"
//	files   = ["heads.csv"]
//	each    = "round"
//	interval = 0.5
//	out     = ["heads-{round}.geojson", "heads-{round}.svg"]
//
// Keys are the long options of the commands, values what they take: text, numbers,
// true or false for switches, a list where an option may be repeated. A key of a
// task stands in place of the same key of the settings.
//
// Decode checks everything that the vocabulary says, names the line and column of
// what is wrong, and for an unknown key the nearest known one. Schema is the same as
// a JSON Schema (draft 2020-12), for editors; a test holds one against the other.
//
// A State remembers which steps of a job are done, with the hashes of what they read
// and wrote, so that a later run does only what is left. It is a text of JSON
// lines; each is added when its step's outputs have appeared, so a run that is
// killed has lost nothing but the step it was at.
package job
