package option

import (
	"fmt"

	"github.com/spf13/pflag"
)

// once refuses a second value. Left alone, the flag library keeps the last one
// and drops the others in silence.
type once struct {
	pflag.Value
	set bool
}

// Once wraps every flag of fs that is not in repeatable, so that naming it
// twice on a command line is an error.
func Once(fs *pflag.FlagSet, repeatable ...string) {
	fs.VisitAll(func(f *pflag.Flag) {
		if !contains(repeatable, f.Name) {
			f.Value = &once{Value: f.Value}
		}
	})
}

func (o *once) Set(text string) error {
	if o.set {
		return &BadValue{text, fmt.Sprintf("one value: %q was given before", o.Value.String())}
	}
	if err := o.Value.Set(text); err != nil {
		return err
	}
	o.set = true
	return nil
}

// IsBoolFlag lets a wrapped switch be named without a value.
func (o *once) IsBoolFlag() bool { return o.Type() == "bool" }

// Inner returns the value of a flag as it was defined, before Once wrapped it.
func Inner(v pflag.Value) pflag.Value {
	if o, ok := v.(*once); ok {
		return o.Value
	}
	return v
}
