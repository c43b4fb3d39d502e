package wells

import (
	"math/big"

	"isofacet/io/readings"
)

// A value is a number as it is written: exact, with the decimals that it has.
type value struct {
	rat      *big.Rat
	decimals int
}

// exactly takes a number that could be read.
func exactly(n readings.Number) value {
	r, ok := new(big.Rat).SetString(n.Text)
	if !ok {
		panic("wells: " + n.Text + " was read as a number")
	}
	return value{r, n.Decimals}
}

func (v value) known() bool { return v.rat != nil }

func (v value) plus(w value) value {
	return value{new(big.Rat).Add(v.rat, w.rat), max(v.decimals, w.decimals)}
}

func (v value) minus(w value) value {
	return value{new(big.Rat).Sub(v.rat, w.rat), max(v.decimals, w.decimals)}
}

func (v value) times(w value) value {
	return value{new(big.Rat).Mul(v.rat, w.rat), v.decimals + w.decimals}
}

func (v value) sign() int { return v.rat.Sign() }

func (v value) cmp(w value) int { return v.rat.Cmp(w.rat) }

// float is the double nearest to the value.
func (v value) float() float64 {
	f, _ := v.rat.Float64()
	return f
}

// String writes every decimal; empty if the value is not known.
func (v value) String() string {
	if !v.known() {
		return ""
	}
	return v.rat.FloatString(v.decimals)
}
