package ags

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strconv"

	"shearbook/profile"
)

// order sorts the readings of a set from the top down and looks for those
// that cannot stand side by side. It returns false where there is a fault.
func (r *reader) order(s *set) bool {
	slices.SortStableFunc(s.readings, func(a, b reading) int {
		return cmp.Or(cmp.Compare(a.top, b.top), cmp.Compare(a.base, b.base))
	})
	before := r.Count()
	for i := 1; i < len(s.readings); i++ {
		above, x := &s.readings[i-1], &s.readings[i]
		at := profile.Place{Line: int(x.row.line), Column: int(x.column)}
		line := " (line " + strconv.Itoa(int(above.row.line)) + ")"
		switch {
		case (above.v == 0) != (x.v == 0):
			r.Fault(at, "give the velocity of every layer, or of none", "only one of two layers that follow one another has a velocity (line %d has the other)", above.row.line)
		case same(above.top, x.top) && (same(above.base, x.base) || x.base == above.base):
			r.Fault(at, s.hintTwice(), "%s is given twice at %s in %s%s", s.what, metres(x.top), profile.Quote(s.hole.id), line)
		case math.IsInf(above.base, 1):
			r.Fault(profile.Place{Line: int(above.row.line), Column: int(above.column)}, "give the base; only the lowest may be blank",
				"the interval from %s has no base, but another follows", metres(above.top))
		case x.base <= above.base+2*profile.Joint, same(above.top, x.top):
			r.Fault(at, "are these averages from the ground down? then give the velocity of each interval", "the interval from %s to %s lies inside another%s, or around it",
				metres(x.top), metres(x.base), line)
		case !above.point() && x.top-above.base > MaxGap+profile.Joint:
			r.tooWide(s, i-1)
		}
	}
	if r.Count() == before && s.readings[0].point() {
		r.holesIn(s)
	}
	return r.Count() == before
}

// holesIn tells of readings at a depth that lie further apart than MaxGap more
// than is usual in their set.
func (r *reader) holesIn(s *set) {
	steps := s.steps()
	sorted := slices.Clone(steps)
	slices.Sort(sorted)
	for i, step := range steps {
		if step-sorted[(len(sorted)-1)/2] > MaxGap+profile.Joint {
			r.tooWide(s, i)
		}
	}
}

// steps are the distances in m from each reading to the next.
func (s *set) steps() []float64 {
	list := make([]float64, len(s.readings)-1)
	for i := range list {
		list[i] = s.readings[i+1].top - s.readings[i].top
	}
	return list
}

// same reports whether two depths are too near to one another to bound a
// layer between them.
func same(a, b float64) bool { return math.Abs(a-b) <= 2*profile.Joint }

func (s *set) hintTwice() string {
	if s.run.group == "ISTA" {
		return "mark the one that does not count in ISTA_IVAL"
	}
	return "keep one of them, or give each run or test a name of its own"
}

// MaxGap is how much ground in m without a velocity is filled from both sides of
// it, as of logs in package las. More than that may be another soil.
const MaxGap = 3.0

// tooWide tells of a gap that is not filled, below reading i.
func (r *reader) tooWide(s *set, i int) {
	above, x := &s.readings[i], &s.readings[i+1]
	r.Fault(profile.Place{Line: int(x.row.line), Column: int(x.column)}, "give the velocity between them in a row of its own, from another source",
		"no velocity from %s to %s in %s; no more than %s are filled", metres(above.base), metres(x.top), profile.Quote(s.hole.id), metres(MaxGap))
}

// metres is a depth in words.
func metres(z float64) string { return strconv.FormatFloat(z, 'g', 6, 64) + " m" }

// measuredFrom is the depth in m from which a set has velocities.
func (s *set) measuredFrom() float64 {
	first := &s.readings[0]
	if !first.point() {
		return first.top
	}
	half := EndReach
	if len(s.readings) > 1 {
		half = min(half, (s.readings[1].top-first.top)/2)
	}
	return max(0, first.top-half)
}

// layers makes the layers of a set, with nothing but depths and velocities.
func (s *set) layers() []profile.Layer {
	list := make([]profile.Layer, len(s.readings))
	top := 0.0
	for i := range s.readings {
		x := &s.readings[i]
		bottom := x.base
		switch {
		case i < len(s.readings)-1:
			bottom = midway(x.base, s.readings[i+1].top)
		case x.point() && i == 0:
			bottom = x.top + EndReach
		case x.point():
			bottom = x.top + min(EndReach, x.top-top)
		}
		list[i] = profile.Layer{Top: top, Bottom: bottom, Vs: x.v, Line: x.row.line, Column: x.column}
		top = bottom
	}
	return list
}

// midway is the boundary between two readings.
func midway(base, top float64) float64 {
	if base == top {
		return base
	}
	return (base + top) / 2
}

// compress gives the layers the velocities of P waves at the same depths.
func (s *set) compress(layers []profile.Layer, p *set) {
	if p == nil {
		return
	}
	slices.SortStableFunc(p.readings, func(a, b reading) int { return cmp.Compare(a.top, b.top) })
	k := 0
	for i := range s.readings {
		x := &s.readings[i]
		for k < len(p.readings) && p.readings[k].top < x.top-profile.Joint {
			k++
		}
		if k < len(p.readings) && same(p.readings[k].top, x.top) && (same(p.readings[k].base, x.base) || p.readings[k].base == x.base) {
			layers[i].Vp = p.readings[k].v
			layers[i].Given |= profile.GivenVp
		}
	}
}

// readingsRule is the note on readings at a depth; it says EndReach.
const readingsRule = "each reading stands for the ground to midway to its neighbours, the lowest for no more than 0.5 m below it"

// layerNotes are the notes on how readings became layers.
func (r *reader) layerNotes(s *set, layers []profile.Layer) []profile.Note {
	var notes []profile.Note
	first := &s.readings[0]
	note := func(id, format string, args ...any) {
		notes = append(notes, profile.Note{ID: id, Text: fmt.Sprintf(format, args...), Place: r.at(spot{first.row.line, first.column})})
	}
	if first.point() {
		notes = append(notes, profile.Note{ID: "readings-to-layers", Text: readingsRule, Place: r.at(spot{first.row.line, first.column})})
		r.apart(s, note)
	} else {
		s.gaps(note)
	}
	if z := s.measuredFrom(); z > profile.Joint {
		note("top-not-measured", "nothing was measured above %s; the first velocity, %.4g m/s, was carried up to ground level", metres(z), layers[0].Vs)
	}
	if s.blank > 0 {
		note("readings-left-out", "%s had no velocity", profile.Plural(s.blank, "row"))
	}
	if s.invalid > 0 {
		note("readings-left-out", "%s marked as invalid in ISTA_IVAL", were(profile.Plural(s.invalid, "row")))
	}
	return notes
}

// were is a number of things with its verb.
func were(things string) string {
	if things[:2] == "1 " {
		return things + " was"
	}
	return things + " were"
}

// apart notes readings that are further from one another than is usual in
// their set: more than twice the median, and than both together stand for.
func (r *reader) apart(s *set, note func(id, format string, args ...any)) {
	if len(s.readings) < 3 {
		return
	}
	steps := s.steps()
	widest := 0
	for i := range steps {
		if steps[i] > steps[widest]+profile.Joint {
			widest = i
		}
	}
	wide := steps[widest]
	slices.Sort(steps)
	if wide > 2*steps[len(steps)/2]+profile.Joint && wide > 2*EndReach+profile.Joint {
		note("readings-apart", "there is no reading from %s to %s", metres(s.readings[widest].top), metres(s.readings[widest+1].top))
	}
}

// gaps notes intervals that do not meet.
func (s *set) gaps(note func(id, format string, args ...any)) {
	gaps, overlaps, widest := 0, 0, 0
	for i := range len(s.readings) - 1 {
		d := s.readings[i+1].top - s.readings[i].base
		switch {
		case d > profile.Joint:
			gaps++
		case d < -profile.Joint:
			overlaps++
		}
		if d > s.readings[widest+1].top-s.readings[widest].base {
			widest = i
		}
	}
	if gaps > 0 {
		note("intervals-to-layers", "intervals leave %s, the widest from %s to %s; the boundary was put midway",
			profile.Plural(gaps, "gap"), metres(s.readings[widest].base), metres(s.readings[widest+1].top))
	}
	if overlaps > 0 {
		note("intervals-to-layers", "intervals overlap in %s; the boundary was put midway", profile.Plural(overlaps, "place"))
	}
}
