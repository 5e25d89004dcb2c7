package ags

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"shearbook/profile"
)

// leftOut is a set that gives no profile.
type leftOut struct {
	name string
	from float64 // m, where its velocities begin
	at   spot
}

// assemble makes the profiles.
func (r *reader) assemble() bool {
	r.sets = slices.DeleteFunc(r.sets, func(s *set) bool {
		if len(s.readings) == 0 {
			r.empty++
		}
		return len(s.readings) == 0
	})
	for _, s := range r.sets {
		s.hole.timed = true
	}
	r.each.leaveOut(r)
	r.addTested()
	slices.SortStableFunc(r.sets, func(a, b *set) int { return cmp.Compare(a.hole.index, b.hole.index) })
	for _, g := range r.groups {
		g.rows = nil // none is looked for any more
	}
	if !r.fits() {
		return false
	}
	names := r.names()
	r.profiles = make([]profile.Profile, 0, len(r.sets))
	r.again = cursor{scanner: scanner{text: r.text}}
	for i, s := range r.sets {
		before := len(r.profiles)
		r.each.judge(s.hole)
		switch {
		case s.tested != profile.Unknown:
			r.testedProfile(s, names[i])
		case r.order(s):
			r.profile(s, names[i])
		}
		r.each.take(r, s.hole, names[i], before)
		r.sets[i] = nil // for the collector, where there are many
		if h := s.hole; i+1 == len(r.sets) || r.sets[i+1].hole != h {
			h.strata, h.results, h.entries = nil, nil, nil
		}
	}
	r.each.judge(nil)
	if len(r.profiles) == 0 && r.Count() == 0 {
		r.nothing()
	}
	notes := r.fileNotes()
	for i := range r.profiles {
		r.profiles[i].Notes = append(slices.Clip(notes), r.profiles[i].Notes...)
	}
	return true
}

// fits bounds the profiles and what their appendices hold together.
func (r *reader) fits() bool {
	entries := 0
	for _, s := range r.sets {
		entries += len(s.hole.strata) + len(s.hole.results)
	}
	switch {
	case len(r.sets) > MaxProfiles:
		r.Stop(profile.Place{}, "split it", "the file has more than %d profiles", MaxProfiles)
	case entries > MaxEntries:
		r.Stop(profile.Place{}, "split it", "the file has more than %d strata and tests, counted for each profile of their hole", MaxEntries)
	default:
		return true
	}
	return false
}

// names are the names of the sets: that of the hole where it has one set, and
// otherwise that with the run or test, and with what was measured where that
// is not enough. A number follows where two are still the same.
func (r *reader) names() []string {
	count := func(names []string) map[string]int {
		n := make(map[string]int, len(names))
		for _, name := range names {
			n[name]++
		}
		return n
	}
	names := make([]string, len(r.sets))
	for i, s := range r.sets {
		names[i] = s.hole.id
	}
	for _, more := range []func(*set) string{
		func(s *set) string { return s.run.id },
		func(s *set) string { return s.what },
	} {
		n := count(names)
		for i, s := range r.sets {
			if text := more(s); n[names[i]] > 1 && text != "" {
				names[i] += "/" + text
			}
		}
	}
	return numbered(names)
}

// numbered tells equal names apart.
func numbered(names []string) []string {
	taken := make(map[string]bool, len(names))
	next := map[string]int{}
	for i, name := range names {
		for k := max(2, next[name]); taken[names[i]]; k++ {
			names[i] = fmt.Sprintf("%s (%d)", name, k)
			next[name] = k + 1
		}
		taken[names[i]] = true
	}
	return names
}

// profile makes the profile of a set of velocities.
func (r *reader) profile(s *set, name string) {
	h := s.hole
	if z := s.measuredFrom(); z > r.opt.carryUp()+profile.Joint {
		r.leftOut = append(r.leftOut, leftOut{name, z, spot{s.readings[0].row.line, s.readings[0].column}})
		return
	}
	if cap(s.readings)-len(s.readings) > 1<<12 {
		s.readings = slices.Clone(s.readings) // gives back room that may be much
	}
	layers := s.layers()
	s.compress(layers, r.p[s.run])
	notes := r.layerNotes(s, layers)
	if s.source.own != nil {
		r.fill(s, layers)
	} else {
		notes = append(notes, r.attach(h, layers)...)
	}
	r.finish(s, name, layers, notes)
}

// finish makes a profile of its layers and judges it.
func (r *reader) finish(s *set, name string, layers []profile.Layer, notes []profile.Note) {
	h := s.hole
	if h.at.line == 0 {
		notes = append(notes, profile.Note{ID: "let-pass", Text: "hole " + h.id + " has no row in LOCA, which AGS4 does not allow", Place: r.at(spot{layers[0].Line, 0})})
	}
	p := profile.Profile{Name: name, Layers: layers, Survey: s.survey, Position: h.position, Reading: r.appendix(s, layers)}
	p.NoVelocity = (s.tested != profile.Unknown || s.source.own != nil) && !slices.ContainsFunc(layers, func(l profile.Layer) bool { return l.Vs != 0 })
	p.Survey.GroundLevel = h.groundLevel
	p.Survey.Location = h.location
	if p.Survey.Operator == "" {
		p.Survey.Operator = r.header.operator
	}
	if p.Survey.Date == "" {
		p.Survey.Date = h.date
	}
	if faults := profile.Validate(&p); len(faults) > 0 {
		r.Add(faults)
		return
	}
	p.Notes = append(notes, r.remarkNotes(h)...)
	p.Notes = append(p.Notes, profile.Doubts(&p)...)
	r.profiles = append(r.profiles, p)
}

// fill reads what VSPL says of each layer.
func (r *reader) fill(s *set, layers []profile.Layer) {
	c := &r.again
	c.g = s.source.g
	for i := range layers {
		c.to(s.readings[i].row)
		s.source.own.layer(r, s.hole, c, &layers[i])
	}
}

// nothing tells why a file gives no profile, and what to do.
func (r *reader) nothing() {
	for _, l := range r.leftOut {
		r.Fault(l.at.place(), "give the velocity of the ground above, in a table of layers; or let the first one be carried further up",
			"the velocities of %s begin at %s, too deep to be carried up to ground level", profile.Quote(l.name), metres(l.from))
	}
	if len(r.leftOut) > 0 {
		return
	}
	hint := `name the heading that holds it, as --map "Vs=MASW_VEL [m/s]"`
	switch {
	case r.empty > 0:
		hint = "all rows of S waves are blank or marked as invalid"
	case len(r.unread) > 0:
		u := r.unread[0]
		hint = fmt.Sprintf("is %s the velocity of shear waves? then say so, as --map \"Vs=%s [%s]\"", u.name, u.name, u.unit)
	case len(r.header.files) > 0:
		hint = "the file names attached files, which may hold it: " + some(r.header.files)
	case r.measuresCones():
		hint = "its cone tests give velocities by a correlation from cones, as --correlate mayne-2006; `shearbook correlations` lists them"
	case r.measuresSpecimens():
		hint = "velocities of specimens (" + strings.Join(laboratory, ", ") + ") are no profile of the ground"
	}
	seen := "no group of a hole"
	var names []string
	for _, g := range r.ofHoles() {
		if g.data && !slices.Contains(names, g.name) {
			names = append(names, g.name)
		}
	}
	if len(names) > 0 {
		seen = some(names)
	}
	r.Fault(profile.Place{}, hint, "the file gives neither a shear-wave velocity of the ground nor N nor su; it has %s", seen)
}

// measuresCones reports whether the file has readings of cones.
func (r *reader) measuresCones() bool {
	return slices.ContainsFunc(r.ofHoles(), func(g *group) bool { return g.data && (g.name == "SCPT" || g.name == "CPTT") })
}

// measuresSpecimens reports whether the file has velocities of the laboratory.
func (r *reader) measuresSpecimens() bool {
	for _, g := range r.ofHoles() {
		for _, h := range laboratory {
			if g.column(h) > 0 && g.data {
				return true
			}
		}
	}
	return false
}

// some is the first few of a list, in words.
func some(list []string) string {
	const most = 12
	if more := len(list) - most; more > 0 {
		return fmt.Sprintf("%s and %d more", strings.Join(list[:most], ", "), more)
	}
	return strings.Join(list, ", ")
}

// fileNotes are the notes that every profile of the file carries.
func (r *reader) fileNotes() []profile.Note {
	notes := append(slices.Clip(r.header.notes), r.letPass()...)
	note := func(id string, at spot, format string, args ...any) {
		notes = append(notes, profile.Note{ID: id, Text: fmt.Sprintf(format, args...), Place: r.at(at)})
	}
	if len(r.assumed) > 0 {
		note("units-assumed", spot{}, "the file states no unit of some headings; the usual one was taken: %s", some(r.assumed))
	}
	notes = append(notes, r.unitNotes...)
	for _, m := range r.maps {
		note("mapped", spot{}, "%s was read from %s, as was asked for", m.q, m.name)
	}
	for _, u := range r.unread {
		note("heading-not-read", u.at, "%s is a velocity, in %s, but nothing says that it is of shear waves; it was not read", u.name, profile.Quote(u.unit))
	}
	if len(r.leftOut) > 0 {
		var names []string
		for _, l := range r.leftOut {
			names = append(names, l.name+" at "+metres(l.from))
		}
		note("hole-left-out", r.leftOut[0].at, "velocities that begin too deep to be carried up to ground level give no profile: %s", some(names))
	}
	if names, at := r.untimed(); len(names) > 0 {
		note("holes-without-velocity", at, "tests, but no velocities, and so no profile, in %s: %s", profile.Plural(len(names), "hole"), some(names))
	}
	return notes
}

// untimed are the holes that have tests and no profile.
func (r *reader) untimed() (names []string, at spot) {
	for _, h := range r.holes {
		if len(h.results) > 0 && !h.timed && !h.tested {
			if len(names) == 0 {
				at = h.at
			}
			names = append(names, h.id)
		}
	}
	return names, at
}
