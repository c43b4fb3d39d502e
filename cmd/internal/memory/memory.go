package memory

import (
	"fmt"

	"isofacet/cmd/internal/option"
)

// assumed is taken as free where the system does not say.
const assumed = 4 << 30

// A Budget is how much memory a run may use and where the number comes from.
type Budget struct {
	Bytes  uint64
	Source string // for messages: "three quarters of what is free", "--memory"
}

// Of returns the budget that the user gave, or three quarters of what is free
// now if given is 0.
func Of(given uint64) Budget {
	if given > 0 {
		return Budget{given, "given by --memory"}
	}
	if free, ok := available(); ok {
		return Budget{free / 4 * 3, "three quarters of what is free"}
	}
	return Budget{assumed / 4 * 3, "three quarters of 4GiB, which is assumed to be free"}
}

// A TooBig says that a piece of work needs more memory than the run may use.
type TooBig struct {
	Work   string
	Need   uint64
	Budget Budget
}

func (e *TooBig) Error() string {
	return fmt.Sprintf("%s needs about %v: expected to fit %v (%s)",
		e.Work, option.Size(e.Need), option.Size(e.Budget.Bytes), e.Budget.Source)
}

// Check returns a *TooBig if work that needs that many bytes does not fit.
func (b Budget) Check(work string, need uint64) error {
	if need > b.Bytes {
		return &TooBig{work, need, b}
	}
	return nil
}
