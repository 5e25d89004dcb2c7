package evidence

import (
	"errors"
	"fmt"
)

// object is a PDF object: nil, bool, float64, text, name, list, dict, ref,
// *stream, or operator inside the content of a page.
type object any

type (
	name     string
	text     string // the bytes of a string
	list     []object
	dict     map[name]object
	operator string
)

// ref is a reference to an indirect object.
type ref struct{ number, generation int }

// stream is a stream as it stands in the file.
type stream struct {
	dict dict
	raw  []byte
}

// Limits on what is read of one object.
const (
	maxDepth  = 64       // of lists and dictionaries within each other
	maxString = 64 << 10 // bytes
	maxName   = 1 << 10  // bytes
)

// budget is what reading a file may cost in all, so that a small file cannot
// ask for more.
type budget struct {
	values int // objects made
	bytes  int // read as objects; streams are not
	packed int // bytes that may still come out of compressed pages and tables
	runs   int // of text on pages
	text   int // bytes of text on pages
	files  int // bytes of attachments
}

func newBudget() *budget {
	return &budget{values: 2e6, bytes: 64 << 20, packed: 64 << 20, runs: 1e6, text: 48 << 20, files: MaxTotal}
}

var errCostly = errors.New("it asks for more work than a report does")

// scanner reads objects. After its first error it reads nothing more.
type scanner struct {
	data    []byte
	at      int
	budget  *budget
	content bool // of a page: keywords are operators, and nothing is a reference
	err     error
}

func (s *scanner) fail(format string, args ...any) {
	if s.err == nil {
		s.err = fmt.Errorf(format, args...)
	}
	s.at = len(s.data)
}

// object reads the next object; io.EOF has no place in it: at the end of the
// data it returns nil and done is true.
func (s *scanner) object() (o object, done bool) {
	start := s.at
	o, done = s.value(0)
	s.budget.bytes -= s.at - start
	if s.budget.bytes < 0 && s.err == nil {
		s.fail("%w", errCostly)
	}
	return o, done || s.err != nil
}

func (s *scanner) value(depth int) (o object, done bool) {
	s.space()
	if s.at >= len(s.data) {
		return nil, true
	}
	if s.budget.values--; s.budget.values < 0 {
		s.fail("%w", errCostly)
		return nil, true
	}
	if depth > maxDepth {
		s.fail("objects lie more than %d deep in each other", maxDepth)
		return nil, true
	}
	switch c := s.data[s.at]; {
	case c == '/':
		s.at++
		return s.name(), false
	case c == '(':
		return s.literal(), false
	case c == '[':
		s.at++
		return s.list(depth), false
	case c == '<' && s.peek(1) == '<':
		s.at += 2
		return s.dict(depth), false
	case c == '<':
		return s.hex(), false
	case c == '+' || c == '-' || c == '.' || '0' <= c && c <= '9':
		return s.number(), false
	case regular(c):
		return s.keyword(), false
	default:
		s.fail("%q stands where an object should", c)
		return nil, true
	}
}

func (s *scanner) peek(n int) byte {
	if s.at+n < len(s.data) {
		return s.data[s.at+n]
	}
	return 0
}

// white and regular are the classes of characters of ISO 32000-1, 7.2.2.
func white(c byte) bool {
	return c == ' ' || c == '\n' || c == '\r' || c == '\t' || c == '\f' || c == 0
}

func regular(c byte) bool {
	switch c {
	case ' ', '\n', '\r', '\t', '\f', 0, '(', ')', '<', '>', '[', ']', '{', '}', '/', '%':
		return false
	}
	return true
}

// space skips white space and comments.
func (s *scanner) space() {
	start := s.at
	s.skip()
	if s.budget.bytes -= s.at - start; s.budget.bytes < 0 {
		s.fail("%w", errCostly)
	}
}

func (s *scanner) skip() {
	for s.at < len(s.data) {
		switch c := s.data[s.at]; {
		case white(c):
			s.at++
		case c == '%':
			for s.at < len(s.data) && s.data[s.at] != '\n' && s.data[s.at] != '\r' {
				s.at++
			}
		default:
			return
		}
	}
}

// word returns the regular characters that stand here.
func (s *scanner) word() []byte {
	start := s.at
	for s.at < len(s.data) && regular(s.data[s.at]) {
		if s.at-start == maxName {
			s.fail("a word is longer than %d bytes", maxName)
			return nil
		}
		s.at++
	}
	return s.data[start:s.at]
}

func (s *scanner) name() name {
	w := s.word()
	out := make([]byte, 0, len(w))
	for i := 0; i < len(w); i++ {
		if w[i] == '#' && i+2 < len(w) && hexDigit(w[i+1]) >= 0 && hexDigit(w[i+2]) >= 0 {
			out = append(out, byte(hexDigit(w[i+1])<<4|hexDigit(w[i+2])))
			i += 2
			continue
		}
		out = append(out, w[i])
	}
	return name(out)
}

func hexDigit(c byte) int {
	switch {
	case '0' <= c && c <= '9':
		return int(c - '0')
	case 'a' <= c && c <= 'f':
		return int(c-'a') + 10
	case 'A' <= c && c <= 'F':
		return int(c-'A') + 10
	}
	return -1
}

// keyword is true, false, null, or an operator of a page.
func (s *scanner) keyword() object {
	w := s.word()
	switch string(w) {
	case "true":
		return true
	case "false":
		return false
	case "null":
		return nil
	}
	if s.content {
		return known(w)
	}
	s.fail("%q stands where an object should", w)
	return nil
}

// known returns one of the operators that show text, and of the keywords of a
// table to Unicode; any other is the operator "". So the thousands of a page
// cost no memory.
func known(w []byte) object {
	switch string(w) {
	case "q":
		return operator("q")
	case "Q":
		return operator("Q")
	case "cm":
		return operator("cm")
	case "BT":
		return operator("BT")
	case "Tf":
		return operator("Tf")
	case "TL":
		return operator("TL")
	case "Td":
		return operator("Td")
	case "TD":
		return operator("TD")
	case "Tm":
		return operator("Tm")
	case "T*":
		return operator("T*")
	case "Tj":
		return operator("Tj")
	case "TJ":
		return operator("TJ")
	case "'", `"`:
		return operator("'")
	case "begincodespacerange", "beginbfchar", "beginbfrange":
		return operator("begin")
	case "endbfchar":
		return operator("endbfchar")
	case "endbfrange":
		return operator("endbfrange")
	}
	return operator("")
}

// number reads a number, or a reference where one starts here.
func (s *scanner) number() object {
	w := s.word()
	v, ok := decimal(w)
	if !ok {
		s.fail("%q is not a number", w)
		return nil
	}
	if s.content || v < 0 || v != float64(int(v)) {
		return v
	}
	back := s.at
	s.space()
	generation, ok := s.integer()
	s.space()
	if ok && s.peek(0) == 'R' && !regular(s.peek(1)) {
		s.at++
		return ref{int(v), generation}
	}
	s.at = back
	return v
}

// decimal returns a number as PDF writes them: a sign, digits, a point. It is
// exact to 15 digits.
func decimal(w []byte) (float64, bool) {
	v, scale := 0.0, 0.0
	digits := 0
	for i, c := range w {
		switch {
		case '0' <= c && c <= '9':
			v = 10*v + float64(c-'0')
			scale *= 10
			digits++
		case c == '.' && scale == 0:
			scale = 1
		case i > 0 || c != '+' && c != '-':
			return 0, false
		}
	}
	if digits == 0 || digits > 30 {
		return 0, false
	}
	if scale > 0 {
		v /= scale
	}
	if w[0] == '-' {
		v = -v
	}
	return v, true
}

// integer reads an unsigned integer of at most 10 digits.
func (s *scanner) integer() (int, bool) {
	v, n := 0, 0
	for s.at < len(s.data) && '0' <= s.data[s.at] && s.data[s.at] <= '9' && n < 11 {
		v = 10*v + int(s.data[s.at]-'0')
		s.at++
		n++
	}
	return v, 0 < n && n < 11
}

func (s *scanner) list(depth int) list {
	var l list
	for s.err == nil {
		s.space()
		if s.peek(0) == ']' {
			s.at++
			return l
		}
		o, done := s.value(depth + 1)
		if done {
			s.fail("a list has no end")
		}
		l = append(l, o)
	}
	return nil
}

func (s *scanner) dict(depth int) dict {
	d := dict{}
	for s.err == nil {
		s.space()
		if s.peek(0) == '>' && s.peek(1) == '>' {
			s.at += 2
			return d
		}
		key, done := s.value(depth + 1)
		k, ok := key.(name)
		if done || !ok {
			s.fail("a dictionary has no end, or a key that is no name")
			return nil
		}
		v, done := s.value(depth + 1)
		if done {
			s.fail("a dictionary has no end")
		}
		d[k] = v
	}
	return nil
}

// literal reads a string in round brackets.
func (s *scanner) literal() text {
	var out []byte
	s.at++
	for open := 1; s.at < len(s.data) && len(out) <= maxString; {
		c := s.data[s.at]
		s.at++
		switch c {
		case '(':
			open++
		case ')':
			if open--; open == 0 {
				return text(out)
			}
		case '\\':
			out = s.escape(out)
			continue
		}
		out = append(out, c)
	}
	s.fail("a string has no end, or is longer than %d bytes", maxString)
	return ""
}

// escape reads what follows a backslash.
func (s *scanner) escape(out []byte) []byte {
	c := s.peek(0)
	s.at++
	switch c {
	case 'n':
		return append(out, '\n')
	case 'r':
		return append(out, '\r')
	case 't':
		return append(out, '\t')
	case 'b':
		return append(out, '\b')
	case 'f':
		return append(out, '\f')
	case '\r':
		if s.peek(0) == '\n' {
			s.at++
		}
		return out
	case '\n':
		return out
	}
	if c < '0' || c > '7' {
		return append(out, c)
	}
	v := int(c - '0')
	for range 2 {
		if d := s.peek(0); '0' <= d && d <= '7' {
			v = 8*v + int(d-'0')
			s.at++
		}
	}
	return append(out, byte(v))
}

// hex reads a string in angle brackets.
func (s *scanner) hex() text {
	var out []byte
	high := -1
	for s.at++; s.at < len(s.data) && len(out) <= maxString; s.at++ {
		c := s.data[s.at]
		switch d := hexDigit(c); {
		case c == '>':
			s.at++
			if high >= 0 {
				out = append(out, byte(high<<4))
			}
			return text(out)
		case white(c):
		case d < 0:
			s.fail("%q stands in a hexadecimal string", c)
			return ""
		case high < 0:
			high = d
		default:
			out = append(out, byte(high<<4|d))
			high = -1
		}
	}
	s.fail("a string has no end, or is longer than %d bytes", maxString)
	return ""
}
