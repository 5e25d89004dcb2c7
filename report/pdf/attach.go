package pdf

import (
	"bytes"
	"crypto/md5"
	"errors"
	"fmt"
	"slices"
	"strings"
	"unicode/utf16"
)

// Attachment is a file that a PDF carries beside its pages.
type Attachment struct {
	Name        string // unique among the attachments, with forward slashes
	MIME        string // "text/csv"; "" leaves it unsaid
	Description string
	Relation    Relation
	Data        []byte
}

// Relation is what an attachment is to the document (ISO 32000-2, 7.11.3,
// AFRelationship).
type Relation string

// The relations.
const (
	Source     Relation = "Source"     // the document was made from it
	Data       Relation = "Data"       // the data behind what the pages show
	Supplement Relation = "Supplement" // the zero value: something more
)

// Attach returns a document that Write has written with files attached. The
// bytes of the document stay as they are, in front: the attachments are an
// incremental update behind them (ISO 32000-1, 7.5.6), so the digest of the
// pages can be among what is attached. (fpdf's own attachments are written
// before the pages, whose numbers the links and the outline take for
// granted.) The same input gives the same bytes. The file grows by the
// compressed attachments and some 600 bytes each.
func Attach(document []byte, files []Attachment) ([]byte, error) {
	if len(files) == 0 {
		return document, nil
	}
	u, err := newUpdate(document)
	if err != nil {
		return nil, err
	}
	files = slices.Clone(files)
	slices.SortFunc(files, func(a, b Attachment) int { return strings.Compare(textString(a.Name), textString(b.Name)) })
	var names, all strings.Builder
	for i, f := range files {
		if i > 0 && f.Name == files[i-1].Name {
			return nil, fmt.Errorf("two attachments are called %q", f.Name)
		}
		n := u.attach(f)
		fmt.Fprintf(&names, "%s %d 0 R\n", textString(f.Name), n)
		fmt.Fprintf(&all, "%d 0 R ", n)
	}
	u.object(u.root, "<<\n"+u.catalog+"/Version /1.7\n/Names <</EmbeddedFiles <</Names [\n"+names.String()+"]>>>>\n/AF ["+strings.TrimSpace(all.String())+"]\n>>")
	return u.finish(), nil
}

// update is what is put behind a finished document.
type update struct {
	out          bytes.Buffer
	size         int   // objects of the document and the update
	fresh        int   // the first object that is the update's own
	offsets      []int // of the objects from fresh on
	root, info   int   // objects
	rootOffset   int
	previousXref int
	catalog      string // of the document, without its names
}

var errNotOurs = errors.New("pdf: what attachments are to be added to is not what Write has written")

// newUpdate reads the end of a document as fpdf writes it.
func newUpdate(document []byte) (*update, error) {
	xref, err := xrefOf(document)
	if err != nil {
		return nil, errNotOurs
	}
	u := &update{previousXref: xref}
	u.out.Write(document)
	trailer := document[xref:]
	i := bytes.Index(trailer, []byte("trailer\n"))
	if i < 0 {
		return nil, errNotOurs
	}
	if _, err := fmt.Sscanf(string(trailer[i:]), "trailer\n<<\n/Size %d\n/Root %d 0 R\n/Info %d 0 R", &u.size, &u.root, &u.info); err != nil || bytes.Contains(trailer[i:], []byte("/Prev")) {
		return nil, errNotOurs
	}
	u.fresh = u.size
	_, catalog, ok := bytes.Cut(document[:xref], fmt.Appendf(nil, "\n%d 0 obj\n<<\n", u.root))
	if !ok {
		return nil, errNotOurs
	}
	own, _, ok := bytes.Cut(catalog, []byte("/Names <<"))
	if !ok {
		return nil, errNotOurs
	}
	u.catalog = string(own)
	return u, nil
}

// object writes an object and notes where.
func (u *update) object(n int, body string) {
	if n == u.root {
		u.rootOffset = u.out.Len()
	} else {
		u.offsets = append(u.offsets, u.out.Len())
	}
	fmt.Fprintf(&u.out, "%d 0 obj\n%s\nendobj\n", n, body)
}

// next is the number of the next object of the update's own.
func (u *update) next() int {
	u.size++
	return u.size - 1
}

// attach writes an attachment, its stream and its description, and returns
// the number of the latter.
func (u *update) attach(f Attachment) int {
	stream, spec := u.next(), u.next()
	packed := pack(f.Data)
	subtype := ""
	if f.MIME != "" {
		subtype = " /Subtype /" + nameEscape(f.MIME)
	}
	u.object(stream, fmt.Sprintf("<</Type /EmbeddedFile%s /Filter /FlateDecode /Length %d /Params <</Size %d /CheckSum <%X>>>>>\nstream\n%s\nendstream",
		subtype, len(packed), len(f.Data), md5.Sum(f.Data), packed))
	relation := f.Relation
	if relation == "" {
		relation = Supplement
	}
	description := ""
	if f.Description != "" {
		description = " /Desc " + textString(f.Description)
	}
	name := textString(f.Name)
	u.object(spec, fmt.Sprintf("<</Type /Filespec /F %s /UF %s /EF <</F %d 0 R /UF %d 0 R>> /AFRelationship /%s%s>>",
		name, name, stream, stream, relation, description))
	return spec
}

// finish writes the table of the new objects and returns the whole file.
func (u *update) finish() []byte {
	xref := u.out.Len()
	fmt.Fprintf(&u.out, "xref\n%d 1\n%010d 00000 n \n%d %d\n", u.root, u.rootOffset, u.fresh, len(u.offsets))
	for _, at := range u.offsets {
		fmt.Fprintf(&u.out, "%010d 00000 n \n", at)
	}
	fmt.Fprintf(&u.out, "trailer\n<<\n/Size %d\n/Root %d 0 R\n/Info %d 0 R\n/Prev %d\n>>\nstartxref\n%d\n%%%%EOF\n",
		u.size, u.root, u.info, u.previousXref, xref)
	return u.out.Bytes()
}

// textString is text as a string of a PDF: as it stands where it is plain
// ASCII, otherwise as UTF-16 with a byte order mark.
func textString(text string) string {
	if plainASCII(text) {
		return "(" + strings.NewReplacer(`\`, `\\`, "(", `\(`, ")", `\)`).Replace(text) + ")"
	}
	var b strings.Builder
	b.WriteString("<FEFF")
	for _, c := range utf16.Encode([]rune(text)) {
		fmt.Fprintf(&b, "%04X", c)
	}
	b.WriteString(">")
	return b.String()
}

// nameEscape writes what a name of a PDF does not take as #XX.
func nameEscape(name string) string {
	var b strings.Builder
	for i := range len(name) {
		if c := name[i]; c <= ' ' || c >= 0x7F || strings.IndexByte("#/()<>[]{}%", c) >= 0 {
			fmt.Fprintf(&b, "#%02X", c)
		} else {
			b.WriteByte(c)
		}
	}
	return b.String()
}
