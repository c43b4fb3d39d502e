package main

import (
	"bytes"
	"encoding/json"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"isofacet/io/geojson/geojsontest"
	"isofacet/triangulate/pointsets"
)

// Every GeoJSON that the program writes passes the schema and has its rings the right
// way round, says what its coordinates are in, and has the decimals asked for.
func TestRFC7946(t *testing.T) {
	dir := t.TempDir()
	t.Chdir(dir)
	s := survey{points: pointsets.Survey(3000, 3)}
	s.z = pointsets.Heights(s.points)
	s.write(t, "survey.csv", 0)
	lattice := survey{points: pointsets.Lattice01(900, 5)}
	for i := range lattice.points {
		lattice.z = append(lattice.z, float64(i%3)) // plateaus and readings at the levels
	}
	lattice.write(t, "lattice.csv", 0)
	pit := "sample:gravel-pit/shots.csv --exclude sample:gravel-pit/decisions.csv --without code=BP"
	limits := " --breaklines sample:gravel-pit/lines/breaklines.csv --boundary sample:gravel-pit/lines/boundary.csv --voids sample:gravel-pit/lines/pond.csv"
	for _, row := range []struct {
		name, args string
		decimals   string
		flat       geojsontest.Flat
	}{
		{"lines", "contour survey.csv --interval " + s.interval(), "full", geojsontest.RefuseFlat},
		{"lines of few decimals", "contour survey.csv --interval " + s.interval(), "1", geojsontest.AllowFlat},
		{"bands", "contour survey.csv --bands --interval " + s.interval(), "full", geojsontest.RefuseFlat},
		{"bands of few decimals", "contour survey.csv --bands --interval " + s.interval(), "0", geojsontest.AllowFlat},
		{"lines through plateaus", "contour lattice.csv --interval 0.5", "auto", geojsontest.RefuseFlat},
		{"bands round plateaus", "contour lattice.csv --bands --interval 0.5", "auto", geojsontest.RefuseFlat},
		{"lines of the pit", "contour --interval 0.5 " + pit + limits, "3", geojsontest.AllowFlat},
		{"bands of the pit", "contour --interval 0.5 --bands " + pit + limits, "auto", geojsontest.AllowFlat},
		{"no lines", "contour survey.csv --levels 1e6", "auto", geojsontest.RefuseFlat},
		{"triangles", "triangles survey.csv", "full", geojsontest.RefuseFlat},
		{"triangles of few decimals", "triangles survey.csv", "0", geojsontest.AllowFlat},
		{"triangles of the pit", "triangles " + pit + limits, "auto", geojsontest.AllowFlat},
		{"vertices", "triangles lattice.csv --out vertices=-", "2", geojsontest.RefuseFlat},
	} {
		t.Run(row.name, func(t *testing.T) {
			for _, system := range []string{"", "EPSG:25832", "EPSG:4326"} {
				args := append(strings.Fields(row.args), "--decimals", row.decimals, "--format", "geojson", "--quiet")
				if system != "" {
					args = append(args, "--crs", system)
				}
				var out, words bytes.Buffer
				if code := run(args, streams{strings.NewReader(""), &out, &words}); code != 0 {
					t.Fatalf("exit status %d\n%s", code, &words)
				}
				if err := geojsontest.Check(out.Bytes(), row.flat); err != nil {
					t.Fatal(err)
				}
				checkSystem(t, out.Bytes(), words.String(), system)
				if row.decimals == "0" || row.decimals == "1" || row.decimals == "2" || row.decimals == "3" {
					checkDecimals(t, out.String(), int(row.decimals[0]-'0'))
				}
			}
		})
	}
	if left, err := filepath.Glob("*.geojson"); err != nil || len(left) > 0 {
		t.Errorf("left behind: %v", left)
	}
	if _, err := os.Stat("survey.csv"); err != nil {
		t.Error(err)
	}
}

// checkSystem looks for the member that says what the coordinates are in, and for the
// warning that goes with it.
func checkSystem(t *testing.T, text []byte, words, system string) {
	t.Helper()
	var all map[string]json.RawMessage
	if err := json.Unmarshal(text, &all); err != nil {
		t.Fatal(err)
	}
	says := string(all["coordinates_in"])
	warned := strings.Contains(words, "[not-degrees]")
	switch system {
	case "EPSG:4326":
		if says != "" || warned {
			t.Errorf("longitude and latitude: coordinates_in is %s, warned %v", says, warned)
		}
	case "":
		if says != `"unstated"` || !warned {
			t.Errorf("no system: coordinates_in is %s, warned %v", says, warned)
		}
	default:
		if says != `"`+system+`"` || !warned {
			t.Errorf("%s: coordinates_in is %s, warned %v", system, says, warned)
		}
	}
}

var position = regexp.MustCompile(`\[(-?[0-9.]+),(-?[0-9.]+)[\],]`)

// checkDecimals looks at x and y of every position.
func checkDecimals(t *testing.T, text string, want int) {
	t.Helper()
	n := 0
	for _, match := range position.FindAllStringSubmatch(text, -1) {
		for _, number := range match[1:] {
			_, digits, _ := strings.Cut(number, ".")
			if n++; len(digits) != want {
				t.Fatalf("coordinate %s, want %d decimals", number, want)
			}
		}
	}
	if n == 0 {
		t.Error("no position found")
	}
}
