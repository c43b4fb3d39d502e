package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"strings"
	"syscall"

	"isofacet/cmd/internal/memory"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/status"
	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/interp"
	"isofacet/io/outfile"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

// explain returns the exit status of an error and the ways out. Packages report
// what they saw and expected; only here is it known which option helps.
func explain(err error) (status.Code, []string) {
	if outfile.IsClosedPipe(err) {
		return status.Done, nil
	}
	if code, hints := status.Of(err); code != status.NotFinished || hints != nil {
		return code, hints
	}
	for _, known := range explanations {
		if code, hint, ok := known(err); ok {
			if hint == "" {
				return code, nil
			}
			return code, []string{hint}
		}
	}
	return status.NotFinished, nil
}

// explanations is the table of errors, the most telling first.
var explanations = []func(error) (code status.Code, hint string, ok bool){
	explainTooBig,
	explainLines,
	explainReadings,
	explainGrid,
	explainRaster,
	explainTriangles,
	explainContour,
	explainProfile,
	explainFiles,
}

func explainTooBig(err error) (status.Code, string, bool) {
	if e, ok := errors.AsType[*memory.TooBig](err); ok {
		return status.TooBig, fmt.Sprintf("fewer readings (--only, a smaller extent), or --memory %v if the machine has that much", option.Size(e.Need)), true
	}
	if e, ok := errors.AsType[*grid.SizeError](err); ok {
		hint := "use a larger cell or a smaller --extent"
		if e.FitX.Sign() > 0 {
			hint = fmt.Sprintf("--cell %s fits; or use a smaller --extent, or a larger --memory", cellText(e.FitX, e.FitY))
		}
		return status.TooBig, hint, true
	}
	if errors.Is(err, triangulate.ErrTooMany) {
		return status.TooBig, "thin the readings, or take a part of the area at a time", true
	}
	return 0, "", false
}

func cellText(x, y decimal.Number) string {
	if x == y {
		return x.String()
	}
	return x.String() + "," + y.String()
}

// kindHints says what helps against each kind of trouble in a text.
var kindHints = map[readings.Kind]string{
	readings.NotNumber:     "if the text means that there is no value, name it with --missing; --lenient leaves bad lines out and lists them",
	readings.Blank:         "--missing blank leaves readings without a value out; --lenient leaves bad lines out",
	readings.NotFinite:     "--missing NaN leaves such readings out and lists them",
	readings.Bound:         "a bound is no value: --lenient leaves such lines out and lists them",
	readings.DecimalMark:   "if the file writes decimals with a comma, say --decimal comma; with a point, --decimal point",
	readings.Thousands:     "write numbers without marks between thousands",
	readings.OutOfRange:    "if the number stands for no value, name it with --missing",
	readings.FieldCount:    "a delimiter inside a text needs quotes round the text; --lenient leaves bad lines out and lists them",
	readings.Quote:         "double a quote that belongs to the text, and close every quoted field",
	readings.LongText:      "is another --delimiter right, or does that column hold remarks? skip it with - in --columns",
	readings.BadCharacter:  "the file may be damaged, or not the text that it seems to be",
	readings.Binary:        "save the readings as text, one reading a line",
	readings.LongLine:      "is the file a text with a reading a line?",
	readings.Empty:         "is it the right file, and are --skip-rows and --comment right?",
	readings.Unreadable:    "look at the name and at the rights to read it",
	readings.TooMany:       "thin the readings, or take a part of the area at a time",
	readings.TooManyBad:    "the layout is probably not what was detected: say --columns, --delimiter, --decimal",
	readings.NoHeader:      "say what the columns hold, as in --columns id,x,y,z",
	readings.UnknownHeader: "say what the columns hold, as in --columns x=East,y=North,z=4",
	readings.DepthOrLevel:  "say which with --columns: z=... for an elevation, depth=... for a depth below a measuring point",
	readings.DepthAlone:    "name a table of wells with --wells, or for soundings say with --depth-from what they are counted from",
	readings.UnknownStatus: "explain the word in a file for --status-table, or skip the column with - in --columns; --lenient leaves such lines out",
	readings.Impossible:    "look it up in the field book; --lenient leaves such lines out and lists them",
	readings.TwoColumns:    "say which column it is with --columns",
	readings.MissingRole:   "say which column it is with --columns, as in --columns x=East,y=North,z=Elev",
	readings.UnusedRole:    "put - in its place in --columns",
	readings.MissingColumn: "look at the header's spelling, or give the number of the column",
	readings.WhichDecimal:  "say --decimal comma or --decimal point",
	readings.WhichComment:  "say --comment none if these lines are readings",
}

func explainReadings(err error) (status.Code, string, bool) {
	if e, ok := errors.AsType[*placesError](err); ok {
		code, hint, known := explainReadings(e.error)
		return code, strings.ReplaceAll(hint, "--columns", "--at-columns"), known
	}
	if e, ok := errors.AsType[*checkpointsError](err); ok {
		code, hint, known := explainReadings(e.error)
		return code, strings.ReplaceAll(hint, "--columns", "--checkpoints-columns"), known
	}
	if e, ok := errors.AsType[*besideError](err); ok {
		code, hint, known := explainReadings(e.error)
		return code, besideHint(err, e.option, hint), known
	}
	if e, ok := errors.AsType[*readings.MixedError](err); ok {
		return status.WrongData, mixedHint(e), true
	}
	if e, ok := errors.AsType[*readings.SpotError](err); ok {
		return status.WrongData, spotHint(e), true
	}
	if e, ok := errors.AsType[*readings.OptionError](err); ok {
		return status.WrongUsage, "see --" + e.Option + " in the help of the command", true
	}
	if e, ok := errors.AsType[*readings.PositionError](err); ok {
		code := status.WrongData
		switch e.Kind {
		case readings.Unreadable:
			code = status.NotFinished
		case readings.TooMany:
			code = status.TooBig
		}
		return code, kindHints[e.Kind], true
	}
	if _, ok := errors.AsType[*interp.SameSpotError](err); ok {
		return status.WrongData, "say with --same-spot which of them counts", true
	}
	return 0, "", false
}

// besideHint is the way out of a fault in a file that stands beside the readings.
func besideHint(err error, option, hint string) string {
	if e, ok := errors.AsType[*readings.PositionError](err); ok {
		switch {
		case option == "status-table":
			return "the file has a header with status and meaning, and a row a word"
		case e.Kind == readings.NotNumber || e.Kind == readings.Impossible:
			return "mend the file; --missing names texts that mean no value"
		}
	}
	return strings.ReplaceAll(hint, "--columns", "--"+option)
}

// mixedHint says how to choose a round or a zone.
func mixedHint(e *readings.MixedError) string {
	one := e.Texts[len(e.Texts)-1]
	if one == "" {
		one = e.Texts[0]
	}
	if e.Role == readings.Round {
		return "--round " + record.Shell([]string{one}) + " takes one; --only 'round=*' takes all of them for one surface"
	}
	return "--only " + record.Shell([]string{"zone=" + one}) + " takes one; --only 'zone=*' takes all of them for one surface"
}

// spotHint says which rule would settle what stands at one place.
func spotHint(e *readings.SpotError) string {
	for _, s := range e.First {
		if s.Why == readings.UnlikeIDs || s.Why == readings.UnlikeZones {
			return "wells at one place that tap different waters need maps of their own: choose with --only or --without"
		}
	}
	return "--same-spot mean, lowest, highest, first or last takes one of each; --same-spot-spread D allows for a difference"
}

func explainGrid(err error) (status.Code, string, bool) {
	if e, ok := errors.AsType[*grid.MultipleError](err); ok {
		return status.WrongUsage, fmt.Sprintf("--extent-outward moves every side outward to a multiple; %s or %s would do for %s", e.Below, e.Above, e.Side), true
	}
	if errors.Is(err, grid.ErrSpec) {
		return status.WrongUsage, "look at --cell and --extent", true
	}
	return 0, "", false
}

func explainFiles(err error) (status.Code, string, bool) {
	switch {
	case errors.Is(err, context.Canceled):
		return status.Interrupted, "", true
	case errors.Is(err, syscall.ENOSPC):
		return status.NotFinished, "the disk is full: make room, or write elsewhere", true
	case errors.Is(err, fs.ErrPermission):
		return status.NotFinished, "look at the rights of the file and of its folder", true
	case errors.Is(err, fs.ErrNotExist):
		return status.NotFinished, "look at the spelling; the folder of an output must exist", true
	}
	return 0, "", false
}
