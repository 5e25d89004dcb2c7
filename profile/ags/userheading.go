package ags

import (
	"slices"
	"strings"

	"shearbook/profile"
)

// estimated reads velocities that the file says are estimated from cone or
// dilatometer tests, in edition 4.2.
func (v *velocities) estimated() {
	for _, e := range []struct {
		group, value, method, from string
	}{
		{"CPTP", "CPTP_VS1", "", "estimated from cone tests"},
		{"DMTP", "DMTP_VS", "DMTP_VSM", "estimated from dilatometer tests"},
	} {
		for _, g := range v.r.named(e.group) {
			if u, ok := v.column(g, g.column(e.value), profile.Survey{Method: e.from, Basis: profile.Correlated}); ok {
				u.method = g.column(e.method)
				v.columns(g, []userColumn{u})
			}
		}
	}
	for _, g := range v.r.named("CPTM") {
		v.coneMethod(g)
	}
}

// coneMethod reads the relation by which velocities were estimated.
func (v *velocities) coneMethod(g *group) {
	loca, test, text := g.column("LOCA_ID"), g.column("CPTG_TESN"), g.column("CPTM_VS1")
	for c := v.r.cursor(g); c.row(); {
		of := run{hole: v.r.byID[c.text(loca)], group: "CPTP", id: c.text(test)}
		for _, s := range v.sets[of] {
			if relation := c.text(text); s.metadata == nil && relation != "" {
				s.metadata = metadataOf(c, generalHeadings[g.name])
				s.survey.Method += " (" + relation + ")"
			}
		}
	}
}

// settled are the groups whose velocities are read for what they are.
var settled = []string{"WGPT", "ISTA", "ISTR", "CPTP", "DMTP", groupLayers}

// users reads headings of the user's own.
func (v *velocities) users() {
	for _, g := range v.r.ofHoles() {
		var columns []userColumn
		for i := 1; i < len(g.headings); i++ {
			if h := g.headings[i]; v.r.mappingOf(h) == nil && (slices.Contains(laboratory, h) || slices.Contains(settled, g.name)) {
				continue
			}
			if u, ok := v.user(g, i); ok {
				columns = append(columns, u)
			}
		}
		v.columns(g, columns)
	}
}

// userColumn is a column of velocities.
type userColumn struct {
	source *source
	survey profile.Survey
	method int // column of the method; 0 if there is none
	p      bool
}

// user looks whether heading i of a group is a velocity of shear or of P
// waves.
func (v *velocities) user(g *group, i int) (userColumn, bool) {
	r, h := v.r, g.headings[i]
	m := r.mappingOf(h)
	unit := r.unitOf(g, i)
	_, known := parseSpeed(unit)
	shear, p := m != nil && m.q == profile.Vs, m != nil && m.q == profile.Vp
	if m == nil {
		if !known || !g.data {
			return userColumn{}, false
		}
		shear, p = v.waves(h)
	}
	switch {
	case shear:
		return v.column(g, i, v.surveyOf(g, i))
	case p && known:
		u, ok := v.column(g, i, profile.Survey{})
		u.p = true
		return u, ok
	case m == nil:
		v.notRead(h, unit, g.places[i].place())
	}
	return userColumn{}, false
}

// waves says of which waves a heading with a unit of velocity is, by its
// description in DICT or the end of its name.
func (v *velocities) waves(heading string) (shear, p bool) {
	text := v.r.header.words[heading].text
	if shear, p = ofShear(text), ofCompression(text); shear || p {
		return shear, p
	}
	_, end, _ := strings.Cut(heading, "_")
	return slices.Contains([]string{"VS", "VSH", "SVEL", "SWV", "SWVL"}, end), slices.Contains([]string{"VP", "PVEL", "PWV", "PWVL"}, end)
}

// surveyOf is the survey behind a heading of the user's own, from the words of
// DICT on the heading or its group.
func (v *velocities) surveyOf(g *group, i int) profile.Survey {
	words := v.r.header.words
	heading, text := words[g.headings[i]].text, words[g.name].text
	s := profile.Survey{Method: heading, Basis: basisOf(heading)}
	if s.Basis == profile.BasisNotStated && text != "" {
		s = profile.Survey{Method: text, Basis: basisOf(text)}
	}
	return s
}

// basisOf is the basis of velocities of which a text speaks.
func basisOf(text string) profile.Basis {
	text = strings.ToLower(text)
	for _, w := range []struct {
		words string
		basis profile.Basis
	}{
		{"correlat|estimated|from cpt|from spt|derived from", profile.Correlated},
		{"masw|sasw|surface wave|surface-wave|refraction|microtremor|inver|dispersion", profile.Inverted},
		{"downhole|down-hole|crosshole|cross-hole|seismic cone|scpt|suspension|sonic|interval", profile.Measured},
	} {
		for word := range strings.SplitSeq(w.words, "|") {
			if strings.Contains(text, word) {
				return w.basis
			}
		}
	}
	return profile.BasisNotStated
}

// column is a column of velocities with its depths. It returns false where
// something is missing, which is a fault.
func (v *velocities) column(g *group, value int, survey profile.Survey) (userColumn, bool) {
	if value == 0 {
		return userColumn{}, false
	}
	s, ok := v.r.speedSource(g, value)
	v.r.depthColumns(s)
	return userColumn{source: s, survey: survey}, ok && v.hasDepth(s)
}

// columns reads columns of one group, in one go, for there may be many.
func (v *velocities) columns(g *group, columns []userColumn) {
	if len(columns) == 0 {
		return
	}
	runs := runColumns(g)
	for c := v.r.cursor(g); c.row(); {
		id, named := "", false
		for i := range columns {
			u := &columns[i]
			if len(c.get(u.source.value)) == 0 {
				continue // tables often hold a velocity in some of their rows
			}
			if !named {
				id, named = runOf(c, runs), true
			}
			v.cell(c, u, id)
		}
	}
}

// cell reads the velocity of a column in the present row.
func (v *velocities) cell(c *cursor, u *userColumn, id string) {
	s := u.source
	h := v.r.hole(c, s.loca)
	x, ok := v.reading(c, s, s.value, s.speed)
	if h == nil || !ok {
		return
	}
	of := run{hole: h, group: c.g.name, id: id}
	if u.p {
		v.compression(of, s.name, s, s.unit, x)
		return
	}
	set := v.set(of, s.name, s, c.placeOf(s.value))
	if len(set.readings) == 0 {
		set.survey = u.survey
		if text := c.text(u.method); text != "" {
			set.survey.Method += " (" + text + ")"
		}
	}
	set.push(x)
}

// hasDepth tells where a velocity has no heading of depth beside it.
func (v *velocities) hasDepth(s *source) bool {
	if len(s.depths) > 0 && s.depths[0].i > 0 {
		return true
	}
	if len(s.depths) == 0 && len(s.g.rows) > 0 {
		v.r.Fault(s.g.places[s.value].place(), `name it, as --map "depth=`+s.g.name+`_DPTH [m]"`, "heading %s has no heading of depth beside it", s.name)
	}
	return false
}

// runColumns are the headings that tell the runs or tests of a hole apart.
func runColumns(g *group) []int {
	var list []int
	for i, h := range g.headings {
		prefix, end, _ := strings.Cut(h, "_")
		if end == "TESN" || end == "ID" && prefix != "LOCA" && prefix != "SAMP" {
			list = append(list, i)
		}
	}
	return list
}

func runOf(c *cursor, columns []int) string {
	var parts []string
	for _, i := range columns {
		if text := c.text(i); text != "" {
			parts = append(parts, text)
		}
	}
	return strings.Join(parts, " ")
}
