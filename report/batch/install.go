package batch

import (
	"encoding/json"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"shearbook/profile"
)

// What the folder of an unfinished batch holds once it is whole and only needs
// to be moved into place.
const (
	wholeName   = "whole"   // what goes into place, and what the run found
	retiredName = "retired" // the earlier batch is out of the way
	earlierName = "earlier" // where it went
)

// whole is the content of the file wholeName.
type whole struct {
	Job     string // digest
	Shard   Shard
	Names   []string // the summary last
	Outcome Outcome
}

// declare writes down that everything is there. From here on the batch will be
// in place, if need be after the next run.
func declare(out string, w whole) error {
	dir := unfinished(out)
	for _, name := range batchNames {
		if _, err := os.Stat(filepath.Join(dir, name)); err == nil && name != Summary {
			w.Names = append(w.Names, name)
		}
	}
	w.Names = append(w.Names, Summary)
	text, err := json.Marshal(w)
	if err != nil {
		return err
	}
	fresh := filepath.Join(dir, wholeName+".new")
	if err := writeSynced(fresh, text); err != nil {
		return err
	}
	return os.Rename(fresh, filepath.Join(dir, wholeName))
}

func writeSynced(name string, text []byte) error {
	f, err := os.Create(name)
	if err != nil {
		return err
	}
	_, err = f.Write(text)
	return errors.Join(err, f.Sync(), f.Close())
}

// declared reads what declare wrote; nil if it did not.
func declared(out string) *whole {
	text, err := os.ReadFile(filepath.Join(unfinished(out), wholeName))
	var w whole
	if err != nil || json.Unmarshal(text, &w) != nil {
		return nil
	}
	return &w
}

// install moves what was declared into place. The earlier batch goes first,
// its summary before all else, and the summary of the new one comes last: a
// folder with a summary.csv holds a whole batch. Where it is interrupted, it
// can be called again.
func install(out string, w *whole) error {
	dir := unfinished(out)
	old, retired := filepath.Join(dir, earlierName), filepath.Join(dir, retiredName)
	if _, err := os.Stat(retired); err != nil {
		if err := os.MkdirAll(old, 0o777); err != nil {
			return notInstalled(out, err)
		}
		for _, name := range batchNames { // the summary first
			if name == unfinishedName {
				continue
			}
			if err := moveInto(old, filepath.Join(out, name)); err != nil {
				return notInstalled(out, err)
			}
		}
		if err := os.WriteFile(retired, nil, 0o666); err != nil {
			return notInstalled(out, err)
		}
	}
	for _, name := range w.Names {
		if err := moveInto(out, filepath.Join(dir, name)); err != nil {
			return notInstalled(out, err)
		}
	}
	return cleared(out, dir)
}

// cleared removes the folder of a batch that is in place. What calls for it to be
// installed goes first: were it left alone with the mark of retirement gone, the
// next run would retire the new batch for the old one.
func cleared(out, dir string) error {
	for _, name := range []string{journalName, wholeName} {
		if err := os.Remove(filepath.Join(dir, name)); err != nil && !errors.Is(err, fs.ErrNotExist) {
			return notInstalled(out, err)
		}
	}
	if err := os.RemoveAll(dir); err != nil {
		return notInstalled(out, err)
	}
	return nil
}

// moveInto moves a file into a folder, if it is there.
func moveInto(dir, name string) error {
	err := os.Rename(name, filepath.Join(dir, filepath.Base(name)))
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	return err
}

func notInstalled(out string, err error) error {
	return &conflict{fmt.Sprintf("the batch is whole but cannot be put in place in %s: %v", out, profile.FileError(err)),
		"mend the folder, and run again with --resume"}
}
