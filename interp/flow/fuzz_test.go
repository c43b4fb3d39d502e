package flow

import "testing"

// What is read is written so that it reads back.
func FuzzParseConductivity(f *testing.F) {
	for _, text := range []string{"12 ft/d", "3e-4 m/s", " 1 cm/yr ", "", "1 /", "1e400 m/d", "0x1p-3 m/d"} {
		f.Add(text)
	}
	f.Fuzz(func(t *testing.T, text string) {
		k, err := ParseConductivity(text)
		if err != nil {
			return
		}
		if !(k.Value > 0) {
			t.Fatalf("%q: %v", text, k)
		}
		if again, err := ParseConductivity(k.String()); err != nil || again != k {
			t.Fatalf("%q: %v, then %v, %v", text, k, again, err)
		}
	})
}
