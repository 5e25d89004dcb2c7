package spread

import (
	"strings"
	"unicode"
)

// Range is the sigma of ln V that surveys of a kind are published to have.
// It is that of an average over some 30 m and not of a layer: given to every
// layer under the rule Full it is that of the average again. It is an offer to
// the user, and nothing here takes it up.
type Range struct {
	Low, High float64 // sigma of ln V; the same where one value is given
	Method    string  // the kind of survey, in our words
	Source    string
	Standing  string // how well the range is known to agree with the source
}

// rangeSource is where the ranges come from. They are planning values; the
// data base of NGA-West2 gives about 0.1 to what was measured and 0.2 to 0.5
// to what was inferred.
const rangeSource = "planning values after the practice of the NGA-West2 site data base " +
	"(Seyhan et al. 2014, Earthquake Spectra 30; Ancheta et al. 2013, PEER 2013/03, ch. 4)"

// published lists the kinds of survey with the words that name them. It is
// never changed.
var published = []struct {
	Range
	words []string // lower case, letters and digits only, one or more words each
}{
	{Range{0.10, 0.10, "seismic cone", rangeSource, "from memory"},
		[]string{"scpt", "scptu", "seismic cone"}},
	{Range{0.05, 0.10, "in a hole at the site", rangeSource, "from memory"},
		[]string{"downhole", "down hole", "crosshole", "cross hole", "uphole", "up hole", "suspension", "p s log", "p s logging", "ps log", "ps logging"}},
	{Range{0.05, 0.15, "surface waves", rangeSource, "from memory"},
		[]string{"masw", "sasw", "remi", "refraction microtremor", "spac", "f k", "fk", "surface wave", "surface waves", "swi"}},
	{Range{0.20, 0.35, "correlation with penetration tests", rangeSource, "from memory"},
		[]string{"spt", "cpt", "cptu", "cone penetration", "standard penetration", "correlation", "correlated"}},
	{Range{0.30, 0.40, "surface geology", rangeSource, "from memory"},
		[]string{"geology", "geologic", "geological"}},
	{Range{0.35, 0.50, "slope or terrain", rangeSource, "from memory"},
		[]string{"slope", "terrain", "topography", "topographic"}},
}

// Published returns the published range for a method as a profile states it:
// "MASW", "downhole", "Seismic cone (SCPTu)". It returns false where the method
// is not known, where nothing is at hand for it (refraction), or where it names
// two kinds of survey.
func Published(method string) (Range, bool) {
	text := " " + strings.Join(strings.FieldsFunc(strings.ToLower(method), func(r rune) bool {
		return !unicode.IsLetter(r) && !unicode.IsDigit(r)
	}), " ") + " "
	var found []Range
	for _, p := range published {
		for _, w := range p.words {
			if strings.Contains(text, " "+w+" ") {
				found = append(found, p.Range)
				break
			}
		}
	}
	if len(found) != 1 {
		return Range{}, false
	}
	return found[0], true
}
