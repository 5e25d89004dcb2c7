package siteclass

import "shearbook/profile"

// DatumOf returns the depth in m below ground level from which the code's
// average of a site starts, and what must be noted of it; the note is zero
// where the average starts where the code has it start.
//
// A datum that the site states is taken. Where it states none, a code that
// measures from the underside of the foundation starts at the depth of the
// foundation, if that is stated; every other starts at ground level.
func (c *Code) DatumOf(s Site) (depth float64, note profile.Note) {
	switch {
	case s.Datum.Known && c.Datum == DatumGround && s.Datum.Value != 0:
		return s.Datum.Value, profile.Note{ID: "datum-other", Text: "the average starts " + inUnit(s.Datum.Value, c.Length) +
			" below ground level, as stated; the code measures from the ground surface"}
	case s.Datum.Known:
		return s.Datum.Value, note
	case c.Datum == DatumFoundation && s.FoundationDepth.Known:
		return s.FoundationDepth.Value, profile.Note{ID: "datum-foundation", Text: "the code measures from the underside of the foundation; " +
			"no datum is stated, and the average starts at the stated depth of the foundation, " + metres(s.FoundationDepth.Value)}
	case c.Datum == DatumFoundation:
		return 0, profile.Note{ID: "datum-assumed", Text: "the code measures from the underside of the foundation; " +
			"its depth is not stated, and the average starts at ground level"}
	case c.Datum == DatumUnstated:
		return 0, profile.Note{ID: "datum-assumed", Text: "the code does not say where its depth is measured from; the average starts at ground level"}
	}
	return 0, note
}
