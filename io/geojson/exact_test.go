package geojson_test

import (
	"math/big"

	"github.com/paulmach/orb"
)

// exactTurn is the direction of a ring by rational arithmetic.
func exactTurn(ring orb.Ring) int {
	sum := new(big.Rat)
	rat := func(v float64) *big.Rat { return new(big.Rat).SetFloat64(v) }
	for i := 1; i < len(ring); i++ {
		sum.Add(sum, new(big.Rat).Mul(rat(ring[i-1][0]), rat(ring[i][1])))
		sum.Sub(sum, new(big.Rat).Mul(rat(ring[i][0]), rat(ring[i-1][1])))
	}
	return sum.Sign()
}
