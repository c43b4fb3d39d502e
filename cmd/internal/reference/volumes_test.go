package reference

import (
	"math"
	"testing"

	"github.com/paulmach/orb"
)

// TestSolids compares solids with closed formulas: a pyramid, base x height / 3; a
// frustum, h/3 (A1 + A2 + sqrt(A1 A2)); and a tent, whose ridge the readings
// alone do not keep: without a breakline its volume is 9966.667. Sources: elementary
// geometry; the last computed for this project.
func TestSolids(t *testing.T) {
	area, volume := compare(t, "area"), compare(t, "volume")
	for _, r := range table(t, "volumes/solids.csv") {
		solid := r.get(t, "solid")
		f := inspect(t, figures(t, "volumes/solid_"+solid+"_points.csv"))
		area.part(solid, f.Surface.Area, r.number(t, "plan_area"), 1e-9)
		volume.part(solid, f.Surface.VolumeAboveZero, r.number(t, "volume_of_plain_delaunay_without_breaklines"), 1e-9)
		if solid != "roof_ridge" {
			volume.part(solid+", exact", f.Surface.VolumeAboveZero, r.number(t, "exact_volume_to_z0"), 1e-9)
		}
	}
	same(t, "number of solids", area.n, 3)
}

// curved are the surfaces of curved_surfaces.csv, over the unit square.
var curved = map[string]func(x, y float64) float64{
	"paraboloid": func(x, y float64) float64 { return 1 - sq(x-0.5) - sq(y-0.5) },
	"sine":       func(x, y float64) float64 { return 2 + math.Sin(math.Pi*x)*math.Sin(math.Pi*y) },
	"franke1":    functions[1],
}

// TestCurvedSurfaces compares volumes below curved surfaces sampled on square
// lattices, whose cells are ties. Source: computed for this project, integrals by
// mpmath 1.2.1; of the two triangulations that of the tie rule, diagonals from
// north west to south east. Volumes come from inspect, and from two rasters and a
// query: below a cell so divided it is area x (four corners + 2 centres) / 6.
func TestCurvedSurfaces(t *testing.T) {
	volume, fromRaster := compare(t, "volume"), compare(t, "volume from rasters")
	middle, error4 := compare(t, "value at a centre"), compare(t, "volume less the integral")
	all := table(t, "volumes/curved_surfaces.csv")
	same(t, "number of rows", len(all), 15)
	for _, r := range all {
		f, n := curved[r.get(t, "surface")], r.count(t, "n_per_side")
		if f == nil {
			t.Fatalf("%s: unknown surface", r.name)
		}
		step := 1 / float64(n-1) // a power of two
		var pts []orb.Point
		for i := range n {
			for j := range n {
				pts = append(pts, orb.Point{float64(i) * step, float64(j) * step})
			}
		}
		data := readings(t, pts, f)
		want := r.number(t, "triangulated_diagonal_NW_SE")

		s := inspect(t, data).Surface
		same(t, r.name+": triangles", s.Triangles, 2*(n-1)*(n-1))
		same(t, r.name+": area", s.Area, 1)
		volume.part(r.name, s.VolumeAboveZero, want, 1e-9)
		// The table prints the error to four digits.
		off := r.number(t, "error_NW_SE")
		error4.part(r.name, s.VolumeAboveZero-r.number(t, "exact_integral"), off, 1e-3)

		args := []string{data, "--cell", decimal(step), "--extent", "0,0,1,1", "--values-at"}
		corners, _ := raster(t, append(args, "corners")...)
		centres, _ := raster(t, append(args, "centres")...)
		same(t, r.name+": corners", len(corners), n*n)
		same(t, r.name+": centres", len(centres), (n-1)*(n-1))
		sum, places := 0.0, "x,y\n"
		for p, c := range centres {
			places += decimal(p[0]) + "," + decimal(p[1]) + "\n"
			sum += c / 3
			at := func(dx, dy float64) float64 {
				z, ok := corners[orb.Point{p[0] + dx*step/2, p[1] + dy*step/2}]
				if !ok {
					t.Fatalf("%s: the cell at %v lacks a corner", r.name, p)
				}
				return z
			}
			sum += (at(-1, -1) + at(1, -1) + at(-1, 1) + at(1, 1)) / 6
			middle.near(r.name, c, (at(-1, 1)+at(1, -1))/2, 1e-15*(1+math.Abs(c)))
		}
		fromRaster.part(r.name, sum*step*step, want, 1e-9)
		for p, z := range corners {
			same(t, r.name+": reading", z, f(p[0], p[1]))
		}
		for _, a := range query(t, file(t, "places.csv", places), data) {
			// Bit for bit (P4).
			same(t, a.name, a.number(t, "surface_z"), centres[a.point(t, "x", "y")])
			same(t, a.name+": place", a.get(t, "place"), "edge")
		}
	}
}
