package geojson

import (
	"errors"
	"io"
	"strings"

	"isofacet/io/numtext"
)

// LonLat is the name of the only coordinates that RFC 7946 knows: longitude and latitude of WGS 84 in degrees, in this order.
const LonLat = "OGC:CRS84"

// unstated stands in coordinates_in for a system that nobody named.
const unstated = "unstated"

// Options say how a Writer writes. The zero value writes whole numbers, without naming a system.
type Options struct {
	// Digits after the point of x and y, and of z: 0 to 20, or -1 for the shortest text that reads back to the same double.
	XYDecimals, ZDecimals int
	// CoordinatesIn names the system of the coordinates, such as "EPSG:25832". LonLat and its EPSG names (EPSG:4326 and,
	// with heights, EPSG:4979, x taken as longitude) are what the format is for. Any other, and none, is written as a member
	// coordinates_in of the collection, and gives a Warning.
	CoordinatesIn string
	// Members are further members of the collection, such as labels of datum and unit: in this order, before the features.
	Members []Property
	// BBox asks for the extent, as written, behind the features; with heights if every position has one.
	BBox bool
	// Workers encode the features of WriteBatch; 0 means one per CPU.
	Workers int
}

func isLonLat(label string) bool {
	return label == LonLat || label == "EPSG:4326" || label == "EPSG:4979"
}

// Writer writes a FeatureCollection, one feature a line, as features come. It is not for several goroutines at once.
type Writer struct {
	w       io.Writer
	opt     Options
	enc     encoder
	buf     []byte
	written int // features
	begun   bool
	closed  bool
	err     error // the first, for ever
}

// bufferSize is when text goes on to the io.Writer.
const bufferSize = 1 << 16

// NewWriter returns a Writer of a collection to w. Nothing is written before the first feature or Close.
func NewWriter(w io.Writer, opt Options) *Writer {
	opt.XYDecimals = max(numtext.Shortest, min(opt.XYDecimals, placesMost))
	opt.ZDecimals = max(numtext.Shortest, min(opt.ZDecimals, placesMost))
	if opt.CoordinatesIn == "" {
		opt.CoordinatesIn = unstated
	}
	return &Writer{w: w, opt: opt, enc: encoder{xyPlaces: opt.XYDecimals, zPlaces: opt.ZDecimals, tally: newTally()}}
}

// Written returns how many features have been written.
func (w *Writer) Written() int { return w.written }

// Write writes one feature. It keeps nothing of f.
//
// It returns a *WriteError if f cannot be written, or what the io.Writer returns. Either is final: what has been written is
// of no use, and every later call returns the same error.
func (w *Writer) Write(f *Feature) error {
	if err := w.begin(); err != nil {
		return err
	}
	w.buf = separate(w.buf, w.written)
	if w.buf, w.err = w.enc.feature(w.buf, f, w.written+1); w.err != nil {
		return w.err
	}
	w.written++
	if len(w.buf) >= bufferSize {
		return w.flush()
	}
	return nil
}

// separate appends what stands between the features before number k, from 0, and it.
func separate(dst []byte, k int) []byte {
	if k > 0 {
		dst = append(dst, ',')
	}
	return append(dst, '\n')
}

var errClosed = errors.New("geojson: write after close")

// reserved are the members of a collection that have a meaning in RFC 7946, sections 3.3, 4, 5 and 7.1, or here.
var reserved = []string{"type", "features", "bbox", "crs", "coordinates_in", "coordinates", "geometries", "geometry", "properties"}

func (w *Writer) begin() error {
	switch {
	case w.err != nil:
		return w.err
	case w.closed:
		return errClosed
	case w.begun:
		return nil
	}
	dst := append(w.buf, `{"type":"FeatureCollection",`...)
	if !isLonLat(w.opt.CoordinatesIn) {
		dst = append(dst, `"coordinates_in":`...)
		dst = append(appendString(dst, w.opt.CoordinatesIn), ',')
	}
	for _, m := range w.opt.Members {
		for _, name := range reserved {
			if m.Name == name {
				w.err = &WriteError{What: "member", Seen: name, Expected: "a name that has no meaning yet"}
				return w.err
			}
		}
	}
	before := len(dst)
	dst, wrong := appendMembers(dst, w.opt.Members)
	if wrong != nil {
		wrong.What = strings.Replace(wrong.What, "property", "member", 1)
		w.err = wrong
		return w.err
	}
	if len(dst) > before {
		dst = append(dst, ',')
	}
	w.buf = append(dst, `"features":[`...)
	w.begun = true
	return nil
}

func (w *Writer) flush() error {
	if w.err == nil && len(w.buf) > 0 {
		_, w.err = w.w.Write(w.buf)
	}
	w.buf = w.buf[:0]
	return w.err
}

// Close ends the collection, empty or not, and hands the rest to the io.Writer, which it does not close.
func (w *Writer) Close() error {
	if err := w.begin(); err != nil {
		return err
	}
	w.closed = true
	if w.written > 0 {
		w.buf = append(w.buf, '\n')
	}
	w.buf = append(w.buf, ']')
	if w.opt.BBox && w.enc.all > 0 {
		w.buf = append(w.bbox(append(w.buf, `,"bbox":[`...)), ']')
	}
	w.buf = append(w.buf, '}', '\n')
	return w.flush()
}

// bbox appends all lower values, then all upper ones (RFC 7946, section 5). Rounding keeps order, so that these are the
// extremes of the coordinates as written.
func (w *Writer) bbox(dst []byte) []byte {
	axes := 3
	if w.enc.flat > 0 {
		axes = 2
	}
	for _, side := range [][3]float64{w.enc.min, w.enc.max} {
		for k, v := range side[:axes] {
			places := w.opt.XYDecimals
			if k == 2 {
				places = w.opt.ZDecimals
			}
			dst = append(numtext.Append(dst, v, places), ',')
		}
	}
	return dst[:len(dst)-1]
}

// Warnings returns what is to be known about the file so far, in a fixed order.
func (w *Writer) Warnings() []Warning {
	var all []Warning
	if !isLonLat(w.opt.CoordinatesIn) {
		all = append(all, Warning{Kind: NotDegrees, Label: w.opt.CoordinatesIn})
	} else if w.enc.outside > 0 {
		all = append(all, Warning{Kind: OutsideDegrees, Label: w.opt.CoordinatesIn, Count: w.enc.outside, Feature: w.enc.firstOutside})
	}
	if w.enc.flattened > 0 {
		all = append(all, Warning{Kind: Flattened, Count: w.enc.flattened, Feature: w.enc.firstFlattened})
	}
	return all
}
