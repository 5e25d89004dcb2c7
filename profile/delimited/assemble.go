package delimited

import (
	"path"
	"slices"
	"strconv"
	"strings"
	"unicode"

	"shearbook/profile"
)

// fileName is the name of a profile that no column names: the one stated
// above the header, or the file's without folder and extension.
func (r *reader) fileName() string {
	if r.preamble.base.Name != "" {
		return r.preamble.base.Name
	}
	if r.tableName != "" {
		return r.tableName
	}
	base := path.Base(strings.ReplaceAll(r.file, `\`, "/"))
	name := strings.Map(printable, strings.TrimSuffix(base, path.Ext(base)))
	name = strings.Join(strings.Fields(name), " ")
	if name == "" || name == "-" || name == "." || name == "/" {
		return "profile"
	}
	return name
}

// printable drops what cannot be printed.
func printable(r rune) rune {
	if unicode.IsPrint(r) || unicode.IsSpace(r) {
		return r
	}
	return -1
}

// assemble makes the profiles out of the stacks of layers.
func (r *reader) assemble() bool {
	t := &r.table
	if at := r.preamble.named; at.line > 0 && r.has(profile.ProfileName) {
		r.fault(at, "remove it, or state a location", "name is stated, but column %s names the profiles", quote(r.columnOf(profile.ProfileName).name))
	}
	if !r.has(profile.ProfileName) {
		t.names[t.stacks[0].name] = r.headerLine()
	}
	r.halfTold = map[spot]bool{}
	own := r.own(t.names)
	common := metadata(r.preamble.statements)
	if !r.metadataFits(own, common) {
		return false
	}
	notes := r.commonNotes()
	r.profiles = make([]profile.Profile, 0, len(t.stacks))
	readings := make([]profile.Reading, len(t.stacks))
	for i := range t.stacks {
		s := &t.stacks[i]
		reading := &readings[i]
		*reading = r.reading
		reading.Metadata = common
		reading.Rows = t.rows[s.first:s.last:s.last]
		p := profile.Profile{
			Name:     s.name,
			Layers:   t.layers[s.first:s.last:s.last],
			Survey:   r.preamble.base.Survey,
			Position: r.preamble.base.Position,
			Reading:  reading,

			NoVelocity: !r.has(profile.Vs),
		}
		if lines := own[s.name]; lines != nil {
			r.applyOwn(&p, lines)
			reading.Metadata = append(slices.Clip(common), metadata(lines)...)
		}
		r.positionOf(&p, s)
		r.judge(&p, s, notes)
		r.profiles = append(r.profiles, p)
	}
	return true
}

// metadataFits bounds the metadata, which profiles with lines of their own
// do not share.
func (r *reader) metadataFits(own map[string][]statement, common []profile.Metadatum) bool {
	n := len(common) * (len(own) + 1)
	for _, lines := range own {
		n += len(lines)
	}
	if n > MaxMetadata {
		r.stop(spot{}, "split the file", "more than %d lines stand above the header, counted for each profile", MaxMetadata)
	}
	return n <= MaxMetadata
}

// applyOwn puts the lines about one profile over those about all.
func (r *reader) applyOwn(p *profile.Profile, lines []statement) {
	for i := range lines {
		r.applyTo(p, p.Name, keyOf(lines[i].key), &lines[i])
	}

}

// judge validates a profile and gathers its notes.
func (r *reader) judge(p *profile.Profile, s *stack, common []profile.Note) {
	if s.faulty || r.table.unitless {
		return
	}
	if faults := profile.Validate(p); len(faults) > 0 {
		r.add(faults)
		return
	}
	p.Notes = append(slices.Clip(common), r.ownNotes(p, s)...)
	p.Notes = append(p.Notes, profile.Doubts(p)...)
}

// commonNotes are the notes on the columns.
func (r *reader) commonNotes() []profile.Note {
	var notes []profile.Note
	var unread []string
	first := -1
	for i := range r.columns.list {
		c := &r.columns.list[i]
		if c.quantity != profile.Unknown || c.name == "" && !c.used {
			continue
		}
		if first < 0 {
			first = i
		}
		name := quote(c.name)
		if c.name == "" {
			name = "number " + strconv.Itoa(i+1)
		}
		unread = append(unread, name)
	}
	if first >= 0 {
		notes = append(notes, profile.Note{ID: "column-not-read", Text: columnWord(len(unread)) + " not read: " + some(unread), Place: r.place(r.columns.list[first].spot)})
	}
	if mapped := r.mappedColumns(); len(mapped) > 0 {
		notes = append(notes, profile.Note{ID: "mapped", Text: "read as given: " + some(mapped), Place: r.place(r.columns.list[0].spot)})
	}
	if given := r.columns.given; len(given) > 0 {
		notes = append(notes, profile.Note{ID: "units-given", Text: "the file states no unit; given for it: " + some(given), Place: r.place(r.columns.list[0].spot)})
	}
	return append(notes, r.columns.notes...)
}

func columnWord(n int) string {
	if n == 1 {
		return "a column was"
	}
	return count(n, "column") + " were"
}

// some is the first few of a list, in words.
func some(list []string) string {
	const most = 8
	if more := len(list) - most; more > 0 {
		list = append(slices.Clone(list[:most]), count(more, "more"))
		list[most] = strings.TrimSuffix(list[most], "s")
	}
	return strings.Join(list, ", ")
}

// ownNotes are the notes on how the layers of one profile were read.
func (r *reader) ownNotes(p *profile.Profile, s *stack) []profile.Note {
	var notes []profile.Note
	last := &p.Layers[len(p.Layers)-1]
	at := r.place(spot{int(last.Line), int(last.Column)})
	if !r.has(profile.Bottom) && !r.has(profile.Thickness) {
		notes = append(notes, profile.Note{ID: "half-space-assumed", Text: "only the tops of the layers are given, so the last one was taken for a half-space", Place: at})
	}
	if s.stand {
		notes = append(notes, profile.Note{ID: "bottom-suspect", Text: "the last layer ends at " + r.depth(profile.Bottom, last.Bottom) + ", which may stand for a half-space: then leave it blank", Place: at})
	}
	if r.table.bounds && slices.ContainsFunc(p.Layers, func(l profile.Layer) bool { return l.Has(profile.GivenSigma) }) {
		notes = append(notes, profile.Note{ID: "bounds-as-sigma", Text: "the lower and upper Vs were read as the 16 % and 84 % quantiles of a lognormal velocity", Place: r.place(r.columnOf(profile.VsLower).spot)})
	}
	return notes
}
