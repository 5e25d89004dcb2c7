//go:build !(darwin || dragonfly || freebsd || linux || netbsd || openbsd)

package batch

import "os"

// lock does nothing: on this system there is no lock that a process that is
// killed gives back, and the standard library has none. Two runs in one folder
// must be kept apart by whoever starts them.
func lock(*os.File) error { return nil }
