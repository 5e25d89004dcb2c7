package batch

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"shearbook/profile"
)

// item is one file of the input, with what a manifest says of its profiles.
type item struct {
	name    string // as messages and the tables have it
	open    func() (*os.File, error)
	entries []manifestRow  // of a manifest; nil for a file given as such
	listing bool           // it is a manifest itself and has no profiles
	faults  profile.Faults // why there is no file; nil if there is
}

// extensions are the names that a file of a folder must end with to be read.
var extensions = []string{".csv", ".tsv", ".txt", ".ags", ".las", ".xlsx", ".xml", ".json"}

// inputs finds the files of a job one after another: those that are named, those
// that match a pattern, and those below a folder, in the order of their names,
// whose name ends as that of a profile file does and does not begin with a
// point. A link to a folder is not followed, so that no loop of links can keep a
// run busy; nor is the folder that the job writes.
type inputs struct {
	job     *Job
	do      func(*item) error
	out     fs.FileInfo // of Job.Out; nil if it is not there
	roots   []*os.Root  // folders of manifests, which close shuts
	skipped int         // files of folders with another ending
	linked  string      // a link to a folder that was not followed
}

// each calls do with every file. It ends at the first error.
func (in *inputs) each() error {
	in.out, _ = os.Stat(in.job.Out)
	for _, name := range in.job.Inputs {
		names, err := in.expand(name)
		if err != nil {
			return err
		}
		for _, name := range names {
			if err := in.named(name); err != nil {
				return err
			}
		}
	}
	if in.skipped > 0 {
		in.job.say("name them on the command line to read them all the same", "%s of the folders left out: their names end with none of %s",
			profile.Plural(in.skipped, "file"), strings.Join(extensions, ", "))
	}
	if in.linked != "" {
		in.job.say("name the folder itself to read it", "%s is a link to a folder and was not followed", in.linked)
	}
	return nil
}

// expand returns the names that a pattern stands for, in their order; any other
// name as it is.
func (in *inputs) expand(name string) ([]string, error) {
	if _, err := os.Lstat(name); err == nil || !strings.ContainsAny(name, "*?[") {
		return []string{name}, nil
	}
	names, err := filepath.Glob(name)
	if err != nil {
		return nil, fmt.Errorf("the pattern %s is not one: %w", name, err)
	}
	if len(names) == 0 {
		return []string{name}, nil // and its unit says that there is no such file
	}
	slices.Sort(names)
	return names, nil
}

// named takes a file or a folder that was named.
func (in *inputs) named(name string) error {
	info, err := os.Stat(name)
	if err == nil && info.IsDir() {
		return in.folder(name)
	}
	it := plainItem(name)
	if err == nil && info.Mode().IsRegular() {
		entries, faults, found := in.manifest(name)
		switch {
		case len(faults) > 0:
			return faults
		case found:
			return in.listed(name, entries)
		}
	}
	return in.do(it)
}

// close shuts what was opened.
func (in *inputs) close() {
	for _, root := range in.roots {
		_ = root.Close() // opened for reading
	}
}

func plainItem(name string) *item {
	return &item{name: name, open: func() (*os.File, error) { return openRegular(name) }}
}

// folder takes the files below a folder.
func (in *inputs) folder(dir string) error {
	entries, err := os.ReadDir(dir)
	if err != nil {
		return in.do(&item{name: dir, faults: cannotOpen(dir, err)})
	}
	for _, e := range entries {
		name := filepath.Join(dir, e.Name())
		if strings.HasPrefix(e.Name(), ".") {
			continue
		}
		if e.IsDir() {
			if info, err := e.Info(); err == nil && in.out != nil && os.SameFile(info, in.out) {
				continue
			}
			if err := in.folder(name); err != nil {
				return err
			}
			continue
		}
		if e.Type()&fs.ModeSymlink != 0 {
			if info, err := os.Stat(name); err == nil && info.IsDir() {
				in.linked = name
				continue
			}
		}
		if !slices.Contains(extensions, strings.ToLower(filepath.Ext(name))) {
			in.skipped++
			continue
		}
		if err := in.do(plainItem(name)); err != nil {
			return err
		}
	}
	return nil
}

// openRegular opens a file that is an ordinary one; a pipe would keep a run
// waiting.
func openRegular(name string) (*os.File, error) {
	info, err := os.Stat(name)
	if err == nil {
		err = regular(info)
	}
	if err != nil {
		return nil, err
	}
	return os.Open(name)
}

var (
	errFolder   = errors.New("this is a folder")
	errNoFile   = errors.New("this is not an ordinary file")
	errTooLarge = errors.New("the file is too large")
)

func regular(info fs.FileInfo) error {
	switch {
	case info.IsDir():
		return errFolder
	case !info.Mode().IsRegular():
		return errNoFile
	}
	return nil
}

// cannotOpen says in plain words why a file cannot be read.
func cannotOpen(name string, err error) profile.Faults {
	text, hint := fmt.Sprintf("the file cannot be read: %v", profile.FileError(err)), ""
	switch {
	case errors.Is(err, fs.ErrNotExist):
		text, hint = "there is no such file", "check the name, and the folder it is meant to be in"
	case errors.Is(err, fs.ErrPermission):
		text, hint = "the file may not be read", "ask for the right to read it, or copy it to where you have it"
	case errors.Is(err, errFolder), errors.Is(err, errNoFile):
		text, hint = err.Error(), "copy it into an ordinary file"
	case errors.Is(err, errTooLarge):
		text, hint = fmt.Sprintf("the file is larger than %d MiB, and is no table in UTF-8 with a column of profile names", maxFile>>20), "split it"
	case errors.Is(err, io.ErrUnexpectedEOF):
		text, hint = "the file became shorter while it was read", "run again when nothing writes to it"
	case profile.FileError(err).Error() == "path escapes from parent": // the error has no name in package os
		text, hint = "the file lies outside the folder of the manifest", "copy it into that folder"
	}
	return profile.Faults{profile.Faultf(profile.Place{File: name}, hint, "%s", text)}
}
