package main

import (
	"bytes"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
)

// tree returns the commands as the program has them.
func tree(t *testing.T) *cobra.Command {
	t.Helper()
	return newProgram(streams{strings.NewReader(""), io.Discard, io.Discard}, nil).newRoot()
}

// The pages in the repository are what the program says of itself.
func TestGeneratedPagesAreCurrent(t *testing.T) {
	root := tree(t)
	want, err := manPages(root)
	if err != nil {
		t.Fatal(err)
	}
	for name, text := range want {
		got, err := os.ReadFile(filepath.Join("man", name))
		if err != nil {
			t.Errorf("%v; go generate writes it", err)
		} else if !bytes.Equal(got, text) {
			t.Errorf("man/%s is not what the program says; go generate renews it", name)
		}
	}
	files, err := os.ReadDir("man")
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range files {
		if want[f.Name()] == nil {
			t.Errorf("man/%s belongs to no command", f.Name())
		}
	}
	page, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	renewed, err := optionTable(root, page)
	if err != nil {
		t.Fatalf("README.md: %v", err)
	}
	if !bytes.Equal(page, renewed) {
		t.Error("the option table of README.md is not what the program says; go generate renews it")
	}
}

// An option means the same in every command that has it.
func TestOptionsMeanTheSameEverywhere(t *testing.T) {
	type meaning struct{ command, form, text string }
	seen := map[string]meaning{}
	for _, cmd := range tree(t).Commands() {
		cmd.Flags().VisitAll(func(f *pflag.Flag) {
			m := meaning{cmd.Name(), f.Value.Type(), f.Usage}
			before, ok := seen[f.Name]
			if !ok {
				seen[f.Name] = m
				return
			}
			// --out and --format list what the command has; the rest is alike.
			if f.Name == "out" || f.Name == "format" {
				return
			}
			if before.form != m.form || before.text != m.text {
				t.Errorf("--%s is %q in %s and %q in %s", f.Name, before.text, before.command, m.text, m.command)
			}
		})
	}
	if len(seen) < 30 {
		t.Errorf("only %d options found", len(seen))
	}
}

// Every option is in a group, has a text that begins small and ends without a
// full stop, and a form.
func TestOptionsAreDescribed(t *testing.T) {
	for _, cmd := range tree(t).Commands() {
		if !cmd.IsAvailableCommand() {
			continue
		}
		if cmd.Short == "" || strings.HasSuffix(cmd.Short, ".") {
			t.Errorf("%s: short text %q", cmd.Name(), cmd.Short)
		}
		cmd.Flags().VisitAll(func(f *pflag.Flag) {
			if f.Annotations["group"] == nil || f.Usage == "" || strings.HasSuffix(f.Usage, ".") || f.Value.Type() == "" {
				t.Errorf("%s --%s: group %v, text %q, form %q", cmd.Name(), f.Name, f.Annotations["group"], f.Usage, f.Value.Type())
			}
		})
	}
}
