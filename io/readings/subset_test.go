package readings

import "testing"

func TestSubset(t *testing.T) {
	s, err := read("id,x,y,z,zone\na,0,0,1.5,s\nb,1,0,2,d\nc,0,1,3,s\n", Options{})
	if err != nil {
		t.Fatal(err)
	}
	sub := s.Subset([]int{0, 2}, []float64{-0.25, 7}, 2)
	if sub.Len() != 2 || sub.ID(0) != "a" || sub.ID(1) != "c" || sub.Text(Zone, 1) != "s" || sub.Z[1] != 7 || sub.Lines[1] != 4 || sub.Source(1) != 0 || sub.DecimalsZ != 2 {
		t.Errorf("subset is %+v", sub)
	}
}

func TestDifference(t *testing.T) {
	for _, c := range []struct {
		a, b     float64
		decimals int
		want     float64
	}{{10.1, 10.4, 1, -0.3}, {407.35, 407.65, 2, -0.3}, {5, 5, 0, 0}, {0.1, 0.3, 1, -0.2}} {
		if got := Difference(c.a, c.b, c.decimals); got != c.want {
			t.Errorf("%v - %v is %v, want %v", c.a, c.b, got, c.want)
		}
	}
}
