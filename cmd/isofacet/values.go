package main

import (
	"errors"
	"strings"

	"isofacet/cmd/internal/option"
	"isofacet/io/readings"
)

// parsed is an option whose value a package of ours reads, so that the command
// line and a Go program agree on what a text means.
type parsed[T any] struct {
	value T
	text  string
	form  string
	parse func(string) (T, error)
}

func (p *parsed[T]) Set(text string) error {
	v, err := p.parse(text)
	if err != nil {
		return badValue(text, err)
	}
	p.value, p.text = v, text
	return nil
}

func (p *parsed[T]) String() string { return p.text }
func (p *parsed[T]) Type() string   { return p.form }

// typed is an option that is any text, such as a file name.
type typed struct {
	text string
	form string
	set  bool
}

func (t *typed) Set(text string) error {
	if text == "" {
		return &option.BadValue{Seen: text, Expected: "a " + strings.ToLower(t.form)}
	}
	t.text, t.set = text, true
	return nil
}

func (t *typed) String() string { return t.text }
func (t *typed) Type() string   { return t.form }

// parsedList collects the values of an option that may be repeated.
type parsedList[T any] struct {
	values []T
	texts  []string
	form   string
	parse  func(string) (T, error)
}

func (p *parsedList[T]) Set(text string) error {
	v, err := p.parse(text)
	if err != nil {
		return badValue(text, err)
	}
	p.values, p.texts = append(p.values, v), append(p.texts, text)
	return nil
}

func (p *parsedList[T]) String() string { return strings.Join(p.texts, " ") }
func (p *parsedList[T]) Type() string   { return p.form }

// badValue takes the option's name out of an error of the readings, since the
// program puts the one that was typed in front.
func badValue(text string, err error) error {
	if e, ok := errors.AsType[*readings.OptionError](err); ok {
		return &option.BadValue{Seen: e.Seen, Expected: e.Expected}
	}
	return &option.BadValue{Seen: text, Expected: err.Error()}
}
