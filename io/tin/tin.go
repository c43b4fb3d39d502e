package tin

import (
	"fmt"
	"strconv"
	"strings"

	"github.com/paulmach/orb"
)

// Set is a surface as it was read.
type Set struct {
	Points    []orb.Point
	Z         []float64
	Triangles [][3]int32

	// The most digits after the point among the first numbers.
	DecimalsXY, DecimalsZ int
	// Labels that the file carries, empty where it has none.
	CoordinatesIn, HorizontalDatum, VerticalDatum string
}

// Error is a trouble at one place of a file.
type Error struct {
	File           string
	Line, Feature  int // count from 1; 0 where there is none
	Seen, Expected string
}

func (e *Error) Error() string {
	var b strings.Builder
	b.WriteString(e.File)
	if e.Line > 0 {
		fmt.Fprintf(&b, ":%d", e.Line)
	}
	if e.Feature > 0 {
		fmt.Fprintf(&b, ": feature %d", e.Feature)
	}
	return b.String() + ": " + e.Seen + ": expected " + e.Expected
}

// decimalsFrom is how many points are looked at for their digits.
const decimalsFrom = 1000

// noteDecimals takes the digits of a point into account.
func (s *Set) noteDecimals(p orb.Point, z float64) {
	if len(s.Points) > decimalsFrom {
		return
	}
	s.DecimalsXY = max(s.DecimalsXY, Decimals(p[0]), Decimals(p[1]))
	s.DecimalsZ = max(s.DecimalsZ, Decimals(z))
}

// Decimals returns the digits after the point of the shortest text of v, at most 12.
func Decimals(v float64) int {
	text := strconv.FormatFloat(v, 'f', -1, 64)
	if i := strings.IndexByte(text, '.'); i >= 0 {
		return min(len(text)-i-1, 12)
	}
	return 0
}
