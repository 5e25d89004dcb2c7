package ags

import (
	"cmp"
	"slices"

	"shearbook/profile"
)

// ReadEach does what Read does, but a hole at fault leaves the others alone: it
// comes with its faults in place of its profiles. Where the readings of a hole
// can be read, but those of one run cannot stand side by side, that run alone is
// at fault. The error is of the file as a whole: of its groups, headings and
// units, and of rows that name no hole.
func ReadEach(file string, data []byte, opt Options) ([]profile.Found, error) {
	r := newReader(file, opt)
	r.each = &apart{}
	_ = r.open(data) && r.readHoles() && r.readTests() && r.readVelocities() && r.assemble()
	if err := r.Err(); err != nil {
		return nil, err
	}
	return r.each.found(r), nil
}

// apart is where the faults of holes go that are read apart from one another.
type apart struct {
	hole  *hole // whose row is being read
	line  int   // of that row
	set   *hole // whose readings are being judged; nil while rows are read
	total int   // faults of holes
	list  []part
}

// part is what a hole or a set gives.
type part struct {
	index   int // of the hole
	profile int // in reader.profiles, from 1; 0 where there is none
	profile.Found
}

// blamed is the hole that a fault at a place is about, nil if it is the file's.
func (a *apart) blamed(at profile.Place) *hole {
	switch {
	case a == nil:
		return nil
	case a.set != nil:
		return a.set
	case a.hole != nil && at.Line == a.line:
		return a.hole
	}
	return nil
}

// Fault adds a fault, to the hole where it is one's own.
func (r *reader) Fault(at profile.Place, hint, format string, args ...any) {
	h := r.each.blamed(at)
	if h == nil {
		r.Collector.Fault(at, hint, format, args...)
		return
	}
	r.collector(h).Fault(at, hint, format, args...)
	r.each.total++
}

// Add adds the faults of a profile likewise.
func (r *reader) Add(faults profile.Faults) {
	h := r.each.blamed(profile.Place{})
	if h == nil {
		r.Collector.Add(faults)
		return
	}
	r.collector(h).Add(faults)
	r.each.total += len(faults)
}

// Count returns how many faults there are, those of holes among them.
func (r *reader) Count() int {
	if r.each == nil {
		return r.Collector.Count()
	}
	return r.Collector.Count() + r.each.total
}

func (r *reader) collector(h *hole) *profile.Collector {
	if h.faults == nil {
		h.faults = &profile.Collector{File: r.File}
	}
	return h.faults
}

// row says whose row is being read.
func (a *apart) row(h *hole, c *cursor) {
	if a != nil {
		a.hole, a.line = h, c.first
	}
}

// judge says whose readings are being judged.
func (a *apart) judge(h *hole) {
	if a != nil {
		a.set = h
	}
}

// leaveOut takes out the holes whose rows are at fault.
func (a *apart) leaveOut(r *reader) {
	if a == nil || a.total == 0 {
		return
	}
	for _, h := range r.holes {
		if h.faults != nil {
			h.timed = true // so that it is not taken for one without velocities
			a.fail(h, h.id)
		}
	}
	r.sets = slices.DeleteFunc(r.sets, func(s *set) bool { return s.hole.faults != nil })
}

// fail keeps the faults of a hole or a set.
func (a *apart) fail(h *hole, name string) {
	f := profile.Found{Name: name, Line: int(h.at.line)}
	f.Faults, _ = h.faults.Err().(profile.Faults)
	a.list = append(a.list, part{index: h.index, Found: f})
}

// take keeps what a set gave: a profile, the last of the reader's, or faults.
func (a *apart) take(r *reader, h *hole, name string, before int) {
	switch {
	case a == nil:
	case len(r.profiles) > before:
		a.list = append(a.list, part{index: h.index, profile: len(r.profiles)})
	case h.faults != nil:
		a.fail(h, name)
		h.faults = nil
	}
}

// found is everything that was found, in the order of the holes.
func (a *apart) found(r *reader) []profile.Found {
	slices.SortStableFunc(a.list, func(x, y part) int { return cmp.Compare(x.index, y.index) })
	read := profile.FoundOf(r.profiles)
	found := make([]profile.Found, len(a.list))
	for i, p := range a.list {
		if found[i] = p.Found; p.profile > 0 {
			found[i] = read[p.profile-1]
		}
	}
	return found
}
