package lines

import (
	"context"
	"encoding/json"
	"io/fs"
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"
	"github.com/paulmach/orb/planar"

	"isofacet/io/readings"
	"isofacet/samples"
)

func sample(t testing.TB, name string) []byte {
	t.Helper()
	b, err := fs.ReadFile(samples.FS, name)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func sampleSource(t testing.TB, name string) []readings.Source {
	t.Helper()
	return []readings.Source{readings.FromBytes(name, sample(t, name))}
}

// pitAnswers is what the generator of the pit says is true.
type pitAnswers struct {
	Ground struct {
		X    float64 `json:"easting"`
		Y    float64 `json:"northing"`
		Z    float64 `json:"elevation"`
		DzDx float64 `json:"dz_dx"`
		DzDy float64 `json:"dz_dy"`
	} `json:"original_ground"`
	Noise struct {
		Largest float64 `json:"largest"`
	} `json:"height_noise"`
	Pit struct {
		Water float64 `json:"water_elevation"`
	} `json:"pit"`
	Pile struct {
		Area float64 `json:"plan_area"`
	} `json:"stockpile"`
	Areas map[string]float64 `json:"plan_areas"`
}

// The gravel pit's toes, crests and roads come out as the lines that were surveyed.
func TestPitBreaklines(t *testing.T) {
	var truth pitAnswers
	if err := json.Unmarshal(sample(t, samples.GravelPitAnswers), &truth); err != nil {
		t.Fatal(err)
	}
	s, err := Breaklines(context.Background(), sampleSource(t, samples.GravelPitBreaklines), Options{})
	if err != nil {
		t.Fatal(err)
	}
	checkSet(t, s)
	shots, err := readings.Read(context.Background(), sampleSource(t, samples.GravelPitShots), readings.Options{})
	if err != nil {
		t.Fatal(err)
	}
	codeAt, heightAt := map[orb.Point]string{}, map[orb.Point]float64{}
	for i, p := range shots.Points {
		codeAt[p], heightAt[p] = shots.Text(readings.Code, i), shots.Z[i]
	}
	rows := strings.Count(string(sample(t, samples.GravelPitBreaklines)), "\n") - 1
	if s.Vertices != rows || s.Repeated != 0 || len(s.Warnings) != 0 {
		t.Errorf("%d vertices of %d rows, %d repeated, warnings %v", s.Vertices, rows, s.Repeated, s.Warnings)
	}
	kinds := map[string]string{"crest": "CR", "toe": "TOE", "haul": "HR"}
	seen := map[string]int{}
	for i := range s.Lines {
		l := &s.Lines[i]
		kind, _, _ := strings.Cut(l.Name, "-")
		seen[kind]++
		for k, p := range l.Points {
			// Its vertices are shots, so its places and heights are theirs, to the last bit.
			if code := codeAt[p]; code == "" || heightAt[p] != l.Z[k] {
				t.Fatalf("%s: no shot at %s with that height", l.Name, l.At(k))
			} else if want, ok := kinds[kind]; ok && code != want && code != "CR" && code != "TOE" {
				t.Errorf("%s: code %s", l.At(k), code)
			}
			if k > 0 && distance(l.Points[k-1], p) > 5.001 {
				t.Errorf("%s: %v from the vertex before, the crew walked at most 5 m", l.At(k), distance(l.Points[k-1], p))
			}
			// The road outside the pit lies on the untouched ground.
			if strings.HasPrefix(l.Name, "haul-road-3") || strings.HasPrefix(l.Name, "haul-road-4") {
				g := truth.Ground
				if z := g.Z + g.DzDx*(p[0]-g.X) + g.DzDy*(p[1]-g.Y); math.Abs(z-l.Z[k]) > truth.Noise.Largest+0.001 {
					t.Errorf("%s: height %v on ground of %v", l.At(k), l.Z[k], z)
				}
			}
		}
	}
	if seen["crest"] == 0 || seen["toe"] == 0 || seen["haul"] != 4 {
		t.Errorf("lines by kind: %v", seen)
	}
}

// The pit's boundary, pond and the toe of its stockpile are rings, with the areas that
// the generator knows.
func TestPitRings(t *testing.T) {
	var truth pitAnswers
	if err := json.Unmarshal(sample(t, samples.GravelPitAnswers), &truth); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		file           string
		corners        int
		heights        bool
		area, accuracy float64 // 0: not known
	}{
		{samples.GravelPitBoundary, 15, false, 0, 0},
		// Shots are rounded to millimetres along a rim of some 54 m.
		{samples.GravelPitPond, 16, true, truth.Areas["water"], 0.06},
		// A polygon of 24 corners in an ellipse has 24 sin(15°) / 2 pi = 0.98862 of its area if they are spread evenly; these nearly are.
		{samples.GravelPitStockpileToe, 24, true, 0.98862 * truth.Pile.Area, 0.01 * truth.Pile.Area},
	} {
		s, err := Rings(context.Background(), sampleSource(t, c.file), Options{})
		if err != nil {
			t.Fatal(err)
		}
		checkSet(t, s)
		if len(s.Lines) != 1 || len(s.Warnings) != 0 {
			t.Fatalf("%s: %d lines, warnings %v", c.file, len(s.Lines), s.Warnings)
		}
		l := &s.Lines[0]
		if len(l.Points) != c.corners+1 || !l.Closed || (l.Z != nil) != c.heights {
			t.Errorf("%s: %d vertices, closed %v, heights %v", c.file, len(l.Points), l.Closed, l.Z != nil)
		}
		if area := math.Abs(planar.Area(s.Rings()[0])); c.area > 0 && math.Abs(area-c.area) > c.accuracy {
			t.Errorf("%s: area %v, want %v within %v", c.file, area, c.area, c.accuracy)
		}
		if c.file == samples.GravelPitPond {
			for k, z := range l.Z {
				if math.Abs(z-truth.Pit.Water) > truth.Noise.Largest+0.001 {
					t.Errorf("%s: height %v of water at %v", l.At(k), z, truth.Pit.Water)
				}
			}
		}
	}
	// Without heights, a boundary is no breakline.
	if _, err := Breaklines(context.Background(), sampleSource(t, samples.GravelPitBoundary), Options{}); err == nil || !strings.Contains(err.Error(), "has no heights") {
		t.Errorf("the boundary as a breakline: %v", err)
	}
}

// The codes of the field book, counted, and what a table does with them.
func TestPitCodes(t *testing.T) {
	table := codeTable(t, "ground = ['GR', 'SP', 'CR', 'TOE', 'HR', 'PE']\nleave-out = ['BP']\n")
	codes := NewCodes(table)
	set, err := readings.Read(context.Background(), sampleSource(t, samples.GravelPitShots), readings.Options{Select: readings.Selection{Code: codes.Choose}})
	if err != nil {
		t.Fatal(err)
	}
	rows := map[string]int{}
	for line := range strings.Lines(string(sample(t, samples.GravelPitShots))) {
		rows[strings.TrimSpace(line[strings.LastIndexByte(line, ',')+1:])]++
	}
	var left int
	for _, h := range codes.Histogram() {
		if h.Readings != rows[h.Code] || h.Use == Unknown {
			t.Errorf("%+v, but the book has %d", h, rows[h.Code])
		}
		if h.Use == LeaveOut {
			left += h.Readings
		}
		delete(rows, h.Code)
	}
	delete(rows, "code")
	if err := codes.Unknown(); err != nil || len(rows) != 0 {
		t.Errorf("%v; not counted: %v", err, rows)
	}
	if set.Counts.LeftOut != left || left != 15 || slices.ContainsFunc(set.LeftOut, func(l readings.LeftOut) bool { return !strings.HasPrefix(l.ID, "P") }) {
		t.Errorf("%d left out of %d posts", set.Counts.LeftOut, left)
	}
	small := NewCodes(codeTable(t, "ground = ['GR', 'SP']\nline = ['CR', 'TOE', 'HR']\n"))
	if _, err := readings.Read(context.Background(), sampleSource(t, samples.GravelPitShots), readings.Options{Select: readings.Selection{Code: small.Choose}}); err != nil {
		t.Fatal(err)
	}
	want := "codes.toml: code PE (16 points), BP (15 points) unknown; known: CR, GR, HR, SP, TOE"
	if err := small.Unknown(); err == nil || err.Error() != want {
		t.Errorf("got  %v\nwant %s", err, want)
	}
}
