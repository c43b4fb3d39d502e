package reference

import (
	"testing"

	"github.com/paulmach/orb"
)

// volcano is a lattice of 87 x 61 heights, 10 m apart, of Maunga Whau, digitised
// by R. Ihaka (data `volcano` of R). Every cell of it is a tie.
func volcano(t *testing.T) []string {
	t.Helper()
	return []string{figures(t, "datasets/volcano_points.csv"), "--columns", "-,-,x,y,z"}
}

// The places lie on lines of the lattice, where every diagonal gives one value.
// Source: computed for this project.
func TestVolcanoQueries(t *testing.T) {
	at := figures(t, "datasets/volcano_queries.csv")
	value := compare(t, "value")
	for _, r := range query(t, at, append(volcano(t), "--at-columns", "x=x_m,y=y_m")...) {
		value.near(r.name, r.number(t, "surface_z"), r.number(t, "z_linear_on_grid_line"), 1e-9*(1+195-94))
	}
	same(t, "number of values", value.n, 40)
}

// A raster on the readings gives them back; one between them gives, at every
// cell's centre, the middle of the diagonal that the tie rule takes, from north
// west to south east: of two heights that are whole numbers, without rounding.
func TestVolcanoRasters(t *testing.T) {
	z := map[orb.Point]float64{}
	for _, r := range table(t, "datasets/volcano_points.csv") {
		z[r.point(t, "x_m", "y_m")] = r.number(t, "z_m")
	}
	args := append(volcano(t), "--cell", "10", "--extent", "0,0,860,600", "--values-at")
	corners, n := raster(t, append(args, "corners")...)
	same(t, "nodes at corners", n, 87*61)
	same(t, "values at corners", len(corners), len(z))
	for p, v := range corners {
		same(t, "reading", v, z[p])
	}
	centres, n := raster(t, append(args, "centres")...)
	same(t, "nodes at centres", n, 86*60)
	same(t, "values at centres", len(centres), n)
	for p, v := range centres {
		same(t, "centre", v, (z[orb.Point{p[0] - 5, p[1] + 5}]+z[orb.Point{p[0] + 5, p[1] - 5}])/2)
	}
}

// The volume lies between the smallest and the largest over all choices of
// diagonals (computed for this project), and is that of the tie rule's: heights
// are whole numbers, so a cell's six-fold volume is one too.
func TestVolcanoVolume(t *testing.T) {
	f := inspect(t, volcano(t)...)
	same(t, "vertices", f.Surface.Vertices, 87*61)
	same(t, "triangles", f.Surface.Triangles, 2*86*60)
	same(t, "vertices on the outline", f.Surface.OutlineVertices, 2*(86+60))
	figure := func(quantity string) float64 {
		return only(t, table(t, "datasets/volcano_volume.csv"), "quantity", quantity).number(t, "value")
	}
	same(t, "area", f.Surface.Area, figure("plan area m2"))

	volume := f.Surface.VolumeAboveZero
	low := figure("volume to z=0, smallest over all diagonal choices m3")
	high := figure("volume to z=0, largest over all diagonal choices m3")
	if !(low <= volume && volume <= high) {
		t.Errorf("the volume is %v, want from %v to %v", volume, low, high)
	}
	z := map[orb.Point]int{}
	for _, r := range table(t, "datasets/volcano_points.csv") {
		z[r.point(t, "x_m", "y_m")] = r.count(t, "z_m")
	}
	six := 0 // times the volume, by 100
	for x := 0.0; x < 860; x += 10 {
		for y := 0.0; y < 600; y += 10 {
			six += 2*(z[orb.Point{x, y + 10}]+z[orb.Point{x + 10, y}]) + z[orb.Point{x, y}] + z[orb.Point{x + 10, y + 10}]
		}
	}
	compare(t, "volume").part("diagonals of the tie rule", volume, float64(six)*100/6, 1e-15)
}
