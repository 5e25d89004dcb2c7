package batch

import (
	"errors"
	"fmt"
	"os"

	"shearbook/profile"
)

// errLocked is the error of a folder that another run has locked.
var errLocked = errors.New("another run has locked the folder")

// lockOut makes the folder of a batch, if it is not there, and keeps other runs
// out of it until release is called or the process ends, however it ends.
func lockOut(out string) (release func(), err error) {
	if err := os.MkdirAll(out, 0o777); err != nil {
		return nil, &conflict{fmt.Sprintf("%s cannot be made: %v", out, profile.FileError(err)), "choose another folder with --out"}
	}
	dir, err := os.Open(out)
	if err != nil {
		return nil, &conflict{fmt.Sprintf("%s cannot be used as the folder of a batch: %v", out, profile.FileError(err)), "choose another folder with --out"}
	}
	if err := lock(dir); err == errLocked {
		_ = dir.Close() // opened for reading
		return nil, &conflict{fmt.Sprintf("another run is writing in %s", out), "wait for it to end, or choose another folder with --out"}
	}
	return func() { _ = dir.Close() }, nil // which unlocks it
}
