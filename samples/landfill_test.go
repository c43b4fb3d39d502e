package samples

import (
	"math"
	"testing"
)

type landfillAnswers struct {
	East    float64 `json:"centre_easting"`
	North   float64 `json:"centre_northing"`
	Reach   float64 `json:"mound_reach"`
	Gravity float64 `json:"product_specific_gravity"`
	Noise   float64 `json:"largest_head_noise"`
	Rounds  []struct {
		Round       string
		Shallow     headPlane         `json:"shallow_without_mound"`
		Mound       float64           `json:"mound_height"`
		Deep        headPlane         `json:"deep"`
		NotOrdinary map[string]string `json:"not_ordinary"`
	}
}

type headPlane struct {
	Head     float64 `json:"head_at_centre"`
	DhDx     float64 `json:"dh_dx"`
	DhDy     float64 `json:"dh_dy"`
	Gradient float64
	Azimuth  float64 `json:"flow_azimuth"`
}

// Every depth, reduced by hand with the well table, gives the head that the
// answers' formula gives, and the true-heads table agrees with both.
func TestLandfillReducesToTheAnswers(t *testing.T) {
	var a landfillAnswers
	answers(t, LandfillAnswers, &a)
	wells := map[string]map[string]string{}
	for _, w := range rows(t, LandfillWells) {
		wells[w["well"]] = w
	}
	if len(wells) != 24 || len(a.Rounds) != 5 {
		t.Fatalf("%d wells, %d rounds, want 24 and 5", len(wells), len(a.Rounds))
	}
	truth := map[string]float64{}
	for _, h := range rows(t, LandfillTrueHeads) {
		truth[h["round"]+" "+h["well"]] = number(t, h["head"])
	}
	readings := rows(t, LandfillGauging)
	if len(readings) != 5*24 {
		t.Errorf("%d readings, want one per well and round", len(readings))
	}
	status, products := map[string]int{}, map[string]bool{}
	for _, g := range readings {
		w := wells[g["well"]]
		status[g["status"]]++
		for _, r := range a.Rounds {
			if r.Round != g["round"] {
				continue
			}
			dx, dy := number(t, w["easting"])-a.East, number(t, w["northing"])-a.North
			head := r.Shallow.Head + r.Shallow.DhDx*dx + r.Shallow.DhDy*dy + r.Mound/(1+(dx*dx+dy*dy)/(a.Reach*a.Reach))
			if w["zone"] == "deep" {
				head = r.Deep.Head + r.Deep.DhDx*dx + r.Deep.DhDy*dy
			}
			if d := truth[g["round"]+" "+g["well"]] - head; math.Abs(d) > 0.0006 {
				t.Errorf("%s %s: the table of true heads is %.4f ft off the formula", g["round"], g["well"], d)
			}
			if s := r.NotOrdinary[g["well"]]; s != "" && s != g["status"] || s == "" && g["status"] != "measured" {
				t.Errorf("%s %s: status %q, answers say %q", g["round"], g["well"], g["status"], s)
			}
			foot := number(t, w["screen_bottom_elevation"])
			if g["depth_to_water"] == "" {
				if dry := head <= foot+a.Noise; dry != (g["status"] == "dry") {
					t.Errorf("%s %s: status %s with head %.2f over the screen's foot %.1f", g["round"], g["well"], g["status"], head, foot)
				}
				continue
			}
			depth := number(t, g["depth_to_water"])
			measured := number(t, w["measuring_point_elevation"]) - depth
			if g["depth_to_product"] != "" {
				products[g["well"]] = true
				measured += number(t, w["specific_gravity"]) * (depth - number(t, g["depth_to_product"]))
			}
			d := measured - head
			switch {
			case g["status"] == "recently pumped":
				if d > -1 {
					t.Errorf("%s %s was pumped, yet its head is only %.2f ft off", g["round"], g["well"], d)
				}
			case math.Abs(d) > a.Noise+0.0006:
				t.Errorf("%s %s: reduced head is %.3f ft off the formula", g["round"], g["well"], d)
			}
			if head <= foot {
				t.Errorf("%s %s was measured below its screen's foot", g["round"], g["well"])
			}
		}
	}
	if status["dry"] < 2 || status["obstructed"] != 2 || status["recently pumped"] != 1 || len(products) != 2 {
		t.Errorf("statuses %v, product in %v", status, products)
	}
}

func TestLandfillHeadsAreTheFirstRound(t *testing.T) {
	truth := map[string]float64{}
	for _, h := range rows(t, LandfillTrueHeads) {
		if h["round"] == "2024-Q1" && h["zone"] == "shallow" {
			truth[h["well"]] = number(t, h["head"])
		}
	}
	heads := rows(t, LandfillHeads)
	if len(heads) != 17 { // 18 shallow wells, one of them not measured
		t.Errorf("%d heads, want 17", len(heads))
	}
	for _, h := range heads {
		if d := number(t, h["head"]) - truth[h["id"]]; math.Abs(d) > 0.021 {
			t.Errorf("%s: head is %.3f ft off the truth", h["id"], d)
		}
	}
}

// The gradient and azimuth given are those of the slopes given, and the
// plane through the deep wells' true heads has them: three wells suffice.
func TestLandfillGradients(t *testing.T) {
	var a landfillAnswers
	answers(t, LandfillAnswers, &a)
	place := map[string][2]float64{}
	for _, w := range rows(t, LandfillWells) {
		place[w["well"]] = [2]float64{number(t, w["easting"]), number(t, w["northing"])}
	}
	heads := map[string]float64{}
	for _, h := range rows(t, LandfillTrueHeads) {
		heads[h["round"]+" "+h["well"]] = number(t, h["head"])
	}
	for _, r := range a.Rounds {
		for zone, p := range map[string]headPlane{"shallow": r.Shallow, "deep": r.Deep} {
			if math.Abs(math.Hypot(p.DhDx, p.DhDy)-p.Gradient) > 1e-12 {
				t.Errorf("%s %s: slopes %v, %v do not make the gradient %v", r.Round, zone, p.DhDx, p.DhDy, p.Gradient)
			}
			down := p.Azimuth * math.Pi / 180
			if math.Abs(-p.Gradient*math.Sin(down)-p.DhDx) > 1e-9 || math.Abs(-p.Gradient*math.Cos(down)-p.DhDy) > 1e-9 {
				t.Errorf("%s %s: azimuth %v does not fit the slopes", r.Round, zone, p.Azimuth)
			}
		}
		o, p, q := place["MW-10D"], place["MW-04D"], place["MW-07D"]
		h := func(id string) float64 { return heads[r.Round+" "+id] }
		x1, y1, h1 := p[0]-o[0], p[1]-o[1], h("MW-04D")-h("MW-10D")
		x2, y2, h2 := q[0]-o[0], q[1]-o[1], h("MW-07D")-h("MW-10D")
		det := x1*y2 - x2*y1
		dx, dy := (h1*y2-h2*y1)/det, (x1*h2-x2*h1)/det
		if math.Abs(dx-r.Deep.DhDx) > 2e-6 || math.Abs(dy-r.Deep.DhDy) > 2e-6 {
			t.Errorf("%s: three deep wells give slopes %.6f, %.6f, answers say %v, %v", r.Round, dx, dy, r.Deep.DhDx, r.Deep.DhDy)
		}
	}
}
