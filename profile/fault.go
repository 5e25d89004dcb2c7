package profile

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"strings"
)

// Place is a place in a file.
type Place struct {
	File         string
	Line, Column int    // from 1, in characters; row and column in a spreadsheet; 0 where unknown
	Cell         string // of a spreadsheet, as Sheet1!B7; "" in other files
}

// String returns the place as file:line:column, or as much of it as is known.
func (p Place) String() string {
	switch {
	case p.Cell != "":
		return p.File + ":" + p.Cell
	case p.Line > 0 && p.Column > 0:
		return fmt.Sprintf("%s:%d:%d", p.File, p.Line, p.Column)
	case p.Line > 0:
		return fmt.Sprintf("%s:%d", p.File, p.Line)
	}
	return p.File
}

// Fault is one thing that is wrong with the input, and where.
type Fault struct {
	Place Place
	Text  string // what is wrong: lower case, no full stop
	Hint  string // what to do next; "" where Text says it

	// More is above 0 of a last fault that stands for others, which are not
	// kept: how many there are.
	More int
}

// Error returns the place and what is wrong there.
func (f Fault) Error() string {
	if place := f.Place.String(); place != "" {
		return place + ": " + f.Text
	}
	return f.Text
}

// Faults is everything that a reader found wrong, in the order of the file.
// As an error it is one line a fault; errors.As finds it.
type Faults []Fault

// Error returns one line a fault.
func (fs Faults) Error() string {
	lines := make([]string, len(fs))
	for i, f := range fs {
		lines[i] = f.Error()
	}
	return strings.Join(lines, "\n")
}

// Err returns the faults as an error, nil if there are none.
func (fs Faults) Err() error {
	if len(fs) == 0 {
		return nil
	}
	return fs
}

// Faultf is a fault at a place, its text made from format and args.
func Faultf(at Place, hint, format string, args ...any) Fault {
	return Fault{Place: at, Text: fmt.Sprintf(format, args...), Hint: hint}
}

// MoreFaults is the fault that stands for n others in a file.
func MoreFaults(file string, n int) Fault {
	f := Faultf(Place{File: file}, "", "and %s", Plural(n, "more fault"))
	f.More = n
	return f
}

// FileError returns a file error without the path, for messages that name it
// already.
func FileError(err error) error {
	var path *fs.PathError
	var link *os.LinkError
	switch {
	case errors.As(err, &path):
		return path.Err
	case errors.As(err, &link):
		return link.Err
	}
	return err
}
