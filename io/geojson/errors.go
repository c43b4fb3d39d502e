package geojson

import (
	"fmt"
	"strconv"
	"strings"
)

// A WriteError is a feature that GeoJSON cannot hold. Nothing of it has been written.
type WriteError struct {
	Feature  int    // counts from 1; 0: the collection itself
	What     string // "line", "ring 2 of polygon 1", "property \"level\""
	Seen     string
	Expected string
}

func (e *WriteError) Error() string {
	where := "collection"
	if e.Feature > 0 {
		where = "feature " + strconv.Itoa(e.Feature)
	}
	return fmt.Sprintf("geojson: %s: %s: %s: expected %s", where, e.What, e.Seen, e.Expected)
}

// A Kind says what sort of trouble a PositionError is, so that a program can choose its advice without reading the text.
type Kind uint8

const (
	_          Kind = iota
	Syntax          // not JSON: a missing comma, NaN, a single quote
	Ended           // the text ends too early
	Encoding        // bytes that are not UTF-8
	TypeName        // a type that RFC 7946 does not know
	Structure       // a member that is missing, given twice, or does not belong there
	BadNumber       // a coordinate that is no number, not finite or out of range
	Shape           // a line of one position, a ring that is open
	TooBig          // a limit of ReadOptions
	Unreadable      // the source itself failed: see Err
)

// A PositionError is one trouble at one place of a GeoJSON text.
type PositionError struct {
	File         string
	Feature      int // counts from 1; 0: outside features
	Line, Column int // count from 1; a column counts characters

	Kind     Kind
	What     string
	Seen     string // the text as read, shortened
	Expected string
	Err      error // the cause, for Unreadable
}

func (e *PositionError) Error() string {
	var b strings.Builder
	if e.File != "" {
		b.WriteString(e.File + ":")
	}
	fmt.Fprintf(&b, "%d:%d: ", e.Line, e.Column)
	if e.Feature > 0 {
		fmt.Fprintf(&b, "feature %d: ", e.Feature)
	}
	b.WriteString(e.What)
	if e.Seen != "" {
		if e.What != "" {
			b.WriteByte(' ')
		}
		b.WriteString(strconv.Quote(e.Seen))
	}
	if e.Err != nil {
		b.WriteString(": " + e.Err.Error())
	}
	if e.Expected != "" {
		b.WriteString(": expected " + e.Expected)
	}
	return b.String()
}

func (e *PositionError) Unwrap() error { return e.Err }
