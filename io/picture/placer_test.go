package picture

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/paulmach/orb"
)

func TestLabelsStandClearOfEachOther(t *testing.T) {
	f := newFrame(orb.Bound{Max: orb.Point{180, 180}}, 180, 180)
	f.left, f.top = 8, 8
	p := newPlacer(&f)
	r := rand.New(rand.NewPCG(7, 7))
	lines := 0
	for range 300 {
		x, y, heading := 18000*r.Float64(), 18000*r.Float64(), 7*r.Float64()
		var line []spot
		for range 2 + r.IntN(200) {
			line = append(line, spot{int32(x), int32(y)})
			heading += 0.4 * (r.Float64() - 0.5)
			x, y = x+200*math.Cos(heading), y+200*math.Sin(heading)
		}
		p.offer(line, "431.5", false)
		lines++
	}
	labels := p.chosen()
	if len(labels) < 50 {
		t.Fatalf("%d labels on %d lines", len(labels), lines)
	}
	for i, a := range labels {
		if a.ux < 0 {
			t.Errorf("label %d is upside down", i)
		}
		if math.Abs(math.Hypot(a.ux, a.uy)-1) > 1e-12 {
			t.Errorf("label %d has a way of length %v", i, math.Hypot(a.ux, a.uy))
		}
		if !p.inside(&a) {
			t.Errorf("label %d reaches over the frame", i)
		}
		for k, b := range labels[:i] {
			if d := math.Hypot(a.x-b.x, a.y-b.y); d < a.half+b.half {
				t.Errorf("labels %d and %d are %.0f apart", k, i, d)
			}
		}
	}
}

func TestWhichLinesAreLabelled(t *testing.T) {
	f := newFrame(orb.Bound{Max: orb.Point{180, 180}}, 180, 180)
	line := func(y int32) []spot { return []spot{{1000, y}, {9000, y}} }
	p := newPlacer(&f)
	p.offer(line(3000), "1", false)
	p.offer([]spot{{1000, 5000}, {1500, 5000}}, "2", false) // 5 mm: too short
	zigzag := []spot{}
	for k := range int32(100) {
		zigzag = append(zigzag, spot{1000 + 80*k, 7000 + 100*(k%2)})
	}
	p.offer(zigzag, "3", false)                                                   // nowhere straight
	p.offer([]spot{{20, 100}, {20, 9000}}, "4", false)                            // along the frame
	p.offer([]spot{{12000, 12000}, {12000, 12000 + labelEvery*3}}, "long", false) // reaches out of the frame
	if n := len(p.chosen()); n != 2 && n != 3 {
		t.Errorf("%v", p.chosen())
	}
	if l := p.chosen()[0]; l.text != "1" || l.y != 3000 || l.ux != 1 {
		t.Errorf("%+v", l)
	}
	for _, l := range p.chosen() {
		if l.text != "1" && l.text != "long" {
			t.Errorf("%+v", l)
		}
		if l.text == "long" && (l.ux != 0 || l.uy != -1) {
			t.Errorf("an upright text reads downward: %+v", l)
		}
	}
	p.offer(line(9000), "5", true)
	p.offer(line(11000), "6", false)
	if got := p.chosen(); len(got) != 1 || got[0].text != "5" {
		t.Errorf("with an index line: %v", got)
	}
}
