package spread

import "math"

// sortPositive sorts positive finite numbers from small to large, in a time
// that is linear in their number: by one digit of 11 bits after the other from
// the lowest up, as the bits of positive numbers are in the order of the
// numbers. Digits that all numbers share are left out.
func sortPositive(v []float64) {
	const (
		bits   = 11
		digits = (64 + bits - 1) / bits
		size   = 1 << bits
	)
	var counts [digits][size]int32 // MaxRealisations fits
	for _, x := range v {
		u := math.Float64bits(x)
		for d := range digits {
			counts[d][u>>(d*bits)&(size-1)]++
		}
	}
	a, b := v, make([]float64, len(v))
	for d := range digits {
		count := &counts[d]
		if len(v) == 0 || int(count[math.Float64bits(v[0])>>(d*bits)&(size-1)]) == len(v) {
			continue
		}
		at := int32(0)
		for i, n := range count {
			count[i] = at
			at += n
		}
		for _, x := range a {
			i := math.Float64bits(x) >> (d * bits) & (size - 1)
			b[count[i]] = x
			count[i]++
		}
		a, b = b, a
	}
	copy(v, a) // onto itself after an even number of digits
}
