package wells

import (
	"errors"
	"fmt"
	"maps"
	"slices"
	"strings"
	"unicode"

	"isofacet/io/readings"
)

// A Meaning is what a status says of a level.
type Meaning uint8

// The meanings.
const (
	// Measured levels count.
	Measured Meaning = iota
	// Dry: the head lies below the depth given, or below the screen's bottom.
	Dry
	// Flowing: the water stands above the measuring point. A depth, which is negative
	// then, counts; without one the head lies above the measuring point.
	Flowing
	// The others have no level that stands for the ground around, whatever depth is given.
	Obstructed
	Pumping
	RecentlyPumped
	NearbyPumping
	NearbyRecentlyPumped
	StreamStage
	NotMeasured
	Destroyed
	LeaveOut // for a reason of the user's own
	meanings
)

var meaningNames = [meanings]string{
	"measured", "dry", "flowing", "obstructed", "pumping", "recently pumped", "nearby pumping",
	"nearby recently pumped", "affected by stream stage", "not measured", "destroyed", "leave out",
}

func (m Meaning) String() string { return meaningNames[m] }

// usualWords are the words of the trade. Letters are given where offices agree on
// them (common practice); S, say, is "static" to one and "nearby pumping" to another,
// and has to be explained.
var usualWords = map[Meaning]string{
	Measured:             "measured, ok, good, valid, static, normal, level measured",
	Dry:                  "dry, d, well dry, dry well, dry hole, no water",
	Flowing:              "flowing, flowing well, artesian, overflowing",
	Obstructed:           "obstructed, o, obstruction, blocked, plugged, bent casing",
	Pumping:              "pumping, p, pumped, being pumped, well pumping, pump on",
	RecentlyPumped:       "recently pumped, r, recovering, recovery",
	NearbyPumping:        "nearby pumping, pumping nearby, nearby well pumping",
	NearbyRecentlyPumped: "nearby recently pumped, nearby well recently pumped",
	StreamStage:          "affected by stream stage, stream stage, surface water, affected by surface water, tidal, affected by tide",
	NotMeasured: "not measured, nm, n m, no measurement, not gauged, no reading, not read, not accessible, inaccessible, no access, " +
		"not available, na, n a, not found, missed, locked, frozen, submerged, under water",
	Destroyed: "destroyed, abandoned, decommissioned, damaged, removed, discontinued",
	LeaveOut:  "leave out",
}

// Statuses explain the words of the status column. Read-only once made.
type Statuses struct {
	meaning map[string]Meaning
}

// Usual returns the words of the trade. An empty status is Measured.
func Usual() *Statuses {
	s := &Statuses{map[string]Meaning{"": Measured}}
	for m, list := range usualWords {
		for word := range strings.SplitSeq(list, ",") {
			key := statusKey(word)
			if other, twice := s.meaning[key]; twice && other != m {
				panic("wells: status " + word + " stands twice in the table")
			}
			s.meaning[key] = m
		}
	}
	return s
}

// statusKey is how words are compared: small letters, one blank for whatever stands
// between letters and digits.
func statusKey(word string) string {
	return strings.Join(strings.FieldsFunc(strings.ToLower(word), func(r rune) bool {
		return !unicode.IsLetter(r) && !unicode.IsDigit(r)
	}), " ")
}

// Of returns what a status means.
func (s *Statuses) Of(word string) (m Meaning, ok bool) {
	m, ok = s.meaning[statusKey(word)]
	return m, ok
}

// Words returns the words for a meaning, for people.
func (s *Statuses) Words(m Meaning) []string {
	var words []string
	for word, meaning := range s.meaning {
		if meaning == m && word != "" {
			words = append(words, word)
		}
	}
	slices.Sort(words)
	return words
}

// Meanings returns every meaning.
func Meanings() []Meaning {
	var all []Meaning
	for m := range meanings {
		all = append(all, m)
	}
	return all
}

// ReadStatuses adds the words of a file to the usual ones. Its columns are status, a
// word as it stands among the readings, and meaning, one of the words known already
// or "leave out"; what the file says goes before what is usual. Errors are those of
// readings.ReadWords.
func ReadStatuses(src readings.Source) (*Statuses, error) {
	t, err := readings.ReadWords(src, readings.Declared{}, []readings.Word{{Names: []string{"status", "word", "code"}}, {Names: []string{"meaning"}}})
	if err != nil {
		return nil, err
	}
	s := Usual()
	known := maps.Clone(s.meaning)
	said := map[string]int{}
	var faults []error
	for row := range t.Len() {
		key := statusKey(t.Text(row, 0))
		m, ok := known[statusKey(t.Text(row, 1))]
		switch before, twice := said[key]; {
		case !ok || t.Text(row, 1) == "":
			faults = append(faults, t.Fault(row, 1, readings.UnknownStatus, "one of "+strings.Join(meaningNames[:], ", ")))
		case twice && s.meaning[key] != m:
			faults = append(faults, t.Fault(row, 0, readings.Impossible, fmt.Sprintf("one meaning a word; line %d has another", before)))
		default:
			s.meaning[key], said[key] = m, t.Line(row)
		}
	}
	return s, errors.Join(faults...)
}
