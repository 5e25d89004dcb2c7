//go:build !unix

package ags

import "time"

var began = time.Now()

// cpuTime is the time that has passed, where processor time is not known.
func cpuTime() time.Duration { return time.Since(began) }
