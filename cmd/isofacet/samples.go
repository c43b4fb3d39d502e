package main

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/status"
	"isofacet/io/outfile"
	"isofacet/samples"
)

// samplePrefix begins the name of a built-in file wherever a file of readings can
// be named. A real file of such a name is reached as ./sample:...
const samplePrefix = "sample:"

// newSamples is "isofacet samples".
func newSamples(p *program) *cobra.Command {
	folder := typed{form: "FOLDER"}
	cmd := &cobra.Command{
		Use:   "samples [options]",
		Short: "list the built-in samples, or write them into a folder",
		Long: `The samples are invented surveys with known answers. A listed name can stand
wherever a file of readings can.`,
		Example: `isofacet samples
isofacet samples --folder demo
isofacet inspect demo/gravel-pit/shots.csv`,
		Args: noArguments,
		RunE: func(*cobra.Command, []string) error {
			if folder.set {
				return p.writeSamples(folder.text)
			}
			for _, f := range samples.Files {
				if _, err := fmt.Fprintf(p.out, "%-40s %s\n", samplePrefix+f.Name, f.About); err != nil {
					return err
				}
			}
			return nil
		},
	}
	manual.Add(cmd.Flags(), manual.Option{Group: "Output", Name: "folder", Value: &folder, Text: "write the files into this folder, which is made if need be"})
	return cmd
}

// readSample returns a built-in file.
func readSample(name string) ([]byte, error) {
	data, err := samples.FS.ReadFile(name)
	if err == nil {
		return data, nil
	}
	var names []string
	for _, f := range samples.Files {
		names = append(names, f.Name)
	}
	return nil, status.Usage(fmt.Errorf("sample %q: expected one of %s", name, strings.Join(names, ", ")),
		"isofacet samples lists them")
}

// writeSamples writes every built-in file below folder. Files that are there
// already are not overwritten: someone may have worked on them.
func (p *program) writeSamples(folder string) error {
	var set outfile.Set
	defer set.Abort()
	for _, sample := range samples.Files {
		path := filepath.Join(folder, filepath.FromSlash(sample.Name))
		if _, err := os.Lstat(path); err == nil {
			return status.With(status.NotFinished, fmt.Errorf("%s: is there already: expected a folder without the samples", path),
				"name another folder, or remove that file")
		}
		data, err := samples.FS.ReadFile(sample.Name)
		if err != nil {
			return err
		}
		if err := os.MkdirAll(filepath.Dir(path), 0o777); err != nil {
			return err
		}
		f, err := set.Create(path, outfile.Options{})
		if err != nil {
			return err
		}
		if _, err := f.Write(data); err != nil {
			return err
		}
	}
	if err := set.Commit(); err != nil {
		return err
	}
	p.report.Note(fmt.Sprintf("written: %s below %s", counted(len(samples.Files), "file"), folder), "files", len(samples.Files), "folder", folder)
	return nil
}
