package lines

import (
	"fmt"

	"github.com/paulmach/orb"

	"isofacet/io/readings"
)

// A Line is a breakline or a ring: a chain of straight segments through its points.
// Neighbouring points differ. Lists that go along with Points have its length, or
// are nil.
type Line struct {
	// Name is what messages call it: from the column line of a text, a property of a
	// feature, the code of a string; or "feature 7", or the name of the file without
	// its folder and ending.
	Name   string
	Points []orb.Point
	// Z are the heights along the line, nil if it has none.
	Z []float64
	// Closed is true if the last point repeats the first, three or more places apart.
	Closed bool

	// File is the source. Feature and Part say where in a GeoJSON file: the
	// number of the feature, and of the line within it, both from 1; Part is 0 if the
	// feature is one line. Both are 0 elsewhere.
	File          string
	Feature, Part int
	// Readings are the numbers of the used readings that the line was strung from,
	// nil for a line of a file of its own.
	Readings []int32

	numbers []uint32 // see At
	unit    unit
	ids     []string // names of the points
}

// unit is what the numbers of a line count.
type unit uint8

const (
	rows      unit = iota // lines of a text
	positions             // positions of a line of a feature
	features              // features, each of them a point
)

// A Place says where something was read. Numbers count from 1; 0 is unknown.
type Place struct {
	File string
	// Row is a line of a text.
	Row int
	// Feature is the number of a GeoJSON feature, Part that of a line or ring
	// within it if it has several, Position that of a position of it.
	Feature, Part, Position int
}

// String writes breaks.csv:12 or breaks.geojson: feature 3, part 2, position 5.
func (p Place) String() string {
	switch {
	case p.Row > 0:
		return fmt.Sprintf("%s:%d", p.File, p.Row)
	case p.Feature > 0:
		return p.File + ": " + p.within()
	}
	return p.File
}

// within is the place inside its file.
func (p Place) within() string {
	if p.Feature == 0 {
		return fmt.Sprintf("row %d", p.Row)
	}
	text := featureName(p.Feature)
	if p.Part > 0 {
		text += fmt.Sprintf(", part %d", p.Part)
	}
	if p.Position > 0 {
		text += fmt.Sprintf(", position %d", p.Position)
	}
	return text
}

// At returns where point k of the line was read. Of repeated positions it is the
// first.
func (l *Line) At(k int) Place {
	n := int(l.numbers[k])
	switch l.unit {
	case positions:
		return Place{File: l.File, Feature: l.Feature, Part: l.Part, Position: n}
	case features:
		return Place{File: l.File, Feature: n}
	}
	return Place{File: l.File, Row: n}
}

// PointName returns the name of point k, or if it has none where it was read, with
// the name of the file.
func (l *Line) PointName(k int) string {
	if l.ids != nil && l.ids[k] != "" {
		return l.ids[k]
	}
	return l.At(k).String()
}

// spot is PointName with the place behind a name, for messages that have told the
// file, and the feature that a line is.
func (l *Line) spot(k int) string {
	at := l.At(k)
	text := at.within()
	if at.Position > 0 {
		text = fmt.Sprintf("position %d", at.Position)
	}
	if l.ids != nil && l.ids[k] != "" {
		return l.ids[k] + " (" + text + ")"
	}
	return text
}

// A Set is what was read: lines in the order in which they begin, and an account
// of what happened to their vertices.
type Set struct {
	Lines []Line

	// Vertices is how many the lines had as they were read, with the one that a mark adds
	// to close a string; Repeated is how many of them were dropped because they
	// repeat the position before. The others are the points of Lines.
	Vertices, Repeated int

	// DecimalsXY and DecimalsZ are the most decimals that a vertex of a text
	// writes.
	DecimalsXY, DecimalsZ int

	// Layouts tell how each text was read, GeoJSON files left out.
	Layouts  []readings.Layout
	Warnings []readings.Warning
}

// Rings returns the points of every line as a ring. They share memory with Lines.
// Only rings that were read as such are sure to be closed.
func (s *Set) Rings() []orb.Ring {
	all := make([]orb.Ring, len(s.Lines))
	for i := range s.Lines {
		all[i] = orb.Ring(s.Lines[i].Points)
	}
	return all
}

func (s *Set) warn(file string, row int, text string) {
	s.Warnings = append(s.Warnings, readings.Warning{File: file, Line: row, Text: text})
}
