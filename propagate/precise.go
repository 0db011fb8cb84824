package propagate

import "math/big"

// digits is the precision, in bits, in which a rule is computed.
const digits = 128

func precise(v float64) *big.Float { return new(big.Float).SetPrec(digits).SetFloat64(v) }

func rounded(v *big.Float) float64 {
	f, _ := v.Float64()
	return f
}

func sumOf(a, b *big.Float) *big.Float      { return new(big.Float).SetPrec(digits).Add(a, b) }
func difference(a, b *big.Float) *big.Float { return new(big.Float).SetPrec(digits).Sub(a, b) }
func product(a, b *big.Float) *big.Float    { return new(big.Float).SetPrec(digits).Mul(a, b) }
func quotient(a, b *big.Float) *big.Float   { return new(big.Float).SetPrec(digits).Quo(a, b) }

// preciseLegendre is legendreAt in higher precision.
func preciseLegendre(p int, y *big.Float) (value, before *big.Float) {
	before, value = precise(1), y
	for n := 2; n <= p; n++ {
		f := float64(n)
		next := difference(product(precise(2*f-1), product(y, value)), product(precise(f-1), before))
		before, value = value, quotient(next, precise(f))
	}
	return value, before
}
