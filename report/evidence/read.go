package evidence

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"slices"
	"strings"
	"unicode/utf16"
	"unicode/utf8"

	"shearbook/report"
)

// Limits on a report.pdf. Its attachments are unpacked at once, so what is
// held in memory is the file, the attachments, and some MiB of text.
const (
	MaxSize     = 128 << 20 // bytes of the file
	MaxTotal    = 128 << 20 // bytes of its attachments, unpacked
	MaxFiles    = 5_000     // attachments
	maxManifest = 8 << 20   // bytes
)

// Error is why a file cannot be read as a report of ours. Its text says what
// is wrong, Hint what to do next.
type Error struct {
	Text string
	Hint string
}

func (e *Error) Error() string { return e.Text }

func refuse(hint, format string, args ...any) *Error {
	return &Error{fmt.Sprintf(format, args...), hint}
}

// The hints.
const (
	askAgain   = "ask for the report.pdf as shearbook wrote it"
	askAnother = "ask for the file again: it may have been cut off on its way"
)

// Read takes the manifest, the attachments and the text of the pages out of a
// report.pdf. The error is an *Error: no PDF, damaged, encrypted, without a
// manifest, or too large. A PDF that is read may still not match its
// manifest: see Check. Read never panics, writes nothing, and bounds its time
// and memory whatever the file says of itself.
func Read(pdf []byte) (*Evidence, error) {
	if len(pdf) > MaxSize {
		return nil, refuse("review the files it was made from", "the PDF is larger than %d MiB", MaxSize>>20)
	}
	if !bytes.HasPrefix(pdf, []byte("%PDF-")) {
		return nil, refuse(askAgain, "it is not a PDF")
	}
	f, err := open(pdf)
	if err != nil {
		return nil, explain(err)
	}
	if f.trailer["Encrypt"] != nil {
		return nil, refuse("save it without a password, or "+askAgain, "the PDF is encrypted")
	}
	e := &Evidence{}
	if err := e.take(f); err != nil {
		return nil, explain(err)
	}
	if e.Pages, err = f.pages(); err != nil {
		return nil, explain(err)
	}
	e.samePages = e.Manifest.Pages.holds(f)
	e.resaved = !e.samePages && e.Manifest.Pages.rewritten(pdf)
	return e, nil
}

// ReadPages takes the text of the pages alone out of a PDF that need not be a
// report of ours. The error is that of Read.
func ReadPages(pdf []byte) ([]Page, error) {
	if len(pdf) > MaxSize || !bytes.HasPrefix(pdf, []byte("%PDF-")) {
		return nil, refuse(askAgain, "it is not a PDF of at most %d MiB", MaxSize>>20)
	}
	f, err := open(pdf)
	if err != nil {
		return nil, explain(err)
	}
	if f.trailer["Encrypt"] != nil {
		return nil, refuse("save it without a password, or "+askAgain, "the PDF is encrypted")
	}
	pages, err := f.pages()
	if err != nil {
		return nil, explain(err)
	}
	return pages, nil
}

// rewritten reports whether a file looks like the pages saved again by
// another program, or added to behind their end, and not like the same file
// with some of its bytes changed in their place: then the pages still end
// where they ended, and are others.
func (p Pages) rewritten(pdf []byte) bool {
	if p.Size <= 0 || p.Size > int64(len(pdf)) {
		return true
	}
	first := pdf[:p.Size]
	return Digest(first) == p.SHA256 || !bytes.HasSuffix(bytes.TrimRight(first, "\r\n"), []byte("%%EOF"))
}

// explain makes an Error of what went wrong inside.
func explain(err error) error {
	var known *Error
	switch {
	case errors.As(err, &known):
		return known
	case errors.Is(err, errDamaged):
		return refuse(askAnother, "the PDF cannot be read: %v", err)
	}
	return refuse(askAgain, "the PDF cannot be read: %v", err)
}

// holds reports whether the pages of a file are those of the manifest: its
// first bytes have the digest, and what was added behind them changes no
// object of theirs.
func (p Pages) holds(f *file) bool {
	if p.Size <= 0 || p.Size > int64(len(f.data)) || Digest(f.data[:p.Size]) != p.SHA256 {
		return false
	}
	base, err := open(f.data[:p.Size])
	return err == nil && f.same(base)
}

// take takes the attachments and the manifest.
func (e *Evidence) take(f *file) error {
	var manifest []byte
	found := false
	seen := map[string]bool{}
	err := f.attachments(func(name string, data []byte) {
		switch {
		case seen[name]:
			if !slices.Contains(e.Doubled, name) {
				e.Doubled = append(e.Doubled, name)
			}
		case name == ManifestName:
			manifest, found = data, true
		default:
			e.Files = append(e.Files, File{Name: name, Data: data})
		}
		seen[name] = true
	})
	switch {
	case err != nil:
		return err
	case !found:
		return refuse(askAgain, "the PDF carries no %s: it is not a report of shearbook, or lost its attachments when it was printed again", ManifestName)
	}
	if err := e.readManifest(manifest); err != nil {
		return err
	}
	e.arrange()
	return nil
}

func (e *Evidence) readManifest(data []byte) error {
	if len(data) > maxManifest {
		return refuse(askAgain, "%s is larger than %d MiB", ManifestName, maxManifest>>20)
	}
	if err := json.Unmarshal(data, &e.Manifest); err != nil {
		return refuse(askAgain, "%s cannot be read: %s", ManifestName, report.Visible(strings.TrimPrefix(err.Error(), "json: ")))
	}
	switch m := e.Manifest; {
	case m.Schema > Schema:
		return refuse("review it with that version", "%s has schema %d, and this version reads %d: it was written by a newer one", ManifestName, m.Schema, Schema)
	case m.Schema < 1:
		return refuse(askAgain, "%s states no schema: it is not one of shearbook", ManifestName)
	case len(m.Files) > MaxFiles:
		return refuse(askAgain, "%s lists more than %d files", ManifestName, MaxFiles)
	}
	return nil
}

// arrange puts the files into the manifest's order and gives them its names
// and roles.
func (e *Evidence) arrange() {
	at := map[string]int{}
	for i, f := range e.Files {
		at[f.Name] = i
	}
	var listed, rest []File
	for _, entry := range e.Manifest.Files {
		i, ok := at[entry.AttachedAs()]
		if !ok {
			continue
		}
		listed = append(listed, File{entry.Name, entry.Role, e.Files[i].Data})
		delete(at, entry.AttachedAs())
	}
	for _, f := range e.Files {
		if _, left := at[f.Name]; left {
			rest = append(rest, f)
		}
	}
	slices.SortFunc(rest, func(a, b File) int { return strings.Compare(a.Name, b.Name) })
	e.Files, e.unlisted = append(listed, rest...), len(rest)
	slices.Sort(e.Doubled)
}

// attachments hands over every file of the name tree of attached files.
func (f *file) attachments(take func(name string, data []byte)) error {
	root, ok := f.resolve(f.trailer["Root"]).(dict)
	if !ok {
		return damaged("it has no catalog")
	}
	names, _ := f.resolve(root["Names"]).(dict)
	w := &nameWalk{file: f, take: take, seen: map[int]bool{}}
	return w.node(names["EmbeddedFiles"], 0)
}

// nameWalk walks a name tree (ISO 32000-1, 7.9.6).
type nameWalk struct {
	*file
	take  func(name string, data []byte)
	seen  map[int]bool
	count int
}

func (w *nameWalk) node(o object, depth int) error {
	if r, ok := o.(ref); ok {
		if w.seen[r.number] {
			return damaged("the tree of its attachments leads in a circle")
		}
		w.seen[r.number] = true
	}
	if depth > maxDepth {
		return damaged("the tree of its attachments is too deep")
	}
	o, err := w.need(o)
	if err != nil {
		return err
	}
	node, _ := o.(dict)
	pairs, _ := w.resolve(node["Names"]).(list)
	for i := 0; i+1 < len(pairs); i += 2 {
		if w.count++; w.count > MaxFiles {
			return refuse(askAgain, "the PDF carries more than %d attachments", MaxFiles)
		}
		if err := w.attachment(pairs[i], pairs[i+1]); err != nil {
			return err
		}
	}
	kids, _ := w.resolve(node["Kids"]).(list)
	for _, kid := range kids {
		if err := w.node(kid, depth+1); err != nil {
			return err
		}
	}
	return nil
}

// need resolves a reference and says what is wrong where resolve is silent.
func (f *file) need(o object) (object, error) {
	if r, ok := o.(ref); ok {
		return f.load(r.number)
	}
	return o, nil
}

// attachment hands over one attachment.
func (w *nameWalk) attachment(key, value object) error {
	o, err := w.need(value)
	if err != nil {
		return err
	}
	spec, ok := o.(dict)
	if !ok {
		return damaged("an attachment has no description")
	}
	label, ok := w.resolve(spec["UF"]).(text)
	if !ok {
		if label, ok = w.resolve(spec["F"]).(text); !ok {
			label, _ = w.resolve(key).(text)
		}
	}
	name := decode(label)
	shown := report.Visible(name)
	embedded, _ := w.resolve(spec["EF"]).(dict)
	content := embedded["F"]
	if content == nil {
		content = embedded["UF"]
	}
	if o, err = w.need(content); err != nil {
		return fmt.Errorf("attachment %s: %w", shown, err)
	}
	st, ok := o.(*stream)
	if !ok {
		return damaged("attachment %s has no content", shown)
	}
	data, err := w.unpack(st, &w.budget.files)
	if errors.Is(err, errTooLarge) {
		return refuse(askAgain, "the attachments of the PDF unpack to more than %d MiB", MaxTotal>>20)
	}
	if err != nil {
		return fmt.Errorf("attachment %s: %w", shown, err)
	}
	w.take(name, data)
	return nil
}

// decode returns a text string of a PDF as UTF-8 (ISO 32000-1, 7.9.2.2).
// Where it is in PDFDocEncoding, what is not ASCII is read as Latin-1.
func decode(t text) string {
	if rest, ok := strings.CutPrefix(string(t), "\xFE\xFF"); ok {
		return fromUTF16(rest)
	}
	if rest, ok := strings.CutPrefix(string(t), "\xEF\xBB\xBF"); ok && utf8.ValidString(rest) {
		return rest
	}
	var b strings.Builder
	for i := range len(t) {
		b.WriteRune(rune(t[i]))
	}
	return b.String()
}

func fromUTF16(s string) string {
	units := make([]uint16, 0, len(s)/2)
	for i := 0; i+1 < len(s); i += 2 {
		units = append(units, uint16(s[i])<<8|uint16(s[i+1]))
	}
	return string(utf16.Decode(units))
}
