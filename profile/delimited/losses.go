package delimited

import (
	"strings"

	"shearbook/profile"
)

// Losses returns what of a profile Write leaves out or changes because a table
// has no place for it, each in a few words; none if the profile comes back as it
// was, but for the words and units of the file that it was read from.
func Losses(p *profile.Profile) []string {
	var list []string
	for _, l := range []struct {
		is   bool
		what string
	}{
		{len(p.Notes) > len(profile.Doubts(p)), "notes on how it was read"},
		{hasUnread(p.Reading), "columns that were not read"},
		{hasRemarks(p.Reading), "statements of its file that are no part of a profile"},
		{blowKind(p) == "n1_60", "that its blow counts are corrected for overburden"},
		{p.Position.Easting.Known != p.Position.Northing.Known || p.Position.Latitude.Known != p.Position.Longitude.Known, "half a position"},
		{!oneLineEach(p), "line ends, and blanks side by side, in its texts"},
	} {
		if l.is {
			list = append(list, l.what)
		}
	}
	return list
}

func hasUnread(r *profile.Reading) bool { return r != nil && r.Index(profile.Unknown) >= 0 }

// hasRemarks reports whether the file stated what is read into no field.
func hasRemarks(r *profile.Reading) bool {
	if r == nil {
		return false
	}
	for i := range r.Metadata {
		if keyOf(r.Metadata[i].Key) == "" {
			return true
		}
	}
	return false
}

// blowKind is the kind of the blow counts of a profile, as far as the heading
// of their column says: "n", "n60" or "n1_60".
func blowKind(p *profile.Profile) string {
	if p.Reading == nil || p.Reading.Index(profile.N) < 0 {
		return "n"
	}
	heading := strings.ToLower(p.Reading.Columns[p.Reading.Index(profile.N)].Heading)
	switch {
	case strings.Contains(heading, "n1"):
		return "n1_60"
	case strings.Contains(heading, "60"):
		return "n60"
	}
	return "n"
}

// oneLineEach reports whether the texts of a profile are written as they are.
func oneLineEach(p *profile.Profile) bool {
	s := &p.Survey
	for _, text := range []string{s.Method, s.Date, s.Operator, s.Location} {
		if oneLine(text) != text {
			return false
		}
	}
	for i := range p.Layers {
		if oneLine(p.Layers[i].Soil) != p.Layers[i].Soil {
			return false
		}
	}
	return true
}
