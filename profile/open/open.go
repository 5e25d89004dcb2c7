// Package open reads a profile file of any kind that is read: it looks at
// what the file begins with and calls the reader for it. In this version that
// is a table of layers in text (package delimited) or in a workbook (package
// spreadsheet), AGS4 (package ags), a borehole log in LAS (package las), SiteXML
// (package sitexml) or our own JSON (package json); other kinds are named and
// refused, with a way out.
package open

import (
	"bytes"
	"errors"
	"io"
	"io/fs"
	"os"

	"shearbook/profile"
	"shearbook/profile/delimited"
)

// Bytes reads the profiles in data. The name is that of the file; it stands
// in messages and names a profile that has no other name. An error is a
// profile.Faults.
func Bytes(name string, data []byte, opt Options) ([]profile.Profile, error) {
	if len(opt.Correlate.Relations) > 0 {
		return correlated(name, data, opt)
	}
	f, err := formOf(name, data)
	if err != nil {
		return nil, err
	}
	if err := f.refuse(name, &opt); err != nil {
		return nil, err
	}
	return f.read(name, data, &opt)
}

// formOf is the form of a file; an error names a kind that is not read.
func formOf(name string, data []byte) (*form, error) {
	if bytes.HasPrefix(data, []byte(zipped)) {
		return &workbookForm, nil
	}
	kind, ok := sniff(data)
	if !ok {
		return &tableForm, nil
	}
	if f := forms[kind.begins]; f != nil {
		return f, nil
	}
	return nil, fault(name, kind.hint, "the file is %s, which this version does not read", kind.what)
}

// File reads the profiles in a file.
func File(path string, opt Options) ([]profile.Profile, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, cannotOpen(path, err)
	}
	defer f.Close()
	return file(path, f, opt)
}

// In reads the profiles in a file inside a folder, and nothing outside it.
// The file must be an ordinary one.
func In(root *os.Root, name string, opt Options) ([]profile.Profile, error) {
	info, err := root.Stat(name)
	if err != nil {
		return nil, cannotOpen(name, err)
	}
	if !info.Mode().IsRegular() && !info.IsDir() {
		return nil, fault(name, "copy it into an ordinary file", "this is not an ordinary file")
	}
	f, err := root.Open(name)
	if err != nil {
		return nil, cannotOpen(name, err)
	}
	defer f.Close()
	return file(name, f, opt)
}

// file reads the profiles in an open file.
func file(name string, f *os.File, opt Options) ([]profile.Profile, error) {
	info, err := f.Stat()
	switch {
	case err != nil:
		return nil, cannotOpen(name, err)
	case info.IsDir():
		return nil, fault(name, "name a file in it", "this is a folder")
	case info.Size() > delimited.MaxBytes:
		return nil, tooLarge(name)
	}
	return read(name, f, info.Size(), opt)
}

// Reader reads the profiles in a stream, such as standard input, to its end.
// It stops at the largest size that is read.
func Reader(name string, r io.Reader, opt Options) ([]profile.Profile, error) {
	return read(name, r, 0, opt)
}

// read reads a stream of about size bytes.
func read(name string, r io.Reader, size int64, opt Options) ([]profile.Profile, error) {
	data := bytes.NewBuffer(make([]byte, 0, size+bytes.MinRead))
	_, err := data.ReadFrom(io.LimitReader(r, delimited.MaxBytes+1))
	switch {
	case err != nil:
		return nil, fault(name, "", "reading failed: %v", plain(err))
	case data.Len() > delimited.MaxBytes:
		return nil, tooLarge(name)
	}
	return Bytes(name, data.Bytes(), opt)
}

func tooLarge(name string) error {
	return fault(name, "split it", "the file is larger than %d MiB", delimited.MaxBytes>>20)
}

// cannotOpen says in plain words why a file cannot be opened.
func cannotOpen(name string, err error) error {
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return fault(name, "check the name, and the folder it is meant to be in", "there is no such file")
	case errors.Is(err, fs.ErrPermission):
		return fault(name, "ask for the right to read it, or copy it to where you have it", "the file may not be read")
	case escapes(err):
		return fault(name, "copy the file into the folder", "the file lies outside the folder that may be read")
	}
	return fault(name, "", "the file cannot be opened: %v", plain(err))
}

// escapes reports whether os.Root refused a path because it leads out of its
// folder. The error has no name in package os.
func escapes(err error) bool {
	return plain(err).Error() == "path escapes from parent"
}

// plain is an error without the operation and path around it.
func plain(err error) error {
	var pe *fs.PathError
	if errors.As(err, &pe) {
		return pe.Err
	}
	return err
}

func fault(name, hint, format string, args ...any) error {
	return profile.Faults{profile.Faultf(profile.Place{File: name}, hint, format, args...)}
}
