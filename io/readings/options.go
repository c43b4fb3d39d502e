package readings

import (
	"bytes"
	"io"
	"math"
	"strconv"
	"strings"

	"github.com/paulmach/orb"
)

// A Source is one input: a file, standard input, a piece of memory.
type Source struct {
	Name string // as messages call it
	Size int64  // in bytes, for progress; 0 if unknown
	// Open is called once. Reading stops at the first error of the reader that is
	// not io.EOF.
	Open func() (io.ReadCloser, error)
}

// FromBytes is a source in memory.
func FromBytes(name string, data []byte) Source {
	return Source{name, int64(len(data)), func() (io.ReadCloser, error) {
		return io.NopCloser(bytes.NewReader(data)), nil
	}}
}

// FromReader is a source that is open already, such as standard input. It is not
// closed.
func FromReader(name string, r io.Reader) Source {
	return Source{name, 0, func() (io.ReadCloser, error) { return io.NopCloser(r), nil }}
}

// Options steer Read and Scan. The zero value detects every layout, stops at bad
// input, uses every reading and merges those at one place that agree.
type Options struct {
	Declared

	// Lenient leaves out bad lines and lists them. Otherwise they are an error of
	// type *BadLines.
	Lenient bool
	// BadApart makes a bad line an error of its part alone, Part.Err, as long as every
	// bad line could be taken apart far enough to tell its part. Only ReadParts looks at
	// it.
	BadApart bool

	Select Selection
	Spots  Spots // Scan does not look at it

	// Reduce, if not nil, makes readings of rows that lack a place or a value.
	Reduce Reducer
	// DepthFrom, if not nil, is what depths are counted down from: soundings below a
	// water level or a datum.
	DepthFrom *DepthFrom
	// Transform, if not nil, turns each place and value, as written, into what is to be
	// used: another unit, another grid. It is called by several goroutines. Places of
	// Select.Exclude are compared with what it returns.
	Transform func(orb.Point, float64) (orb.Point, float64)
	// Account keeps what was read of rows that are not used, and the work of a Reducer.
	// Reading is slower and takes more memory.
	Account bool

	// OneOf are roles in which all used readings must have one text, Zone only where
	// values are heads. Scan does not look at it.
	OneOf []Role

	// Workers is how many lines are parsed at a time; 0 is one per processor. The
	// result does not depend on it.
	Workers int

	// Progress, if not nil, is told now and then how many bytes are parsed of how
	// many (0 if unknown), never from two goroutines at once.
	Progress func(done, total int64)

	part Parter // of ReadParts

	// For tests: the size of a chunk if not 0, and to read every line the careful way.
	chunk   int
	careful bool
}

// DepthFrom is an elevation from which depths are counted down.
type DepthFrom struct {
	Value    float64
	Decimals int // that it is written with
}

// below returns the elevation at a depth, as the decimals of both have it.
func (d *DepthFrom) below(depth float64, decimals int) float64 {
	return asWritten(d.Value-depth, max(d.Decimals, decimals)) + 0
}

// A SpotRule says what becomes of several readings at one place.
type SpotRule uint8

// The rules.
const (
	// SpotAgree takes the mean of readings that agree within Spots.Spread, and
	// refuses others. The default.
	SpotAgree SpotRule = iota
	SpotRefuse
	SpotMean
	SpotFirst // in the order of the input: the one rule under which order matters
	SpotLast  // likewise
	SpotLowest
	SpotHighest
)

var spotNames = []string{"agree", "refuse", "mean", "first", "last", "lowest", "highest"}

func (r SpotRule) String() string { return spotNames[r] }

// ParseSpotRule reads refuse, mean, first, last, lowest or highest; the empty
// string is SpotAgree. Errors are *OptionError.
func ParseSpotRule(text string) (SpotRule, error) {
	if text == "" {
		return SpotAgree, nil
	}
	for i, name := range spotNames {
		if i > 0 && strings.EqualFold(name, text) {
			return SpotRule(i), nil
		}
	}
	return 0, &OptionError{"same-spot", text, strings.Join(spotNames[1:], ", ")}
}

// Spots say which readings stand at one place, and what becomes of them. k readings
// at one place become one that is used and k-1 that are merged.
//
// Whatever the rule, readings of unlike zones at one place are refused, and so are
// heads (Layout.Heads) of unlike ids: they belong to different waters.
type Spots struct {
	Rule SpotRule
	// Spread is how far apart (highest minus lowest z) the readings of one place
	// may lie, in the unit of z. SpotAgree always looks at it; a named rule does
	// only if SpreadGiven is true, and refuses what exceeds it.
	Spread      float64
	SpreadGiven bool
	// Within joins readings no further apart than this, in the unit of x and y, and
	// through them chains of any length; 0 joins equal places only. The place of a
	// chain is its smallest (x, y).
	Within float64
}

func (s *Spots) check() error {
	switch {
	case int(s.Rule) >= len(spotNames):
		return &OptionError{"same-spot", strconv.Itoa(int(s.Rule)), strings.Join(spotNames[1:], ", ")}
	case !(s.Spread >= 0) || math.IsInf(s.Spread, 0):
		return &OptionError{"same-spot-spread", strconv.FormatFloat(s.Spread, 'g', -1, 64), "a number from 0"}
	case !(s.Within >= 0) || s.Within > largest:
		return &OptionError{"same-spot-within", strconv.FormatFloat(s.Within, 'g', -1, 64), "a distance from 0"}
	}
	return nil
}

// The sizes of coordinates that are accepted beside 0: products of four of them
// neither overflow nor underflow.
const (
	smallest = 1e-60
	largest  = 1e60
)

func (o *Options) check() error {
	if o.chunk == 0 {
		o.chunk = chunkSize
	}
	if err := o.Declared.check(); err != nil {
		return err
	}
	if err := o.Spots.check(); err != nil {
		return err
	}
	return o.Select.check()
}
