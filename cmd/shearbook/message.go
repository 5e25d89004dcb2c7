package main

import (
	"errors"
	"fmt"
	"io"
	"strings"

	"shearbook/profile"
	"shearbook/report"
)

// The rules of speech. Results go to standard output, everything else to
// standard error. A message says what is wrong, in lower case and without a
// full stop, behind the place where it is wrong:
//
//	shearbook: line-1.csv:14:3: thickness "-2.5" is not positive
//	hint: give the thickness of the layer in the file's unit
//
// A hint says what to do next. Several faults are told at once, and a hint
// that would be told twice in a row is told once.

// Exit statuses.
const (
	done    = 0
	atFault = 1 // the input is at fault, or the output cannot be written
	misused = 2 // the command was misused
	look    = 3 // done, and something must be looked at
)

// errLook is the answer of a command that did what it was asked and found
// something to be looked at. Nothing more is said of it.
var errLook = errors.New("something must be looked at")

// usageError is a misuse of the command.
type usageError struct {
	err  error
	hint string
}

func (e usageError) Error() string { return e.err.Error() }
func (e usageError) Unwrap() error { return e.err }

// misuse is a usageError made from a text.
func misuse(hint, format string, args ...any) error {
	return usageError{fmt.Errorf(format, args...), hint}
}

// hinted is an error with what to do next.
type hinted struct {
	err  error
	hint string
}

func (e hinted) Error() string { return e.err.Error() }
func (e hinted) Unwrap() error { return e.err }

// tell writes an error as people should read it and returns the exit status.
func tell(w io.Writer, err error) int {
	if err == nil {
		return done
	}
	var usage usageError
	var faults profile.Faults
	var withHint hinted
	switch {
	case errors.Is(err, errLook):
		return look
	case errors.As(err, &usage):
		say(w, usage.Error(), usage.hint)
		return misused
	case errors.As(err, &faults):
		tellFaults(w, faults)
	case errors.As(err, &withHint):
		say(w, err.Error(), withHint.hint)
	default:
		say(w, err.Error(), "")
	}
	return atFault
}

func tellFaults(w io.Writer, faults profile.Faults) {
	for i, f := range faults {
		hint := f.Hint
		if i+1 < len(faults) && faults[i+1].Hint == hint {
			hint = ""
		}
		say(w, f.Error(), hint)
	}
}

// say writes one message. Control characters in it are shown, not sent to
// the terminal.
func say(w io.Writer, text, hint string) {
	fmt.Fprintf(w, "shearbook: %s\n", report.Visible(strings.TrimRight(text, "\n")))
	if hint != "" {
		fmt.Fprintf(w, "hint: %s\n", report.Visible(hint))
	}
}
