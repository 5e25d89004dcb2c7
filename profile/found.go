package profile

// Found is one profile of a file whose profiles are read apart from one
// another: the profile, or why it could not be read.
type Found struct {
	Name    string   // "" where not even that could be read
	Line    int      // where it begins: a line of the file, or a row of a sheet; 0 where that is not known
	Profile *Profile // nil where Faults says why
	Faults  Faults
}

// FoundOf are the profiles of a file that has no fault.
func FoundOf(profiles []Profile) []Found {
	found := make([]Found, len(profiles))
	for i := range profiles {
		p := &profiles[i]
		found[i] = Found{Name: p.Name, Profile: p}
		if p.Reading != nil && len(p.Reading.Rows) > 0 {
			found[i].Line = p.Reading.Rows[0].Line
		}
	}
	return found
}
