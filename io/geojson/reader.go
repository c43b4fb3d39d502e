package geojson

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"strconv"
)

// ReadOptions say how a Reader reads. The zero value is good for files of any size.
type ReadOptions struct {
	// File is the name that errors carry.
	File string
	// PositionsMost bounds the positions, and the lists around them, of one feature; 0 means 1<<24, some 400 MB in memory.
	PositionsMost int
	// TextMost bounds the bytes of names and values of one feature's properties; 0 means 4 MiB.
	TextMost int
	// DepthMost bounds how deep objects and lists are nested, in collections of geometries and in values of properties; 0
	// means 64.
	DepthMost int
}

// Reader gives out the features of a GeoJSON text one by one. It is not for several goroutines at once.
type Reader struct {
	scan scanner
	opt  ReadOptions
	err  error // what Next returns from now on

	inFeatures bool // inside the list of a collection
	number     int  // of the feature
	place      place
	root       object

	// Of the feature at hand.
	coords coordinates
	used   int // positions, lists and geometries
	text   int // bytes of properties
	mixed  bool
	key    []byte // scratch
	// previous are the properties of the feature before: names and their number seldom change.
	previous []Property

	warnings []Warning
	members  []Property
}

// NewReader returns a Reader of a text: a FeatureCollection, a Feature, or a bare geometry, which is taken as a feature
// without properties.
func NewReader(src io.Reader, opt ReadOptions) *Reader {
	if opt.PositionsMost <= 0 {
		opt.PositionsMost = 1 << 24
	}
	if opt.TextMost <= 0 {
		opt.TextMost = 4 << 20
	}
	if opt.DepthMost <= 0 {
		opt.DepthMost = 64
	}
	return &Reader{scan: scanner{src: src, file: opt.File, buf: make([]byte, scanBuffer), line: 1}, opt: opt}
}

// Next returns the next feature, which is the caller's to keep, or io.EOF behind the last one.
//
// Any other error is a *PositionError and final. The rest of a text may show that it is no GeoJSON at all, so that
// features before an error are not to be relied on.
func (r *Reader) Next() (*Feature, error) {
	if r.err != nil {
		return nil, r.err
	}
	f, err := r.next()
	if err != nil {
		r.err = r.inFeature(err)
	}
	return f, r.err
}

// Number returns how many features Next has given out.
func (r *Reader) Number() int { return r.number }

// Place returns the line and column, counting from 1, where the feature that Next gave out last begins.
func (r *Reader) Place() (line, column int) { return r.place.line, r.place.column }

// Warnings returns what is to be known about the text so far; once Next has returned io.EOF, about all of it.
func (r *Reader) Warnings() []Warning { return r.warnings }

// Members returns the members of the whole text that GeoJSON gives no meaning, as far as they are short texts, numbers, truths
// or null: labels such as coordinates_in. Complete once Next has returned io.EOF.
func (r *Reader) Members() []Property { return r.members }

// inFeature adds the number of the feature at hand to an error.
func (r *Reader) inFeature(err error) error {
	var p *PositionError
	if errors.As(err, &p) && p.Feature == 0 && r.inFeatures {
		p.Feature = r.number
	}
	return err
}

func (r *Reader) next() (*Feature, error) {
	if r.root.delivered {
		return nil, io.EOF
	}
	if !r.inFeatures {
		if err := r.begin(); err != nil {
			return nil, err
		}
		if !r.inFeatures {
			return r.end()
		}
	}
	more, err := r.scan.next(r.number == 0, ']')
	if err != nil {
		return nil, err
	}
	if more {
		r.number++
		return r.feature()
	}
	r.inFeatures = false
	if err := r.membersOf(&r.root, inRoot, 0); err != nil {
		return nil, err
	}
	return r.end()
}

// begin takes the text up to the first feature of a collection, or to its end.
func (r *Reader) begin() error {
	s := &r.scan
	s.ahead(3)
	if bytes.HasPrefix(s.buf[:s.end], []byte("\xef\xbb\xbf")) { // a mark of UTF-8, which JSON does not want but readers may pass over
		s.pos += 3
		s.hidden = 3
	}
	expected := "a GeoJSON object"
	c, err := s.peek(expected)
	switch {
	case err != nil:
		return err
	case c >= 0xfe || c == 0: // marks of UTF-16, or its first half
		return s.fault(s.here(), Encoding, "byte", "0x"+hexByte(c), "GeoJSON in UTF-8", nil)
	case c != '{':
		return s.unexpected(expected)
	}
	r.root.at = s.here()
	s.pos++
	return r.membersOf(&r.root, inRoot, 0)
}

// end takes what follows the members of the root and returns its only feature, unless it is a collection.
func (r *Reader) end() (*Feature, error) {
	o := &r.root
	if err := r.checkMembers(o, inRoot); err != nil {
		return nil, err
	}
	if _, err := r.scan.peek(""); err == nil {
		return nil, r.scan.unexpected("nothing behind the object: one text holds one GeoJSON object")
	} else if !errors.Is(r.scan.err, io.EOF) {
		return nil, err
	}
	o.delivered = true
	if o.is.kind == "FeatureCollection" {
		return nil, io.EOF
	}
	r.number = 1
	return r.finish(o), nil
}

// feature takes one element of a collection's list.
func (r *Reader) feature() (*Feature, error) {
	s := &r.scan
	r.used, r.text, r.mixed = 0, 0, false
	c, err := s.peek("a feature")
	if err != nil {
		return nil, err
	}
	if c != '{' {
		return nil, s.unexpected("a feature in braces")
	}
	o := object{at: s.here()}
	s.pos++
	if err := r.membersOf(&o, inList, 0); err != nil {
		return nil, err
	}
	if err := r.checkMembers(&o, inList); err != nil {
		return nil, err
	}
	return r.finish(&o), nil
}

// finish makes the feature of o and takes account of it.
func (r *Reader) finish(o *object) *Feature {
	r.place = o.at
	if r.mixed {
		r.warn(MixedHeights, "", o.at)
	}
	if o.geometry.Shape == nil {
		r.warn(NoGeometry, "", o.at)
	}
	return &Feature{ID: o.id, Geometry: o.geometry, Properties: o.properties}
}

// warn counts a warning in, and keeps the place of the first of its kind.
func (r *Reader) warn(kind WarningKind, label string, at place) {
	for i := range r.warnings {
		if r.warnings[i].Kind == kind && r.warnings[i].Label == label {
			r.warnings[i].Count++
			return
		}
	}
	if len(r.warnings) == warningsMost {
		return // no sane text has so many labels
	}
	w := Warning{Kind: kind, Label: label, Count: 1, Line: at.line, Column: at.column}
	if kind != OldSystem && kind != OtherSystem {
		w.Feature = max(r.number, 1)
	}
	r.warnings = append(r.warnings, w)
}

const warningsMost = 64

// use counts positions, lists and geometries of a feature against the limit.
func (r *Reader) use(n int) error {
	if r.used += n; r.used > r.opt.PositionsMost {
		return r.scan.fault(r.scan.here(), TooBig, "feature", "", fmt.Sprintf("at most %d positions and lists of them", r.opt.PositionsMost), nil)
	}
	return nil
}

// deep refuses nesting beyond the limit.
func (r *Reader) deep(depth int) error {
	if depth <= r.opt.DepthMost {
		return nil
	}
	return r.scan.fault(r.scan.here(), TooBig, "object or list", "", "at most "+strconv.Itoa(r.opt.DepthMost)+" of them inside one another", nil)
}
