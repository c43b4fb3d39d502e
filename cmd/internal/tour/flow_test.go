package tour

import (
	"encoding/json"
	"math"
	"os/exec"
	"path/filepath"
	"testing"

	"isofacet/samples"
)

// Each round of the landfill, through the program, from depths to directions: the
// plane's direction lies within its stated uncertainty of the generator's. In the deep
// zone the truth is a plane, and the stated uncertainty is that of the readings; in the
// shallow zone there is a mound on it, which the plane misses, and the stated
// uncertainty says so.
//
// A standard uncertainty is met by two thirds of all draws only. The heads of the
// sample are what they are, and all ten stay within one.
func TestLandfillDirectionsThroughTheProgram(t *testing.T) {
	var truth struct {
		Rounds []struct {
			Round   string
			Shallow struct {
				Gradient float64
				Azimuth  float64 `json:"flow_azimuth"`
			} `json:"shallow_without_mound"`
			Deep struct {
				Gradient float64
				Azimuth  float64 `json:"flow_azimuth"`
			}
		}
	}
	if err := json.Unmarshal([]byte(sample(t, samples.LandfillAnswers)), &truth); err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(filepath.Join(program(t), "isofacet"), "flow", "sample:"+samples.LandfillGauging, "--wells", "sample:"+samples.LandfillWells,
		"--sigma", "0.02", "--format", "csv", "--quiet")
	out, err := cmd.Output()
	if err != nil {
		t.Fatal(err)
	}
	rows := table(t, string(out))
	if len(truth.Rounds) != 5 || len(rows) != 10 {
		t.Fatalf("%d rounds, %d rows, want 5 and two rows each", len(truth.Rounds), len(rows))
	}
	for i, want := range truth.Rounds {
		for k, zone := range []string{"deep", "shallow"} {
			r := rows[2*i+k]
			azimuth, from, gradient := want.Deep.Azimuth, "given", want.Deep.Gradient
			if zone == "shallow" {
				azimuth, from, gradient = want.Shallow.Azimuth, "misfit", want.Shallow.Gradient
			}
			if r["round"] != want.Round || r["zone"] != zone || r["sigma_from"] != from || r["verdict"] != "sound" {
				t.Errorf("round %s, zone %s: %v", want.Round, zone, r)
			}
			off, sigma := number(t, r["azimuth"])-azimuth, number(t, r["azimuth_sigma"])
			t.Logf("%s %s: azimuth off by %+.3f, stated ± %.3f", want.Round, zone, off, sigma)
			if math.Abs(off) > sigma {
				t.Errorf("round %s, zone %s: azimuth %s ± %s, true %v", want.Round, zone, r["azimuth"], r["azimuth_sigma"], azimuth)
			}
			if off := number(t, r["gradient"]) - gradient; math.Abs(off) > 2*number(t, r["gradient_sigma"]) {
				t.Errorf("round %s, zone %s: gradient %s ± %s, true %v", want.Round, zone, r["gradient"], r["gradient_sigma"], gradient)
			}
		}
	}
}
