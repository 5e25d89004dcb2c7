package sitexml

import (
	"fmt"
	"path"
	"slices"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"shearbook/profile"
)

// assemble makes the profiles.
func (r *reader) assemble() {
	names := map[string]bool{}
	stated := 0
	for i, c := range r.file.profiles {
		s, sure := r.siteOf(c.analysis)
		reading := r.reading
		reading.Rows = c.padded()
		for _, k := range c.table.columns {
			reading.Columns = append(reading.Columns, columns[k])
		}
		reading.Metadata = r.metadata(c, s)
		if stated += len(reading.Metadata); stated > MaxMetadata {
			r.stop(spot{}, "split the file", "the file states more than %d things, counted for each profile", MaxMetadata)
			return
		}
		p := profile.Profile{Name: r.name(i, names), Layers: c.layers, Reading: &reading}
		if s != nil {
			p.Position, p.Survey.GroundLevel = s.position, s.altitude
		}
		if c.analysis != nil {
			p.Survey.Method = strings.Join(slices.Compact(slices.Clone(c.analysis.methods)), ", ")
			p.Survey.Basis = basisOf(c.analysis.methods)
		}
		notes := r.notes(c, s, sure)
		r.judged = c
		r.judge(c, &p, notes)
		r.profiles = append(r.profiles, p)
	}
}

// siteOf is the site that an analysis is about, nil if the file has none, and
// whether that is sure.
func (r *reader) siteOf(a *analysis) (s *site, sure bool) {
	sites := r.file.sites
	if len(sites) == 0 {
		return nil, true
	}
	if a != nil && a.site != "" && r.file.byID[a.site] != nil {
		return r.file.byID[a.site], true
	}
	return sites[0], len(sites) == 1
}

// metadata is what the file states of a profile.
func (r *reader) metadata(c *column, s *site) []profile.Metadatum {
	list := slices.Clone(r.file.metadata)
	if s != nil {
		list = append(list, s.metadata...)
	}
	if c.analysis != nil {
		list = append(list, c.analysis.metadata...)
	}
	list = append(list, c.metadata...)
	slices.SortStableFunc(list, func(a, b profile.Metadatum) int { return a.Line - b.Line })
	return slices.Clip(list)
}

// padded is the rows with blank cells for the columns that came up later.
func (c *column) padded() []profile.Row {
	for i := range c.rows {
		row := &c.rows[i]
		if missing := len(c.table.columns) - 1 - strings.Count(row.Cells, profile.CellSeparator); missing > 0 {
			row.Cells += strings.Repeat(profile.CellSeparator, missing)
		}
	}
	return c.rows
}

// name is the name of profile i: the last part of its publicID, else of that
// of its analysis, else that of the file; with a number where another has it.
func (r *reader) name(i int, taken map[string]bool) string {
	c := r.file.profiles[i]
	name := lastPart(c.id)
	if name == "" && c.analysis != nil {
		name = lastPart(c.analysis.id)
	}
	if name == "" {
		base := path.Base(strings.ReplaceAll(r.File, `\`, "/"))
		name = tidy(strings.TrimSuffix(base, path.Ext(base)))
	}
	if name == "" || name == "-" || name == "." || name == "/" {
		name = "profile"
	}
	unique := name
	for n := i + 1; taken[unique]; n++ {
		unique = fmt.Sprintf("%s (%d)", name, n)
	}
	taken[unique] = true
	return unique
}

// lastPart is the last part of a publicID, its escapes resolved.
func lastPart(id string) string {
	const most = 200 // bytes
	id = id[strings.LastIndexByte(id, '/')+1:]
	id = id[:min(len(id), most)]
	return tidy(unescaped(id))
}

// unescaped resolves the escapes =41 that Write puts into publicIDs, where all
// of them are such.
func unescaped(id string) string {
	var b []byte
	for i := 0; i < len(id); i++ {
		if id[i] != '=' {
			b = append(b, id[i])
			continue
		}
		if i+2 >= len(id) {
			return id
		}
		v, err := strconv.ParseUint(id[i+1:i+3], 16, 8)
		if err != nil {
			return id
		}
		b = append(b, byte(v))
		i += 2
	}
	if !utf8.Valid(b) {
		return id
	}
	return string(b)
}

// tidy is a text of one line without what cannot be printed.
func tidy(text string) string {
	text = strings.Map(func(c rune) rune {
		if unicode.IsPrint(c) || unicode.IsSpace(c) {
			return c
		}
		return -1
	}, strings.ToValidUTF8(text, ""))
	return strings.Join(strings.Fields(text), " ")
}

// judge validates a profile and gathers its notes.
func (r *reader) judge(c *column, p *profile.Profile, notes []profile.Note) {
	if len(p.Layers) == 0 {
		r.fault(c.spot, "a profile needs at least one layer", "profile %s has no velocityProfileData", profile.Quote(p.Name))
		return
	}
	fromNext := 0
	if !c.faulty {
		fromNext = r.resolve(c)
	}
	if c.faulty {
		return
	}
	if faults := profile.Validate(p); len(faults) > 0 {
		r.collector().Add(faults)
		return
	}
	if fromNext > 0 {
		notes = append(notes, r.note("bottom-from-next", c.spot, "layers without a bottom, %d of them, were ended at the top of the next", fromNext))
	}
	if text, ok := otherAverage(p); ok {
		notes = append(notes, r.note("average-differs", c.spot, "%s", text))
	}
	if at, ok := lightLayer(p.Layers); ok {
		notes = append(notes, r.note("density-suspect", at, "densities below 100 kg/m³ look as if they were in g/cm³; they were read in kg/m³, as the form says"))
	}
	p.Notes = append(notes, profile.Doubts(p)...)
}

// lightLayer is the place of the first layer whose density no ground has.
func lightLayer(layers []profile.Layer) (spot, bool) {
	const lightest = 100 // kg/m³; common practice, without a source
	for i := range layers {
		if l := &layers[i]; l.Has(profile.GivenDensity) && l.Density < lightest {
			return spot{l.Line, l.Column}, true
		}
	}
	return spot{}, false
}

func (r *reader) note(id string, at spot, format string, args ...any) profile.Note {
	place := at.place()
	place.File = r.File
	return profile.Note{ID: id, Text: fmt.Sprintf(format, args...), Place: place}
}

// notes are the notes on how a profile was read.
func (r *reader) notes(c *column, s *site, sure bool) []profile.Note {
	var notes []profile.Note
	switch r.file.edition {
	case SchemaVersion:
	case "":
		notes = append(notes, r.note("edition", r.walk.rootSpot, "the file does not state its version; it was read as SiteXML %s", SchemaVersion))
	default:
		notes = append(notes, r.note("edition", r.walk.rootSpot, "the file states version %s; it was read as SiteXML %s", profile.Quote(r.file.edition), SchemaVersion))
	}
	if c.analysis != nil && len(c.analysis.methods) > 0 {
		notes = append(notes, r.note("method-of-vs30", c.spot, "SiteXML states no method of a profile; that of Vs30 in the same analysis was taken for it"))
	}
	if slices.ContainsFunc(c.layers, func(l profile.Layer) bool { return l.Has(profile.GivenSigma) }) {
		notes = append(notes, r.note("uncertainty-as-sigma", c.spot, "the uncertainties of Vs were read as one standard deviation each, divided by Vs for that of ln Vs"))
	}
	if len(c.unread) > 0 {
		notes = append(notes, r.note("element-not-read", c.unreadAt, "elements of layers that were not read: %s", strings.Join(c.unread, ", ")))
	}
	if n, err := strconv.Atoi(c.count.text); c.count.text != "" && (err != nil || n != len(c.layers)) {
		notes = append(notes, r.note("count-differs", c.count.spot, "layerCount is %s, but there are %s", profile.Quote(c.count.text), profile.Plural(len(c.layers), "layer")))
	}
	if s != nil && s.preferred != "" && s.preferred != c.id && len(r.file.profiles) > 1 {
		notes = append(notes, r.note("not-preferred", c.spot, "the file prefers another profile, %s", profile.Quote(lastPart(s.preferred))))
	}
	if !sure {
		notes = append(notes, r.note("several-sites", c.spot, "the file has %d sites and does not say which one the profile is of; the first was taken", len(r.file.sites)))
	}
	return notes
}
