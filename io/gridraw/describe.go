package gridraw

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/io/numtext"
)

const (
	kind      = "raw raster"
	version   = 1
	byteOrder = "little-endian"
	rowOrder  = "north first"
)

// description is the JSON file, in the order of its keys.
type description struct {
	Kind            string  `json:"kind"`
	Version         int     `json:"version"`
	Data            string  `json:"data"`
	DataBytes       int64   `json:"data_bytes"`
	DataCRC32C      string  `json:"data_crc32c"`
	Type            string  `json:"type"`
	ByteOrder       string  `json:"byte_order"`
	Shape           [2]int  `json:"shape"`
	RowOrder        string  `json:"row_order"`
	Origin          origin  `json:"origin"`
	Cell            place   `json:"cell"`
	ValuesAt        string  `json:"values_at"`
	FirstNode       place   `json:"first_node"`
	NoData          string  `json:"no_data"`
	XYUnit          *string `json:"xy_unit"`
	ZUnit           *string `json:"z_unit"`
	CRS             *string `json:"crs"`
	HorizontalDatum *string `json:"horizontal_datum"`
	VerticalDatum   *string `json:"vertical_datum"`
	Show            *string `json:"show"`
}

type origin struct {
	West  decimal.Number `json:"west"`
	South decimal.Number `json:"south"`
}

type place struct {
	X decimal.Number `json:"x"`
	Y decimal.Number `json:"y"`
}

// Describe returns the text of the description of data that were encoded with opt and gave info; name is the data file's, without folders.
func Describe(name string, g *grid.Grid, opt Options, info Info) []byte {
	s := g.Spec
	noData := "nan"
	if v, ok := numtext.Parse([]byte(opt.NoData)); ok {
		noData = string(numtext.Append(nil, v, numtext.Shortest))
	}
	d := description{
		Kind: kind, Version: version,
		Data: name, DataBytes: info.Bytes, DataCRC32C: fmt.Sprintf("%08x", info.CRC32C),
		Type: info.Type.String(), ByteOrder: byteOrder, Shape: [2]int{s.Rows, s.Cols}, RowOrder: rowOrder,
		Origin: origin{s.West, s.South}, Cell: place{s.CellX, s.CellY},
		ValuesAt: s.ValuesAt.String(), FirstNode: place{s.XDecimal(0), s.YDecimal(0)}, NoData: noData,
		XYUnit: stated(g.Labels.XYUnit), ZUnit: stated(g.Labels.ZUnit), CRS: stated(g.Labels.CRS),
		HorizontalDatum: stated(g.Labels.HorizontalDatum), VerticalDatum: stated(g.Labels.VerticalDatum), Show: stated(g.Labels.Show),
	}
	var text bytes.Buffer
	enc := json.NewEncoder(&text)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	if err := enc.Encode(d); err != nil {
		panic("gridraw: description: " + err.Error()) // strings and numbers alone
	}
	return text.Bytes()
}

func stated(label string) *string {
	if label == "" {
		return nil
	}
	return &label
}

func unstated(label *string) string {
	if label == nil {
		return ""
	}
	return *label
}

// keys are those of a description, and below them of its parts.
var keys = map[string][]string{
	"": {"kind", "version", "data", "data_bytes", "data_crc32c", "type", "byte_order", "shape", "row_order", "origin", "cell", "values_at",
		"first_node", "no_data", "xy_unit", "z_unit", "crs", "horizontal_datum", "vertical_datum", "show"},
	"origin":     {"west", "south"},
	"cell":       {"x", "y"},
	"first_node": {"x", "y"},
}

// DescriptionError says what in a description is wrong. Key is empty if it is about the whole text.
type DescriptionError struct {
	Name     string // of the file
	Key      string
	Seen     string
	Expected string
}

func (e *DescriptionError) Error() string {
	what := e.Seen
	if e.Key != "" {
		what = e.Key + " " + what
	}
	return fmt.Sprintf("%s: %s: expected %s", e.Name, what, e.Expected)
}

// header is a description that was read and checked.
type header struct {
	spec   grid.Spec
	labels grid.Labels
	typ    Type
	noData float64
	bytes  int64
	crc    uint32
	data   string
}

// readDescription reads and checks everything that can be checked without the data.
func readDescription(name string, text []byte) (*header, error) {
	wrong := func(key, seen, expected string) error {
		return &DescriptionError{Name: name, Key: key, Seen: seen, Expected: expected}
	}
	if err := checkKeys(json.NewDecoder(bytes.NewReader(text)), wrong); err != nil {
		return nil, err
	}
	var d description
	if err := json.Unmarshal(text, &d); err != nil {
		var te *json.UnmarshalTypeError
		if errors.As(err, &te) {
			return nil, wrong(te.Field, "a "+te.Value, "a "+te.Type.String())
		}
		return nil, wrong("", err.Error(), "the description of a raw raster")
	}
	for _, c := range []struct{ key, seen, want string }{
		{"kind", d.Kind, kind}, {"byte_order", d.ByteOrder, byteOrder}, {"row_order", d.RowOrder, rowOrder},
	} {
		if c.seen != c.want {
			return nil, wrong(c.key, strconv.Quote(c.seen), strconv.Quote(c.want))
		}
	}
	if d.Version != version {
		return nil, wrong("version", strconv.Itoa(d.Version), strconv.Itoa(version))
	}
	h := &header{data: d.Data, bytes: d.DataBytes, noData: math.NaN(), labels: grid.Labels{
		XYUnit: unstated(d.XYUnit), ZUnit: unstated(d.ZUnit), CRS: unstated(d.CRS),
		HorizontalDatum: unstated(d.HorizontalDatum), VerticalDatum: unstated(d.VerticalDatum), Show: unstated(d.Show),
	}}
	switch d.Type {
	case "float64":
		h.typ = Float64
	case "float32":
		h.typ = Float32
	default:
		return nil, wrong("type", strconv.Quote(d.Type), `"float32" or "float64"`)
	}
	crc, err := strconv.ParseUint(d.DataCRC32C, 16, 32)
	if err != nil || len(d.DataCRC32C) != 8 {
		return nil, wrong("data_crc32c", strconv.Quote(d.DataCRC32C), "eight hexadecimal digits")
	}
	h.crc = uint32(crc)
	if d.NoData != "nan" {
		v, ok := numtext.Parse([]byte(d.NoData))
		if !ok || h.typ == Float32 && float64(float32(v)) != v {
			return nil, wrong("no_data", strconv.Quote(d.NoData), `"nan" or a number of the type`)
		}
		h.noData = v
	}
	at, err := grid.ParseNodePlace(d.ValuesAt)
	if err != nil {
		return nil, wrong("values_at", strconv.Quote(d.ValuesAt), `"centres" or "corners"`)
	}
	h.spec = grid.Spec{West: d.Origin.West, South: d.Origin.South, CellX: d.Cell.X, CellY: d.Cell.Y, Rows: d.Shape[0], Cols: d.Shape[1], ValuesAt: at}
	if err := h.spec.Validate(); err != nil {
		return nil, fmt.Errorf("%s: %w", name, err)
	}
	if x, y := h.spec.XDecimal(0), h.spec.YDecimal(0); d.FirstNode.X.Cmp(x) != 0 || d.FirstNode.Y.Cmp(y) != 0 {
		return nil, wrong("first_node", fmt.Sprintf("%s, %s", d.FirstNode.X, d.FirstNode.Y), fmt.Sprintf("%s, %s as the other keys say", x, y))
	}
	nodes := h.spec.NumNodes()
	if nodes > math.MaxInt/8 || d.DataBytes != int64(nodes)*int64(h.typ.Bytes()) {
		return nil, wrong("data_bytes", strconv.FormatInt(d.DataBytes, 10), fmt.Sprintf("%d x %d values of %d bytes", h.spec.Rows, h.spec.Cols, h.typ.Bytes()))
	}
	return h, nil
}

// checkKeys reads the text token by token: the standard decoder takes repeated keys, and other capitals.
func checkKeys(dec *json.Decoder, wrong func(key, seen, expected string) error) error {
	seen := map[string]bool{}
	notJSON := func(err error) error {
		if err == io.EOF || err == io.ErrUnexpectedEOF {
			return wrong("", "cut short", "the description of a raw raster")
		}
		return wrong("", err.Error(), "the description of a raw raster")
	}
	var object func(path string) error
	object = func(path string) error {
		if t, err := dec.Token(); err != nil {
			return notJSON(err)
		} else if t != json.Delim('{') {
			return wrong(path, fmt.Sprint(t), "an object")
		}
		for dec.More() {
			t, err := dec.Token()
			if err != nil {
				return notJSON(err)
			}
			key, _ := t.(string) // keys of objects are strings
			full := strings.TrimPrefix(path+"."+key, ".")
			if !slices.Contains(keys[path], key) {
				return wrong("key", strconv.Quote(full), "one of "+strings.Join(keys[path], ", "))
			}
			if seen[full] {
				return wrong("key", strconv.Quote(full)+" again", "each key once")
			}
			seen[full] = true
			if keys[full] != nil {
				err = object(full)
			} else {
				var value json.RawMessage
				if err = dec.Decode(&value); err != nil {
					return notJSON(err)
				}
				if string(value) == "null" && !mayBeNull(full) {
					return wrong(full, "null", "a value")
				}
				if full == "shape" {
					var shape []int
					if json.Unmarshal(value, &shape) != nil || len(shape) != 2 {
						return wrong(full, string(value), "rows and columns")
					}
				}
			}
			if err != nil {
				return err
			}
		}
		if _, err := dec.Token(); err != nil {
			return notJSON(err)
		}
		for _, key := range keys[path] {
			if full := strings.TrimPrefix(path+"."+key, "."); !seen[full] {
				return wrong("key", strconv.Quote(full)+" is missing", "it to be there")
			}
		}
		return nil
	}
	if err := object(""); err != nil {
		return err
	}
	if _, err := dec.Token(); err != io.EOF {
		return wrong("", "text behind the description", "nothing more")
	}
	return nil
}

func mayBeNull(key string) bool {
	return slices.Contains([]string{"xy_unit", "z_unit", "crs", "horizontal_datum", "vertical_datum", "show"}, key)
}
