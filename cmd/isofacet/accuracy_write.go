package main

import (
	"bufio"
	"encoding/json"
	"fmt"
	"io"
	"strings"
	"text/tabwriter"

	"github.com/paulmach/orb"

	"isofacet/interp/accuracy"
	"isofacet/io/geojson"
	"isofacet/io/numtext"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

// accuracyReport is what accuracy writes.
type accuracyReport struct {
	Residual    string            `json:"residual"` // what it is
	Checkpoints *checkpointCounts `json:"checkpoints,omitempty"`
	Spread      *spreadFigures    `json:"spread,omitempty"`
	All         *groupFigures     `json:"all,omitempty"`
	By          string            `json:"by,omitempty"`
	Groups      []groupFigures    `json:"groups,omitempty"`
	// OwnError is the checkpoints' own, where it is given.
	OwnError    *number             `json:"checkpoints_error,omitempty"`
	Asked       *asked              `json:"asked,omitempty"`
	LeaveOneOut *leaveOneOutFigures `json:"leave_one_out,omitempty"`

	c         *checkpoints
	by        parsed[readings.Role]
	rows      []residual
	residuals []float64
	places    []orb.Point
	outside   int
	spread    accuracy.Spread
	xy, z     int // digits
	own       float64
	combined  bool
}

type checkpointCounts struct {
	Read     int `json:"read"`
	Compared int `json:"compared"`
	Outside  int `json:"outside"`
	Merged   int `json:"merged"`
	LeftOut  int `json:"left_out"`
	Refused  int `json:"refused"`
}

type spreadFigures struct {
	Quadrants [4]int `json:"quadrants_sw_se_nw_ne"`
	Closest   number `json:"closest_two"`
	Diagonal  number `json:"diagonal"`
	Even      bool   `json:"even"`
}

// leaveOneOutFigures say how far readings are from the surface of all the others.
type leaveOneOutFigures struct {
	Predicted int          `json:"predicted"`
	Outline   int          `json:"outline"`  // that cannot be predicted
	OnLines   int          `json:"on_lines"` // of those predicted
	Figures   groupFigures `json:"figures"`
}

// asked is how many checkpoints the standards ask for at least.
type asked struct {
	NSSDA     int `json:"nssda"`
	ASPRS2023 int `json:"asprs_2023"`
}

// groupFigures are the statistics of a group of checkpoints.
type groupFigures struct {
	Name                 string `json:"name"`
	Count                int    `json:"count"`
	Mean                 number `json:"mean"`
	Median               number `json:"median"`
	StdDev               number `json:"standard_deviation"`
	Skewness             number `json:"skewness"`
	ExcessKurtosis       number `json:"excess_kurtosis"`
	SampleSkewness       number `json:"sample_skewness"`
	SampleExcessKurtosis number `json:"sample_excess_kurtosis"`
	RMSE                 number `json:"rmse"`
	MeanSize             number `json:"mean_without_sign"`
	Percentile95         number `json:"percentile_95"`
	Min                  number `json:"min"`
	Max                  number `json:"max"`
	NSSDA95              number `json:"nssda_95"`
	RMSE2023             number `json:"asprs_2023_rmse"` // the checkpoints' own error in it
	Interval1990         number `json:"interval_1990"`
	IntervalNMAS         number `json:"interval_nmas"`
}

// momentDigits are enough for skewness and kurtosis, which have no unit.
const momentDigits = 4

// figures describes a group.
func (r *accuracyReport) figures(name string, residuals []float64) groupFigures {
	s := accuracy.Describe(residuals)
	moments := momentDigits
	if r.z < 0 {
		moments = r.z
	}
	z := func(v float64) number { return number{v, r.z} }
	m := func(v float64) number { return number{v, moments} }
	return groupFigures{
		name, s.Count, z(s.Mean), z(s.Median), z(s.StdDev), m(s.Skewness), m(s.ExcessKurtosis), m(s.SampleSkewness), m(s.SampleExcessKurtosis),
		z(s.RMSE), z(s.MeanSize), z(s.Percentile95), z(s.Min), z(s.Max),
		z(accuracy.NSSDAVertical(s.RMSE)), z(accuracy.Combined(s.RMSE, r.own)), z(accuracy.Interval1990(s.RMSE)), z(accuracy.IntervalNMAS(s.RMSE)),
	}
}

// write writes every output.
func (a *accuracyCommand) write(list []*input, l *loaded, r *accuracyReport, out *outputs) error {
	r.Residual = "surface minus checkpoint"
	r.By = a.by.text
	if r.c != nil {
		r.Asked = &asked{accuracy.LeastNSSDA, accuracy.Least2023}
	}
	if r.combined {
		r.OwnError = &number{r.own, r.z}
	}
	if a.rec != nil {
		a.recordReadings(list, l)
		a.rec.Stable.Result = r
	}
	for _, d := range out.list {
		if err := out.write(d, func(d *destination) error {
			switch {
			case d.part == "residuals" && d.format == formatGeoJSON:
				return a.writeFeatures(d, a.featureOptions(a.labels(""), r.xy, r.z), r.features)
			case d.part == "residuals":
				return r.writeRows(d.w)
			case d.format == formatJSON:
				enc := json.NewEncoder(d.w)
				enc.SetEscapeHTML(false)
				enc.SetIndent("", "  ")
				return enc.Encode(r)
			case d.format == formatCSV:
				return r.writeGroups(d.w)
			}
			return r.writeText(d.w, &a.reading)
		}); err != nil {
			return err
		}
	}
	return out.commit()
}

// groups returns all, and then the groups.
func (r *accuracyReport) groups() []groupFigures {
	var list []groupFigures
	if r.All != nil {
		list = append(list, *r.All)
	}
	list = append(list, r.Groups...)
	if r.LeaveOneOut != nil {
		list = append(list, r.LeaveOneOut.Figures)
	}
	return list
}

// writeText writes the report for people.
func (r *accuracyReport) writeText(w io.Writer, labels *reading) error {
	b := bufio.NewWriter(w)
	line := func(subject, format string, values ...any) {
		fmt.Fprintf(b, "%-11s "+format+"\n", append([]any{subject}, values...)...)
	}
	if c := r.Checkpoints; c != nil {
		line("checkpoints", "%d read: %d compared, %d outside the surface, %d merged, %d left out, %d refused", c.Read, c.Compared, c.Outside, c.Merged, c.LeftOut, c.Refused)
	}
	if p := r.LeaveOneOut; p != nil {
		line("left out", "one by one: %s predicted from all the others, %d of them on lines; %d on the outline cannot be", countedVertices(p.Predicted), p.OnLines, p.Outline)
	}
	line("residuals", "surface minus what was measured, in the unit of z: above zero the surface is too high")
	for _, label := range [][2]string{{"system", labels.crs.String()}, {"datum xy", labels.horizontalDatum.String()}, {"datum z", labels.verticalDatum.String()}} {
		if label[1] != "" {
			line(label[0], "%s", label[1])
		}
	}
	t := tabwriter.NewWriter(b, 0, 0, 2, ' ', tabwriter.AlignRight)
	fmt.Fprintln(t, "group\tcount\tmean\tmedian\tstd dev\tskewness\tkurtosis\tRMSE\t95th pct\tmin\tmax\t")
	for _, g := range r.groups() {
		name := g.Name
		if name == "" {
			name = "(none)"
		}
		fmt.Fprintf(t, "%s\t%d\t%v\t%v\t%v\t%v\t%v\t%v\t%v\t%v\t%v\t\n", name, g.Count, g.Mean, g.Median, g.StdDev, g.Skewness, g.ExcessKurtosis, g.RMSE, g.Percentile95, g.Min, g.Max)
	}
	t.Flush()
	if r.All != nil {
		r.writeStandards(line)
	}
	if r.LeaveOneOut != nil {
		line("note", "leaving out says how well readings agree and how dense they are for this ground; an error that all share does not show")
	}
	line("caution", "says how well the surface fits what it is compared with; which accuracy class a survey meets is for a licensed person to state")
	return b.Flush()
}

// writeStandards writes what the standards make of the checkpoints.
func (r *accuracyReport) writeStandards(line func(subject, format string, values ...any)) {
	g := r.All
	line("NSSDA", "vertical accuracy at 95 %%: %v, which is 1.9600 x RMSE; tested by %s, at least %d asked", g.NSSDA95, counted(g.Count, "checkpoint"), accuracy.LeastNSSDA)
	line("", "(FGDC-STD-007.3-1998; takes the errors to be normal and without a bias, and the checkpoints to be independent and more accurate)")
	text := fmt.Sprintf("RMSE %v; the checkpoints' own error is not given, and not in it", g.RMSE)
	if r.combined {
		text = fmt.Sprintf("RMSE %v: %v against the checkpoints, combined with their own error %v", g.RMSE2023, g.RMSE, *r.OwnError)
	}
	line("ASPRS 2023", "vertical %s; %s, at least %d asked", text, counted(g.Count, "checkpoint"), accuracy.Least2023)
	line("interval", "%v supported by 3 x RMSE (ASPRS 1990, class 1), %v by 3.2898 x RMSE (NMAS 1947)", g.Interval1990, g.IntervalNMAS)
	if usual := accuracy.Usual(max(g.Interval1990.v, g.IntervalNMAS.v)); usual == usual {
		line("", "the next of the intervals in use is %s", numtext.Append(nil, usual, -1))
	}
	q := r.Spread.Quadrants
	even := "the NSSDA's advice (a fifth in each quadrant, a tenth of the diagonal apart) is met"
	if !r.Spread.Even {
		even = "the NSSDA's advice is a fifth in each quadrant and a tenth of the diagonal apart"
	}
	line("spread", "south-west %d, south-east %d, north-west %d, north-east %d; closest two %v apart, diagonal %v: %s", q[0], q[1], q[2], q[3], r.Spread.Closest, r.Spread.Diagonal, even)
}

// groupNamesCSV head the columns of the statistics.
const groupNamesCSV = "group,count,mean,median,standard_deviation,skewness,excess_kurtosis,sample_skewness,sample_excess_kurtosis,rmse,mean_without_sign,percentile_95,min,max,nssda_95,asprs_2023_rmse,interval_1990,interval_nmas\n"

// writeGroups writes a row a group.
func (r *accuracyReport) writeGroups(w io.Writer) error {
	row := []byte(groupNamesCSV)
	for _, g := range r.groups() {
		row = append(appendField(row, g.Name), ',')
		row = numtext.Append(row, float64(g.Count), 0)
		for _, n := range []number{
			g.Mean, g.Median, g.StdDev, g.Skewness, g.ExcessKurtosis, g.SampleSkewness, g.SampleExcessKurtosis, g.RMSE, g.MeanSize,
			g.Percentile95, g.Min, g.Max, g.NSSDA95, g.RMSE2023, g.Interval1990, g.IntervalNMAS,
		} {
			row = append(row, ',')
			if isFinite(n.v) {
				row = append(row, n.String()...)
			}
		}
		row = append(row, '\n')
	}
	_, err := w.Write(row)
	return err
}

// residualNames head the columns of the residuals.
var residualNames = []string{"id", "x", "y", "z", "surface_z", "residual", "place"}

// writeRows writes a row a checkpoint, those outside included.
func (r *accuracyReport) writeRows(w io.Writer) error {
	b := bufio.NewWriter(w)
	head := strings.Join(residualNames, ",")
	if r.by.text != "" {
		head += "," + r.by.value.String()
	}
	b.WriteString(head + "\n")
	var row []byte
	for _, one := range r.rows {
		at := r.c.set.Points[one.index]
		row = append(appendField(row[:0], r.c.set.ID(one.index)), ',')
		row = append(numtext.Append(row, at[0], r.xy), ',')
		row = append(numtext.Append(row, at[1], r.xy), ',')
		row = append(numtext.Append(row, r.c.set.Z[one.index], r.z), ',')
		if one.place != triangulate.Outside {
			row = append(numtext.Append(row, one.surface, r.z), ',')
			row = append(numtext.Append(row, one.residual, r.z), ',')
		} else {
			row = append(row, ",,"...)
		}
		row = append(row, one.place.String()...)
		if r.by.text != "" {
			row = appendField(append(row, ','), r.c.set.Text(r.by.value, one.index))
		}
		if _, err := b.Write(append(row, '\n')); err != nil {
			return err
		}
	}
	return b.Flush()
}

// features writes the checkpoints as points with their own height.
func (r *accuracyReport) features(w *geojson.Writer) error {
	for _, one := range r.rows {
		set, i := r.c.set, one.index
		surface, off := geojson.Null(), geojson.Null()
		if one.place != triangulate.Outside {
			surface, off = geojson.Fixed(one.surface, r.z), geojson.Fixed(one.residual, r.z)
		}
		f := geojson.Feature{
			Geometry: geojson.Geometry{Shape: set.Points[i], Z: []float64{set.Z[i]}},
			Properties: []geojson.Property{
				{Name: "id", Value: geojson.String(set.ID(i))}, {Name: "z", Value: geojson.Fixed(set.Z[i], r.z)},
				{Name: "surface_z", Value: surface}, {Name: "residual", Value: off}, {Name: "place", Value: geojson.String(one.place.String())},
			},
		}
		if r.by.text != "" {
			f.Properties = append(f.Properties, geojson.Property{Name: r.by.value.String(), Value: geojson.String(set.Text(r.by.value, i))})
		}
		if err := w.Write(&f); err != nil {
			return err
		}
	}
	return nil
}
