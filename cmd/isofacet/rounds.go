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
)

// rounds is which of several rounds in one file are used: all, one after the other,
// or one.
type rounds struct {
	each eachRound
	span parsed[time.Duration]
	// apart: all rounds are being read, to be put apart.
	apart bool
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
	r.span = parsed[time.Duration]{form: "T", parse: parseSpan}
	return []manual.Option{
		{Group: groupRounds, Name: "each", Value: &r.each, Default: "all readings make one surface",
			Text: "run the command for every round of the column round, with {round} in the names of outputs; a round that fails does not stop the others"},
		{Group: groupRounds, Name: "round-span", Value: &r.span, Default: "not looked at",
			Text: "warn if the readings used lie further apart in time than this, as in 12h or 3d"},
	}
}

func parseEach(text string) (readings.Role, error) {
	if text != "round" {
		return 0, fmt.Errorf("round")
	}
	return readings.Round, nil
}

// parseSpan reads hours, minutes and days: 12h, 90min, 3d.
func parseSpan(text string) (time.Duration, error) {
	for _, unit := range []struct {
		name string
		of   time.Duration
	}{{"min", time.Minute}, {"h", time.Hour}, {"d", 24 * time.Hour}} {
		if digits, ok := strings.CutSuffix(text, unit.name); ok {
			if n, err := strconv.ParseFloat(strings.TrimSpace(digits), 64); err == nil && n > 0 && n < 1e5 {
				return time.Duration(n * float64(unit.of)), nil
			}
		}
	}
	return 0, fmt.Errorf("a time such as 12h, 90min or 3d")
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

// timeForms are the ways of writing a time that are understood: ISO 8601, with
// blanks in place of the T, and without a time of day.
var timeForms = []string{
	time.RFC3339, "2006-01-02T15:04:05", "2006-01-02T15:04", "2006-01-02 15:04:05", "2006-01-02 15:04", "2006-01-02",
}

func parseTime(text string) (time.Time, bool) {
	for _, form := range timeForms {
		if t, err := time.Parse(form, text); err == nil {
			return t, true
		}
	}
	return time.Time{}, false
}

// timesOf returns the first and the last time among the used readings, as they are
// written, and how many cannot be read as a time.
func timesOf(set *readings.Set) (first, last string, span time.Duration, unread int) {
	var from, to time.Time
	for i := range set.Len() {
		text := set.Text(readings.Time, i)
		t, ok := parseTime(strings.TrimSpace(text))
		if !ok {
			unread++
			continue
		}
		if first == "" || t.Before(from) || t.Equal(from) && text < first {
			first, from = text, t
		}
		if last == "" || t.After(to) || t.Equal(to) && text > last {
			last, to = text, t
		}
	}
	return first, last, to.Sub(from), unread
}

// checkSpan warns of a round that is spread over too long a time.
func (p *program) checkSpan(r *reading, set *readings.Set) error {
	if r.span.text == "" {
		return nil
	}
	if !set.Has(readings.Time) {
		return status.With(status.WrongData, fmt.Errorf("--round-span %s: no column for time: expected one", r.span.text), "say which column it is, as in --columns time=Date")
	}
	first, last, span, unread := timesOf(set)
	if unread > 0 {
		p.report.Warn("time-unread", fmt.Sprintf("%s without a time that can be read: expected one such as 2024-03-12T08:10", counted(unread, "reading")), "readings", unread)
	}
	if span > r.span.value {
		p.report.Warn("round-span", fmt.Sprintf("readings from %s to %s: more than %s apart; levels may have changed in between", first, last, r.span.text), "first", first, "last", last)
	}
	return nil
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
