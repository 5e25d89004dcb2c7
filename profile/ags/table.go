package ags

import (
	"bytes"
	"fmt"
	"math"
	"math/big"
	"slices"
	"strconv"
	"strings"
	"unicode"

	"golang.org/x/text/unicode/norm"
)

// heading is a heading that is written.
type heading struct {
	name, unit, kind string // kind is the TYPE
}

// table is a group that is written.
type table struct {
	name     string
	headings []heading
	rows     [][]string
}

func (t *table) add(fields ...string) { t.rows = append(t.rows, fields) }

// write writes the group, with a blank line after it. All lines end in CRLF.
func (t *table) write(b *bytes.Buffer) {
	line := func(word string, n int, field func(int) string) {
		b.WriteString(`"` + word + `"`)
		for i := range n {
			b.WriteString(`,"` + strings.ReplaceAll(field(i), `"`, `""`) + `"`)
		}
		b.WriteString("\r\n")
	}
	n := len(t.headings)
	line(rowGroup, 1, func(int) string { return t.name })
	line(rowHeading, n, func(i int) string { return t.headings[i].name })
	line(rowUnit, n, func(i int) string { return t.headings[i].unit })
	line(rowType, n, func(i int) string { return t.headings[i].kind })
	for _, row := range t.rows {
		line(rowData, n, func(i int) string { return row[i] })
	}
	b.WriteString("\r\n")
}

// trim removes the headings, from the given one on, that are blank in every
// row.
func (t *table) trim(from int) {
	for i := len(t.headings) - 1; i >= from; i-- {
		if slices.ContainsFunc(t.rows, func(row []string) bool { return row[i] != "" }) {
			continue
		}
		t.headings = slices.Delete(slices.Clone(t.headings), i, i+1)
		for k := range t.rows {
			t.rows[k] = slices.Delete(t.rows[k], i, i+1)
		}
	}
}

// digits is a number with the fewest digits that give it again.
func digits(x float64) string {
	if x != 0 && (math.Abs(x) < 1e-6 || math.Abs(x) >= 1e15) {
		return strconv.FormatFloat(x, 'e', -1, 64)
	}
	return strconv.FormatFloat(x, 'f', -1, 64)
}

// decimals is a number with n decimals.
func decimals(x float64, n int) string {
	if text := strconv.FormatFloat(x, 'f', n, 64); strings.Trim(text, "-0.") != "" {
		return text
	}
	return strconv.FormatFloat(0, 'f', n, 64)
}

// sameDecimal reports whether two decimals give the number.
func sameDecimal(x float64) bool {
	v, err := strconv.ParseFloat(decimals(x, 2), 64)
	return err == nil && v == x
}

// dms is an angle as degrees, minutes and seconds, with the fewest decimals
// that give it again.
func dms(x float64) string {
	const most = 18 // enough for all but the last few 10⁻²¹ degrees
	for n := 0; ; n++ {
		text := dmsTo(x, n)
		if v, ok := parseAngle(text, 'N', 'S'); ok && v == x || n == most {
			return text
		}
	}
}

// dmsTo is the same with n decimals.
func dmsTo(x float64, n int) string {
	exact := new(big.Rat).SetFloat64(math.Abs(x))
	exact.Mul(exact, big.NewRat(3600, 1))
	whole, fraction, _ := strings.Cut(exact.FloatString(n), ".")
	seconds, _ := strconv.Atoi(whole) // of at most 180 degrees
	if fraction != "" {
		fraction = "." + fraction
	}
	sign := ""
	if x < 0 {
		sign = "-"
	}
	return fmt.Sprintf("%s%d:%02d:%02d%s", sign, seconds/3600, seconds/60%60, seconds%60, fraction)
}

// spelled are characters for which ASCII has other words.
var spelled = strings.NewReplacer(
	"µ", "u", "μ", "u", "°", " deg ", "±", "+/-", "×", "x", "≤", "<=", "≥", ">=",
	"–", "-", "—", "-", "−", "-", "‐", "-", "’", "'", "‘", "'", "“", `"`, "”", `"`, "…", "...",
	"ß", "ss", "æ", "ae", "Æ", "AE", "ø", "o", "Ø", "O", "œ", "oe", "Œ", "OE", "ł", "l", "Ł", "L", "ı", "i", "đ", "d", "Đ", "D",
)

// ascii is a text in one line of ASCII: letters without their accents, other
// characters by the words above, and a question mark for the rest.
func ascii(text string) string {
	plain := true
	for i := range len(text) {
		plain = plain && text[i] < 0x80 && text[i] >= ' ' && text[i] != 0x7f
	}
	if !plain {
		text = strings.Map(func(r rune) rune {
			switch {
			case unicode.IsSpace(r):
				return ' '
			case r < ' ' || r == 0x7f || unicode.Is(unicode.Mn, r):
				return -1
			case r >= 0x80:
				return '?'
			}
			return r
		}, norm.NFKD.String(spelled.Replace(strings.ToValidUTF8(text, "?"))))
	}
	return clean([]byte(text))
}
