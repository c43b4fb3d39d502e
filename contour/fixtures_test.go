package contour

import (
	"context"
	"crypto/sha256"
	"encoding/csv"
	"encoding/hex"
	"encoding/json"
	"flag"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/triangulate/pointsets"
)

var update = flag.Bool("update", false, "write the fixtures of testdata/validity anew; then run its check.py")

// fixture is bands as they are kept in testdata/validity, where a general-purpose library looked at them.
type fixture struct {
	Points []orb.Point  `json:"points"`
	Z      []float64    `json:"z"`
	Levels []float64    `json:"levels"`
	Area   float64      `json:"area"` // of the surface, exactly accumulated
	Allow  float64      `json:"allow"`
	Bands  []bandOfFile `json:"bands"`
}

type bandOfFile struct {
	Band    int         `json:"band"`
	Polygon orb.Polygon `json:"polygon"`
}

// fixtureSamples are the surfaces of the fixtures, the kinds of surfaces_test.go with fixed numbers.
func fixtureSamples(t testing.TB) map[string]sample {
	r := pointsets.Uniform(4000, 2024)
	next := func(n int) int { // below n
		v := int(r[0][0] * float64(n))
		r = r[1:]
		return v
	}
	out := map[string]sample{}

	var s sample
	for i := range 100 {
		s.pts, s.z = append(s.pts, orb.Point{float64(i % 10), float64(i / 10)}), append(s.z, float64(next(4)))
	}
	s.levels = []float64{0.5, 1, 2, 2.25, 3}
	out["lattice"] = s

	s = sample{levels: []float64{0.05, 0.5, 1, 1.75, 2, 2.5, 3.01, 4, 4.5}}
	for range 6 {
		x0, y0 := float64(next(50000))/1000, float64(next(50000))/1000
		dx, dy := float64(next(6000)-3000)/1000, float64(next(6000)-3000)/1000
		for i := range 8 {
			s.pts, s.z = append(s.pts, orb.Point{430000 + x0 + float64(float64(i)*dx), 5600000 + y0 + float64(float64(i)*dy)}), append(s.z, float64(next(50))/10)
		}
	}
	out["needles"] = s

	s = sample{}
	for i := range 12 {
		x := 430000 + float64(i) + float64(next(500))/1000
		y := 5600000 + float64((x-430000)*0.37)
		gap := []float64{0.001, 0.0005, 1e-6, 1e-8}[next(4)]
		s.pts = append(s.pts, orb.Point{x, y}, orb.Point{x, y + gap})
		s.z = append(s.z, float64(next(20))/10, float64(20+next(20))/10)
	}
	for k := range 40 {
		s.levels = append(s.levels, float64(k+1)/10)
	}
	out["wall"] = s

	s = sample{levels: []float64{0.3, 0.5, 0.75, 0.76, 1, 1.5, 1.6, 1.7, 2, 2.25, 2.9}}
	for range 60 {
		s.pts = append(s.pts, orb.Point{430000 + float64(float64(next(12))*0x1p-34), 5600000 + float64(float64(next(12))*0x1p-30)})
		s.z = append(s.z, float64(next(12))/4)
	}
	out["crowd"] = s

	s = sample{levels: []float64{0.5, 1, 1 + 1e-15, 2, 2 + 1e-13, 3}}
	for range 60 {
		s.pts = append(s.pts, orb.Point{1000 + float64(next(20))/4, 2000 + float64(next(5000))/1000})
		s.z = append(s.z, float64(next(4))+[]float64{0, 1e-16, -1e-16, 1e-15, -1e-15, 1e-13, -1e-13}[next(7)])
	}
	out["near"] = s

	s = sample{pts: rotatedLattice(16), levels: []float64{95, 97, 98, 99, 100, 100.5, 101, 103}}
	s.z = pointsets.Heights(s.pts)
	out["turned"] = s

	in := table(t, dataset(t, "topo_points.csv")) // Davis 1973: reference, section 2
	s = sample{levels: []float64{700, 725, 750, 775, 800, 825, 850, 875, 900, 925, 950}, z: floats(t, in["z_ft"])}
	for i, x := range floats(t, in["x_50ft"]) {
		s.pts = append(s.pts, orb.Point{x, floats(t, in["y_50ft"])[i]})
	}
	out["topo"] = s
	for name := range out {
		out[name] = out[name].oneValue()
	}
	return out
}

// TestValidityFixtures: the bands of the fixtures are what a general-purpose library found valid. Which one, and what it
// said, stands in testdata/validity/verdicts.csv, written by check.py beside it.
func TestValidityFixtures(t *testing.T) {
	folder := filepath.Join("testdata", "validity")
	said := map[string][]string{}
	if !*update {
		f, err := os.Open(filepath.Join(folder, "verdicts.csv"))
		if err != nil {
			t.Fatal(err)
		}
		defer f.Close()
		rows, err := csv.NewReader(f).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		for _, row := range rows[1:] {
			said[row[0]] = row
		}
	}
	for name, in := range fixtureSamples(t) {
		t.Run(name, func(t *testing.T) {
			s := surfaceOf(t, in.pts, in.z, 0)
			levels := in.levelSet()
			bands, report, err := Bands(context.Background(), s, levels, Options{})
			if err != nil {
				t.Fatal(err)
			}
			if err := checkBands(s, levels, bands, report); err != nil {
				t.Fatal(err)
			}
			area, perimeter, largest := exactArea(s)
			out := fixture{in.pts, in.z, in.levels, area, float64(1e-12*area) + float64(perimeter*ulp(largest)), nil}
			for _, b := range bands {
				out.Bands = append(out.Bands, bandOfFile{bandNumber(b, levels), b.Polygon})
			}
			text, err := json.Marshal(out)
			if err != nil {
				t.Fatal(err)
			}
			path := filepath.Join(folder, name+".json")
			if *update {
				if err := os.WriteFile(path, append(text, '\n'), 0o644); err != nil {
					t.Fatal(err)
				}
				return
			}
			kept, err := os.ReadFile(path)
			if err != nil {
				t.Fatal(err)
			}
			if string(kept) != string(text)+"\n" {
				t.Fatalf("other bands than those in %s", path)
			}
			sum := sha256.Sum256(kept)
			row := said[name]
			if row == nil || row[1] != hex.EncodeToString(sum[:]) {
				t.Fatalf("verdicts.csv is not about this file: run check.py")
			}
			polygons, _ := strconv.Atoi(row[2])
			valid, _ := strconv.Atoi(row[3])
			if polygons != len(bands) || valid != polygons {
				t.Errorf("%d polygons, the library saw %d and found %d valid", len(bands), polygons, valid)
			}
			off, err := strconv.ParseFloat(row[4], 64)
			if err != nil || math.Abs(off) > out.Allow {
				t.Errorf("areas off by %v by the library, allowed %v", off, out.Allow)
			}
			if overlaps, err := strconv.ParseFloat(row[5], 64); err != nil || overlaps > out.Allow {
				t.Errorf("overlap of %v by the library, allowed %v", overlaps, out.Allow)
			}
		})
	}
}
