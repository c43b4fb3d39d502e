package readings

import (
	"context"
	"testing"
)

func TestSmoke(t *testing.T) {
	for _, text := range []string{"id,x,y,z,code\nP1,1,2,3.50,GRD\nP2,2,2,4.25,EP\nP3,1,2,3.50,GRD\n",
		"1 2 3\n4 5 6\n", "x;y;z\n1,5;2,25;3\n2,5;2,25;DRY\n3,5;2\n"} {
		s, err := Read(context.Background(), []Source{FromBytes("a.csv", []byte(text))}, Options{})
		t.Log(err)
		if err == nil {
			t.Logf("%+v", s)
			t.Log(s.Layouts[0].String())
		}
	}
}
