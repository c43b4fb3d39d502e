package reference

import (
	"math"
	"math/big"
	"strings"
	"testing"
)

// heads reduces a file and returns the rows of the report by id.
func heads(t *testing.T, args ...string) map[string]row {
	t.Helper()
	by := map[string]row{}
	for _, r := range rows(t, "report", isofacet(t, append([]string{"readings"}, args...)...)) {
		by[r.get(t, "id")] = r
	}
	return by
}

// TestThreeWells asks the surface through three wells for gradient and direction.
// Sources: R. C. Heath, Basic Ground-Water Hydrology, USGS Water-Supply Paper 2220,
// 1983 (from memory); US EPA, Athens laboratory, training pages; two course
// exercises. The wells come in as depths below a casing 500 above zero, so that the
// heads are those of the program's own arithmetic.
func TestThreeWells(t *testing.T) {
	gradient, azimuth := compare(t, "gradient"), compare(t, "azimuth")
	results := table(t, "groundwater/three_point_results.csv")
	wells := map[string][]row{}
	for _, r := range table(t, "groundwater/three_point_inputs.csv") {
		wells[r.get(t, "case")] = append(wells[r.get(t, "case")], r)
	}
	for _, r := range results {
		name := r.get(t, "case")
		text, place := "well,x,y,measuring_point,depth_to_water\n", [2]float64{}
		for _, w := range wells[name] {
			head := exactly(t, w.get(t, "head_or_elevation"))
			depth := new(big.Rat).Sub(big.NewRat(500, 1), head)
			text += w.get(t, "well") + "," + w.get(t, "x") + "," + w.get(t, "y") + ",500," + depth.FloatString(2) + "\n"
			at := w.point(t, "x", "y")
			place[0], place[1] = place[0]+at[0]/3, place[1]+at[1]/3
		}
		data := file(t, "wells.csv", text)
		for _, w := range wells[name] {
			want := exactly(t, w.get(t, "head_or_elevation"))
			got := heads(t, data)[w.get(t, "well")].get(t, "head")
			same(t, name+" "+w.get(t, "well")+": head as a decimal", exactly(t, got).Cmp(want), 0)
		}
		a := query(t, file(t, "place.csv", "x,y\n"+decimal(place[0])+","+decimal(place[1])+"\n"), data)[0]
		// Printed to 9 digits, of the smallest 11 decimals or more.
		printed := r.number(t, "gradient_magnitude")
		gradient.near(name, a.number(t, "slope"), printed, max(5e-12, 5e-10*printed))
		azimuth.part(name, a.number(t, "downhill_azimuth"), r.number(t, "downslope_azimuth_deg_clockwise_from_north"), 1e-8)
	}
	same(t, "number of cases", gradient.n, 4)
}

func exactly(t *testing.T, text string) *big.Rat {
	t.Helper()
	r, ok := new(big.Rat).SetString(text)
	if !ok {
		t.Fatalf("%q is no number", text)
	}
	return r
}

// TestHeadsFromDepths compares printed arithmetic. Sources: a question-and-answer page
// with three wells (elevation less depth), and San Joaquin County (California)
// environmental health department, public file 471143 p. 11, monitoring of 2003-01-20:
// 0.32 ft of product of specific gravity 0.83.
func TestHeadsFromDepths(t *testing.T) {
	all := table(t, "groundwater/scalar_examples.csv")
	dtw := only(t, all, "case", "head from depth to water")
	inputs := strings.NewReplacer("elev ", "", " m; depth", "", " m", "").Replace(dtw.get(t, "inputs"))
	fields := strings.Fields(inputs)
	same(t, "numbers of the example", len(fields), 6)
	text := "well,x,y,measuring_point,depth\n"
	for i := range 3 {
		text += string(rune('1'+i)) + "," + decimal(float64(i)) + "," + decimal(float64(i*i)) + "," + fields[i] + "," + fields[3+i] + "\n"
	}
	by := heads(t, file(t, "wells.csv", text))
	for i, want := range strings.Fields(strings.TrimSuffix(dtw.get(t, "published"), " m")) {
		same(t, "head of well "+string(rune('1'+i)), by[string(rune('1'+i))].get(t, "head"), want)
	}

	// The corrected depth to water: below a measuring point of 0 it is the head with
	// the other sign.
	corrected := only(t, all, "case", "floating product, corrected depth to water")
	by = heads(t, file(t, "product.csv", "well,x,y,measuring_point,depth,product,sg\nA,0,0,0,9.60,0.32,0.83\nB,1,0,0,9.60,0,0.83\n"))
	same(t, "corrected depth", by["A"].get(t, "head"), "-"+strings.TrimSuffix(corrected.get(t, "result"), " ft"))
	depression := only(t, all, "case", "floating product, depression")
	d := new(big.Rat).Sub(exactly(t, by["A"].get(t, "head")), exactly(t, by["B"].get(t, "head")))
	same(t, "depression", d.FloatString(4)+" ft", depression.get(t, "result"))

	// Reference 100.00, depth 10.00, product 0.32, specific gravity 0.83: by hand. The
	// product as a thickness, by two depths, and from the table of wells and the
	// command line.
	const want = "90.2656"
	one := file(t, "one.csv", "well,x,y,mp,depth,product,sg\nT,0,0,100.00,10.00,0.32,0.83\n")
	two := file(t, "two.csv", "well,depth_to_product,depth_to_water\nT,9.68,10.00\n")
	table := file(t, "wells.csv", "well,x,y,toc\nT,0,0,100.00\n")
	for _, r := range []row{
		heads(t, one)["T"], heads(t, two, "--wells", table, "--specific-gravity", "0.83")["T"],
	} {
		same(t, "head with product", r.get(t, "head"), want)
		same(t, "z", r.get(t, "z"), want)
		same(t, "arithmetic", r.get(t, "arithmetic"), "100.00 - 10.00 + 0.32 x 0.83 = "+want)
	}
}

// TestFeet converts through the program. Sources: the definitions (85 FR 62698).
func TestFeet(t *testing.T) {
	for unit, text := range map[string]string{"ft-int": "international foot", "ft-us": "US survey foot"} {
		want := only(t, table(t, "geodesy/units.csv"), "unit", text).number(t, "decimal")
		f := inspect(t, file(t, "one.csv", "x,y,z\n0,0,0\n1,0,0\n0,1,1\n"), "--xy-unit", unit, "--to-xy-unit", "m", "--z-unit", unit, "--to-z-unit", "m")
		for name, got := range map[string]float64{"x": f.Extent.XMax, "y": f.Extent.YMax, "z": f.Extent.ZMax} {
			if math.Abs(got-want) > 5e-16 {
				t.Errorf("1 %s is %v m in %s, want %v", unit, got, name, want)
			}
		}
	}
	million := only(t, table(t, "geodesy/units.csv"), "unit", "difference per 1,000,000 ft in ft").number(t, "decimal")
	data := file(t, "far.csv", "x,y,z\n2000000,1000000,0\n2000100,1000000,0\n2000000,1000100,1\n")
	f := inspect(t, data, "--xy-unit", "ft-us", "--to-xy-unit", "ft-int")
	// 2,000,000 ft: 4.000008 ft by hand.
	same(t, "two million feet", int(math.Round((f.Extent.XMin-2000000)*1e6)), 4000008)
	if d := f.Extent.YMin - 1000000; math.Abs(d-million) > 1e-5 {
		t.Errorf("a million feet differ by %v, want %v", d, million)
	}
	back := inspect(t, data, "--xy-unit", "ft-int", "--to-xy-unit", "ft-us")
	same(t, "and back", back.Extent.XMin, 1999996)
}

// TestDecimalCommaOfDepths reads one gauging table with a decimal comma and with a point.
func TestDecimalCommaOfDepths(t *testing.T) {
	point := "well;x;y;mp;depth;product;sg\nA;0.5;0.25;100.00;10.00;0.32;0.83\nB;10.5;0.75;101.5;9.25;;\nC;0.125;9.5;99.75;8.5;;\n"
	outputs := map[string]bool{}
	for _, text := range []string{point, strings.ReplaceAll(point, ".", ",")} {
		data := file(t, "wells.csv", text)
		contour := isofacet(t, "contour", data, "--interval", "0.1", "--format", "csv")
		raster := isofacet(t, "grid", data, "--cell", "0.5")
		outputs[contour+raster] = true
	}
	same(t, "unlike outputs", len(outputs), 1)
}
