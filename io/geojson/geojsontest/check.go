package geojsontest

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math/big"
	"sort"
	"strings"
	"sync"
	"unicode/utf8"

	"github.com/santhosh-tekuri/jsonschema/v6"
)

//go:embed testdata/rfc7946.schema.json
var schemaText []byte

const schemaURL = "https://isofacet.invalid/rfc7946.schema.json"

var schema = sync.OnceValues(func() (*jsonschema.Schema, error) {
	text, err := jsonschema.UnmarshalJSON(bytes.NewReader(schemaText))
	if err != nil {
		return nil, err
	}
	c := jsonschema.NewCompiler()
	if err := c.AddResource(schemaURL, text); err != nil {
		return nil, err
	}
	return c.Compile(schemaURL)
})

// Flat says what Check makes of a ring without area.
type Flat bool

const (
	RefuseFlat Flat = false
	// AllowFlat is for coordinates that were written with few decimals.
	AllowFlat Flat = true
)

// Check returns nil if text is GeoJSON after RFC 7946: one JSON object in UTF-8 that passes the schema, with closed rings, outer
// ones counter-clockwise and holes clockwise.
func Check(text []byte, flat Flat) error {
	if !utf8.Valid(text) {
		return errors.New("not UTF-8")
	}
	s, err := schema()
	if err != nil {
		return err
	}
	d := json.NewDecoder(bytes.NewReader(text))
	d.UseNumber()
	var v any
	if err := d.Decode(&v); err != nil {
		return err
	}
	if _, err := d.Token(); err != io.EOF {
		return errors.New("something behind the object")
	}
	if err := s.Validate(v); err != nil {
		return plain(err)
	}
	return rings(v, "", flat)
}

// plain keeps the faults of a schema, in an order of their own.
func plain(err error) error {
	lines := strings.Split(err.Error(), "\n")
	sort.Strings(lines[1:])
	if len(lines) > 20 {
		lines = lines[:20]
	}
	return errors.New(strings.Join(lines, "\n"))
}

// rings checks all rings in v.
func rings(v any, where string, flat Flat) error {
	switch v := v.(type) {
	case []any:
		for i, part := range v {
			if err := rings(part, fmt.Sprintf("%s/%d", where, i), flat); err != nil {
				return err
			}
		}
	case map[string]any:
		switch v["type"] {
		case "Polygon":
			return polygon(v["coordinates"].([]any), where, flat)
		case "MultiPolygon":
			for i, p := range v["coordinates"].([]any) {
				if err := polygon(p.([]any), fmt.Sprintf("%s/%d", where, i), flat); err != nil {
					return err
				}
			}
		}
		for _, name := range []string{"features", "geometry", "geometries"} {
			if err := rings(v[name], where+"/"+name, flat); err != nil {
				return err
			}
		}
	}
	return nil
}

func polygon(p []any, where string, flat Flat) error {
	for i, ring := range p {
		positions := ring.([]any)
		first, last := positions[0].([]any), positions[len(positions)-1].([]any)
		if fmt.Sprint(first) != fmt.Sprint(last) {
			return fmt.Errorf("%s: ring %d begins at %v and ends at %v", where, i, first, last)
		}
		switch way := area(positions).Sign(); {
		case way == 0 && flat == RefuseFlat:
			return fmt.Errorf("%s: ring %d has no area", where, i)
		case way < 0 && i == 0, way > 0 && i > 0:
			return fmt.Errorf("%s: ring %d goes the wrong way", where, i)
		}
	}
	return nil
}

// area returns twice the area of a ring, exactly.
func area(positions []any) *big.Rat {
	at := func(i, axis int) *big.Rat {
		r, ok := new(big.Rat).SetString(positions[i].([]any)[axis].(json.Number).String())
		if !ok {
			panic("geojsontest: a number that is none passed the schema")
		}
		return r
	}
	sum := new(big.Rat)
	for i := 1; i < len(positions); i++ {
		sum.Add(sum, new(big.Rat).Mul(at(i-1, 0), at(i, 1)))
		sum.Sub(sum, new(big.Rat).Mul(at(i, 0), at(i-1, 1)))
	}
	return sum
}
