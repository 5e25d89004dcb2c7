package json

import "shearbook/profile"

// Losses returns what of a profile Write leaves out or changes, each in a few
// words; none if the profile comes back as it was, but for the table of the file
// that it was read from.
func Losses(p *profile.Profile) []string {
	var list []string
	if p.Reading != nil && p.Reading.Index(profile.Unknown) >= 0 {
		list = append(list, "columns that were not read")
	}
	if !plainTexts(p) {
		list = append(list, "control characters in its texts")
	}
	return list
}

// plainTexts reports whether the texts of a profile are written as they are.
func plainTexts(p *profile.Profile) bool {
	s := &p.Survey
	for _, text := range []string{s.Method, s.Date, s.Operator, s.Location} {
		if plain(text) != text {
			return false
		}
	}
	for i := range p.Layers {
		if plain(p.Layers[i].Soil) != p.Layers[i].Soil {
			return false
		}
	}
	for i := range p.Notes {
		if plain(p.Notes[i].Text) != p.Notes[i].Text {
			return false
		}
	}
	return true
}
