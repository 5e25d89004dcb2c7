package batch

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"

	"shearbook/profile"
)

// stage is where files of a folder are written before they take their places:
// beside them, under names that begin with stagePrefix. Either all of them
// take their places or none does, but for a kill in the middle of the
// renaming.
type stage struct {
	dir   string
	names []string          // in the order of their writing
	at    map[string]string // where each is
}

const stagePrefix = ".derive-"

func newStage(dir string) *stage { return &stage{dir: dir, at: map[string]string{}} }

// create makes a file that will be called name, below the folder.
func (s *stage) create(name string) (*os.File, error) {
	f, err := os.CreateTemp(s.dir, stagePrefix+"*")
	if err != nil {
		return nil, s.failed(name, err)
	}
	s.names = append(s.names, name)
	s.at[name] = f.Name()
	return f, nil
}

func (s *stage) failed(name string, err error) error {
	return fmt.Errorf("%s cannot be written: %w", filepath.Join(s.dir, filepath.FromSlash(name)), profile.FileError(err))
}

// write makes a file of what f writes.
func (s *stage) write(name string, f func(io.Writer) error) error {
	file, err := s.create(name)
	if err != nil {
		return err
	}
	err = f(file)
	if closed := file.Close(); err == nil {
		err = closed
	}
	var path *fs.PathError
	if errors.As(err, &path) {
		return s.failed(name, err)
	}
	return err
}

// commit puts every file into its place.
func (s *stage) commit() error {
	for _, name := range s.names {
		to := filepath.Join(s.dir, filepath.FromSlash(name))
		if err := os.MkdirAll(filepath.Dir(to), 0o777); err != nil {
			return s.failed(name, err)
		}
		if err := os.Chmod(s.at[name], 0o644); err != nil {
			return s.failed(name, err)
		}
		if err := os.Rename(s.at[name], to); err != nil {
			return s.failed(name, err)
		}
		delete(s.at, name)
	}
	return nil
}

// discard removes what has not taken its place.
func (s *stage) discard() {
	for _, at := range s.at {
		os.Remove(at)
	}
}

// removeStale removes the files of earlier runs that this one was not asked
// for, so that nothing in the folder speaks of another summary.csv.
func removeStale(dir string, written []string) error {
	kept := map[string]bool{}
	for _, name := range written {
		kept[name] = true
	}
	names := []string{MapLayer, JSONLines, Workbook, SummaryMarkdown, SummaryHTML, SummaryPDF}
	figures, err := os.ReadDir(filepath.Join(dir, Figures))
	if err != nil && !errors.Is(err, fs.ErrNotExist) {
		return fmt.Errorf("%s cannot be read: %w", filepath.Join(dir, Figures), profile.FileError(err))
	}
	for _, f := range figures {
		if filepath.Ext(f.Name()) == ".svg" {
			names = append(names, Figures+"/"+f.Name())
		}
	}
	for _, name := range names {
		path := filepath.Join(dir, filepath.FromSlash(name))
		if kept[name] {
			continue
		}
		if err := os.Remove(path); err != nil && !errors.Is(err, fs.ErrNotExist) {
			return fmt.Errorf("%s, which is of an earlier run, cannot be removed: %w", path, profile.FileError(err))
		}
	}
	if len(figures) > 0 {
		os.Remove(filepath.Join(dir, Figures)) // where nothing is left in it
	}
	return nil
}
