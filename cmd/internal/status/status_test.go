package status

import (
	"errors"
	"fmt"
	"testing"
)

func TestOf(t *testing.T) {
	fault := errors.New("no file")
	for _, row := range []struct {
		name  string
		err   error
		want  Code
		hints int
	}{
		{"nothing wrong", nil, Done, 0},
		{"an error without a status", fault, NotFinished, 0},
		{"a fault of the command line", Usage(fault, "name one"), WrongUsage, 1},
		{"wrapped once more", fmt.Errorf("grid: %w", With(TooBig, fault)), TooBig, 0},
		{"the outermost status counts", With(WrongData, Usage(fault)), WrongData, 0},
	} {
		got, hints := Of(row.err)
		if got != row.want || len(hints) != row.hints {
			t.Errorf("%s: status %d with %d hints, want %d with %d", row.name, got, len(hints), row.want, row.hints)
		}
		if row.err != nil && !errors.Is(row.err, fault) {
			t.Errorf("%s: the first error is lost", row.name)
		}
	}
}
