package pdf

import (
	"strings"
	"unicode/utf8"
)

// bind marks the words that belong with the next: a number before its unit,
// and what stands on either side of a relation. Lines break elsewhere if they
// can.
func bind(words []word) {
	for i := range len(words) - 1 {
		a, b := &words[i], &words[i+1]
		if a.gap != nil && len(a.runs) > 0 && len(b.runs) > 0 {
			a.binds = isRelation(a) || isRelation(b) || endsInFigure(a) && isUnit(b)
		}
	}
}

func isRelation(w *word) bool {
	if len(w.runs) != 1 {
		return false
	}
	switch w.runs[0].text {
	case "=", "<", ">", "≤", "≥", "≈", "±", "×", "·", "/":
		return true
	}
	return false
}

func endsInFigure(w *word) bool {
	text := w.runs[len(w.runs)-1].text
	last, _ := utf8.DecodeLastRuneInString(text)
	return isFigure(last)
}

// isUnit tells whether a word is a unit that reports write behind numbers.
func isUnit(w *word) bool {
	text := strings.TrimRight(w.runs[0].text, ".,;:)")
	switch text {
	case "m", "mm", "cm", "km", "ft", "in", "m/s", "km/s", "ft/s", "s", "ms", "Hz", "%", "°",
		"kPa", "MPa", "psf", "ksf", "kg/m³", "g/cm³", "t/m³", "kN/m³", "pcf", "blows":
		return true
	}
	return false
}
