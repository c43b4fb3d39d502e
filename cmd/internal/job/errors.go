package job

import (
	"fmt"
	"strings"
)

// A Position is a place in the job file, counted from 1; columns are characters.
type Position struct{ Line, Column int }

// An Error is one thing that is wrong with a job. It prints as file:line:column:
// what was seen: expected what.
type Error struct {
	File string
	At   Position
	// Key is the key that it is about, if any; Seen and Expected what stands there
	// and what should.
	Key, Seen, Expected string
	Near                string // the nearest known key
}

func (e *Error) Error() string {
	var b strings.Builder
	b.WriteString(e.File)
	if e.At.Line > 0 {
		fmt.Fprintf(&b, ":%d:%d", e.At.Line, e.At.Column)
	}
	b.WriteString(": " + e.Seen)
	if e.Expected != "" {
		b.WriteString(": expected " + e.Expected)
	}
	if e.Near != "" {
		b.WriteString("; the nearest is " + e.Near)
	}
	return b.String()
}

// Errors are all that are wrong with a job, in the order of the file.
type Errors []*Error

const mostErrors = 20

func (e Errors) Error() string {
	var lines []string
	for i, one := range e {
		if i == mostErrors {
			lines = append(lines, fmt.Sprintf("and %d more", len(e)-i))
			break
		}
		lines = append(lines, one.Error())
	}
	return strings.Join(lines, "\n")
}
