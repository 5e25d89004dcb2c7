package evidence

import (
	"io/fs"
	"slices"
	"strings"
	"unicode/utf8"

	"shearbook/report"
)

// Kind is a way in which a PDF does not match its own manifest.
type Kind uint8

// The kinds, worst first.
const (
	Altered      Kind = iota // the bytes of an attachment are not those the manifest lists
	Missing                  // listed, not withheld, and not attached
	Misprinted               // the pages print another digest than the manifest lists
	Doubled                  // several attachments, or several lines of the manifest, have one name
	BadName                  // the name leads out of the folder, or holds characters that do not show
	Unlisted                 // attached, and not in the manifest
	PagesAltered             // the pages are not byte for byte those the manifest was made for: changed, or saved again by another program
	NotPrinted               // the pages print no digest of the file
)

// Mismatch is one thing about a PDF that does not match its manifest.
type Mismatch struct {
	Kind    Kind
	Name    string // of the file, as it stands in the PDF; "" where it is about the pages
	Page    int    // of the PDF, from 1; 0 where it is not about one
	Claimed string // the digest that the manifest lists
	Found   string // the digest of what is there, or that the pages print
	Text    string // what is wrong, lower case, without a full stop; names in it are made visible
	Resaved bool   // of altered pages: the file has the marks of having been saved again, or added to, as a whole
}

// Check holds the attachments, the pages and the digests that they print
// against the manifest. The mismatches stand in the order of their kinds,
// those of one kind in the manifest's order.
func (e *Evidence) Check() []Mismatch {
	c := checker{Evidence: e, listed: map[string]bool{}}
	for _, entry := range e.Manifest.Files {
		c.entry(entry)
	}
	for _, f := range e.Files[len(e.Files)-e.unlisted:] {
		c.name(f.Name)
		c.add(Mismatch{Kind: Unlisted, Name: f.Name, Found: Digest(f.Data)}, "is attached, and %s does not list it")
	}
	for _, n := range e.Doubled {
		c.add(Mismatch{Kind: Doubled, Name: n}, "is the name of several attachments; only the first is read")
	}
	c.printed()
	if !e.samePages {
		c.found = append(c.found, Mismatch{Kind: PagesAltered, Claimed: e.Manifest.Pages.SHA256, Resaved: e.resaved,
			Text: "the pages are not byte for byte those that were written with the manifest: they were changed, or another program has saved the file again"})
	}
	slices.SortStableFunc(c.found, func(a, b Mismatch) int { return int(a.Kind) - int(b.Kind) })
	return c.found
}

type checker struct {
	*Evidence
	listed map[string]bool
	found  []Mismatch
}

// add adds a mismatch; text goes on from the name.
func (c *checker) add(m Mismatch, text string) {
	m.Text = report.Visible(m.Name) + " " + strings.Replace(text, "%s", ManifestName, 1)
	c.found = append(c.found, m)
}

// entry holds a line of the manifest against what is attached.
func (c *checker) entry(entry Entry) {
	if c.listed[entry.Name] {
		c.add(Mismatch{Kind: Doubled, Name: entry.Name}, "stands several times in %s")
		return
	}
	c.listed[entry.Name] = true
	c.name(entry.Name)
	if entry.Attached != "" {
		c.name(entry.Attached)
	}
	f, ok := c.taken(entry.Name)
	switch {
	case !ok && !entry.Withheld:
		c.add(Mismatch{Kind: Missing, Name: entry.Name, Claimed: entry.SHA256}, "is listed in %s and not attached")
	case ok && (Digest(f.Data) != entry.SHA256 || int64(len(f.Data)) != entry.Size):
		c.add(Mismatch{Kind: Altered, Name: entry.Name, Claimed: entry.SHA256, Found: Digest(f.Data)}, "is not what %s lists: its bytes have been changed")
	}
}

// taken returns the attachment of a line of the manifest.
func (c *checker) taken(name string) (File, bool) {
	for _, f := range c.Files[:len(c.Files)-c.unlisted] {
		if f.Name == name {
			return f, true
		}
	}
	return File{}, false
}

// name checks that a name is one of a file in the notebook's folder, and can
// be read as it is.
func (c *checker) name(n string) {
	switch {
	case !fs.ValidPath(n) || n == "." || strings.Contains(n, `\`) || len(n) > 1 && n[1] == ':':
		c.add(Mismatch{Kind: BadName, Name: n}, "is not the name of a file in the notebook's folder")
	case report.Visible(n) != n || strings.ContainsAny(n, "\n\t") || !utf8.ValidString(n):
		c.add(Mismatch{Kind: BadName, Name: n}, "is a name with characters that do not show")
	}
}

// printed holds the digests on the pages against the manifest. A notebook may
// print digests of files that are not the report's; one is held to be wrong
// only where that of a listed file is nowhere.
func (c *checker) printed() {
	on := map[string]bool{}        // digests
	behind := map[string]printed{} // by what stands before them on their line, the last
	for _, p := range c.Pages {
		var begun piece
		for _, l := range p.Lines {
			found := digestsIn(l.Text)
			before, _, _ := strings.Cut(l.Text, "\t")
			if whole, d := begun.goOn(before, l.Text); d != "" {
				before, found = whole, append(found, d)
			}
			for _, d := range found {
				on[d] = true
			}
			if len(found) > 0 {
				behind[strings.TrimSpace(before)] = printed{p.Number, found[0]}
			}
		}
	}
	for _, entry := range c.Manifest.Files {
		if on[entry.SHA256] {
			continue
		}
		if p, ok := behind[report.Visible(entry.Name)]; ok {
			c.add(Mismatch{Kind: Misprinted, Name: entry.Name, Page: p.page, Claimed: entry.SHA256, Found: p.digest},
				"has another digest in %s than on the page that prints one for it")
			continue
		}
		c.add(Mismatch{Kind: NotPrinted, Name: entry.Name, Claimed: entry.SHA256}, "is listed in %s, and no page prints its digest")
	}
}

type printed struct {
	page   int
	digest string
}

// piece is the beginning of a digest that its column was too narrow for.
type piece struct{ before, digits string }

// goOn takes the last cell of a line where it may be a piece of a digest. It
// returns the digest that is whole with it, and what stands before the first
// piece of it.
func (p *piece) goOn(before, line string) (string, string) {
	cell := line[strings.LastIndexByte(line, '\t')+1:]
	const least = 16 // of the first piece: a number is shorter
	switch n := hexRun(cell); {
	case n != len(cell) || n == 0 || n >= 64:
		*p = piece{}
	case p.digits != "" && len(p.digits)+n <= 64:
		p.digits += cell
	case n >= least:
		*p = piece{before, cell}
	default:
		*p = piece{}
	}
	if len(p.digits) < 64 {
		return "", ""
	}
	whole := *p
	*p = piece{}
	return whole.before, whole.digits
}

// digestsIn returns the SHA-256 digests that a line prints: runs of exactly
// 64 lower-case hexadecimal digits.
func digestsIn(line string) []string {
	var found []string
	for line != "" {
		n := hexRun(line)
		if n == 64 {
			found = append(found, line[:n])
		}
		line = line[min(n+1, len(line)):]
	}
	return found
}

// hexRun counts the lower-case hexadecimal digits at the front of text.
func hexRun(text string) int {
	n := 0
	for n < len(text) && ('0' <= text[n] && text[n] <= '9' || 'a' <= text[n] && text[n] <= 'f') {
		n++
	}
	return n
}
