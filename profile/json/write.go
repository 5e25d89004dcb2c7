package json

import (
	"bufio"
	"bytes"
	stdjson "encoding/json"
	"fmt"
	"io"
	"strconv"
	"strings"
	"unicode"

	"shearbook/profile"
)

// Write writes profiles in the form that Read reads back: layers, survey,
// position, metadata and notes as they are, and numbers with the fewest
// digits that give the same value again. Of the file that a profile was read
// from its name, digest and metadata are written, but not its table; the
// notes that profile.Doubts gives are left to the reader. Control characters
// in texts become blanks. The same profiles give the same bytes.
//
// The error is that of w; or it names a profile that Read would refuse.
func Write(w io.Writer, profiles []profile.Profile) error {
	if err := writable(profiles); err != nil {
		return err
	}
	out := printer{Writer: bufio.NewWriter(w)}
	fmt.Fprintf(out, "{\n  %q: %d,\n  %q: [", documentKeys[0], Version, documentKeys[1])
	for i := range profiles {
		if i > 0 {
			out.WriteByte(',')
		}
		out.WriteString("\n    ")
		out.profile(&profiles[i])
	}
	out.WriteString("\n  ]\n}\n")
	return out.Flush() // every error before it is kept for it
}

func writable(profiles []profile.Profile) error {
	if len(profiles) == 0 {
		return fmt.Errorf("there are no profiles to write")
	}
	names := map[string]bool{}
	for i := range profiles {
		p := &profiles[i]
		name := plain(p.Name)
		switch {
		case name == "" || name != p.Name || strings.TrimSpace(name) != name:
			return fmt.Errorf("the name %s of profile %d is blank or not one line of plain text", profile.Quote(p.Name), i+1)
		case names[name]:
			return fmt.Errorf("two profiles have the name %s", profile.Quote(name))
		case p.Position.Latitude.Known != p.Position.Longitude.Known:
			return fmt.Errorf("profile %s states not both latitude and longitude", profile.Quote(name))
		case p.Position.Easting.Known != p.Position.Northing.Known:
			return fmt.Errorf("profile %s states not both easting and northing", profile.Quote(name))
		case p.Position.EPSG != 0 && !p.Position.Latitude.Known && !p.Position.Easting.Known:
			return fmt.Errorf("profile %s states a grid, but no position in it", profile.Quote(name))
		}
		names[name] = true
		if faults := profile.Validate(p); len(faults) > 0 {
			return fmt.Errorf("profile %s: %w", profile.Quote(name), faults)
		}
	}
	return nil
}

// printer writes the parts of the form.
type printer struct{ *bufio.Writer }

// member is one key of an object and its value, written as JSON; "" is a
// value that is not known.
type member struct{ key, value string }

// profile writes one profile, a key a line.
func (w printer) profile(p *profile.Profile) {
	w.WriteString("{\n      \"name\": " + text(p.Name))
	for _, m := range []member{
		{"survey", survey(&p.Survey)},
		{"position", position(&p.Position)},
		{"source", source(p.Reading)},
	} {
		if m.value != "" {
			w.WriteString(",\n      \"" + m.key + "\": " + m.value)
		}
	}
	w.list("metadata", metadata(p.Reading))
	w.list("notes", notes(p))
	if p.NoVelocity {
		w.WriteString(",\n      \"no_velocity\": true")
	}
	blow := blowKey(p)
	w.items("layers", len(p.Layers), func(i int) string { return layerText(&p.Layers[i], blow, p.NoVelocity) })
	w.WriteString("\n    }")
}

// list writes a list, an item a line; nothing of a list without items.
func (w printer) list(key string, items []string) {
	w.items(key, len(items), func(i int) string { return items[i] })
}

// items writes a list of n items, each made when its turn comes.
func (w printer) items(key string, n int, item func(i int) string) {
	if n == 0 {
		return
	}
	w.WriteString(",\n      \"" + key + "\": [")
	for i := range n {
		if i > 0 {
			w.WriteByte(',')
		}
		w.WriteString("\n        " + item(i))
	}
	w.WriteString("\n      ]")
}

// object is an object on one line, without the members that are not known; ""
// if none is.
func object(members ...member) string {
	var b strings.Builder
	for _, m := range members {
		if m.value == "" {
			continue
		}
		if b.Len() == 0 {
			b.WriteByte('{')
		} else {
			b.WriteString(", ")
		}
		b.WriteString(`"` + m.key + `": ` + m.value)
	}
	if b.Len() > 0 {
		b.WriteByte('}')
	}
	return b.String()
}

func survey(s *profile.Survey) string {
	return object(
		member{"method", words(s.Method)},
		member{"date", words(s.Date)},
		member{"operator", words(s.Operator)},
		member{"location", words(s.Location)},
		member{"basis", basis(s.Basis)},
		member{"depth_reached_m", known(profile.Optional{Value: s.DepthReached, Known: s.DepthReached > 0})},
		member{"ground_level_m", known(s.GroundLevel)},
		member{"water_table_m", known(s.WaterTable)},
	)
}

func position(p *profile.Position) string {
	code := ""
	if p.EPSG > 0 {
		code = strconv.Itoa(p.EPSG)
	}
	return object(
		member{"latitude", known(p.Latitude)},
		member{"longitude", known(p.Longitude)},
		member{"easting", known(p.Easting)},
		member{"northing", known(p.Northing)},
		member{"epsg", code},
	)
}

func source(r *profile.Reading) string {
	if r == nil {
		return ""
	}
	return object(member{"file", words(r.File)}, member{"sha256", words(r.SHA256)})
}

func metadata(r *profile.Reading) []string {
	if r == nil {
		return nil
	}
	var list []string
	for _, m := range r.Metadata {
		if m.Key != WrittenFrom {
			list = append(list, object(member{"key", text(m.Key)}, member{"value", text(m.Value)}))
		}
	}
	return list
}

func notes(p *profile.Profile) []string {
	var list []string
	doubts := profile.Doubts(p)
	for _, n := range p.Notes {
		if !hasNote(doubts, n.ID) && n.ID != "" && n.Text != "" {
			list = append(list, object(member{"id", text(n.ID)}, member{"text", text(n.Text)}))
		}
	}
	return list
}

// blowKey is the key of the blow counts of a profile: the kind of the count is
// known only from the heading of their column.
func blowKey(p *profile.Profile) string {
	if p.Reading != nil {
		if i := p.Reading.Index(profile.N); i >= 0 {
			switch heading := strings.ToLower(p.Reading.Columns[i].Heading); {
			case strings.Contains(heading, "n1"):
				return "n1_60"
			case strings.Contains(heading, "60"):
				return "n60"
			}
		}
	}
	return "n"
}

// layerText is one layer.
func layerText(l *profile.Layer, blow string, noVelocity bool) string {
	members := make([]member, 0, len(fields))
	for i := range fields {
		f := &fields[i]
		m := member{key: f.name}
		switch {
		case i == bottom && l.HalfSpace():
			m.value = "null"
		case f.quantity == profile.N && f.name != blow, i == vs && noVelocity:
		case f.name == "refusal":
			if l.Refusal {
				m.value = "true"
			}
		case f.name == "basis":
			m.value = basis(l.Basis)
		case f.name == "soil":
			m.value = words(l.Soil)
		case i < needed || f.given != 0 && l.Has(f.given) || f.quantity == profile.VsBottom && l.VsBottom != 0:
			m.value = number(*f.number(l))
		}
		members = append(members, m)
	}
	return object(members...)
}

func basis(b profile.Basis) string {
	if b == profile.BasisNotStated {
		return ""
	}
	return text(b.String())
}

// known is a number, "" if it is not known.
func known(x profile.Optional) string {
	if !x.Known {
		return ""
	}
	return number(x.Value)
}

// number is a number with the fewest digits that give it again.
func number(x float64) string {
	if x != 0 && (x < 1e-6 && x > -1e-6 || x >= 1e15) {
		return strconv.FormatFloat(x, 'e', -1, 64)
	}
	return strconv.FormatFloat(x, 'f', -1, 64)
}

// words is a text, "" if it is blank.
func words(s string) string {
	if s == "" {
		return ""
	}
	return text(s)
}

// text is a text between quotes, without control characters.
func text(s string) string {
	var b bytes.Buffer
	e := stdjson.NewEncoder(&b)
	e.SetEscapeHTML(false) // < and & need no escape outside of HTML
	e.Encode(plain(s))     // of a string it does not fail
	return strings.TrimSuffix(b.String(), "\n")
}

// plain is a text with blanks for its control characters.
func plain(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsControl(r) {
			return ' '
		}
		return r
	}, strings.ToValidUTF8(s, "\ufffd"))
}
