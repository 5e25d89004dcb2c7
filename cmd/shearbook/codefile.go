package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"

	"github.com/spf13/cobra"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
	"shearbook/vs30/siteclass/codefile"
)

// codeFile is a jurisdiction's own table that --code-file names.
type codeFile struct {
	name string // as the user named it
	base string // without its folder
	data []byte
	code *siteclass.Code
}

// codeFilesFlag adds --code-file.
func codeFilesFlag(c *cobra.Command, names *[]string) {
	c.Flags().StringArrayVar(names, "code-file", nil, "`FILE` of a jurisdiction's own table")
	_ = c.MarkFlagFilename("code-file", "yaml", "yml") // fails only for a flag that is not there
}

// readCodeFiles reads the tables that --code-file names. Their faults are
// told together.
func readCodeFiles(names []string) ([]codeFile, error) {
	var files []codeFile
	var faults profile.Faults
	for _, name := range names {
		f := codeFile{name: name, base: filepath.Base(name)}
		var err error
		if f.data, err = readRegular(name, codefile.MaxSize); err != nil {
			return nil, hinted{fmt.Errorf("%s cannot be read: %w", name, profile.FileError(err)), "check the name"}
		}
		if f.code, err = codefile.Read(name, f.data); err != nil {
			if faults, err = join(faults, err); err != nil {
				return nil, err
			}
			continue
		}
		for _, other := range files {
			if other.code.ID == f.code.ID {
				return nil, misuse("give each table an id of its own", "%s and %s both have the id %q", other.name, name, f.code.ID)
			}
		}
		files = append(files, f)
	}
	if len(faults) > 0 {
		return nil, faults
	}
	return files, nil
}

// readRegular reads a file that is one, and of which no more than most bytes
// and one are of interest.
func readRegular(name string, most int64) ([]byte, error) {
	info, err := os.Stat(name)
	switch {
	case err != nil:
		return nil, err
	case info.IsDir():
		return nil, errors.New("it is a folder")
	case !info.Mode().IsRegular():
		return nil, errors.New("it is not a file")
	}
	f, err := os.Open(name)
	if err != nil {
		return nil, err
	}
	defer f.Close() // opened for reading
	return io.ReadAll(io.LimitReader(f, most+1))
}

// findCode returns the code of an ID among tables of files and the built-in
// codes.
func findCode(id string, own []codeFile) (*siteclass.Code, error) {
	var ids []string
	for _, f := range own {
		if f.code.ID == id {
			return f.code, nil
		}
		ids = append(ids, f.code.ID)
	}
	code, err := siteclass.Find(id)
	if err == nil {
		return code, nil
	}
	if near := profile.Nearest(id, ids); near != "" {
		err = &siteclass.UnknownError{ID: id, Nearest: near}
	}
	return nil, usageError{err, "`shearbook codes` lists them"}
}

// chooseCodes returns the codes that --code names and then those of the files
// that it does not name.
func chooseCodes(ids []string, own []codeFile) ([]*siteclass.Code, error) {
	var codes []*siteclass.Code
	for _, id := range ids {
		code, err := findCode(id, own)
		if err != nil {
			return nil, err
		}
		codes = append(codes, code)
	}
	for _, f := range own {
		if !slices.Contains(codes, f.code) {
			codes = append(codes, f.code)
		}
	}
	return codes, nil
}
