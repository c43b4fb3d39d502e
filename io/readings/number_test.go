package readings

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// parseBoth reads a number by the careful and, if it takes it, the quick way.
func parseBoth(t testing.TB, text string) (float64, int, Kind) {
	t.Helper()
	v, d, kind := parseNumber([]byte(text), '.')
	quick, err := read("1 "+text+" 3\n", Options{Declared: Declared{Delimiter: Blanks, Decimal: DecimalPoint}})
	if (err == nil) != (kind == 0) {
		t.Fatalf("%q: kind %d, but reading says %v", text, kind, err)
	}
	if err == nil && (quick.Points[0][1] != v || quick.DecimalsXY != d || math.Signbit(v) && v == 0) {
		t.Fatalf("%q: %v with %d decimals, but reading says %v with %d", text, v, d, quick.Points[0][1], quick.DecimalsXY)
	}
	return v, d, kind
}

// Every number is the double nearest to what is written: strconv is the oracle.
func TestNumbersAgainstStrconv(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		digits := func(label string, least, most int) string {
			return rapid.StringOfN(rapid.RuneFrom([]rune("0123456789")), least, most, -1).Draw(t, label)
		}
		text := rapid.SampledFrom([]string{"", "-", "+"}).Draw(t, "sign") + digits("whole", 1, rapid.SampledFrom([]int{3, 8, 16, 30}).Draw(t, "size"))
		decimals := 0
		if rapid.Bool().Draw(t, "fraction") {
			f := digits("fraction", 0, rapid.SampledFrom([]int{3, 8, 16, 30}).Draw(t, "size"))
			text += "." + f
			decimals = len(f)
		}
		if rapid.Bool().Draw(t, "exponent") {
			e := rapid.IntRange(-70, 70).Draw(t, "e")
			text += fmt.Sprintf("e%d", e)
			decimals = max(decimals-e, 0)
		}
		want, err := strconv.ParseFloat(text, 64)
		got, d, kind := parseNumber([]byte(text), '.')
		inRange := err == nil && (want == 0 && !strings.ContainsAny(mantissa(text), "123456789") || math.Abs(want) >= 1e-60 && math.Abs(want) <= 1e60)
		switch {
		case inRange && (kind != 0 || got != want || d != decimals):
			t.Fatalf("%q: got %v, %d decimals, kind %d, want %v, %d", text, got, d, kind, want, decimals)
		case !inRange && kind != OutOfRange:
			t.Fatalf("%q: kind %d, want out of range", text, kind)
		}
		comma, d2, kind2 := parseNumber([]byte(strings.Replace(text, ".", ",", 1)), ',')
		if comma != got || d2 != d || kind2 != kind {
			t.Fatalf("%q with a comma: got %v, %d, %d", text, comma, d2, kind2)
		}
	})
}

func mantissa(text string) string {
	m, _, _ := strings.Cut(text, "e")
	return m
}

// The quick way on what field files hold.
func TestShortNumbersAgainstStrconv(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	const n = 300_000
	var b strings.Builder
	want := make([]float64, 0, n)
	b.WriteString("x y z\n")
	for len(want) < n {
		for k := range 3 {
			text := strconv.FormatInt(r.Int64()>>r.IntN(40), 10)
			if at := len(text) - r.IntN(min(len(text), 12)); at < len(text) && text[at-1] != '-' {
				text = text[:at] + "." + text[at:]
			}
			v, err := strconv.ParseFloat(text, 64)
			if err != nil {
				t.Fatal(err)
			}
			want = append(want, v)
			b.WriteString(text)
			b.WriteByte(" \n"[k/2])
		}
	}
	s := mustRead(t, b.String(), Options{Spots: Spots{Rule: SpotFirst}})
	if s.Counts.Merged > 0 {
		t.Fatal("the places repeat")
	}
	for i := range s.Len() {
		if s.Points[i][0] != want[3*i] || s.Points[i][1] != want[3*i+1] || s.Z[i] != want[3*i+2] {
			t.Fatalf("line %d: got %v %v, want %v", s.Lines[i], s.Points[i], s.Z[i], want[3*i:3*i+3])
		}
	}
}

func TestNumbers(t *testing.T) {
	for _, c := range []struct {
		text     string
		v        float64
		decimals int
		kind     Kind
	}{
		{"0", 0, 0, 0},
		{"-0", 0, 0, 0}, // one zero only, or equal places would differ in their bits
		{"-0.000", 0, 3, 0},
		{"0e99", 0, 0, 0},
		{".5", .5, 1, 0},
		{"5.", 5, 0, 0},
		{"-.5", -.5, 1, 0},
		{"+5", 5, 0, 0},
		{"9007199254740992", 1 << 53, 0, 0},
		{"9007199254740993", 1 << 53, 0, 0}, // halfway: ties to even
		{"9007199254740995", 1<<53 + 4, 0, 0},
		{"0.37454011884736254", 0.37454011884736254, 17, 0},
		{"12345678901234567890", 12345678901234567890, 0, 0},
		{"1e60", 1e60, 0, 0},
		{"1e-60", 1e-60, 60, 0},
		{"1.0000000000000000000001e60", 0, 0, 0}, // rounds to 1e60; see below
		{"1e-300", 0, 0, OutOfRange},
		{"123456e-3", 123.456, 3, 0},
		{"1.5e+3", 1500, 0, 0},
		{"1.5E3", 1500, 0, 0},
		{"1e99999999999999999999", 0, 0, OutOfRange},
		{"1e-99999999999999999999", 0, 0, OutOfRange},
		{"1e\u22123", 1e-3, 3, 0},
		{"\u22125", -5, 0, 0},
		{"\u20135", -5, 0, 0},
		{"\uff0d5", -5, 0, 0},
		{"\u20145", 0, 0, NotNumber}, // an em dash is no sign
		{"1d3", 0, 0, NotNumber},
		{"1e3.5", 0, 0, NotNumber},
		{"0b1", 0, 0, NotNumber},
		{"1_000", 0, 0, Thousands},
		{"inf", 0, 0, NotFinite},
		{"+Infinity", 0, 0, NotFinite},
		{"nan", 0, 0, NotFinite},
		{"1.#INF", 0, 0, NotFinite},
		{">5", 0, 0, Bound},
		{"≤5", 0, 0, Bound},
		{"1,5", 0, 0, DecimalMark},
		{"1,234", 0, 0, DecimalMark},
		{"1,234,567", 0, 0, Thousands},
		{"1,234.5", 0, 0, Thousands},
		{"12,34,567", 0, 0, NotNumber},
		{"1.234.567", 0, 0, Thousands},
		{"1’234", 0, 0, Thousands},
		{"", 0, 0, Blank},
	} {
		v, d, kind := parseNumber([]byte(c.text), '.')
		if strings.HasPrefix(c.text, "1.00000000000000000") {
			c.v, c.decimals = 1e60, 0
		}
		if v != c.v || d != c.decimals || kind != c.kind || math.Signbit(v) && v == 0 {
			t.Errorf("%q: got %v, %d decimals, kind %d, want %v, %d, %d", c.text, v, d, kind, c.v, c.decimals, c.kind)
		}
		if !strings.ContainsAny(c.text, " ,") && c.text != "" {
			parseBoth(t, c.text)
		}
	}
}
