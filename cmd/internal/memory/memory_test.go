package memory

import (
	"errors"
	"strings"
	"testing"
)

func TestCheck(t *testing.T) {
	b := Of(2 << 30)
	if err := b.Check("surface of 10 readings", 2<<30); err != nil {
		t.Errorf("work of the whole budget is refused: %v", err)
	}
	err := b.Check("grid of 61000 x 48000 nodes", 3<<30)
	big, ok := errors.AsType[*TooBig](err)
	if !ok {
		t.Fatalf("got %v, want a *TooBig", err)
	}
	if big.Need != 3<<30 {
		t.Errorf("need is %d, want %d", big.Need, 3<<30)
	}
	for _, want := range []string{"61000 x 48000", "3GiB", "2GiB", "--memory"} {
		if !strings.Contains(err.Error(), want) {
			t.Errorf("message %q, want %q in it", err, want)
		}
	}
}

func TestDefaultBudgetIsSomething(t *testing.T) {
	b := Of(0)
	if b.Bytes < 1<<20 || !strings.Contains(b.Source, "three quarters") {
		t.Errorf("default budget is %+v", b)
	}
}
