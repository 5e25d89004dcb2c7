package ags

import (
	"slices"
	"sort"

	"shearbook/profile"
)

// addTested adds the holes without velocities that have blow counts or
// strengths, if they are asked for or the file has no velocities at all: each
// becomes a profile without velocities.
func (r *reader) addTested() {
	if (len(r.sets) > 0 || r.each != nil && r.Count() > 0) && !r.opt.Untimed {
		return
	}
	for _, h := range r.holes {
		if h.timed {
			continue
		}
		if q := h.principal(); q != profile.Unknown {
			h.tested = true
			r.sets = append(r.sets, &set{hole: h, tested: q})
		}
	}
}

// principal is the quantity whose tests make the layers of a hole without
// velocities: N, or else su; Unknown if it has neither.
func (h *hole) principal() profile.Quantity {
	for _, q := range []profile.Quantity{profile.N, profile.Su} {
		if slices.ContainsFunc(h.results, func(x result) bool { return x.source.q == q }) {
			return q
		}
	}
	return profile.Unknown
}

// testedLayers makes layers where there are no velocities: each test stands
// for the ground to midway to its neighbours, or to the boundary of a stratum
// that lies between them; the uppermost to ground level, the lowest as the
// lowest reading does, but not beyond its stratum.
func (s *set) testedLayers() []profile.Layer {
	tests := s.hole.resultsOf(s.tested)
	cuts := s.hole.boundaries()
	last := len(tests) - 1
	half := EndReach
	for i := 1; i <= last; i++ {
		above, below := tests[i-1].depth, tests[i].depth
		if same(above, below) {
			continue
		}
		if i == last || same(below, tests[last].depth) {
			half = min(EndReach, (below-above)/2)
		}
		if k := sort.SearchFloat64s(cuts, above+profile.Joint); k == len(cuts) || cuts[k] >= below-profile.Joint {
			cuts = slices.Insert(cuts, k, (above+below)/2)
		}
	}
	end := tests[last].depth + half
	if k := sort.SearchFloat64s(cuts, tests[last].depth+2*profile.Joint); k < len(cuts) {
		end = min(end, cuts[k]) // of the stratum
	}
	return stack(cuts, end, tests)
}

// boundaries are the depths of the tops and bottoms of the strata, in order.
func (h *hole) boundaries() []float64 {
	var list []float64
	for i := range h.strata {
		list = append(list, h.strata[i].top, h.strata[i].bottom)
	}
	slices.Sort(list)
	return list
}

// stack makes layers between cuts, from ground level down to an end. The place
// of a layer is that of the first test inside it, or above it.
func stack(cuts []float64, end float64, tests []result) []profile.Layer {
	layers := make([]profile.Layer, 0, len(cuts)+1)
	top, k := 0.0, 0
	for _, z := range append(cuts, end) {
		if z = min(z, end); z <= top+2*profile.Joint || z < end && z >= end-2*profile.Joint {
			continue
		}
		for k+1 < len(tests) && tests[k].depth < top && tests[k+1].depth < z {
			k++
		}
		layers = append(layers, profile.Layer{Top: top, Bottom: z, Line: tests[k].row.line, Column: tests[k].column})
		top = z
	}
	return layers
}

// testedProfile makes a profile without velocities.
func (r *reader) testedProfile(s *set, name string) {
	layers := s.testedLayers()
	const rule = "the hole has no shear-wave velocity; its layers are bounded midway between its tests of N, or of su where it has none, and by its strata"
	notes := []profile.Note{{ID: "no-velocity", Text: rule, Place: r.at(s.hole.at)}}
	notes = append(notes, r.attach(s.hole, layers)...)
	r.finish(s, name, layers, notes)
}
