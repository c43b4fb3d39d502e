package job

import (
	"slices"
	"strings"

	"github.com/spf13/pflag"
)

// A Kind is what the value of a key may be.
type Kind uint8

const (
	Text   Kind = iota // a text
	Number             // a number or a text; where the option takes several, a list of numbers as well
	Words              // one of a list of words
	Switch             // true or false
)

// An Option is a long option as a key.
type Option struct {
	Name       string
	Kind       Kind
	Words      []string // of Words
	Several    bool     // the option takes numbers separated by commas
	Repeatable bool
	About      string
}

// A Vocabulary is what may be said in a job.
type Vocabulary struct {
	Commands []Command
}

// A Command is one that tasks may name.
type Command struct {
	Name    string
	Options []Option
}

// Command returns the command of that name.
func (v *Vocabulary) Command(name string) (Command, bool) {
	for _, c := range v.Commands {
		if c.Name == name {
			return c, true
		}
	}
	return Command{}, false
}

// Options returns the options of all commands, by name.
func (v *Vocabulary) Options() []Option {
	var all []Option
	for _, c := range v.Commands {
		for _, o := range c.Options {
			i, found := slices.BinarySearchFunc(all, o.Name, func(a Option, name string) int { return strings.Compare(a.Name, name) })
			if !found {
				all = slices.Insert(all, i, o)
				continue
			}
			// Words that one command takes and another does not, such as formats.
			for _, w := range o.Words {
				if !slices.Contains(all[i].Words, w) {
					all[i].Words = append(slices.Clone(all[i].Words), w)
				}
			}
		}
	}
	return all
}

// Option returns the command's option of that name.
func (c *Command) Option(name string) (Option, bool) {
	for _, o := range c.Options {
		if o.Name == name {
			return o, true
		}
	}
	return Option{}, false
}

// taskKeys are the keys of a task that are no options.
var taskKeys = []string{"name", "command", "files"}

// textForms are parts of the forms of options that take text that is no number.
var textForms = []string{"FILE", "LIST", "PATTERN", "LABEL", "NAME", "MARK", "EPSG", "ROLE", "RULE", "FOLDER", "PAIRS"}

// OptionOf describes a flag: its form (pflag calls it a type) tells its kind.
func OptionOf(f *pflag.Flag, repeatable bool) Option {
	form := f.Value.Type()
	o := Option{Name: f.Name, About: f.Usage, Repeatable: repeatable, Kind: Number}
	switch {
	case f.NoOptDefVal != "":
		o.Kind = Switch
	case form == strings.ToLower(form):
		o.Kind, o.Words = Words, strings.Split(form, "|")
	case slices.ContainsFunc(textForms, func(t string) bool { return strings.Contains(form, t) }):
		o.Kind = Text
	default:
		o.Several = strings.Contains(form, ",") && !repeatable
	}
	return o
}
