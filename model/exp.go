package model

import "math"

// Go's math.Exp and math.Log have assembly on some processors whose last bit
// differs, and a compiler may fuse a product and a sum into one rounding where
// the processor can. The two functions here are plain float64 arithmetic in
// which every product is rounded by an explicit conversion before it is added
// to anything, which the language specification says is not fused. They give
// the same bits everywhere, within about one unit in the last place.

// The two parts of ln 2: k × ln2Hi is exact for |k| < 2^20. (Every such split
// has these values; they follow from cutting ln 2 after 32 bits.)
const (
	ln2   = math.Ln2
	ln2Hi = 6.93147180369123816490e-01
	ln2Lo = 1.90821492927058770002e-10
)

// exp is e^x for x from -708 to 709; 0 below and infinity above.
//
// Method: x = k·ln 2 + r with |r| ≤ ln(2)/2. Then e^r = 1 + 2r/(R - r) with
// R = r·coth(r/2) = 2 + Σ 2·B(2n)·r^2n/(2n)!, B the Bernoulli numbers
// (Abramowitz and Stegun, Handbook of Mathematical Functions, 1964, 4.5.67);
// six terms leave less than 2^-58.
func exp(x float64) float64 {
	switch {
	case x != x:
		return x
	case x > 709:
		return math.Inf(1)
	case x < -708:
		return 0
	}
	k := float64(int64(float64(x*(1/math.Ln2)) + math.Copysign(0.5, x)))
	hi, lo := x-float64(k*ln2Hi), float64(k*ln2Lo)
	r := hi - lo
	z := float64(r * r)
	tail := -691.0 / 653837184000
	tail = 1.0/23950080 + float64(z*tail)
	tail = -1.0/604800 + float64(z*tail)
	tail = 1.0/15120 + float64(z*tail)
	tail = -1.0/360 + float64(z*tail)
	tail = 1.0/6 + float64(z*tail)
	// 2r/(R-r) = r + r·c/(2-c) with c = r - (R-2): the large part, r, keeps
	// what its own rounding lost.
	c := r - float64(z*tail)
	y := 1 + (hi + (float64(r*c)/(2-c) - lo))
	return y * math.Float64frombits(uint64(1023+int64(k))<<52)
}

// ln is the natural logarithm of a finite x > 0.
//
// Method: x = 2^k·f with f from √½ to √2, and s = (f-1)/(f+1). Then
// ln f = 2·artanh s = g - s·(g - 2·(s²/3 + s⁴/5 + …)) with g = f - 1
// (Abramowitz and Stegun, 4.6.22); s² is below 0.0295 and eleven terms leave
// less than 2^-60.
func ln(x float64) float64 {
	f, exponent := math.Frexp(x)
	if f < math.Sqrt2/2 {
		f *= 2
		exponent--
	}
	k := float64(exponent)
	g := f - 1
	s := g / (2 + g)
	z := float64(s * s)
	tail := 0.0
	for n := 23.0; n >= 3; n -= 2 {
		tail = float64(z * (1/n + tail))
	}
	return float64(k*ln2Hi) + (g - (float64(s*(g-float64(2*tail))) - float64(k*ln2Lo)))
}
