package pages_test

import (
	"testing"

	"isofacet/triangulate/pages"
)

func TestMakeIsMake(t *testing.T) {
	for _, n := range []int{0, 1, 1000, 3 << 20} {
		s := pages.Make[uint64](n)
		if len(s) != n {
			t.Fatalf("%d values, want %d", len(s), n)
		}
		for i := range s {
			if s[i] != 0 {
				t.Fatalf("value %d is %d", i, s[i])
			}
			s[i] = uint64(i)
		}
	}
}

// The floor is make, on memory that was used before.
func BenchmarkMake(b *testing.B) {
	touch := func(s []uint64) {
		for i := 0; i < len(s); i += 512 {
			s[i] = 1
		}
	}
	b.Run("pages/n=1e7", func(b *testing.B) {
		for b.Loop() {
			touch(pages.Make[uint64](1e7))
		}
	})
	b.Run("floor=make/n=1e7", func(b *testing.B) {
		for b.Loop() {
			touch(make([]uint64, 1e7))
		}
	})
}
