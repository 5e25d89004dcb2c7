package json

import (
	"fmt"
	"unicode/utf8"

	"shearbook/profile"
)

// spot is a line and a column, both from 1, the column in characters. Zero is
// the file as a whole.
type spot struct {
	line, column int32
}

func (s spot) place() profile.Place {
	return profile.Place{Line: int(s.line), Column: int(s.column)}
}

// kind is the kind of a token: for signs the sign itself.
type kind byte

const (
	tokenEnd    kind = 0
	tokenText   kind = 's'
	tokenNumber kind = 'n'
	tokenTrue   kind = 't'
	tokenFalse  kind = 'f'
	tokenNull   kind = '0'
)

// token is one token, as it stands in the file.
type token struct {
	kind kind
	raw  []byte // of a text with its quotes
	spot
}

// trouble is a fault found where the file's name is not known.
type trouble struct {
	spot
	text, hint string
}

// scanner cuts JSON (RFC 8259) into tokens. Package encoding/json is not used
// for it because every key and value must know its place, and a fault in one
// must not end the reading.
type scanner struct {
	text []byte // UTF-8
	off  int    // of what comes next
	spot        // of offset seen
	seen int    // up to where the columns of this line are counted
}

// spotOf is the place of offset off, which must not lie before one asked for
// earlier.
func (s *scanner) spotOf(off int) spot {
	s.column += int32(utf8.RuneCount(s.text[s.seen:off]))
	s.seen = off
	return s.spot
}

// next returns the next token.
func (s *scanner) next() (token, *trouble) {
	s.blanks()
	t := token{spot: s.spotOf(s.off)}
	if s.off == len(s.text) {
		return t, nil
	}
	switch b := s.text[s.off]; {
	case b == '{' || b == '}' || b == '[' || b == ']' || b == ':' || b == ',':
		t.kind = kind(b)
		t.raw = s.text[s.off : s.off+1]
		s.off++
		return t, nil
	case b == '"':
		return s.quoted(t)
	case b == '-' || b >= '0' && b <= '9':
		return s.number(t)
	}
	return s.word(t)
}

// blanks steps over white space.
func (s *scanner) blanks() {
	for ; s.off < len(s.text); s.off++ {
		switch s.text[s.off] {
		case ' ', '\t':
		case '\r':
			if s.off+1 < len(s.text) && s.text[s.off+1] == '\n' {
				continue
			}
			s.newLine()
		case '\n':
			s.newLine()
		default:
			return
		}
	}
}

func (s *scanner) newLine() {
	s.spot = spot{s.line + 1, 1}
	s.seen = s.off + 1
}

// quoted reads a text.
func (s *scanner) quoted(t token) (token, *trouble) {
	start := s.off
	for i := start + 1; i < len(s.text); i++ {
		switch b := s.text[i]; {
		case i-start > MaxText:
			return t, &trouble{t.spot, "the text is longer than 1 MiB", "is a quote not closed?"}
		case b < ' ':
			return t, &trouble{s.spotOf(i), fmt.Sprintf("control character U+%04X inside a text", b), `close the quote, or write it as \n or \t`}
		case b == '\\':
			n := escape(s.text[i+1:])
			if n == 0 {
				return t, &trouble{s.spotOf(i), "a backslash that begins no escape", `write a backslash as \\`}
			}
			i += n
		case b == '"':
			s.off = i + 1
			t.kind, t.raw = tokenText, s.text[start:s.off]
			return t, nil
		}
	}
	return t, &trouble{t.spot, "the quote is not closed", ""}
}

// escape returns the length of the escape that follows a backslash, 0 if none
// does.
func escape(text []byte) int {
	if len(text) == 0 {
		return 0
	}
	switch text[0] {
	case '"', '\\', '/', 'b', 'f', 'n', 'r', 't':
		return 1
	case 'u':
		for i := 1; i <= 4; i++ {
			if i == len(text) || !isHex(text[i]) {
				return 0
			}
		}
		return 5
	}
	return 0
}

func isHex(b byte) bool {
	return b >= '0' && b <= '9' || b >= 'a' && b <= 'f' || b >= 'A' && b <= 'F'
}

// number reads a number.
func (s *scanner) number(t token) (token, *trouble) {
	start := s.off
	s.off += len(s.run("+-.0123456789abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ_"))
	t.kind, t.raw = tokenNumber, s.text[start:s.off]
	if len(t.raw) > MaxText || !isNumber(t.raw) {
		return t, &trouble{t.spot, profile.Quote(t.raw) + " is not a number", "write a plain number such as 12.5, or a text between quotes"}
	}
	return t, nil
}

// run returns the longest run of the given characters at s.off.
func (s *scanner) run(of string) []byte {
	var is [256]bool
	for i := range len(of) {
		is[of[i]] = true
	}
	i := s.off
	for i < len(s.text) && is[s.text[i]] {
		i++
	}
	return s.text[s.off:i]
}

// isNumber reports whether text is a number of RFC 8259, section 6.
func isNumber(text []byte) bool {
	if len(text) > 0 && text[0] == '-' {
		text = text[1:]
	}
	n := digits(text)
	if n == 0 || n > 1 && text[0] == '0' {
		return false
	}
	text = text[n:]
	if len(text) > 0 && text[0] == '.' {
		if n = digits(text[1:]); n == 0 {
			return false
		}
		text = text[1+n:]
	}
	if len(text) > 0 && (text[0] == 'e' || text[0] == 'E') {
		text = text[1:]
		if len(text) > 0 && (text[0] == '+' || text[0] == '-') {
			text = text[1:]
		}
		if n = digits(text); n == 0 {
			return false
		}
		text = text[n:]
	}
	return len(text) == 0
}

// digits is how many digits text begins with.
func digits(text []byte) int {
	n := 0
	for n < len(text) && text[n] >= '0' && text[n] <= '9' {
		n++
	}
	return n
}

// word reads true, false or null.
func (s *scanner) word(t token) (token, *trouble) {
	word := s.run("abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ_")
	switch string(word) {
	case "true":
		t.kind = tokenTrue
	case "false":
		t.kind = tokenFalse
	case "null":
		t.kind = tokenNull
	case "":
		return t, s.strange(t)
	case "NaN", "Infinity", "Inf", "inf", "nan":
		return t, &trouble{t.spot, profile.Quote(word) + " is not JSON", "leave out what is not known; the bottom of a half-space is null"}
	default:
		return t, &trouble{t.spot, profile.Quote(word) + " is not JSON", "put texts and keys between double quotes"}
	}
	t.raw = word
	s.off += len(word)
	return t, nil
}

// strange says what is wrong with a character that begins no token.
func (s *scanner) strange(t token) *trouble {
	r, _ := utf8.DecodeRune(s.text[s.off:])
	hint := ""
	switch r {
	case '\'', '“', '”', '„', '«':
		hint = "put texts and keys between straight double quotes"
	case '/', '#':
		hint = "JSON has no comments"
	case '+', '.':
		hint = "write numbers as 0.5, without a plus sign"
	}
	return &trouble{t.spot, profile.Quote(string(r)) + " is not JSON", hint}
}
