package readings

import (
	"fmt"
	"strings"
	"testing"
)

// Names as they are met in field files, and what they mean.
func TestHeaderWords(t *testing.T) {
	for _, c := range []struct {
		names string
		role  Role
	}{
		{"x|X|Easting|EASTING|easting_m|East|E|X_m|x (m)|X [ft]|X-Coord|x_coordinate|Easting (US survey ft)|Easting ft-int|east_ft", X},
		{"y|Northing|N|north|Y (m)|Y coordinate|NORTHING_US_FT", Y},
		{"z|Z|Elev|elev_m|Elevation|ELEVATION (ft)|Height|Z [m a.s.l.]|Altitude|reduced level|elevation m asl", Z},
		{"head|Head (m)|Hydraulic head|groundwater elevation|GW Elev|Water Elevation (ft)|water_level_elevation|Water Table Elevation", Z},
		{"ID|id|Point|Point ID|PointID|point_no|Pt No.|PtNo|Shot|Well|well id|WELL_NAME|Borehole|Name|No.|Station|Site No|location ID", ID},
		{"Code|code|Feature Code|FCODE|Description|Desc|Point Code|remarks", Code},
		{"line|Line ID|String|string no", Line},
		{"depth|Depth to water|DTW|dtw_ft|depth_to_groundwater (m)", Depth},
		{"measuring point|MP elev|TOC|TOC Elevation (ft)|top of casing|Reference elevation", MeasuringPoint},
		{"product|product thickness", Product},
		{"Depth to product|DTP", ProductDepth},
		{"specific gravity|SG", SpecificGravity},
		{"ground|ground elevation|GSE|Ground surface", Ground},
		{"Screen top|top_of_screen_m", ScreenTop},
		{"bottom of screen|screen bottom (m)", ScreenBottom},
		{"zone|Aquifer", Zone},
		{"status|Status code", Status},
		{"time|Date|date/time|Timestamp|Date and time", Time},
		{"round|Gauging round", Round},
		{"valid from|ValidFrom", ValidFrom},
		{"sigma|std. dev.|uncertainty", Sigma},
		{"class|Classification", Class},
		{"qualifier|Flag", Qualifier},
		{"limit|Reporting limit|detection_limit", Limit},
		// Several meanings, or none here.
		{"h|d|value|lat|latitude|longitude|lon|GPS|type|m|elevation of the roof|rl|p|k", NoRole},
	} {
		for _, name := range strings.Split(c.names, "|") {
			key := wordKey(name)
			if w := headerWords[key]; w.role != c.role {
				t.Errorf("%q (%s): got %s, want %s", name, key, w.role, c.role)
			}
			if w := headerWords[key]; w.head != (c.role == Z && strings.Contains(c.names, "head")) {
				t.Errorf("%q: head %v", name, w.head)
			}
		}
	}
	for _, name := range strings.Split("level|Water Level|water_level_m|WL|SWL (m)|Groundwater level|Static water level|GW level|GWL", "|") {
		if !levelWords[wordKey(name)] {
			t.Errorf("%q is not asked about", name)
		}
	}
	for name := range levelWords {
		if headerWords[name].role != NoRole {
			t.Errorf("%q is asked about and has a role", name)
		}
	}
}

// A word may not be a unit alone, and the table has only keys that a name can have.
func TestWordTable(t *testing.T) {
	for key := range headerWords {
		if got := wordKey(key); got != key {
			t.Errorf("%q can never be met: names like it become %q", key, got)
		}
		if unitWords[key] {
			t.Errorf("%q is a unit too", key)
		}
	}
	for _, unit := range []string{"m", "(m)", "[ft]", "US ft", "us survey feet", "m a.s.l.", "metres"} {
		if isUnit(unit) != (unit != "m a.s.l.") {
			t.Errorf("unit %q: %v", unit, isUnit(unit))
		}
	}
	for _, no := range []string{"", "3", "x", "m3x", "()"} {
		if isUnit(no) {
			t.Errorf("%q is taken for a unit", no)
		}
	}
}

// Strong words go before weak ones; two of a kind leave text alone and stop numbers.
func TestWeakWords(t *testing.T) {
	for _, c := range []struct {
		header string
		want   string // name of the column with the role, "" for none
		role   Role
		warns  bool
	}{
		{"well,name,x,y,z", "", ID, true},
		{"point_id,name,x,y,z", "point_id", ID, false},
		{"name,x,y,z,id", "id", ID, false},
		{"x,y,z,description,code", "code", Code, false},
		{"x,y,z,description", "description", Code, false},
		{"x,y,z,date,time", "", Time, true},
		{"x,y,z,point id,well id", "", ID, true},
	} {
		row := strings.Repeat(",1", strings.Count(c.header, ","))[1:] + ",1\n"
		s := mustRead(t, c.header+"\n"+row, Options{})
		got := ""
		for _, col := range s.Layouts[0].Columns {
			if col.Role == c.role {
				got = col.Name
			}
		}
		if got != c.want || len(s.Warnings) > 0 != c.warns {
			t.Errorf("%s: %s is %q, want %q; %s", c.header, c.role, got, c.want, fmt.Sprint(s.Warnings))
		}
	}
}
