package gen

import (
	"encoding/json"
	"math"
	"strconv"
)

// landfillFiles returns the landfill's files without their folder.
func landfillFiles() map[string][]byte {
	return map[string][]byte{
		"wells.csv":         wellText(),
		"gauging.csv":       gaugingText(),
		"heads-2024-q1.csv": headText(rounds[0].name),
		"true-heads.csv":    trueHeadText(),
		"answers.json":      landfillAnswers(),
		"heads.toml":        []byte(landfillJob),
	}
}

func wellText() []byte {
	var t table
	t.row("well", "easting", "northing", "measuring_point_elevation", "ground_elevation",
		"screen_top_elevation", "screen_bottom_elevation", "zone", "specific_gravity")
	for _, w := range wells() {
		sg := ""
		if w.product {
			sg = strconv.FormatFloat(gravity, 'f', 2, 64)
		}
		t.row(w.id, fixed(w.east, 1), fixed(w.north, 1), fixed(w.point, 2), fixed(w.groundLevel, 1),
			fixed(w.screenTop, 1), fixed(w.screenFoot, 1), w.zone, sg)
	}
	return []byte(t.String())
}

func gaugingText() []byte {
	var t table
	t.row("round", "time", "well", "depth_to_product", "depth_to_water", "status")
	for _, g := range gauged() {
		water, product := "", ""
		if g.hasWater {
			water = fixed(g.water, 2)
		}
		if g.hasProduct {
			product = fixed(g.product, 2)
		}
		t.row(g.round, g.time, g.well, product, water, g.status)
	}
	return []byte(t.String())
}

// headText reduces one round by hand for the zone of the water table: head =
// measuring point - depth to water + thickness x specific gravity, ordinary
// readings only.
func headText(round string) []byte {
	byID := map[string]well{}
	for _, w := range wells() {
		byID[w.id] = w
	}
	var t table
	t.row("id", "easting", "northing", "head")
	for _, g := range gauged() {
		w := byID[g.well]
		if g.round != round || g.status != "measured" || w.zone != "shallow" {
			continue
		}
		head := w.point - g.water
		if g.hasProduct {
			head += int(math.Round(float64(gravity * float64(g.water-g.product))))
		}
		t.row(w.id, fixed(w.east, 1), fixed(w.north, 1), fixed(head, 2))
	}
	return []byte(t.String())
}

// trueHeadText gives the head of every well in every round, also where it
// could not be measured.
func trueHeadText() []byte {
	var t table
	t.row("round", "well", "zone", "head")
	for _, r := range rounds {
		for _, w := range wells() {
			h := r.head(float64(w.east)/10, float64(w.north)/10, w.zone)
			t.row(r.name, w.id, w.zone, fixed(int(math.Round(h*1000)), 3))
		}
	}
	return []byte(t.String())
}

type planeAnswer struct {
	Head        json.Number `json:"head_at_centre"`
	DhDx        json.Number `json:"dh_dx"`
	DhDy        json.Number `json:"dh_dy"`
	Gradient    json.Number `json:"gradient"`
	FlowAzimuth json.Number `json:"flow_azimuth"`
}

type roundAnswer struct {
	Round       string            `json:"round"`
	Date        string            `json:"date"`
	Shallow     planeAnswer       `json:"shallow_without_mound"`
	MoundHeight json.Number       `json:"mound_height"`
	Deep        planeAnswer       `json:"deep"`
	NotOrdinary map[string]string `json:"not_ordinary"`
	Product     map[string]string `json:"product_thickness"`
}

func landfillAnswers() []byte {
	decimal := func(x float64, places int) json.Number {
		return json.Number(strconv.FormatFloat(x, 'f', places, 64))
	}
	asPlane := func(h, dx, dy, g float64) planeAnswer {
		return planeAnswer{decimal(h, 2), decimal(dx, 4), decimal(dy, 4), decimal(g, 4), decimal(flowAzimuth(dx, dy), 6)}
	}
	var list []roundAnswer
	readings := gauged()
	for _, r := range rounds {
		a := roundAnswer{
			Round: r.name, Date: r.date, MoundHeight: decimal(r.mound, 2),
			Shallow:     asPlane(r.shallow, r.shallowX, r.shallowY, r.shallowGradient),
			Deep:        asPlane(r.deep, r.deepX, r.deepY, r.deepGradient),
			NotOrdinary: map[string]string{}, Product: map[string]string{},
		}
		for _, g := range readings {
			if g.round == r.name && g.status != "measured" {
				a.NotOrdinary[g.well] = g.status
			}
		}
		for id, t := range r.thickness {
			a.Product[id] = fixed(t, 2)
		}
		list = append(list, a)
	}
	return asJSON(struct {
		About   string        `json:"about"`
		Units   string        `json:"units"`
		East    json.Number   `json:"centre_easting"`
		North   json.Number   `json:"centre_northing"`
		Reach   json.Number   `json:"mound_reach"`
		Formula string        `json:"shallow_head"`
		Gravity json.Number   `json:"product_specific_gravity"`
		Noise   json.Number   `json:"largest_head_noise"`
		Rounds  []roundAnswer `json:"rounds"`
	}{
		"The landfill's true heads, from which the depths to water were made. Shallow wells see a plane and a mound, deep wells a plane alone.",
		"US survey feet; azimuths in degrees clockwise from north; unstated in the tables",
		decimal(wasteEast, 1), decimal(wasteNorth, 1), decimal(moundReach, 1),
		"head_at_centre + dh_dx*(x-centre_easting) + dh_dy*(y-centre_northing) + mound_height/(1 + r^2/mound_reach^2)",
		decimal(gravity, 2), "0.02", list,
	})
}
