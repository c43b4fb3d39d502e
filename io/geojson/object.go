package geojson

import (
	"fmt"
	"strconv"

	"github.com/paulmach/orb"
)

// role says where an object of GeoJSON stands.
type role uint8

const (
	inRoot  role = iota // the whole text
	inList              // an element of "features"
	inShape             // a geometry
)

// standard members, as bits.
type memberSet uint16

const (
	hasType memberSet = 1 << iota
	hasFeatures
	hasGeometry
	hasProperties
	hasID
	hasCoordinates
	hasGeometries
	hasBBox
)

var standard = map[string]memberSet{
	"type": hasType, "features": hasFeatures, "geometry": hasGeometry, "properties": hasProperties, "id": hasID,
	"coordinates": hasCoordinates, "geometries": hasGeometries, "bbox": hasBBox,
}

// object is what an object of GeoJSON holds. Its members may come in any order, the type last.
type object struct {
	at  place // of its brace
	has memberSet
	is  struct {
		kind string
		at   place
	}
	begun      bool // one member has been taken
	geometry   Geometry
	properties []Property
	id         Value
	parts      orb.Collection
	z          []float64 // of parts, NaN where there is none
	withZ      bool
	delivered  bool
}

// membersOf takes the members of an object up to its closing brace. In the root it stops inside the list of features
// with r.inFeatures set, and goes on when called again.
func (r *Reader) membersOf(o *object, where role, depth int) error {
	if err := r.deep(depth); err != nil {
		return err
	}
	s := &r.scan
	for {
		name, at, ok, err := s.member(!o.begun, r.key[:0], nameMost)
		r.key = name[:0]
		if err != nil || !ok {
			return err
		}
		o.begun = true
		bit := standard[string(name)]
		if bit == 0 {
			err = r.foreign(string(name), where, at, depth)
		} else {
			if o.has&bit != 0 {
				return s.fault(at, Structure, "member", string(name), "it once", nil)
			}
			o.has |= bit
			err = r.member(o, bit, where, at, depth)
		}
		if err != nil || r.inFeatures && where == inRoot {
			return err
		}
	}
}

// nameMost bounds the name of a member in bytes.
const nameMost = 1 << 16

// misplaced are the members that an object must not have in its place (RFC 7946, section 7.1), as far as the place tells.
var misplaced = map[role]memberSet{
	inRoot: 0, inList: hasFeatures | hasCoordinates | hasGeometries, inShape: hasFeatures | hasGeometry | hasProperties,
}

func (r *Reader) member(o *object, bit memberSet, where role, at place, depth int) error {
	s := &r.scan
	if bit&misplaced[where] != 0 {
		what := "a feature"
		if where == inShape {
			what = "a geometry"
		}
		return s.fault(at, Structure, "member", nameOf(bit), "none such in "+what, nil)
	}
	// One scratch list holds the coordinates at hand, so that geometry and coordinates in one object, which no type has, end here.
	if one := hasCoordinates | hasGeometries | hasGeometry | hasFeatures; bit&one != 0 && o.has&one != bit {
		return s.fault(at, Structure, "member", nameOf(bit), "one of coordinates, geometries, geometry and features", nil)
	}
	if _, err := s.peek("a value"); err != nil {
		return err
	}
	begin := s.here()
	switch bit {
	case hasType:
		text, err := s.text(r.key[:0], nameMost, "the type")
		r.key = text[:0]
		o.is.kind, o.is.at = typeName(text), begin
		if err == nil && where == inShape && o.has&hasCoordinates != 0 {
			return r.shapeOf(o)
		}
		return err
	case hasFeatures:
		r.inFeatures = true
		return s.take('[')
	case hasGeometry:
		return r.geometryMember(o, depth)
	case hasProperties:
		return r.propertiesMember(o, depth)
	case hasID:
		v, err := r.value(depth)
		if err != nil {
			return err
		}
		switch k := v.Kind(); {
		case k == NullKind: // not by the standard, but plain enough
		case v.canBeID():
			o.id = v
		default:
			return s.fault(begin, Structure, "id", "", "a text or a number", nil)
		}
		return nil
	case hasCoordinates:
		r.coords.reset(begin)
		if err := r.list(&r.coords, 1); err != nil {
			return err
		}
		if where == inShape && o.has&hasType != 0 {
			return r.shapeOf(o)
		}
		return nil
	case hasGeometries:
		return r.geometriesMember(o, depth)
	}
	return r.skip(depth) // bbox: what it says follows from the positions
}

// typesKnown are the types of RFC 7946, the frequent ones first.
var typesKnown = []string{"Feature", "LineString", "Polygon", "Point", "MultiLineString", "MultiPolygon", "MultiPoint", "FeatureCollection", "GeometryCollection"}

// typeName returns text as a string, without making one for the names that every feature repeats.
func typeName(text []byte) string {
	for _, name := range typesKnown {
		if name == string(text) {
			return name
		}
	}
	return string(text)
}

func nameOf(bit memberSet) string {
	for name, b := range standard {
		if b == bit {
			return name
		}
	}
	return ""
}

// shapeOf makes the geometry of o out of its coordinates and type, whichever came last.
func (r *Reader) shapeOf(o *object) (err error) {
	if _, ok := depths[o.is.kind]; ok {
		o.geometry, err = r.assemble(o.is.kind, &r.coords)
	}
	return err // other types are refused at the end of the object
}

// geometryMember takes a geometry or null.
func (r *Reader) geometryMember(o *object, depth int) (err error) {
	c, err := r.scan.peek("a geometry or null")
	switch {
	case err != nil:
		return err
	case c == 'n':
		return r.scan.literal("null")
	}
	o.geometry, err = r.geometryObject(depth + 1)
	return err
}

// geometryObject takes a geometry.
func (r *Reader) geometryObject(depth int) (Geometry, error) {
	s := &r.scan
	c, err := s.peek("a geometry")
	if err != nil {
		return Geometry{}, err
	}
	if c != '{' {
		return Geometry{}, s.unexpected("a geometry in braces")
	}
	o := object{at: s.here()}
	s.pos++
	if err := r.use(1); err != nil {
		return Geometry{}, err
	}
	if err := r.membersOf(&o, inShape, depth); err != nil {
		return Geometry{}, err
	}
	err = r.checkMembers(&o, inShape)
	return o.geometry, err
}

// geometriesMember takes the parts of a collection. Parts without a position are left out of it.
func (r *Reader) geometriesMember(o *object, depth int) error {
	s := &r.scan
	if err := s.take('['); err != nil {
		return err
	}
	for first := true; ; first = false {
		ok, err := s.next(first, ']')
		if err != nil || !ok {
			return err
		}
		if _, err := s.peek("a geometry"); err != nil {
			return err
		}
		at := s.here()
		g, err := r.geometryObject(depth + 1)
		if err != nil {
			return err
		}
		if g.Shape == nil {
			r.warn(NoGeometry, "", at)
			continue
		}
		o.parts = append(o.parts, g.Shape)
		o.z = appendHeights(o.z, g)
		o.withZ = o.withZ || g.Z != nil
	}
}

// checkMembers refuses an object whose members do not make one of its type, and completes its geometry.
func (r *Reader) checkMembers(o *object, where role) error {
	s := &r.scan
	missing := func(name string) error {
		return s.fault(o.at, Structure, "object", "", "a member "+strconv.Quote(name), nil)
	}
	if o.has&hasType == 0 {
		return missing("type")
	}
	var expected string
	needs, not := hasCoordinates, hasFeatures|hasGeometry|hasProperties|hasGeometries
	switch kind := o.is.kind; {
	case where == inList:
		expected = "Feature"
		needs, not = hasGeometry, hasFeatures|hasCoordinates|hasGeometries
		if kind == "Feature" {
			expected = ""
		}
	case kind == "FeatureCollection" && where == inRoot:
		needs, not = hasFeatures, hasGeometry|hasProperties|hasCoordinates|hasGeometries
	case kind == "Feature" && where == inRoot:
		needs, not = hasGeometry, hasFeatures|hasCoordinates|hasGeometries
	case kind == "GeometryCollection":
		needs, not = hasGeometries, hasFeatures|hasGeometry|hasProperties|hasCoordinates
	case depths[kind] == 0:
		expected = typeNames
		if where == inRoot {
			expected = "FeatureCollection, Feature, " + typeNames
		}
	}
	if expected != "" {
		return s.fault(o.is.at, TypeName, "type", o.is.kind, expected, nil)
	}
	if o.has&needs == 0 {
		return missing(nameOf(needs))
	}
	for bit := hasType; bit <= hasBBox; bit <<= 1 {
		if o.has&not&bit != 0 {
			return s.fault(o.at, Structure, "object of type "+o.is.kind, "", fmt.Sprintf("no member %q", nameOf(bit)), nil)
		}
	}
	switch {
	case needs == hasGeometries && len(o.parts) > 0:
		o.geometry.Shape = o.parts
		if o.withZ {
			o.geometry.Z = o.z
			for _, z := range o.z {
				r.mixed = r.mixed || z != z
			}
		}
	case needs == hasCoordinates && where == inRoot:
		return r.shapeOf(o)
	}
	return nil
}
