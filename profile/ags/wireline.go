package ags

import (
	"strings"

	"shearbook/profile"
)

// generalHeadings are those of the groups above the readings that are kept
// for the report.
var generalHeadings = map[string][]string{
	"WGPG": {"WGPG_ID", "WGPG_TOOL", "WGPG_DATE", "WGPG_STRT", "WGPG_STOP", "WGPG_BHD", "WGPG_WAT", "WGPG_METH", "WGPG_CONT"},
	"ISTG": {"ISTG_TESN", "ISTG_TYPE", "ISTG_DATE", "ISTG_RECC", "ISTG_SOUR", "ISTG_SHOF", "ISTG_SVOF", "ISTG_OTOP", "ISTG_OBOT", "ISTG_MTO", "ISTG_METH", "ISTG_CONT"},
	"CPTM": {"CPTG_TESN", "CPTM_VS1"},
	groupGeneral: {
		headingRun, "VSPG_METH", "VSPG_DATE", "VSPG_CONT", "VSPG_BASI", "VSPG_REAC", "VSPG_WAT",
	},
}

// wireline reads WGPT, the long table of a logging tool: a row for each depth
// and parameter, each with its unit; and WGPG, the runs.
func (v *velocities) wireline() {
	for _, g := range v.r.named("WGPT") {
		v.logs(g)
	}
	v.drop(v.givenAsVelocity)
	for _, s := range v.r.sets {
		s.survey = profile.Survey{Method: v.r.methodOf("WGPG_TOOL", s.run.tool, ""), Basis: profile.Measured}
	}
	for _, g := range v.r.named("WGPG") {
		v.general(g, "WGPT", "WGPG_ID", "WGPG_TOOL", "WGPG_METH", "WGPG_DATE", "WGPG_CONT")
	}
}

// logs reads the readings.
func (v *velocities) logs(g *group) {
	r := v.r
	columns := r.requires(g, "LOCA_ID", "WGPG_ID", "WGPT_PARA", "WGPT_UNIT", "WGPT_DPTH", "WGPT_RDNG")
	if columns == nil {
		return
	}
	id, para, unit, value, tool := columns[1], columns[2], columns[3], columns[5], g.column("WGPG_TOOL")
	s := newSource(g, profile.Vs, value)
	s.depths = []measure{r.length(g, columns[4])}
	if s.depths[0].i == 0 {
		return
	}
	s.unitColumn = unit
	var code, unitText string
	var kind parameter
	var u speed
	var known bool
	for c := r.cursor(g); c.row(); {
		if string(c.get(para)) != code || string(c.get(unit)) != unitText {
			code, unitText = string(c.get(para)), string(c.get(unit))
			kind, u, known = v.parameter(c, code, unitText, para)
		}
		if kind == otherParameter {
			continue
		}
		h := r.hole(c, s.loca)
		if h == nil {
			continue
		}
		v.log(c, s, value, unit, run{h, g.name, c.text(id), c.text(tool)}, code, kind, u, known)
	}
}

// log reads one reading.
func (v *velocities) log(c *cursor, s *source, value, unit int, of run, code string, kind parameter, u speed, known bool) {
	if len(c.get(value)) == 0 {
		if kind != compression {
			v.set(of, code, s, c.placeOf(value)).blank++
		}
		return
	}
	if !known {
		text := profile.Quote(c.get(unit)) + " is not a unit of velocity or slowness"
		if len(c.get(unit)) == 0 {
			text = "no unit is stated"
		}
		v.r.Fault(c.placeOf(unit), hintSpeed, "WGPT_UNIT of %s: %s", code, text)
		return
	}
	x, ok := v.reading(c, s, value, u)
	if !ok {
		return
	}
	if kind == compression {
		v.compression(of, code, s, u.name, x)
		return
	}
	v.set(of, code, s, c.placeOf(value)).add(x, u.name)
}

// parameter says what a code of WGPT_PARA stands for: by Options.Map, by the
// codes that are known, or by the description in ABBR.
func (v *velocities) parameter(c *cursor, code, unit string, column int) (parameter, speed, bool) {
	r := v.r
	u, known := parseSpeed(unit)
	if m := r.mappingOf(code); m != nil {
		if unit == "" && m.unit != "" {
			u, known = parseSpeed(m.unit)
		} else if m.unit != "" && !sameUnit(unit, m.unit) {
			r.Fault(c.placeOf(column), "leave the unit out of the mapping, or correct the file", "parameter %s is in %s, but %s was given for it",
				code, profile.Quote(unit), profile.Quote(m.unit))
		}
		switch m.q {
		case profile.Vs:
			return shearVelocity, u, known
		case profile.Vp:
			return compression, u, known
		}
	}
	if kind := parameters[strings.ToUpper(code)]; kind != otherParameter {
		return kind, u, known
	}
	if !known {
		return otherParameter, u, known // not a velocity
	}
	switch text := r.header.codes["WGPT_PARA "+code]; {
	case ofShear(text):
		return shearVelocity, u, known
	case ofCompression(text):
		return compression, u, known
	}
	v.notRead(code, unit, c.placeOf(column))
	return otherParameter, u, known
}

// notRead keeps a velocity of unknown waves for a note.
func (v *velocities) notRead(name, unit string, at profile.Place) {
	const most = 100
	if !v.unknown[name] && len(v.r.unread) < most {
		v.unknown[name] = true
		v.r.unread = append(v.r.unread, unread{name, unit, spotOf(at)})
	}
}

// ofShear reports whether a description speaks of the velocity of shear waves
// and of no other.
func ofShear(text string) bool {
	text = strings.NewReplacer("-", " ", "_", " ").Replace(strings.ToLower(text))
	return !ofCompression(text) && !strings.Contains(text, "ratio") && !strings.Contains(text, "modulus") &&
		(strings.Contains(text, "shear wave") || strings.Contains(text, "shear velocity") || strings.Contains(text, "shear slowness") ||
			strings.Contains(text, "s wave velocity") || strings.Contains(text, "s wave slowness") || strings.Contains(text, "s wave transit"))
}

// ofCompression reports the same of P waves.
func ofCompression(text string) bool {
	text = strings.NewReplacer("-", " ", "_", " ").Replace(strings.ToLower(text))
	for _, words := range []string{"p wave velocity", "p wave slowness", "p wave transit", "compression wave", "compressional", "primary wave"} {
		if strings.Contains(text, words) {
			return !strings.Contains(text, "ratio")
		}
	}
	return false
}

// givenAsVelocity reports whether a set of slownesses (FWS-DTS) stands beside
// the velocities of the same run, which say the same.
func (v *velocities) givenAsVelocity(s *set) bool {
	if parameters[strings.ToUpper(s.what)] != shearSlowness {
		return false
	}
	for _, other := range v.sets[s.run] {
		if parameters[strings.ToUpper(other.what)] == shearVelocity && len(other.readings) > 0 {
			s.hole.remark("heading-not-read", s.what, s.at.place(), s.what+" was not read beside "+other.what+" of the same run")
			return true
		}
	}
	return false
}

// general reads the group above the readings: what is known of each run.
func (v *velocities) general(g *group, readings, id, code, method, date, contractor string) {
	loca, idColumn, codeColumn := g.column("LOCA_ID"), g.column(id), g.column(code)
	for c := v.r.cursor(g); c.row(); {
		of := run{hole: v.r.byID[c.text(loca)], group: readings, id: c.text(idColumn)}
		if readings == "WGPT" {
			of.tool = c.text(codeColumn)
		}
		for _, s := range v.sets[of] {
			if s.metadata == nil { // the first row counts
				s.metadata = metadataOf(c, generalHeadings[g.name])
				s.survey.Method = v.r.methodOf(code, c.text(codeColumn), c.text(g.column(method)))
				s.survey.Date = c.text(g.column(date))
				s.survey.Operator = c.text(g.column(contractor))
			}
		}
	}
}
