package sitexml

import "shearbook/profile"

// ReadEach does what Read does, but a profile at fault leaves the others
// alone: it comes with its faults. The error is of the file as a whole: of what
// stands outside the profiles, and of a text that cannot be followed to its end.
func ReadEach(file string, data []byte) ([]profile.Found, error) {
	r := reader{Collector: profile.Collector{File: file}, apart: true}
	r.read(data)
	if err := r.Err(); err != nil {
		return nil, err
	}
	found := profile.FoundOf(r.profiles)
	for i, c := range r.file.profiles {
		if c.faults != nil && c.faults.Count() > 0 {
			f := &found[i]
			f.Line, f.Profile = int(c.line), nil
			f.Faults, _ = c.faults.Err().(profile.Faults)
		}
	}
	return found, nil
}

// collector is where the next fault goes: to the file, or where profiles are
// read apart to the one that is being read or judged.
func (r *reader) collector() *profile.Collector {
	c := r.judged
	if c == nil {
		c = r.walk.profile
	}
	if !r.apart || c == nil {
		return &r.Collector
	}
	if c.faults == nil {
		c.faults = &profile.Collector{File: r.File}
	}
	return c.faults
}
