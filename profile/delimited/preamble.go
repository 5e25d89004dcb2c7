package delimited

import (
	"bytes"
	"strings"
	"unicode/utf8"

	"shearbook/profile"
)

// preamble is what stands above the header.
type preamble struct {
	statements []statement
	base       profile.Profile // name, survey and position of every profile
	named      spot            // of "# name:"; zero if there is none
	seen       map[string]int  // line of each known key, with the profile it is said of
	forced     byte            // the separator of a line "sep=;"; 0 if there is none
}

// statement is one line that begins with #. A line without a colon is a
// comment: its key is "".
type statement struct {
	text       string // all of it, without the #
	key, value string
	spot           // of its #
	end        int // column after its last character; 0 if it was quoted
}

// at is the place of the value.
func (st *statement) at() spot {
	if st.end == 0 {
		return st.spot
	}
	return spot{st.line, st.end - utf8.RuneCountInString(st.value)}
}

// readPreamble reads the lines above the header and what they state of every
// profile.
func (r *reader) readPreamble() bool {
	r.preamble.seen = map[string]int{}
	for r.scan.off < len(r.scan.text) {
		start := r.scan
		line, ok := r.preambleLine()
		if !ok {
			return false
		}
		if line == nil {
			r.scan = start
			break
		}
	}
	return r.apply()
}

// preambleLine reads one line. The line is nil if it is the header, which the
// caller reads again.
func (r *reader) preambleLine() (line []byte, ok bool) {
	s := &r.scan
	at := *s
	line = s.rawLine()
	text := bytes.TrimLeft(line, " \t")
	at.off += len(line) - len(text)
	switch {
	case len(bytes.Trim(line, " \t,;")) == 0:
		return line, true
	case at.line == 1 && len(line) == 5 && bytes.EqualFold(line[:4], []byte("sep=")) && strings.IndexByte(separators, line[4]) >= 0:
		r.preamble.forced = line[4]
		return line, true
	case bytes.HasPrefix(text, []byte(`"#`)):
		*s = at
		return r.quotedStatement()
	case text[0] != '#':
		return nil, true
	case len(line) > MaxField:
		r.stop(at.spot(at.off), "", "the line is longer than 64 KiB")
		return nil, false
	}
	text = bytes.TrimRight(text, " \t,;")
	from := at.spot(at.off)
	return line, r.state(statement{text: string(text), spot: from, end: from.column + utf8.RuneCount(text)})
}

// quotedStatement reads a line that a spreadsheet put between quotes.
func (r *reader) quotedStatement() (line []byte, ok bool) {
	s := &r.scan
	s.sep, s.cells = ',', s.cells[:0]
	at := s.spot(s.off)
	if bad := s.nextCell(); bad != nil && bad.hint != hintQuoteInside {
		r.trouble(bad)
		return nil, false
	}
	text := string(s.cells[0].text)
	if rest := bytes.Trim(s.rawLine(), " \t,;"); len(rest) > 0 {
		text += " " + string(rest)
	}
	return []byte{}, r.state(statement{text: strings.Join(strings.Fields(text), " "), spot: at})
}

// state keeps one statement, its key and value cut from its text.
func (r *reader) state(st statement) bool {
	if len(r.preamble.statements) == MaxMetadata {
		r.stop(st.spot, "", "more than %d lines stand above the header", MaxMetadata)
		return false
	}
	st.text = strings.TrimSpace(strings.TrimLeft(st.text, "#"))
	st.value = st.text
	if key, value, ok := strings.Cut(st.text, ":"); ok {
		st.key, st.value = strings.TrimSpace(key), strings.TrimSpace(value)
	}
	r.preamble.statements = append(r.preamble.statements, st)
	return true
}

// apply reads the statements that hold for every profile, the units first.
func (r *reader) apply() bool {
	p := &r.preamble
	for i := range p.statements {
		if st := &p.statements[i]; keyOf(st.key) == keyUnits {
			r.statedUnits(st)
		}
	}
	for i := range p.statements {
		st := &p.statements[i]
		if k := keyOf(st.key); k != keyUnits && !strings.HasPrefix(st.text, "[") {
			r.applyTo(&p.base, "", k, st)
		}
	}
	return true
}

func (r *reader) statedUnits(st *statement) {
	if !r.first("", keyUnits, st) {
		return
	}
	units, err := ParseUnits(st.value)
	if err != nil {
		for _, f := range err.(profile.Faults) {
			r.fault(st.at(), f.Hint, "%s", f.Text)
		}
	}
	r.stated = units
}

// first reports whether a known key is stated for the first time of a
// profile; name is "" for all profiles.
func (r *reader) first(name string, k key, st *statement) bool {
	id := name + profile.CellSeparator + string(k)
	if line := r.preamble.seen[id]; line > 0 {
		r.fault(st.spot, "keep one of them", "%s is stated a second time, after %s", k, r.line(line))
		return false
	}
	r.preamble.seen[id] = st.line
	return true
}

// own splits the lines that hold for one profile from the rest. It returns
// them by profile, without their "[name]".
func (r *reader) own(names map[string]int) map[string][]statement {
	p := &r.preamble
	found := map[string][]statement{}
	kept := p.statements[:0]
	for _, st := range p.statements {
		name, rest, ok := scoped(st.text, names)
		switch {
		case ok:
			key, value, _ := strings.Cut(rest, ":")
			st.key, st.value = strings.TrimSpace(key), strings.TrimSpace(value)
			found[name] = append(found[name], st)
			continue
		case rest != "":
			r.fault(st.spot, "", "the file has no profile %s", quote(name))
		}
		kept = append(kept, st)
	}
	p.statements = kept
	return found
}

// scoped finds the profile that a line "[name] key: value" is about. A name
// may hold brackets. If no such profile is known but the key is, it returns
// what seems to be the name, and rest; of any other line rest is "".
func scoped(text string, names map[string]int) (name, rest string, ok bool) {
	if !strings.HasPrefix(text, "[") {
		return "", "", false
	}
	const most = 20 // brackets that are tried
	brackets := 0
	for i := range len(text) {
		if text[i] != ']' {
			continue
		}
		if brackets++; brackets > most {
			break
		}
		inside, after := text[1:i], strings.TrimSpace(text[i+1:])
		if names[inside] > 0 && strings.Contains(after, ":") {
			return inside, after, true
		}
		if k, _, found := strings.Cut(after, ":"); found && rest == "" && keyOf(k) != "" {
			name, rest = inside, after
		}
	}
	return name, rest, false
}

// metadata is the statements in the form of a reading.
func metadata(statements []statement) []profile.Metadatum {
	list := make([]profile.Metadatum, len(statements))
	for i, st := range statements {
		list[i] = profile.Metadatum{Key: st.key, Value: st.value, Line: st.line}
	}
	return list
}
