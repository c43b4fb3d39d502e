package reference

import (
	"math"
	"testing"
)

// TestTriangleExamples compares single triangles: value, slope, downhill azimuth
// and areas, to 1e-10 of each. Source: computed for this project by rational
// arithmetic. A level triangle has no azimuth.
func TestTriangleExamples(t *testing.T) {
	const part = 1e-10
	value, slope, azimuth := compare(t, "value"), compare(t, "slope"), compare(t, "downhill azimuth")
	area, surface := compare(t, "plan area"), compare(t, "surface area")
	places := map[string]string{"vertex": "vertex", "edge": "edge", "outside": "outside"}
	for _, r := range table(t, "surveying/triangle_examples.csv") {
		name := r.get(t, "case")
		text := "x,y,z\n"
		for _, k := range []string{"1", "2", "3"} {
			text += r.get(t, "x"+k) + "," + r.get(t, "y"+k) + "," + r.get(t, "z"+k) + "\n"
		}
		data := file(t, "triangle.csv", text)

		s := inspect(t, data).Surface
		same(t, name+": triangles", s.Triangles, 1)
		area.part(name, s.Area, r.number(t, "plan_area"), part)

		answers := query(t, file(t, "place.csv", "x,y\n"+r.get(t, "xq")+","+r.get(t, "yq")+"\n"), data)
		same(t, name+": number of answers", len(answers), 1)
		a := answers[0]
		want, ok := places[name]
		if !ok {
			want = "inside"
		}
		same(t, name+": place", a.get(t, "place"), want)
		if r.get(t, "z_linear") == "outside" {
			same(t, name+": value", a.get(t, "surface_z"), "")
			same(t, name+": slope", a.get(t, "slope"), "")
			same(t, name+": downhill azimuth", a.get(t, "downhill_azimuth"), "")
			continue
		}
		value.part(name, a.number(t, "surface_z"), r.number(t, "z_linear"), part)
		steep := a.number(t, "slope")
		slope.part(name, 100*steep, r.number(t, "slope_percent"), part)
		slope.part(name+", in degrees", math.Atan(steep)*180/math.Pi, r.number(t, "slope_deg"), part)
		// The program reports plan areas; the area on the slope follows.
		surface.part(name, s.Area*math.Sqrt(1+sq(steep)), r.number(t, "surface_area"), part)
		if r.get(t, "aspect_downslope_azimuth_deg") == "" {
			same(t, name+": downhill azimuth", a.get(t, "downhill_azimuth"), "")
			continue
		}
		azimuth.part(name, a.number(t, "downhill_azimuth"), r.number(t, "aspect_downslope_azimuth_deg"), part)
	}
	same(t, "number of areas", area.n, 9)
}
