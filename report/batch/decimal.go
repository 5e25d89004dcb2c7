package batch

import (
	"encoding/binary"
	"math/bits"
)

// plainDecimal reads an ordinary decimal number of at most 15 digits and returns
// where it ends; where none begins it ends where it should begin. The result
// is that of strconv.ParseFloat: the digits and the power of ten are both exact
// in a float64, so that one division rounds once (Clinger 1990, How to read
// floating point numbers accurately, from memory).
//
// A number that ends within eight bytes, as nearly all do, is read in one go:
// the lengths of neighbouring cells differ, and a loop over their digits would
// spend most of its time on wrong guesses of its end.
func plainDecimal(text []byte, at int) (float64, int) {
	if len(text)-at < 8 {
		return longDecimal(text, at)
	}
	const each = 0x0101010101010101
	digits := binary.LittleEndian.Uint64(text[at:]) ^ '0'*each // the first character is the lowest byte
	others := ((digits&(0x7f*each) + 0x76*each) | digits) & (0x80 * each)
	end := bits.TrailingZeros64(others) // of the first character that is no digit, in bits and 7 more
	if end == 64 || end == 7 {
		return longDecimal(text, at)
	}
	if text[at+end>>3] != '.' {
		return eightDigits(digits << ((71 - end) & 63)), at + end>>3
	}
	point := end
	if end = bits.TrailingZeros64(others & (others - 1)); end == 64 {
		return longDecimal(text, at)
	}
	whole := uint64(1)<<((point-7)&63) - 1
	digits = digits&whole | digits>>8&^whole // without the point
	return eightDigits(digits<<((79-end)&63)) / powers[(end-point)>>3-1], at + end>>3
}

// eightDigits is the number whose digits are the bytes of a word, the first one
// the lowest.
func eightDigits(digits uint64) float64 {
	digits = digits * (10<<8 + 1) >> 8 & 0x00ff00ff00ff00ff
	digits = digits * (100<<16 + 1) >> 16 & 0x0000ffff0000ffff
	return float64(int64(digits * (10000<<32 + 1) >> 32))
}

// longDecimal is plainDecimal, digit by digit.
func longDecimal(text []byte, at int) (float64, int) {
	digits, n := uint64(0), 0
	rest := text[at:]
	for n < len(rest) && rest[n]-'0' <= 9 {
		digits = 10*digits + uint64(rest[n]-'0')
		n++
	}
	point := n
	if n > 0 && n < len(rest) && rest[n] == '.' {
		for n++; n < len(rest) && rest[n]-'0' <= 9; n++ {
			digits = 10*digits + uint64(rest[n]-'0')
		}
	}
	switch places := n - point - 1; {
	case point == 0 || n > 16 || point > 15:
		return 0, at
	case places > 0:
		return float64(digits) / powers[places], at + n
	}
	return float64(digits), at + n
}

// powers are the powers of ten that a float64 holds exactly.
var powers = [...]float64{1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16}
