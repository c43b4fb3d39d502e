package lines

import (
	"context"
	"errors"
	"testing"

	"isofacet/io/geojson"
	"isofacet/io/readings"
)

// Any bytes, be they rows or features, are lines or a typed error.
func FuzzLines(f *testing.F) {
	for _, c := range faultyTexts {
		f.Add([]byte(c.text))
	}
	for _, c := range faultyFeatures {
		f.Add([]byte(c.text))
	}
	f.Add([]byte("line,point,x,y,z\na,P1,0,0,1\nb,P2,1,0,1\na,P3,1,1,2\nb,P4,2,2,\n"))
	f.Add([]byte("a;0;0\nb;1;1\na;1;0\na;0;1,5\na;0;0\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		for _, zeros := range []Zeros{RefuseZeros, UseZeros} {
			s, err := Breaklines(context.Background(), []readings.Source{readings.FromBytes("a", data)}, Options{Zeros: zeros})
			checkOutcome(t, s, err)
			for i := range linesOf(s) {
				if s.Lines[i].Z == nil {
					t.Fatal("a breakline without heights")
				}
			}
		}
		s, err := Rings(context.Background(), []readings.Source{readings.FromBytes("a", data)}, Options{})
		checkOutcome(t, s, err)
		for i := range linesOf(s) {
			if !s.Lines[i].Closed {
				t.Fatal("a ring that is not closed")
			}
		}
	})
}

func linesOf(s *Set) []Line {
	if s == nil {
		return nil
	}
	return s.Lines
}

func checkOutcome(t *testing.T, s *Set, err error) {
	if err == nil {
		checkSet(t, s)
		if len(s.Lines) == 0 {
			t.Fatal("no line and no error")
		}
		return
	}
	if s != nil {
		t.Fatal("a set beside an error")
	}
	switch e := err.(type) {
	case *Faults:
		if e.Total < len(e.First) || len(e.First) == 0 {
			t.Fatalf("%d faults of %d", len(e.First), e.Total)
		}
		for _, f := range e.First {
			if f.Kind == 0 || f.Kind >= kindCount || f.Seen == "" || f.Expected == "" {
				t.Fatalf("not whole: %+v", f)
			}
		}
	case *readings.BadLines, *readings.PositionError, *geojson.PositionError:
	default:
		t.Fatalf("%T: %v", err, err)
	}
}

// Any table and any readings: strings that are made of the readings, or a typed error.
func FuzzStrung(f *testing.F) {
	f.Add([]byte(officeTable), []byte("x,y,z,code\n0,0,1,TOE1 B\n1,0,1,TOE1\n0,6,1,TOE1 C\n0,0,1,TREE\n5,5,5,TOE1\n"))
	f.Add([]byte("others = 'line'\nparts = {separator = '-', number = 'part'}"), []byte("id,x,y,z,code,line\nA,0,0,1,TOE-1,a\nB,0,0,1,,a\nC,1,0,1,TOE-1,a\n"))
	f.Add([]byte("ground = ['[^a-c]*']\nline = ['a*', 'b?']\nparts.mark = 'first'\nparts.separator = ' '\nmarks.end = ['E']"), []byte("x y z code\n0 0 1 a\n1 1 1 \"E a\"\n2 1 1 a\n3 1 1 a\n"))
	f.Fuzz(func(t *testing.T, table, shots []byte) {
		codes, err := ReadCodeTable(context.Background(), readings.FromBytes("codes.toml", table))
		if err != nil {
			if _, ok := err.(*TableError); !ok || codes != nil {
				t.Fatalf("%T: %v", err, err)
			}
			return
		}
		count := NewCodes(codes)
		set, err := readings.Read(context.Background(), []readings.Source{readings.FromBytes("a", shots)},
			readings.Options{Select: readings.Selection{Code: count.Choose}, Spots: readings.Spots{Rule: readings.SpotMean}})
		if err != nil {
			return
		}
		n := 0
		for _, h := range count.Histogram() {
			n += h.Readings
		}
		if n != set.Counts.Read {
			t.Fatalf("%d readings in the histogram, %d read", n, set.Counts.Read)
		}
		if err := count.Unknown(); err != nil {
			if e, ok := errors.AsType[*UnknownCodes](err); !ok || len(e.Codes)+len(e.Clashes) == 0 || err.Error() == "" {
				t.Fatalf("%T: %v", err, err)
			}
		}
		s, err := Strung(set, codes)
		if err != nil {
			if _, ok := err.(*Faults); !ok || s != nil {
				t.Fatalf("%T: %v", err, err)
			}
			return
		}
		checkSet(t, s)
		for i := range s.Lines {
			l := &s.Lines[i]
			for k, r := range l.Readings {
				if set.Points[r] != l.Points[k] || set.Z[r] != l.Z[k] {
					t.Fatalf("line %q: vertex %d is not reading %d", l.Name, k, r)
				}
			}
		}
	})
}
