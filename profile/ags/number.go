package ags

import (
	"math"
	"math/big"
	"strconv"
	"strings"

	"shearbook/profile"
)

// parseNumber reads a number. It returns what is wrong with it as the end of
// a sentence.
func parseNumber(text []byte) (v float64, problem string) {
	digits := false
	for i, b := range text {
		switch {
		case b >= '0' && b <= '9':
			digits = true
		case b == '.', (b == 'e' || b == 'E') && digits:
		case (b == '+' || b == '-') && (i == 0 || text[i-1] == 'e' || text[i-1] == 'E'):
		case b == ',':
			return 0, "has a comma where a decimal point is expected"
		default:
			return 0, "is not a number"
		}
	}
	v, err := strconv.ParseFloat(string(text), 64)
	switch {
	case err != nil && math.IsInf(v, 0):
		return 0, "is not a finite number"
	case err != nil:
		return 0, "is not a number"
	}
	return v, ""
}

// bound is the sign that stands before a result which is one.
type bound string

const (
	exact   bound = ""
	atLeast bound = "a lower bound"
	atMost  bound = "an upper bound"
)

// parseResult reads a result of a test, which may be a bound such as ">80".
func parseResult(text []byte) (v float64, is bound, problem string) {
	s := string(text)
	for _, sign := range []struct {
		text string
		is   bound
	}{{">=", atLeast}, {"≥", atLeast}, {">", atLeast}, {"<=", atMost}, {"≤", atMost}, {"<", atMost}} {
		if rest, ok := strings.CutPrefix(s, sign.text); ok {
			s, is = strings.TrimSpace(rest), sign.is
			break
		}
	}
	v, problem = parseNumber([]byte(s))
	return v, is, problem
}

// speed is a unit of velocity, or of slowness, its inverse.
type speed struct {
	name     string // as the file gives it
	factor   float64
	slowness bool // then factor/value is in m/s, otherwise factor·value
}

// slownesses are the units of slowness in lower case, with µ as u, and how
// many m/s a slowness of one of them is. The foot is the international one.
var slownesses = map[string]float64{
	"us/ft": 1e6 * profile.Foot, "us/f": 1e6 * profile.Foot, "usec/ft": 1e6 * profile.Foot,
	"us/m": 1e6, "usec/m": 1e6,
	"ms/m": 1e3, "ms/ft": 1e3 * profile.Foot,
	"s/km": 1e3, "s/m": 1,
}

// parseSpeed returns the unit that text spells, and false if it is neither of
// velocity nor of slowness.
func parseSpeed(text string) (speed, bool) {
	if u, ok := profile.ParseUnit(text, profile.Velocity); ok {
		return speed{name: text, factor: u.Factor}, true
	}
	plain := strings.ToLower(strings.TrimSpace(text))
	plain = strings.NewReplacer("µ", "u", "μ", "u", " ", "").Replace(plain)
	factor, ok := slownesses[plain]
	return speed{name: text, factor: factor, slowness: true}, ok
}

// si returns a value in m/s. That of a slowness of 0 is infinite.
func (u speed) si(v float64) float64 {
	if u.slowness {
		return u.factor / v
	}
	return u.factor * v
}

// hintSpeed lists the units of velocity and slowness.
var hintSpeed = "units that are read are " + strings.Join(profile.UnitNames(profile.Velocity), ", ") + ", us/ft, us/m, ms/m and s/km"

// parseAngle reads a latitude or longitude: decimal degrees, or degrees,
// minutes and seconds with colons between them (type DMS) or with their
// signs. North and east are positive; a letter may say which.
func parseAngle(text string, positive, negative byte) (float64, bool) {
	text, sign := hemisphere(strings.ToUpper(strings.TrimSpace(text)), positive, negative)
	if rest, ok := strings.CutPrefix(text, "-"); ok && sign == 0 {
		text, sign = rest, -1
	} else if sign == 0 {
		text, sign = strings.TrimPrefix(text, "+"), 1
	}
	parts := strings.Split(degreeSigns.Replace(text), ":")
	for len(parts) > 1 && strings.TrimSpace(parts[len(parts)-1]) == "" {
		parts = parts[:len(parts)-1]
	}
	if len(parts) > 3 {
		return 0, false
	}
	degrees, unit := new(big.Rat), int64(1)
	for i, p := range parts {
		v, ok := plainDecimal(strings.TrimSpace(p))
		if !ok || i > 0 && v.Cmp(sixty) >= 0 || i < len(parts)-1 && !v.IsInt() {
			return 0, false
		}
		degrees.Add(degrees, v.Quo(v, big.NewRat(unit, 1)))
		unit *= 60
	}
	x, _ := degrees.Float64()
	return sign * x, true
}

var sixty = big.NewRat(60, 1)

// plainDecimal reads a short number without sign and exponent, exactly.
func plainDecimal(text string) (*big.Rat, bool) {
	const longest = 40
	digits := false
	for i := range len(text) {
		digits = digits || text[i] != '.'
		if (text[i] < '0' || text[i] > '9') && text[i] != '.' {
			return nil, false
		}
	}
	if !digits || len(text) > longest {
		return nil, false
	}
	return new(big.Rat).SetString(text)
}

// degreeSigns turns the signs of degrees, minutes and seconds into colons.
var degreeSigns = strings.NewReplacer("°", ":", "º", ":", "'", ":", "’", ":", "′", ":", `"`, "", "”", "", "″", "")

// hemisphere takes the letter of a hemisphere off either end of an angle and
// returns its sign, 0 if there is no letter.
func hemisphere(text string, positive, negative byte) (rest string, sign float64) {
	if text == "" {
		return text, 0
	}
	for _, end := range []int{len(text) - 1, 0} {
		rest := strings.TrimSpace(text[:end] + text[end+1:])
		switch text[end] {
		case positive:
			return rest, 1
		case negative:
			return rest, -1
		}
	}
	return text, 0
}
