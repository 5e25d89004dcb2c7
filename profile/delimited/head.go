package delimited

import (
	"bytes"
	"maps"
	"slices"
	"unicode/utf8"

	"golang.org/x/text/encoding/charmap"

	"shearbook/profile"
)

// Head is the top of a table with a column of profile names: the lines above
// its header, the header, and the row of units if there is one. With it the
// rows of one profile can be read without the rest of the file: a table of a
// whole region need not fit into memory, and a profile at fault does not keep
// the others from being read. A Head is safe for concurrent use.
type Head struct {
	r      reader
	text   []byte // of the file, down to the first row
	size   int    // bytes of it
	line   int    // of the first row
	scoped []string
}

// ReadHead reads the top of a table from the beginning of its file, which must
// end with a whole row unless it is the whole file. What the beginning shows of
// decimal commas holds for the whole file. It returns nil and no error where the
// table has no column of profile names, gives slowness for velocity, or is not in UTF-8 or Windows-1252; and
// an error, a profile.Faults, where no profile of the file can be read.
func ReadHead(file string, beginning []byte, opt Options) (*Head, error) {
	h := &Head{r: reader{collector: collector{file: file}, reading: profile.Reading{File: file, Encoding: "UTF-8"}}}
	r := &h.r
	var err error
	if r.given, err = ParseUnits(opt.Units); err != nil {
		return nil, err
	}
	if r.mapping, err = ParseMap(opt.Map); err != nil {
		return nil, err
	}
	text := bytes.TrimPrefix(beginning, []byte("\ufeff"))
	if bytes.IndexByte(text, 0) >= 0 {
		return nil, nil // UTF-16, or no text
	}
	if !utf8.Valid(text) {
		return foreignHead(file, text, opt)
	}
	r.scan = newScanner(text)
	if !(r.readPreamble() && r.readHeader()) || r.total > 0 {
		return nil, r.err()
	}
	if !r.has(profile.ProfileName) || slices.ContainsFunc(r.columns.list, func(c column) bool { return isSlow(c.unit) }) {
		return nil, nil
	}
	r.readNumerals()
	h.size, h.line = len(beginning)-len(text)+r.scan.off, r.scan.line
	h.text = slices.Clone(beginning[:h.size])
	h.ready()
	return h, nil
}

// foreignHead reads the top of a table that is not in UTF-8. Only its rows are
// decoded later, so the top itself must be plain.
func foreignHead(file string, text []byte, opt Options) (*Head, error) {
	i := bytes.IndexFunc(text, func(r rune) bool { return r >= utf8.RuneSelf })
	return ReadHead(file, text[:bytes.LastIndexByte(text[:i], '\n')+1], opt)
}

// ready makes the head one that nothing changes any more.
func (h *Head) ready() {
	r := &h.r
	r.scan.text, r.scan.cells = nil, nil
	for _, st := range r.preamble.statements {
		if name, rest, _ := scoped(st.text, nil); rest != "" {
			h.scoped = append(h.scoped, name)
		}
	}
}

// Size returns how many bytes of the file the head takes up.
func (h *Head) Size() int { return h.size }

// Line returns the line in which the first row stands.
func (h *Head) Line() int { return h.line }

// Separator returns what stands between the cells.
func (h *Head) Separator() byte { return h.r.scan.sep }

// DecimalComma reports whether numbers have decimal commas.
func (h *Head) DecimalComma() bool { return h.r.numerals.comma }

// Columns returns what each column holds and its unit.
func (h *Head) Columns() []HeadColumn {
	list := make([]HeadColumn, len(h.r.columns.list))
	for i := range h.r.columns.list {
		c := &h.r.columns.list[i]
		list[i] = HeadColumn{c.quantity, c.unit}
	}
	return list
}

// HeadColumn is a column of a table.
type HeadColumn struct {
	Quantity profile.Quantity
	Unit     profile.Unit // whose Factor turns its numbers into SI
}

// Notes returns the notes on the columns, which all profiles share.
func (h *Head) Notes() []profile.Note { return h.r.commonNotes() }

// Scoped returns the names of profiles that lines "# [name] key: value" with a
// key that is read are about.
func (h *Head) Scoped() []string { return h.scoped }

// Base returns what the head states of every profile: survey, position and
// reading.
func (h *Head) Base() profile.Profile {
	p := profile.Profile{Survey: h.r.preamble.base.Survey, Position: h.r.preamble.base.Position, NoVelocity: !h.r.has(profile.Vs)}
	reading := h.r.reading
	reading.Metadata = metadata(h.r.preamble.statements)
	p.Reading = &reading
	return p
}

// Next cuts the rows of the first profile off text, which begins with a row. It
// returns the profile's name, the length of its rows in bytes and in lines, and
// whether a row of another profile follows. Rows without a name, blank lines and
// comments belong to the profile before them.
func (h *Head) Next(text []byte) (name []byte, length, lines int, more bool) {
	s := newScanner(text)
	s.sep = h.r.scan.sep
	column := h.r.columns.index[profile.ProfileName]
	for s.off < len(s.text) {
		start := s
		ok, bad := s.next()
		if bad != nil { // the line at fault is told by Read; go on below it
			s.off, s.line, s.bol = start.off, start.line, start.bol
			s.rawLine()
		}
		if !ok && bad == nil {
			break
		}
		own := s.cell(column)
		if len(own) == 0 || len(s.cells) == 1 && own[0] == '#' || bytes.Equal(own, name) {
			continue
		}
		if name != nil && !sameName(name, own) {
			return name, start.off, start.line - 1, true
		}
		name = own
	}
	return name, len(text), s.line - 1, false
}

// sameName reports whether two names differ in blanks alone.
func sameName(a, b []byte) bool {
	return slices.EqualFunc(bytes.Fields(a), bytes.Fields(b), bytes.Equal)
}

// Read reads the rows of one profile, of which the first stands in the given
// line of the file. The error is a profile.Faults.
func (h *Head) Read(rows []byte, line int) (profile.Profile, error) {
	r := h.r
	r.columns.list = slices.Clone(h.r.columns.list)
	r.preamble.statements = slices.Clone(h.r.preamble.statements)
	text := rows
	if !utf8.Valid(rows) {
		r.reading.Encoding = "Windows-1252"
		text, _ = charmap.Windows1252.NewDecoder().Bytes(rows) // maps every byte
	}
	if bad := controlCharacter(text); bad != nil {
		bad.line += line - 1
		r.trouble(bad)
		return profile.Profile{}, r.err()
	}
	sep := r.scan.sep
	r.scan = newScanner(text)
	r.scan.sep, r.scan.line = sep, line
	if r.stackRows() {
		r.ownLines()
		r.assemble()
	}
	if err := r.err(); err != nil {
		return profile.Profile{}, err
	}
	return r.profiles[0], nil
}

// ownLines leaves out the statements about other profiles than those that
// were read.
func (r *reader) ownLines() {
	r.preamble.seen = maps.Clone(r.preamble.seen)
	r.preamble.statements = slices.DeleteFunc(r.preamble.statements, func(st statement) bool {
		name, rest, ok := scoped(st.text, r.table.names)
		return !ok && (name != "" || rest != "")
	})
}

// File returns the name of the file.
func (h *Head) File() string { return h.r.file }

// Text returns a copy of the head as it stands in the file.
func (h *Head) Text() []byte { return slices.Clone(h.text) }

// Cut returns the length of the beginning of text, which begins with a row, that
// ends with the rows of a profile; 0 where no row of another profile follows.
// The text may end in the middle of a row.
func (h *Head) Cut(text []byte) int {
	text = text[:bytes.LastIndexByte(text, '\n')+1]
	if bytes.IndexByte(text, '"') < 0 && bytes.IndexByte(text, '\r') < 0 {
		return h.cutPlain(text)
	}
	cut := 0
	for at := 0; at < len(text); {
		_, n, _, more := h.Next(text[at:])
		at += n
		if more {
			cut = at
		}
	}
	return cut
}

// cutPlain is Cut where every line is a row: it looks at the last rows alone.
func (h *Head) cutPlain(text []byte) int {
	var last []byte
	for end := len(text); end > 0; {
		start := bytes.LastIndexByte(text[:end-1], '\n') + 1
		name := h.nameIn(text[start : end-1])
		switch {
		case len(name) == 0:
		case last == nil:
			last = name
		case !sameName(last, name):
			return end + h.leading(text[end:])
		}
		end = start
	}
	return 0
}

// leading is the length of the lines without a name at the beginning of text:
// they belong to the profile before.
func (h *Head) leading(text []byte) int {
	n := 0
	for {
		line := text[n:][:bytes.IndexByte(text[n:], '\n')+1]
		if len(h.nameIn(line)) > 0 {
			return n
		}
		n += len(line)
	}
}

// nameIn returns the name of the profile in a plain line, nothing of a comment
// and of a line without one.
func (h *Head) nameIn(line []byte) []byte {
	rest, sep := line, h.r.scan.sep
	for range h.r.columns.index[profile.ProfileName] {
		i := bytes.IndexByte(rest, sep)
		if i < 0 {
			return nil
		}
		rest = rest[i+1:]
	}
	i := bytes.IndexByte(rest, sep)
	if i < 0 {
		i = len(rest)
	}
	name := bytes.TrimSpace(rest[:i])
	if len(name) > 0 && name[0] == '#' && bytes.IndexByte(line, sep) < 0 {
		return nil
	}
	return name
}

// Lines returns how many lines a text has.
func Lines(text []byte) int {
	n := bytes.Count(text, []byte{'\n'})
	if bytes.IndexByte(text, '\r') >= 0 {
		n += bytes.Count(text, []byte{'\r'}) - bytes.Count(text, []byte("\r\n"))
	}
	return n
}
