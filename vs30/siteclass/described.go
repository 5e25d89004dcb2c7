package siteclass

import (
	"math"
	"slices"
	"strings"
	"unicode"

	"shearbook/profile"
)

// material is what a layer is made of, as far as its description says so in
// plain words.
type material uint8

const (
	unstated material = iota
	cohesive          // clay, silt, mud
	sandy             // sand
	gravelly          // gravel, cobbles
	rocky
)

// materialWords are the nouns that name a material. Adjectives ("clayey",
// "sandy") are other words and name none.
var materialWords = map[string]material{
	"clay": cohesive, "clays": cohesive, "silt": cohesive, "silts": cohesive, "mud": cohesive, "loam": cohesive,
	"sand": sandy, "sands": sandy,
	"gravel": gravelly, "gravels": gravelly, "cobbles": gravelly,
	"rock": rocky, "bedrock": rocky, "granite": rocky, "basalt": rocky, "gneiss": rocky, "schist": rocky,
	"limestone": rocky, "sandstone": rocky, "siltstone": rocky, "mudstone": rocky, "claystone": rocky,
	"shale": rocky, "slate": rocky, "conglomerate": rocky, "tuff": rocky, "chalk": rocky,
}

// materialOf returns the material that the description of a layer names
// first: cohesive for "silty clay", sandy for "sand with clay".
func materialOf(l *profile.Layer) material {
	if l.Soil == "" {
		return unstated
	}
	for word := range wordsOf(l.Soil) {
		if m := materialWords[word]; m != unstated {
			return m
		}
	}
	return unstated
}

// says reports whether the description of a layer has one of the words.
func says(l *profile.Layer, words ...string) bool {
	if l.Soil == "" {
		return false
	}
	for word := range wordsOf(l.Soil) {
		if slices.Contains(words, word) {
			return true
		}
	}
	return false
}

func wordsOf(text string) func(func(string) bool) {
	return strings.FieldsFuncSeq(strings.ToLower(text), func(r rune) bool { return !unicode.IsLetter(r) })
}

// partWithin returns how many m of a layer, between two depths inside it (m
// below ground level), have a velocity within the range.
func partWithin(l *profile.Layer, top, bottom float64, within Range, u profile.Unit) float64 {
	v0, v1 := l.VsAt(top)/u.Factor, l.VsAt(bottom)/u.Factor
	if v0 == v1 {
		if within.Contains(v0) {
			return bottom - top
		}
		return 0
	}
	lo, hi := min(v0, v1), max(v0, v1)
	from, to := lo, hi
	if within.Lower.Op != Open {
		from = max(lo, within.Lower.Value)
	}
	if within.Upper.Op != Open {
		to = min(hi, within.Upper.Value)
	}
	return (bottom - top) * math.Max(0, to-from) / (hi - lo)
}
