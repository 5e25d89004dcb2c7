package las

import (
	"bytes"
	"math"
	"strings"
	"unicode"

	"shearbook/profile"
)

// section is a part of the file that begins with a line ~ and a letter.
type section struct {
	letter byte   // upper case; 0 for what stands above the first
	title  line   // the line that begins it
	body   []byte // the lines after it
	before int32  // number of the line before its body
	off    int    // of its body
}

// header is what stands above the data.
type header struct {
	sections []section
	version  float64 // 2 if not stated
	wrap     string  // YES, NO or blank
	dlm      string  // delimiter, as stated
	null     float64 // NaN if not declared
	items    []item  // of all sections, in order
	curves   []item
	data     *section
	stray    *section // of numbers above ~A, if any
}

// item is a line "MNEM.UNIT value : description".
type item struct {
	section                            byte
	mnemonic, unit, value, description string
	at, unitAt, valueAt                spot
}

// sections finds the sections.
func (r *reader) sections() bool {
	h := &r.header
	s := lines{text: r.text}
	h.sections = append(h.sections, section{})
	for {
		start := s.off
		l, ok := s.next()
		last := &h.sections[len(h.sections)-1]
		last.body = r.text[last.off:start]
		if !ok {
			last.body = r.text[last.off:]
			break
		}
		text := bytes.TrimLeftFunc(l.text, isBlank)
		if len(l.text) > MaxLine {
			return r.stop(l.spot(0), "", "the line is longer than 1 MiB")
		}
		if len(text) < 2 || text[0] != '~' || !unicode.IsLetter(rune(text[1])) {
			continue
		}
		if len(h.sections) > MaxSections {
			return r.stop(l.spot(0), "", "the file has more than %d sections", MaxSections)
		}
		h.sections = append(h.sections, section{letter: upper(text[1]), title: l, before: l.number, off: s.off})
	}
	if len(h.sections) == 1 {
		if len(bytes.TrimSpace(r.text)) == 0 {
			return r.stop(spot{}, hintLAS, "the file is empty")
		}
		return r.stop(spot{1, 1}, hintLAS, "the file has no section: no line begins with ~ and a letter")
	}
	return true
}

const hintLAS = "a LAS file begins with ~V and holds ~W, ~C and ~A; export the log as LAS 2.0"

func upper(b byte) byte { return bytes.ToUpper([]byte{b})[0] }

// readHeader reads the items of the sections above the data.
func (r *reader) readHeader() bool {
	h := &r.header
	h.version, h.null = 2, math.NaN()
	for i := range h.sections {
		sec := &h.sections[i]
		ok := true
		switch sec.letter {
		case 'A':
			ok = r.dataSection(sec)
		case 0, 'O':
			ok = r.remarks(sec)
		default:
			ok = r.itemsOf(sec)
		}
		if !ok {
			return false
		}
	}
	return r.versionAndNull() && r.hasData()
}

// hasData looks whether there are data, in ~A or above it.
func (r *reader) hasData() bool {
	h := &r.header
	if h.data == nil || !hasRow(h.data) {
		switch {
		case h.stray != nil:
			h.data = h.stray
			r.note("data-misplaced", spot{h.stray.before + 1, 1}, "the data stand above the line ~A")
		case h.data == nil:
			return r.stop(spot{}, hintLAS, "the file has no section ~A, so no data")
		default:
			return r.stop(h.data.title.first(), "", "the section ~A has no data")
		}
	}
	return true
}

// dataSection takes a section ~A.
func (r *reader) dataSection(sec *section) bool {
	h := &r.header
	switch {
	case h.data == nil || !hasRow(h.data):
		h.data = sec
	case hasRow(sec):
		return r.stop(sec.title.first(), "keep one of them", "the file has two sections ~A with data, the first in line %d", h.data.before)
	}
	return true
}

// hasRow reports whether a section has a line that is not blank or a comment.
func hasRow(sec *section) bool {
	s := lines{text: sec.body}
	for {
		l, ok := s.next()
		if !ok {
			return false
		}
		if text := bytes.TrimLeftFunc(l.text, isBlank); len(text) > 0 && text[0] != '#' {
			return true
		}
	}
}

// remarks keeps the lines of ~Other, and those above the first section.
func (r *reader) remarks(sec *section) bool {
	return r.eachLine(sec, func(l line) bool { return r.keep("other", tidy(l.text), l.number) })
}

// eachLine calls do for each line that is not blank and, outside ~Other, no
// comment.
func (r *reader) eachLine(sec *section, do func(l line) bool) bool {
	s := lines{text: sec.body, number: sec.before}
	for {
		l, ok := s.next()
		if !ok {
			return true
		}
		text := bytes.TrimLeftFunc(l.text, isBlank)
		if len(text) == 0 || text[0] == '#' && sec.letter != 0 {
			continue
		}
		l.off += sec.off
		if !do(l) {
			return false
		}
	}
}

// keep keeps a line for the report's appendix.
func (r *reader) keep(key, value string, number int32) bool {
	m := &r.reading.Metadata
	if len(*m) == MaxMetadata {
		return r.stop(spot{number, 1}, "", "more than %d lines stand above the data", MaxMetadata)
	}
	*m = append(*m, profile.Metadatum{Key: key, Value: value, Line: int(number)})
	return true
}

// itemsOf reads the items of a section.
func (r *reader) itemsOf(sec *section) bool {
	h := &r.header
	return r.eachLine(sec, func(l line) bool {
		if h.stray != nil && h.stray.title.number == sec.title.number {
			return true // data from here on
		}
		if sec.letter != 'V' && sec.letter != 'W' && isRow(l.text) {
			stray := *sec
			stray.body, stray.before, stray.off = sec.body[l.off-sec.off:], l.number-1, l.off
			h.stray = &stray
			return true
		}
		it := parseItem(l)
		it.section = sec.letter
		if sec.letter == 'C' {
			h.curves = append(h.curves, it)
			if len(h.curves) > MaxCurves {
				return r.stop(it.at, "", "the file has more than %d curves", MaxCurves)
			}
		}
		h.items = append(h.items, it)
		return r.keep(it.key(), it.words(), l.number)
	})
}

// isRow reports whether a line is numbers alone, at least two of them.
func isRow(text []byte) bool {
	fields := bytes.FieldsFunc(text, isBlank)
	for _, f := range fields {
		if _, ok := parseNumber(f); !ok {
			return false
		}
	}
	return len(fields) > 1
}

// parseItem cuts a line at its first dot, the first blank after it, and its
// last colon (LAS 2.0, as clarified in 2014).
func parseItem(l line) item {
	text := l.text
	it := item{at: l.first()}
	colon := bytes.LastIndexByte(text, ':')
	body := text
	if colon >= 0 {
		it.description = tidy(text[colon+1:])
		body = text[:colon]
	}
	dot := bytes.IndexByte(body, '.')
	if first := bytes.IndexByte(body, ':'); dot < 0 || first >= 0 && first < dot {
		dot = endOfWord(body) // a mnemonic without a dot
	}
	it.mnemonic = tidy(body[:dot])
	i := dot
	for i < len(body) && body[i] == '.' {
		i++
	}
	it.unitAt = l.spot(i)
	rest := body[i:]
	end := bytes.IndexFunc(rest, isBlank)
	if end < 0 {
		end = len(rest)
	}
	it.unit = tidy(rest[:end])
	value := rest[end:]
	it.value = tidy(value)
	it.valueAt = l.spot(len(body) - len(bytes.TrimLeftFunc(value, isBlank)))
	if it.value == "" {
		it.valueAt = it.unitAt
	}
	return it
}

// endOfWord is the offset of the end of the first word.
func endOfWord(text []byte) int {
	lead := len(text) - len(bytes.TrimLeftFunc(text, isBlank))
	if i := bytes.IndexFunc(text[lead:], isBlank); i >= 0 {
		return lead + i
	}
	return len(text)
}

// is reports whether the item has a mnemonic, case aside.
func (it *item) is(mnemonics ...string) bool {
	for _, m := range mnemonics {
		if strings.EqualFold(it.mnemonic, m) {
			return true
		}
	}
	return false
}

// bare is the value of an item that has no unit, and of one whose value
// stands where the unit belongs.
func (it *item) bare() string {
	if it.value == "" {
		return it.unit
	}
	return it.value
}

// key is how the item is called in the report's appendix.
func (it *item) key() string {
	if it.section == 'C' {
		return "curve " + it.mnemonic
	}
	return it.mnemonic
}

// words is the item in the words of the file, without its mnemonic.
func (it *item) words() string {
	text := strings.TrimSpace(it.value + " " + it.unit)
	switch {
	case it.description == "":
		return text
	case text == "":
		return it.description
	}
	return text + " (" + it.description + ")"
}

// versionAndNull reads the items that say how to read the data.
func (r *reader) versionAndNull() bool {
	h := &r.header
	stated := false
	for i := range h.items {
		it := &h.items[i]
		switch {
		case it.section != 'V' && it.section != 'W':
		case it.is("VERS") && !stated:
			v, ok := parseNumber([]byte(it.bare()))
			if !ok {
				r.fault(it.valueAt, "write 2.0", "the version %s is not a number", profile.Quote(it.bare()))
				continue
			}
			h.version, stated = v, true
			if v >= 3 || v < 1 {
				return r.stop(it.valueAt, "export the log as LAS 2.0", "version %s of LAS is not read", profile.Quote(it.bare()))
			}
			if v < 2 {
				r.note("edition", it.at, "the file is of version %s of LAS, in which values and descriptions of ~W are swapped", it.bare())
			}
		case it.is("WRAP"):
			h.wrap = strings.ToUpper(it.bare())
		case it.is("DLM"):
			h.dlm = strings.ToUpper(it.bare())
		case it.is("NULL") && math.IsNaN(h.null):
			v, ok := parseNumber([]byte(it.bare()))
			if !ok {
				r.fault(it.valueAt, "write the number that stands for no value, such as -999.25", "NULL %s is not a number", profile.Quote(it.bare()))
			} else {
				h.null = v
			}
		}
	}
	if !stated {
		r.note("edition", spot{1, 1}, "the file does not state its version; it was read as LAS 2.0")
	}
	if h.version < 2 {
		for i := range h.items {
			if it := &h.items[i]; it.section == 'W' && !it.is("STRT", "STOP", "STEP", "NULL") {
				it.value, it.description = it.description, it.value
			}
		}
	}
	return true
}
