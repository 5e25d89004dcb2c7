package delimited

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"unicode/utf16"
	"unicode/utf8"

	"golang.org/x/text/encoding/charmap"
)

const hintEncoding = "save the file as UTF-8"

// decode returns the text of a file in UTF-8 without its byte order mark, and
// the name of the encoding it was in. Text that is neither UTF-8 nor UTF-16
// is taken for Windows-1252. The text may share memory with data.
func decode(data []byte) (text []byte, encoding string, bad *trouble) {
	switch {
	case bytes.HasPrefix(data, []byte("\xff\xfe\x00\x00")), bytes.HasPrefix(data, []byte("\x00\x00\xfe\xff")):
		return nil, "", &trouble{text: "the file is in UTF-32", hint: hintEncoding}
	case bytes.HasPrefix(data, []byte("\xff\xfe")):
		encoding = "UTF-16LE"
		text, bad = decodeUTF16(data[2:], binary.LittleEndian)
	case bytes.HasPrefix(data, []byte("\xfe\xff")):
		encoding = "UTF-16BE"
		text, bad = decodeUTF16(data[2:], binary.BigEndian)
	case nulsAt(data, 1):
		encoding = "UTF-16LE"
		text, bad = decodeUTF16(data, binary.LittleEndian)
	case nulsAt(data, 0):
		encoding = "UTF-16BE"
		text, bad = decodeUTF16(data, binary.BigEndian)
	case utf8.Valid(data):
		encoding = "UTF-8"
		text = bytes.TrimPrefix(data, []byte("\ufeff"))
	default:
		encoding = "Windows-1252"
		text, _ = charmap.Windows1252.NewDecoder().Bytes(data) // maps every byte
	}
	if bad != nil {
		return nil, "", bad
	}
	text = bytes.TrimSuffix(text, []byte{0x1a}) // the end-of-file mark of DOS
	return text, encoding, controlCharacter(text)
}

// nulsAt reports whether the file looks like UTF-16 without its mark: of the
// first pairs of bytes two thirds have a NUL at place odd (0 or 1) and fewer
// than one in sixteen at the other.
func nulsAt(data []byte, odd int) bool {
	pairs := min(len(data)/2, 2048)
	var here, there int
	for i := range pairs {
		if data[2*i+odd] == 0 {
			here++
		}
		if data[2*i+1-odd] == 0 {
			there++
		}
	}
	return pairs > 0 && 3*here >= 2*pairs && 16*there < pairs
}

// decodeUTF16 turns UTF-16 into UTF-8.
func decodeUTF16(data []byte, order binary.ByteOrder) ([]byte, *trouble) {
	text := make([]byte, 0, len(data)/2+len(data)/8)
	for ; len(data) >= 2; data = data[2:] {
		r := rune(order.Uint16(data))
		if utf16.IsSurrogate(r) {
			low := rune(0)
			if len(data) >= 4 {
				low = rune(order.Uint16(data[2:]))
			}
			if r = utf16.DecodeRune(r, low); r == utf8.RuneError {
				return nil, &trouble{spotAt(text, len(text)), "half of a UTF-16 surrogate pair", hintEncoding}
			}
			data = data[2:]
		}
		text = utf8.AppendRune(text, r)
	}
	if len(data) > 0 {
		return nil, &trouble{spotAt(text, len(text)), "the file is in UTF-16 but ends in half a character", hintEncoding}
	}
	return text, nil
}

// controlCharacter finds the first control character that is not a tab or
// the end of a line.
func controlCharacter(text []byte) *trouble {
	for i, b := range text {
		if b >= ' ' && b != 0x7f || b == '\t' || b == '\n' || b == '\r' {
			continue
		}
		name := fmt.Sprintf("control character U+%04X", b)
		if b == 0 {
			name = "NUL character"
		}
		return &trouble{spotAt(text, i), name, "is this a text file? export the table as CSV"}
	}
	return nil
}

// spotAt is the place of byte i of the text.
func spotAt(text []byte, i int) spot {
	s := newScanner(text[:i])
	for s.off < len(s.text) {
		if !isLineEnd(s.text[s.off]) {
			s.off++
			continue
		}
		s.lineEnd()
	}
	return s.spot(i)
}
