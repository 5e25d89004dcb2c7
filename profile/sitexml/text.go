package sitexml

import (
	"bytes"
	"strings"
	"unicode/utf8"

	"golang.org/x/text/encoding"
	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"

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

// counter finds the places of offsets that only grow.
type counter struct {
	text []byte
	spot
	seen int
}

func newCounter(text []byte) counter { return counter{text: text, spot: spot{1, 1}} }

// at is the place of offset off. Lines end in LF, CRLF or CR.
func (c *counter) at(off int) spot {
	for c.seen < off {
		part := c.text[c.seen:off]
		i := bytes.IndexAny(part, "\r\n")
		if i < 0 {
			c.column += int32(utf8.RuneCount(part))
			c.seen = off
			break
		}
		end := c.seen + i
		c.seen = end + 1
		if c.text[end] == '\r' && c.seen < len(c.text) && c.text[c.seen] == '\n' {
			if c.seen == off { // between CR and LF
				break
			}
			c.seen++
		}
		c.spot = spot{c.line + 1, 1}
	}
	return c.spot
}

const hintEncoding = "save the file as UTF-8"

// decode turns the bytes into UTF-8: from UTF-16 by its byte order mark, else
// from what the XML declaration names; what is not the UTF-8 that it should
// be is taken for Windows-1252.
func (r *reader) decode(data []byte) ([]byte, bool) {
	label := declared(data)
	var from encoding.Encoding
	switch {
	case bytes.HasPrefix(data, []byte("\xff\xfe")), bytes.HasPrefix(data, []byte("<\x00")):
		r.reading.Encoding, from = "UTF-16LE", unicode.UTF16(unicode.LittleEndian, unicode.UseBOM)
	case bytes.HasPrefix(data, []byte("\xfe\xff")), bytes.HasPrefix(data, []byte("\x00<")):
		r.reading.Encoding, from = "UTF-16BE", unicode.UTF16(unicode.BigEndian, unicode.UseBOM)
	case label == "iso-8859-1" || label == "latin1" || label == "windows-1252":
		r.reading.Encoding, from = "Windows-1252", charmap.Windows1252 // of which the printable ISO 8859-1 is a part
	case label != "" && label != "utf-8" && label != "us-ascii":
		r.stop(spot{1, 1}, hintEncoding, "the encoding %s is not read", profile.Quote(label))
		return nil, false
	case utf8.Valid(data):
		r.reading.Encoding = "UTF-8"
		return bytes.TrimPrefix(data, []byte("\ufeff")), true
	default:
		r.reading.Encoding, from = "Windows-1252", charmap.Windows1252
	}
	text, err := from.NewDecoder().Bytes(data)
	if err != nil {
		r.stop(spot{}, hintEncoding, "the file cannot be read as %s", r.reading.Encoding)
		return nil, false
	}
	return bytes.TrimPrefix(text, []byte("\ufeff")), true
}

// declared is the encoding that the XML declaration names, in lower case.
func declared(data []byte) string {
	head := bytes.TrimPrefix(data, []byte("\ufeff"))
	head, _, found := bytes.Cut(head[:min(len(head), 200)], []byte("?>"))
	if !found || !bytes.HasPrefix(head, []byte("<?xml")) {
		return ""
	}
	_, after, found := bytes.Cut(head, []byte("encoding"))
	after = bytes.TrimLeft(after, " \t\r\n=")
	if !found || len(after) == 0 || after[0] != '"' && after[0] != '\'' {
		return ""
	}
	label, _, _ := bytes.Cut(after[1:], after[:1])
	return strings.ToLower(string(label))
}

// bounded looks through the tags before they are parsed, so that no tag, text
// or comment is larger than may be held, and refuses document type
// declarations.
func (r *reader) bounded(text []byte) bool {
	place := newCounter(text)
	if len(bytes.TrimSpace(text)) == 0 {
		r.stop(spot{}, "", "the file is empty")
		return false
	}
	for off := 0; off < len(text); {
		length := bytes.IndexByte(text[off:], '<')
		if length < 0 {
			length = len(text) - off
		}
		if length > MaxTag {
			r.stop(place.at(off), "", "a text is longer than %d KiB", MaxTag>>10)
			return false
		}
		if off += length; off == len(text) {
			break
		}
		size, problem := tag(text[off:])
		if problem != "" {
			r.stop(place.at(off), hintFor(problem), "%s", problem)
			return false
		}
		off += size
	}
	return true
}

const (
	htmlPage = "<!DOCTYPE html"
	isHTML   = "the file is an HTML page"
)

func hintFor(problem string) string {
	if problem == isHTML {
		return "was it saved from a browser? save the file that the page links to"
	}
	return "remove it"
}

// tag is the length of the tag, comment or section that text begins with, or
// what is wrong with it.
func tag(text []byte) (size int, problem string) {
	kind, end, most := "tag", ">", MaxTag
	switch {
	case bytes.HasPrefix(text, []byte("<!--")):
		kind, end, most = "comment", "-->", MaxComment
	case bytes.HasPrefix(text, []byte("<![CDATA[")):
		kind, end = "text", "]]>"
	case bytes.EqualFold(text[:min(len(text), len(htmlPage))], []byte(htmlPage)):
		return 0, isHTML
	case bytes.HasPrefix(text, []byte("<!")):
		return 0, "a document type declaration is not read"
	}
	size = bytes.Index(text[:min(len(text), most+len(end))], []byte(end))
	if size < 0 {
		if len(text) <= most {
			return len(text), "" // cut off; said by the parser
		}
		return 0, "a " + kind + " is longer than " + kilobytes(most)
	}
	return size + len(end), ""
}

func kilobytes(n int) string {
	if n >= 1<<20 {
		return "1 MiB"
	}
	return "64 KiB"
}
