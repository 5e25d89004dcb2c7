package las

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"strings"
	"unicode"
	"unicode/utf8"

	"golang.org/x/text/encoding"
	"golang.org/x/text/encoding/charmap"
	utf16 "golang.org/x/text/encoding/unicode"

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

// decode turns the bytes into text.
func (r *reader) decode(data []byte) bool {
	if len(data) > MaxBytes {
		return r.stop(spot{}, "split it", "the file is larger than %d MiB", MaxBytes>>20)
	}
	sum := sha256.Sum256(data)
	r.reading = profile.Reading{File: r.File, SHA256: hex.EncodeToString(sum[:]), Size: int64(len(data))}
	var from encoding.Encoding
	switch {
	case bytes.HasPrefix(data, []byte("\xff\xfe")), nulsAt(data, 1):
		r.reading.Encoding, from = "UTF-16LE", utf16.UTF16(utf16.LittleEndian, utf16.UseBOM)
	case bytes.HasPrefix(data, []byte("\xfe\xff")), nulsAt(data, 0):
		r.reading.Encoding, from = "UTF-16BE", utf16.UTF16(utf16.BigEndian, utf16.UseBOM)
	case utf8.Valid(data):
		r.reading.Encoding, from = "UTF-8", encoding.Nop
	default:
		r.reading.Encoding, from = "Windows-1252", charmap.Windows1252 // of which the printable ISO 8859-1 is a part
	}
	text := data
	if from != encoding.Nop {
		text, _ = from.NewDecoder().Bytes(data) // what is no character becomes U+FFFD
	}
	r.text = bytes.TrimPrefix(bytes.TrimRight(text, "\x1a"), []byte("\ufeff"))
	if i := bytes.IndexByte(r.text, 0); i >= 0 {
		return r.stop(spotAt(r.text, i), "is this a text file? export the log as LAS 2.0", "NUL character")
	}
	return true
}

// nulsAt reports whether the file looks like UTF-16 without its mark: most of
// the first pairs of bytes have a NUL at place odd (0 or 1) and none at the
// other.
func nulsAt(data []byte, odd int) bool {
	pairs := min(len(data)/2, 512)
	var here, there int
	for i := range pairs {
		if data[2*i+odd] == 0 {
			here++
		}
		if data[2*i+1-odd] == 0 {
			there++
		}
	}
	return 3*here >= 2*pairs && there == 0 && pairs > 0
}

// line is one line, without its end.
type line struct {
	text   []byte
	number int32
	off    int // of text
}

// lines goes through lines that end in LF, CRLF or CR.
type lines struct {
	text   []byte
	off    int
	number int32 // of the line read last
}

// next returns the next line, false at the end.
func (s *lines) next() (line, bool) {
	if s.off >= len(s.text) {
		return line{}, false
	}
	rest := s.text[s.off:]
	length := bytes.IndexAny(rest, "\r\n")
	s.number++
	l := line{number: s.number, off: s.off}
	if length < 0 {
		l.text, s.off = rest, len(s.text)
		return l, true
	}
	l.text = rest[:length]
	s.off += length + 1
	if rest[length] == '\r' && length+1 < len(rest) && rest[length+1] == '\n' {
		s.off++
	}
	return l, true
}

// spot is the place of byte i of the line.
func (l *line) spot(i int) spot {
	return spot{l.number, int32(utf8.RuneCount(l.text[:min(i, len(l.text))])) + 1}
}

// first is the place of the first character that is not blank.
func (l *line) first() spot {
	return l.spot(len(l.text) - len(bytes.TrimLeftFunc(l.text, isBlank)))
}

// spotAt is the place of byte i of a text.
func spotAt(text []byte, i int) spot {
	s := lines{text: text}
	for {
		l, ok := s.next()
		if !ok {
			return spot{}
		}
		if s.off > i {
			return l.spot(i - l.off)
		}
	}
}

// isBlank reports whether a character separates words. Control characters do.
func isBlank(c rune) bool { return c <= ' ' || c == 0x7f || unicode.IsSpace(c) }

// tidy is a text of one line without what cannot be printed.
func tidy(text []byte) string {
	mapped := strings.Map(func(c rune) rune {
		switch {
		case isBlank(c):
			return ' '
		case unicode.IsPrint(c):
			return c
		}
		return -1
	}, string(bytes.ToValidUTF8(text, nil)))
	return strings.Join(strings.Fields(mapped), " ")
}
