package main

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"

	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/io/readings"
)

// asking is how places are asked about: typed, or a file of them.
type asking struct {
	at        option.At
	atColumns parsed[readings.Columns]
}

// check refuses what can be refused before anything is read. stdin tells that
// standard input is taken.
func (a *asking) check(stdin bool) error {
	switch {
	case len(a.at.Files) > 1, len(a.at.Files) == 1 && len(a.at.Places) > 0:
		return status.Usage(fmt.Errorf("--at %s: expected places X,Y, or one file of places: one table has one set of columns", a.at.String()),
			"put all places into one file, or run the command once for each")
	case len(a.at.Files) == 0 && a.atColumns.text != "":
		return status.Usage(errors.New("--at-columns without a file of places: expected --at FILE"), "leave --at-columns out: typed places are X,Y")
	case len(a.at.Files) == 1 && a.at.Files[0] == "-" && stdin:
		return status.Usage(errors.New(`--at "-": standard input holds the readings: expected one of the two from a file`), "name the file of readings")
	}
	return nil
}

// askedInput is the file of places, nil if they are typed.
func (a *asking) askedInput(p *program) (*input, error) {
	if len(a.at.Files) == 0 {
		return nil, nil
	}
	return p.input(a.at.Files[0])
}

// places returns the places that are asked about. taken are the names of columns that
// the answers have.
func (a *asking) places(ctx context.Context, p *program, asked *input, lenient bool, taken []string) (*places, error) {
	if asked == nil {
		return typedPlaces(a.at.Places), nil
	}
	found, err := readings.ReadPositions(ctx, asked.Source, readings.Options{
		Declared: readings.Declared{Columns: a.atColumns.value},
		Lenient:  lenient,
		Workers:  p.workers(),
	})
	if err != nil {
		return nil, &placesError{err}
	}
	asked.file.Layout = found.Layout.String()
	p.report.Note("places: "+asked.Name+": "+found.Layout.String(), "file", asked.Name, "layout", found.Layout.String())
	for _, w := range found.Warnings {
		p.report.Warn("places", w.String(), "file", w.File, "line", w.Line)
	}
	for _, e := range found.Refused {
		p.report.Note("refused: "+e.Error(), "file", e.File, "line", e.Line)
	}
	if found.Counts.LeftOut > 0 {
		p.report.Warn("places-left-out", fmt.Sprintf("%s: %s without coordinates left out", asked.Name, counted(found.Counts.LeftOut, "row")))
	}
	for _, name := range found.Names {
		if slices.Contains(taken, name) {
			return nil, status.With(status.WrongData, fmt.Errorf("%s: column %q: expected names other than those of the answers", asked.Name, name),
				"rename the column, or take it out: the answers are "+strings.Join(taken, ", "))
		}
	}
	return filePlaces(found), nil
}

// placesError is a fault in the file of places: its columns are declared with
// another option than those of the readings.
type placesError struct{ error }

func (e *placesError) Unwrap() error { return e.error }
