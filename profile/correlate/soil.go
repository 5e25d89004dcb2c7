package correlate

import (
	"fmt"
	"slices"
	"strings"
	"unicode"
)

// Soil is the principal soil of a layer, as relations ask for it.
type Soil uint8

// The soils.
const (
	SoilNotStated Soil = iota
	Clay
	Silt
	Sand
	Gravel
)

var soilNames = [...]string{"not stated", "clay", "silt", "sand", "gravel"}

// String returns the word for the soil.
func (s Soil) String() string { return soilNames[s] }

// ParseSoil returns the principal soil that a description names: the only noun
// among clay, silt, sand and gravel; of several the only one in capitals, as
// descriptions after ISO 14688-1 write it ("firm CLAY with sand bands");
// failing that the one before "with" ("sand with gravel"). Adjectives, such as
// "sandy", are not nouns. Where that leaves none or several ("SAND and
// GRAVEL"), where the ground is made or where it is peat, the soil is not
// stated. The rule is ours.
func ParseSoil(description string) Soil {
	words := strings.FieldsFunc(description, func(r rune) bool { return !unicode.IsLetter(r) })
	if slices.ContainsFunc(words, func(w string) bool { return slices.Contains(otherGround, strings.ToLower(w)) }) {
		return SoilNotStated
	}
	var all, loud, first []Soil
	with := false
	for _, w := range words {
		with = with || strings.EqualFold(w, "with")
		s := noun(w)
		if s == SoilNotStated || slices.Contains(all, s) && !isLoud(w) {
			continue
		}
		all = append(all, s)
		if isLoud(w) {
			loud = append(loud, s)
		}
		if !with {
			first = append(first, s)
		}
	}
	for _, found := range [][]Soil{loud, all, first} {
		if found = slices.Compact(found); len(found) == 1 {
			return found[0]
		}
	}
	return SoilNotStated
}

// otherGround are words for ground that no relation for one soil is for.
var otherGround = []string{"made", "fill", "peat", "rock", "claystone", "siltstone", "sandstone", "mudstone", "limestone"}

// noun returns the soil that a word names, in one or many.
func noun(word string) Soil {
	word = strings.ToLower(word)
	for s := Clay; s <= Gravel; s++ {
		if word == soilNames[s] || word == soilNames[s]+"s" {
			return s
		}
	}
	return SoilNotStated
}

func isLoud(word string) bool { return word == strings.ToUpper(word) }

// fits reports whether the relation is for a soil, and if not, why.
func (r *Relation) fits(in *Input) (bool, string) {
	soil := in.Soil
	if r.Soils == nil || slices.Contains(r.Soils, soil) {
		return true, ""
	}
	if soil == SoilNotStated && slices.Contains(r.Soils, Clay) && in.Get(Strength).Known && r.Family == Shear {
		return true, "" // what has an undrained strength is cohesive
	}
	var names []string
	for _, s := range r.Soils {
		names = append(names, s.String())
	}
	want := strings.Join(names, " or ")
	if soil == SoilNotStated {
		return false, fmt.Sprintf("is for %s, and the soil is not stated", want)
	}
	return false, fmt.Sprintf("is for %s and not for %s", want, soil)
}
