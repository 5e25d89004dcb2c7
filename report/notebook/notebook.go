// Package notebook turns a notebook, a Markdown file with workings in it,
// into a report.Document and the results behind it.
//
// A notebook is YAML front matter that names the project, the site, the
// code, the units and the profiles, and Markdown below it. A fenced block
// whose info string is the name of a working is evaluated and replaced by
// its result; {{ … }} in prose is an expression over named results;
// everything else passes through. See Workings for the workings and Header
// for the front matter.
package notebook

import (
	"bytes"
	"strings"
	"unicode/utf8"

	"shearbook/profile"
)

// MaxSize is the largest notebook that is read, in bytes.
const MaxSize = 4 << 20

// Notebook is a notebook before it is evaluated.
type Notebook struct {
	File   string // as the user named it
	Source []byte
	Header Header

	body  []byte // the Markdown below the front matter
	lines int    // of the front matter, fences included
}

// Parse reads a notebook. The error is a profile.Faults.
func Parse(file string, source []byte) (*Notebook, error) {
	return parse(file, source, false)
}

// parse reads a notebook; own says that it need not name a profile.
func parse(file string, source []byte, own bool) (*Notebook, error) {
	f := &faultList{file: file}
	nb := &Notebook{File: file, Source: source}
	switch {
	case len(source) > MaxSize:
		f.add(profile.Place{File: file}, "keep data in files of their own and name them under profiles:", "the notebook is larger than %d MiB", MaxSize>>20)
	case !utf8.Valid(source):
		line, column := place(source, invalid(source))
		f.add(profile.Place{File: file, Line: line, Column: column}, "save the notebook as UTF-8", "the notebook is not UTF-8 text")
	}
	if len(f.faults) > 0 {
		return nil, f.faults
	}
	front := ""
	front, nb.body, nb.lines = split(source)
	if nb.lines == 0 {
		f.add(profile.Place{File: file, Line: 1}, "begin it with a line ---, `profiles:` and `code:`, and a second line ---; `shearbook new DIR` writes an example",
			"the notebook has no front matter")
		return nil, f.faults
	}
	nb.Header = parseHeader(f, front, own)
	return nb, f.faults.Err()
}

// split cuts a notebook into its front matter and its body, and counts the
// lines before the body; 0 if there is no front matter.
func split(source []byte) (front string, body []byte, lines int) {
	source = bytes.TrimPrefix(source, []byte("\ufeff"))
	rest, found := bytes.CutPrefix(source, []byte("---"))
	if !found || len(bytes.TrimSpace(firstLine(rest))) > 0 {
		return "", source, 0
	}
	at := len(source) - len(rest) + len(firstLine(rest))
	lines = 1
	begin := at
	for at < len(source) {
		line := firstLine(source[at:])
		lines++
		if text := strings.TrimRight(string(line), " \t\r\n"); text == "---" || text == "..." {
			return string(source[begin:at]), source[at+len(line):], lines
		}
		at += len(line)
	}
	return "", source, 0
}

// firstLine returns b up to and with its first newline.
func firstLine(b []byte) []byte {
	if i := bytes.IndexByte(b, '\n'); i >= 0 {
		return b[:i+1]
	}
	return b
}

// place returns the line and the column in characters, both from 1, of a
// byte offset.
func place(source []byte, offset int) (line, column int) {
	before := source[:min(offset, len(source))]
	line = 1 + bytes.Count(before, []byte("\n"))
	return line, 1 + utf8.RuneCount(before[bytes.LastIndexByte(before, '\n')+1:])
}

// invalid returns the offset of the first byte that is not UTF-8.
func invalid(source []byte) int {
	for i := 0; i < len(source); {
		r, n := utf8.DecodeRune(source[i:])
		if r == utf8.RuneError && n == 1 {
			return i
		}
		i += n
	}
	return len(source)
}

// at returns the place in the file of a byte offset into the body.
func (nb *Notebook) at(offset int) profile.Place {
	if offset < 0 {
		return profile.Place{File: nb.File}
	}
	line, column := place(nb.body, offset)
	return profile.Place{File: nb.File, Line: line + nb.lines, Column: column}
}

// Find returns the place of the first appearance of r in the notebook, and
// false if it is not there.
func (nb *Notebook) Find(r rune) (profile.Place, bool) {
	i := bytes.IndexRune(nb.Source, r)
	if i < 0 {
		return profile.Place{File: nb.File}, false
	}
	line, column := place(nb.Source, i)
	return profile.Place{File: nb.File, Line: line, Column: column}, true
}
