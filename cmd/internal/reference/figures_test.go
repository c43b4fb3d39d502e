package reference

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/paulmach/orb"
)

// figures returns where a file of check values lies: in testdata, or else in the
// folder of what may not be kept in this repository.
func figures(t *testing.T, name string) string {
	t.Helper()
	here := filepath.Join("testdata", name)
	if _, err := os.Stat(here); err == nil {
		return here
	}
	folder := os.Getenv("ISOFACET_REFERENCE")
	if folder == "" {
		t.Skipf("%s may not be kept in this repository: ISOFACET_REFERENCE has to name the folder of reference values", name)
	}
	return filepath.Join(folder, name)
}

// row is one line of a table with a header, by column.
type row struct {
	name string // for messages: file and line
	text map[string]string
}

// rows takes a CSV table apart. Lines count from 1, the header's.
func rows(t *testing.T, name, text string) []row {
	t.Helper()
	lines, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		t.Fatalf("%s: %v", name, err)
	}
	if len(lines) < 2 {
		t.Fatalf("%s: %d lines, expected a header and more", name, len(lines))
	}
	var out []row
	for k, line := range lines[1:] {
		r := row{name + ":" + strconv.Itoa(k+2), map[string]string{}}
		for i, column := range lines[0] {
			r.text[column] = line[i]
		}
		out = append(out, r)
	}
	return out
}

// table reads a file of check values.
func table(t *testing.T, name string) []row {
	t.Helper()
	text, err := os.ReadFile(figures(t, name))
	if err != nil {
		t.Fatal(err)
	}
	return rows(t, name, string(text))
}

// get returns the text of a column, which must be there.
func (r row) get(t *testing.T, column string) string {
	t.Helper()
	text, ok := r.text[column]
	if !ok {
		t.Fatalf("%s: no column %q", r.name, column)
	}
	return text
}

func (r row) number(t *testing.T, column string) float64 {
	t.Helper()
	return number(t, r.name+": "+column, r.get(t, column))
}

func (r row) count(t *testing.T, column string) int {
	t.Helper()
	n, err := strconv.Atoi(r.get(t, column))
	if err != nil {
		t.Fatalf("%s: %s: %v", r.name, column, err)
	}
	return n
}

// point takes a position from two columns.
func (r row) point(t *testing.T, x, y string) orb.Point {
	t.Helper()
	return orb.Point{r.number(t, x), r.number(t, y)}
}

func number(t *testing.T, name, text string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatalf("%s: %v", name, err)
	}
	return v
}

// only returns the row of a table whose column holds key.
func only(t *testing.T, all []row, column, key string) row {
	t.Helper()
	for _, r := range all {
		if r.get(t, column) == key {
			return r
		}
	}
	t.Fatalf("no row with %s %q", column, key)
	return row{}
}

// ledger compares figures and keeps account of how far they were apart.
type ledger struct {
	t       *testing.T
	what    string
	n, bad  int
	largest float64 // error
	allowed float64 // at the largest share
	share   float64 // largest error by what was allowed
}

// compare returns a ledger, which says at the end of the test what it met. A test
// that compared nothing fails.
func compare(t *testing.T, what string) *ledger {
	l := &ledger{t: t, what: what}
	t.Cleanup(func() {
		switch {
		case l.n == 0 && (t.Skipped() || t.Failed()): // the reason has been said
		case l.n == 0:
			t.Errorf("%s: nothing was compared", what)
		default:
			t.Logf("%s: %d compared, largest error %.2g of %.2g allowed", what, l.n, l.largest, l.allowed)
		}
	})
	return l
}

// near wants got within tolerance of want.
func (l *ledger) near(name string, got, want, tolerance float64) {
	l.t.Helper()
	l.n++
	off := math.Abs(got - want)
	if !(off <= tolerance) {
		// The first few are enough to see what is wrong.
		if l.bad++; l.bad <= 5 {
			l.t.Errorf("%s: %s is %v, want %v within %.3g; it is off by %.3g", name, l.what, got, want, tolerance, off)
		}
	}
	if off > l.share*tolerance || l.n == 1 {
		l.share, l.largest, l.allowed = 0, off, tolerance
		if tolerance > 0 {
			l.share = off / tolerance
		}
	}
}

// part wants got within a part of want.
func (l *ledger) part(name string, got, want, part float64) {
	l.t.Helper()
	l.near(name, got, want, math.Abs(want)*part)
}

// same wants two counts or texts to be the same.
func same[T comparable](t *testing.T, name string, got, want T) {
	t.Helper()
	if got != want {
		t.Errorf("%s is %v, want %v", name, got, want)
	}
}
