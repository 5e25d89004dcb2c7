package json

import (
	"bytes"
	stdjson "encoding/json"
	"math"
	"strconv"
	"strings"
	"unicode"

	"shearbook/profile"
)

// advance takes the next token. After the end, or where the text cannot be
// followed, that is the end.
func (r *reader) advance() {
	if r.dead {
		return
	}
	tok, bad := r.scan.next()
	if bad != nil {
		r.stop(bad.spot, bad.hint, "%s", bad.text)
		return
	}
	r.tok = tok
}

// take takes the next token if it is of a kind.
func (r *reader) take(k kind) bool {
	if r.tok.kind != k || r.dead {
		return false
	}
	r.advance()
	return true
}

// unexpected ends the reading at the next token.
func (r *reader) unexpected(want string) {
	switch {
	case r.dead:
	case r.tok.kind == tokenEnd:
		r.stop(r.tok.spot, "the file seems to be cut off", "the file ends where %s is expected", want)
	default:
		r.stop(r.tok.spot, "", "%s stands where %s is expected", shown(r.tok), want)
	}
}

// shown is a token in words.
func shown(t token) string {
	switch t.kind {
	case tokenText:
		return profile.Quote(decoded(t.raw))
	case '{':
		return "an object"
	case '[':
		return "a list"
	}
	return profile.Quote(t.raw)
}

// keySet is the keys of an object that were found, a bit for each in the
// order in which they are listed.
type keySet uint32

func (s keySet) has(i int) bool { return s&(1<<i) != 0 }

// object reads an object. For each of its keys that is listed value is called
// with the index of the key; it must take the value. A key that is not listed
// is a fault. It returns false if there is no object, or no end of it.
func (r *reader) object(what string, keys []string, value func(i int)) (found keySet, ok bool) {
	if !r.take('{') {
		return 0, r.notA(what, "an object { … }")
	}
	for r.tok.kind != '}' {
		at, raw := r.tok.spot, r.tok.raw
		if !r.key() {
			return found, false
		}
		switch i := indexOf(keys, raw); {
		case i < 0:
			r.unknownKey(what, at, decoded(raw), keys)
			r.skip(0)
		case found.has(i):
			r.fault(at, "keep one of them", "key %q stands twice in %s", keys[i], what)
			r.skip(0)
		default:
			found |= 1 << i
			value(i)
		}
		if !r.comma('}') {
			return found, false
		}
	}
	r.advance()
	return found, true
}

// indexOf is the index of a key, -1 if it is not listed.
func indexOf(keys []string, raw []byte) int {
	name := raw[1 : len(raw)-1]
	if bytes.IndexByte(name, '\\') >= 0 {
		name = []byte(decoded(raw))
	}
	for i, k := range keys {
		if string(name) == k {
			return i
		}
	}
	return -1
}

// key steps over a key and the colon after it.
func (r *reader) key() bool {
	if r.tok.kind != tokenText {
		r.unexpected("a key between double quotes")
		return false
	}
	r.advance()
	if !r.take(':') {
		r.unexpected("a colon")
		return false
	}
	return true
}

// comma steps over the comma between two members; it returns false if the
// text cannot be followed.
func (r *reader) comma(end kind) bool {
	if r.tok.kind == end {
		return !r.dead
	}
	if !r.take(',') {
		r.unexpected("a comma or " + string(rune(end)))
		return false
	}
	if r.tok.kind == end {
		r.stop(r.tok.spot, "remove the comma", "a comma stands before %s", string(rune(end)))
	}
	return !r.dead
}

// unknownKey tells of a key that is not of the form.
func (r *reader) unknownKey(what string, at spot, name string, keys []string) {
	if r.Count() >= profile.MaxFaults {
		r.fault(at, "", "") // only counted
		return
	}
	hint := "the keys of " + what + " are " + strings.Join(keys, ", ")
	if near := profile.Nearest(name[:min(len(name), 64)], keys); near != "" {
		hint = "is " + near + " meant?"
	}
	r.fault(at, hint, "key %s is not known in %s", profile.Quote(name), what)
	if what == theFile {
		r.strangers = append(r.strangers, name)
	}
}

// list reads a list; item must take each item.
func (r *reader) list(what string, item func()) bool {
	if !r.take('[') {
		return r.notA(what, "a list [ … ]")
	}
	for r.tok.kind != ']' {
		item()
		if !r.comma(']') {
			return false
		}
	}
	r.advance()
	return true
}

// notA tells of a value that is not what it should be, and steps over it.
func (r *reader) notA(what, want string) bool {
	if r.dead {
		return false
	}
	switch r.tok.kind {
	case tokenText, tokenNumber, tokenTrue, tokenFalse, tokenNull, '{', '[':
	default:
		r.unexpected("a value")
		return false
	}
	hint := ""
	if r.tok.kind == tokenNull && what != fields[top].name && what != fields[vs].name {
		hint = "leave the key out where its value is not known"
	}
	r.fault(r.tok.spot, hint, "%s is %s, not %s", what, shown(r.tok), want)
	r.skip(0)
	return false
}

// skip steps over a value that lies in depth lists and objects.
func (r *reader) skip(depth int) {
	end := r.tok.kind + 2 // } and ] follow { and [ by two
	switch r.tok.kind {
	case tokenText, tokenNumber, tokenTrue, tokenFalse, tokenNull:
		r.advance()
		return
	case '{', '[':
	default:
		r.unexpected("a value")
		return
	}
	if depth == MaxDepth {
		r.stop(r.tok.spot, "", "more than %d lists and objects lie inside one another", MaxDepth)
		return
	}
	r.advance()
	for r.tok.kind != end {
		if end == '}' && !r.key() {
			return
		}
		r.skip(depth + 1)
		if !r.comma(end) {
			return
		}
	}
	r.advance()
}

// decoded is a text without its quotes and escapes.
func decoded(raw []byte) string {
	if bytes.IndexByte(raw, '\\') < 0 {
		return string(raw[1 : len(raw)-1])
	}
	var text string
	stdjson.Unmarshal(raw, &text) // the scanner has looked at its form
	return text
}

// text reads a text of plain characters.
func (r *reader) text(what string) (string, bool) {
	if r.tok.kind != tokenText {
		return "", r.notA(what, "a text")
	}
	at, text := r.tok.spot, decoded(r.tok.raw)
	r.advance()
	if i := strings.IndexFunc(text, unicode.IsControl); i >= 0 {
		r.fault(at, "write it as one line", "%s %s holds a control character", what, profile.Quote(text))
		return "", false
	}
	return text, true
}

// number reads a finite number.
func (r *reader) number(what string) (float64, bool) {
	if r.tok.kind != tokenNumber {
		return 0, r.notA(what, "a number")
	}
	at, raw := r.tok.spot, r.tok.raw
	r.advance()
	v, err := strconv.ParseFloat(string(raw), 64)
	if err != nil || math.IsInf(v, 0) {
		r.fault(at, "", "%s %s is not a finite number", what, profile.Quote(raw))
		return 0, false
	}
	return v, true
}
