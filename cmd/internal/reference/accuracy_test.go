package reference

import (
	"encoding/json"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// accuracyFigures is what accuracy reports of a group, in full digits.
type accuracyFigures struct {
	Count                int     `json:"count"`
	Mean                 float64 `json:"mean"`
	Median               float64 `json:"median"`
	StdDev               float64 `json:"standard_deviation"`
	Skewness             float64 `json:"skewness"`
	ExcessKurtosis       float64 `json:"excess_kurtosis"`
	SampleSkewness       float64 `json:"sample_skewness"`
	SampleExcessKurtosis float64 `json:"sample_excess_kurtosis"`
	RMSE                 float64 `json:"rmse"`
	MeanSize             float64 `json:"mean_without_sign"`
	Percentile95         float64 `json:"percentile_95"`
	Min                  float64 `json:"min"`
	Max                  float64 `json:"max"`
	NSSDA95              float64 `json:"nssda_95"`
}

type accuracyFound struct {
	Checkpoints struct{ Read, Compared, Outside int }
	All         accuracyFigures
}

// accuracy runs the program and returns its report and its residuals.
func accuracy(t *testing.T, args ...string) (accuracyFound, []row) {
	t.Helper()
	dir := t.TempDir()
	report, residuals := filepath.Join(dir, "report.json"), filepath.Join(dir, "residuals.csv")
	isofacet(t, append([]string{"accuracy", "--decimals", "full", "--out", "report=" + report, "--out", "residuals=" + residuals}, args...)...)
	text, err := os.ReadFile(report)
	if err != nil {
		t.Fatal(err)
	}
	var f accuracyFound
	if err := json.Unmarshal(text, &f); err != nil {
		t.Fatal(err)
	}
	return f, fileRows(t, residuals)
}

// TestCheckpoints holds every n-th reading of a survey back and compares the surface
// of the others with them: residuals to the general tolerance, statistics to 1e-8.
// Source: the check points files of the reference folder, computed for this project
// by other means; the surveys are those of datasets_test.go. Once the held back
// readings come from a file, once they are held out by a pattern.
func TestCheckpoints(t *testing.T) {
	for _, c := range []struct {
		set     string
		every   int
		x, y, z string
	}{
		{"meuse", 5, "x_m_RD", "y_m_RD", "elev_m_above_local_river_bed"},
		{"topo", 4, "x_50ft", "y_50ft", "z_ft"},
	} {
		t.Run(c.set, func(t *testing.T) {
			values, statistics := compare(t, "residuals"), compare(t, "statistics")
			head := "id,x,y,z,code\n"
			all, held, used := head, head, head
			for _, r := range table(t, "datasets/"+c.set+"_points.csv") {
				id, code := r.count(t, "id"), "surface"
				if id%c.every == 0 {
					code = "check"
				}
				line := strings.Join([]string{strconv.Itoa(id), r.get(t, c.x), r.get(t, c.y), r.get(t, c.z), code}, ",") + "\n"
				all += line
				if code == "check" {
					held += line
				} else {
					used += line
				}
			}
			want := map[string]float64{}
			for _, r := range table(t, "accuracy/checkpoints_"+c.set+"_stats.csv") {
				if name := r.get(t, "statistic"); name != "rule" && name != "unit" {
					want[name] = r.number(t, "value")
				}
			}
			byFile, rowsByFile := accuracy(t, "--checkpoints", file(t, "held.csv", held), file(t, "used.csv", used))
			byCode, rowsByCode := accuracy(t, "--checkpoints", "code=check", file(t, "all.csv", all))
			same(t, "figures by file and by code", byFile.All, byCode.All)
			same(t, "rows by code", len(rowsByCode), len(rowsByFile))

			same(t, "check points", byFile.Checkpoints.Read, int(want["check points"]))
			same(t, "compared", byFile.All.Count, int(want["check points inside the surface"]))
			for i, r := range table(t, "accuracy/checkpoints_"+c.set+".csv") {
				got := rowsByFile[i]
				same(t, "id", got.get(t, "id"), r.get(t, "id"))
				if r.get(t, "z_surface") == "outside" {
					same(t, "place of "+r.get(t, "id"), got.get(t, "place"), "outside")
					continue
				}
				tolerance := 1e-9 * (1 + want["max"] - want["min"])
				if c.set == "topo" {
					tolerance = 1e-9 * (1 + 300) // the range of the heights
				}
				values.near(r.get(t, "id"), got.number(t, "residual"), r.number(t, "surface_minus_check"), tolerance)
			}
			g := byFile.All
			for name, v := range map[string]float64{
				"mean": g.Mean, "median": g.Median, "std_n1": g.StdDev, "rmse": g.RMSE, "mae": g.MeanSize, "skew_g1": g.Skewness,
				"skew_G1": g.SampleSkewness, "kurt_g2": g.ExcessKurtosis, "kurt_G2": g.SampleExcessKurtosis, "min": g.Min, "max": g.Max,
				"p95_abs": g.Percentile95, "NSSDA vertical 95% = 1.9600*RMSEz": g.NSSDA95,
			} {
				if _, ok := want[name]; !ok {
					t.Errorf("no figure %q", name)
				}
				statistics.near(name, v, want[name], 1e-8*(1+max(want[name], -want[name])))
			}
		})
	}
}

// TestTwentyFiveAlike: 25 checkpoints, all 0.05 below the surface. Source: the
// definitions (mean 0.05, error 0.05, 1.96 x 0.05 at 95 %).
func TestTwentyFiveAlike(t *testing.T) {
	surface := file(t, "plane.csv", "x,y,z\n0,0,7\n60,0,7\n0,60,7\n60,60,7\n")
	checks := "id,x,y,z\n"
	for i := range 25 {
		checks += strconv.Itoa(i) + "," + strconv.Itoa(10*(i%5)+5) + "," + strconv.Itoa(10*(i/5)+6) + ",6.95\n"
	}
	f, _ := accuracy(t, "--checkpoints", file(t, "checks.csv", checks), surface)
	figures := compare(t, "figures")
	same(t, "count", f.All.Count, 25)
	figures.near("mean", f.All.Mean, 0.05, 1e-15)
	figures.near("RMSE", f.All.RMSE, 0.05, 1e-15)
	figures.near("95 %", f.All.NSSDA95, 0.098, 1e-15)
}
