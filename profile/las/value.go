package las

import (
	"bytes"
	"math"
	"strconv"
	"strings"

	"shearbook/profile"
)

// problem is a value that cannot be read.
type problem struct {
	spot
	text string
}

// parseNumber reads a number with a decimal point or comma.
func parseNumber(text []byte) (float64, bool) {
	digits := false
	for _, b := range text {
		switch {
		case b >= '0' && b <= '9':
			digits = true
		case b == '+' || b == '-' || b == '.' || b == ',' || (b == 'e' || b == 'E') && digits:
		default:
			return 0, false
		}
	}
	if !digits || len(text) > 64 {
		return 0, false
	}
	var room [64]byte // spares an allocation
	pointed := append(room[:0], text...)
	if i := bytes.IndexByte(pointed, ','); i >= 0 {
		pointed[i] = '.'
	}
	v, err := strconv.ParseFloat(string(pointed), 64)
	return v, err == nil
}

// isNullWord reports whether a text stands for no value: nothing, dashes, or
// what programs print for no number.
func isNullWord(text []byte) bool {
	if len(text) > 16 {
		return false
	}
	switch word := strings.Trim(strings.ToLower(string(text)), `"()`); word {
	case "", "-", "--", "---", "null", "nan", "-nan", "nan(ind)", "err", "error", "n/a", "na", "none", "inf", "-inf", "+inf", "*", "**", "***":
		return true
	default:
		_, after, found := strings.Cut(word, "#") // 1.#QNAN, -1.#IND
		return found && (strings.HasPrefix(after, "ind") || strings.HasPrefix(after, "qnan") || strings.HasPrefix(after, "inf"))
	}
}

// isNines reports whether a number is of the kind that programs write for no
// value: 9999, -999.25, 9998 and the like.
func isNines(x float64) bool {
	whole := math.Abs(x)
	if x < 0 && (whole == 999 || whole == 999.25) {
		return true
	}
	for _, nines := range []float64{9999, 99999, 999999, 9999999} {
		if whole == nines || whole == nines+0.25 || whole == nines-1 {
			return true
		}
	}
	return false
}

// take reads a value of the curve in a row, which may be none. It reports
// whether it is a word or a number that was not declared to stand for none.
func (c *curve) take(text []byte, at spot, null float64) (undeclared bool) {
	x, ok := parseNumber(text)
	v := math.NaN()
	switch {
	case ok && x == null && c.role != depthRole:
	case ok && x < 0 && isNines(x) && c.role != depthRole:
		undeclared = true
	case ok:
		v = x
	case isNullWord(text) && c.role != depthRole:
		undeclared = len(text) > 0
	case len(c.bad) < profile.MaxFaults:
		c.bad = append(c.bad, problem{at, profile.Quote(text) + " is not a number"})
	default:
		c.more++
	}
	c.values = append(c.values, v)
	c.places = append(c.places, at)
	return undeclared
}

// dropNines takes 9999 and the like for no value where both neighbours are
// far from it, and tells of each.
func (c *curve) dropNines(tell func(v float64, at spot)) {
	for i, v := range c.values {
		if !(v > 0) || !isNines(v) || near(v, c.neighbour(i, -1)) || near(v, c.neighbour(i, 1)) {
			continue
		}
		c.values[i] = math.NaN()
		tell(v, c.places[i])
	}
}

// neighbour is the next value in a direction that is a number other than
// nines, NaN if there is none within a few rows.
func (c *curve) neighbour(i, step int) float64 {
	const most = 20
	for k := 1; k <= most; k++ {
		j := i + k*step
		if j < 0 || j >= len(c.values) {
			break
		}
		if v := c.values[j]; !math.IsNaN(v) && !isNines(v) {
			return v
		}
	}
	return math.NaN()
}

// signs is which decimal signs the numbers of a file have, and where first.
type signs struct {
	point, comma, either spot // either: as 1,200, which may be 1.2 or 1200
}

// see looks at the sign of a number.
func (s *signs) see(text []byte, at spot) {
	to := &s.point
	switch i := bytes.IndexByte(text, ','); {
	case i < 0 && bytes.IndexByte(text, '.') < 0:
		return
	case i >= 0 && thousands(text, i):
		to = &s.either
	case i >= 0:
		to = &s.comma
	}
	if *to == (spot{}) {
		*to = at
	}
}

// thousands reports whether a number with a comma at i looks like 1,200.
func thousands(text []byte, i int) bool {
	head := bytes.TrimLeft(text[:i], "+-")
	return len(head) > 0 && len(head) <= 3 && head[0] != '0' && len(text)-i == 4
}

// near reports whether two numbers are within a factor of two.
func near(a, b float64) bool { return a <= 2*b && b <= 2*a }
