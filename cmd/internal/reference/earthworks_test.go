package reference

import (
	"encoding/json"
	"fmt"
	"math"
	"math/rand/v2"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/interp/rule"
	"isofacet/samples"
)

// earth is what volume says of one region.
type earth struct {
	Region    string
	Cut, Fill struct {
		Volume, Area  float64
		SlopeAreaFrom float64 `json:"slope_area_from"`
		SlopeAreaTo   float64 `json:"slope_area_to"`
	}
	Net     float64
	Covered float64 `json:"area_covered_by_both"`
	Area    float64 `json:"area_of_region"`
	Share   float64 `json:"share_of_region"`
}

// volume runs isofacet volume and returns its regions.
func volume(t *testing.T, args ...string) []earth {
	t.Helper()
	var f struct{ Regions []earth }
	text := isofacet(t, append([]string{"volume", "--format", "json", "--decimals", "full"}, args...)...)
	if err := json.Unmarshal([]byte(text), &f); err != nil {
		t.Fatalf("volume %s: %v in\n%s", strings.Join(args, " "), err, text)
	}
	return f.Regions
}

// TestVolumeOfSolids measures solids with closed formulas over level 0 and over
// readings at height 0; the tent by its ridge as a breakline. Source: elementary
// geometry.
func TestVolumeOfSolids(t *testing.T) {
	size, slope := compare(t, "volume"), compare(t, "area on the slope")
	for _, r := range table(t, "volumes/solids.csv") {
		solid := r.get(t, "solid")
		points := figures(t, "volumes/solid_"+solid+"_points.csv")
		args := []string{"--from", "level=0", "--to", points}
		if solid == "roof_ridge" {
			line := "line,x,y,z\n"
			all := table(t, "volumes/solid_roof_ridge_points.csv")
			for _, b := range table(t, "volumes/solid_roof_ridge_breaklines.csv") {
				p := only(t, all, "id", b.get(t, "vertex_point_id"))
				line += b.get(t, "line") + "," + p.get(t, "x") + "," + p.get(t, "y") + "," + p.get(t, "z") + "\n"
			}
			args = append(args, "--breaklines", file(t, "ridge.csv", line))
		}
		v := volume(t, args...)[0]
		size.part(solid, v.Fill.Volume, r.number(t, "exact_volume_to_z0"), 1e-9)
		slope.part(solid, v.Fill.SlopeAreaTo, r.number(t, "surface_area_3d"), 1e-9)
		same(t, solid+": cut", v.Cut.Volume, 0)
		// The other way round it is all cut.
		args[1], args[3] = args[3], args[1]
		back := volume(t, args...)[0]
		same(t, solid+": there and back", back.Cut.Volume, v.Fill.Volume)
		same(t, solid+": net", back.Net, -v.Net)
	}
}

// TestVolumeOfVectors holds the program to small cases of elementary geometry: pyramids
// over and above levels, planes against levels, a uniform drop, a case that is not
// symmetric.
func TestVolumeOfVectors(t *testing.T) {
	pyramid := file(t, "pyramid.csv", "x,y,z\n0,0,0\n20,0,0\n20,20,0\n0,20,0\n10,10,6\n")
	size := compare(t, "volume")
	size.part("pyramid 20 x 20, 6 high", volume(t, "--from", "level=0", "--to", pyramid)[0].Fill.Volume, 800, 1e-15)
	size.part("above level 3", volume(t, "--from", "level=3", "--to", pyramid)[0].Fill.Volume, 100, 1e-15)
	// A pyramid of 100 m2, 30 m high: by average end area 1,500.
	tall := file(t, "tall.csv", "x,y,z\n0,0,0\n10,0,0\n10,10,0\n0,10,0\n5,5,30\n")
	size.part("pyramid 10 x 10, 30 high", volume(t, "--from", "level=0", "--to", tall)[0].Fill.Volume, 1000, 1e-15)
	average, err := rule.AverageEndArea([]float64{0, 30}, []float64{100, 0})
	if err != nil || average != 1500 {
		t.Errorf("average end area %v, %v", average, err)
	}
	// z = 0.1 x on x in [-50, 50], width 50: from the slope to level 0, what is above is
	// taken away, what is below brought in.
	slope := file(t, "slope.csv", "x,y,z\n-50,0,-5\n50,0,5\n-50,50,-5\n50,50,5\n")
	v := volume(t, "--from", slope, "--to", "level=0")[0]
	size.part("cut", v.Cut.Volume, 6250, 1e-15)
	size.part("fill", v.Fill.Volume, 6250, 1e-15)
	// The same from x = -20 to 50: 6,250 above 0 and 1,000 below it.
	part := file(t, "part.csv", "x,y,z\n-20,0,-2\n50,0,5\n-20,50,-2\n50,50,5\n")
	v = volume(t, "--from", part, "--to", "level=0")[0]
	size.part("asymmetric, cut", v.Cut.Volume, 6250, 1e-15)
	size.part("asymmetric, fill", v.Fill.Volume, 1000, 1e-15)
	size.part("asymmetric, net", v.Net, -5250, 1e-15)
	v = volume(t, "--from", "level=0", "--to", part)[0]
	size.part("asymmetric, from level 0: fill", v.Fill.Volume, 6250, 1e-15)
	size.part("asymmetric, from level 0: cut", v.Cut.Volume, 1000, 1e-15)
	// Two rounds that differ by -0.30 everywhere.
	var pts []orb.Point
	r := rand.New(rand.NewPCG(14, 30))
	for range 40 {
		pts = append(pts, orb.Point{math.Round(r.Float64()*1000) / 10, math.Round(r.Float64()*1000) / 10})
	}
	head := func(x, y float64) float64 { return math.Round((100+0.01*x-0.02*y)*100) / 100 }
	first := readings(t, pts, head)
	second := readings(t, pts, func(x, y float64) float64 { return head(x, y) - 0.3 })
	v = volume(t, "--from", first, "--to", second)[0]
	size.part("a drop of 0.30", v.Cut.Volume, 0.3*v.Covered, 1e-12)
	same(t, "no rise", v.Fill.Volume, 0)
	raster := isofacet(t, "volume", "--from", first, "--to", second, "--cell", "10", "--out", "raster=-", "--decimals", "3")
	nodes := 0
	for k, line := range strings.Split(strings.TrimSpace(raster), "\n") {
		for i, f := range strings.Split(line, ",") {
			if k > 0 && i > 0 && f != "" {
				nodes++
				same(t, "change at a node", f, "-0.300")
			}
		}
	}
	if nodes < 50 {
		t.Errorf("%d nodes of the change have a value", nodes)
	}
}

// TestVolumeOfPlanes compares planes against levels over rectangles. Source: computed
// for this project, exact.
func TestVolumeOfPlanes(t *testing.T) {
	all := table(t, "volumes/plane_over_rectangle.csv")
	same(t, "cases", len(all), 3)
	size, area := compare(t, "volume"), compare(t, "area")
	for _, r := range all {
		w, h := r.number(t, "width_x"), r.number(t, "height_y")
		z := func(x, y float64) float64 {
			return r.number(t, "z_at_origin") + r.number(t, "dz_dx")*x + r.number(t, "dz_dy")*y
		}
		plane := readings(t, []orb.Point{{0, 0}, {w, 0}, {w, h}, {0, h}}, z)
		v := volume(t, "--from", plane, "--to", "level="+r.get(t, "level"))[0]
		size.part(r.name+": cut", v.Cut.Volume, r.number(t, "volume_above_level(cut)"), 1e-9)
		size.part(r.name+": fill", v.Fill.Volume, r.number(t, "volume_below_level(fill)"), 1e-9)
		size.near(r.name+": net", v.Net, -r.number(t, "net"), 1e-9*(v.Cut.Volume+v.Fill.Volume))
		area.part(r.name, v.Cut.Area, r.number(t, "plan_area_above"), 1e-9)
	}
}

// TestVolumeOfCurvedSurfaces compares what lies between level 0 and curved surfaces on
// lattices with the triangulated column of the tie rule's diagonals, and between two of
// them. Source: computed for this project.
func TestVolumeOfCurvedSurfaces(t *testing.T) {
	size := compare(t, "volume")
	for _, r := range table(t, "volumes/curved_surfaces.csv") {
		f, n := curved[r.get(t, "surface")], r.count(t, "n_per_side")
		step := 1 / float64(n-1)
		var pts []orb.Point
		for i := range n {
			for j := range n {
				pts = append(pts, orb.Point{float64(i) * step, float64(j) * step})
			}
		}
		size.part(r.name, volume(t, "--from", "level=0", "--to", readings(t, pts, f))[0].Fill.Volume, r.number(t, "triangulated_diagonal_NW_SE"), 1e-9)
	}
}

// TestSpotHeights measures a pad and nine spot heights: by the four-corner rule as in
// the published answers, and by the program, whose exact volume is that of one choice
// of diagonals. Sources: engineering examination practice (199 yd3), and a
// question-and-answer page (first cell 12.775 m deep); choices computed for this project.
func TestSpotHeights(t *testing.T) {
	pad := file(t, "pad.csv", "x,y,z\n0,0,87.6\n50,0,87.6\n50,50,87.6\n0,50,88.6\n")
	got := volume(t, "--from", pad, "--to", "level=90", "--xy-unit", "ft-int", "--z-unit", "ft-int", "--volume-unit", "yd3")[0].Fill.Volume
	if math.Abs(got-191.358) > 5e-4 && math.Abs(got-206.790) > 5e-4 {
		t.Errorf("pad: %v yd3, want 191.358 or 206.790", got)
	}
	four, err := rule.FourCorners([][]float64{{1.4, 2.4}, {2.4, 2.4}}, 2500)
	if err != nil || math.Abs(four/27-199.074074) > 1e-6 {
		t.Errorf("pad by four corners: %v yd3, %v", four/27, err)
	}
	heights := [][]float64{{110.24, 112.15, 114.21}, {112.96, 115.75, 116.32}, {116.98, 120.03, 115.34}}
	var pts []orb.Point
	for i := range 9 {
		pts = append(pts, orb.Point{float64(i%3) * 10, 20 - float64(i/3)*10})
	}
	spots := readings(t, pts, func(x, y float64) float64 { return heights[int(20-y)/10][int(x)/10] })
	got = volume(t, "--from", spots, "--to", "level=100")[0].Cut.Volume
	// Every cell by either diagonal.
	near := math.Inf(1)
	for choice := range 16 {
		sum := 0.0
		for cell := range 4 {
			i, j := cell/2, cell%2
			a, b, c, d := heights[i][j]-100, heights[i][j+1]-100, heights[i+1][j+1]-100, heights[i+1][j]-100
			if choice>>cell&1 == 0 {
				sum += 100 * (2*a + 2*c + b + d) / 6
			} else {
				sum += 100 * (a + c + 2*b + 2*d) / 6
			}
		}
		near = min(near, math.Abs(sum-got))
	}
	if near > 1e-9 || got < 6001.5-1e-9 || got > 6133+1e-9 {
		t.Errorf("spot heights: %v, %v from the nearest choice of diagonals", got, near)
	}
}

// TestVolumeOfIsolines compares plan areas and volumes above and below every level of
// the open datasets. Source: computed for this project by rational arithmetic. Of camg
// one quadrilateral has two triangulations: 1e-5.
func TestVolumeOfIsolines(t *testing.T) {
	each(t, func(t *testing.T, d dataset) {
		tolerance := 1e-9
		if d.name == "camg" {
			tolerance = 1e-5
		}
		area, size := compare(t, "area"), compare(t, "volume")
		for _, r := range table(t, "datasets/"+d.name+"_isolines.csv") {
			points := d.readings(t)
			v := volume(t, append([]string{"--to", points[0], "--from", "level=" + r.get(t, "level")}, points[1:]...)...)[0]
			all := r.number(t, "volume_above_level_unit3") + r.number(t, "volume_below_level_unit3")
			area.part(r.name+": above", v.Fill.Area, r.number(t, "plan_area_above_unit2"), tolerance)
			area.part(r.name+": below", v.Cut.Area, r.number(t, "plan_area_below_unit2"), tolerance)
			size.near(r.name+": above", v.Fill.Volume, r.number(t, "volume_above_level_unit3"), tolerance*all)
			size.near(r.name+": below", v.Cut.Volume, r.number(t, "volume_below_level_unit3"), tolerance*all)
		}
	})
}

// TestVolumeInside compares volumes within polygons, one by one. Source: computed with
// Shapely for this project.
func TestVolumeInside(t *testing.T) {
	want := map[string]string{}
	for _, r := range table(t, "datasets/clip_checks.csv") {
		want[r.get(t, "quantity")] = r.get(t, "value")
	}
	area, size := compare(t, "area"), compare(t, "volume")
	polygons := map[string]orb.Ring{}
	for _, r := range table(t, "datasets/camg_polygons.csv") {
		name := r.get(t, "polygon")
		polygons[name] = append(polygons[name], r.point(t, "east_m", "north_m"))
	}
	text := "line,x,y\n"
	for name, ring := range polygons {
		if ring[0] != ring[len(ring)-1] {
			ring = append(ring, ring[0])
		}
		for _, p := range ring {
			text += fmt.Sprintf("%s,%s,%s\n", name, decimal(p[0]), decimal(p[1]))
		}
	}
	inside := file(t, "polygons.csv", text)
	for _, d := range datasets {
		if d.name != "camg" {
			continue
		}
		points := d.readings(t)
		all := volume(t, append([]string{"--to", points[0], "--from", "level=0", "--inside", inside}, points[1:]...)...)
		same(t, "polygons", len(all), 4)
		for _, v := range all {
			get := func(quantity string) float64 { return number(t, quantity, want["camg "+quantity]) }
			area.part(v.Region, v.Area, get(v.Region+" polygon area_m2"), 1e-8)
			area.part(v.Region+", covered", v.Covered, get("TIN clipped to "+v.Region+": plan area_m2"), 1e-8)
			size.part(v.Region, v.Net, get("TIN clipped to "+v.Region+": volume to z=0 m3"), 1e-8)
		}
	}
}

// A surface raised by a binary fraction over an irregular boundary: the fraction times
// the area, to 1e-12, and no cut anywhere.
func TestRaisedOverBoundary(t *testing.T) {
	size := compare(t, "volume")
	for _, d := range datasets[:2] {
		low, high := "id,x,y,z\n", "id,x,y,z\n"
		b := orb.Bound{Min: orb.Point{math.Inf(1), math.Inf(1)}, Max: orb.Point{math.Inf(-1), math.Inf(-1)}}
		for _, r := range table(t, "datasets/"+d.name+"_points.csv") {
			columns := []string{}
			for c := range r.text {
				columns = append(columns, c)
			}
			pick := func(prefix string) float64 {
				for _, c := range columns {
					if strings.HasPrefix(c, prefix) {
						return r.number(t, c)
					}
				}
				t.Fatalf("%s: no column %s", r.name, prefix)
				return 0
			}
			x, y, z := pick("x"), pick("y"), math.Round(pick("z"))
			b = b.Extend(orb.Point{x, y})
			low += fmt.Sprintf("%s,%s,%s,%s\n", "a", decimal(x), decimal(y), decimal(z))
			high += fmt.Sprintf("%s,%s,%s,%s\n", "a", decimal(x), decimal(y), decimal(z+0.375))
		}
		at := func(u, v float64) orb.Point {
			return orb.Point{b.Min[0] + u*(b.Max[0]-b.Min[0]), b.Min[1] + v*(b.Max[1]-b.Min[1])}
		}
		ring := orb.Ring{at(0.1, 0.1), at(0.52, 0.33), at(0.9, 0.17), at(0.7, 0.5), at(0.83, 0.91), at(0.5, 0.71), at(0.13, 0.87), at(0.31, 0.5), at(0.1, 0.1)}
		v := volume(t, "--from", file(t, "low.csv", low), "--to", file(t, "high.csv", high), "--boundary", rings(t, ring))[0]
		same(t, d.name+": cut", v.Cut.Volume, 0)
		size.part(d.name, v.Fill.Volume, 0.375*v.Fill.Area, 1e-12)
		size.part(d.name+", net", v.Net, 0.375*v.Covered, 1e-12)
	}
}

// The gravel pit's volumes are those of the shape from which the shots were made: the
// pit from the original ground to the shots within 0.2 %, the stockpile from the plane
// of its toe within 3 %: its round face is cut across by the triangles. Their stated
// uncertainty is from the noise of 12 mm, which is the lesser part.
func TestVolumeOfGravelPit(t *testing.T) {
	truth := pitTruth(t)
	g := truth.Ground
	ground := "x,y,z\n"
	for _, p := range []orb.Point{{431100, 5621300}, {431700, 5621300}, {431700, 5621800}, {431100, 5621800}} {
		ground += fmt.Sprintf("%s,%s,%s\n", decimal(p[0]), decimal(p[1]), decimal(math.Round((g.Elevation+g.DzDx*(p[0]-g.Easting)+g.DzDy*(p[1]-g.Northing))*1e6)/1e6))
	}
	before := filepath.Join(t.TempDir(), "ground.geojson")
	isofacet(t, "triangles", file(t, "ground.csv", ground), "--decimals", "full", "--out", before)
	shots := pitShots()
	after := slices.Concat([]string{"--to", shots[0]}, shots[1:])
	for _, name := range pitLines {
		after = append(after, "--breaklines", "sample:"+name)
	}
	pit := volume(t, append(after, "--from", before, "--inside", rings(t, pitBox))...)[0]
	pile := volume(t, append(after, "--from", before, "--inside", rings(t, pileBox))...)[0]
	toe := volume(t, append(slices.Concat([]string{"--to", shots[0]}, shots[1:]), "--toe", "sample:"+samples.GravelPitStockpileToe, "--toe-base", "plane")...)[0]
	size := compare(t, "relative error of the volume")
	size.near("pit", pit.Cut.Volume/truth.Pit.Volume-1, 0, 0.002)
	size.near("stockpile", pile.Fill.Volume/truth.Pile.Volume-1, 0, 0.03)
	size.near("stockpile over the plane of its toe", toe.Fill.Volume/truth.Pile.Volume-1, 0, 0.03)
	t.Logf("pit %.1f of %.1f; stockpile %.1f, over its toe %.1f, of %.1f", pit.Cut.Volume, truth.Pit.Volume, pile.Fill.Volume, toe.Fill.Volume, truth.Pile.Volume)
}
