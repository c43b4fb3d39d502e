package manual

import (
	"bytes"
	"os/exec"
	"strings"
	"testing"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/option"
)

// tree is a small program with what a page has to show.
func tree() *cobra.Command {
	root := &cobra.Command{Use: "tool COMMAND", Short: "does things", Long: "First paragraph.\n\nSecond one:\n\n  an indented line"}
	cmd := &cobra.Command{
		Use: "cut [options] [FILE...]", Short: "cuts",
		Long:    "Cuts .dotted and 'quoted' things with a \\ in them.\n.TH is no macro here.",
		Example: "tool cut --cell 2 a.csv\ntool cut - < b.csv",
		RunE:    func(*cobra.Command, []string) error { return nil },
	}
	var cell option.Cell
	var quiet Switch
	var outs option.Outs
	choice := option.NewChoice("matrix", "list")
	Add(cmd.Flags(),
		Option{Group: "Raster", Name: "cell", Value: &cell, Text: "size of a cell, with a text that is so long that it goes on in the line after the first"},
		Option{Group: "Raster", Name: "layout", Value: &choice, Text: "of the file"},
		Option{Group: "Output", Name: "out", Value: &outs, Text: "file to write", Default: "-", Repeatable: true},
		Option{Group: "Running", Name: "quiet", Value: &quiet, Switch: true, Text: "say nothing"})
	other := &cobra.Command{Use: "glue", Short: "glues", RunE: cmd.RunE}
	Add(other.Flags(), Option{Group: "Running", Name: "quiet", Value: &quiet, Switch: true, Text: "say nothing"})
	hidden := &cobra.Command{Use: "secret", Short: "hides", Hidden: true, RunE: cmd.RunE}
	root.AddCommand(cmd, other, hidden)
	return root
}

func TestHelp(t *testing.T) {
	var out bytes.Buffer
	if err := Help(&out, tree().Commands()[0]); err != nil {
		t.Fatal(err)
	}
	want := `tool cut: cuts

Usage: tool cut [options] [FILE...]

Cuts .dotted and 'quoted' things with a \ in them. .TH is no macro here.

Raster
  --cell S|SX,SY          size of a cell, with a text that is so long that it
                          goes on in the line after the first
  --layout matrix|list    of the file (default matrix)

Output
  --out FILE              file to write; may be repeated (default -)

Running
  --quiet                 say nothing

Examples
  tool cut --cell 2 a.csv
  tool cut - < b.csv
`
	if got := out.String(); got != want {
		t.Errorf("the page is:\n%s\nwant:\n%s", got, want)
	}
}

func TestHelpOfRootListsCommands(t *testing.T) {
	var out bytes.Buffer
	if err := Help(&out, tree()); err != nil {
		t.Fatal(err)
	}
	got := out.String()
	for _, want := range []string{"\nCommands\n", "  cut                     cuts\n", "\nSecond one:\n\n  an indented line\n", "tool COMMAND --help"} {
		if !strings.Contains(got, want) {
			t.Errorf("the page is:\n%s\nwant %q in it", got, want)
		}
	}
	if strings.Contains(got, "secret") {
		t.Error("a hidden command is listed")
	}
}

func TestMan(t *testing.T) {
	root := tree()
	var out bytes.Buffer
	if err := Man(&out, root.Commands()[0], Note{"Exit status", "0 done."}); err != nil {
		t.Fatal(err)
	}
	got := out.String()
	for _, want := range []string{
		".TH TOOL\\-CUT 1 \"\" \"tool\"", ".SH NAME\ntool\\-cut \\- cuts\n", ".SS Raster\n", ".B \\-\\-cell S|SX,SY\n",
		"with a \\e in them", "\n\\&.TH is no macro", ".SH EXAMPLES\n.nf\ntool cut \\-\\-cell 2 a.csv\n", ".SH EXIT STATUS\n0 done.\n",
		".BR tool (1)", ".BR tool\\-glue (1)",
	} {
		if !strings.Contains(got, want) {
			t.Errorf("the page is:\n%s\nwant %q in it", got, want)
		}
	}
	if strings.Contains(got, "secret") {
		t.Error("a hidden command is named")
	}
	var again bytes.Buffer
	if err := Man(&again, tree().Commands()[0], Note{"Exit status", "0 done."}); err != nil || again.String() != got {
		t.Error("two writings of one page differ")
	}
}

// Where the formatter is installed, it must find nothing to complain about.
func TestManIsFormatted(t *testing.T) {
	mandoc, err := exec.LookPath("mandoc")
	if err != nil {
		t.Skip("mandoc, which checks manual pages, is not installed")
	}
	var page bytes.Buffer
	if err := Man(&page, tree().Commands()[0]); err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(mandoc, "-Tlint", "-Werror")
	cmd.Stdin = &page
	if out, err := cmd.CombinedOutput(); err != nil {
		t.Errorf("%v\n%s", err, out)
	}
}

func TestOptionTable(t *testing.T) {
	var out bytes.Buffer
	if err := OptionTable(&out, tree()); err != nil {
		t.Fatal(err)
	}
	want := "| option | commands | meaning |\n|---|---|---|\n" +
		"| `--cell S\\|SX,SY` | `cut` | size of a cell, with a text that is so long that it goes on in the line after the first |\n" +
		"| `--layout matrix\\|list` | `cut` | of the file (default matrix) |\n" +
		"| `--out FILE` | `cut` | file to write; may be repeated (default -) |\n" +
		"| `--quiet` | `cut`, `glue` | say nothing |\n"
	if got := out.String(); got != want {
		t.Errorf("the table is:\n%s\nwant:\n%s", got, want)
	}
}

func TestSplice(t *testing.T) {
	page := "before\n" + begin + "old\n" + end + "after\n"
	got, err := Splice([]byte(page), []byte("new\n"))
	if err != nil {
		t.Fatal(err)
	}
	if want := "before\n" + begin + "new\n" + end + "after\n"; string(got) != want {
		t.Errorf("got %q, want %q", got, want)
	}
	for _, bad := range []string{"", begin, end + begin} {
		if _, err := Splice([]byte(bad), nil); err == nil {
			t.Errorf("a page without both marks in order is taken: %q", bad)
		}
	}
}
