package ags

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"unicode/utf8"

	"golang.org/x/text/encoding/charmap"

	"shearbook/profile"
)

const (
	hintUTF8 = "save the file as UTF-8 or ASCII"
	hintAGS4 = `an AGS4 file has groups that begin with rows such as "GROUP","LOCA" and "HEADING","LOCA_ID"`
)

// decode turns the bytes into text in UTF-8, without a byte order mark. What
// is not UTF-8 is taken for Windows-1252.
func (r *reader) decode(data []byte) bool {
	if len(data) > MaxBytes {
		r.Stop(profile.Place{}, "split it", "the file is larger than %d MiB", MaxBytes>>20)
		return false
	}
	sum := sha256.Sum256(data)
	r.reading = profile.Reading{File: r.File, SHA256: hex.EncodeToString(sum[:]), Size: int64(len(data)), Encoding: "UTF-8"}
	r.text = bytes.TrimPrefix(data, []byte("\ufeff"))
	switch {
	case wide(data):
		r.Stop(profile.Place{}, hintUTF8, "the file is in UTF-16 or UTF-32, which AGS4 does not allow")
		return false
	case !utf8.Valid(data):
		r.reading.Encoding = "Windows-1252"
		r.text, _ = charmap.Windows1252.NewDecoder().Bytes(data) // maps every byte
	}
	r.text = bytes.TrimSuffix(r.text, []byte{0x1a}) // the end-of-file mark of DOS
	switch {
	case len(bytes.TrimSpace(r.text)) == 0:
		r.Stop(profile.Place{}, hintAGS4, "the file is empty")
		return false
	case bytes.HasPrefix(bytes.TrimSpace(r.text), []byte(`"**PROJ"`)):
		r.Stop(profile.Place{Line: 1, Column: 1}, "ask for the file in AGS4", "the file is in AGS edition 3 or older, which is not read")
		return false
	}
	return r.noControls()
}

// wide reports whether the file is in UTF-16 or UTF-32: it begins with the
// mark of one, or with a letter and a NUL.
func wide(data []byte) bool {
	for _, mark := range []string{"\xff\xfe", "\xfe\xff", "\x00\x00\xfe\xff"} {
		if bytes.HasPrefix(data, []byte(mark)) {
			return true
		}
	}
	return len(data) >= 4 && (data[0] == 0 && data[2] == 0 && data[1] != 0 || data[1] == 0 && data[3] == 0 && data[0] != 0)
}

// noControls looks for a control character that is not a tab or the end of a
// line.
func (r *reader) noControls() bool {
	for i, b := range r.text {
		if b >= ' ' && b != 0x7f || b == '\t' || b == '\n' || b == '\r' {
			continue
		}
		name := fmt.Sprintf("control character U+%04X", b)
		if b == 0 {
			name = "NUL character"
		}
		r.Stop(placeAt(r.text, i), "is this a text file? ask for it in AGS4", "%s", name)
		return false
	}
	return true
}

// placeAt is the place of byte i of the text.
func placeAt(text []byte, i int) profile.Place {
	s := scanner{text: text[:i], line: 1}
	for s.off < len(s.text) {
		if isLineEnd(s.text[s.off]) {
			s.lineEnd()
			continue
		}
		s.off++
	}
	return s.place(i)
}
