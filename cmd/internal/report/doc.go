// Package report writes a program's words to standard error: notes, warnings and
// the one message of a run that failed.
//
// Text is for people, a line a message. JSON is for programs: one object a line
// with level, msg and the numbers of the message as fields of their own.
//
//	r := report.New(os.Stderr, report.Text, false)
//	r.Note("surface: 1503 vertices", "vertices", 1503)
//	r.Warn("hull-outline", "long outer edges enclose 31 % of the area")
//	r.Fail(err, []string{"name the columns"}, 3)
//
// # Conventions
//
// A warning has a short code that stays the same from version to version, so
// that scripts can tell warnings apart. Warnings are kept, in the order in which
// they were given, for the run record and for the count at the end.
//
// A quiet reporter leaves out the notes, never a warning or an error.
package report
