package reference

import (
	"bytes"
	"encoding/json"
	"errors"
	"math"
	"os/exec"
	"strings"
	"testing"

	"github.com/paulmach/orb"
)

// limited is what inspect says of lines and limits.
type limited struct {
	findings
	Constraints struct {
		Lines, Vertices, Segments int
		ConstrainedEdges          int `json:"constrained_edges"`
	}
	Limits struct {
		Boundary struct {
			Area        float64
			WithSurface float64 `json:"area_with_surface"`
		}
		Voids struct {
			Area  float64
			Taken float64 `json:"area_taken"`
		}
		ReadingsOutside int `json:"readings_outside"`
	}
}

func inspectLimits(t *testing.T, args ...string) limited {
	t.Helper()
	var f limited
	text := isofacet(t, append([]string{"inspect", "--format", "json", "--decimals", "full"}, args...)...)
	if err := json.Unmarshal([]byte(text), &f); err != nil {
		t.Fatalf("inspect %s: %v in\n%s", strings.Join(args, " "), err, text)
	}
	return f
}

// refused runs the program, which must end with status 3 and write nothing, and
// returns what it says.
func refused(t *testing.T, args ...string) string {
	t.Helper()
	path, err := program()
	if err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(path, append(args, "--quiet")...)
	var stdout, stderr bytes.Buffer
	cmd.Stdout, cmd.Stderr = &stdout, &stderr
	err = cmd.Run()
	if exit, ok := errors.AsType[*exec.ExitError](err); !ok || exit.ExitCode() != 3 {
		t.Fatalf("isofacet %s: %v, want exit status 3\n%s", strings.Join(args, " "), err, &stderr)
	}
	if stdout.Len() > 0 {
		t.Errorf("isofacet %s: refused, yet standard output has %q", strings.Join(args, " "), &stdout)
	}
	return stderr.String()
}

// rings writes rings as a file of lines, each closed as it is given.
func rings(t *testing.T, list ...orb.Ring) string {
	t.Helper()
	text := "line,x,y\n"
	for k, ring := range list {
		for _, p := range ring {
			text += "r" + decimal(float64(k)) + "," + decimal(p[0]) + "," + decimal(p[1]) + "\n"
		}
	}
	return file(t, "rings.csv", text)
}

// TestRoofRidge: a tent 100 x 20 whose ridge is 10 high holds 10000 with the ridge as
// a breakline, and 9966.667 without. Sources: elementary geometry; the latter computed
// for this project.
func TestRoofRidge(t *testing.T) {
	points := figures(t, "volumes/solid_roof_ridge_points.csv")
	all := table(t, "volumes/solid_roof_ridge_points.csv")
	line := "line,x,y,z\n"
	for _, r := range table(t, "volumes/solid_roof_ridge_breaklines.csv") {
		p := only(t, all, "id", r.get(t, "vertex_point_id"))
		line += r.get(t, "line") + "," + p.get(t, "x") + "," + p.get(t, "y") + "," + p.get(t, "z") + "\n"
	}
	ridge := file(t, "ridge.csv", line)
	want := only(t, table(t, "volumes/solids.csv"), "solid", "roof_ridge")
	volume, area := compare(t, "volume"), compare(t, "area")
	volume.part("without the ridge", inspect(t, points).Surface.VolumeAboveZero, want.number(t, "volume_of_plain_delaunay_without_breaklines"), 1e-9)
	f := inspectLimits(t, points, "--breaklines", ridge)
	volume.part("with the ridge", f.Surface.VolumeAboveZero, want.number(t, "exact_volume_to_z0"), 1e-9)
	area.part("with the ridge", f.Surface.Area, want.number(t, "plan_area"), 1e-9)
	same(t, "segments", f.Constraints.Segments, 1)
	same(t, "edges along it", f.Constraints.ConstrainedEdges, 1)
	// Both roofs slope by 1 everywhere: the surface has the tent's own area.
	for _, r := range rows(t, "triangles", isofacet(t, "triangles", points, "--breaklines", ridge, "--format", "csv")) {
		same(t, r.name+": slope", r.get(t, "slope"), "1.000000")
	}
}

// TestShapeWithHole is an L-shaped boundary with a hole (common practice: the areas of
// the triangles add up to the polygon's area). The L is 60 x 60 without a square of 30,
// the hole a square of 10 whose sides no reading lies on.
func TestShapeWithHole(t *testing.T) {
	var pts []orb.Point
	for i := range 15 {
		for j := range 15 {
			pts = append(pts, orb.Point{float64(5 * i), float64(5*j) + float64(i%2)})
		}
	}
	data := readings(t, pts, func(x, y float64) float64 { return 1 + x/8 + y/16 }) // exact in doubles
	ell := rings(t, orb.Ring{{1, 2}, {61, 2}, {61, 32}, {31, 32}, {31, 62}, {1, 62}, {1, 2}})
	hole := rings(t, orb.Ring{{11, 13}, {21, 13}, {21, 23}, {11, 23}, {11, 13}})
	const want = 60*60 - 30*30 - 10*10
	// The plane at the middles of the L's three squares and of the hole.
	plane := func(x, y float64) float64 { return 1 + x/8 + y/16 }
	volume := 900*(plane(16, 17)+plane(46, 17)+plane(16, 47)) - 100*plane(16, 18)

	f := inspectLimits(t, data, "--boundary", ell, "--voids", hole)
	areas, volumes := compare(t, "area"), compare(t, "volume")
	areas.part("surface", f.Surface.Area, want, 1e-12)
	areas.part("boundary", f.Limits.Boundary.Area, want+100, 1e-12)
	areas.part("of it with surface", f.Limits.Boundary.WithSurface, want+100, 1e-12)
	areas.part("void", f.Limits.Voids.Area, 100, 1e-12)
	areas.part("taken", f.Limits.Voids.Taken, 100, 1e-10) // a difference of two areas
	volumes.part("net", f.Surface.VolumeAboveZero, volume, 1e-12)

	sum := 0.0
	for _, b := range bands(t, data, "--boundary", ell, "--voids", hole, "--interval", "2") {
		sum += b.area
	}
	areas.part("bands", sum, want, 1e-12)
}

// positions reads the positions of a polygon.
func positions(t *testing.T, all []row, x, y string) orb.Ring {
	t.Helper()
	var ring orb.Ring
	for _, r := range all {
		ring = append(ring, r.point(t, x, y))
	}
	return ring
}

// TestClipChecks cuts surfaces to polygons. Source: computed for this project with
// Shapely 1.8.5; 1e-8 of areas and volumes. camg's region2 and region3 are written
// without their closing position, which is added here.
func TestClipChecks(t *testing.T) {
	want := map[string]string{}
	for _, r := range table(t, "datasets/clip_checks.csv") {
		want[r.get(t, "quantity")] = r.get(t, "value")
	}
	area, volume := compare(t, "area"), compare(t, "volume")
	checked := 0
	near := func(l *ledger, quantity string, got float64) {
		t.Helper()
		text, ok := want[quantity]
		if !ok {
			t.Fatalf("no %q among the check values", quantity)
		}
		checked++
		l.part(quantity, got, number(t, quantity, text), 1e-8)
	}
	find := func(name string) dataset {
		for _, d := range datasets {
			if d.name == name {
				return d
			}
		}
		t.Fatalf("no set %q", name)
		return dataset{}
	}

	meuse := find("meuse").readings(t)
	study := positions(t, table(t, "datasets/meuse_area_polygon.csv"), "x_m_RD", "y_m_RD")
	f := inspectLimits(t, append(meuse, "--boundary", rings(t, study))...)
	near(area, "meuse area polygon area_m2", f.Limits.Boundary.Area)
	near(area, "area polygon INTERSECT hull area_m2", f.Limits.Boundary.WithSurface)
	near(area, "TIN clipped to area polygon: plan area_m2", f.Surface.Area)
	near(volume, "TIN clipped to area polygon: volume to z=0 m3", f.Surface.VolumeAboveZero)
	near(area, "points inside area polygon", float64(f.Readings.Used-f.Limits.ReadingsOutside))
	same(t, "vertices of the study area, closed", len(study), 391)
	near(area, "meuse hull of 155 points area_m2", inspect(t, meuse...).Surface.Area)
	river := positions(t, table(t, "datasets/meuse_river_polygon.csv"), "x_m_RD", "y_m_RD")
	f = inspectLimits(t, append(meuse, "--voids", rings(t, river))...)
	near(area, "meuse river polygon area_m2", f.Limits.Voids.Area)

	polygons := map[string]orb.Ring{}
	for _, r := range table(t, "datasets/camg_polygons.csv") {
		name := r.get(t, "polygon")
		polygons[name] = append(polygons[name], r.point(t, "east_m", "north_m"))
	}
	camg := find("camg").readings(t)
	open := 0
	for name, ring := range polygons {
		if ring[0] != ring[len(ring)-1] {
			open++
			// As it is written it is no ring, and the program says so.
			says := refused(t, append([]string{"inspect", "--boundary", rings(t, ring)}, camg...)...)
			if !strings.Contains(says, "is not closed: gap ") {
				t.Errorf("%s as it is written: %s", name, says)
			}
			ring = append(ring, ring[0])
		}
		f := inspectLimits(t, append(camg, "--boundary", rings(t, ring))...)
		near(area, "camg "+name+" polygon area_m2", f.Limits.Boundary.Area)
		near(area, "camg TIN clipped to "+name+": plan area_m2", f.Surface.Area)
		near(volume, "camg TIN clipped to "+name+": volume to z=0 m3", f.Surface.VolumeAboveZero)
	}
	same(t, "polygons that are not closed", open, 2)
	numbers := 0
	for _, text := range want {
		if text != "True" && !strings.HasSuffix(text, " True") {
			numbers++
		}
	}
	same(t, "check values compared", checked, numbers)
}

// TestParanaBorder: the border of this set crosses itself once, near (164.087,
// 206.897), and is refused with that place. Source: computed for this project.
func TestParanaBorder(t *testing.T) {
	border := positions(t, table(t, "datasets/parana_border_polygon.csv"), "east_km", "north_km")
	if border[0] != border[len(border)-1] {
		border = append(border, border[0])
	}
	says := refused(t, "inspect", figures(t, "datasets/parana143_points.csv"), "--columns", "id,x,y,z", "--boundary", rings(t, border))
	_, place, ok := strings.Cut(says, " near (")
	place, _, _ = strings.Cut(place, ")")
	x, y, comma := strings.Cut(place, ", ")
	if !ok || !comma || !strings.Contains(says, "the ring crosses itself there") {
		t.Fatalf("the border is refused with\n%s", says)
	}
	if math.Abs(number(t, "x", x)-164.087) > 0.0005 || math.Abs(number(t, "y", y)-206.897) > 0.0005 {
		t.Errorf("it crosses itself near (%s), want near (164.087, 206.897)", place)
	}
}
