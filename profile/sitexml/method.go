package sitexml

import (
	"strings"

	"shearbook/profile"
)

// method is a word of the form for how Vs30 was found.
type method struct {
	word  string
	basis profile.Basis
	// other is how surveys are named otherwise, in lower case, separated by |.
	other string
}

// methods are the words of the form (SiteXML 1.3, velocityS30Method), with the
// basis of velocities found so.
var methods = []method{
	{"Geology", profile.Correlated, ""},
	{"Topographic Slope", profile.Correlated, ""},
	{"SPT", profile.Correlated, "standard penetration test"},
	{"CPT", profile.Correlated, "cone penetration test"},
	{"Laboratory", profile.BasisNotStated, ""},
	{"S-REFR", profile.Inverted, "refraction|s refraction|sh refraction|s-wave refraction|sh-wave refraction|seismic refraction"},
	{"S-REFL", profile.Inverted, "reflection|s reflection|sh reflection|s-wave reflection|seismic reflection"},
	{"SASW", profile.Inverted, "spectral analysis of surface waves"},
	{"MASW", profile.Inverted, "multichannel analysis of surface waves|active masw|masw (active)"},
	{"SWI", profile.Inverted, "surface-wave inversion|surface wave inversion|surface waves"},
	{"SPAC/F-K", profile.Inverted, "spac|f-k|fk|microtremor array|ambient noise array"},
	{"ReMi", profile.Inverted, "refraction microtremor"},
	{"Crosshole", profile.Measured, "cross-hole|crosshole seismic"},
	{"Downhole", profile.Measured, "down-hole|downhole seismic"},
	{"Uphole", profile.Measured, "up-hole"},
	{"P-S Log", profile.Measured, "p-s logging|ps logging|ps log|p-s suspension|ps suspension|suspension logging|p-s suspension logging|ps suspension logging|suspension log"},
	{"Seismic Cone", profile.Measured, "scpt|scptu|seismic cpt|seismic cone penetration test"},
	{"DH Strong Motion Arrays", profile.Measured, "downhole array|downhole strong-motion array"},
}

// methodOf is the method that a word names, nil if it names none.
func methodOf(word string) *method {
	word = strings.ToLower(strings.TrimSpace(word))
	for i := range methods {
		m := &methods[i]
		if word == strings.ToLower(m.word) {
			return m
		}
		for other := range strings.SplitSeq(m.other, "|") {
			if other != "" && other == word {
				return m
			}
		}
	}
	return nil
}

// basisOf is the basis of velocities found by all of the methods; not stated
// where they differ or one is not known.
func basisOf(words []string) profile.Basis {
	basis := profile.BasisNotStated
	for i, word := range words {
		m := methodOf(word)
		if m == nil || i > 0 && m.basis != basis {
			return profile.BasisNotStated
		}
		basis = m.basis
	}
	return basis
}
