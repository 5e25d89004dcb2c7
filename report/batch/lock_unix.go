//go:build darwin || dragonfly || freebsd || linux || netbsd || openbsd

package batch

import (
	"os"
	"syscall"
)

// lock locks a folder for as long as it is open. A file system that has no
// locks lets every run in.
func lock(dir *os.File) error {
	if err := syscall.Flock(int(dir.Fd()), syscall.LOCK_EX|syscall.LOCK_NB); err == syscall.EWOULDBLOCK {
		return errLocked
	}
	return nil
}
