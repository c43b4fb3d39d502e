package manual

import (
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"isofacet/cmd/internal/option"
)

// An Option describes one flag.
type Option struct {
	Group string
	Name  string
	Value pflag.Value
	Text  string // what it does, one phrase
	// Default is what holds when the flag is not given, in words. Left empty, it
	// is the value's own text.
	Default string
	// Repeatable options may be given more than once.
	Repeatable bool
	// Switch options take no value.
	Switch bool
}

// Keys of the annotations that carry what pflag has no field for.
const (
	groupKey   = "group"
	defaultKey = "default"
	repeatKey  = "repeatable"
)

// Add defines the flags of options in fs.
func Add(fs *pflag.FlagSet, options ...Option) {
	fs.SortFlags = false
	for _, o := range options {
		f := fs.VarPF(o.Value, o.Name, "", o.Text)
		if o.Switch {
			f.NoOptDefVal = "true"
		}
		def := o.Default
		if def == "" && !o.Switch {
			def = o.Value.String()
		}
		f.Annotations = map[string][]string{groupKey: {o.Group}, defaultKey: {def}}
		if o.Repeatable {
			f.Annotations[repeatKey] = []string{"yes"}
		}
	}
}

// Repeatable returns the names of the flags that may be given more than once.
func Repeatable(fs *pflag.FlagSet) []string {
	var names []string
	fs.VisitAll(func(f *pflag.Flag) {
		if f.Annotations[repeatKey] != nil {
			names = append(names, f.Name)
		}
	})
	return names
}

// Switch is a flag that is on when it is named.
type Switch bool

// Set takes true or false, as in --name=false.
func (s *Switch) Set(text string) error {
	on := text == "true"
	if !on && text != "false" {
		return &option.BadValue{Seen: text, Expected: "no value, or true or false"}
	}
	*s = Switch(on)
	return nil
}

func (s Switch) String() string {
	if s {
		return "true"
	}
	return "false"
}

// Type is what pflag calls a flag without a value.
func (s *Switch) Type() string { return "bool" }

// IsBoolFlag marks a flag without a value.
func (s *Switch) IsBoolFlag() bool { return true }

// a group of flags as a page shows it.
type group struct {
	name  string
	flags []*pflag.Flag
}

// groups returns the flags of a command by group, those of the command itself
// and those for every command alike.
func groups(cmd *cobra.Command) []group {
	var list []group
	cmd.Flags().VisitAll(func(f *pflag.Flag) {
		if f.Hidden || f.Name == "help" {
			return
		}
		name := "Options"
		if g := f.Annotations[groupKey]; g != nil {
			name = g[0]
		}
		for i := range list {
			if list[i].name == name {
				list[i].flags = append(list[i].flags, f)
				return
			}
		}
		list = append(list, group{name, []*pflag.Flag{f}})
	})
	return list
}

// head returns a flag as it is typed: --cell S|SX,SY.
func head(f *pflag.Flag) string {
	if f.NoOptDefVal != "" {
		return "--" + f.Name
	}
	return "--" + f.Name + " " + f.Value.Type()
}

// text returns what a flag does, whether it may be repeated, and its default.
func text(f *pflag.Flag) string {
	t := f.Usage
	if f.Annotations[repeatKey] != nil {
		t += "; may be repeated"
	}
	if d := defaultOf(f); d != "" {
		t += " (default " + d + ")"
	}
	return t
}

func defaultOf(f *pflag.Flag) string {
	if d := f.Annotations[defaultKey]; d != nil {
		return d[0]
	}
	return ""
}

// lines returns the lines of s without blank ones at either end.
func lines(s string) []string {
	return strings.Split(strings.Trim(s, "\n"), "\n")
}
