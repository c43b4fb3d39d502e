package manual

import (
	"bufio"
	"bytes"
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
)

// OptionTable writes the options of every command of root as a Markdown table.
// A row holds an option, the commands that take it, and what it does.
func OptionTable(w io.Writer, root *cobra.Command) error {
	type row struct {
		flag     *pflag.Flag
		commands []string
	}
	var rows []*row
	var commands int
	for _, cmd := range root.Commands() {
		if !cmd.IsAvailableCommand() {
			continue
		}
		commands++
		for _, g := range groups(cmd) {
			for _, f := range g.flags {
				var found *row
				for _, r := range rows {
					// An option means the same everywhere; should two ever differ in
					// words, each has its row, so that the table stays true.
					if r.flag.Name == f.Name && head(r.flag) == head(f) && text(r.flag) == text(f) {
						found = r
					}
				}
				if found == nil {
					found = &row{flag: f}
					rows = append(rows, found)
				}
				found.commands = append(found.commands, "`"+cmd.Name()+"`")
			}
		}
	}
	p := bufio.NewWriter(w)
	p.WriteString("| option | commands | meaning |\n|---|---|---|\n")
	for _, r := range rows {
		fmt.Fprintf(p, "| `%s` | %s | %s |\n", cell(head(r.flag)), strings.Join(r.commands, ", "), cell(text(r.flag)))
	}
	return p.Flush()
}

// cell protects the bar that would end a cell of the table.
func cell(s string) string { return strings.ReplaceAll(s, "|", `\|`) }

// The lines between which a page holds what is generated.
const (
	begin = "<!-- options: begin, written by go generate -->\n"
	end   = "<!-- options: end -->\n"
)

// Splice returns page with table between its two marks, in place of what stood
// there.
func Splice(page, table []byte) ([]byte, error) {
	before, rest, ok := bytes.Cut(page, []byte(begin))
	_, after, ok2 := bytes.Cut(rest, []byte(end))
	if !ok || !ok2 {
		return nil, fmt.Errorf("expected the lines %q and %q, one after the other", strings.TrimSpace(begin), strings.TrimSpace(end))
	}
	return bytes.Join([][]byte{before, []byte(begin), table, []byte(end), after}, nil), nil
}
