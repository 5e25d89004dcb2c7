package open

import "bytes"

// kind is a kind of file that is known by how it begins.
type kind struct {
	begins string
	what   string
	hint   string
}

const (
	hintTable = "export the layers as CSV with the columns top, bottom, vs and their units, such as top_m,bottom_m,vs_mps"
	hintText  = "find the layers in it and type or export them as CSV with the columns top, bottom, vs and their units"
)

// zipped is how a zip file begins, and so a spreadsheet (XLSX).
const zipped = "PK\x03\x04"

// binary are kinds whose first bytes are fixed.
var binary = []kind{
	{"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1", "a spreadsheet (XLS) or another file in the old Office format", hintTable},
	{"%PDF-", "a PDF file", hintText},
	{"\x1f\x8b", "a gzip file", "unpack it first"},
	{"\x89PNG\r\n\x1a\n", "a PNG picture", hintText},
	{"\xff\xd8\xff", "a JPEG picture", hintText},
}

// textual are kinds of text, known by what stands before all else.
var textual = []kind{
	{`"GROUP"`, "an AGS4 file", hintTable},
	{`"**PROJ"`, "an AGS file of edition 3 or older", "ask for it in AGS4"},
	{"~V", "a LAS file", hintTable},
	{"~W", "a LAS file", hintTable}, // with its sections out of order, or some missing
	{"~C", "a LAS file", hintTable},
	{"~A", "a LAS file", hintTable},
	{"<", "an XML or HTML file", hintTable},
	{"{", "a JSON file", hintTable},
	{"[", "a JSON file", hintTable},
}

// sniff looks at the first bytes for a kind that is not a table in text.
func sniff(data []byte) (kind, bool) {
	for _, k := range binary {
		if bytes.HasPrefix(data, []byte(k.begins)) {
			return k, true
		}
	}
	text := bytes.TrimLeft(withoutMark(data), " \t\r\n")
	if k, ok := textKind(text); ok {
		return k, true
	}
	if k, ok := textKind(pastComments(text)); ok && k.begins[0] == '~' {
		return k, true
	}
	return kind{}, false
}

// withoutMark is data without a byte order mark. Of a text in UTF-16 it is the
// beginning, without the NULs that letters have there.
func withoutMark(data []byte) []byte {
	const most = 64 << 10
	for _, mark := range []string{"\xff\xfe", "\xfe\xff"} {
		data = bytes.TrimPrefix(data, []byte(mark))
	}
	if len(data) > 1 && (data[0] == 0) != (data[1] == 0) {
		return bytes.ReplaceAll(data[:min(len(data), most)], []byte{0}, nil)
	}
	return bytes.TrimPrefix(data, []byte("\ufeff"))
}

// textKind is the kind whose text begins so, in either case.
func textKind(text []byte) (kind, bool) {
	for _, k := range textual {
		if bytes.HasPrefix(bytes.ToUpper(text[:min(len(text), len(k.begins))]), []byte(k.begins)) {
			return k, true
		}
	}
	return kind{}, false
}

// pastComments is the text after the lines that begin with #, of which LAS
// files may have some above their first section.
func pastComments(text []byte) []byte {
	const most = 100
	for range most {
		if !bytes.HasPrefix(text, []byte("#")) {
			break
		}
		_, text, _ = bytes.Cut(text, []byte("\n"))
		text = bytes.TrimLeft(text, " \t\r\n")
	}
	return text
}
