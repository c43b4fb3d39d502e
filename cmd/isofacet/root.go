package main

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
)

// program is one run: its streams, how it reports, and the settings that every
// command shares.
type program struct {
	streams
	running
}

// commands returns the command table of the program.
func (p *program) commands() []*cobra.Command {
	return []*cobra.Command{
		newInspect(p),
		newReadings(p),
		newGrid(p),
		newContour(p),
		newQuery(p),
		newTriangles(p),
		newVolume(p),
		newAccuracy(p),
		newProfile(p),
		newChange(p),
		newRun(p),
		newFlow(p),
		newSamples(p),
		newCompletion(p),
		newVersion(p),
		newPages(p),
	}
}

const rootLong = `Readings go in as text, a reading a line, and become one surface: planes over
the triangles that join neighbouring readings (the Delaunay triangulation). At a
reading the surface has the reading's own value, and outside the measured area
it has none. Everything that the program writes is read off that one surface.

FILE is a text file of readings, - or nothing is standard input, and sample:NAME
is one of the built-in samples ("isofacet samples" lists them). Results go to
standard output or to the files named with --out; words go to standard error.

Exit status: 0 done; 1 could not finish; 2 the command line is wrong; 3 the data
are wrong, or a warning under --warnings fail; 4 too big for the limits given;
130 interrupted; 143 asked to end by the system.`

const rootExample = `isofacet inspect sample:gravel-pit/shots.csv
isofacet grid sample:gravel-pit/shots.csv --cell 5 --out pit.csv
isofacet query sample:gravel-pit/shots.csv --at 431250,5621500`

// newRoot puts the commands together.
func (p *program) newRoot() *cobra.Command {
	root := &cobra.Command{
		Use:           "isofacet COMMAND [options] [FILE...]",
		Short:         "scattered readings to a surface, rasters and values",
		Long:          rootLong,
		Example:       rootExample,
		SilenceErrors: true,
		SilenceUsage:  true,
		RunE: func(*cobra.Command, []string) error {
			return status.Usage(errors.New("no command: expected one of "+strings.Join(commandNames(p.root), ", ")),
				"isofacet --help says what each does")
		},
	}
	p.root = root
	root.AddCommand(p.commands()...)
	root.SetHelpCommand(&cobra.Command{Use: "help", Hidden: true, RunE: p.help})
	if p.step == nil { // steps run side by side, and the library's settings are everyone's
		cobra.EnableCommandSorting = false
	}
	root.SetOut(p.out)
	root.SetErr(p.display)
	root.SetFlagErrorFunc(flagFault)
	root.SetHelpFunc(func(cmd *cobra.Command, _ []string) { p.helpErr = manual.Help(p.out, cmd) })
	for _, cmd := range root.Commands() {
		if cmd.Args == nil {
			cmd.Args = filesOnly
		}
		option.Once(cmd.Flags(), manual.Repeatable(cmd.Flags())...)
		if p.step == nil {
			completeChoices(cmd)
		}
		p.forEach(cmd)
	}
	return root
}

// execute runs one command line.
func (p *program) execute(ctx context.Context, args []string) error {
	root := p.newRoot()
	if err := knownCommand(args, root); err != nil {
		return err
	}
	root.SetArgs(numbersLast(args, root))
	if err := root.ExecuteContext(ctx); err != nil {
		return err
	}
	return p.helpErr
}

// help is "isofacet help COMMAND".
func (p *program) help(_ *cobra.Command, args []string) error {
	cmd := p.root
	if len(args) > 0 {
		found, _, err := p.root.Find(args[:1])
		if err != nil || found == p.root {
			return unknownCommand(args[0], p.root)
		}
		cmd = found
	}
	return manual.Help(p.out, cmd)
}

// commandNames returns the commands that a user may name.
func commandNames(root *cobra.Command) []string {
	var names []string
	for _, cmd := range root.Commands() {
		if cmd.IsAvailableCommand() {
			names = append(names, cmd.Name())
		}
	}
	return names
}

// knownCommand refuses a command line whose first word is no command. It looks
// before the options are read: an option of an unknown command is not the fault
// to name.
func knownCommand(args []string, root *cobra.Command) error {
	if len(args) == 0 || strings.HasPrefix(args[0], "-") || strings.HasPrefix(args[0], "__complete") || args[0] == "help" {
		return nil
	}
	for _, cmd := range root.Commands() {
		if cmd.Name() == args[0] {
			return nil
		}
	}
	return unknownCommand(args[0], root)
}

func unknownCommand(name string, root *cobra.Command) error {
	names := commandNames(root)
	err := fmt.Errorf("command %q: expected one of %s", name, strings.Join(names, ", "))
	if near := nearest(name, names); near != "" {
		return status.Usage(err, "did you mean "+near+"?")
	}
	return status.Usage(err, "isofacet --help says what each does")
}

// flagFault puts a fault of an option into our words: the option, what was seen,
// what was expected.
func flagFault(cmd *cobra.Command, err error) error {
	if errors.Is(err, pflag.ErrHelp) {
		return err
	}
	if e, ok := errors.AsType[*pflag.InvalidValueError](err); ok {
		name := "--" + e.GetFlag().Name
		if bad, ok := errors.AsType[*option.BadValue](err); ok {
			return status.Usage(fmt.Errorf("%s %w", name, bad), optionHint(cmd, e.GetFlag()))
		}
		return status.Usage(fmt.Errorf("%s %q: %w", name, e.GetValue(), errors.Unwrap(e)), optionHint(cmd, e.GetFlag()))
	}
	if e, ok := errors.AsType[*pflag.ValueRequiredError](err); ok {
		f := e.GetFlag()
		return status.Usage(fmt.Errorf("--%s: nothing behind it: expected %s", f.Name, f.Value.Type()), optionHint(cmd, f))
	}
	if e, ok := errors.AsType[*pflag.NotExistError](err); ok {
		return unknownOption(cmd, e)
	}
	return status.Usage(err, cmd.CommandPath()+" --help says how options are written")
}

// optionHint says what an option does.
func optionHint(cmd *cobra.Command, f *pflag.Flag) string {
	return fmt.Sprintf("--%s: %s; see %s --help", f.Name, f.Usage, cmd.CommandPath())
}

// unknownOption lists the options that exist, since one that does not is never
// taken and ignored.
func unknownOption(cmd *cobra.Command, e *pflag.NotExistError) error {
	seen := "--" + e.GetSpecifiedName()
	if short := e.GetSpecifiedShortnames(); short != "" {
		seen = "-" + short
	}
	var names []string
	cmd.Flags().VisitAll(func(f *pflag.Flag) {
		if !f.Hidden {
			names = append(names, f.Name)
		}
	})
	err := fmt.Errorf("option %q: %s takes --%s", seen, cmd.CommandPath(), strings.Join(names, " --"))
	if near := nearest(strings.TrimLeft(seen, "-"), names); near != "" {
		return status.Usage(err, "did you mean --"+near+"?")
	}
	return status.Usage(err, cmd.CommandPath()+" --help says what each does")
}

// completeChoices lets a shell offer the words of every option that has a list.
func completeChoices(cmd *cobra.Command) {
	cmd.Flags().VisitAll(func(f *pflag.Flag) {
		words := strings.Split(f.Value.Type(), "|")
		if len(words) < 2 || strings.ToLower(f.Value.Type()) != f.Value.Type() {
			return
		}
		// The error is for a flag that does not exist or has its words already.
		_ = cmd.RegisterFlagCompletionFunc(f.Name, cobra.FixedCompletions(words, cobra.ShellCompDirectiveNoFileComp))
	})
}
