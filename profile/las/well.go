package las

import (
	"cmp"
	"maps"
	"math"
	"path"
	"slices"
	"strconv"
	"strings"

	"shearbook/profile"
)

// describe takes what the items say of the profile.
func (r *reader) describe(p *profile.Profile) {
	p.Name = r.name()
	p.Survey.Operator = r.stated("SRVC")
	p.Survey.Date = r.stated("DATE")
	p.Survey.Location = cmp.Or(r.stated("LOC"), r.stated("FLD"))
	p.Survey.GroundLevel = r.groundLevel()
	p.Position = r.position()
	p.Survey.Basis = r.basis()
	r.datum()
}

// stated is the value of an item of ~W, "" if it has none.
func (r *reader) stated(mnemonic string) string {
	if it := r.itemOf(mnemonic); it != nil {
		return it.value
	}
	return ""
}

// itemOf is the first item of ~W or ~P with one of the mnemonics and a value,
// nil if there is none.
func (r *reader) itemOf(mnemonics ...string) *item {
	for _, m := range mnemonics {
		for i := range r.header.items {
			if it := &r.header.items[i]; (it.section == 'W' || it.section == 'P') && it.is(m) && it.value != "" {
				return it
			}
		}
	}
	return nil
}

// name is the WELL, or the name of the file.
func (r *reader) name() string {
	if name := r.stated("WELL"); name != "" {
		return name
	}
	base := path.Base(strings.ReplaceAll(r.File, `\`, "/"))
	name := tidy([]byte(strings.TrimSuffix(base, path.Ext(base))))
	if name == "" || name == "-" || name == "." || name == "/" {
		return "profile"
	}
	return name
}

// groundLevel is the elevation of the ground, where it is stated with a unit.
func (r *reader) groundLevel() profile.Optional {
	it := r.itemOf("EGL", "GL", "ELEV_GL")
	if it == nil {
		return profile.Optional{}
	}
	v, ok := parseNumber([]byte(it.value))
	u := parseUnit(it.unit)
	if !ok || u.kind != length || v == r.header.null || isNines(v) || u.si(v) > profile.MaxDepth || u.si(v) < -profile.MaxDepth {
		return profile.Optional{}
	}
	return profile.Known(u.si(v))
}

// position is the place of the hole, where it is stated in decimal degrees
// and no geodetic datum but WGS 84.
func (r *reader) position() profile.Position {
	if it := r.itemOf("GDAT", "HDAT"); it != nil && !strings.Contains(strings.ReplaceAll(strings.ToUpper(it.value), " ", ""), "WGS84") {
		return profile.Position{}
	}
	latitude := r.degrees(90, "LATI", "LAT")
	longitude := r.degrees(180, "LONG", "LON")
	if !latitude.Known || !longitude.Known {
		return profile.Position{}
	}
	return profile.Position{Latitude: latitude, Longitude: longitude}
}

func (r *reader) degrees(limit float64, mnemonics ...string) profile.Optional {
	it := r.itemOf(mnemonics...)
	if it == nil {
		return profile.Optional{}
	}
	v, err := strconv.ParseFloat(it.value, 64)
	return profile.Optional{Value: v, Known: err == nil && v >= -limit && v <= limit && v != r.header.null}
}

// estimates are words in the description of a curve that was not measured.
var estimates = []string{"estimat", "predict", "synth", "correlat", "empiric", "computed from", "derived from"}

// basis is how the velocities came to be known: measured, as logs are, unless
// the description says otherwise.
func (r *reader) basis() profile.Basis {
	description := strings.ToLower(r.vs.description)
	for _, word := range estimates {
		if strings.Contains(description, word) {
			r.note("basis-assumed", r.vs.at, "curve %s was taken for correlated velocities, because it is described as %s", r.vs.name, profile.Quote(r.vs.description))
			return profile.Correlated
		}
	}
	r.note("basis-assumed", r.vs.at, "a log was taken for measured velocities; the file does not say how they came to be known")
	return profile.Measured
}

// datum notes that depths are measured from another point than the ground, or
// may be: where the file says the height of a point on the rig and not from where
// the log is measured.
func (r *reader) datum() {
	it := r.itemOf("LMF", "DMF", "LOGMF")
	rig := r.itemOf("EKB", "KB", "ELEV_KB", "EKELLY", "EDF", "DF", "ELEV_DF", "ERT", "ERB", "EREF")
	height, told := r.aboveGround(rig)
	switch {
	case r.opt.Datum != 0:
		r.note("depth-datum", r.index.at, "depths are measured from %.4g m above ground level, as given; they were reckoned from the ground", r.opt.Datum)
	case it != nil && ground(it.value):
	case it != nil && told:
		r.note("depth-datum", it.valueAt, "depths are measured from %s, and %s stands %.4g m above ground level; they were taken as below ground level: if they are not, add --log-datum %s",
			profile.Quote(it.value), rig.mnemonic, height, metres(height))
	case it != nil:
		r.note("depth-datum", it.valueAt, "depths are measured from %s; they were taken as below ground level", profile.Quote(it.value))
	case told:
		r.note("depth-datum", rig.valueAt, "the file states %s %s and a ground level %.4g m below it, and not from which of them depths are measured; they were taken as below ground level: if they are not, add --log-datum %s",
			rig.mnemonic, strings.TrimSpace(rig.value+" "+strings.ToLower(rig.unit)), height, metres(height))
	}
}

// metres is a height as an option takes it, 5m.
func metres(x float64) string { return strconv.FormatFloat(math.Round(x*1000)/1000, 'f', -1, 64) + "m" }

// aboveGround is the height in m of a point above ground level, where the
// elevations of both are stated and it is above.
func (r *reader) aboveGround(it *item) (height float64, ok bool) {
	level := r.groundLevel()
	if it == nil || !level.Known {
		return 0, false
	}
	v, number := parseNumber([]byte(it.value))
	u := parseUnit(it.unit)
	if !number || u.kind != length || v == r.header.null || isNines(v) {
		return 0, false
	}
	height = u.si(v) - level.Value
	return height, height > 0.01 && height <= profile.MaxDepth
}

// ground reports whether a word for a datum means the ground.
func ground(word string) bool {
	word = strings.ToUpper(word)
	return strings.Contains(word, "GL") || strings.Contains(word, "GROUND") || word == "G.L."
}

// dataNotes are the notes on how the data were read.
func (r *reader) dataNotes() {
	d := &r.rows
	if d.runOn > 0 {
		r.note("run-on", d.runOnAt, "numbers had run together in %s and were taken apart", profile.Plural(d.runOn, "row"))
	}
	if len(d.undeclared) > 0 {
		var list []string
		for _, word := range slices.Sorted(maps.Keys(d.undeclared)) {
			list = append(list, word+" ("+strconv.Itoa(d.undeclared[word])+")")
		}
		r.note("nulls-undeclared", d.nullAt, "taken for no value without being declared so: %s", strings.Join(list, ", "))
	}
	r.order()
}

// order notes that the line ~A names the columns in another order than ~C.
func (r *reader) order() {
	named := strings.Fields(tidy(r.header.data.title.text))
	if len(named) != len(r.curves)+1 {
		return
	}
	for i := range r.curves {
		at := slices.IndexFunc(named[1:], func(n string) bool { return strings.EqualFold(n, r.curves[i].mnemonic) })
		if at < 0 {
			return
		}
		if at != i && !strings.EqualFold(named[1+i], r.curves[i].mnemonic) {
			r.note("column-order", r.header.data.title.first(), "the line ~A names the columns in another order than ~C, which was followed")
			return
		}
	}
}
