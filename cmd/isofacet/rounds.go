package main

import (
	"context"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"time"

	"github.com/spf13/pflag"

	"isofacet/cmd/internal/manual"
	"isofacet/cmd/internal/option"
	"isofacet/cmd/internal/status"
	"isofacet/io/readings"
	"isofacet/io/wells"
)

// rounds is which of several rounds in one file are used: all, one after the other,
// or one.
type rounds struct {
	each eachRound
	// apart: all rounds are being read, to be put apart.
	apart bool
	// alone: a bad line fails its round, not the others.
	alone bool
}

// eachRound is --each with a way back to how the readings are read.
type eachRound struct {
	parsed[readings.Role]
	of *reading
}

const groupRounds = "Rounds"

// roundOptions returns the options of every command that reads readings.
func (r *rounds) roundOptions(of *reading) []manual.Option {
	r.each = eachRound{parsed[readings.Role]{form: "round", parse: parseEach}, of}
	return []manual.Option{
		{Group: groupRounds, Name: "each", Value: &r.each, Default: "all readings make one surface",
			Text: "run the command for every round of the column round, with {round} in the names of outputs; a round that fails does not stop the others"},
	}
}

func parseEach(text string) (readings.Role, error) {
	if text != "round" {
		return 0, fmt.Errorf("round")
	}
	return readings.Round, nil
}

// ofRound returns the readings of one round.
func ofRound(parts []readings.Part, name string) (*readings.Set, error) {
	var names []string
	for _, part := range parts {
		if part.Name == name {
			if part.Err == nil && name == "" {
				return nil, status.With(status.WrongData, fmt.Errorf("%s without a round: expected the name of one in every row", counted(part.Set.Counts.Read, "reading")),
					"fill the column in, or leave such rows out with --only round='?*'")
			}
			return part.Set, part.Err
		}
		names = append(names, strconv.Quote(part.Name))
	}
	const most = 20
	if n := len(names) - most; n > 0 {
		names = append(names[:most], fmt.Sprintf("and %d more", n))
	}
	return nil, status.With(status.WrongData, fmt.Errorf("--round %q: no reading has it: expected one of %s", name, strings.Join(names, ", ")), "the names are those of the column round")
}

// timesOf returns the first and the last time among the used readings, as they are
// written.
func timesOf(set *readings.Set) (first, last string) {
	var from, to time.Time
	for i := range set.Len() {
		text := set.Text(readings.Time, i)
		t, ok := wells.ParseTime(text)
		if !ok {
			continue
		}
		if first == "" || t.Before(from) || t.Equal(from) && text < first {
			first, from = text, t
		}
		if last == "" || t.After(to) || t.Equal(to) && text > last {
			last, to = text, t
		}
	}
	return first, last
}

// eachOf returns how a command reads its readings, if it is to run for every round.
func eachOf(v pflag.Value) (*reading, bool) {
	e, ok := option.Inner(v).(*eachRound)
	if !ok || e.text == "" {
		return nil, false
	}
	return e.of, true
}

// readRound returns the readings of one round of inputs that are read once for all.
func (p *program) readRound(ctx context.Context, r *reading, list []*input) (*readings.Set, error) {
	parts, err := p.step.shared.rounds(ctx, p, r, list)
	if err != nil {
		return nil, err
	}
	return ofRound(parts, r.round.text)
}

// withoutOption takes one option with its value out of a command line.
func withoutOption(args []string, name string, switches map[string]bool) []string {
	return withoutOptions(slices.Clone(args), []string{name}, switches)
}
