package tour

import (
	"context"
	"encoding/csv"
	"encoding/json"
	"math"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp"
	"isofacet/samples"
	"isofacet/triangulate"
)

// table reads a sample's rows as maps from column name to text.
func table(t *testing.T, text string) []map[string]string {
	t.Helper()
	all, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []map[string]string
	for _, r := range all[1:] {
		m := map[string]string{}
		for i, name := range all[0] {
			m[name] = r[i]
		}
		out = append(out, m)
	}
	return out
}

func sample(t *testing.T, name string) string {
	t.Helper()
	text, err := samples.FS.ReadFile(name)
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}

func number(t *testing.T, text string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

// At the check places of the gravel pit, the program's heights are the true
// ones within the noise of the shots, except on the stockpile, whose round
// face the triangles cut across by some decimetres.
func TestGravelPitChecksThroughTheProgram(t *testing.T) {
	cmd := exec.Command(filepath.Join(program(t), "isofacet"), "query", "sample:"+samples.GravelPitShots,
		"--exclude", "sample:"+samples.GravelPitDecisions, "--without", "code=BP",
		"--at", "sample:"+samples.GravelPitChecks, "--quiet")
	out, err := cmd.Output()
	if err != nil {
		t.Fatal(err)
	}
	rows := table(t, string(out))
	if len(rows) != 38 {
		t.Errorf("%d rows, want one for each of the 38 check places", len(rows))
	}
	for _, r := range rows {
		most := 0.04 // the largest noise of a shot
		if r["where"] == "stockpile" {
			most = 0.30
		}
		if d := number(t, r["surface_z"]) - number(t, r["elevation"]); math.Abs(d) > most {
			t.Errorf("check %s (%s): the surface is %.3f m off, want at most %.2f", r["check"], r["where"], d, most)
		}
		if r["place"] == "outside" {
			t.Errorf("check %s lies outside the surface", r["check"])
		}
	}
}

// The pit's volume through the library: the integral of old ground less
// surface where that is positive. Triangles round off some edges, and noise on
// the flats counts: 0.2 percent.
func TestGravelPitVolume(t *testing.T) {
	var truth struct {
		Pit    struct{ Volume float64 }
		Ground struct {
			Easting, Northing, Elevation float64
			DzDx                         float64 `json:"dz_dx"`
			DzDy                         float64 `json:"dz_dy"`
		} `json:"original_ground"`
		Blunders []struct{ Point string }
	}
	if err := json.Unmarshal([]byte(sample(t, samples.GravelPitAnswers)), &truth); err != nil {
		t.Fatal(err)
	}
	wrong := map[string]bool{}
	for _, b := range truth.Blunders {
		wrong[b.Point] = true
	}
	var places []orb.Point
	var depth []float64 // below the old ground
	for _, s := range table(t, sample(t, samples.GravelPitShots)) {
		if s["code"] == "BP" || wrong[s["point"]] {
			continue
		}
		e, n := number(t, s["easting"]), number(t, s["northing"])
		g := truth.Ground.Elevation + truth.Ground.DzDx*(e-truth.Ground.Easting) + truth.Ground.DzDy*(n-truth.Ground.Northing)
		places, depth = append(places, orb.Point{e, n}), append(depth, g-number(t, s["elevation"]))
	}
	mesh, err := triangulate.Delaunay(context.Background(), places, triangulate.Options{})
	if err != nil {
		t.Fatal(err)
	}
	surface, err := interp.FromInputs(mesh, depth)
	if err != nil {
		t.Fatal(err)
	}
	got := surface.VolumeAbove(0)
	if math.Abs(got/truth.Pit.Volume-1) > 0.002 {
		t.Errorf("volume %.0f, the pit holds %.0f", got, truth.Pit.Volume)
	}
	t.Logf("volume %.0f of true %.0f: %+.3f %%", got, truth.Pit.Volume, 100*(got/truth.Pit.Volume-1))
}

// At the wells of the ready heads the raster's surface has the wells' heads.
func TestLandfillHeadsThroughTheProgram(t *testing.T) {
	cmd := exec.Command(filepath.Join(program(t), "isofacet"), "query", "sample:"+samples.LandfillHeads,
		"--at", "-", "--decimals", "full", "--quiet")
	cmd.Stdin = strings.NewReader(sample(t, samples.LandfillHeads))
	out, err := cmd.Output()
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range table(t, string(out)) {
		if number(t, r["surface_z"]) != number(t, r["head"]) || r["place"] != "vertex" {
			t.Errorf("well %s has head %s, the surface %s at a place of kind %s", r["id"], r["head"], r["surface_z"], r["place"])
		}
	}
}
