package wells

import (
	"context"
	"fmt"
	"slices"
	"strings"
	"testing"

	"isofacet/io/readings"
)

// Classes of rows: good ones, and one for every way in which a row can fail to be
// used. %d is the number of the row, which makes its id.
var surveyRows = []string{
	"S%d,%d,1,3.5,GR",         // used
	"S%d,0,0,3.%d,GR",         // at the place of others
	"S%d,%d,1,abc,GR",         // no number
	"S%d,%d,1,,GR",            // blank
	"S%d,%d,1,NaN,GR",         // not finite
	"S%d,%d,1,-Inf,GR",        // not finite
	"S%d,%d,1,<5,GR",          // a bound
	"S%d,%d,1,\"12,4\",GR",    // the other decimal mark
	"S%d,%d,1,\"1,234.5\",GR", // a mark between thousands
	"S%d,%d,1,1e99,GR",        // out of range
	"S%d,%d,1,3.5",            // a field short
	"S%d,%d,1,3.5,GR,5,6",     // fields too many
	"\"S%d,%d,1,3.5,GR",       // a quote that is not closed
	"S%d,%d,1,3.5,\"GR\"x",    // text behind a quote
	"S%d,%d,1,3.5,\x01",       // a control character
	"S%d,%d,1,3.5," + strings.Repeat("long", 300),
	"S%d,%d,1,-9999,GR",    // a missing mark
	"S%d,%d,1,NM,GR",       // another
	"S%d,%d,1,3.5,TREE",    // chosen not to be used
	"S%d,%d,1,abc,TREE",    // likewise, and bad
	"X%d,%d,1,3.5,OUT",     // left out by pattern of the id
	"S%d,999999,1,3.5,GR ", // left out by a row of exclusions
	"S%d,%d,1,3.5,\xe9\xe8",
}

var gaugingRows = []string{
	"A,2024-03-0%d,5.%d,,measured", // used, or merged
	"B,2024-03-0%d,5.%d,5.0,",      // with product
	"B,2024-03-0%d,5.%d,9.0,",      // product below the water
	"C,2024-03-0%d,5.%d,5.0,",      // product, and no specific gravity
	"D,2024-03-0%d,5.%d,,",         // no measuring point
	"E,2024-03-0%d,5.%d,,",         // valid from later
	"F,,5.%d%d,,",                  // several dates, and no time
	"F,03/04/2024,5.%d%d,,",        // a date that could be two
	"nobody,2024-03-0%d,5.%d,,",    // no well
	"A,2024-03-0%d,%d,,dry",
	"A,2024-03-0%d,DRY%.0d,,",
	"A,2024-03-0%d,%.0d,,dry",
	"A,2024-03-0%d,5.%d,,pumping",
	"A,2024-03-0%d,5.%d,,windy",
	"A,2024-03-0%d,>%d,,",
	"A,2024-03-0%d,<%d,,",
	"A,2024-03-0%d,%.0d,,measured",
	"A,2024-03-0%d,NM%.0d,,measured",
	"A,2024-03-0%d,9%d,,measured", // below the screen
	"A,2024-03-0%d,-5.%d,,flowing",
	"A,2024-03-0%d,%.0d,,flowing",
	"A,2024-03-0%d,5.%d,x,",
	"A,2024-03-0%d,5.%d,",
	"Z,2024-03-0%d,5.%d,,", // no place
}

const classWells = "id,x,y,mp,sg,screen_bottom,valid_from\nA,0,0,100,,50,\nB,1,0,100,0.83,,\nC,2,0,100,,,\nD,3,0,,,,\nE,4,0,100,,,2025-01-01\n" +
	"F,5,0,100,,,2020-01-01\nF,,,101,,,2021-01-01\nZ,,,100,,,\n"

// P9: used + merged + left out + refused = read, with every row in exactly one of
// them by its line, whatever classes of rows come in whatever order.
func FuzzEveryReadingIsAccountedFor(f *testing.F) {
	var all []byte
	for i := range max(len(surveyRows), len(gaugingRows)) {
		all = append(all, byte(i))
	}
	f.Add(all, true, byte(0))
	f.Add(all, false, byte(0))
	f.Add(slices.Concat(all, all, all), true, byte(3))
	f.Add([]byte{0, 0, 1, 1, 12, 0, 1}, true, byte(2))
	f.Add([]byte{12}, true, byte(1))
	f.Add([]byte{0, 0, 0, 9, 9, 12}, false, byte(1))
	table, err := ReadTable(readings.FromBytes("wells", []byte(classWells)), readings.Declared{})
	if err != nil {
		f.Fatal(err)
	}
	exclusions, err := readings.ReadExclusions(readings.FromBytes("x", []byte("x,y,decision,reason\n999999,1,leave out,gate\n")), readings.Declared{})
	if err != nil {
		f.Fatal(err)
	}
	f.Fuzz(func(t *testing.T, classes []byte, gauging bool, mode byte) {
		if len(classes) > 500 {
			return
		}
		o := readings.Options{Lenient: true, Account: mode&1 == 1, Workers: 1 + int(mode>>1&1),
			Declared: readings.Declared{Missing: []string{"-9999", "NM", "NM1"}, Delimiter: readings.Comma, Decimal: readings.DecimalPoint},
			Spots:    readings.Spots{Rule: readings.SpotHighest}, Reduce: &Reducer{Table: table}}
		text, kinds := "id,time,depth,depth_to_product,status\n", gaugingRows
		if !gauging {
			text, kinds = "id,x,y,z,code\n", surveyRows
			o.Reduce = &Reducer{}
			o.Select = readings.Selection{Without: []readings.Pattern{{Role: readings.Code, Text: "TREE"}, {Role: readings.ID, Text: "X*"}}, Exclude: exclusions}
		}
		var want []int
		for i, class := range classes {
			want = append(want, i+2)
			text += fmt.Sprintf(kinds[int(class)%len(kinds)], i%9+1, i%7+1) + "\n"
		}
		set, err := readings.Read(context.Background(), []readings.Source{readings.FromBytes("f", []byte(text))}, o)
		if err != nil {
			t.Fatalf("%v in\n%s", err, text)
		}
		c := set.Counts
		// An open quote may find its end lines below, in the quote of another row, and the
		// rows between are one then.
		alone := gauging || !strings.Contains(text, "\n\"S") || strings.Count(text, `"`) == 1
		if c.Used+c.Merged+c.LeftOut+c.Refused != c.Read || alone && c.Read != len(classes) ||
			c.Used != set.Len() || c.Merged != len(set.Merged) || c.LeftOut != len(set.LeftOut) || c.Refused != len(set.Refused) {
			t.Fatalf("%+v of %d rows: %d used, %d merged, %d left out, %d refused listed", c, len(classes), set.Len(), len(set.Merged), len(set.LeftOut), len(set.Refused))
		}
		var got []int
		for i := range set.Len() {
			got = append(got, int(set.Lines[i]))
			if w, ok := set.Work(i).(*Work); gauging && o.Account && (!ok || w.Head == "") {
				t.Fatalf("line %d is used and has no arithmetic", set.Lines[i])
			}
		}
		for i := range set.Merged {
			got = append(got, int(set.Merged[i].Line))
		}
		for i := range set.LeftOut {
			o := &set.LeftOut[i]
			got = append(got, int(o.Line))
			if o.Reason == "" {
				t.Fatalf("line %d is left out for no reason", o.Line)
			}
		}
		for _, e := range set.Refused {
			got = append(got, e.Line)
			if e.Expected == "" {
				t.Fatalf("%v does not say what was expected", e)
			}
		}
		slices.Sort(got)
		if alone && !slices.Equal(got, want) {
			t.Fatalf("lines %v, want %v in\n%s", got, want, text)
		}
	})
}
