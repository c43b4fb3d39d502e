package main

import (
	"bytes"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"isofacet/cmd/internal/manual"
)

// newPages is "isofacet pages", which writes the generated pages of the
// repository. It is hidden: packagers and go generate use it.
func newPages(p *program) *cobra.Command {
	var man, readme string
	cmd := &cobra.Command{
		Use:    "pages",
		Short:  "write the manual pages and the option table of the README",
		Hidden: true,
		Args:   noArguments,
		RunE: func(*cobra.Command, []string) error {
			if man != "" {
				if err := writeManPages(p.root, man); err != nil {
					return err
				}
			}
			if readme != "" {
				return writeOptionTable(p.root, readme)
			}
			return nil
		},
	}
	cmd.Flags().StringVar(&man, "man", "", "folder for the manual pages")
	cmd.Flags().StringVar(&readme, "readme", "", "page whose option table is renewed")
	return cmd
}

// pages returns the manual pages by file name.
func manPages(root *cobra.Command) (map[string][]byte, error) {
	list := map[string][]byte{}
	for _, cmd := range append([]*cobra.Command{root}, root.Commands()...) {
		if cmd != root && !cmd.IsAvailableCommand() {
			continue
		}
		var b bytes.Buffer
		if err := manual.Man(&b, cmd, exitStatusNote); err != nil {
			return nil, err
		}
		list[manual.PageName(cmd)+".1"] = b.Bytes()
	}
	return list, nil
}

var exitStatusNote = manual.Note{Title: "Exit status", Text: `0 done; 1 could not finish; 2 the command line is wrong; 3 the data are wrong,
or a warning under --warnings fail; 4 too big for the limits given; 130
interrupted; 143 asked to end by the system. A reader of standard output that
closes it early is no fault.`}

func writeManPages(root *cobra.Command, folder string) error {
	list, err := manPages(root)
	if err != nil {
		return err
	}
	if err := os.MkdirAll(folder, 0o777); err != nil {
		return err
	}
	for name, text := range list {
		if err := os.WriteFile(filepath.Join(folder, name), text, 0o666); err != nil {
			return err
		}
	}
	return nil
}

// optionTable returns page with its option table renewed.
func optionTable(root *cobra.Command, page []byte) ([]byte, error) {
	var table bytes.Buffer
	if err := manual.OptionTable(&table, root); err != nil {
		return nil, err
	}
	return manual.Splice(page, table.Bytes())
}

func writeOptionTable(root *cobra.Command, name string) error {
	page, err := os.ReadFile(name)
	if err != nil {
		return err
	}
	renewed, err := optionTable(root, page)
	if err != nil {
		return &os.PathError{Op: "renew", Path: name, Err: err}
	}
	if bytes.Equal(page, renewed) {
		return nil
	}
	return os.WriteFile(name, renewed, 0o666)
}

var _ pflag.Value = (*manual.Switch)(nil)
