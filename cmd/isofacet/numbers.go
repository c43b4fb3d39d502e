package main

import (
	"strconv"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
)

// numbersLast moves every argument that looks like a number below zero, or like a
// place that begins with one, behind "--", so that it is not taken for a row of
// one-letter options. The value of an option stays where it is:
//
//	query a.csv -5,10 --cell 2     becomes    query a.csv --cell 2 -- -5,10
//	query a.csv --at -5,10         stays as it is
func numbersLast(args []string, root *cobra.Command) []string {
	switches := switchNames(root)
	var kept, numbers []string
	for i, a := range args {
		if a == "--" {
			return append(append(append(kept, "--"), numbers...), args[i+1:]...)
		}
		if isNegative(a) && !(i > 0 && takesValue(args[i-1], switches)) {
			numbers = append(numbers, a)
			continue
		}
		kept = append(kept, a)
	}
	if numbers == nil {
		return kept
	}
	return append(append(kept, "--"), numbers...)
}

// isNegative reports whether a is a number below zero or a list that begins with
// one.
func isNegative(a string) bool {
	if !strings.HasPrefix(a, "-") {
		return false
	}
	first, _, _ := strings.Cut(a, ",")
	_, err := strconv.ParseFloat(first, 64)
	return err == nil && strings.ContainsAny(first, "0123456789")
}

// takesValue reports whether what follows the argument is its value.
func takesValue(arg string, switches map[string]bool) bool {
	name, ok := strings.CutPrefix(arg, "--")
	return ok && name != "" && !strings.Contains(name, "=") && !switches[name]
}

// switchNames returns the options of all commands that take no value.
func switchNames(root *cobra.Command) map[string]bool {
	names := map[string]bool{"help": true}
	for _, cmd := range root.Commands() {
		cmd.Flags().VisitAll(func(f *pflag.Flag) {
			if f.NoOptDefVal != "" {
				names[f.Name] = true
			}
		})
	}
	return names
}
