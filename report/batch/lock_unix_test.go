//go:build darwin || dragonfly || freebsd || linux || netbsd || openbsd

package batch

import (
	"context"
	"errors"
	"path/filepath"
	"strings"
	"testing"
)

// Of two runs in one folder the second is refused, and changes nothing; once
// the first has ended it may go on. That a kill gives the lock back TestKill
// shows.
func TestTwoRunsInOneFolder(t *testing.T) {
	dir := t.TempDir()
	in := writeFile(t, filepath.Join(dir, "a.csv"), "top_m,bottom_m,vs_mps\n0,60,300\n")
	job := Job{Inputs: []string{in}, Codes: mustCode(t, "ec8-2004"), Out: filepath.Join(dir, "out")}
	var second error
	first := job
	first.Progress = func(Progress) { _, second = Run(context.Background(), job) }
	runJob(t, first)
	var c *conflict
	if !errors.As(second, &c) || !strings.Contains(c.Error(), "another run is writing in") || c.Hint() == "" {
		t.Error(second)
	}
	runJob(t, job)
}
