package readings

import (
	"context"
	"errors"
	"testing"
)

// FuzzRead reads any bytes by any settings: no panic, no hang; either an error of a
// known type or counts that add up; the quick and the careful way agree.
func FuzzRead(f *testing.F) {
	for _, s := range []string{
		"id,x,y,z,code\nA,1,2,3,G\nB,1.5,-2.5,3e2,\"a,b\"\n",
		"1 2 3\n4 5 6\r\n7\t8 9\r",
		"x;y;z\n1,5;2,5;3,5\n",
		"\ufeffx,y,z\n,,\n1,2,NM\n1,2,<5\n",
		"\xff\xfex\x00,\x00y\x00\n\x00",
		"# c\nid,x,y,head\n\"A\nB\",1,2,3\nA,1,2,\"4\n",
		"x,y,z\n1,2,3\n1,2,3\n1,2,4\n",
		"S\xfcd,x,y,z\n\x96,1,2,\x963\n",
		"id,decision,reason\nA,leave out,b\n",
	} {
		f.Add([]byte(s), "", uint64(0))
		f.Add([]byte(s), "id,x,y,z", uint64(0x1234567))
	}
	f.Fuzz(func(t *testing.T, text []byte, list string, bits uint64) {
		if len(text) > 1<<16 {
			return // long input is for the tests of limits
		}
		pick := func(n uint64) uint64 {
			k := bits % n
			bits /= n
			return k
		}
		o := Options{Lenient: pick(2) == 1, Workers: int(pick(3)) + 1}
		o.Columns, _ = ParseColumns(list)
		o.Delimiter = Delimiter("\x00,;\t |"[pick(6)])
		o.Decimal = Decimal("\x00.,"[pick(3)])
		o.Comment = []string{"", "none", "#", "//"}[pick(4)]
		o.SkipRows = int(pick(3))
		o.Missing = [][]string{nil, {"NM", "-9999"}, {"blank"}}[pick(3)]
		o.Spots.Rule = SpotRule(pick(7))
		o.Spots.Within = []float64{0, 0, 0, 1, 1e-9}[pick(5)]
		if pick(2) == 1 {
			o.Select.Without = []Pattern{{ID, "[A-C]*"}}
		}
		x, err := ReadExclusions(FromBytes("x.csv", text), o.Declared)
		known(t, err)
		if pick(4) == 1 {
			o.Select.Exclude = x
		}
		read := func(o Options) (*Set, error) {
			return Read(context.Background(), []Source{FromBytes("a.csv", text)}, o)
		}
		s, err := read(o)
		known(t, err)
		if (s == nil) == (err == nil) {
			t.Fatalf("a set %v and an error %v", s != nil, err)
		}
		if err == nil {
			checkCounts(t, s)
		}
		o.careful = true
		o.Workers = 1
		s2, err2 := read(o)
		if got, want := account(s2, err2), account(s, err); got != want {
			t.Fatalf("careful:\n%s\nquick:\n%s", got, want)
		}
		p, err := ReadPositions(context.Background(), FromBytes("a.csv", text), o)
		known(t, err)
		if err == nil {
			var row []string
			for i := range p.Len() {
				if row = p.Row(row[:0], i); len(row) != len(p.Names) {
					t.Fatalf("row %d has %d fields of %q", i, len(row), p.Names)
				}
			}
		}
	})
}

// known fails on an error of a type that is not documented.
func known(t *testing.T, err error) {
	if err == nil {
		return
	}
	var position *PositionError
	var bad *BadLines
	var spot *SpotError
	var option *OptionError
	if !errors.As(err, &position) && !errors.As(err, &bad) && !errors.As(err, &spot) && !errors.As(err, &option) {
		t.Fatalf("error of type %T: %v", err, err)
	}
	if err.Error() == "" {
		t.Fatal("an empty message")
	}
}
