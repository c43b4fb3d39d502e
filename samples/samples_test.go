package samples

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"io/fs"
	"math"
	"slices"
	"strconv"
	"strings"
	"testing"

	"isofacet/samples/internal/gen"
)

// The files in the repository are the generator's, byte for byte, and no
// other file lies beside them.
func TestFilesAreCurrent(t *testing.T) {
	made := gen.Files()
	err := fs.WalkDir(FS, ".", func(name string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		text, err := fs.ReadFile(FS, name)
		if want, ok := made[name]; !ok {
			t.Errorf("%s is not the generator's", name)
		} else if !bytes.Equal(text, want) {
			t.Errorf("%s is not current: run go generate ./samples", name)
		}
		delete(made, name)
		return err
	})
	if err != nil {
		t.Error(err)
	}
	for name := range made {
		t.Errorf("%s is missing: run go generate ./samples", name)
	}
}

func TestFilesAreListed(t *testing.T) {
	var listed []string
	for _, f := range Files {
		listed = append(listed, f.Name)
		if f.About == "" {
			t.Errorf("%s: nothing is said about it", f.Name)
		}
	}
	slices.Sort(listed)
	var have []string
	for name := range gen.Files() {
		have = append(have, name)
	}
	slices.Sort(have)
	if !slices.Equal(listed, have) {
		t.Errorf("listed %q, want %q", listed, have)
	}
}

// rows reads a table as maps from column name to text.
func rows(t *testing.T, name string) []map[string]string {
	t.Helper()
	f, err := FS.Open(name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	all, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []map[string]string
	for _, r := range all[1:] {
		m := map[string]string{}
		for i, h := range all[0] {
			m[h] = r[i]
		}
		out = append(out, m)
	}
	return out
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

func answers(t *testing.T, name string, v any) {
	t.Helper()
	text, err := fs.ReadFile(FS, name)
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(text, v); err != nil {
		t.Fatal(err)
	}
}

type pitAnswers struct {
	Readings map[string]int
	Twice    [][2]string `json:"stored_twice"`
	Blunders []struct {
		Point              string
		Recorded, Measured float64
		Cause              string
	}
	Noise  struct{ Largest float64 } `json:"height_noise"`
	Ground struct {
		Easting, Northing, Elevation float64
		DzDx                         float64 `json:"dz_dx"`
		DzDy                         float64 `json:"dz_dy"`
	} `json:"original_ground"`
	Pit struct {
		Volume   float64
		PlanArea float64 `json:"plan_area"`
		WaterZ   float64 `json:"water_elevation"`
		BenchZ   float64 `json:"bench_elevation"`
	}
	Pile struct {
		Easting, Northing, Volume float64
		PlanArea                  float64 `json:"plan_area"`
		TopZ                      float64 `json:"top_elevation"`
	} `json:"stockpile"`
	Areas map[string]float64 `json:"plan_areas"`
}

func TestGravelPitCountsAndSpoiltShots(t *testing.T) {
	var a pitAnswers
	answers(t, GravelPitAnswers, &a)
	shots := rows(t, GravelPitShots)
	if len(shots) != a.Readings["rows"] || len(shots) < 1400 || len(shots) > 1600 {
		t.Errorf("%d rows, answers say %d, the scenario asks for about 1500", len(shots), a.Readings["rows"])
	}
	byName, at, codes := map[string]map[string]string{}, map[string][]string{}, map[string]int{}
	for _, s := range shots {
		if byName[s["point"]] != nil {
			t.Errorf("point %s occurs twice", s["point"])
		}
		byName[s["point"]] = s
		where := s["easting"] + " " + s["northing"]
		at[where] = append(at[where], s["point"])
		codes[s["code"]]++
		for _, c := range []string{"northing", "easting", "elevation"} {
			if i := strings.IndexByte(s[c], '.'); i < 0 || len(s[c])-i != 4 {
				t.Errorf("point %s: %s %q is not in millimetres", s["point"], c, s[c])
			}
		}
		if e, n := number(t, s["easting"]), number(t, s["northing"]); e < 431_190 || e > 431_630 || n < 5_621_390 || n > 5_621_750 {
			t.Errorf("point %s lies at %v, %v, outside the site", s["point"], e, n)
		}
	}
	for _, c := range []string{"GR", "CR", "TOE", "HR", "PE", "SP", "BP"} {
		if codes[c] == 0 {
			t.Errorf("no shot has code %s", c)
		}
	}
	if len(codes) != 7 || codes["BP"] != a.Readings["boundary_posts"] || len(at) != a.Readings["distinct_places"] {
		t.Errorf("codes %v at %d places, answers say %v", codes, len(at), a.Readings)
	}

	twice := 0
	for where, names := range at {
		if len(names) == 1 {
			continue
		}
		twice++
		if len(names) != 2 || !slices.Contains(a.Twice, [2]string{names[0], names[1]}) {
			t.Errorf("%s is shared by %v, answers say %v", where, names, a.Twice)
		}
		if byName[names[0]]["elevation"] != byName[names[1]]["elevation"] {
			t.Errorf("%v differ in elevation", names)
		}
	}
	if twice != 3 || len(a.Blunders) != 2 {
		t.Errorf("%d places with two shots, %d blunders, want 3 and 2", twice, len(a.Blunders))
	}

	decided := map[string]string{}
	for _, d := range rows(t, GravelPitDecisions) {
		if byName[d["id"]] == nil {
			t.Errorf("decision about %s, which is no shot", d["id"])
		}
		decided[d["id"]] = d["decision"] + ": " + d["reason"]
	}
	for _, b := range a.Blunders {
		if got := number(t, byName[b.Point]["elevation"]); got != b.Recorded || b.Recorded == b.Measured {
			t.Errorf("blunder %s is recorded as %v, answers say %v instead of %v", b.Point, got, b.Recorded, b.Measured)
		}
		if decided[b.Point] != "leave out: "+b.Cause {
			t.Errorf("decision about %s: %q", b.Point, decided[b.Point])
		}
	}
}

// Heights of shots on untouched ground, bench level, pond and pile follow
// from the answers by formulas written anew here.
func TestGravelPitHeightsFollowTheAnswers(t *testing.T) {
	var a pitAnswers
	answers(t, GravelPitAnswers, &a)
	plane := func(e, n float64) float64 {
		return a.Ground.Elevation + a.Ground.DzDx*(e-a.Ground.Easting) + a.Ground.DzDy*(n-a.Ground.Northing)
	}
	near := a.Noise.Largest + 0.001 // and the rounding of place and height
	posts, ponds, peaks := 0, 0, 0
	for _, s := range rows(t, GravelPitShots) {
		e, n, z := number(t, s["easting"]), number(t, s["northing"]), number(t, s["elevation"])
		switch {
		case s["code"] == "BP":
			posts++
			if d := z - plane(e, n) - 1.1; math.Abs(d) > near {
				t.Errorf("post %s stands %.3f m off its height over the ground", s["point"], d)
			}
		case s["code"] == "PE":
			ponds++
			if d := z - a.Pit.WaterZ; math.Abs(d) > near {
				t.Errorf("pond edge %s is %.3f m off the water", s["point"], d)
			}
		case s["code"] == "SP":
			// On the cone, or on its level top.
			r := math.Hypot(e-a.Pile.Easting, n-a.Pile.Northing)
			want := min(a.Pile.TopZ, plane(a.Pile.Easting, a.Pile.Northing)+12-r/1.5)
			if d := z - want; math.Abs(d) > near {
				t.Errorf("pile shot %s is %.3f m off the cone", s["point"], d)
			}
			if want > a.Pile.TopZ-0.01 {
				peaks++
			}
		case z > plane(e, n)+near:
			t.Errorf("shot %s with code %s lies %.3f m above the untouched ground", s["point"], s["code"], z-plane(e, n))
		}
	}
	if posts != 15 || ponds < 10 || peaks < 9 {
		t.Errorf("%d posts, %d pond edges, %d shots on the pile's top", posts, ponds, peaks)
	}
	for _, c := range rows(t, GravelPitChecks) {
		e, n, z := number(t, c["easting"]), number(t, c["northing"]), number(t, c["elevation"])
		var want float64
		switch c["where"] {
		case "ground":
			want = plane(e, n)
		case "bench":
			want = a.Pit.BenchZ
		case "stockpile":
			want = plane(a.Pile.Easting, a.Pile.Northing) + 12 - math.Hypot(e-a.Pile.Easting, n-a.Pile.Northing)/1.5
		default:
			if z < a.Pit.WaterZ || z > plane(e, n) {
				t.Errorf("check %s (%s) is at %v, not between water and old ground", c["check"], c["where"], z)
			}
			continue
		}
		if math.Abs(z-want) > 0.0011 {
			t.Errorf("check %s (%s) is at %v, want %.4f", c["check"], c["where"], z, want)
		}
	}
}

// The vertices of the lines are shots, rings are closed, and the shots of a
// breakline carry its code.
func TestGravelPitLinesAreShots(t *testing.T) {
	shot := map[string]map[string]string{}
	for _, s := range rows(t, GravelPitShots) {
		shot[s["easting"]+" "+s["northing"]] = s
	}
	for _, name := range []string{GravelPitBreaklines, GravelPitBoundary, GravelPitPond, GravelPitStockpileToe} {
		var lines []string
		parts := map[string][]map[string]string{}
		for _, v := range rows(t, name) {
			if parts[v["line"]] == nil {
				lines = append(lines, v["line"])
			}
			parts[v["line"]] = append(parts[v["line"]], v)
			s := shot[v["x"]+" "+v["y"]]
			switch {
			case s == nil:
				t.Errorf("%s: line %s has a vertex at %s %s where no shot is", name, v["line"], v["x"], v["y"])
			case name == GravelPitBoundary && (v["z"] != "" || s["code"] != "BP"):
				t.Errorf("%s: vertex %v, shot %v", name, v, s)
			case name != GravelPitBoundary && v["z"] != s["elevation"]:
				t.Errorf("%s: line %s has height %s where shot %s has %s", name, v["line"], v["z"], s["point"], s["elevation"])
			}
		}
		for _, l := range lines {
			vs := parts[l]
			if len(vs) < 2 {
				t.Errorf("%s: line %s has one vertex", name, l)
			}
			first, last := vs[0], vs[len(vs)-1]
			closed := first["x"] == last["x"] && first["y"] == last["y"]
			if name != GravelPitBreaklines && (!closed || len(lines) != 1) {
				t.Errorf("%s: want one closed line, have %q, closed %v", name, lines, closed)
			}
			for i := 1; i < len(vs); i++ {
				if vs[i]["x"] == vs[i-1]["x"] && vs[i]["y"] == vs[i-1]["y"] {
					t.Errorf("%s: line %s stands still at %s %s", name, l, vs[i]["x"], vs[i]["y"])
				}
			}
		}
	}
}
