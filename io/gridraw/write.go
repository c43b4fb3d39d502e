package gridraw

import (
	"encoding/binary"
	"fmt"
	"hash/crc32"
	"io"
	"math"
	"path/filepath"
	"sync"

	"isofacet/grid"
	"isofacet/io/numtext"
	"isofacet/io/outfile"
)

// Type is what each value is stored as.
type Type uint8

const (
	Float64 Type = iota
	Float32
)

func (t Type) String() string {
	if t == Float32 {
		return "float32"
	}
	return "float64"
}

// Bytes returns the size of one value.
func (t Type) Bytes() int {
	if t == Float32 {
		return 4
	}
	return 8
}

// Options says how a raster is stored.
type Options struct {
	Type Type
	// NoData is the number stored for nodes without a value; empty means NaN.
	NoData string
	// LossMax is the largest loss by rounding to float32 that is not counted in Info.Lossy, in the unit of the values.
	LossMax float64
	// Workers is how many goroutines convert; 0 means one per CPU.
	Workers int
}

// Info says what was stored.
type Info struct {
	Type   Type
	Bytes  int64
	CRC32C uint32
	// Loss is the largest difference between a value and what is stored for it; 0 for float64.
	Loss float64
	// Lossy is how many values lose more than Options.LossMax.
	Lossy int
}

// ValueError says which value cannot be stored. Row and Col are -1 where it is about no node.
type ValueError struct {
	Row, Col int // from 0, row 0 in the north
	Seen     string
	Expected string
}

func (e *ValueError) Error() string {
	if e.Row < 0 {
		return fmt.Sprintf("%s: expected %s", e.Seen, e.Expected)
	}
	return fmt.Sprintf("row %d, column %d: %s: expected %s", e.Row+1, e.Col+1, e.Seen, e.Expected)
}

// blockNodes is how many values a worker converts at a time: 256 KiB of float64, which stay in its cache.
const blockNodes = 32 << 10

// Write adds the data file path and its description path.json to set, the data file to be renamed last; files holds for both (a hash for the
// run record, another standard output). With the path "-" the data alone go to standard output: a pipe has no place for the description.
//
// It returns the error of g.Validate, a *ValueError, or one of the files. Nothing appears before the caller commits the set.
func Write(set *outfile.Set, path string, files outfile.Options, g *grid.Grid, opt Options) (Info, error) {
	files.RenameLast = true
	data, err := set.Create(path, files)
	if err != nil {
		return Info{}, err
	}
	info, err := Encode(data, g, opt)
	if err != nil || data.IsStandardOutput() {
		return info, err
	}
	files.RenameLast = false
	side, err := set.Create(path+".json", files)
	if err != nil {
		return info, err
	}
	_, err = side.Write(Describe(filepath.Base(path), g, opt, info))
	return info, err
}

// Encode writes the values alone to w.
func Encode(w io.Writer, g *grid.Grid, opt Options) (Info, error) {
	info := Info{Type: opt.Type}
	if err := g.Validate(); err != nil {
		return info, err
	}
	noData, err := parseNoData(opt)
	if err != nil {
		return info, err
	}
	out := &summing{to: w}
	n := len(g.Values)
	var total sync.Mutex
	err = outfile.WriteBlocks(out, (n-1)/blockNodes+1, opt.Workers, func(i int, buf []byte) ([]byte, error) {
		first := i * blockNodes
		c := converter{noData: noData, lossMax: opt.LossMax}
		values := g.Values[first:min(first+blockNodes, n)]
		bad := -1
		if opt.Type == Float32 {
			buf, bad = c.float32s(buf, values)
		} else {
			buf, bad = c.float64s(buf, values)
		}
		if bad >= 0 {
			return buf, refuse(g, first+bad, opt)
		}
		total.Lock()
		info.Loss = max(info.Loss, c.loss)
		info.Lossy += c.lossy
		total.Unlock()
		return buf, nil
	})
	info.Bytes, info.CRC32C = out.bytes, out.crc
	return info, err
}

// parseNoData returns the number that stands for no data, NaN if none was chosen.
func parseNoData(opt Options) (float64, error) {
	if opt.NoData == "" {
		return math.NaN(), nil
	}
	v, ok := numtext.Parse([]byte(opt.NoData))
	if !ok {
		return 0, &ValueError{Row: -1, Col: -1, Seen: fmt.Sprintf("no-data %q", opt.NoData), Expected: "a number such as -9999"}
	}
	if opt.Type == Float32 && float64(float32(v)) != v {
		return 0, &ValueError{Row: -1, Col: -1, Seen: "no-data " + opt.NoData, Expected: "a number that float32 holds exactly, such as -9999"}
	}
	return v, nil
}

var castagnoli = crc32.MakeTable(crc32.Castagnoli)

// summing passes bytes on, and counts and sums them.
type summing struct {
	to    io.Writer
	bytes int64
	crc   uint32
}

func (s *summing) Write(p []byte) (int, error) {
	s.crc = crc32.Update(s.crc, castagnoli, p)
	s.bytes += int64(len(p))
	return s.to.Write(p)
}

// converter turns values into bytes. Its loops call nothing a value.
type converter struct {
	noData  float64
	lossMax float64
	loss    float64
	lossy   int
}

// storedNaN is the quiet NaN without a payload, so that bytes do not depend on where a NaN came from.
const (
	storedNaN64 = 0x7ff8000000000000
	storedNaN32 = 0x7fc00000
)

// float64s appends values to buf. bad is the first value that cannot be stored, or -1.
func (c *converter) float64s(buf []byte, values []float64) (out []byte, bad int) {
	noDataBits := math.Float64bits(c.noData)
	if c.noData != c.noData {
		noDataBits = storedNaN64
	}
	out = resize(buf, 8*len(values))
	for i, v := range values {
		bits := math.Float64bits(v)
		if v-v != 0 { // NaN, or infinite
			if v == v {
				return out, i
			}
			bits = noDataBits
		} else if v == c.noData {
			return out, i
		}
		binary.LittleEndian.PutUint64(out[8*i:], bits)
	}
	return out, -1
}

// float32s is float64s for the smaller type.
func (c *converter) float32s(buf []byte, values []float64) (out []byte, bad int) {
	noData := float32(c.noData)
	noDataBits := math.Float32bits(noData)
	if noData != noData {
		noDataBits = storedNaN32
	}
	out = resize(buf, 4*len(values))
	loss, lossMax, lossy := c.loss, c.lossMax, 0
	for i, v := range values {
		f := float32(v)
		bits := math.Float32bits(f)
		if f-f != 0 || f == noData {
			if v == v {
				return out, i // infinite, or becomes so, or like no data
			}
			bits = noDataBits
		} else if d := math.Abs(float64(f) - v); d > loss || d > lossMax {
			loss = max(loss, d)
			if d > lossMax {
				lossy++
			}
		}
		binary.LittleEndian.PutUint32(out[4*i:], bits)
	}
	c.loss, c.lossy = loss, lossy
	return out, -1
}

func resize(buf []byte, n int) []byte {
	if cap(buf) < n {
		return make([]byte, n)
	}
	return buf[:n]
}

// refuse says why value i cannot be stored.
func refuse(g *grid.Grid, i int, opt Options) error {
	v := g.Values[i]
	e := &ValueError{Row: i / g.Spec.Cols, Col: i % g.Spec.Cols, Seen: fmt.Sprint(v), Expected: "a finite value"}
	switch {
	case math.IsInf(v, 0):
	case opt.Type == Float32 && math.Abs(v) > math.MaxFloat32:
		e.Expected = "a value within float32, up to 3.4e38"
	default:
		e.Seen = fmt.Sprintf("value %v is stored like no-data %s", v, opt.NoData)
		e.Expected = "a no-data number that no value has"
	}
	return e
}
