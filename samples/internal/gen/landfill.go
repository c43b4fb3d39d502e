package gen

import "math"

// The landfill, in US survey feet; every number is invented. Positions are
// whole tenths, heights and depths whole hundredths of a foot, as the wells
// are surveyed and gauged.
const (
	wasteEast  = 1_843_150.0 // centre of the mound under the waste
	wasteNorth = 612_880.0
	moundReach = 600.0 // feet from the centre to half of the mound's height
	gravity    = 0.83  // of the product that floats in two wells, relative to water
)

// well is a row of the well table.
type well struct {
	id          string
	east, north int // tenths of a foot
	point       int // elevation of the measuring point, hundredths
	groundLevel int // tenths
	screenTop   int // elevations, tenths
	screenFoot  int
	zone        string
	product     bool // product floats in it
}

// layout places the wells: position in feet from the site's corner, depth of
// the screen's middle and half its length, and the zone. Deep wells stand
// beside shallow ones.
var layout = []struct {
	id          string
	east, north float64
	zone        string
}{
	{"MW-01", 182.4, 1421.7, "shallow"}, {"MW-02", 611.9, 1588.2, "shallow"}, {"MW-03", 1154.0, 1633.5, "shallow"},
	{"MW-04", 1702.6, 1560.1, "shallow"}, {"MW-05", 2188.3, 1377.4, "shallow"}, {"MW-06", 2301.7, 905.8, "shallow"},
	{"MW-07", 2214.5, 402.2, "shallow"}, {"MW-08", 1688.1, 188.6, "shallow"}, {"MW-09", 1120.8, 121.3, "shallow"},
	{"MW-10", 566.2, 233.9, "shallow"}, {"MW-11", 148.6, 498.0, "shallow"}, {"MW-12", 1240.3, 902.7, "shallow"},
	{"MW-13", 1411.6, 748.5, "shallow"}, {"MW-14", 905.7, 1012.4, "shallow"}, {"MW-15", 671.1, 744.9, "shallow"},
	{"MW-16", 1588.8, 1150.2, "shallow"}, {"MW-17", 1842.0, 611.3, "shallow"}, {"MW-18", 1033.5, 525.6, "shallow"},
	{"MW-01D", 191.1, 1415.2, "deep"}, {"MW-04D", 1711.3, 1554.9, "deep"}, {"MW-07D", 2206.8, 409.7, "deep"},
	{"MW-10D", 574.5, 241.6, "deep"}, {"MW-12D", 1248.9, 895.4, "deep"}, {"MW-17D", 1850.2, 604.1, "deep"},
}

const (
	cornerEast  = 1_842_000.0
	cornerNorth = 612_000.0
)

// round is the state of the groundwater in one round: a plane in each zone,
// given at the centre of the waste, and the mound on the shallow one. The
// slopes are sides of whole-numbered right triangles, so that every gradient
// is a short decimal.
type round struct {
	name, date         string
	shallow            float64 // feet at the centre, without the mound
	shallowX, shallowY float64 // rise per foot east and north
	shallowGradient    float64
	mound              float64
	deep               float64
	deepX, deepY       float64
	deepGradient       float64
	status             map[string]string // wells without an ordinary reading
	thickness          map[string]int    // of floating product, hundredths
	drawdown           map[string]int    // of wells pumped shortly before, hundredths
}

var rounds = []round{
	{"2024-Q1", "2024-03-12", 408.60, -0.0036, 0.0048, 0.0060, 4.20, 406.90, -0.0024, 0.0032, 0.0040,
		map[string]string{"MW-18": "not measured"}, map[string]int{"MW-12": 32}, nil},
	{"2024-Q2", "2024-06-11", 409.85, -0.0040, 0.0042, 0.0058, 5.10, 407.75, -0.0028, 0.0021, 0.0035,
		map[string]string{"MW-11": "obstructed"}, map[string]int{"MW-12": 28}, nil},
	{"2024-Q3", "2024-09-10", 406.70, -0.0033, 0.0056, 0.0065, 3.60, 405.60, -0.0021, 0.0028, 0.0035,
		nil, map[string]int{"MW-12": 41, "MW-13": 6}, nil},
	{"2024-Q4", "2024-12-10", 407.35, -0.0039, 0.0052, 0.0065, 3.90, 406.05, -0.0024, 0.0032, 0.0040,
		map[string]string{"MW-09": "recently pumped"}, map[string]int{"MW-12": 35, "MW-13": 11}, map[string]int{"MW-09": 135}},
	{"2025-Q1", "2025-03-11", 408.95, -0.0028, 0.0045, 0.0053, 4.40, 407.20, -0.0027, 0.0036, 0.0045,
		map[string]string{"MW-05": "obstructed"}, map[string]int{"MW-12": 22, "MW-13": 4}, nil},
}

// shortScreens end so high that the well falls dry in a dry season.
var shortScreens = map[string]int{"MW-07": 4020, "MW-15": 4100} // tenths

// head returns the true head in feet at a place, in feet from zero.
func (r round) head(east, north float64, zone string) float64 {
	dx, dy := east-wasteEast, north-wasteNorth
	if zone == "deep" {
		return r.deep + float64(r.deepX*dx) + float64(r.deepY*dy)
	}
	q := (float64(dx*dx) + float64(dy*dy)) / (moundReach * moundReach)
	return r.shallow + float64(r.shallowX*dx) + float64(r.shallowY*dy) + r.mound/(1+q)
}

// wells surveys the layout: the land falls to the south-east, the waste is
// heaped up in the middle.
func wells() []well {
	r := random{612_880}
	var out []well
	for _, l := range layout {
		w := well{id: l.id, zone: l.zone, product: l.id == "MW-12" || l.id == "MW-13"}
		w.east = int(math.Round((cornerEast + l.east) * 10))
		w.north = int(math.Round((cornerNorth + l.north) * 10))
		e, n := float64(w.east)/10, float64(w.north)/10
		dx, dy := e-wasteEast, n-wasteNorth
		q := (float64(dx*dx) + float64(dy*dy)) / (450 * 450)
		land := 424.0 - float64(0.003*dx) + float64(0.004*dy) + 18/(1+float64(q*q))
		w.groundLevel = int(math.Round(land*10)) + r.between(-4, 4)
		w.point = w.groundLevel*10 + r.between(210, 310)
		// Water-table wells are screened about the mean head, deep ones below.
		mean := int(math.Round(rounds[0].head(e, n, l.zone) * 10))
		w.screenTop, w.screenFoot = mean+40, mean-110
		if l.zone == "deep" {
			w.screenTop, w.screenFoot = mean-420, mean-520
		}
		if foot, ok := shortScreens[l.id]; ok {
			w.screenTop, w.screenFoot = foot+100, foot
		}
		out = append(out, w)
	}
	return out
}

// reading is a row of the gauging table; depths in hundredths below the
// measuring point, none when the well had no level.
type reading struct {
	round, time, well string
	water             int
	product           int // depth to product
	hasWater          bool
	hasProduct        bool
	status            string
}

// gauged goes round the wells on each date, ten minutes apart.
func gauged() []reading {
	r := random{20240312}
	var out []reading
	for _, rd := range rounds {
		for i, w := range wells() {
			minute := 8*60 + 10 + 10*i
			g := reading{round: rd.name, well: w.id, status: "measured",
				time: rd.date + "T" + two(minute/60) + ":" + two(minute%60)}
			e, n := float64(w.east)/10, float64(w.north)/10
			head := int(math.Round(rd.head(e, n, w.zone)*100)) + r.between(-1, 1)
			if s, ok := rd.status[w.id]; ok {
				g.status = s
			}
			switch {
			case g.status == "obstructed" || g.status == "not measured":
			case head <= w.screenFoot*10:
				g.status = "dry"
			default:
				// Product of thickness t and gravity s presses the water down by s t.
				t := rd.thickness[w.id]
				level := head - int(math.Round(float64(gravity*float64(t)))) - rd.drawdown[w.id]
				g.water, g.hasWater = w.point-level, true
				g.product, g.hasProduct = g.water-t, t > 0
			}
			out = append(out, g)
		}
	}
	return out
}

func two(n int) string { return string([]byte{byte('0' + n/10), byte('0' + n%10)}) }

// flowAzimuth is the direction in which a head plane falls, degrees clockwise
// from north.
func flowAzimuth(dhdx, dhdy float64) float64 {
	az := math.Atan2(-dhdx, -dhdy) * 180 / math.Pi
	if az < 0 {
		az += 360
	}
	return math.Round(az*1e6) / 1e6
}
