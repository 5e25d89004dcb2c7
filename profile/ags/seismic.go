package ags

import (
	"bytes"

	"shearbook/profile"
)

// seismic reads ISTA, the velocities of seismic tests in edition 4.2, and
// ISTG, the tests.
func (v *velocities) seismic() {
	before := len(v.r.sets)
	for _, g := range v.r.named("ISTA") {
		v.analyses(g)
	}
	for _, s := range v.r.sets[before:] {
		s.survey.Basis = profile.Measured
	}
	v.split(before)
	for _, g := range v.r.named("ISTG") {
		v.general(g, "ISTA", "ISTG_TESN", "ISTG_TYPE", "ISTG_METH", "ISTG_DATE", "ISTG_CONT")
	}
}

// analyses reads the rows of S waves that are not marked as invalid; those of
// P waves give Vp.
func (v *velocities) analyses(g *group) {
	r := v.r
	columns := r.requires(g, "LOCA_ID", "ISTG_TESN", "ISTA_TOP", "ISTA_BASE", "ISTA_WVTY", "ISTA_WVL")
	if columns == nil {
		return
	}
	test, wave, value, analysis, invalid := columns[1], columns[4], columns[5], g.column("ISTA_ANYN"), g.column("ISTA_IVAL")
	s, ok := r.speedSource(g, value)
	s.depths, s.base = []measure{r.length(g, columns[2])}, r.length(g, columns[3])
	if !ok || s.depths[0].i == 0 || s.base.i == 0 {
		return
	}
	for c := r.cursor(g); c.row(); {
		shear, p := bytes.EqualFold(c.get(wave), []byte("S")), bytes.EqualFold(c.get(wave), []byte("P"))
		h := r.hole(c, s.loca)
		if h == nil || !shear && !p {
			continue
		}
		of := run{hole: h, group: "ISTA", id: c.text(test)}
		bad := isYes(c.get(invalid))
		switch {
		case p && !bad && len(c.get(value)) > 0:
			if x, ok := v.reading(c, s, value, s.speed); ok {
				v.compression(of, "ISTA_WVL", s, s.unit, x)
			}
		case p:
		default:
			v.analysis(c, v.set(of, "ISTA_WVL", s, c.placeOf(value)), value, analysis, bad)
		}
	}
}

// analysis reads the row of an S wave.
func (v *velocities) analysis(c *cursor, s *set, value, analysis int, invalid bool) {
	switch {
	case invalid:
		s.invalid++
		return
	case len(c.get(value)) == 0:
		s.blank++
		return
	}
	x, ok := v.reading(c, s.source, value, s.source.speed)
	if !ok {
		return
	}
	x.analysis = s.analysisOf(c.text(analysis))
	s.push(x)
}

// analysisOf is the index of an analysis number. Most often it is that of the
// row before.
func (s *set) analysisOf(number string) int16 {
	const most = 1000 // beyond them all are one
	for i := len(s.analyses) - 1; i >= 0; i-- {
		if s.analyses[i] == number {
			return int16(i)
		}
	}
	if len(s.analyses) < most {
		s.analyses = append(s.analyses, number)
	}
	return int16(len(s.analyses) - 1)
}

// isYes reads a field of type YN.
func isYes(text []byte) bool {
	return len(text) > 0 && (text[0] == 'Y' || text[0] == 'y')
}

// speedSource is the source of a column of velocities, whose unit must be
// stated.
func (r *reader) speedSource(g *group, value int) (*source, bool) {
	s := newSource(g, profile.Vs, value)
	s.unit = r.unitOf(g, value)
	var ok bool
	if s.speed, ok = parseSpeed(s.unit); ok || len(g.rows) == 0 {
		return s, ok
	}
	if s.unit == "" {
		r.Fault(g.places[value].place(), "write it in the UNIT row of "+g.name+"; "+hintSpeed, "heading %s states no unit", s.name)
	} else {
		r.Fault(g.places[value].place(), hintSpeed, "%s is in %s, which is not a unit of velocity or slowness", s.name, profile.Quote(s.unit))
	}
	return s, false
}

// split makes several sets of a test that was analysed more than once: where
// an interval is there twice, and each analysis has several.
func (v *velocities) split(from int) {
	sets := v.r.sets[from:]
	v.r.sets = v.r.sets[:from:from]
	for _, s := range sets {
		if !s.analysedTwice() {
			v.r.sets = append(v.r.sets, s)
			continue
		}
		for i, number := range s.analyses {
			part := *s
			part.what = "analysis " + number
			part.readings = nil
			for _, x := range s.readings {
				if int(x.analysis) == i {
					part.push(x)
				}
			}
			if i > 0 {
				part.invalid, part.blank = 0, 0
			}
			v.sets[s.run] = append(v.sets[s.run], &part)
			v.r.sets = append(v.r.sets, &part)
		}
	}
}

// analysedTwice reports whether an interval is there twice, in analyses of
// more than one interval each.
func (s *set) analysedTwice() bool {
	if len(s.analyses) < 2 {
		return false
	}
	n := make([]int, len(s.analyses))
	seen := map[[2]float64]bool{}
	twice := false
	for i := range s.readings {
		x := &s.readings[i]
		n[x.analysis]++
		key := [2]float64{x.top, x.base}
		twice = twice || seen[key]
		seen[key] = true
	}
	for _, k := range n {
		if k < 2 {
			return false
		}
	}
	return twice
}
