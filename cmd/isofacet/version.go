package main

import (
	"fmt"
	"runtime/debug"

	"github.com/spf13/cobra"
)

// newVersion is "isofacet version".
func newVersion(p *program) *cobra.Command {
	return &cobra.Command{
		Use:   "version",
		Short: "the version of this program",
		Args:  noArguments,
		RunE: func(*cobra.Command, []string) error {
			v := buildVersion()
			_, err := fmt.Fprintln(p.out, "isofacet", v.String())
			return err
		},
	}
}

// version is what the build recorded about itself.
type version struct {
	Version string `json:"version"`
	Commit  string `json:"commit,omitempty"`
	Changed bool   `json:"changed,omitempty"` // the source differed from the commit
	Go      string `json:"go"`
}

// buildVersion reads the build's own record, so that no number has to be kept by
// hand: a release has its tag, other builds have a commit.
func buildVersion() version {
	v := version{Version: "unreleased"}
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return v
	}
	v.Go = info.GoVersion
	if info.Main.Version != "" && info.Main.Version != "(devel)" {
		v.Version = info.Main.Version
	}
	for _, s := range info.Settings {
		switch s.Key {
		case "vcs.revision":
			v.Commit = s.Value
		case "vcs.modified":
			v.Changed = s.Value == "true"
		}
	}
	return v
}

func (v version) String() string {
	s := v.Version
	if v.Commit != "" {
		s += ", commit " + v.Commit
		if v.Changed {
			s += " with changes"
		}
	}
	return s + ", " + v.Go
}
