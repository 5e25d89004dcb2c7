package review

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"shearbook/profile"
)

// Number is a number as somebody printed it. What is printed stands for
// everything that rounds to it: 287 m/s for 286.5 to 287.5, 287.4 m/s for
// 287.35 to 287.45.
type Number struct {
	Text  string       // as printed, with its unit
	Value float64      // in SI
	Half  float64      // in SI: half a unit of the last printed place; 0 where nothing is printed
	Unit  profile.Unit // as printed
}

// String is the number with its unit, with four decimals at most.
func (n Number) String() string {
	if n.Half > 0 && n.Half < 0.5e-4*n.Unit.Factor {
		return short(n.Value/n.Unit.Factor, 4) + " " + n.Unit.Name
	}
	return n.Text
}

// Known reports whether there is a number at all.
func (n Number) Known() bool { return n.Text != "" }

// Means reports whether v (SI) rounds to the number as it is printed, or lies
// within tolerance (relative) of it. Both ends of what rounds to it count,
// and the noise of floating point does too.
func (n Number) Means(v, tolerance float64) bool {
	within := max(n.Half, tolerance*math.Abs(n.Value))
	return math.Abs(v-n.Value) <= within+noise*math.Abs(v)
}

// longestNumber is the longest text in bytes that is read as a number.
const longestNumber = 100

// ParseNumber reads a number with its unit, such as "287 m/s" or "942.1ft/s",
// of a dimension. Where the text has no unit it is taken to be in unit; a
// unit without a name makes that an error.
func ParseNumber(text string, d profile.Dimension, unit profile.Unit) (Number, error) {
	text = strings.TrimSpace(text)
	if len(text) > longestNumber {
		return Number{}, fmt.Errorf("%s is too long for a number", profile.Quote(text))
	}
	number := numeral(text)
	word := strings.TrimSpace(text[len(number):])
	number = strings.ReplaceAll(number, ",", "")
	switch {
	case word != "":
		u, ok := profile.ParseUnit(word, d)
		if !ok {
			return Number{}, fmt.Errorf("%s is not a unit of %s (%s)", profile.Quote(word), d, strings.Join(profile.UnitNames(d), ", "))
		}
		unit = u
	case unit.Name == "":
		return Number{}, fmt.Errorf("%s states no unit (%s)", profile.Quote(text), strings.Join(profile.UnitNames(d), ", "))
	}
	return printed(number, unit)
}

// numeral is the number that a text begins with: digits with their sign and
// point, commas before each third digit ("1,200"), an exponent ("2.469e2").
// A comma that stands elsewhere is none of it.
func numeral(text string) string {
	digits := func(at int) int {
		n := at
		for n < len(text) && '0' <= text[n] && text[n] <= '9' {
			n++
		}
		return n
	}
	cut := strings.IndexFunc(text, func(r rune) bool { return !strings.ContainsRune("+-.0123456789", r) })
	if cut < 0 {
		return text
	}
	if first := digits(0); text[cut] == ',' && first == cut && 0 < first && first <= 3 && text[0] != '0' {
		for cut < len(text) && text[cut] == ',' && digits(cut+1) == cut+4 {
			cut += 4
		}
		if cut < len(text) && text[cut] == '.' {
			cut = digits(cut + 1)
		}
	}
	if cut > 0 && cut < len(text) && (text[cut] == 'e' || text[cut] == 'E') {
		from := cut + 1
		if from < len(text) && (text[from] == '+' || text[from] == '-') {
			from++
		}
		if end := digits(from); end > from {
			return text[:end]
		}
	}
	return text[:cut]
}

// printed is the plain decimal number of a text in a unit.
func printed(number string, unit profile.Unit) (Number, error) {
	v, err := strconv.ParseFloat(number, 64)
	if err != nil || math.IsInf(v, 0) || math.IsNaN(v) {
		return Number{}, fmt.Errorf("%s is not a number", profile.Quote(number))
	}
	return Number{
		Text:  number + " " + unit.Name,
		Value: v * unit.Factor,
		Half:  0.5 * lastPlace(number) * unit.Factor,
		Unit:  unit,
	}, nil
}

// lastPlace is the value of one unit of the last digit of a number: 1 of 287
// and of 290, 0.1 of 287.4, 0.001 of 2.8740e-1 without its exponent's sign
// counting as a digit.
func lastPlace(number string) float64 {
	mantissa, exponent, _ := strings.Cut(strings.ToLower(number), "e")
	power := 0
	if exponent != "" {
		power, _ = strconv.Atoi(exponent) // it was read as a number before
	}
	if _, decimals, ok := strings.Cut(mantissa, "."); ok {
		power -= len(decimals)
	}
	return math.Pow10(power)
}

// in prints v (SI) in the unit of the number, with one digit more than the
// number has, and four decimals at most.
func (n Number) in(v float64) string {
	unit := n.Unit
	if unit.Name == "" {
		unit = profile.MetrePerSecond
	}
	places := 1
	if n.Half > 0 {
		places = max(0, int(math.Round(-math.Log10(2*n.Half/unit.Factor)))) + 1
	}
	return strconv.FormatFloat(v/unit.Factor, 'f', min(places, 4), 64) + " " + unit.Name
}

// short prints a number with at most places decimals and no zeros behind.
func short(v float64, places int) string {
	text := strconv.FormatFloat(v, 'f', places, 64)
	if strings.Contains(text, ".") {
		text = strings.TrimRight(strings.TrimRight(text, "0"), ".")
	}
	if text == "-0" {
		return "0"
	}
	return text
}

func metres(v float64) string { return short(v, 2) + " m" }

func speed(v float64) string { return short(v, 1) + " m/s" }
