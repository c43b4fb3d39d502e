// Package record writes down what a run read, did and wrote, completely enough to
// run it again to the same bytes.
//
//	r := record.New("grid", settings)
//	source := r.Input("shots.csv", file)       // hashed while it is read
//	out := r.Output("value", "site.csv", "csv", w) // hashed while it is written
//	...
//	r.Write(w)
//
// # Conventions
//
// A record is one JSON object with two parts. "stable" holds what the results
// depend on and what they are: the same command on the same files writes the same
// bytes there, whatever the machine, the hour and the number of threads. "this_run"
// holds the rest, for information: when, where, how long, with which settings that
// change no result.
//
// File names are those of the command line. Hashes are SHA-256, in hexadecimal.
package record
