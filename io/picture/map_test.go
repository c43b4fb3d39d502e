package picture_test

import (
	"bytes"
	"encoding/xml"
	"errors"
	"io"
	"math"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"isofacet/grid"
	"isofacet/io/picture"
)

// wellFormed returns the first fault that an XML parser finds, and the texts between tags.
func wellFormed(text []byte) (words []string, err error) {
	d := xml.NewDecoder(bytes.NewReader(text))
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			return words, nil
		}
		if err != nil {
			return nil, err
		}
		if c, ok := token.(xml.CharData); ok && strings.TrimSpace(string(c)) != "" {
			words = append(words, string(c))
		}
	}
}

func TestMapOfThePit(t *testing.T) {
	s := pit(t)
	labels := grid.Labels{XYUnit: "m", ZUnit: "m", CRS: "EPSG:25832", VerticalDatum: "DHHN2016 <&>"}
	opt := picture.MapOptions{Title: "Gravel pit & <isolines> \x01", Interval: "1", IndexEvery: 5, Labels: labels}
	text, report := s.draw(t, s.levels(t, "1", 5), opt, false, true)
	keep(t, "pit.svg", text)
	words, err := wellFormed(text)
	if err != nil {
		t.Fatal(err)
	}
	all := strings.Join(words, "\n")
	for _, want := range []string{"Gravel pit & <isolines> \uFFFD", "215 m", "index line, every 5th", "interval 1 m", "edge of the surface", "reading", "100", "N",
		"x 431195, y 5621395", "x 431625, y 5621740", "values in m, heights from DHHN2016 <&>", "coordinates: EPSG:25832, m"} {
		if !strings.Contains(all, want) {
			t.Errorf("the picture does not say %q", want)
		}
	}
	if report.Dots+report.Covered != len(s.points) || report.Labels == 0 || report.Drawn >= report.Points || report.TooSmall != 0 {
		t.Errorf("%+v", report)
	}
	if again, _ := s.draw(t, s.levels(t, "1", 5), opt, false, true); !bytes.Equal(again, text) {
		t.Error("a second picture has other bytes")
	}
	text, _ = s.draw(t, s.levels(t, "2.5", 0), picture.MapOptions{Interval: "2.5"}, true, false)
	keep(t, "pit-bands.svg", text)
	if words, err = wellFormed(text); err != nil {
		t.Fatal(err)
	}
	all = strings.Join(words, "\n")
	for _, want := range []string{"below 202.5", "205 to 207.5", "227.5 and above", "unit not stated", "system not stated"} {
		if !strings.Contains(all, want) {
			t.Errorf("the picture of bands does not say %q", want)
		}
	}
}

func TestMapErrors(t *testing.T) {
	nan := math.NaN()
	for _, b := range []orb.Bound{{Min: orb.Point{nan, 0}}, {Min: orb.Point{1, 0}}, {Max: orb.Point{math.Inf(1), 0}}} {
		if _, err := picture.NewMap(io.Discard, picture.MapOptions{Extent: b}); err == nil {
			t.Errorf("%v makes a map", b)
		}
	}
	m, err := picture.NewMap(io.Discard, picture.MapOptions{Extent: orb.Bound{Max: orb.Point{1, 1}}, Bands: []string{"5"}})
	if err != nil {
		t.Fatal(err)
	}
	square := orb.Ring{{0, 0}, {1, 0}, {1, 1}, {0, 0}}
	for _, c := range []struct {
		err  error
		want string
	}{
		{m.Isoline(picture.Isoline{Level: "5", Points: orb.LineString{{0, 0}, {nan, 1}}}), "picture: isoline at 5, point 2: (NaN, 1): expected finite coordinates"},
		{m.Outline(orb.Ring{{0, math.Inf(1)}}), "picture: outline, point 1: (0, +Inf): expected finite coordinates"},
		{m.Readings([]orb.Point{{nan, 0}}), "picture: reading: (NaN, 0): expected finite coordinates"},
		{m.Band(orb.Polygon{square}, 2), "picture: band: 2: expected 0 to the number of levels, 1"},
	} {
		var ie *picture.InputError
		if !errors.As(c.err, &ie) || c.err.Error() != c.want {
			t.Errorf("got  %v\nwant %s", c.err, c.want)
		}
	}
	if err := m.Band(orb.Polygon{square}, 1); err != nil {
		t.Error(err)
	}
}

type full struct{}

var errFull = errors.New("no space left")

func (full) Write([]byte) (int, error) { return 0, errFull }

func TestErrorsOfTheDestination(t *testing.T) {
	m, err := picture.NewMap(full{}, picture.MapOptions{})
	if err != nil {
		t.Fatal(err)
	}
	if _, err := m.Close(); !errors.Is(err, errFull) {
		t.Errorf("%v", err)
	}
	g := pit(t).raster(t, "20", grid.Labels{})
	if _, err := picture.WriteRaster(full{}, g, picture.RasterOptions{}); !errors.Is(err, errFull) {
		t.Errorf("%v", err)
	}
}
