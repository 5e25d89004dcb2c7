//go:build unix

package ags

import (
	"syscall"
	"time"
)

// cpuTime is the processor time that the test has used. It does not depend on
// what else the machine does.
func cpuTime() time.Duration {
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		panic(err)
	}
	return time.Duration(u.Utime.Nano() + u.Stime.Nano())
}
