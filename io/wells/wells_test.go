package wells

import (
	"context"
	"errors"
	"math/big"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"isofacet/io/readings"
)

// The head is the exact value of the decimals, rounded once, however the product is
// said and wherever the numbers stand.
func TestHeadAgainstRationals(t *testing.T) {
	digits := func(t *rapid.T, name string, most int) string {
		v := big.NewRat(rapid.Int64Range(0, 999999).Draw(t, name), 1000)
		return v.FloatString(rapid.IntRange(0, most).Draw(t, name+" decimals"))
	}
	rat := func(s string) *big.Rat { r, _ := new(big.Rat).SetString(s); return r }
	rapid.Check(t, func(t *rapid.T) {
		mp, depth, thick, sg := digits(t, "mp", 3), digits(t, "depth", 3), digits(t, "product", 2), "0."+rapid.StringMatching("[1-9]{1,3}").Draw(t, "sg")
		want := new(big.Rat).Sub(rat(mp), rat(depth))
		want.Add(want, new(big.Rat).Mul(rat(thick), rat(sg)))
		top := new(big.Rat).Sub(rat(depth), rat(thick))
		header, row := "id,x,y,mp,depth,product,sg\n", "A,0,0,"+mp+","+depth+","+thick+","+sg+"\n"
		if rapid.Bool().Draw(t, "two depths") {
			header, row = "id,x,y,mp,depth,depth_to_product,sg\n", "A,0,0,"+mp+","+depth+","+top.FloatString(3)+","+sg+"\n"
		}
		set, err := readings.Read(context.Background(), []readings.Source{readings.FromBytes("f", []byte(header+row))}, readings.Options{Reduce: &Reducer{}, Account: true})
		if err != nil {
			t.Fatal(err)
		}
		f, _ := want.Float64()
		if set.Len() != 1 || set.Z[0] != f || rat(set.Work(0).(*Work).Head).Cmp(want) != 0 {
			t.Fatalf("%s%s: %v, want %s", header, row, set.Z, want.FloatString(6))
		}
	})
}

// What a table of wells cannot be.
func TestBadTables(t *testing.T) {
	for _, c := range []struct{ text, says string }{
		{"id,x,y,mp\nA,0,0,1\nA,0,0,2\n", `w:3:1: id "A": expected one row a well and date; line 2 is one too`},
		{"id,x,y,mp,valid_from\nA,0,0,1,2020-01-01\nA,0,0,2,2020-01-01T00:00\n", "one row a well and date"},
		{"id,x,y,mp,valid_from\nA,0,0,1,01/02/2020\n", `valid-from "01/02/2020": expected a date such as 2024-03-12`},
		{"id,x,y,mp\nA,0,0,high\n", `w:2:7: measuring-point "high": expected a number such as 12.4`},
		{"id,x,y,mp\n,0,0,1\n", `w:2:1: id "": expected the name of a well`},
		{"x,y,mp\n0,0,1\n", "w:1: no column for id"},
		{"id,x,y,mp\nA,0,0\n", "w:2: 3 fields: expected 4, as in the header"},
		{"", "w: no line to read"},
	} {
		_, err := ReadTable(readings.FromBytes("w", []byte(c.text)), readings.Declared{})
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%q: %v, want %q", c.text, err, c.says)
		}
		if _, ok := errors.AsType[*readings.PositionError](err); !ok {
			t.Errorf("%q: %T tells no place", c.text, err)
		}
	}
	// A file with a row of units, a decimal comma and columns by number.
	columns, _ := readings.ParseColumns("id=1,x=2,y=3,measuring-point=5")
	table, err := ReadTable(readings.FromBytes("w", []byte("well;x;y;note;toc\n;m;m;;m\nA;1,5;2,5;by the gate;3,25\n")), readings.Declared{Columns: columns})
	if err != nil || table.Len() != 1 || table.wells["A"].rows[0].numbers[slot(readings.MeasuringPoint)].String() != "3.25" {
		t.Errorf("%+v, %v", table, err)
	}
}

// Rows of one column contradict those of another: refused with both.
func TestContradictions(t *testing.T) {
	table, err := ReadTable(readings.FromBytes("w", []byte("id,x,y,mp\nA,0,0,100.00\n")), readings.Declared{})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ text, says string }{
		{"id,mp,depth\nA,100.1,5\n", `f:2:3: measuring-point "100.1": expected 100.00, as w:2 has it`},
		{"id,depth,depth_to_product\nA,5.00,5.01\n", `f:2:8: product-depth "5.01": expected at most the depth to water, 5.00: product floats on it`},
		{"id,depth,depth_to_product,product,sg\nA,5.00,4.50,0.4,0.8\n", `product "0.4": expected 0.50, by the two depths`},
		{"id,depth,product,sg\nA,5.00,-0.4,0.8\n", `product "-0.4": expected a thickness from 0`},
		{"id,depth,product,sg\nA,5.00,0.4,1.2\n", `specific-gravity "1.2": expected a number above 0 and at most 1`},
		{"id,depth\nA,abc\n", `depth "abc": expected a number such as 12.4`},
		{"x,y,depth\n1,2,3\n", "no column for id: expected one to find the well in w by"},
	} {
		_, err := readings.Read(context.Background(), []readings.Source{readings.FromBytes("f", []byte(c.text))}, readings.Options{Reduce: &Reducer{Table: table}})
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%q: %v, want %q", c.text, err, c.says)
		}
	}
	// 100.0 is 100.00.
	if _, err := readings.Read(context.Background(), []readings.Source{readings.FromBytes("f", []byte("id,mp,depth\nA,100.0,5\n"))}, readings.Options{Reduce: &Reducer{Table: table}}); err != nil {
		t.Error(err)
	}
}

func TestStatusesOfAFile(t *testing.T) {
	s, err := ReadStatuses(readings.FromBytes("s", []byte("# office\nstatus;meaning\nS;measured\nT-4;nearby pumping\nmeasured;leave out\n")))
	if err != nil {
		t.Fatal(err)
	}
	for word, want := range map[string]Meaning{"s": Measured, "t 4": NearbyPumping, "MEASURED": LeaveOut, "Recently_Pumped": RecentlyPumped, "": Measured, "d": Dry} {
		if m, ok := s.Of(word); !ok || m != want {
			t.Errorf("%q means %v, %v, want %v", word, m, ok, want)
		}
	}
	for text, says := range map[string]string{
		"status,meaning\nS,soaked\n":         `s:2:3: meaning "soaked": expected one of measured, dry, flowing`,
		"status,meaning\nS,dry\nS,pumping\n": `s:3:1: status "S": expected one meaning a word; line 2 has another`,
		"word,thing\nS,dry\n":                "expected columns status, meaning",
	} {
		if _, err := ReadStatuses(readings.FromBytes("s", []byte(text))); err == nil || !strings.Contains(err.Error(), says) {
			t.Errorf("%q: %v, want %q", text, err, says)
		}
	}
}

func TestTimes(t *testing.T) {
	for _, ok := range []string{"2024-03-12", "2024-03-12T08:10", "2024-03-12 08:10:30", "2024-03-12T08:10:30+01:00", "2024-03-12T08:10Z", "12.03.2024", "1.3.2024 8:10"} {
		if when, read := ParseTime(ok); !read || when.Year() != 2024 || when.Month() != 3 {
			t.Errorf("%q: %v, %v", ok, when, read)
		}
	}
	for _, bad := range []string{"", "03/12/2024", "12/03/2024", "2024-13-01", "March", "20240312"} {
		if when, read := ParseTime(bad); read {
			t.Errorf("%q is read as %v", bad, when)
		}
	}
}

func FuzzReadTable(f *testing.F) {
	f.Add(classWells)
	f.Add("well;x;mp;valid_from\nA;1,5;2;2020-01-01\n\"B;;;\n")
	f.Fuzz(func(t *testing.T, text string) {
		table, err := ReadTable(readings.FromBytes("w", []byte(text)), readings.Declared{})
		if err != nil {
			return
		}
		// Whatever the table says, a row comes to one end.
		set, err := readings.Read(context.Background(), []readings.Source{readings.FromBytes("f", []byte("id,time,depth\nA,2024-01-01,5\nB,,6\n"))},
			readings.Options{Lenient: true, Reduce: &Reducer{Table: table}, Spots: readings.Spots{Rule: readings.SpotMean}})
		var spot *readings.SpotError
		if err == nil && set.Counts.Used+set.Counts.Merged+set.Counts.LeftOut+set.Counts.Refused != 2 || err != nil && !errors.As(err, &spot) && table.Has(readings.X) && table.Has(readings.Y) && table.Has(readings.MeasuringPoint) {
			t.Fatalf("%+v, %v", set, err)
		}
	})
}

func FuzzReadStatuses(f *testing.F) {
	f.Add("status,meaning\nS,dry\n")
	f.Add(",,,\n;;\n")
	f.Fuzz(func(t *testing.T, text string) {
		s, err := ReadStatuses(readings.FromBytes("s", []byte(text)))
		if err == nil {
			if _, ok := s.Of("dry"); !ok {
				t.Fatal("a usual word is lost")
			}
		}
	})
}
