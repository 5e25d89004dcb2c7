package review

import (
	"strconv"
	"strings"
	"unicode"

	"shearbook/profile"
)

// A survey's own figures (longest wavelength, spread, spacing of receivers)
// stand above the layers of a file under keys that readers carry along
// unread. They are looked up here leniently: case, hyphens and a unit in
// brackets do not matter.

// length returns a length in m that a profile's file states under one of a
// few keys, and false where it states none that can be read. A number without
// a unit is in the unit in brackets after its key, or else in the unit of the
// file's depths.
func length(p *profile.Profile, keys ...string) (float64, bool) {
	if p.Reading == nil {
		return 0, false
	}
	for _, m := range p.Reading.Metadata {
		name, unit := keyAndUnit(m.Key)
		for _, key := range keys {
			if name == key {
				if v, ok := lengthOf(m.Value, unit, p.Reading); ok {
					return v, true
				}
			}
		}
	}
	return 0, false
}

// longestKey is the longest key in bytes that is looked at.
const longestKey = 100

// keyAndUnit is a key in lower case with one space between words, and the
// unit in brackets after it.
func keyAndUnit(key string) (name, unit string) {
	if len(key) > longestKey {
		return "", ""
	}
	name = strings.ToLower(key)
	if at := strings.IndexAny(name, "(["); at >= 0 {
		unit = strings.Trim(name[at:], "()[] ")
		name = name[:at]
	}
	words := strings.FieldsFunc(name, func(r rune) bool { return !unicode.IsLetter(r) && !unicode.IsDigit(r) })
	return strings.Join(words, " "), unit
}

// lengthOf reads the number that a text begins with, and its unit.
func lengthOf(text, unit string, r *profile.Reading) (float64, bool) {
	text = strings.TrimSpace(text)
	cut := strings.IndexFunc(text, func(r rune) bool { return !strings.ContainsRune("+-.0123456789", r) })
	number, rest := text, ""
	if cut >= 0 {
		number, rest = text[:cut], strings.TrimSpace(text[cut:])
	}
	v, err := strconv.ParseFloat(number, 64)
	if err != nil || !(v > 0) || v > profile.MaxDepth {
		return 0, false
	}
	word, _, _ := strings.Cut(rest, " ")
	for _, candidate := range []string{strings.TrimRight(word, ",;."), unit, r.Unit(profile.Bottom), r.Unit(profile.Thickness), r.Unit(profile.Top)} {
		if u, ok := profile.ParseUnit(candidate, profile.Length); ok {
			return v * u.Factor, true
		}
		if candidate == word && word != "" {
			return 0, false // a unit that is not known
		}
	}
	return 0, false
}

// The keys of a survey's own figures.
var (
	longestWavelength  = []string{"longest wavelength", "maximum wavelength", "max wavelength", "longest usable wavelength", "wavelength max"}
	shortestWavelength = []string{"shortest wavelength", "minimum wavelength", "min wavelength", "shortest usable wavelength", "wavelength min"}
	spreadLength       = []string{"spread length", "length of spread", "array length", "line length", "spread", "longest offset"}
	receiverSpacing    = []string{"receiver spacing", "geophone spacing", "spacing of receivers", "channel spacing"}
	deepestReceiver    = []string{"deepest receiver", "depth of deepest receiver", "deepest reading", "deepest test"}
)

// method is the kind of a survey.
type method uint8

const (
	otherMethod method = iota
	surfaceWaves
	refraction
	inHole
)

// methodOf recognises the kind of survey from its stated method.
func methodOf(text string) method {
	text = strings.ToLower(text)
	contains := func(words ...string) bool {
		for _, w := range words {
			if strings.Contains(text, w) {
				return true
			}
		}
		return false
	}
	switch {
	case contains("masw", "sasw", "remi", "surface wave", "surface-wave", "microtremor", "spac", "love wave", "rayleigh", "f-k"):
		return surfaceWaves
	case contains("refraction"):
		return refraction
	case contains("downhole", "down-hole", "crosshole", "cross-hole", "uphole", "suspension", "p-s log", "ps log", "scpt", "seismic cone", "sdmt"):
		return inHole
	}
	return otherMethod
}
