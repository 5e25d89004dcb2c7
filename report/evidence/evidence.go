// Package evidence is what a report.pdf carries beside its pages: the
// notebook, every input file exactly as it was read, results.json and a
// manifest of them all; and the reader that takes them out of a PDF that a
// stranger sent.
//
// The files are ordinary attachments of the PDF (ISO 32000-1, 7.11.4), so any
// PDF program shows and saves them. They are added behind a finished PDF, and
// the manifest holds the digest of everything before them as well: the pages
// themselves cannot be changed unseen. Nothing is signed: whoever rewrites
// the pages, the files and the manifest together makes another report, which
// a review then recomputes like any other.
//
// The reader is our own, for the part of PDF that a report and what common
// programs make of it when they save it again need: cross-reference tables
// and streams, object streams, Flate, name trees, and the text of pages whose
// fonts have a table to Unicode. Two libraries were tried on strangers' files
// first. github.com/pdfcpu/pdfcpu v0.15.0 took more than 1 GiB and 10 s for a
// packed GiB of zeros, and 334 MiB of module cache. github.com/ledongthuc/pdf
// of 2026-09-07 panicked at many a flipped bit, and its package
// init took 5 ms of every command. Here everything that a file can ask for
// comes out of a budget, and nothing is read that is not needed.
package evidence

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"io/fs"
	"path"
	"strconv"
	"strings"
)

// Schema is the version of manifest.json. It grows when a field changes its
// meaning or goes away, not when one is added.
const Schema = 1

// The names that are ours among the attachments. An input file cannot have
// one of them.
const (
	ManifestName = "manifest.json"
	ResultsName  = "results.json"
)

// Role is what a file was to the report.
type Role string

// The roles.
const (
	Notebook  Role = "notebook"
	Profile   Role = "profile"    // a file of velocities
	CodeTable Role = "code table" // a jurisdiction's own table
	Image     Role = "image"
	Results   Role = "results"
)

// Manifest is manifest.json.
type Manifest struct {
	Schema  int     `json:"schema"`
	Version string  `json:"version"` // of the program: "shearbook 1.0.0"
	Command string  `json:"command"` // that made the report, without folders
	Options Options `json:"options"`
	Files   []Entry `json:"files"` // the notebook, the inputs in the order they were read, results.json
	Pages   Pages   `json:"pages"`
}

// Options are the choices a report was made with, those of the notebook and
// those that flags put over them.
type Options struct {
	Units       string `json:"units"`            // "SI" or "US", printed in
	Paper       string `json:"paper"`            // "A4" or "Letter"
	Extend      string `json:"extend,omitempty"` // the relation that carries a short profile on; "" for none
	WithoutData bool   `json:"without_data"`     // the profile files are withheld
}

// Entry is one file of a manifest.
type Entry struct {
	Name     string `json:"name"` // below the notebook's folder, with forward slashes, as the notebook names it
	Role     Role   `json:"role"`
	SHA256   string `json:"sha256"` // lower-case hexadecimal
	Size     int64  `json:"size"`   // bytes
	Withheld bool   `json:"withheld,omitempty"`

	// Attached is the name of the attachment where it is not Name: an
	// attachment lies in no folder, and programs that save attachments refuse
	// or lose names with slashes.
	Attached string `json:"attached,omitempty"`
}

// AttachedAs is the name of the entry's attachment.
func (e Entry) AttachedAs() string {
	if e.Attached != "" {
		return e.Attached
	}
	return e.Name
}

// Pages is the PDF before the attachments were added: the first Size bytes
// of the file.
type Pages struct {
	SHA256 string `json:"sha256"`
	Size   int64  `json:"size"`
}

// File is one file with its bytes.
type File struct {
	Name string
	Role Role // "" of an attachment that no manifest lists
	Data []byte
}

// Bundle is what a report.pdf is to carry.
type Bundle struct {
	Manifest Manifest // Pages is stated when they are written
	Files    []File   // those of the manifest, in its order, the withheld ones as well
}

// Reserved reports whether a name is one of ours among the attachments, and
// so cannot be an input's.
func Reserved(name string) bool { return name == ManifestName || name == ResultsName }

// Evidence is what Read takes out of a PDF.
type Evidence struct {
	Manifest Manifest
	Files    []File   // every attachment but the manifest, in the manifest's order, then those it does not list in the order of their names
	Pages    []Page   // the text of the pages
	Doubled  []string // names that more than one attachment has; Files holds the first

	unlisted  int  // of Files, at the end
	samePages bool // byte for byte those the manifest was made for
	resaved   bool // the file was saved again, or something was added behind it
}

// File returns an attachment, and false if there is none of that name.
func (e *Evidence) File(name string) (File, bool) {
	for _, f := range e.Files {
		if f.Name == name {
			return f, true
		}
	}
	return File{}, false
}

// Of returns the attachments of one role in the manifest's order.
func (e *Evidence) Of(role Role) []File {
	var files []File
	for _, f := range e.Files {
		if f.Role == role {
			files = append(files, f)
		}
	}
	return files
}

// ReadFile returns the bytes of an attachment, named as a notebook would name
// a file in its folder; it fits notebook.Options.ReadFile. The error is
// fs.ErrNotExist, for names that lead out of the folder as well.
func (e *Evidence) ReadFile(name string) ([]byte, error) {
	for _, n := range []string{Clean(name), Clean(strings.ReplaceAll(name, `\`, "/"))} {
		if f, ok := e.File(n); ok && fs.ValidPath(n) {
			return f.Data, nil
		}
	}
	return nil, fs.ErrNotExist
}

// Clean returns the name under which a file that a notebook names is listed
// and attached: the shortest path that means the same.
func Clean(name string) string { return path.Clean(name) }

// Digest returns the SHA-256 of data in lower-case hexadecimal.
func Digest(data []byte) string {
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:])
}

// List lists files. Those that lie in folders are attached under a name in
// which a hyphen stands for each slash, with a number where another file has
// that name.
func List(files []File) []Entry {
	taken := map[string]bool{ManifestName: true}
	for _, f := range files {
		taken[f.Name] = true
	}
	entries := make([]Entry, 0, len(files))
	for _, f := range files {
		e := Entry{Name: f.Name, Role: f.Role, SHA256: Digest(f.Data), Size: int64(len(f.Data))}
		if strings.Contains(f.Name, "/") {
			e.Attached = unused(taken, strings.ReplaceAll(f.Name, "/", "-"))
		}
		entries = append(entries, e)
	}
	return entries
}

// unused returns a name that is not taken, and takes it.
func unused(taken map[string]bool, name string) string {
	ext := path.Ext(name)
	free := name
	for i := 2; taken[free]; i++ {
		free = strings.TrimSuffix(name, ext) + "-" + strconv.Itoa(i) + ext
	}
	taken[free] = true
	return free
}

// Bytes is the manifest as it is attached: indented JSON with a final
// newline.
func (m Manifest) Bytes() []byte {
	var b bytes.Buffer
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	if err := enc.Encode(m); err != nil {
		panic(err) // a manifest is plain strings and numbers
	}
	return b.Bytes()
}
