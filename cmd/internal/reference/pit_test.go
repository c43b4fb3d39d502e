package reference

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/samples"
)

// The gravel pit of the samples. Its answers are those of the exact shape from which the
// shots were made, volumes and areas included; every height has noise of 12 mm
// (standard deviation), at most 40 mm.

type pitAnswers struct {
	Ground struct {
		Easting, Northing, Elevation float64
		DzDx                         float64 `json:"dz_dx"`
		DzDy                         float64 `json:"dz_dy"`
	} `json:"original_ground"`
	Pit   struct{ Volume float64 }
	Pile  struct{ Volume float64 } `json:"stockpile"`
	Areas map[string]float64       `json:"plan_areas"`
}

func pitTruth(t *testing.T) pitAnswers {
	t.Helper()
	text, err := samples.FS.ReadFile(samples.GravelPitAnswers)
	if err != nil {
		t.Fatal(err)
	}
	var a pitAnswers
	if err := json.Unmarshal(text, &a); err != nil {
		t.Fatal(err)
	}
	return a
}

// pitShots are the shots without posts and blunders, pitLines the lines with heights.
func pitShots() []string {
	return []string{"sample:" + samples.GravelPitShots, "--exclude", "sample:" + samples.GravelPitDecisions, "--without", "code=BP"}
}

var pitLines = []string{samples.GravelPitBreaklines, samples.GravelPitPond, samples.GravelPitStockpileToe}

// depths writes a sample's table with the depth below the original ground in the place
// of the height, in micrometres.
func (a *pitAnswers) depths(t *testing.T, name, height string, columns ...string) string {
	t.Helper()
	text, err := samples.FS.ReadFile(name)
	if err != nil {
		t.Fatal(err)
	}
	var b strings.Builder
	w := csv.NewWriter(&b)
	for k, r := range rows(t, name, string(text)) {
		fields := make([]string, len(columns))
		for i, c := range columns {
			fields[i] = r.get(t, c)
			if c == height {
				x, y := r.number(t, columns[i-2]), r.number(t, columns[i-1])
				g := a.Ground
				depth := g.Elevation + g.DzDx*(x-g.Easting) + g.DzDy*(y-g.Northing) - r.number(t, c)
				fields[i] = decimal(math.Round(depth*1e6) / 1e6)
			}
		}
		if k == 0 {
			w.Write(columns)
		}
		w.Write(fields)
	}
	w.Flush()
	return file(t, filepath.Base(name), b.String())
}

// A box round the pit, and one round the stockpile; no shot lies on either.
var (
	pitBox  = orb.Ring{{431260, 5621460}, {431490, 5621460}, {431490, 5621680}, {431260, 5621680}, {431260, 5621460}}
	pileBox = orb.Ring{{431515, 5621465}, {431575, 5621465}, {431575, 5621525}, {431515, 5621525}, {431515, 5621465}}
)

// The pit's volume is the integral of the depth below the original ground over a box
// round the pit. From the whole field book, whose shots stand close along crests and
// toes, it comes out within 0.2 % without lines and with them, and with them closer. From
// the spot heights on open ground alone it is off by more than 1 % and the faces are lost;
// the surveyed lines bring it within 0.2 % again, and the area of the steep faces within
// 1.5 %. The stockpile's round face is cut across by the triangles: 3 %.
func TestPitVolumes(t *testing.T) {
	truth := pitTruth(t)
	var lines []string
	for _, name := range pitLines {
		lines = append(lines, "--breaklines", truth.depths(t, name, "z", "line", "x", "y", "z"))
	}
	depth := truth.depths(t, samples.GravelPitShots, "elevation", "point", "easting", "northing", "elevation", "code")
	// The depth of a blunder is as wrong as its height: the decisions hold.
	all := []string{depth, "--exclude", "sample:" + samples.GravelPitDecisions, "--without", "code=BP"}
	spots := []string{depth, "--exclude", "sample:" + samples.GravelPitDecisions, "--only", "code=GR"}
	off := func(volume float64, ring orb.Ring, args ...[]string) float64 {
		t.Helper()
		f := inspect(t, append(slices.Concat(args...), "--boundary", rings(t, ring))...)
		return f.Surface.VolumeAboveZero/volume - 1
	}
	pit, pile := truth.Pit.Volume, -truth.Pile.Volume
	without, with := off(pit, pitBox, all), off(pit, pitBox, all, lines)
	bare, drawn := off(pit, pitBox, spots), off(pit, pitBox, spots, lines)
	t.Logf("volume of the pit: %+.3f %%, with lines %+.3f %%; from spot heights %+.3f %%, with lines %+.3f %%", 100*without, 100*with, 100*bare, 100*drawn)
	volume := compare(t, "relative error of the volume")
	volume.near("all shots", without, 0, 0.002)
	volume.near("all shots and lines", with, 0, 0.002)
	volume.near("spot heights and lines", drawn, 0, 0.002)
	volume.near("stockpile, all shots and lines", off(pile, pileBox, all, lines), 0, 0.03)
	if !(math.Abs(with) < math.Abs(without)) {
		t.Errorf("all shots: the volume is off by %v, with lines by %v: want less", without, with)
	}
	if !(math.Abs(bare) > 0.01 && math.Abs(drawn) < math.Abs(bare)/5) {
		t.Errorf("spot heights: the volume is off by %v, with lines by %v: want more than 1 %%, and a fifth of it", bare, drawn)
	}
}

// The faces of pit and ramp rise 1 on 1.5; nothing else in the box is as steep as 1 on
// 2 but the pond's bank. The area of the triangles steeper than that is the faces' area.
func TestPitFaces(t *testing.T) {
	truth := pitTruth(t)
	want := truth.Areas["lower face"] + truth.Areas["upper face"] + truth.Areas["ramp side"]
	var lines []string
	for _, name := range pitLines {
		lines = append(lines, "--breaklines", "sample:"+name)
	}
	box := rings(t, pitBox)
	steep := func(args ...[]string) float64 {
		t.Helper()
		folder := t.TempDir()
		v, tr := filepath.Join(folder, "v.csv"), filepath.Join(folder, "t.csv")
		isofacet(t, append(append([]string{"triangles", "--boundary", box}, slices.Concat(args...)...), "--decimals", "full", "--out", "vertices="+v, "--out", "triangles="+tr)...)
		at := map[string]orb.Point{}
		for _, r := range fileRows(t, v) {
			at[r.get(t, "vertex")] = r.point(t, "x", "y")
		}
		area := 0.0
		for _, r := range fileRows(t, tr) {
			if r.number(t, "slope") > 0.58 { // half way between 1/2 and 2/3
				area += cross(at[r.get(t, "vertex_1")], at[r.get(t, "vertex_2")], at[r.get(t, "vertex_3")]) / 2
			}
		}
		return area
	}
	spots := []string{"sample:" + samples.GravelPitShots, "--exclude", "sample:" + samples.GravelPitDecisions, "--only", "code=GR"}
	area := compare(t, "area of the faces")
	with, bare := steep(pitShots(), lines), steep(spots)
	area.part("all shots and lines", with, want, 0.015)
	area.part("spot heights and lines", steep(spots, lines), want, 0.015)
	if without := steep(pitShots()); !(math.Abs(with-want) < math.Abs(without-want)) {
		t.Errorf("faces of %v come out as %v, with lines as %v: want closer", want, without, with)
	}
	if bare > 0.9*want {
		t.Errorf("faces of %v come out as %v from spot heights alone: want a tenth of them lost", want, bare)
	}
}

// P5 and P6 on the clipped pit: with breaklines, boundary and pond, every vertex of an
// isoline lies on the kept surface, a line ends on its outline or closes, no two lines
// cross; and the bands' areas add up to the kept area within (1e-12 x area) + (perimeter,
// the pond's included, x ulp of the largest coordinate). The outline is the band that a
// level above everything leaves.
func TestPitLinesAndBands(t *testing.T) {
	args := append(pitShots(), "--breaklines", "sample:"+samples.GravelPitBreaklines,
		"--boundary", "sample:"+samples.GravelPitBoundary, "--voids", "sample:"+samples.GravelPitPond)
	f := inspectLimits(t, args...)
	rims := outline(t, args...)
	perimeter, largest := 0.0, 0.0
	for _, rim := range rims {
		for i := 1; i < len(rim); i++ {
			perimeter += length(rim[i-1], rim[i])
			largest = max(largest, math.Abs(rim[i][0]), math.Abs(rim[i][1]))
		}
	}
	ulp := math.Nextafter(largest, math.Inf(1)) - largest
	area := compare(t, "area of bands")
	for _, interval := range []string{"0.5", "2", "20"} {
		sum := 0.0
		for _, b := range bands(t, append(args, "--interval", interval)...) {
			sum += b.area
		}
		area.near("interval "+interval, sum, f.Surface.Area, 1e-12*f.Surface.Area+perimeter*ulp)
	}

	lines := isolines(t, append(args, "--interval", "0.5")...)
	ends, vertices := 0, 0
	for _, l := range lines {
		for _, p := range l.at {
			vertices++
			if inside, off := within(rims, p); !inside && off > 4*ulp {
				t.Errorf("a vertex of a line at %v lies %v outside, at %v", l.level, off, p)
			}
		}
		if l.closed {
			continue
		}
		for _, p := range []orb.Point{l.at[0], l.at[len(l.at)-1]} {
			ends++
			if _, off := within(rims, p); off > 4*ulp {
				t.Errorf("a line at %v ends %v from the outline, at %v", l.level, off, p)
			}
		}
	}
	if n := properCrossings(lines); n > 0 {
		t.Errorf("%d pairs of segments cross", n)
	}
	if len(lines) < 40 || vertices < 3000 || ends < 20 {
		t.Errorf("%d lines of %d vertices, %d ends: too few to show anything", len(lines), vertices, ends)
	}
	t.Logf("%d lines of %d vertices, %d ends on the outline", len(lines), vertices, ends)
}
