package geojson

import (
	"bytes"
	"encoding/json"
	"math"
	"strconv"
	"strings"
)

// appendHeights appends one height a position of g.
func appendHeights(z []float64, g Geometry) []float64 {
	if g.Z != nil {
		return append(z, g.Z...)
	}
	for range g.NumPositions() {
		z = append(z, math.NaN())
	}
	return z
}

// propertiesMember takes an object or null.
func (r *Reader) propertiesMember(o *object, depth int) error {
	s := &r.scan
	c, err := s.peek("an object or null")
	switch {
	case err != nil:
		return err
	case c == 'n':
		return s.literal("null")
	}
	if err := s.take('{'); err != nil {
		return err
	}
	var names map[string]bool // only for many
	for first := true; ; first = false {
		key, at, ok, err := s.member(first, r.key[:0], nameMost)
		r.key = key[:0]
		if err != nil || !ok {
			r.previous = o.properties
			return err
		}
		if o.properties == nil {
			o.properties = make([]Property, 0, len(r.previous))
		}
		if err := r.keep(len(key) + propertyCost); err != nil {
			return err
		}
		name := r.nameLike(len(o.properties), key)
		if twice(o.properties, &names, name) {
			return s.fault(at, Structure, "property", name, "it once", nil)
		}
		v, err := r.value(depth + 1)
		if err != nil {
			return err
		}
		o.properties = append(o.properties, Property{name, v})
	}
}

// nameLike returns key as a string: that of the previous feature, if its property i has the same name, as it mostly has.
func (r *Reader) nameLike(i int, key []byte) string {
	if i < len(r.previous) && r.previous[i].Name == string(key) {
		return r.previous[i].Name
	}
	return string(key)
}

// propertyCost is what a property counts beside its bytes against the limit, so that many short ones are bounded too.
const propertyCost = 16

// twice reports whether name is among the properties. names is made when they become many.
func twice(properties []Property, names *map[string]bool, name string) bool {
	const few = 16
	if len(properties) < few {
		for i := range properties {
			if properties[i].Name == name {
				return true
			}
		}
		return false
	}
	if *names == nil {
		*names = make(map[string]bool, 4*few)
		for i := range properties {
			(*names)[properties[i].Name] = true
		}
	}
	if (*names)[name] {
		return true
	}
	(*names)[name] = true
	return false
}

// keep counts n bytes that stay in memory against the limit.
func (r *Reader) keep(n int) error {
	if r.text += n; r.text > r.opt.TextMost {
		return r.scan.fault(r.scan.here(), TooBig, "properties of a feature", "", "at most "+strconv.Itoa(r.opt.TextMost)+" bytes", nil)
	}
	return nil
}

// value takes the value of a property.
func (r *Reader) value(depth int) (Value, error) {
	s := &r.scan
	c, err := s.peek("a value")
	if err != nil {
		return Value{}, err
	}
	switch c {
	case '"':
		text, err := s.text(r.key[:0], r.opt.TextMost-r.text, "a text")
		r.key = text[:0]
		if err == nil {
			err = r.keep(len(text))
		}
		return String(string(text)), err
	case 't':
		return Bool(true), s.literal("true")
	case 'f':
		return Bool(false), s.literal("false")
	case 'n':
		return Null(), s.literal("null")
	case '{', '[':
		text, err := r.raw(nil, depth)
		return Value{kind: JSONKind, text: string(text)}, err
	}
	v, literal, whole, err := s.number("value")
	if err != nil {
		return Value{}, err
	}
	if whole {
		if n, err := strconv.ParseInt(string(literal), 10, 64); err == nil {
			return Int(n), nil
		}
		// More digits than a double holds, and perhaps a name of something: kept as they are.
		err := r.keep(len(literal))
		return Value{kind: JSONKind, text: string(literal)}, err
	}
	return Number(v + 0), nil
}

// canBeID reports whether v is a text or a number, integers beyond int64 included.
func (v Value) canBeID() bool {
	switch v.kind {
	case StringKind, NumberKind, IntKind:
		return true
	}
	return v.kind == JSONKind && strings.Trim(v.text, "-0123456789") == ""
}

// raw takes any value and appends it as JSON without blanks.
func (r *Reader) raw(dst []byte, depth int) ([]byte, error) {
	s := &r.scan
	if err := r.deep(depth); err != nil {
		return dst, err
	}
	c, err := s.peek("a value")
	if err != nil {
		return dst, err
	}
	before := len(dst)
	switch c {
	case '{', '[':
		end := byte('}')
		if c == '[' {
			end = ']'
		}
		s.pos++
		dst = append(dst, c)
		for first := true; ; first = false {
			ok, err := s.next(first, end)
			if err != nil {
				return dst, err
			}
			if !ok {
				return append(dst, end), nil
			}
			if err := r.keep(2); err != nil {
				return dst, err
			}
			if !first {
				dst = append(dst, ',')
			}
			if c == '{' {
				if dst, err = r.rawText(dst); err != nil {
					return dst, err
				}
				if err = s.take(':'); err != nil {
					return dst, err
				}
				dst = append(dst, ':')
			}
			if dst, err = r.raw(dst, depth+1); err != nil {
				return dst, err
			}
		}
	case '"':
		return r.rawText(dst)
	case 't', 'f', 'n':
		word := map[byte]string{'t': "true", 'f': "false", 'n': "null"}[c]
		dst, err = append(dst, word...), s.literal(word)
	default:
		_, literal, _, numberErr := s.number("value")
		dst, err = append(dst, literal...), numberErr
	}
	if err == nil {
		err = r.keep(len(dst) - before)
	}
	return dst, err
}

func (r *Reader) rawText(dst []byte) ([]byte, error) {
	text, err := r.scan.text(r.key[:0], r.opt.TextMost-r.text, "a text")
	r.key = text[:0]
	if err != nil {
		return dst, err
	}
	before := len(dst)
	dst = appendString(dst, string(text))
	return dst, r.keep(len(dst) - before)
}

// skip takes any value and keeps nothing of it.
func (r *Reader) skip(depth int) error {
	s := &r.scan
	if err := r.deep(depth); err != nil {
		return err
	}
	c, err := s.peek("a value")
	if err != nil {
		return err
	}
	switch c {
	case '"':
		text, err := s.text(r.key[:0], discard, "a text")
		r.key = text[:0]
		return err
	case 't':
		return s.literal("true")
	case 'f':
		return s.literal("false")
	case 'n':
		return s.literal("null")
	case '{', '[':
	default:
		_, _, _, err := s.number("value")
		return err
	}
	end := byte('}')
	if c == '[' {
		end = ']'
	}
	s.pos++
	for first := true; ; first = false {
		ok, err := s.next(first, end)
		if err != nil || !ok {
			return err
		}
		if c == '{' {
			text, err := s.text(r.key[:0], discard, "the name of a member")
			r.key = text[:0]
			if err != nil {
				return err
			}
			if err := s.take(':'); err != nil {
				return err
			}
		}
		if err := r.skip(depth + 1); err != nil {
			return err
		}
	}
}

const (
	labelMost   = 1 << 10 // bytes of a foreign member that is kept
	membersMost = 1 << 8  // foreign members that are kept
)

// foreign takes a member that RFC 7946 does not define, or no longer.
func (r *Reader) foreign(name string, where role, at place, depth int) error {
	s := &r.scan
	if where != inRoot {
		return r.skip(depth + 1)
	}
	c, err := s.peek("a value")
	if err != nil {
		return err
	}
	if c == '{' || c == '[' {
		if name != "crs" {
			return r.skip(depth + 1)
		}
		before := r.text
		text, err := r.raw(nil, depth+1)
		r.text = before
		if err == nil {
			r.warn(OldSystem, oldName(text), at)
		}
		return err
	}
	before := r.text
	v, err := r.value(depth + 1)
	r.text = before
	if err != nil {
		return err
	}
	text, isText := v.Text()
	switch {
	case name == "crs":
		r.warn(OldSystem, string(mustValue(v)), at)
	case name == "coordinates_in" && isText:
		r.warn(OtherSystem, shorten(text), at)
	}
	if len(text)+len(name) <= labelMost && len(r.members) < membersMost {
		r.members = append(r.members, Property{name, v})
	}
	return nil
}

// oldName returns what a crs member names: {"type":"name","properties":{"name":"..."}}, or the beginning of its text.
func oldName(text []byte) string {
	var crs struct {
		Properties struct{ Name, Href string }
	}
	if err := json.NewDecoder(bytes.NewReader(text)).Decode(&crs); err == nil {
		if p := crs.Properties; p.Name != "" {
			return shorten(p.Name)
		} else if p.Href != "" {
			return shorten(p.Href)
		}
	}
	return shorten(string(text))
}
