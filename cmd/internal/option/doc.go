// Package option holds the kinds of value that the program's options take:
// sizes with units, cells, extents, places, patterns by role, output files.
//
// Each kind is a pflag.Value: it parses one argument, prints itself as it would
// be typed, and names its form for the help page. What the user typed stays in
// these values; what is built from it (a lattice, a reader's layout) is built by
// the command.
//
//	var cell option.Cell
//	flags.Var(&cell, "cell", "size of a cell")
//	flags.Parse([]string{"--cell", "2,2.5"})
//
// # Conventions
//
// Numbers are written with a point and without blanks; several numbers are
// separated by commas. A value that cannot be read is a *BadValue, which says
// what was seen and what was expected; the program adds the option's name.
//
// Nothing here opens a file.
package option

import "fmt"

// A BadValue says what was seen in place of an option's value and what was
// expected there.
type BadValue struct {
	Seen     string
	Expected string
}

func (e *BadValue) Error() string {
	return fmt.Sprintf("%q: expected %s", e.Seen, e.Expected)
}
