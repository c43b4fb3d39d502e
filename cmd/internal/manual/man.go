package manual

import (
	"bufio"
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"
)

// Man writes the manual page of cmd in the macros of man(7). The notes are
// sections that every page ends with, such as the exit statuses.
func Man(w io.Writer, cmd *cobra.Command, notes ...Note) error {
	p := bufio.NewWriter(w)
	name := PageName(cmd)
	fmt.Fprintf(p, ".TH %s 1 \"\" \"%s\" \"User commands\"\n", roff(strings.ToUpper(name)), cmd.Root().Name())
	fmt.Fprintf(p, ".SH NAME\n%s \\- %s\n", roff(name), roff(cmd.Short))
	fmt.Fprintf(p, ".SH SYNOPSIS\n%s\n", roff(usage(cmd)))
	if cmd.Long != "" {
		p.WriteString(".SH DESCRIPTION\n")
		paragraphs(p, cmd.Long)
	}
	if cmd.HasAvailableSubCommands() {
		p.WriteString(".SH COMMANDS\n")
		for _, sub := range cmd.Commands() {
			if sub.IsAvailableCommand() {
				fmt.Fprintf(p, ".TP\n.B %s\n%s\n", roff(sub.Name()), roff(sub.Short))
			}
		}
	}
	if list := groups(cmd); len(list) > 0 {
		p.WriteString(".SH OPTIONS\n")
		for _, g := range list {
			fmt.Fprintf(p, ".SS %s\n", roff(g.name))
			for _, f := range g.flags {
				fmt.Fprintf(p, ".TP\n.B %s\n%s\n", roff(head(f)), roff(text(f)))
			}
		}
	}
	if cmd.Example != "" {
		p.WriteString(".SH EXAMPLES\n.nf\n")
		for _, line := range lines(cmd.Example) {
			fmt.Fprintln(p, roff(line))
		}
		p.WriteString(".fi\n")
	}
	for _, n := range notes {
		fmt.Fprintf(p, ".SH %s\n", roff(strings.ToUpper(n.Title)))
		paragraphs(p, n.Text)
	}
	see(p, cmd)
	return p.Flush()
}

// A Note is a section that belongs to every page.
type Note struct {
	Title string
	Text  string
}

// PageName returns the name of a command's manual page: isofacet-grid.
func PageName(cmd *cobra.Command) string {
	return strings.ReplaceAll(cmd.CommandPath(), " ", "-")
}

// see lists the other pages.
func see(p *bufio.Writer, cmd *cobra.Command) {
	var others []string
	root := cmd.Root()
	for _, other := range append([]*cobra.Command{root}, root.Commands()...) {
		if other != cmd && (other == root || other.IsAvailableCommand()) {
			others = append(others, fmt.Sprintf(".BR %s (1)", roff(PageName(other))))
		}
	}
	if len(others) > 0 {
		fmt.Fprintf(p, ".SH SEE ALSO\n%s\n", strings.Join(others, ",\n"))
	}
}

// paragraphs writes text whose paragraphs are parted by empty lines; indented
// lines are kept as they are.
func paragraphs(p *bufio.Writer, text string) {
	kept := false
	for _, line := range lines(text) {
		indented := strings.HasPrefix(line, " ")
		switch {
		case indented && !kept:
			p.WriteString(".PP\n.nf\n")
		case !indented && kept:
			p.WriteString(".fi\n")
		}
		kept = indented
		if line == "" {
			p.WriteString(".PP\n")
			continue
		}
		fmt.Fprintln(p, roff(line))
	}
	if kept {
		p.WriteString(".fi\n")
	}
}

// roff protects what the formatter would read as its own: backslashes, hyphens
// that are to be copied and pasted, and a dot or quote that begins a line.
func roff(s string) string {
	s = strings.NewReplacer(`\`, `\e`, "-", `\-`).Replace(s)
	if strings.HasPrefix(s, ".") || strings.HasPrefix(s, "'") {
		s = `\&` + s
	}
	return s
}
