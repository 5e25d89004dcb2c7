package notebook

import (
	"slices"
	"strconv"
	"strings"

	"go.yaml.in/yaml/v4"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/report"
	"shearbook/vs30/siteclass"
)

// Header is the front matter of a notebook. Every key may be left out but
// profiles.
type Header struct {
	Title      string // title
	Project    string // project
	Reference  string // reference
	Client     string // client
	PreparedBy string // prepared by
	CheckedBy  string // checked by
	Engineer   string // engineer: who will sign as licensed engineer
	Date       string // date, as it is to be printed
	Revision   string // revision
	Location   string // location

	Position    profile.Position // site: latitude, longitude in degrees
	GroundLevel profile.Optional // site: ground level, m
	Foundation  profile.Optional // site: foundation depth, m below ground level

	Units  System // units: SI or US
	Letter bool   // paper: A4 or Letter

	WithoutData bool // data: attached to report.pdf, or withheld from it

	Codes    []CodeEntry      // code: one id, one file of a table, or a list; the first is the code of the report
	Datum    profile.Optional // datum: m below ground level from which to average
	Extend   string           // extend: "constant-velocity", or "" to refuse a profile that is too short
	Profiles []ProfileEntry   // profiles
	Ground   siteclass.Ground // ground

	profilePlace profile.Place
}

// ProfileEntry is one profile that a notebook names.
type ProfileEntry struct {
	Key     string   // the name that workings and expressions use
	File    string   // file, beside the notebook
	Profile string   // profile: its name inside the file; "" where the file holds one
	Units   string   // units the file does not state, as `m, m/s`
	Map     []string // map: columns that are not recognised, each as "Vs=DTS [us/ft]"

	// Read says how to read the file beside Units and Map: step and bounds, m;
	// carry up, m; log datum, m above ground level; n60; all holes; correlate,
	// unit weight, energy ratio.
	Read open.Options

	Survey   profile.Survey   // what the notebook states; the rest comes from the file
	Position profile.Position // likewise
	place    profile.Place
}

// Options returns how to read the file of the profile.
func (e *ProfileEntry) Options() open.Options {
	opt := e.Read
	opt.Units, opt.Map = e.Units, e.Map
	return opt
}

// parseHeader reads the front matter and adds what is wrong with it; own says
// that it need not name a profile.
func parseHeader(f *faultList, front string, own bool) Header {
	m := parseMapping(f, "the front matter", front, 1)
	if len(f.faults) > 0 {
		return Header{}
	}
	h := Header{
		Title: m.text("title"), Project: m.text("project"), Reference: m.text("reference"),
		Client: m.text("client"), PreparedBy: m.text("prepared by"), CheckedBy: m.text("checked by"),
		Engineer: m.text("engineer"), Date: m.text("date"), Revision: m.text("revision"),
		Location: m.text("location"),
		Codes:    m.codeEntries("code"),
		Datum:    m.value("datum", profile.Length, "2.5 m"),
		Extend:   m.word("extend", report.Extensions()),
	}
	h.site(&m)
	h.Letter = m.word("paper", []string{"A4", "Letter"}) == "Letter"
	h.WithoutData = m.word("data", []string{"attached", "withheld"}) == "withheld"
	h.Units, _ = ParseSystem(m.word("units", []string{"SI", "US"}))
	h.Ground = parseGround(m.inside("ground"))
	h.profilePlace = m.at(m.get("profiles"))
	h.Profiles = parseProfiles(m.inside("profiles"))
	if len(h.Profiles) == 0 && len(f.faults) == 0 && !own {
		f.add(h.profilePlace, "add a line `profiles: {L1: {file: line-1.csv}}`", "the front matter names no profile")
	}
	if h.Datum.Known && h.Datum.Value < 0 {
		f.add(m.at(m.get("datum")), "give the depth below ground level, as `datum: 2.5 m`", "the datum lies above the ground")
	}
	m.rest()
	return h
}

// word returns the value of a key that must be one of a few, case aside.
func (m *mapping) word(key string, words []string) string {
	text := m.text(key)
	if text == "" {
		return ""
	}
	i := slices.IndexFunc(words, func(w string) bool { return strings.EqualFold(w, text) })
	if i < 0 {
		m.add(m.at(m.get(key)), "it is one of: "+strings.Join(words, ", "), "%s of %s is %q", key, m.what, text)
		return ""
	}
	return words[i]
}

func (h *Header) site(m *mapping) {
	site := m.inside("site")
	h.Position = site.position()
	h.GroundLevel = site.value("ground level", profile.Length, "4.2 m")
	h.Foundation = site.value("foundation depth", profile.Length, "2.5 m")
	site.rest()
}

func (m *mapping) position() profile.Position {
	return profile.Position{Latitude: m.degrees("latitude", 90), Longitude: m.degrees("longitude", 180)}
}

// degrees returns the value of a key as decimal degrees.
func (m *mapping) degrees(key string, limit float64) profile.Optional {
	text := m.text(key)
	if text == "" {
		return profile.Optional{}
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || !(v >= -limit && v <= limit) {
		m.add(m.at(m.get(key)), "write decimal degrees, as `"+key+": 51.02`", "%s %q is not an angle between −%g and %g degrees", key, text, limit, limit)
		return profile.Optional{}
	}
	return profile.Known(v)
}

// parseProfiles reads the entries of profiles:.
func parseProfiles(m mapping) []ProfileEntry {
	var entries []ProfileEntry
	keys, values := m.pairs()
	for i, k := range keys {
		e := ProfileEntry{Key: k.Value, place: m.at(k)}
		if values[i].Kind == yaml.ScalarNode {
			e.File = values[i].Value
		} else {
			in := m.inside(k.Value)
			e.read(&in)
		}
		if e.File == "" {
			m.add(e.place, "add `file: "+k.Value+".csv`", "profile %q names no file", k.Value)
		}
		entries = append(entries, e)
	}
	return entries
}

func (e *ProfileEntry) read(in *mapping) {
	e.File, e.Profile, e.Units = in.text("file"), in.text("profile"), in.text("units")
	e.Map = in.texts("map")
	e.Read = in.readOptions()
	e.Survey = profile.Survey{
		Method: in.text("method"), Date: in.text("date"), Operator: in.text("operator"), Location: in.text("location"),
		GroundLevel: in.value("ground level", profile.Length, "4.2 m"),
		WaterTable:  in.value("water table", profile.Length, "1.8 m"),
	}
	e.Survey.DepthReached = in.value("depth reached", profile.Length, "34 m").Value
	if word := in.word("basis", []string{"measured", "inverted", "correlated"}); word != "" {
		e.Survey.Basis, _ = profile.ParseBasis(word)
	}
	e.Position = in.position()
	e.Read.Correlate = in.correlation(e.Survey.WaterTable)
	in.rest()
}

// readOptions returns the keys that say how to read a file.
func (m *mapping) readOptions() open.Options {
	return open.Options{
		Step:     m.depth("step", "0.5 m"),
		Bounds:   m.depths("bounds", "5 m"),
		CarryUp:  m.depth("carry up", "6 m"),
		LogDatum: m.value("log datum", profile.Length, "0.6 m").Value,
		N60:      m.truth("n60"),
		AllHoles: m.truth("all holes"),
	}
}

// depth returns the value of a key as a depth or thickness above zero, in m.
func (m *mapping) depth(key, example string) float64 {
	n := m.get(key)
	if n == nil || n.Tag == "!!null" {
		return 0
	}
	return m.depthOf(n, key, example)
}

func (m *mapping) depthOf(n *yaml.Node, key, example string) float64 {
	z := m.valueOf(n, key, profile.Length, example)
	if z.Known && z.Value <= 0 {
		m.add(m.at(n), "write it as `"+key+": "+example+"`", "%s of %s is not above zero", key, m.what)
	}
	return z.Value
}

// depths returns the value of a key as a list of depths, in m.
func (m *mapping) depths(key, example string) []float64 {
	n := m.get(key)
	if n == nil || n.Tag == "!!null" {
		return nil
	}
	if n.Kind == yaml.ScalarNode {
		return []float64{m.depthOf(n, key, example)}
	}
	var list []float64
	for _, item := range n.Content {
		if n.Kind != yaml.SequenceNode {
			m.add(m.at(n), "write it as `"+key+": [5 m, 12 m]`", "%s of %s is not a list of depths", key, m.what)
			return nil
		}
		list = append(list, m.depthOf(item, key, example))
	}
	return list
}

// truth reads yes or no; a key that is not there is no.
func (m *mapping) truth(key string) bool {
	switch strings.ToLower(m.text(key)) {
	case "", "no", "false":
		return false
	case "yes", "true":
		return true
	}
	m.add(m.at(m.get(key)), "write yes or no", "%s of %s is %q", key, m.what, m.text(key))
	return false
}

// parseGround reads what the notebook states of the ground beside its
// velocities.
func parseGround(m mapping) siteclass.Ground {
	g := siteclass.Ground{
		Liquefiable: m.answer("liquefiable soil"),
		Sensitive:   m.answer("sensitive clay"),
		Collapsible: m.answer("collapsible soil"),

		Peat:           m.deposit("peat"),
		HighPlasticity: m.deposit("high-plasticity clay"),
		SoftClay:       m.deposit("soft clay"),
		ThickClay:      m.deposit("soft to medium clay"),
	}
	m.rest()
	return g
}

// answer reads yes, no or not assessed.
func (m *mapping) answer(key string) siteclass.Answer {
	switch text := strings.ToLower(m.text(key)); text {
	case "", "not assessed", "unknown":
		return siteclass.NotKnown
	case "no", "false", "none":
		return siteclass.No
	case "yes", "true":
		return siteclass.Yes
	default:
		m.add(m.at(m.get(key)), "write yes, no or not assessed", "%s of %s is %q", key, m.what, text)
		return siteclass.NotKnown
	}
}

// deposit reads a total thickness, `no`, `not assessed`, or a mapping with
// the thickness and its properties.
func (m *mapping) deposit(key string) siteclass.Deposit {
	n := m.get(key)
	if n == nil {
		return siteclass.Deposit{}
	}
	if n.Kind == yaml.MappingNode {
		in := m.inside(key)
		d := siteclass.Deposit{
			Thickness:    in.value("thickness", profile.Length, "2 m"),
			PI:           in.value("PI", profile.Percent, "35 %"),
			WaterContent: in.value("water content", profile.Percent, "45 %"),
			Su:           in.value("su", profile.Stress, "20 kPa"),
		}
		in.rest()
		return d
	}
	switch strings.ToLower(n.Value) {
	case "", "not assessed", "unknown", "null", "~":
		return siteclass.Deposit{}
	case "no", "none", "false":
		return siteclass.Deposit{Thickness: profile.Known(0)}
	}
	return siteclass.Deposit{Thickness: m.valueOf(n, key, profile.Length, "2 m")}
}
