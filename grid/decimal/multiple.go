package decimal

import "math/big"

// FloorIndex returns the largest k with k step <= n, and whether k step = n. The result is exact.
// It returns ErrStep unless step is positive, and ErrRange if k does not fit an int64.
func (n Number) FloorIndex(step Number) (k int64, whole bool, err error) {
	if step.Sign() <= 0 {
		return 0, false, ErrStep
	}
	n, step = n.Normal(), step.Normal()
	if gap := int(n.Scale) - int(step.Scale); gap == 0 {
		k = n.Unscaled / step.Unscaled
		rem := n.Unscaled - k*step.Unscaled
		if rem < 0 {
			k--
		}
		return k, rem == 0, nil
	}
	q, whole := divide(n, step)
	if !q.IsInt64() {
		return 0, false, ErrRange
	}
	return q.Int64(), whole, nil
}

// divide returns the floor of n / step, and whether it is n / step, for a positive step.
func divide(n, step Number) (q *big.Int, whole bool) {
	// Bring both to the finer scale: at most 255 further digits.
	a, b := big.NewInt(n.Unscaled), big.NewInt(step.Unscaled)
	ten := big.NewInt(10)
	if gap := int64(n.Scale) - int64(step.Scale); gap > 0 {
		b.Mul(b, ten.Exp(ten, big.NewInt(gap), nil))
	} else {
		a.Mul(a, ten.Exp(ten, big.NewInt(-gap), nil))
	}
	rem := new(big.Int)
	a.DivMod(a, b, rem) // Euclidean, which is the floor for a positive divisor
	return a, rem.Sign() == 0
}

// CeilIndex returns the smallest k with k step >= n, and whether k step = n; errors as in FloorIndex.
func (n Number) CeilIndex(step Number) (k int64, whole bool, err error) {
	k, whole, err = n.FloorIndex(step)
	if err != nil || whole {
		return k, whole, err
	}
	if k+1 < k {
		return 0, false, ErrRange
	}
	return k + 1, false, nil
}

// IsMultipleOf reports whether n is a whole number of steps. A step that is not positive has no multiples.
func (n Number) IsMultipleOf(step Number) bool {
	if step.Sign() <= 0 {
		return false
	}
	_, whole := divide(n, step)
	return whole
}

// FloorMultiple returns the largest multiple of step that is not above n. Errors: ErrStep, ErrRange.
func (n Number) FloorMultiple(step Number) (Number, error) {
	k, _, err := n.FloorIndex(step)
	if err != nil {
		return Number{}, err
	}
	return step.Times(k)
}

// CeilMultiple returns the smallest multiple of step that is not below n. Errors: ErrStep, ErrRange.
func (n Number) CeilMultiple(step Number) (Number, error) {
	k, _, err := n.CeilIndex(step)
	if err != nil {
		return Number{}, err
	}
	return step.Times(k)
}

// Around returns the multiples of step next to n on either side: the two to name when n should have been one.
// They are equal if n is a multiple. Errors: ErrStep, ErrRange.
func (n Number) Around(step Number) (below, above Number, err error) {
	if below, err = n.FloorMultiple(step); err != nil {
		return Number{}, Number{}, err
	}
	above, err = n.CeilMultiple(step)
	return below, above, err
}
