package spread

import "math"

// power returns x^n for x ≥ 0, as exactly as exp.
func power(x, n float64) float64 {
	if x == 0 {
		return math.Pow(x, n)
	}
	return exponential(n * math.Log(x))
}

// exponential is exp for any x.
func exponential(x float64) float64 {
	if math.Abs(x) < 700 {
		return exp(x)
	}
	return math.Exp(x)
}

// steps is the number of values of exp's table.
const steps = 64

// powers holds 2^(k/64). It is never changed.
var powers = func() (t [steps]float64) {
	for k := range t {
		t[k] = math.Exp2(float64(k) / steps)
	}
	return t
}()

// exp returns eˣ for |x| < 700 with a relative error below 1e-13 where |x| is
// below 40, in less than half the time of math.Exp, which would be most of the
// time of drawing. With x = (k/64)·ln 2 + r and |r| ≤ ln 2/128, eˣ is 2^(k/64)
// times five terms of the series of eʳ.
func exp(x float64) float64 {
	const (
		rounder = 3 << 51 // a sum with it has no digits behind the point
		width   = math.Ln2 / steps
	)
	shifted := x*(1/width) + rounder
	k := int64(math.Float64bits(shifted)) << 13 >> 13
	r := x - (shifted-rounder)*width
	series := 1 + r*(1+r*(0.5+r*(1.0/6+r*(1.0/24))))
	return math.Float64frombits(math.Float64bits(powers[k&(steps-1)])+uint64(k>>6)<<52) * series
}
