package loan

import (
	"math/big"
	"math/bits"
)

// A fraction is whole + num/den, den > 0.
type fraction struct{ whole, num, den uint64 }

// neighbours are the largest fraction not above p/q and the smallest not below
// it among those whose denominator is at most limit; both are p/q itself when
// q, in lowest terms, is that small. Method: walk down the Stern–Brocot tree,
// a whole run of equal turns at a time (Graham, Knuth and Patashnik, Concrete
// Mathematics, 4.5; from memory).
func neighbours(p, q *big.Int, limit uint64) (below, above fraction) {
	whole, rest := new(big.Int).QuoRem(p, q, new(big.Int))
	w := whole.Uint64()
	if q.IsUint64() && q.Uint64() <= limit {
		exact := fraction{w, rest.Uint64(), q.Uint64()}
		return exact, exact
	}
	below, above = fraction{w, 0, 1}, fraction{w, 1, 1}
	// How far each is from p/q, times its own denominator and q. Neither comes
	// to 0: a fraction equal to p/q has the denominator q, beyond the limit.
	under, over := rest, new(big.Int).Sub(q, rest)
	k, scratch := new(big.Int), new(big.Int)
	// approach moves a towards b as far as it may go.
	approach := func(a *fraction, aGap *big.Int, b fraction, bGap *big.Int) {
		n := (limit - a.den) / b.den
		if k.Quo(aGap, bGap); k.IsUint64() && k.Uint64() < n {
			n = k.Uint64()
		}
		a.num += n * b.num
		a.den += n * b.den
		aGap.Sub(aGap, scratch.Mul(scratch.SetUint64(n), bGap))
	}
	for below.den+above.den <= limit {
		approach(&below, under, above, over)
		approach(&above, over, below, under)
	}
	return below, above
}

// mulDiv is a × b ÷ d in whole and remainder. The quotient must fit 64 bits.
func mulDiv(a, b, d uint64) (quo, rem uint64) {
	hi, lo := bits.Mul64(a, b)
	return bits.Div64(hi, lo, d)
}

// share is amount × num ÷ den rounded half up.
func share(amount int64, num, den uint64) int64 {
	quo, rem := mulDiv(uint64(amount), num, den)
	return int64(quo) + half(rem, den)
}

// half is 1 if rem is half of den or more, else 0.
func half(rem, den uint64) int64 {
	if rem >= den-rem {
		return 1
	}
	return 0
}
