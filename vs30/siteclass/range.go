package siteclass

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"shearbook/profile"
)

// Operator is the comparison printed with a bound.
type Operator uint8

// The printed operators. Dash is a bound of a printed range "a to b" that
// does not say which class owns it; both ends are counted in.
const (
	Open    Operator = iota // no bound
	Above                   // >
	AtLeast                 // ≥
	Below                   // <
	AtMost                  // ≤
	Dash
)

var operatorSigns = [...]string{"", ">", "≥", "<", "≤", "–"}

// String returns the sign of the operator; a dash for a printed range.
func (o Operator) String() string { return operatorSigns[o] }

// Limit is one printed bound.
type Limit struct {
	Op    Operator
	Value float64 // in the unit of the column
}

// Range is the cell of a class table: a lower and an upper bound, either of
// which may be open.
type Range struct {
	Lower, Upper Limit
}

// The functions below write a cell the way it is printed.

func above(v float64) Range      { return Range{Lower: Limit{Above, v}} }
func atLeast(v float64) Range    { return Range{Lower: Limit{AtLeast, v}} }
func below(v float64) Range      { return Range{Upper: Limit{Below, v}} }
func atMost(v float64) Range     { return Range{Upper: Limit{AtMost, v}} }
func dash(lo, hi float64) Range  { return Range{Limit{Dash, lo}, Limit{Dash, hi}} }
func (r Range) to(u Range) Range { return Range{r.Lower, u.Upper} }
func dashUpTo(hi float64) Range  { return Range{Upper: Limit{Dash, hi}} }

// Empty reports whether the cell has no bounds at all.
func (r Range) Empty() bool { return r.Lower.Op == Open && r.Upper.Op == Open }

// Contains reports whether the value lies in the cell by its printed
// operators. A value within one part in 10⁹ of a bound is the bound.
func (r Range) Contains(v float64) bool {
	return !math.IsNaN(v) && r.Lower.holds(v, true) && r.Upper.holds(v, false)
}

// String returns the cell as printed: "> 5,000", "2,500 – 5,000", "> 360, ≤
// 760"; a dash for an empty one.
func (r Range) String() string {
	lo, hi := r.Lower, r.Upper
	switch {
	case r.Empty():
		return "–"
	case lo.Op == Dash && hi.Op == Dash:
		return number(lo.Value) + " – " + number(hi.Value)
	case hi.Op == Open:
		return lo.String()
	case lo.Op == Open:
		return hi.String()
	}
	return lo.String() + ", " + hi.String()
}

// String returns the sign and the value: "≤ 760".
func (l Limit) String() string { return l.Op.String() + " " + number(l.Value) }

// holds reports whether v satisfies the bound as the lower or as the upper
// bound of a cell.
func (l Limit) holds(v float64, lower bool) bool {
	same := equal(v, l.Value)
	switch l.Op {
	case Open:
		return true
	case Above:
		return v > l.Value && !same
	case AtLeast:
		return v > l.Value || same
	case Below:
		return v < l.Value && !same
	case AtMost:
		return v < l.Value || same
	case Dash:
		return same || (v > l.Value) == lower
	}
	panic(fmt.Sprintf("siteclass: operator %d is none", l.Op))
}

// equality is the relative difference up to which a value is its bound.
const equality = 1e-9

// equal reports whether v is the bound.
func equal(v, bound float64) bool { return math.Abs(v-bound) <= equality*math.Abs(bound) }

// snap returns the bound where v is the bound, and else v.
func snap(v, bound float64) float64 {
	if equal(v, bound) {
		return bound
	}
	return v
}

// number writes a value with at most six significant digits and commas
// between thousands.
func number(v float64) string { return digits(v, 6) }

// short writes a value for a note, with at most four significant digits.
func short(v float64) string {
	var room [32]byte
	return string(appendShort(room[:0], v))
}

// numberBeside writes v with as many digits as it takes, from four to twelve,
// to look different from other.
func numberBeside(v, other float64) string {
	var room [32]byte
	return string(appendBeside(room[:0], v, other))
}

// moreBeside is numberBeside where four digits do not tell the two apart.
func moreBeside(v, other float64) string {
	for n := 4; n < 12; n++ {
		if s := digits(v, n); s != digits(other, n) {
			return s
		}
	}
	return digits(v, 12)
}

// digits writes a value with at most n significant digits after rounding,
// never fewer than its whole part has.
func digits(v float64, n int) string {
	if math.IsInf(v, 0) || math.IsNaN(v) {
		return strconv.FormatFloat(v, 'g', -1, 64)
	}
	whole := 1
	if a := math.Abs(v); a >= 1 {
		whole = int(math.Log10(a)) + 1
	}
	return decimals(v, max(0, n-whole))
}

// decimals writes a value with at most n decimals and commas between
// thousands.
func decimals(v float64, n int) string {
	s := strconv.FormatFloat(v, 'f', n, 64)
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	return commas(s)
}

// commas sets commas between the thousands of a decimal number.
func commas(s string) string {
	sign, s := cutSign(s)
	whole, fraction, _ := strings.Cut(s, ".")
	for i := len(whole) - 3; i > 0; i -= 3 {
		whole = whole[:i] + "," + whole[i:]
	}
	if fraction != "" {
		fraction = "." + fraction
	}
	return sign + whole + fraction
}

func cutSign(s string) (sign, rest string) {
	if strings.HasPrefix(s, "-") {
		return "-", s[1:]
	}
	return "", s
}

// quantity writes a value of SI in a unit: "30.48 m".
func quantity(si float64, u profile.Unit) string { return withUnit(si/u.Factor, u) }

// withUnit writes a value with the name of its unit.
func withUnit(v float64, u profile.Unit) string {
	if u.Name == "" {
		return short(v)
	}
	return short(v) + " " + u.Name
}

// metres writes a length in m. What a note says of the profile alone, it says
// in m and m/s whatever the code, so that two codes say the same.
func metres(m float64) string { return short(m) + " m" }

// inUnit writes a length in m and, where the code's unit is another, in that
// beside it: "30.48 m (100 ft)".
func inUnit(m float64, u profile.Unit) string {
	if u.Factor == 1 {
		return metres(m)
	}
	return metres(m) + " (" + quantity(m, u) + ")"
}
