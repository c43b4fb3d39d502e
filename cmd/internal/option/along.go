package option

import (
	"strings"
)

// Along is a line that profiles follow: places typed as "X,Y X,Y ...", or a file of
// lines. The zero value means not set.
type Along struct {
	Places []Place
	File   string // "-" is standard input
}

const alongForm = `a file of lines, or two places or more such as "0,0 120,35.5"`

// Set reads places separated by blanks, or takes the text as a file name.
func (a *Along) Set(text string) error {
	words := strings.Fields(text)
	if len(words) == 0 {
		return &BadValue{text, alongForm}
	}
	var at At
	for _, w := range words {
		if err := at.Set(w); err != nil {
			return &BadValue{text, alongForm}
		}
	}
	switch {
	case len(at.Places) == len(words) && len(words) > 1 && goesSomewhere(at.Places):
		*a = Along{Places: at.Places}
	case len(at.Places) == 0:
		*a = Along{File: text}
	default:
		return &BadValue{text, alongForm}
	}
	return nil
}

// goesSomewhere reports whether two places are not one.
func goesSomewhere(places []Place) bool {
	for _, p := range places[1:] {
		if p.X != places[0].X || p.Y != places[0].Y {
			return true
		}
	}
	return false
}

// IsSet reports whether a line was given.
func (a *Along) IsSet() bool { return a.File != "" || len(a.Places) > 0 }

// String writes the line as it is typed.
func (a *Along) String() string {
	if a.File != "" {
		return a.File
	}
	at := At{Places: a.Places}
	return at.String()
}

// Type names the form in help pages.
func (a *Along) Type() string { return `FILE|"X,Y X,Y ..."` }
