package notebook

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"shearbook/profile"
)

// System is the system of units a report is printed in.
type System uint8

// The systems of units.
const (
	SI System = iota // m, m/s
	US               // ft, ft/s
)

// ParseSystem returns the system that a word names.
func ParseSystem(word string) (System, bool) {
	switch strings.ToUpper(word) {
	case "SI":
		return SI, true
	case "US":
		return US, true
	}
	return SI, false
}

// String returns "SI" or "US".
func (s System) String() string { return [...]string{"SI", "US"}[s] }

// length returns the unit of length of the system.
func (s System) length() profile.Unit {
	return [...]profile.Unit{profile.Metre, profile.FootUnit}[s]
}

// velocity returns the unit of velocity of the system.
func (s System) velocity() profile.Unit {
	return [...]profile.Unit{profile.MetrePerSecond, profile.FootPerSecond}[s]
}

// Quantity is a number with its dimension: metres, seconds and kilopascals
// to whole powers. Notes of doubt travel with it into whatever is computed
// from it, and stand as footnotes where it is printed.
type Quantity struct {
	Value    float64 // in m, s, kPa
	M, S, P  int     // exponents of metre, second, kilopascal
	Decimals int     // printed decimals, at most for a length; -1 for 4 significant figures
	Notes    []profile.Note
	Missing  string // why there is no value; "" where there is one
}

func metres(v float64) Quantity  { return Quantity{Value: v, M: 1, Decimals: 2} }
func seconds(v float64) Quantity { return Quantity{Value: v, S: 1, Decimals: 3} }
func metresPerSecond(v float64, notes ...profile.Note) Quantity {
	return Quantity{Value: v, M: 1, S: -1, Decimals: 1, Notes: notes}
}
func number(v float64) Quantity   { return Quantity{Value: v, Decimals: -1} }
func missing(why string) Quantity { return Quantity{Missing: why} }
func (q Quantity) pure() bool     { return q.M == 0 && q.S == 0 && q.P == 0 }
func (q Quantity) like(r Quantity) bool {
	return q.M == r.M && q.S == r.S && q.P == r.P
}

// Print returns the quantity in a system of units, as "287.1 m/s".
func (q Quantity) Print(s System) string {
	v, unit := q.Value, ""
	for range abs(q.M) {
		if q.M > 0 {
			v /= s.length().Factor
		} else {
			v *= s.length().Factor
		}
	}
	unit = unitName([]power{{s.length().Name, q.M}, {"s", q.S}, {"kPa", q.P}})
	if s == US && q.P == 1 && q.M == 0 && q.S == 0 {
		v, unit = v/profile.PoundPerSquareF.Factor, "psf"
	}
	text := ""
	switch {
	case q.Decimals >= 0 && q.M == 1 && q.S == 0 && q.P == 0:
		text = shortest(v, q.Decimals)
	case q.Decimals >= 0:
		text = fixed(v, q.Decimals)
	case v == math.Trunc(v) && math.Abs(v) < 1e6:
		text = fixed(v, 0)
	default:
		text = strings.ReplaceAll(strconv.FormatFloat(v, 'g', 4, 64), "-", "−")
	}
	if unit == "" {
		return text
	}
	return text + " " + unit
}

func abs(n int) int {
	if n < 0 {
		return -n
	}
	return n
}

type power struct {
	unit string
	n    int
}

// unitName writes powers of units as "m/s", "m²", "1/s".
func unitName(powers []power) string {
	var over, under []string
	for _, p := range powers {
		switch {
		case p.n > 0:
			over = append(over, p.unit+superscript(p.n))
		case p.n < 0:
			under = append(under, p.unit+superscript(-p.n))
		}
	}
	switch {
	case len(under) == 0:
		return strings.Join(over, "·")
	case len(over) == 0:
		return "1/" + strings.Join(under, "·")
	}
	return strings.Join(over, "·") + "/" + strings.Join(under, "·")
}

func superscript(n int) string {
	if n == 1 {
		return ""
	}
	return strings.NewReplacer("0", "⁰", "1", "¹", "2", "²", "3", "³", "4", "⁴",
		"5", "⁵", "6", "⁶", "7", "⁷", "8", "⁸", "9", "⁹").Replace(strconv.Itoa(n))
}

// fixed prints v with n decimals, a true minus sign and a comma at every
// third digit before the point.
func fixed(v float64, n int) string {
	text := strconv.FormatFloat(v, 'f', n, 64)
	sign := ""
	if strings.HasPrefix(text, "-") {
		text = text[1:]
		if strings.Trim(text, "0.") != "" {
			sign = "−"
		}
	}
	whole, rest, _ := strings.Cut(text, ".")
	if len(whole) > 3 {
		for i := len(whole) - 3; i > 0; i -= 3 {
			whole = whole[:i] + "," + whole[i:]
		}
	}
	if n > 0 {
		return sign + whole + "." + rest
	}
	return sign + whole
}

// shortest prints v with as many decimals as it needs, at most n.
func shortest(v float64, n int) string {
	text := fixed(v, n)
	if strings.Contains(text, ".") {
		text = strings.TrimRight(strings.TrimRight(text, "0"), ".")
	}
	return text
}

// add, subtract, multiply and divide are the arithmetic of quantities.

func add(a, b Quantity) (Quantity, error)      { return sum(a, b, b.Value, "+") }
func subtract(a, b Quantity) (Quantity, error) { return sum(a, b, -b.Value, "−") }

func sum(a, b Quantity, value float64, sign string) (Quantity, error) {
	if err := usable(a, b); err != nil {
		return a, err
	}
	if !a.like(b) {
		return a, fmt.Errorf("%s %s %s: the units do not agree", a.Print(SI), sign, b.Print(SI))
	}
	a.Value += value
	a.Decimals = max(a.Decimals, b.Decimals)
	a.Notes = union(a.Notes, b.Notes)
	return a, nil
}

func multiply(a, b Quantity) (Quantity, error) {
	if err := usable(a, b); err != nil {
		return a, err
	}
	return Quantity{Value: a.Value * b.Value, M: a.M + b.M, S: a.S + b.S, P: a.P + b.P,
		Decimals: keep(a, b), Notes: union(a.Notes, b.Notes)}, nil
}

func divide(a, b Quantity) (Quantity, error) {
	if err := usable(a, b); err != nil {
		return a, err
	}
	if b.Value == 0 {
		return a, fmt.Errorf("division of %s by zero", a.Print(SI))
	}
	return Quantity{Value: a.Value / b.Value, M: a.M - b.M, S: a.S - b.S, P: a.P - b.P,
		Decimals: keep(a, b), Notes: union(a.Notes, b.Notes)}, nil
}

// keep returns the decimals of a product: those of the side that has a
// dimension, if only one has; else significant figures.
func keep(a, b Quantity) int {
	switch {
	case b.pure() && !a.pure():
		return a.Decimals
	case a.pure() && !b.pure() && b.S >= 0:
		return b.Decimals
	}
	return -1
}

func usable(qs ...Quantity) error {
	for _, q := range qs {
		if q.Missing != "" {
			return fmt.Errorf("%s", q.Missing)
		}
	}
	return nil
}

// union returns the notes of a and those of b that a does not hold.
func union(a, b []profile.Note) []profile.Note {
	all := a[:len(a):len(a)]
	for _, n := range b {
		if !holds(all, n) {
			all = append(all, n)
		}
	}
	return all
}

func holds(notes []profile.Note, n profile.Note) bool {
	for _, m := range notes {
		if m.Text == n.Text {
			return true
		}
	}
	return false
}
