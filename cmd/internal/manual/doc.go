// Package manual writes the pages about a command tree: the help on a terminal,
// the manual pages for man, and the option table for the README. All three come
// from the same commands and flags, so they cannot differ.
//
//	manual.Add(cmd.Flags(), manual.Option{Group: "Raster", Name: "cell", Value: &cell, Text: "size of a cell"})
//	cmd.SetHelpFunc(manual.Help)
//	manual.Man(w, cmd)
//	manual.OptionTable(w, root)
//
// # Conventions
//
// A command's Short is a phrase without a capital or a full stop, its Long is
// plain paragraphs, its Example holds one command a line and comments that begin
// with #. Flags belong to groups, which are printed in the order in which they
// were first used.
//
// The pages hold no date and no version, so that they change only when the
// program's words do.
package manual
