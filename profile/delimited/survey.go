package delimited

import (
	"strings"
	"unicode"

	"shearbook/profile"
)

// key is a key that is read above the header, as messages name it; "" is a
// key that is kept unread.
type key string

const (
	keyName         key = "name"
	keyMethod       key = "method"
	keyDate         key = "date"
	keyLocation     key = "location"
	keyOperator     key = "operator"
	keyBasis        key = "basis"
	keyGroundLevel  key = "ground level"
	keyWaterTable   key = "water table"
	keyDepthReached key = "depth reached"
	keyLatitude     key = "latitude"
	keyLongitude    key = "longitude"
	keyEasting      key = "easting"
	keyNorthing     key = "northing"
	keyEPSG         key = "epsg"
	keyUnits        key = "units"
)

// keyOf returns the key that a text names. A unit in brackets after it does
// not matter.
func keyOf(text string) key {
	if len(text) > longestHeading {
		return ""
	}
	base, _ := brackets(text)
	switch plain(base) {
	case "name", "profile", "profile name":
		return keyName
	case "method", "survey method":
		return keyMethod
	case "date", "survey date", "date of survey":
		return keyDate
	case "location":
		return keyLocation
	case "operator", "surveyed by", "measured by":
		return keyOperator
	case "basis", "basis of velocity", "velocity basis":
		return keyBasis
	case "ground level", "ground elevation", "ground surface elevation":
		return keyGroundLevel
	case "water table", "water table depth", "depth to water table", "groundwater depth", "depth to groundwater":
		return keyWaterTable
	case "depth reached", "survey depth", "depth of investigation", "investigation depth":
		return keyDepthReached
	case "latitude", "lat":
		return keyLatitude
	case "longitude", "lon", "long":
		return keyLongitude
	case "easting", "grid easting":
		return keyEasting
	case "northing", "grid northing":
		return keyNorthing
	case "epsg", "epsg code":
		return keyEPSG
	case "units", "unit":
		return keyUnits
	}
	return ""
}

// applyTo puts a statement into a profile; name is the profile it is about,
// "" for all.
func (r *reader) applyTo(p *profile.Profile, name string, k key, st *statement) {
	if k == "" || !r.first(name, k, st) {
		return
	}
	if oneLine(st.value) == "" {
		r.fault(st.at(), "state it, or remove the line", "%s is blank", k)
		return
	}
	switch k {
	case keyName:
		r.nameFile(p, name, st)
	case keyMethod:
		p.Survey.Method = oneLine(st.value)
	case keyDate:
		p.Survey.Date = oneLine(st.value)
	case keyLocation:
		p.Survey.Location = oneLine(st.value)
	case keyOperator:
		p.Survey.Operator = oneLine(st.value)
	case keyBasis:
		r.basis(p, st)
	case keyGroundLevel:
		if z, ok := r.length(k, st); ok {
			p.Survey.GroundLevel = profile.Known(z)
		}
	case keyWaterTable:
		r.waterTable(p, st)
	case keyDepthReached:
		if z, ok := r.length(k, st); ok && z <= 0 {
			r.fault(st.at(), "", "depth reached %s is not positive", quote(st.value))
		} else if ok {
			p.Survey.DepthReached = z
		}
	case keyLatitude, keyLongitude, keyEasting, keyNorthing, keyEPSG:
		if problem, hint := placeBy(&p.Position, k.quantity(), st.value); problem != "" {
			r.fault(st.at(), hint, "%s %s %s", k, quote(st.value), problem)
		}
	case keyUnits:
		r.fault(st.at(), "state the units of the file once, for all profiles", "units are stated for one profile")
	}
}

func (r *reader) nameFile(p *profile.Profile, name string, st *statement) {
	if name != "" {
		r.fault(st.at(), "", "profile %s is named already", quote(name))
		return
	}
	p.Name, r.preamble.named = oneLine(st.value), st.at()
}

func (r *reader) basis(p *profile.Profile, st *statement) {
	b, ok := profile.ParseBasis(strings.ToLower(st.value))
	if !ok {
		r.fault(st.at(), hintBasis, "basis %s is not known", quote(st.value))
	}
	p.Survey.Basis = b
}

const hintBasis = "write measured, inverted or correlated"

// waterTable reads the depth of the water table, or words that say that it
// is not known.
func (r *reader) waterTable(p *profile.Profile, st *statement) {
	switch strings.ToLower(st.value) {
	case "dry", "none", "not met", "not encountered", "not reached", "not known", "unknown", "not stated":
		return
	}
	if z, ok := r.length(keyWaterTable, st); ok {
		p.Survey.WaterTable = profile.Known(z)
	}
}

// length reads a length in m. Its unit follows the number, or stands in
// brackets after the key, or is the unit of all lengths of the file. Words
// after the unit, such as the name of a height datum, are let pass.
func (r *reader) length(k key, st *statement) (float64, bool) {
	number, rest := cutNumber(st.value)
	v, problem := metadataNumber(number)
	if problem != "" {
		r.fault(st.at(), "", "%s %s is not a length", k, quote(st.value))
		return 0, false
	}
	unit, problem := r.lengthUnit(rest, st)
	if problem != "" {
		r.fault(st.at(), `write it as "`+string(k)+`: 4.2 m"`, "%s %s: %s", k, quote(st.value), problem)
		return 0, false
	}
	return v * unit.Factor, true
}

func (r *reader) lengthUnit(rest string, st *statement) (u profile.Unit, problem string) {
	_, groups := brackets(st.key)
	word, _, _ := strings.Cut(strings.TrimSpace(rest), " ")
	candidates := append(groups, word, rest)
	for _, c := range candidates {
		if u, ok := unitOf(c, profile.Length); ok {
			return u, ""
		}
	}
	if word != "" {
		return u, notAUnit(word, profile.Length)
	}
	for _, units := range []*Units{&r.stated, &r.given} {
		if u, ok := units.of(profile.Top); ok {
			return u, ""
		}
	}
	return u, "no unit is stated"
}

// cutNumber cuts a text after the number that it begins with.
func cutNumber(text string) (number, rest string) {
	i := strings.IndexFunc(text, func(r rune) bool {
		return !unicode.IsDigit(r) && !strings.ContainsRune("+-−.,", r)
	})
	if i < 0 {
		return text, ""
	}
	return text[:i], text[i:]
}

// metadataNumber reads a number above the header; its decimal sign may be a
// comma where that is the only way to read it.
func metadataNumber(text string) (v float64, problem string) {
	v, problem = numerals{}.parse([]byte(text))
	if problem != "" && strings.Count(text, ",") == 1 && !thousands([]byte(text)) {
		return numerals{comma: true}.parse([]byte(text))
	}
	return v, problem
}

// lineOf is the line that states a key of a profile, or of all of them; 0 if
// none does.
func (r *reader) lineOf(name string, k key) int {
	if line := r.preamble.seen[name+profile.CellSeparator+string(k)]; line > 0 {
		return line
	}
	return r.preamble.seen[profile.CellSeparator+string(k)]
}
