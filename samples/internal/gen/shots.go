package gen

import (
	"math"
	"slices"
)

// shot is one reading of the gravel pit as the field book has it. Coordinates
// are whole millimetres so that text and truth agree to the last digit.
type shot struct {
	name      string
	east      int // millimetres from the site's corner
	north     int
	elevation int // millimetres
	code      string
}

func (s shot) place() place { return place{float64(s.east) / 1000, float64(s.north) / 1000} }

// survey is the field book, and what is known about it.
type survey struct {
	shots    []shot
	at       map[[2]int]int // place in millimetres -> its shot, while shots are taken
	ground   surface
	random   random
	places   int         // different ones
	twice    [][2]string // names of shots stored twice
	blunders []blunder
	lines    []fieldLine
	peak     int // the shot on top of the stockpile
}

type blunder struct {
	name        string
	recorded    int // millimetres
	truth       int
	code, cause string
}

// fieldLine is a line of the site as it was surveyed: its shots in order.
type fieldLine struct {
	file, name string
	shots      []int
}

const (
	lineStep   = 5.0  // metres between shots along a line
	spotStep   = 12.0 // between spot heights
	spotClear  = 1.5  // from a spot height to any other shot
	heightUnit = 20   // millimetres, see random.noise: at most 40, standard deviation 12
	postHeight = 1100 // of a boundary post above the ground
)

// record adds a shot at a place, or returns the one that is already there:
// where lines meet, one shot belongs to both.
func (s *survey) record(p place, code string) int {
	e, n := int(math.Round(p.u*1000)), int(math.Round(p.v*1000))
	if i, ok := s.at[[2]int{e, n}]; ok {
		return i
	}
	z, _ := siteZ(s.ground, float64(e)/1000, float64(n)/1000)
	h := int(math.Round(z*1000)) + s.random.noise(heightUnit)
	s.at[[2]int{e, n}] = len(s.shots)
	s.shots = append(s.shots, shot{"", e, n, h, code})
	return len(s.shots) - 1
}

func (s *survey) along(file, name string, l line, code string) {
	f := fieldLine{file: file, name: name}
	for _, p := range l.every(lineStep) {
		i := s.record(p, code)
		if k := len(f.shots); k == 0 || f.shots[k-1] != i {
			f.shots = append(f.shots, i)
		}
	}
	s.lines = append(s.lines, f)
}

// edges lists which kinds of ground meet in which line, and its code.
var edges = []struct{ name, one, other, code string }{
	{"crest", "ground", "upper face", "CR"},
	{"crest-ramp", "ground", "ramp side", "CR"},
	{"ramp-top", "ground", "ramp", "CR"},
	{"toe-upper", "bench", "upper face", "TOE"},
	{"crest-lower", "bench", "lower face", "CR"},
	{"toe-lower", "floor", "lower face", "TOE"},
	{"toe-ramp", "floor", "ramp side", "TOE"},
	{"toe-ramp-bench", "bench", "ramp side", "TOE"},
	{"toe-ramp-upper", "upper face", "ramp side", "TOE"},
	{"toe-ramp-lower", "lower face", "ramp side", "TOE"},
	{"ramp-foot", "floor", "ramp", "TOE"},
	{"haul-road", "ramp", "ramp side", "HR"},
	{"crest-sump", "floor", "bank", "CR"},
}

// posts stand along the boundary, which is not convex: a neighbour's field
// cuts in from the east.
var posts = []place{
	{8.214, 20.377}, {118.902, 11.460}, {250.118, 14.083}, {394.560, 9.274}, {409.733, 60.915},
	{402.281, 149.640}, {331.507, 170.226}, {336.049, 240.871}, {404.918, 261.335}, {398.662, 324.708},
	{251.390, 331.154}, {109.847, 322.519}, {14.226, 329.983}, {6.105, 215.748}, {9.871, 113.502},
}

// surveyed walks the site: posts, lines, the road, the pile, then spot heights.
func surveyed() *survey {
	s := &survey{at: map[[2]int]int{}, ground: pit(), random: random{5_621_400}}
	pieces := pitPieces()

	boundary := fieldLine{file: "boundary", name: "boundary"}
	for _, p := range posts {
		i := s.record(p, "BP")
		s.shots[i].elevation += postHeight
		boundary.shots = append(boundary.shots, i)
	}
	boundary.shots = append(boundary.shots, boundary.shots[0])
	s.lines = append(s.lines, boundary)

	for _, e := range edges {
		for k, l := range meeting(s.ground, pieces, e.one, e.other) {
			s.along("breaklines", e.name+"-"+string(rune('1'+k)), l, e.code)
		}
	}
	for k, top := range meeting(s.ground, pieces, "ground", "ramp")[0] { // the road on the ground
		gate := place{top.u - 100*axisU, top.v - 100*axisV}
		s.along("breaklines", "haul-road-"+string(rune('3'+k)), line{top, gate}, "HR")
	}
	for _, l := range meeting(s.ground, pieces, "water", "bank") {
		s.along("pond", "pond", l, "PE")
	}
	s.pile()
	s.spots()
	s.finish()
	return s
}

// directions returns 4n unit vectors counter-clockwise from east, nearly even,
// from the rational points of the circle.
func directions(n int) []place {
	var quarter, out []place
	for k := range n {
		t := float64(k) / float64(n)
		tt := float64(t * t)
		quarter = append(quarter, place{(1 - tt) / (1 + tt), 2 * t / (1 + tt)})
	}
	for q := range 4 {
		for _, d := range quarter {
			for range q {
				d = place{-d.v, d.u}
			}
			out = append(out, d)
		}
	}
	return out
}

// pile shoots the stockpile: its toe, its upper edge, the middle of its face
// and its top.
func (s *survey) pile() {
	ring := func(n int, radius func(d place) float64) (shots []int) {
		for _, d := range directions(n) {
			r := radius(d)
			shots = append(shots, s.record(place{pileEast + float64(r*d.u), pileNorth + float64(r*d.v)}, "SP"))
		}
		return shots
	}
	toe := func(d place) float64 {
		return pileHeight / (faceSlope + float64(ground.a*d.u) + float64(ground.b*d.v))
	}
	edge := pileCut / faceSlope
	shots := ring(6, toe)
	s.lines = append(s.lines, fieldLine{"stockpile-toe", "stockpile-toe", append(shots, shots[0])})
	ring(4, func(d place) float64 { return (2*toe(d) + edge) / 3 })
	ring(3, func(d place) float64 { return (toe(d) + 2*edge) / 3 })
	ring(2, func(place) float64 { return edge })
	s.peak = s.record(place{pileEast, pileNorth}, "SP")
}

// spots walks the site to and fro and takes a height about every spotStep
// metres, except in the water, on the pile, and where another shot is close.
func (s *survey) spots() {
	taken := len(s.shots)
	rows, cols := int(math.Floor(siteNorth/spotStep)), int(math.Floor(siteEast/spotStep))
	for row := range rows {
		for k := range cols {
			col := k
			if row%2 == 1 {
				col = cols - 1 - k
			}
			p := place{
				float64((float64(col)+0.5)*spotStep) + float64(s.random.between(-4000, 4000))/1000,
				float64((float64(row)+0.5)*spotStep) + float64(s.random.between(-4000, 4000))/1000,
			}
			_, name := siteZ(s.ground, p.u, p.v)
			if name == "water" || name == "stockpile" || name == "stockpile top" {
				continue
			}
			free := true
			for _, t := range s.shots[:taken] {
				free = free && distance(p, t.place()) >= spotClear
			}
			if free {
				s.record(p, "GR")
			}
		}
	}
}

// finish names the shots, stores three of them twice and spoils two.
func (s *survey) finish() {
	s.places = len(s.shots)
	again := map[int]bool{140: true, 618: true, 1203: true}
	moved := make([]int, len(s.shots)) // new number of every shot
	var book []shot
	number := 1001
	for i, sh := range s.shots {
		moved[i] = len(book)
		if sh.code == "BP" {
			sh.name = "P" + itoa(i+1)
			book = append(book, sh)
			continue
		}
		sh.name = itoa(number)
		number++
		book = append(book, sh)
		if again[i] {
			twin := sh
			twin.name = itoa(number)
			number++
			book = append(book, twin)
			s.twice = append(s.twice, [2]string{sh.name, twin.name})
		}
	}
	s.shots, s.at = book, nil // its numbers no longer hold
	s.peak = moved[s.peak]
	for _, l := range s.lines {
		for k := range l.shots {
			l.shots[k] = moved[l.shots[k]]
		}
	}
	s.spoil("ground", func(z int) int { return z/100_000*10_000 + z%10_000 }, // 217.345 -> 27.345
		"a digit of the height was dropped")
	s.spoil("floor", func(z int) int { return z + 1200 },
		"the rod was one section of 1.200 m longer than noted")
}

// spoil changes the height of the spot height nearest to the middle of the
// named ground's spot heights in the order of the walk.
func (s *survey) spoil(name string, change func(z int) int, cause string) {
	once := func(n string) bool {
		return !slices.ContainsFunc(s.twice, func(pair [2]string) bool { return pair[0] == n || pair[1] == n })
	}
	var candidates []int
	for i, sh := range s.shots {
		p := sh.place()
		if _, at := siteZ(s.ground, p.u, p.v); at == name && sh.code == "GR" && once(sh.name) {
			candidates = append(candidates, i)
		}
	}
	sh := &s.shots[candidates[len(candidates)/2]]
	b := blunder{name: sh.name, truth: sh.elevation, recorded: change(sh.elevation), code: sh.code, cause: cause}
	sh.elevation = b.recorded
	s.blunders = append(s.blunders, b)
}
