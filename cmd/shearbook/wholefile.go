package main

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"

	"shearbook/profile"
)

// mustBeNew is an error where a file is there already.
func mustBeNew(path string) error {
	_, err := os.Lstat(path)
	if err == nil {
		return hinted{fmt.Errorf("%s is there already", path), "add --force to replace it, or name another file"}
	}
	return nil // what else may be wrong with it, writing will tell
}

// writeWhole writes a file as a whole or not at all: beside its place first,
// and then renamed. A file that is there is replaced only by force.
func writeWhole(path string, force bool, write func(io.Writer) error) (err error) {
	if info, err := os.Stat(path); err == nil && !info.Mode().IsRegular() {
		return hinted{fmt.Errorf("%s is not an ordinary file", path), "name another file"}
	}
	beside, err := createBeside(path)
	if err != nil {
		return hinted{fmt.Errorf("%s cannot be written: %w", path, profile.FileError(err)), "check that its folder is there and may be written"}
	}
	defer func() {
		if err != nil {
			_ = beside.Close() // it may be closed already
			_ = os.Remove(beside.Name())
		}
	}()
	buffered := bufio.NewWriterSize(beside, 1<<16)
	if err := write(buffered); err != nil {
		return err
	}
	if err := errors.Join(buffered.Flush(), beside.Close()); err != nil {
		return err
	}
	if !force {
		if err := mustBeNew(path); err != nil {
			return err
		}
	}
	return os.Rename(beside.Name(), path)
}

// createBeside creates a file in the folder of path, under a name that is free.
func createBeside(path string) (*os.File, error) {
	for i := 1; ; i++ {
		name := filepath.Join(filepath.Dir(path), fmt.Sprintf(".%s.%d.part", filepath.Base(path), i))
		f, err := os.OpenFile(name, os.O_CREATE|os.O_EXCL|os.O_WRONLY, 0o666)
		if err == nil || !errors.Is(err, fs.ErrExist) || i == 1000 {
			return f, err
		}
	}
}
