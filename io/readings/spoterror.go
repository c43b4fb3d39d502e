package readings

import (
	"fmt"
	"math"
	"strconv"

	"github.com/paulmach/orb"
)

// SpotError says at which places several readings may not be merged. It shows the
// first few places, in (x, y) order.
type SpotError struct {
	First []Spot
	Total int // places
	// Readings is how many stand at those places.
	Readings int
	Within   float64
}

// A Spot is a place with several readings.
type Spot struct {
	Place   orb.Point
	Spread  float64 // highest minus lowest z
	Members []SpotMember
	Count   int // members, of which the first few are kept
	Why     SpotReason
}

// A SpotMember is a reading at a Spot.
type SpotMember struct {
	File string
	Line int
	ID   string
	Zone string
	Z    float64
}

// A SpotReason says why readings at one place are not merged.
type SpotReason uint8

// The reasons.
const (
	_ SpotReason = iota
	SpreadTooLarge
	EveryRepeat // SpotRefuse
	UnlikeIDs   // heads of several wells
	UnlikeZones
)

func (e *SpotError) Error() string {
	var b []byte
	for _, s := range e.First {
		m := s.Members[0]
		b = fmt.Appendf(b, "%s:%d: ", m.File, m.Line)
		b = fmt.Appendf(b, "%d readings at %s,%s", s.Count, plain(s.Place[0]), plain(s.Place[1]))
		if e.Within > 0 {
			b = fmt.Appendf(b, " (within %s)", plain(e.Within))
		}
		switch s.Why {
		case UnlikeIDs:
			b = append(b, " with heads of several ids"...)
		case UnlikeZones:
			b = append(b, " of several zones"...)
		default:
			b = fmt.Appendf(b, " with z %s apart", plain(s.Spread))
		}
		b = append(b, ":"...)
		for i, m := range s.Members {
			if i > 0 {
				b = append(b, ';')
			}
			b = append(b, ' ')
			if m.ID != "" {
				b = fmt.Appendf(b, "%s ", m.ID)
			}
			if s.Why == UnlikeZones {
				b = fmt.Appendf(b, "zone %q ", m.Zone)
			}
			b = fmt.Appendf(b, "z %s in line %d", plain(m.Z), m.Line)
			if m.File != s.Members[0].File {
				b = fmt.Appendf(b, " of %s", m.File)
			}
		}
		if more := s.Count - len(s.Members); more > 0 {
			b = fmt.Appendf(b, "; and %d more", more)
		}
		b = append(b, '\n')
	}
	if more := e.Total - len(e.First); more > 0 {
		b = fmt.Appendf(b, "and %d more places\n", more)
	}
	places := "1 place"
	if e.Total != 1 {
		places = fmt.Sprintf("%d places", e.Total)
	}
	return string(fmt.Appendf(b, "%s with %d readings: expected one reading at a place, or a rule for several", places, e.Readings))
}

// plain writes a number the way a file would.
func plain(v float64) string {
	if a := math.Abs(v); a != 0 && (a < 1e-6 || a >= 1e15) {
		return strconv.FormatFloat(v, 'g', -1, 64)
	}
	return strconv.FormatFloat(v, 'f', -1, 64)
}
