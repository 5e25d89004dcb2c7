package sitexml

import (
	"encoding/xml"
	"strconv"
	"strings"

	"shearbook/profile"
)

// document is what was gathered from the file.
type document struct {
	edition  string // its schemaVersion
	metadata []profile.Metadatum
	sites    []*site
	byID     map[string]*site
	profiles []*column
}

// site is a siteDescription.
type site struct {
	depth     int // of its element
	id        string
	position  profile.Position
	altitude  profile.Optional
	preferred string // publicID of the preferred velocityProfile
	metadata  []profile.Metadatum
}

// analysis is an analysis.
type analysis struct {
	depth    int
	id, site string // publicID of its own, and of its siteDescription
	methods  []string
	metadata []profile.Metadatum
}

// column is a velocityProfile.
type column struct {
	spot
	depth    int
	id       string
	analysis *analysis // nil if it lies in none
	count    quoted    // layerCount
	layers   []profile.Layer
	metadata []profile.Metadatum
	faults   *profile.Collector // of its own, where profiles are read apart; nil if there are none
	table
}

// open does what the start of an element asks for. The element is on the
// stack.
func (r *reader) open(e *element, attributes []xml.Attr) bool {
	w, depth := &r.walk, len(r.walk.stack)
	id := publicID(attributes)
	switch {
	case w.layer != nil:
		return true
	case e.lower == "sitedescription" && w.site == nil:
		w.site = &site{depth: depth, id: id}
		r.file.sites = append(r.file.sites, w.site)
		if r.file.byID == nil {
			r.file.byID = map[string]*site{}
		}
		if r.file.byID[id] == nil {
			r.file.byID[id] = w.site
		}
	case e.lower == "analysis" && w.analysis == nil:
		w.analysis = &analysis{depth: depth, id: id}
	case e.lower == "velocityprofile" && w.profile == nil:
		if len(r.file.profiles) == MaxProfiles {
			r.stop(e.spot, "split the file", "the file has more than %d profiles", MaxProfiles)
			return false
		}
		w.profile = &column{spot: e.spot, depth: depth, id: id, analysis: w.analysis}
		r.file.profiles = append(r.file.profiles, w.profile)
	case e.lower == "velocityprofiledata" && w.profile != nil:
		if r.layers++; r.layers > MaxLayers {
			r.stop(e.spot, "split the file", "the file has more than %d layers", MaxLayers)
			return false
		}
		w.layer = &layer{spot: e.spot, depth: depth}
		return true
	}
	for _, a := range attributes {
		if a.Name.Space == "xmlns" || a.Name.Local == "xmlns" || strings.Contains(a.Name.Space, "XMLSchema-instance") {
			continue
		}
		if depth == 1 && strings.EqualFold(a.Name.Local, "schemaVersion") {
			r.file.edition = strings.TrimSpace(a.Value)
		}
		if !r.state(r.path(a.Name.Local), quoted{strings.Join(strings.Fields(a.Value), " "), e.spot}) {
			return false
		}
	}
	return true
}

func publicID(attributes []xml.Attr) string {
	for _, a := range attributes {
		if strings.EqualFold(a.Name.Local, "publicID") {
			return strings.TrimSpace(a.Value)
		}
	}
	return ""
}

// path is the path of a name below the open elements, from below the
// outermost and without wrappers.
func (r *reader) path(name string) string {
	const most = 256 // bytes
	var b strings.Builder
	stack := r.walk.stack
	for i := 1; i < len(stack) && b.Len() < most; i++ {
		if stack[i].lower != "sitecharacterizationparameters" {
			b.WriteString(stack[i].name[:min(len(stack[i].name), most)])
			b.WriteByte('/')
		}
	}
	b.WriteString(name[:min(len(name), most)])
	return strings.ToValidUTF8(b.String(), "")
}

// state keeps a statement about what the present element lies in.
func (r *reader) state(path string, value quoted) bool {
	if value.text == "" {
		return true
	}
	w := &r.walk
	if w.stated++; w.stated > MaxMetadata {
		r.stop(value.spot, "split the file", "the file states more than %d things", MaxMetadata)
		return false
	}
	to := &r.file.metadata
	switch {
	case w.profile != nil:
		to = &w.profile.metadata
	case w.analysis != nil:
		to = &w.analysis.metadata
	case w.site != nil:
		to = &w.site.metadata
	}
	*to = append(*to, profile.Metadatum{Key: path, Value: plain(value.text), Line: int(value.line)})
	return true
}

// plain is a text without control characters.
func plain(text string) string {
	return strings.Map(func(c rune) rune {
		if c < ' ' || c >= 0x7f && c < 0xa0 {
			return ' '
		}
		return c
	}, text)
}

// close does what the end of an element asks for. It is off the stack.
func (r *reader) close(e *element) bool {
	w, depth := &r.walk, len(r.walk.stack)+1
	switch {
	case w.layer != nil && w.layer.depth == depth:
		r.endLayer()
		w.layer = nil
		return true
	case w.layer != nil:
		r.quantity(e)
		return true
	case w.profile != nil && w.profile.depth == depth:
		w.profile = nil
		return true
	case w.analysis != nil && w.analysis.depth == depth:
		w.analysis = nil
		return true
	case w.site != nil && w.site.depth == depth:
		w.site = nil
		return true
	}
	r.special(e)
	value := e.number()
	if e.uncertainty.text != "" {
		value.text += " ± " + e.uncertainty.text
	}
	return r.state(r.path(e.name), value)
}

// special reads the elements that a profile is made from beside its layers.
func (r *reader) special(e *element) {
	w, above := &r.walk, ""
	if len(w.stack) > 0 {
		above = w.stack[len(w.stack)-1].lower
	}
	value := e.number()
	switch {
	case value.text == "":
	case e.lower == "schemaversion" && w.site == nil && w.analysis == nil:
		r.file.edition = value.text
	case e.lower == "latitude" && above == "sitedescription":
		w.site.position.Latitude = r.within(e.name, value, -90, 90)
	case e.lower == "longitude" && above == "sitedescription":
		w.site.position.Longitude = r.within(e.name, value, -180, 180)
	case e.lower == "altitude" && above == "sitedescription":
		w.site.altitude = r.within(e.name, value, -profile.MaxDepth, profile.MaxDepth)
	case e.lower == "preferredvelocityprofileid" && w.site != nil:
		w.site.preferred = value.text
	case e.lower == "sitedescriptionid" && w.analysis != nil:
		w.analysis.site = value.text
	case e.lower == "velocitys30method" && w.analysis != nil && len(w.analysis.methods) < 20:
		w.analysis.methods = append(w.analysis.methods, plain(value.text))
	case e.lower == "layercount" && w.profile != nil:
		w.profile.count = value
	}
}

// within reads a number between two others.
func (r *reader) within(name string, q quoted, low, high float64) profile.Optional {
	v, ok := r.number(name, q)
	if ok && (v < low || v > high) {
		r.fault(q.spot, "", "%s %v lies outside %v to %v", printable(name), v, low, high)
		ok = false
	}
	return profile.Optional{Value: v, Known: ok}
}

// number reads a number.
func (r *reader) number(name string, q quoted) (float64, bool) {
	v, err := strconv.ParseFloat(q.text, 64)
	if err == nil && strings.Trim(q.text, "+-.0123456789eE") == "" {
		return v, true
	}
	hint := "write a plain number such as 12.5; quantities are in m, m/s and kg/m³"
	if strings.Count(q.text, ",") == 1 {
		hint = "write decimals with a point"
	}
	r.fault(q.spot, hint, "%s %s is not a number", printable(name), profile.Quote(q.text))
	return 0, false
}
