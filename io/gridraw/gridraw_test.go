package gridraw

import (
	"bytes"
	"encoding/binary"
	"encoding/json"
	"errors"
	"flag"
	"fmt"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"isofacet/grid"
	"isofacet/grid/decimal"
	"isofacet/io/outfile"
)

func dec(text string) decimal.Number { return decimal.MustParse(text) }

var nan = math.NaN()

func small() *grid.Grid {
	return &grid.Grid{
		Spec:   grid.Spec{West: dec("100"), South: dec("50"), CellX: dec("1"), CellY: dec("1"), Cols: 3, Rows: 2},
		Labels: grid.Labels{XYUnit: "m", ZUnit: "m", CRS: "EPSG:25832", Show: "value"},
		Values: []float64{12.25, 12.5, nan, 12, 12.125, -0.0625},
	}
}

func save(t rapid.TB, path string, g *grid.Grid, opt Options) Info {
	t.Helper()
	var set outfile.Set
	defer set.Abort()
	info, err := Write(&set, path, outfile.Options{}, g, opt)
	if err != nil {
		t.Fatal(err)
	}
	if err := set.Commit(); err != nil {
		t.Fatal(err)
	}
	return info
}

func read(t rapid.TB, path string) []byte {
	t.Helper()
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func checkSame(t rapid.TB, got, want *grid.Grid) {
	t.Helper()
	if !got.Spec.Equal(want.Spec) || got.Labels != want.Labels {
		t.Fatalf("lattice %+v, labels %+v; want %+v, %+v", got.Spec, got.Labels, want.Spec, want.Labels)
	}
	for i, v := range got.Values {
		if w := want.Values[i]; math.Float64bits(v) != math.Float64bits(w) && !(math.IsNaN(v) && math.IsNaN(w)) {
			t.Fatalf("value %d is %v, want %v", i, v, w)
		}
	}
}

var update = flag.Bool("update", false, "rewrite the golden files")

func TestGoldenFiles(t *testing.T) {
	for _, c := range []struct {
		file string
		opt  Options
	}{
		{"surface.raw", Options{}},
		{"surface32.raw", Options{Type: Float32, NoData: "-9999"}},
	} {
		path := filepath.Join(t.TempDir(), c.file)
		save(t, path, small(), c.opt)
		for _, name := range []string{"", ".json"} {
			golden, got := filepath.Join("testdata", c.file+name), read(t, path+name)
			if *update {
				if err := os.WriteFile(golden, got, 0o644); err != nil {
					t.Fatal(err)
				}
			}
			want := read(t, golden)
			if diff := cmp.Diff(want, got); diff != "" {
				t.Errorf("%s%s:\n%s", c.file, name, diff)
			}
		}
		g, err := Read(filepath.Join("testdata", c.file), ReadOptions{})
		if err != nil {
			t.Fatal(err)
		}
		checkSame(t, g, small())
	}
}

// The bytes by hand, from the format of IEEE 754: 12.25 is 0x4028800000000000.
func TestBytesAreLittleEndianFromTheNorthWest(t *testing.T) {
	var data bytes.Buffer
	if _, err := Encode(&data, small(), Options{}); err != nil {
		t.Fatal(err)
	}
	if want := []byte{0, 0, 0, 0, 0, 0x80, 0x28, 0x40}; !bytes.Equal(data.Bytes()[:8], want) {
		t.Errorf("first value % x, want % x", data.Bytes()[:8], want)
	}
	if want := []byte{0, 0, 0, 0, 0, 0, 0xf8, 0x7f}; !bytes.Equal(data.Bytes()[16:24], want) || data.Len() != 48 {
		t.Errorf("no data % x, want % x", data.Bytes()[16:24], want)
	}
	data.Reset()
	if _, err := Encode(&data, small(), Options{Type: Float32}); err != nil {
		t.Fatal(err)
	}
	if want := []byte{0, 0, 0x44, 0x41}; !bytes.Equal(data.Bytes()[:4], want) || data.Len() != 24 {
		t.Errorf("first value % x, want % x", data.Bytes()[:4], want)
	}
}

// CRC-32C of "123456789": RFC 3720, appendix B.4, and the check value of its catalogue entry (from memory).
func TestChecksumIsCRC32C(t *testing.T) {
	s := summing{to: &bytes.Buffer{}}
	s.Write([]byte("12345"))
	s.Write([]byte("6789"))
	if s.crc != 0xe3069283 || s.bytes != 9 {
		t.Errorf("%08x of %d bytes", s.crc, s.bytes)
	}
}

func drawGrid(t *rapid.T) *grid.Grid {
	number := func(label string, lo, hi int64) decimal.Number {
		n, err := decimal.New(rapid.Int64Range(lo, hi).Draw(t, label), rapid.IntRange(-2, 4).Draw(t, label+" scale"))
		if err != nil {
			t.Fatal(err)
		}
		return n
	}
	g, err := grid.New(grid.Spec{
		West: number("west", -1e9, 1e9), South: number("south", -1e9, 1e9), CellX: number("cell x", 1, 1000), CellY: number("cell y", 1, 1000),
		Cols: rapid.IntRange(1, 9).Draw(t, "columns"), Rows: rapid.IntRange(1, 9).Draw(t, "rows"),
		ValuesAt: rapid.SampledFrom([]grid.NodePlace{grid.Centres, grid.Corners}).Draw(t, "values at"),
	})
	if err != nil {
		t.Fatal(err)
	}
	label := rapid.SampledFrom([]string{"", "m", "EPSG:25832", "mean sea level, \"1928\" <Ω>"})
	g.Labels = grid.Labels{XYUnit: label.Draw(t, "xy"), ZUnit: label.Draw(t, "z"), CRS: label.Draw(t, "crs"),
		HorizontalDatum: label.Draw(t, "horizontal"), VerticalDatum: label.Draw(t, "vertical"), Show: label.Draw(t, "show")}
	for i := range g.Values {
		v := rapid.OneOf(rapid.Float64Range(-1e6, 1e6), rapid.Float64(), rapid.Just(nan), rapid.Just(math.Copysign(0, -1))).Draw(t, "value")
		if !math.IsInf(v, 0) {
			g.Values[i] = v
		}
	}
	return g
}

// roundTrip encodes and decodes in memory; what files add is a test of its own, because bringing each to the disk takes long.
func roundTrip(t rapid.TB, g *grid.Grid, opt Options) (*grid.Grid, Info) {
	t.Helper()
	var data bytes.Buffer
	info, err := Encode(&data, g, opt)
	if err != nil {
		t.Fatal(err)
	}
	back, err := Decode(&data, "side", Describe("g.raw", g, opt, info), ReadOptions{})
	if err != nil {
		t.Fatal(err)
	}
	return back, info
}

func TestReadsBackToTheSameBits(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		g := drawGrid(t)
		back, _ := roundTrip(t, g, Options{NoData: rapid.SampledFrom([]string{"", "-99999999.5"}).Draw(t, "no-data")})
		checkSame(t, back, g)
	})
}

func TestFilesReadBackToTheSameBits(t *testing.T) {
	path := filepath.Join(t.TempDir(), "g.raw")
	for _, g := range []*grid.Grid{small(), surface()} {
		save(t, path, g, Options{})
		for _, workers := range []int{1, 2, 5} {
			back, err := Read(path, ReadOptions{Workers: workers})
			if err != nil {
				t.Fatal(err)
			}
			checkSame(t, back, g)
		}
	}
}

func TestFloat32RoundsOnceAndCountsLosses(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		g := drawGrid(t)
		lossMax := rapid.SampledFrom([]float64{0, 1e-9, 0.001, 1}).Draw(t, "loss")
		want, lossy, loss := *g, 0, 0.0
		want.Values = make([]float64, len(g.Values))
		for i, v := range g.Values {
			if math.Abs(v) > 3e38 {
				v, g.Values[i] = 7.1, 7.1
			}
			want.Values[i] = float64(float32(v))
			if d := math.Abs(want.Values[i] - v); d > lossMax {
				lossy++
				loss = max(loss, d)
			} else if d > loss {
				loss = d
			}
		}
		back, info := roundTrip(t, g, Options{Type: Float32, LossMax: lossMax})
		if info.Loss != loss || info.Lossy != lossy || info.Bytes != int64(4*len(g.Values)) {
			t.Fatalf("%+v, want loss %v in %d values", info, loss, lossy)
		}
		checkSame(t, back, &want)
	})
}

// surface has more than two blocks of values.
func surface() *grid.Grid {
	g, err := grid.New(grid.Spec{West: dec("430000"), South: dec("5600000"), CellX: dec("0.5"), CellY: dec("0.5"), Cols: 401, Rows: 307})
	if err != nil {
		panic(err)
	}
	for i := range g.Values {
		if i%11 != 0 {
			g.Values[i] = 100 + 0.37*float64(i%401) - 0.1*float64(i/401)
		}
	}
	return g
}

func TestWorkersDoNotChangeBytes(t *testing.T) {
	g := surface()
	for _, typ := range []Type{Float64, Float32} {
		var want bytes.Buffer
		wantInfo, err := Encode(&want, g, Options{Type: typ, Workers: 1})
		if err != nil {
			t.Fatal(err)
		}
		for _, workers := range []int{0, 2, 3, 8} {
			var got bytes.Buffer
			info, err := Encode(&got, g, Options{Type: typ, Workers: workers})
			if err != nil || info != wantInfo || !bytes.Equal(got.Bytes(), want.Bytes()) {
				t.Errorf("%v, %d workers: %+v, %v; want %+v and the same bytes", typ, workers, info, err, wantInfo)
			}
			back, err := Decode(&got, "side", Describe("g.raw", g, Options{Type: typ}, info), ReadOptions{Workers: workers})
			if err != nil {
				t.Fatal(err)
			}
			if typ == Float64 {
				checkSame(t, back, g)
			}
		}
	}
}

func TestWriteRefuses(t *testing.T) {
	for _, c := range []struct {
		name string
		make func(g *grid.Grid, opt *Options)
		want string
	}{
		{"infinite", func(g *grid.Grid, opt *Options) { g.Values[4] = math.Inf(1) }, "row 2, column 2: +Inf: expected a finite value"},
		{"infinite, float32", func(g *grid.Grid, opt *Options) { opt.Type, g.Values[4] = Float32, math.Inf(1) }, "row 2, column 2: +Inf: expected a finite value"},
		{"beyond float32", func(g *grid.Grid, opt *Options) { opt.Type, g.Values[0] = Float32, 1e39 }, "row 1, column 1: 1e+39: expected a value within float32, up to 3.4e38"},
		{"no-data is a value", func(g *grid.Grid, opt *Options) { opt.NoData = "12.50" },
			"row 1, column 2: value 12.5 is stored like no-data 12.50: expected a no-data number that no value has"},
		{"no-data is a rounded value", func(g *grid.Grid, opt *Options) { opt.Type, opt.NoData, g.Values[3] = Float32, "-9999", -9999.0001 },
			"row 2, column 1: value -9999.0001 is stored like no-data -9999: expected a no-data number that no value has"},
		{"no-data rounds", func(g *grid.Grid, opt *Options) { opt.Type, opt.NoData = Float32, "-9999.1" },
			"no-data -9999.1: expected a number that float32 holds exactly, such as -9999"},
		{"no-data is no number", func(g *grid.Grid, opt *Options) { opt.NoData = "none" }, `no-data "none": expected a number such as -9999`},
		{"too few values", func(g *grid.Grid, opt *Options) { g.Values = g.Values[1:] }, "values 5: expected 6, one a node of 3 columns and 2 rows"},
		{"no rows", func(g *grid.Grid, opt *Options) { g.Spec.Rows, g.Values = 0, nil }, "rows 0: expected at least 1"},
	} {
		g, opt := small(), Options{}
		c.make(g, &opt)
		dir := t.TempDir()
		var set outfile.Set
		_, err := Write(&set, filepath.Join(dir, "g.raw"), outfile.Options{}, g, opt)
		set.Abort()
		if err == nil || err.Error() != c.want {
			t.Errorf("%s: got  %v\nwant %s", c.name, err, c.want)
		}
		if left, err := os.ReadDir(dir); err != nil || len(left) > 0 {
			t.Errorf("%s: left %v, %v", c.name, left, err)
		}
	}
}

func TestStandardOutputTakesTheDataAlone(t *testing.T) {
	var out bytes.Buffer
	var set outfile.Set
	if _, err := Write(&set, "-", outfile.Options{Stdout: &out}, small(), Options{}); err != nil {
		t.Fatal(err)
	}
	if err := set.Commit(); err != nil || out.Len() != 48 {
		t.Errorf("%d bytes, %v", out.Len(), err)
	}
}

// P10: readers refuse one of the pair without the other, and two of different runs.
func TestReaderRefusesHalfAPair(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "g.raw")
	fresh := func() {
		save(t, path, small(), Options{})
	}
	pair := func(name, want string) {
		t.Helper()
		g, err := Read(path, ReadOptions{})
		var pe *PairError
		if g != nil || !errors.As(err, &pe) || err.Error() != path+": "+want {
			t.Errorf("%s: %v", name, err)
		}
	}
	fresh()
	if err := os.Remove(path + ".json"); err != nil {
		t.Fatal(err)
	}
	pair("no description", "no g.raw.json beside it: expected data and description")
	fresh()
	if err := os.Remove(path); err != nil {
		t.Fatal(err)
	}
	pair("no data", "missing, with g.raw.json there: expected data and description")
	fresh()
	if err := os.Truncate(path, 47); err != nil {
		t.Fatal(err)
	}
	pair("cut short", "47 bytes: expected the 48 that g.raw.json describes")

	// The description of the next run, the data of this one: as after a power cut between the two renames.
	fresh()
	data := read(t, path)
	next := small()
	next.Values[0] += 1
	save(t, path, next, Options{})
	if err := os.WriteFile(path, data, 0o644); err != nil {
		t.Fatal(err)
	}
	if _, err := Read(path, ReadOptions{}); err == nil || !strings.Contains(err.Error(), "data and description of one run") {
		t.Errorf("a mixed pair: %v", err)
	}
	if _, err := Read(filepath.Join(dir, "none.raw"), ReadOptions{}); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("neither: %v", err)
	}
}

func TestReaderRefusesOtherDescriptions(t *testing.T) {
	g := small()
	var data bytes.Buffer
	info, err := Encode(&data, g, Options{})
	if err != nil {
		t.Fatal(err)
	}
	good := string(Describe("g.raw", g, Options{}, info))
	if _, err := Decode(bytes.NewReader(data.Bytes()), "f", []byte(good), ReadOptions{}); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ name, old, new, want string }{
		{"kind", `"raw raster"`, `"points"`, `f: kind "points": expected "raw raster"`},
		{"version", `"version": 1`, `"version": 2`, `f: version 2: expected 1`},
		{"type", `"float64"`, `"int16"`, `f: type "int16": expected "float32" or "float64"`},
		{"order of bytes", `"little-endian"`, `"big-endian"`, `f: byte_order "big-endian": expected "little-endian"`},
		{"order of rows", `"north first"`, `"south first"`, `f: row_order "south first": expected "north first"`},
		{"unknown key", `"show":`, `"shows":`, `f: key "shows": expected one of kind, `},
		{"capitals", `"show":`, `"Show":`, `f: key "Show": expected one of kind, `},
		{"unknown key inside", `"west":`, `"east":`, `f: key "origin.east": expected one of west, south`},
		{"missing key", `"z_unit": "m",`, ``, `f: key "z_unit" is missing: expected it to be there`},
		{"key again", `"z_unit": "m",`, `"z_unit": "m", "z_unit": "ft-us",`, `f: key "z_unit" again: expected each key once`},
		{"null", `"type": "float64"`, `"type": null`, `f: type null: expected a value`},
		{"number for text", `"type": "float64"`, `"type": 64`, `f: type a number: expected a string`},
		{"text for a part", `"cell": {`, `"cell": "1", "x": {`, `f: cell 1: expected an object`},
		{"shape of three", "3\n  ]", "3, 1\n  ]", "f: shape"},
		{"shape of text", "3\n  ]", "\"3\"\n  ]", "f: shape"},
		{"rows below zero", "    2,", "    -2,", "f: rows -2: expected at least 1"},
		{"place no number", `"west": "100"`, `"west": "1OO"`, `f: "1OO": expected a number such as 12.5`},
		{"cell of zero", `"x": "1"`, `"x": "0"`, `f: cell x 0: expected a number above 0`},
		{"no place for values", `"centres"`, `"middle"`, `f: values_at "middle": expected "centres" or "corners"`},
		{"first node", `"x": "100.5"`, `"x": "100"`, `f: first_node 100, 51.5: expected 100.5, 51.5 as the other keys say`},
		{"no data", `"nan"`, `"none"`, `f: no_data "none": expected "nan" or a number of the type`},
		{"size", `"data_bytes": 48`, `"data_bytes": 24`, `f: data_bytes 24: expected 2 x 3 values of 8 bytes`},
		{"checksum no number", `"data_crc32c": "`, `"data_crc32c": "x`, `expected eight hexadecimal digits`},
		{"more text", "\n}\n", "\n} {}", `f: text behind the description: expected nothing more`},
		{"cut short", "\n}\n", "", `f: cut short: expected the description of a raw raster`},
		{"no object", good, `[1]`, `f: [: expected an object`},
		{"empty", good, ``, `f: cut short: expected the description of a raw raster`},
		{"no JSON", good, `kind = raw`, `f: invalid character 'k' looking for beginning of value: expected the description of a raw raster`},
	} {
		text := strings.Replace(good, c.old, c.new, 1)
		if text == good {
			t.Errorf("%s: nothing replaced", c.name)
		}
		g, err := Decode(bytes.NewReader(data.Bytes()), "f", []byte(text), ReadOptions{})
		if g != nil || err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s:\ngot  %v\nwant %s", c.name, err, c.want)
		}
		var de *DescriptionError
		if err != nil && !errors.As(err, &de) && !errors.Is(err, grid.ErrSpec) {
			t.Errorf("%s: untyped %v", c.name, err)
		}
	}
}

func TestReaderRefusesOtherData(t *testing.T) {
	g := small()
	var data bytes.Buffer
	info, err := Encode(&data, g, Options{})
	if err != nil {
		t.Fatal(err)
	}
	text := Describe("g.raw", g, Options{}, info)
	for name, b := range map[string][]byte{"cut short": data.Bytes()[:40], "more": append(bytes.Clone(data.Bytes()), 0), "changed": append([]byte{1}, data.Bytes()[1:]...)} {
		var pe *PairError
		if _, err := Decode(bytes.NewReader(b), "f", text, ReadOptions{}); !errors.As(err, &pe) {
			t.Errorf("%s: %v", name, err)
		}
	}
	if _, err := Decode(bytes.NewReader(data.Bytes()), "f", text, ReadOptions{LimitBytes: 47}); !errors.Is(err, grid.ErrTooBig) {
		t.Errorf("beyond the limit: %v", err)
	}
	infinite := bytes.Clone(data.Bytes())
	binary.LittleEndian.PutUint64(infinite[8*4:], math.Float64bits(math.Inf(-1)))
	var ve *ValueError
	if _, err := Decode(bytes.NewReader(infinite), "f", text, ReadOptions{}); !errors.As(err, &ve) || ve.Row != 1 || ve.Col != 1 {
		t.Errorf("infinite: %v", err)
	}
}

func FuzzDescription(f *testing.F) {
	g := small()
	var data bytes.Buffer
	info, err := Encode(&data, g, Options{})
	if err != nil {
		f.Fatal(err)
	}
	f.Add(Describe("g.raw", g, Options{}, info), data.Bytes())
	f.Add([]byte(`{"kind":"raw raster","version":1}`), []byte{})
	f.Fuzz(func(t *testing.T, text, data []byte) {
		g, err := Decode(bytes.NewReader(data), "f", text, ReadOptions{LimitBytes: 1 << 20})
		if err != nil {
			return
		}
		if err := g.Validate(); err != nil {
			t.Fatal(err)
		}
		if !json.Valid(text) {
			t.Fatal("read from what is no JSON")
		}
	})
}

func BenchmarkWrite(b *testing.B) {
	g, err := grid.New(grid.Spec{CellX: dec("1"), CellY: dec("1"), Cols: 2000, Rows: 2000})
	if err != nil {
		b.Fatal(err)
	}
	for i := range g.Values {
		g.Values[i] = 100 + math.Sqrt(float64(i))
	}
	rate := func(b *testing.B) {
		b.ReportMetric(float64(len(g.Values))*float64(b.N)/b.Elapsed().Seconds(), "nodes/s")
	}
	sink := make([]byte, 32<<20)
	for _, workers := range []int{1, 2} {
		for _, typ := range []Type{Float64, Float32} {
			b.Run(fmt.Sprintf("%v/workers=%d/n=4e6", typ, workers), func(b *testing.B) {
				for b.Loop() {
					if _, err := Encode(&into{sink, 0}, g, Options{Type: typ, Workers: workers}); err != nil {
						b.Fatal(err)
					}
				}
				rate(b)
			})
		}
	}
	b.Run("floor-copy/n=4e6", func(b *testing.B) {
		from := make([]byte, len(sink))
		for b.Loop() {
			copy(sink, from)
		}
		rate(b)
	})
	path := filepath.Join(b.TempDir(), "g.raw")
	b.Run("file/n=4e6", func(b *testing.B) {
		for b.Loop() {
			var set outfile.Set
			if _, err := Write(&set, path, outfile.Options{}, g, Options{}); err != nil {
				b.Fatal(err)
			}
			if err := set.Commit(); err != nil {
				b.Fatal(err)
			}
		}
		rate(b)
	})
	b.Run("floor-file/n=4e6", func(b *testing.B) { // the same bytes to the disk and renamed
		for b.Loop() {
			f, err := outfile.Create(path, outfile.Options{})
			if err != nil {
				b.Fatal(err)
			}
			if _, err := f.Write(sink); err != nil {
				b.Fatal(err)
			}
			if err := f.Commit(); err != nil {
				b.Fatal(err)
			}
		}
		rate(b)
	})
}

// into is memory to write to.
type into struct {
	b []byte
	n int
}

func (w *into) Write(p []byte) (int, error) {
	w.n += copy(w.b[w.n:], p)
	return len(p), nil
}

func BenchmarkRead(b *testing.B) {
	g, err := grid.New(grid.Spec{CellX: dec("1"), CellY: dec("1"), Cols: 2000, Rows: 2000})
	if err != nil {
		b.Fatal(err)
	}
	path := filepath.Join(b.TempDir(), "g.raw")
	save(b, path, g, Options{})
	rate := func(b *testing.B) {
		b.ReportMetric(float64(len(g.Values))*float64(b.N)/b.Elapsed().Seconds(), "nodes/s")
	}
	for _, workers := range []int{1, 2} {
		b.Run(fmt.Sprintf("workers=%d/n=4e6", workers), func(b *testing.B) {
			for b.Loop() {
				if _, err := Read(path, ReadOptions{Workers: workers}); err != nil {
					b.Fatal(err)
				}
			}
			rate(b)
		})
	}
	b.Run("floor-file/n=4e6", func(b *testing.B) { // the bytes alone
		for b.Loop() {
			if _, err := os.ReadFile(path); err != nil {
				b.Fatal(err)
			}
		}
		rate(b)
	})
}

func Example() {
	dir, err := os.MkdirTemp("", "raw")
	if err != nil {
		fmt.Println(err)
		return
	}
	defer os.RemoveAll(dir)
	g := &grid.Grid{
		Spec:   grid.Spec{CellX: decimal.FromInt(2), CellY: decimal.FromInt(2), Cols: 2, Rows: 1},
		Values: []float64{1.5, math.NaN()},
	}
	var set outfile.Set
	defer set.Abort()
	info, err := Write(&set, filepath.Join(dir, "surface.raw"), outfile.Options{}, g, Options{Type: Float32})
	if err == nil {
		err = set.Commit()
	}
	if err != nil {
		fmt.Println(err)
		return
	}
	back, err := Read(filepath.Join(dir, "surface.raw"), ReadOptions{})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(info.Bytes, back.Spec.Cols, back.Spec.Rows, back.Values)
	// Output: 8 2 1 [1.5 NaN]
}
