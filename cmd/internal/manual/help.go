package manual

import (
	"bufio"
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"
)

// width is how wide a help page is: it fits any terminal and a printed page.
const width = 80

// indent is where the text about a flag begins.
const indent = 26

// Help writes the help page of cmd.
func Help(w io.Writer, cmd *cobra.Command) error {
	p := bufio.NewWriter(w)
	fmt.Fprintf(p, "%s: %s\n\n", cmd.CommandPath(), cmd.Short)
	fmt.Fprintf(p, "Usage: %s\n", usage(cmd))
	if cmd.Long != "" {
		fmt.Fprintln(p)
		for _, paragraph := range joined(lines(cmd.Long)) {
			writeWrapped(p, paragraph, 0)
		}
	}
	if cmd.HasAvailableSubCommands() {
		fmt.Fprintln(p, "\nCommands")
		for _, sub := range cmd.Commands() {
			if sub.IsAvailableCommand() {
				entry(p, sub.Name(), sub.Short)
			}
		}
	}
	for _, g := range groups(cmd) {
		fmt.Fprintf(p, "\n%s\n", g.name)
		for _, f := range g.flags {
			entry(p, head(f), text(f))
		}
	}
	if cmd.Example != "" {
		fmt.Fprintln(p, "\nExamples")
		for _, line := range lines(cmd.Example) {
			fmt.Fprintln(p, strings.TrimRight("  "+line, " "))
		}
	}
	if cmd.HasAvailableSubCommands() {
		fmt.Fprintf(p, "\nMore about a command: %s COMMAND --help\n", cmd.CommandPath())
	}
	return p.Flush()
}

// joined makes one line of every paragraph; empty and indented lines stay as they
// are.
func joined(lines []string) []string {
	var out []string
	open := false
	for _, line := range lines {
		plain := line != "" && !strings.HasPrefix(line, " ")
		if plain && open {
			out[len(out)-1] += " " + line
		} else {
			out = append(out, line)
		}
		open = plain
	}
	return out
}

// usage returns the line that shows how a command is typed.
func usage(cmd *cobra.Command) string {
	if cmd.HasParent() {
		return cmd.Parent().CommandPath() + " " + cmd.Use
	}
	return cmd.Use
}

// entry writes a flag or command with its text in a second column.
func entry(w *bufio.Writer, name, text string) {
	fmt.Fprintf(w, "  %-*s", indent-2, name)
	if len(name) > indent-4 {
		fmt.Fprintf(w, "\n%*s", indent, "")
	}
	writeWrapped(w, text, indent)
}

// writeWrapped writes text broken between words; lines after the first begin at
// column left, where the first is taken to stand already. An indented text keeps
// its indentation.
func writeWrapped(w *bufio.Writer, text string, left int) {
	lead := len(text) - len(strings.TrimLeft(text, " "))
	w.WriteString(text[:lead])
	left += lead
	column := left
	for i, word := range strings.Fields(text) {
		if i > 0 && column+1+len(word) > width {
			fmt.Fprintf(w, "\n%*s", left, "")
			column = left
		} else if i > 0 {
			w.WriteByte(' ')
			column++
		}
		w.WriteString(word)
		column += len(word)
	}
	w.WriteByte('\n')
}
