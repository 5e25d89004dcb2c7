package review

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"os"
	"path"
	"path/filepath"
	"slices"
	"strings"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/report/folder"
	"shearbook/report/notebook"
)

// Options is what a reviewer says of a submission that it does not say
// itself. The zero value takes the submission as it is.
type Options struct {
	Read open.Options // how to read a profile file

	// Claim is what is claimed of a profile file; its Profile names the one,
	// and may be "" where the file holds one. Of other submissions it is not
	// looked at.
	Claim Claim
}

// Open reads a submission: a folder, a notebook in it, a report.pdf, a table
// of claims or a profile file. Nothing outside its folder is read. The error
// says that there is no such file or that it is no submission; what is wrong
// inside one is a fault of the submission.
func Open(name string, opt Options) (*Submission, error) {
	dir, base := filepath.Dir(name), filepath.Base(name)
	info, err := os.Stat(name)
	if err != nil {
		return nil, fmt.Errorf("%s cannot be read: %w", name, profile.FileError(err))
	}
	if info.IsDir() {
		dir, base = name, ""
	}
	root, err := os.OpenRoot(dir)
	if err != nil {
		return nil, fmt.Errorf("%s cannot be read: %w", name, profile.FileError(err))
	}
	defer root.Close() // opened for reading
	f := &intake{sub: &Submission{Name: filepath.Base(filepath.Clean(name))}, read: readerOf(root)}
	if base == "" {
		return f.sub, f.folder(root, "")
	}
	return f.sub, f.file(root, base, opt)
}

// readerOf reads ordinary files of a folder, and follows no link out of it.
func readerOf(root *os.Root) func(string) ([]byte, error) {
	return func(name string) ([]byte, error) {
		if name = clean(name); name == "" || name == "." {
			return nil, errors.New("the name leads out of the submission")
		}
		name = filepath.FromSlash(name)
		info, err := root.Stat(name)
		switch {
		case err != nil:
			return nil, err
		case info.IsDir():
			return nil, errors.New("it is a folder")
		case !info.Mode().IsRegular():
			return nil, errors.New("it is no ordinary file")
		case info.Size() > MaxBytes:
			return nil, fmt.Errorf("it is larger than %d MiB", MaxBytes>>20)
		}
		file, err := root.Open(name)
		if err != nil {
			return nil, err
		}
		defer file.Close() // opened for reading
		return io.ReadAll(io.LimitReader(file, MaxBytes+1))
	}
}

// file reads a submission that is one file.
func (f *intake) file(root *os.Root, base string, opt Options) error {
	data, err := f.read(base)
	if err != nil {
		return fmt.Errorf("%s cannot be read: %w", base, profile.FileError(err))
	}
	ext := strings.ToLower(filepath.Ext(base))
	switch {
	case bytes.HasPrefix(data, []byte("%PDF-")) || ext == ".pdf":
		return f.pdf(base, data)
	case ext == ".md" || ext == ".markdown" || bytes.HasPrefix(bytes.TrimPrefix(data, []byte("\ufeff")), []byte("---\n")):
		return f.folder(root, base)
	case !opt.Claim.saysSomething() && isClaims(data):
		f.sub.Kind = ClaimsTable
		f.claims(base, data)
		return nil
	}
	f.profileFile(base, opt)
	return nil
}

// profileFile reads a file of profiles, with what is claimed of one of them.
func (f *intake) profileFile(base string, opt Options) {
	f.sub.Kind = ProfileFile
	profiles := f.profilesOf(base, opt.Read, profile.Place{File: base})
	for i := range profiles {
		f.sub.Profiles = append(f.sub.Profiles, Entry{Profile: &profiles[i]})
	}
	f.sub.Stated = opt.Claim.Stated
	claim := opt.Claim
	if !claim.saysSomething() || len(profiles) == 0 {
		return
	}
	switch {
	case claim.Profile != "":
		claim.Entry = f.sub.entryNamed(claim.Profile)
	case len(profiles) > 1:
		claim.Entry = -1
		f.fault(profile.Place{File: base}, "the file holds %d profiles and the claim does not say which it is about", len(profiles))
	default:
		claim.Profile = profiles[0].Name
	}
	claim.Place.File = base
	f.sub.Claims = append(f.sub.Claims, claim)
}

// maxEntries is how many names of a folder are looked at.
const maxEntries = 10_000

// folder reads a site folder: the notebook named, or the only one there; and
// the report beside it, if there is one.
func (f *intake) folder(root *os.Root, book string) error {
	f.sub.Kind = SiteFolder
	names, dirs, err := list(root)
	if err != nil {
		return fmt.Errorf("%s cannot be read: %w", f.sub.Name, profile.FileError(err))
	}
	if book == "" {
		books := f.notebooks(names)
		switch len(books) {
		case 0:
			return f.noNotebook(names)
		case 1:
			book = books[0]
		default:
			f.add(profile.Faultf(profile.Place{File: f.sub.Name}, "name one of them", "the folder holds %d notebooks, and a review takes one: name %s", len(books), strings.Join(books[:min(len(books), 5)], " or ")))
			return nil
		}
	}
	data, err := f.get(book, "notebook", notebook.MaxSize)
	if err != nil {
		f.fault(profile.Place{File: book}, "the notebook cannot be read: %v", err)
		return nil
	}
	f.site(book, data)
	f.report(reportBeside(root, book, names, dirs))
	return nil
}

// noNotebook is a folder that may be a report's own, without its site.
func (f *intake) noNotebook(names []string) error {
	if slices.Contains(names, folder.PDF) {
		data, err := f.get(folder.PDF, "report", MaxBytes)
		if err != nil {
			return fmt.Errorf("%s cannot be read: %w", folder.PDF, err)
		}
		return f.pdf(folder.PDF, data)
	}
	if slices.Contains(names, folder.Results) {
		f.report("")
		f.fault(profile.Place{File: f.sub.Name}, "this is the folder of a report; the data that it was made from are not in it")
		return nil
	}
	return hinted{fmt.Errorf("%s holds no notebook", f.sub.Name), "name a site folder, a report.pdf, a table of claims or a profile file"}
}

// list returns the files and the folders of a folder, each sorted.
func list(root *os.Root) (files, dirs []string, err error) {
	d, err := root.Open(".")
	if err != nil {
		return nil, nil, err
	}
	defer d.Close() // opened for reading
	entries, err := d.ReadDir(maxEntries)
	if err != nil && !errors.Is(err, io.EOF) {
		return nil, nil, err
	}
	for _, e := range entries {
		if e.IsDir() {
			dirs = append(dirs, e.Name())
		} else {
			files = append(files, e.Name())
		}
	}
	slices.Sort(files)
	slices.Sort(dirs)
	return files, dirs, nil
}

// notebooks are the Markdown files of a folder that begin with front matter.
func (f *intake) notebooks(names []string) []string {
	var books []string
	for _, name := range names {
		ext := strings.ToLower(path.Ext(name))
		if ext != ".md" && ext != ".markdown" || len(books) > 10 {
			continue
		}
		data, err := f.read(name)
		if err == nil && bytes.HasPrefix(bytes.TrimPrefix(data, []byte("\ufeff")), []byte("---")) {
			books = append(books, name)
		}
	}
	return books
}

// reportBeside is the folder of the report of a notebook, "" where it lies
// beside the notebook itself, "." where there is none: the folder of the
// notebook's own name, or else the first with a results.json in it.
func reportBeside(root *os.Root, book string, names, dirs []string) string {
	if own := folder.NameFor(book); slices.Contains(dirs, own) {
		return own
	}
	if slices.Contains(names, folder.Results) {
		return ""
	}
	for _, d := range dirs {
		if info, err := root.Stat(filepath.Join(d, folder.Results)); err == nil && info.Mode().IsRegular() {
			return d
		}
	}
	for _, d := range dirs {
		if strings.HasSuffix(d, "report") {
			return d
		}
	}
	return "."
}

// report reads the results and the text of a report's folder.
func (f *intake) report(dir string) {
	if dir == "." {
		return
	}
	name := path.Join(dir, folder.Results)
	if data, err := f.get(name, "results", MaxResultsFile); err != nil {
		f.fault(profile.Place{File: name}, "the results of the report cannot be read: %v", err)
	} else {
		f.results(name, data)
	}
	name = path.Join(dir, folder.Markdown)
	if data, err := f.get(name, "report", MaxPrinted); err == nil {
		f.markdown(name, data)
	}
	name = path.Join(dir, folder.HTML)
	if data, err := f.get(name, "report", MaxBytes); err == nil {
		f.markdown(name, data)
	}
	name = path.Join(dir, folder.PDF)
	if data, err := f.get(name, "report", MaxBytes); err == nil {
		f.pdfBeside(name, dir, data)
	}
}

// hinted is an error with what to do next.
type hinted struct {
	error
	hint string
}

func (e hinted) Unwrap() error { return e.error }

// Hint says what to do about an error of Open; "" where nothing is known.
func Hint(err error) string {
	var h hinted
	if errors.As(err, &h) {
		return h.hint
	}
	return "check the name"
}
