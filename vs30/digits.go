package vs30

import "math"

// AppendFour adds a number from 1 to 9999 with four significant digits, without
// zeros at its end: what fmt writes as %.4g. It does so where the digits are
// beyond doubt, and returns false, and b as it was, where they are not: outside
// that range, beside a power of ten, and half way between two numbers of four
// digits. It does not allocate, and takes a small part of the time of package
// strconv; the notes of a million profiles hold some ten million numbers.
func AppendFour(b []byte, v float64) ([]byte, bool) {
	var per float64
	var places int
	switch {
	case v >= 1 && v < 9.999:
		per, places = 1000, 3
	case v >= 10.001 && v < 99.99:
		per, places = 100, 2
	case v >= 100.01 && v < 999.9:
		per, places = 10, 1
	case v >= 1000.1 && v < 9999:
		per, places = 1, 0
	default:
		return b, false
	}
	scaled := v*per + 0.5
	whole := math.Floor(scaled)
	if half := scaled - whole; half < 1e-6 || half > 1-1e-6 {
		return b, false
	}
	digits := uint(whole)
	text := [4]byte{byte('0' + digits/1000), byte('0' + digits/100%10), byte('0' + digits/10%10), byte('0' + digits%10)}
	point := 4 - places
	b = append(b, text[:point]...)
	end := 4
	for end > point && text[end-1] == '0' {
		end--
	}
	if end > point {
		b = append(append(b, '.'), text[point:end]...)
	}
	return b, true
}
