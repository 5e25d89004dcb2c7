package siteclass

import (
	"bytes"
	"strconv"

	"shearbook/vs30"
)

// appendCount adds a whole number.
func appendCount(b []byte, n int) []byte { return strconv.AppendInt(b, int64(n), 10) }

// appendBeside adds what numberBeside writes.
func appendBeside(b []byte, v, other float64) []byte {
	var room [32]byte
	start := len(b)
	b = appendShort(b, v)
	if bytes.Equal(b[start:], appendShort(room[:0], other)) {
		return append(b[:start], moreBeside(v, other)...)
	}
	return b
}

// appendShort adds what short writes.
func appendShort(b []byte, v float64) []byte {
	start := len(b)
	b, ok := vs30.AppendFour(b, v)
	if !ok {
		return append(b, digits(v, 4)...)
	}
	if v >= 1000 {
		b = append(b, 0)
		copy(b[start+2:], b[start+1:])
		b[start+1] = ','
	}
	return b
}

// appendPair adds what numberBeside writes of each of two numbers beside the
// other, with text between.
func appendPair(b []byte, v float64, between string, other float64) []byte {
	start := len(b)
	b = appendShort(b, v)
	middle := len(b)
	b = append(b, between...)
	end := len(b)
	b = appendShort(b, other)
	if !bytes.Equal(b[start:middle], b[end:]) {
		return b
	}
	b = append(append(b[:start], moreBeside(v, other)...), between...)
	return append(b, moreBeside(other, v)...)
}
