package tin

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"
)

const square = `{"type":"FeatureCollection","vertical_datum":"local","features":[
{"type":"Feature","properties":{},"geometry":{"type":"Polygon","coordinates":[[[0,0,1.25],[4,0,2],[4,4,3],[0,0,1.25]]]}},
{"type":"Feature","properties":null,"geometry":{"type":"Polygon","coordinates":[[[0,0,1.25],[4,4,3],[0,4.5,2],[0,0,1.25]]]}}]}`

func TestGeoJSON(t *testing.T) {
	s, err := ReadGeoJSON(context.Background(), strings.NewReader(square), "a")
	if err != nil {
		t.Fatal(err)
	}
	if len(s.Points) != 4 || len(s.Triangles) != 2 || s.VerticalDatum != "local" || s.DecimalsXY != 1 || s.DecimalsZ != 2 {
		t.Errorf("%+v", s)
	}
}

func TestTables(t *testing.T) {
	v := "vertex,reading,x,y,z\n1,a,0,0,1.25\n2,,4,0,2\n3,c,4,4,3\n"
	s, err := ReadTables(context.Background(), strings.NewReader(v), "v", strings.NewReader("triangle,vertex_1,vertex_2,vertex_3,slope\n1,1,2,3,0\n"), "t")
	if err != nil {
		t.Fatal(err)
	}
	if len(s.Points) != 3 || s.Triangles[0] != [3]int32{0, 1, 2} || s.Z[1] != 2 {
		t.Errorf("%+v", s)
	}
}

func TestRefused(t *testing.T) {
	polygon := func(coordinates string) string {
		return `{"type":"Feature","properties":{},"geometry":{"type":"Polygon","coordinates":` + coordinates + `}}`
	}
	for text, want := range map[string]string{
		polygon(`[[[0,0,1],[1,0,1],[1,1,1],[0,1,1],[0,0,1]]]`): "5 positions",
		polygon(`[[[0,0],[1,0],[1,1],[0,0]]]`):                 "without heights",
		`{"type":"Point","coordinates":[1,2,3]}`:               "a Point",
		`{"type":"FeatureCollection","features":[]}`:           "no triangle",
		strings.Replace(square, "[[0,0,1.25],[4,4,3],[0,4.5,2],[0,0,1.25]]", "[[0,0,9],[4,4,3],[0,4.5,2],[0,0,9]]", 1): "one height at one place",
	} {
		_, err := ReadGeoJSON(context.Background(), strings.NewReader(text), "a")
		var e *Error
		if !errors.As(err, &e) || !strings.Contains(err.Error(), want) {
			t.Errorf("%.60s: %v, want %q", text, err, want)
		}
	}
	for _, c := range [][3]string{
		{"vertex,x,y,z\n1,0,0,a\n", "vertex_1,vertex_2,vertex_3\n", "a number"},
		{"vertex,x,y,z\n1,0,0,1\n1,2,0,1\n", "vertex_1,vertex_2,vertex_3\n", "again"},
		{"vertex,x,y,z\n1,0,0,1\n", "vertex_1,vertex_2,vertex_3\n1,2,3\n", "one of the table"},
		{"vertex,x,y\n", "", "no column z"},
		{"", "", "nothing"},
		{"vertex,x,y,z\n1,0,0,1\n", "vertex_1,vertex_2,vertex_3\n", "no triangle"},
	} {
		_, err := ReadTables(context.Background(), strings.NewReader(c[0]), "v", strings.NewReader(c[1]), "t")
		if err == nil || !strings.Contains(err.Error(), c[2]) {
			t.Errorf("%q, %q: %v, want %q", c[0], c[1], err, c[2])
		}
	}
}

// Nothing that a file holds makes the readers panic; what they return is whole.
func FuzzRead(f *testing.F) {
	f.Add(square, "vertex,x,y,z\n1,0,0,1\n2,1,0,1\n3,0,1,2\n", "vertex_1,vertex_2,vertex_3\n1,2,3\n")
	f.Fuzz(func(t *testing.T, text, vertices, triangles string) {
		for _, read := range []func() (*Set, error){
			func() (*Set, error) { return ReadGeoJSON(context.Background(), strings.NewReader(text), "a") },
			func() (*Set, error) {
				return ReadTables(context.Background(), strings.NewReader(vertices), "v", strings.NewReader(triangles), "t")
			},
		} {
			s, err := read()
			if err != nil {
				continue
			}
			if len(s.Points) != len(s.Z) {
				t.Fatalf("%d points, %d heights", len(s.Points), len(s.Z))
			}
			for i, p := range s.Points {
				if math.IsNaN(p[0]) || math.IsNaN(p[1]) || math.IsNaN(s.Z[i]) {
					t.Fatalf("point %d is %v, %v", i, p, s.Z[i])
				}
			}
			for _, tri := range s.Triangles {
				for _, c := range tri {
					if c < 0 || int(c) >= len(s.Points) {
						t.Fatalf("corner %d of %d", c, len(s.Points))
					}
				}
			}
		}
	})
}
