package json

import "shearbook/profile"

// ReadEach does what Read does, but a profile at fault leaves the others
// alone: it comes with its faults, at most profile.MaxFaults of them. Of two
// profiles of one name the first counts. The error is of the file as a whole:
// of what stands outside the profiles, and of a text that cannot be followed to
// its end.
func ReadEach(file string, data []byte) ([]profile.Found, error) {
	r := reader{Collector: profile.Collector{File: file}, apart: true}
	r.read(data)
	if r.foreign != nil {
		return nil, profile.Faults{*r.foreign}
	}
	if err := r.Err(); err != nil {
		return nil, err
	}
	return r.found, nil
}

// profileApart reads one profile with a collector of its own. What ends the
// reading is of the file.
func (r *reader) profileApart() {
	of, at, before := r.Collector, r.tok.spot, len(r.profiles)
	r.Collector = profile.Collector{File: r.File}
	r.profile()
	own := r.Collector
	if r.Collector = of; r.dead {
		if faults, ok := own.Err().(profile.Faults); ok {
			r.Add(faults)
		}
		return
	}
	if len(r.found) == MaxProfiles {
		r.stop(at, "split the file", "the file has more than %d profiles", MaxProfiles)
		return
	}
	f := profile.Found{Line: int(at.line)}
	f.Faults, _ = own.Err().(profile.Faults)
	if len(r.profiles) > before {
		p := r.profiles[before]
		if f.Name = p.Name; f.Faults == nil {
			f.Profile = &p
		}
	}
	r.profiles, r.found = r.profiles[:before], append(r.found, f)
}
