package ags

import (
	"cmp"
	"slices"
	"strconv"
	"strings"

	"shearbook/profile"
)

// file is a file in the making. Its tables stand in the order in which they
// are written.
type file struct {
	opt                                WriteOptions
	proj, tran, loca, geol             table
	wgpg, wgpt, istg, ista, vspg, vspl table
}

// newFile is an empty file with options whose blanks are filled in.
func newFile(opt WriteOptions) *file {
	opt.Edition = cmp.Or(opt.Edition, editionAssumed)
	return &file{
		opt: opt,
		proj: table{name: "PROJ", headings: []heading{
			{"PROJ_ID", "", "ID"}, {"PROJ_NAME", "", "X"}, {"PROJ_LOC", "", "X"}, {"PROJ_CLNT", "", "X"}, {"PROJ_CONT", "", "X"}, {"PROJ_ENG", "", "X"},
		}},
		tran: table{name: "TRAN", headings: []heading{
			{"TRAN_ISNO", "", "X"}, {"TRAN_DATE", "yyyy-mm-dd", "DT"}, {"TRAN_PROD", "", "X"}, {"TRAN_STAT", "", "X"},
			{"TRAN_DESC", "", "X"}, {"TRAN_AGS", "", "X"}, {"TRAN_RECV", "", "X"}, {"TRAN_DLIM", "", "X"}, {"TRAN_RCON", "", "X"},
		}},
		loca: table{name: "LOCA", headings: []heading{
			{"LOCA_ID", "", "ID"}, {"LOCA_NATE", "m", "2DP"}, {"LOCA_NATN", "m", "2DP"}, {"LOCA_GREF", "", "PA"}, {"LOCA_GL", "m", "2DP"}, {"LOCA_LAT", "", "DMS"}, {"LOCA_LON", "", "DMS"}, {"LOCA_LLZ", "", "X"}, {"LOCA_LOCA", "", "X"},
		}},
		geol: table{name: "GEOL", headings: []heading{{"LOCA_ID", "", "ID"}, {"GEOL_TOP", "m", "2DP"}, {"GEOL_BASE", "m", "2DP"}, {"GEOL_DESC", "", "X"}}},
		wgpg: table{name: "WGPG", headings: []heading{
			{"LOCA_ID", "", "ID"}, {"WGPG_ID", "", "X"}, {"WGPG_TOOL", "", "PA"}, {"WGPG_DATE", "yyyy-mm-dd", "DT"}, {"WGPG_METH", "", "X"}, {"WGPG_CONT", "", "X"},
		}},
		wgpt: table{name: "WGPT", headings: []heading{
			{"LOCA_ID", "", "ID"}, {"WGPG_ID", "", "X"}, {"WGPG_TOOL", "", "PA"}, {"WGPT_PARA", "", "PA"}, {"WGPT_UNIT", "", "PU"}, {"WGPT_DPTH", "m", "2DP"}, {"WGPT_RDNG", "", "U"},
		}},
		istg: table{name: "ISTG", headings: []heading{{"LOCA_ID", "", "ID"}, {"ISTG_TESN", "", "X"}, {"ISTG_TYPE", "", "PA"}, {"ISTG_METH", "", "X"}}},
		ista: table{name: "ISTA", headings: []heading{
			{"LOCA_ID", "", "ID"}, {"ISTG_TESN", "", "X"}, {"ISTA_TOP", "m", "2DP"}, {"ISTA_BASE", "m", "2DP"}, {"ISTA_ANYN", "", "X"}, {"ISTA_WVTY", "", "PA"}, {"ISTA_WVL", "m/s", "1DP"},
		}},
		vspg: table{name: groupGeneral, headings: generalOwn},
		vspl: table{name: groupLayers, headings: layersOwn()},
	}
}

// generalOwn are the headings of VSPG.
var generalOwn = []heading{
	{"LOCA_ID", "", "ID"}, {headingRun, "", "ID"}, {"VSPG_METH", "", "X"}, {"VSPG_DATE", "", "X"}, {"VSPG_CONT", "", "X"},
	{"VSPG_BASI", "", "X"}, {"VSPG_REAC", "m", "U"}, {"VSPG_WAT", "m", "U"},
}

// layersOwn are the headings of VSPL.
func layersOwn() []heading {
	list := []heading{{"LOCA_ID", "", "ID"}, {headingRun, "", "ID"}, {"VSPL_TOP", "m", "U"}, {"VSPL_BASE", "m", "U"}, {"VSPL_VS", "m/s", "U"}}
	for _, q := range quantityHeadings {
		list = append(list, heading{q.heading, q.unit, "U"})
	}
	return append(list, heading{"VSPL_REF", "", "YN"}, heading{"VSPL_BASI", "", "X"}, heading{"VSPL_SOIL", "", "X"})
}

// fill puts the profiles into their groups.
func (f *file) fill(profiles []profile.Profile) {
	f.head()
	for i := range profiles {
		f.put(&profiles[i], f.formOf(&profiles[i]))
	}
}

// head fills PROJ and TRAN.
func (f *file) head() {
	const none = "not stated"
	o, p := f.opt, f.opt.Project
	or := func(text, other string) string { return cmp.Or(ascii(text), other) }
	f.proj.add(or(p.ID, none), ascii(p.Name), ascii(p.Location), ascii(p.Client), ascii(p.Contractor), ascii(p.Engineer))
	f.tran.add(or(o.Issue, "1"), o.Date, or(o.Producer, none), or(o.Status, none), or(o.Description, "Shear wave velocity profiles"), o.Edition, or(o.Recipient, none), "|", "+")
}

// put puts a profile into the groups of a form.
func (f *file) put(p *profile.Profile, in form) {
	f.hole(p)
	f.soil(p)
	switch in {
	case formLog:
		f.log(p)
	case formSeismic:
		f.intervals(p)
	default:
		f.own(p)
	}
}

// hole writes the row in LOCA.
func (f *file) hole(p *profile.Profile) {
	level, latitude, longitude, system := "", "", "", ""
	if p.Survey.GroundLevel.Known {
		level = decimals(p.Survey.GroundLevel.Value, 2)
	}
	if p.Position.Latitude.Known {
		latitude, system = dms(p.Position.Latitude.Value), "WGS84"
	}
	if p.Position.Longitude.Known {
		longitude, system = dms(p.Position.Longitude.Value), "WGS84"
	}
	east, north, grid := "", "", ""
	if p.Position.Easting.Known && p.Position.Northing.Known {
		east, north = decimals(p.Position.Easting.Value, 2), decimals(p.Position.Northing.Value, 2)
		if p.Position.EPSG > 0 {
			grid = gridCode(p.Position.EPSG)
		}
	}
	f.loca.add(p.Name, east, north, grid, level, latitude, longitude, system, p.Survey.Location)
}

// gridCode is the code of a grid in LOCA_GREF.
func gridCode(epsg int) string { return "EPSG" + strconv.Itoa(epsg) }

// soil writes the rows in GEOL: one for layers of one soil that follow one
// another. A half-space has no base to give.
func (f *file) soil(p *profile.Profile) {
	for i := 0; i < len(p.Layers); {
		k := i
		for k+1 < len(p.Layers) && p.Layers[k+1].Soil == p.Layers[i].Soil && !p.Layers[k+1].HalfSpace() {
			k++
		}
		top, base := decimals(p.Layers[i].Top, 2), decimals(p.Layers[k].Bottom, 2)
		if p.Layers[i].Soil != "" && !p.Layers[k].HalfSpace() && top != base {
			f.geol.add(p.Name, top, base, p.Layers[i].Soil)
		}
		i = k + 1
	}
}

// log writes a log: a reading for each layer, at the depth from which Read
// makes the layer.
func (f *file) log(p *profile.Profile) {
	code := codeOf(p.Survey.Method)
	f.wgpg.add(p.Name, "1", code, p.Survey.Date, p.Survey.Method, p.Survey.Operator)
	for _, wave := range []struct {
		code  string
		given profile.Given
		v     func(*profile.Layer) float64
	}{
		{code + "-SWV", 0, func(l *profile.Layer) float64 { return l.Vs }},
		{code + "-PWV", profile.GivenVp, func(l *profile.Layer) float64 { return l.Vp }},
	} {
		for i, z := range readingDepths(p.Layers) {
			if l := &p.Layers[i]; l.Has(wave.given) {
				f.wgpt.add(p.Name, "1", code, wave.code, "m/s", decimals(z, 2), digits(wave.v(l)))
			}
		}
	}
}

// readingDepths are depths of readings that become the layers, as far as there
// are such with two decimals: the lowest from the end of its layer, each other
// from the one below.
func readingDepths(layers []profile.Layer) []float64 {
	n := len(layers)
	depths := make([]float64, n)
	last := &layers[n-1]
	half := last.Thickness() / 2
	if n == 1 {
		half = EndReach
	}
	depths[n-1] = round(last.Bottom - min(half, EndReach))
	for i := n - 2; i >= 0; i-- {
		depths[i] = round(2*layers[i].Bottom - depths[i+1])
	}
	return depths
}

// round rounds to two decimals.
func round(x float64) float64 {
	v, _ := parseNumber([]byte(decimals(x, 2)))
	return v
}

// intervals writes a seismic test. P waves are another analysis, for the key
// of a row does not tell the waves apart.
func (f *file) intervals(p *profile.Profile) {
	f.istg.add(p.Name, "1", codeOf(p.Survey.Method), p.Survey.Method)
	for i := range p.Layers {
		l := &p.Layers[i]
		top, base := decimals(l.Top, 2), decimals(l.Bottom, 2)
		f.ista.add(p.Name, "1", top, base, "1", "S", decimals(l.Vs, 1))
		if l.Has(profile.GivenVp) {
			f.ista.add(p.Name, "1", top, base, "2", "P", decimals(l.Vp, 1))
		}
	}
}

// own writes a profile into VSPG and VSPL.
func (f *file) own(p *profile.Profile) {
	s := &p.Survey
	reached, water, basis := "", "", ""
	if s.DepthReached > 0 {
		reached = digits(s.DepthReached)
	}
	if s.WaterTable.Known {
		water = digits(s.WaterTable.Value)
	}
	if s.Basis != profile.BasisNotStated {
		basis = s.Basis.String()
	}
	f.vspg.add(p.Name, "1", s.Method, s.Date, s.Operator, basis, reached, water)
	for i := range p.Layers {
		f.vspl.add(ownRow(p.Name, &p.Layers[i])...)
	}
}

// ownRow is a row of VSPL.
func ownRow(name string, l *profile.Layer) []string {
	bottom, refusal, basis := "", "", ""
	if !l.HalfSpace() {
		bottom = digits(l.Bottom)
	}
	velocity := ""
	if l.Vs != 0 {
		velocity = digits(l.Vs)
	}
	row := []string{name, "1", digits(l.Top), bottom, velocity}
	for _, q := range quantityHeadings {
		text := ""
		if v := *q.of(l); q.given != 0 && l.Has(q.given) || q.given == 0 && v != 0 {
			text = digits(v)
		}
		row = append(row, text)
	}
	if l.Refusal {
		refusal = "Y"
	}
	if l.Basis != profile.BasisNotStated {
		basis = l.Basis.String()
	}
	return append(row, refusal, basis, l.Soil)
}

// tables are the groups in their order, those that are needed, with the lists
// of codes, types and units that AGS4 demands.
func (f *file) tables() []*table {
	f.proj.trim(1)
	f.loca.trim(1)
	f.wgpg.trim(3)
	f.istg.trim(3)
	f.vspg.trim(2)
	f.vspl.trim(5)
	head, body := []*table{&f.proj, &f.tran}, []*table{}
	for _, t := range []*table{f.dictionary(), &f.loca, &f.geol, &f.wgpg, &f.wgpt, &f.istg, &f.ista, &f.vspg, &f.vspl} {
		if len(t.rows) > 0 {
			body = append(body, t)
		}
	}
	if codes := codesUsed(body); len(codes.rows) > 0 {
		head = append(head, codes)
	}
	kinds, units := lists(slices.Concat(head, body))
	return slices.Concat(head, []*table{kinds, units}, body)
}

// lists are the groups TYPE and UNIT, which list what is used in all groups,
// themselves included.
func lists(tables []*table) (kinds, units *table) {
	kinds = &table{name: "TYPE", headings: []heading{{"TYPE_TYPE", "", "X"}, {"TYPE_DESC", "", "X"}}}
	units = &table{name: "UNIT", headings: []heading{{"UNIT_UNIT", "", "X"}, {"UNIT_DESC", "", "X"}}}
	kind, unit := map[string]bool{"X": true}, map[string]bool{}
	for _, t := range tables {
		for i, h := range t.headings {
			kind[h.kind], unit[h.unit] = true, true
			for _, row := range t.rows {
				switch h.kind {
				case "PT":
					kind[row[i]] = true
				case "PU":
					unit[row[i]] = true
				}
			}
		}
	}
	for _, k := range kindWords {
		if kind[k[0]] {
			kinds.add(k[0], k[1])
		}
	}
	for _, u := range unitWords {
		if unit[u[0]] {
			units.add(u[0], u[1])
		}
	}
	return kinds, units
}

// codesUsed is the group ABBR, which lists the codes that are used.
func codesUsed(tables []*table) *table {
	codes := &table{name: "ABBR", headings: []heading{{"ABBR_HDNG", "", "X"}, {"ABBR_CODE", "", "X"}, {"ABBR_DESC", "", "X"}}}
	used := map[string]bool{}
	for _, t := range tables {
		for i, h := range t.headings {
			if h.kind != "PA" {
				continue
			}
			for _, row := range t.rows {
				if grid, is := strings.CutPrefix(row[i], "EPSG"); is && h.name == "LOCA_GREF" && !used[h.name+" "+row[i]] {
					codes.add(h.name, row[i], "Grid with the number "+grid+" in the EPSG registry")
				}
				used[h.name+" "+row[i]] = true
			}
		}
	}
	for _, c := range codeWords {
		if used[c[0]+" "+c[1]] {
			codes.add(c[0], c[1], c[2])
		}
	}
	return codes
}

// dictionary is the group DICT, which declares VSPG and VSPL where they are
// used.
func (f *file) dictionary() *table {
	d := &table{name: "DICT", headings: []heading{
		{"DICT_TYPE", "", "PA"}, {"DICT_GRP", "", "X"}, {"DICT_HDNG", "", "X"}, {"DICT_STAT", "", "PA"}, {"DICT_DTYP", "", "PT"},
		{"DICT_DESC", "", "X"}, {"DICT_UNIT", "", "PU"}, {"DICT_PGRP", "", "X"},
	}}
	for _, t := range []struct {
		*table
		text, parent string
		keys         int
	}{
		{&f.vspg, "Shear wave velocity profile - general", "LOCA", 2},
		{&f.vspl, "Shear wave velocity profile - layers", groupGeneral, 3},
	} {
		if len(t.rows) == 0 {
			continue
		}
		d.add("GROUP", t.name, "", "", "", t.text, "", t.parent)
		for i, h := range t.headings {
			status := "OTHER"
			if i < t.keys {
				status = "KEY"
			}
			d.add("HEADING", t.name, h.name, status, h.kind, ownText(h.name), h.unit, "")
		}
	}
	return d
}

// ownText describes a heading of VSPG or VSPL.
func ownText(name string) string {
	for _, q := range quantityHeadings {
		if q.heading == name {
			return q.description
		}
	}
	return ownTexts[name]
}
