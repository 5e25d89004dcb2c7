// Command shearbook writes seismic site-class reports from shear-wave
// velocity profiles.
//
//	shearbook new DIR               start a site folder
//	shearbook report NOTEBOOK.md    evaluate a notebook and write its report
//	shearbook report PROFILE.csv --code asce-7-16
//	                                the standard report of a profile
//	shearbook classify PROFILE… --code asce-7-16,ec8-2004
//	                                the classes, on the terminal
//	shearbook convert IN OUT        a profile file in another format
//	shearbook codes [ID]            the codes, or one code's table
//
// Exit status: 0 done; 1 the input is at fault; 2 the command was misused;
// 3 done, and something must be looked at.
package main

import (
	"io"
	"os"
	"runtime/debug"

	"golang.org/x/term"
)

func main() {
	// A run lives for a fraction of a second: collecting less often saves a
	// sixth of its processor time, and the limit brings the collector back
	// where a file is large.
	debug.SetGCPercent(300)
	debug.SetMemoryLimit(256 << 20)
	os.Exit(run(os.Args[1:], streams{
		in: os.Stdin, out: os.Stdout, err: os.Stderr,
		colour: term.IsTerminal(int(os.Stdout.Fd())) && os.Getenv("NO_COLOR") == "" && os.Getenv("TERM") != "dumb",
	}))
}

// streams is the terminal as a command sees it.
type streams struct {
	in       io.Reader
	out, err io.Writer
	colour   bool // out is a terminal that may be coloured
}

// run carries out one command line and returns the exit status.
func run(args []string, s streams) int {
	root := newRoot(s)
	root.SetArgs(args)
	root.SetIn(s.in)
	root.SetOut(s.out)
	root.SetErr(s.err)
	return tell(s.err, root.Execute())
}
