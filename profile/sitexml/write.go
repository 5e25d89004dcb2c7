package sitexml

import (
	"bufio"
	"encoding/xml"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
	"time"

	"shearbook/profile"
)

// Publication is what SiteXML asks for beside the profiles. Its zero value
// takes what the metadata of the first profile state, as those of a profile
// that was read from SiteXML do; what is still not known is written as
// "not-stated".
type Publication struct {
	Authority string // the first part of every publicID, such as "example.org"; "local" if blank
	Site      string // name of the site in the publicIDs; that of the first profile if blank
	Created   string // when the file was made, 2026-03-02 or 2026-03-02T10:00:00Z; the survey's date if blank
	Owner     Owner
}

// Owner is who answers for the site.
type Owner struct {
	Code, Name                string
	FirstName, LastName, Mail string // of the person to ask
}

// Write writes the profiles of one site as SiteXML 1.3: elements in the order
// of the schema, each profile in an analysis of its own. Read reads them back;
// what the form has no place for is listed by Losses. A velocity gradient is
// written as the constant velocity with the same travel time.
//
// The error is that of w; or it says what the form needs and the profiles do
// not state: a position, the same for all of them, and a date; or that
// profile.Validate finds a profile faulty.
func Write(w io.Writer, profiles []profile.Profile, pub Publication) error {
	if err := writable(profiles); err != nil {
		return err
	}
	created, err := creation(profiles, pub)
	if err != nil {
		return err
	}
	out := &printer{Writer: bufio.NewWriter(w), authority: identifier(or(pub.Authority, "local"))}
	out.WriteString(xml.Header)
	site := identifier(or(pub.Site, profiles[0].Name))
	out.open("SERA_quakeml", "xmlns", Namespace, "publicID", out.id("site", site), "schemaVersion", SchemaVersion)
	out.leaf("creationTime", created)
	out.owner(ownerOf(&profiles[0], pub.Owner), site)
	out.site(profiles, site)
	for i := range profiles {
		out.analysis(&profiles[i], site)
	}
	out.close()
	return out.Flush() // every error before it is kept for it
}

func writable(profiles []profile.Profile) error {
	if len(profiles) == 0 {
		return fmt.Errorf("there are no profiles to write")
	}
	names := map[string]bool{}
	for i := range profiles {
		p := &profiles[i]
		name := tidy(p.Name)
		switch {
		case name == "" || name != p.Name:
			return fmt.Errorf("the name %s of profile %d is blank or not one line of plain text", profile.Quote(p.Name), i+1)
		case names[name]:
			return fmt.Errorf("two profiles have the name %s", profile.Quote(name))
		case p.NoVelocity:
			return fmt.Errorf("profile %s states no velocities, and SiteXML has no place for the rest", profile.Quote(name))
		case !p.Position.Latitude.Known || !p.Position.Longitude.Known:
			return fmt.Errorf("profile %s states no latitude and longitude, which SiteXML needs", profile.Quote(name))
		case p.Position.Latitude != profiles[0].Position.Latitude || p.Position.Longitude != profiles[0].Position.Longitude:
			return fmt.Errorf("profiles %s and %s lie at different positions; a SiteXML file is of one site: write a file for each",
				profile.Quote(profiles[0].Name), profile.Quote(name))
		}
		names[name] = true
		if faults := profile.Validate(p); len(faults) > 0 {
			return fmt.Errorf("profile %s: %w", profile.Quote(name), faults)
		}
	}
	return nil
}

// creation is the creation time of the file in the form of XML Schema.
func creation(profiles []profile.Profile, pub Publication) (string, error) {
	candidates := []string{pub.Created}
	if pub.Created == "" {
		candidates = []string{stated(&profiles[0], "creationTime"), profiles[0].Survey.Date}
	}
	for _, text := range candidates {
		if t, ok := dateTime(text); ok {
			return t, nil
		}
	}
	if pub.Created != "" {
		return "", fmt.Errorf("%s is not a time such as 2026-03-02 or 2026-03-02T10:00:00Z", profile.Quote(pub.Created))
	}
	return "", fmt.Errorf("profile %s states no date such as 2026-03-02, which SiteXML needs", profile.Quote(profiles[0].Name))
}

// dateTime is a date or time in the form of XML Schema; a date becomes its
// first moment in UTC.
func dateTime(text string) (string, bool) {
	text = strings.TrimSpace(text)
	if _, err := time.Parse(time.DateOnly, text); err == nil {
		return text + "T00:00:00Z", true
	}
	t, err := time.Parse(time.RFC3339Nano, text)
	if err != nil {
		return "", false
	}
	return t.Format(time.RFC3339Nano), true
}

// stated is what a profile was stated to be under the path of an element, ""
// if nothing was.
func stated(p *profile.Profile, path string) string {
	if list := allStated(p, path); len(list) > 0 {
		return list[0]
	}
	return ""
}

func allStated(p *profile.Profile, path string) []string {
	if p.Reading == nil {
		return nil
	}
	var list []string
	for _, m := range p.Reading.Metadata {
		if strings.EqualFold(m.Key, path) {
			list = append(list, m.Value)
		}
	}
	return list
}

// or is the first text that is not blank.
func or(texts ...string) string {
	for _, text := range texts {
		if text = tidy(text); text != "" {
			return text
		}
	}
	return ""
}

func ownerOf(p *profile.Profile, o Owner) Owner {
	const unknown = "not-stated"
	const person = "siteOwner/contact/person/"
	return Owner{
		Code:      or(o.Code, stated(p, "siteOwner/codeName"), unknown),
		Name:      or(o.Name, stated(p, "siteOwner/fullName"), unknown),
		FirstName: or(o.FirstName, stated(p, person+"firstname"), unknown),
		LastName:  or(o.LastName, stated(p, person+"lastname"), unknown),
		Mail:      or(o.Mail, stated(p, person+"mbox"), unknown),
	}
}

// identifier is a text as a part of a publicID: letters, digits and a few
// signs stay, all else becomes the bytes of its UTF-8 as =41.
func identifier(text string) string {
	var b strings.Builder
	for i := range len(text) {
		switch c := text[i]; {
		case c >= 'a' && c <= 'z', c >= 'A' && c <= 'Z', c >= '0' && c <= '9', strings.IndexByte("-._~()*", c) >= 0:
			b.WriteByte(c)
		default:
			fmt.Fprintf(&b, "=%02X", c)
		}
	}
	return b.String()
}

// printer writes elements.
type printer struct {
	*bufio.Writer
	authority string
	names     []string // of the open elements
}

// id is a publicID.
func (w *printer) id(kind, name string) string {
	return "quakeml:" + w.authority + "/" + kind + "/" + name
}

func (w *printer) indent() { w.WriteString(strings.Repeat("  ", len(w.names))) }

// open writes a start tag with attributes, name and value in turn.
func (w *printer) open(name string, attributes ...string) {
	w.indent()
	w.WriteString("<" + name)
	for i := 0; i < len(attributes); i += 2 {
		w.WriteString(" " + attributes[i] + `="` + escaped(attributes[i+1]) + `"`)
	}
	w.WriteString(">\n")
	w.names = append(w.names, name)
}

func (w *printer) close() {
	name := w.names[len(w.names)-1]
	w.names = w.names[:len(w.names)-1]
	w.indent()
	w.WriteString("</" + name + ">\n")
}

// leaf writes an element that holds a text.
func (w *printer) leaf(name, text string) {
	w.indent()
	w.WriteString("<" + name + ">" + escaped(text) + "</" + name + ">\n")
}

// quantity writes a number and, where it is above zero, its uncertainty.
func (w *printer) quantity(name string, value, uncertainty float64) {
	text := "<value>" + number(value) + "</value>"
	if uncertainty > 0 {
		text += "<uncertainty>" + number(uncertainty) + "</uncertainty>"
	}
	w.indent()
	w.WriteString("<" + name + ">" + text + "</" + name + ">\n")
}

func escaped(text string) string {
	var b strings.Builder
	xml.EscapeText(&b, []byte(text)) // into memory it does not fail
	return b.String()
}

// number is a number with the fewest digits that give it again, without an
// exponent.
func number(x float64) string { return strconv.FormatFloat(x, 'f', -1, 64) }

func (w *printer) owner(o Owner, site string) {
	w.open("siteOwner", "publicID", w.id("site_owner", site))
	w.leaf("codeName", o.Code)
	w.leaf("fullName", o.Name)
	w.open("contact")
	w.open("person")
	w.leaf("firstname", o.FirstName)
	w.leaf("lastname", o.LastName)
	w.leaf("mbox", o.Mail)
	w.close()
	w.close()
	w.close()
}

// site writes the description of the site.
func (w *printer) site(profiles []profile.Profile, site string) {
	p := &profiles[0]
	w.open("siteDescription", "publicID", w.id("site_description", site))
	w.quantity("latitude", p.Position.Latitude.Value, 0)
	w.quantity("longitude", p.Position.Longitude.Value, 0)
	if level, same := commonLevel(profiles); same {
		w.quantity("altitude", level, 0)
	}
	w.repeated(p, "siteDescription/siteMorphology/", morphology, func() { w.open("siteMorphology") }, w.close)
	if len(profiles) == 1 {
		w.leaf("preferredSiteAnalysisID", w.id("analysis", identifier(p.Name)))
		w.leaf("preferredVelocityProfileID", w.id("velocity_profile", identifier(p.Name)))
	}
	w.repeated(p, "siteDescription/", []restated{{"overallQindex", index}}, nil, nil)
	w.close()
}

// commonLevel is the ground level of all profiles, if it is known and the
// same.
func commonLevel(profiles []profile.Profile) (float64, bool) {
	level := profiles[0].Survey.GroundLevel
	for i := range profiles {
		if profiles[i].Survey.GroundLevel != level {
			return 0, false
		}
	}
	return level.Value, level.Known
}

// analysis writes a profile and what was stated beside it.
func (w *printer) analysis(p *profile.Profile, site string) {
	name := identifier(p.Name)
	w.open("analysis", "publicID", w.id("analysis", name))
	w.leaf("siteDescriptionID", w.id("site_description", site))
	if t, ok := dateTime(or(stated(p, "analysis/creationTime"), p.Survey.Date)); ok {
		w.leaf("creationTime", t)
	}
	w.repeated(p, "analysis/", beforeMethod, nil, nil)
	for _, word := range methodWords(p) {
		w.leaf("velocityS30Method", word)
	}
	w.repeated(p, "analysis/", afterMethod, nil, nil)
	w.leaf("velocityProfileCount", "1")
	w.open("velocityProfile", "publicID", w.id("velocity_profile", name))
	w.leaf("layerCount", strconv.Itoa(len(p.Layers)))
	for i := range p.Layers {
		w.layer(&p.Layers[i])
	}
	w.close()
	w.repeated(p, "analysis/", afterProfile, nil, nil)
	w.close()
}

// layer writes one layer. The last one of a profile that ends in a half-space
// has no bottom.
func (w *printer) layer(l *profile.Layer) {
	w.open("velocityProfileData")
	if l.Has(profile.GivenVp) {
		w.quantity("velocityP", l.Vp, 0)
	}
	v, sigma := velocity(l), 0.0
	if l.Has(profile.GivenSigma) {
		sigma = l.SigmaLnVs * v
	}
	w.quantity("velocityS", v, sigma)
	if l.Has(profile.GivenDensity) {
		w.quantity("density", l.Density, 0)
	}
	w.open("layerThickness")
	w.quantity("layerTopDepth", l.Top, 0)
	if !l.HalfSpace() {
		w.quantity("layerBottomDepth", l.Bottom, 0)
	}
	w.close()
	w.close()
}

// velocity is the velocity of a layer; of one with a gradient from v₁ to v₂
// the constant velocity with the same travel time,
//
//	v = (v₂ − v₁) / ln(v₂/v₁)
func velocity(l *profile.Layer) float64 {
	if !l.Gradient() {
		return l.Vs
	}
	return (l.VsBottom - l.Vs) / math.Log(l.VsBottom/l.Vs)
}
