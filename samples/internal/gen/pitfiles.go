package gen

import (
	"encoding/json"
	"math"
)

func eastText(mm int) string  { return fixed(originEast*1000+mm, 3) }
func northText(mm int) string { return fixed(originNorth*1000+mm, 3) }

// pitFiles returns the gravel pit's files without their folder.
func pitFiles() map[string][]byte {
	s := surveyed()
	files := map[string][]byte{
		"shots.csv":     s.bookText(),
		"decisions.csv": s.decisionText(),
		"checks.csv":    s.checkText(),
		"answers.json":  s.answers(),
	}
	for name, text := range s.lineTexts() {
		files["lines/"+name+".csv"] = text
	}
	return files
}

func (s *survey) bookText() []byte {
	var t table
	t.row("point", "northing", "easting", "elevation", "code")
	for _, sh := range s.shots {
		t.row(sh.name, northText(sh.north), eastText(sh.east), fixed(sh.elevation, 3), sh.code)
	}
	return []byte(t.String())
}

// decisionText leaves the blunders out and keeps one shot that only looks
// like one.
func (s *survey) decisionText() []byte {
	var t table
	t.row("id", "decision", "reason")
	for _, b := range s.blunders {
		t.row(b.name, "leave out", b.cause)
	}
	t.row(s.shots[s.peak].name, "keep", "top of the stockpile")
	return []byte(t.String())
}

// check is a place where the true height is known and the ground is of one
// kind for three metres around, so that a surface from these shots should
// come close.
type check struct {
	east, north, elevation int
	where                  string
}

func (s *survey) checks() []check {
	r := random{431_200}
	wanted := map[string]int{
		"ground": 14, "floor": 6, "bench": 3, "upper face": 5, "lower face": 3, "ramp": 3, "stockpile": 4,
	}
	var out []check
	for len(wanted) > 0 {
		e, n := r.between(15_000, int(siteEast)*1000-15_000), r.between(15_000, int(siteNorth)*1000-15_000)
		u, v := float64(e)/1000, float64(n)/1000
		z, where := siteZ(s.ground, u, v)
		reach := 3.0
		if where == "bench" {
			reach = 2 // it is six metres wide
		}
		same := wanted[where] > 0
		for _, d := range directions(4) {
			_, name := siteZ(s.ground, u+float64(reach*d.u), v+float64(reach*d.v))
			same = same && name == where
		}
		if !same || !inside(posts, place{u, v}) {
			continue
		}
		out = append(out, check{e, n, int(math.Round(z * 1000)), where})
		if wanted[where]--; wanted[where] == 0 {
			delete(wanted, where)
		}
	}
	return out
}

func (s *survey) checkText() []byte {
	var t table
	t.row("check", "northing", "easting", "elevation", "where")
	for i, c := range s.checks() {
		t.row("K"+itoa(i+1), northText(c.north), eastText(c.east), fixed(c.elevation, 3), c.where)
	}
	return []byte(t.String())
}

// lineTexts returns the surveyed lines, a vertex a row, by file. The boundary
// and the heights of its posts' tops have nothing to do with each other: its
// z is empty.
func (s *survey) lineTexts() map[string][]byte {
	tables := map[string]*table{}
	for _, l := range s.lines {
		t := tables[l.file]
		if t == nil {
			t = &table{}
			t.row("line", "x", "y", "z")
			tables[l.file] = t
		}
		for _, i := range l.shots {
			sh := s.shots[i]
			z := fixed(sh.elevation, 3)
			if sh.code == "BP" {
				z = ""
			}
			t.row(l.name, eastText(sh.east), northText(sh.north), z)
		}
	}
	texts := map[string][]byte{}
	for name, t := range tables {
		texts[name] = []byte(t.String())
	}
	return texts
}

// rounded keeps a number's text short: to thousandths.
func rounded(x float64) json.Number {
	return json.Number(fixed(int(math.Round(x*1000)), 3))
}

type pitAnswers struct {
	About    string             `json:"about"`
	Units    string             `json:"units"`
	Readings map[string]int     `json:"readings"`
	Twice    [][2]string        `json:"stored_twice"`
	Blunders []map[string]any   `json:"blunders"`
	Noise    map[string]float64 `json:"height_noise"`
	Ground   groundAnswer       `json:"original_ground"`
	Pit      map[string]any     `json:"pit"`
	Pile     map[string]any     `json:"stockpile"`
	Areas    map[string]any     `json:"plan_areas"`
}

type groundAnswer struct {
	About string      `json:"about"`
	East  json.Number `json:"easting"`
	North json.Number `json:"northing"`
	Z     json.Number `json:"elevation"`
	DzDx  json.Number `json:"dz_dx"`
	DzDy  json.Number `json:"dz_dy"`
}

func (s *survey) answers() []byte {
	area, dug := map[string]float64{}, 0.0
	for _, p := range pitPieces() {
		area[p.top.name] += p.ring.area()
		dug += p.ring.volume(ground) - p.ring.volume(p.top)
	}
	rim := 0.0
	areas := map[string]any{}
	for name, a := range area {
		if name != "ground" {
			rim += a
			areas[name] = rounded(a)
		}
	}
	a := pitAnswers{
		About: "The gravel pit's true geometry, from which the shots were made. Volumes and areas are of the exact surface, not of triangles.",
		Units: "metres, square metres, cubic metres; unstated in the shots",
		Readings: map[string]int{
			"rows": len(s.shots), "distinct_places": s.places, "stored_twice": len(s.twice),
			"blunders": len(s.blunders), "boundary_posts": len(posts),
		},
		Twice: s.twice,
		Noise: map[string]float64{"largest": 0.040, "standard_deviation": 0.012},
		Ground: groundAnswer{
			"the plane before digging; the haul road outside the pit lies on it",
			rounded(originEast), rounded(originNorth), rounded(cornerLevel), rounded(ground.a), rounded(ground.b),
		},
		Pit: map[string]any{
			"about":     "between the original ground and the finished surface, the pond counted down to its water",
			"volume":    rounded(dug),
			"plan_area": rounded(rim), "bench_elevation": rounded(benchLevel), "water_elevation": rounded(waterLevel),
		},
		Pile: map[string]any{
			"about":    "a cone with its tip cut off level, on the original ground",
			"easting":  rounded(originEast + pileEast),
			"northing": rounded(originNorth + pileNorth),
			"volume":   rounded(pileVolume()), "plan_area": rounded(pileArea()), "top_elevation": rounded(pileTop()),
		},
		Areas: areas,
	}
	for _, b := range s.blunders {
		a.Blunders = append(a.Blunders, map[string]any{
			"point": b.name, "recorded": json.Number(fixed(b.recorded, 3)),
			"measured": json.Number(fixed(b.truth, 3)), "cause": b.cause,
		})
	}
	return asJSON(a)
}

func asJSON(v any) []byte {
	text, err := json.MarshalIndent(v, "", "  ")
	if err != nil {
		panic("gen: " + err.Error()) // only our own plain types come here
	}
	return append(text, '\n')
}
