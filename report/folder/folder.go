// Package folder makes a report into a folder of files and writes it whole
// or not at all.
package folder

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/evidence"
	"shearbook/report/pdf"
)

// File is one file of a report's folder.
type File struct {
	Name string // with forward slashes, below the folder
	Data []byte
}

// The files that a report's folder holds, beside figures/ and images/.
const (
	Markdown = "report.md"
	HTML     = "report.html"
	PDF      = "report.pdf"
	Results  = "results.json"
	Figures  = "figures"
	Images   = "images"
)

// The files of a review's memo, beside figures/ and images/.
const (
	MemoMarkdown = "memo.md"
	MemoHTML     = "memo.html"
	MemoPDF      = "memo.pdf"
	MemoResults  = "memo.json"
)

// Files prints a document and its results in every format. The error is a
// *pdf.MissingGlyphs where the fonts cannot print a character.
func Files(d *report.Document, results []report.Result, opt pdf.Options) ([]File, error) {
	return files(d, results, func(w io.Writer) error { return pdf.Write(w, d, opt) })
}

// WithEvidence does what Files does, for a report whose PDF carries the files
// it was made from, results.json and a manifest of them.
func WithEvidence(d *report.Document, results []report.Result, b evidence.Bundle, opt pdf.Options) ([]File, error) {
	return files(d, results, func(w io.Writer) error { return writePDF(w, d, b, opt) })
}

func files(d *report.Document, results []report.Result, writePDF func(io.Writer) error) ([]File, error) {
	var files []File
	add := func(name string, write func(io.Writer) error) error {
		var b bytes.Buffer
		if err := write(&b); err != nil {
			return err
		}
		files = append(files, File{name, b.Bytes()})
		return nil
	}
	err := errors.Join(
		add(Markdown, func(w io.Writer) error { return report.Markdown(w, d, report.MarkdownOptions{}) }),
		add(HTML, func(w io.Writer) error { return report.HTML(w, d, report.HTMLOptions{}) }),
		add(PDF, writePDF),
		add(Results, func(w io.Writer) error { return report.WriteResults(w, results) }),
	)
	for b := range d.All() {
		switch b := b.(type) {
		case *report.Figure:
			err = errors.Join(err, add(Figures+"/"+b.Name+".svg", func(w io.Writer) error {
				return b.Picture.SVG(w, report.PlainText(b.Caption), b.Alt)
			}))
		case *report.Image:
			files = append(files, File{Images + "/" + b.Name, b.Data})
		}
	}
	return files, err
}

// Write puts the files into the folder dir. They are written beside it and
// moved into place together, so that a run that fails or is killed leaves
// what was there before. A folder that holds anything but an earlier report
// is refused.
func Write(dir string, files []File) (err error) {
	dir = filepath.Clean(dir)
	if err := replaceable(dir); err != nil {
		return err
	}
	parent := filepath.Dir(dir)
	if err := os.MkdirAll(parent, 0o777); err != nil {
		return fmt.Errorf("%s cannot be made: %w", parent, profile.FileError(err))
	}
	fresh, err := os.MkdirTemp(parent, "."+filepath.Base(dir)+"-*")
	if err != nil {
		return fmt.Errorf("%s cannot be written in: %w", parent, profile.FileError(err))
	}
	defer os.RemoveAll(fresh)
	for _, f := range files {
		if err := writeFile(fresh, f); err != nil {
			return fmt.Errorf("%s cannot be written: %w", filepath.Join(dir, filepath.FromSlash(f.Name)), profile.FileError(err))
		}
	}
	if err := os.Chmod(fresh, 0o755); err != nil {
		return fmt.Errorf("%s cannot be made readable: %w", dir, profile.FileError(err))
	}
	return swap(fresh, dir)
}

func writeFile(dir string, f File) error {
	path := filepath.Join(dir, filepath.FromSlash(f.Name))
	if err := os.MkdirAll(filepath.Dir(path), 0o777); err != nil {
		return err
	}
	return os.WriteFile(path, f.Data, 0o666)
}

// replaceable reports whether dir is not there, or holds nothing but what a
// report writes.
func replaceable(dir string) error {
	entries, err := os.ReadDir(dir)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return fmt.Errorf("%s cannot be used as the folder of a report: %w", dir, profile.FileError(err))
	}
	for _, e := range entries {
		switch e.Name() {
		case Markdown, HTML, PDF, Results, Figures, Images,
			MemoMarkdown, MemoHTML, MemoPDF, MemoResults:
		default:
			return fmt.Errorf("%s holds %s, which is not of a report, and would be replaced as a whole", dir, e.Name())
		}
	}
	return nil
}

// swap moves fresh to dir, and what was at dir away.
func swap(fresh, dir string) error {
	old := fresh + ".old"
	err := os.Rename(dir, old)
	if errors.Is(err, fs.ErrNotExist) {
		return moved(os.Rename(fresh, dir), dir)
	}
	if err != nil {
		return moved(err, dir)
	}
	if err := os.Rename(fresh, dir); err != nil {
		return moved(errors.Join(err, os.Rename(old, dir)), dir)
	}
	return os.RemoveAll(old)
}

func moved(err error, dir string) error {
	if err != nil {
		return fmt.Errorf("%s cannot be put in place: %w", dir, profile.FileError(err))
	}
	return nil
}

// NameFor returns the folder of a report that is written beside its source:
// the source's name without its extension, and "-report".
func NameFor(source string) string {
	base := filepath.Base(source)
	return filepath.Join(filepath.Dir(source), strings.TrimSuffix(base, filepath.Ext(base))+"-report")
}
