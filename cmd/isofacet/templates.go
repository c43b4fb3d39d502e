package main

import (
	"fmt"
	"path/filepath"
	"strings"
	"unicode/utf8"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/io/readings"
)

// Names of outputs with {file}, {round} and {zone} in them.

// named notes what stands for the names between braces.
func (w *writing) named(cmd *cobra.Command) {
	w.names = map[string]string{}
	if f := cmd.Flags().Lookup("round"); f != nil && f.Changed {
		w.names["round"] = f.Value.String()
	}
	if only, ok := flagValue[*parsedList[readings.Pattern]](cmd, "only"); ok {
		for _, p := range only.values {
			if p.Role == readings.Zone {
				w.names["zone"] = strings.Trim(w.names["zone"]+" "+p.Text, " ")
			}
		}
	}
}

// flagValue returns the value of a flag, if it is of that type.
func flagValue[T any](cmd *cobra.Command, name string) (T, bool) {
	var none T
	f := cmd.Flags().Lookup(name)
	if f == nil {
		return none, false
	}
	v, ok := option.Inner(f.Value).(T)
	return v, ok
}

// expand puts what they stand for in place of {file}, {round} and {zone}.
func (w *writing) expand(option, path string, files []string) (string, error) {
	whole := path
	var b strings.Builder
	for {
		before, after, ok := strings.Cut(path, "{")
		b.WriteString(before)
		if !ok {
			return b.String(), nil
		}
		name, behind, ok := strings.Cut(after, "}")
		if !ok || name != "file" && name != "round" && name != "zone" {
			return "", status.Usage(fmt.Errorf("%s %q: expected {file}, {round} or {zone} between braces", option, whole),
				"{file} stands for the input's name, {round} for the round, {zone} for the zone of --only zone=NAME")
		}
		text, err := w.standsFor(option, whole, name, files)
		if err != nil {
			return "", err
		}
		b.WriteString(text)
		path = behind
	}
}

// standsFor returns the text for a name between braces.
func (w *writing) standsFor(option, whole, name string, files []string) (string, error) {
	if name == "file" {
		if len(files) != 1 || files[0] == "-" {
			return "", status.Usage(fmt.Errorf("%s %q: {file} with %d named inputs: expected one", option, whole, len(files)), "write the name out")
		}
		base := filepath.Base(filepath.FromSlash(strings.TrimPrefix(files[0], samplePrefix)))
		return safeName(strings.TrimSuffix(base, filepath.Ext(base))), nil
	}
	text, ok := w.names[name]
	if !ok {
		hint := "--each round writes a file for every round, --round NAME for one"
		if name == "zone" {
			hint = "{zone} stands for NAME of --only zone=NAME"
		}
		return "", status.Usage(fmt.Errorf("%s %q: {%s} without a %s: expected one to be chosen", option, whole, name, name), hint)
	}
	safe := safeName(text)
	if strings.Trim(safe, "-. ") == "" {
		return "", status.With(status.WrongData, fmt.Errorf("%s %q: {%s} is %q: expected a text that can stand in a file name", option, whole, name, text),
			"give the "+name+" a name with letters or digits")
	}
	return safe, nil
}

// safeName makes every character that some system does not take in a file name a
// hyphen.
func safeName(s string) string {
	s = strings.Map(func(r rune) rune {
		if r < ' ' || r == 0x7f || r == utf8.RuneError || strings.ContainsRune(`<>:"/\|?*{}`, r) {
			return '-'
		}
		return r
	}, s)
	// A dot in front hides a file; blanks and dots at the end get lost on some
	// systems.
	if strings.HasPrefix(s, ".") {
		s = "-" + s[1:]
	}
	if n := len(strings.TrimRight(s, ". ")); n < len(s) {
		s = s[:n] + strings.Repeat("-", len(s)-n)
	}
	return s
}
