package batch

import (
	"bytes"

	"shearbook/profile"
	"shearbook/profile/delimited"
)

// Sizes that divide the input into chunks. They depend on nothing but the job,
// so that a run that is taken up again divides it as before.
const (
	maxFile     = 64 << 20  // bytes of a file that is not read in pieces
	wholeFile   = 1 << 20   // bytes up to which a table is one chunk
	chunkSize   = 256 << 10 // bytes of a piece of a larger table, about
	reportChunk = 16 << 10  // the same where each profile may take a while
)

// chunk is a piece of the input that one worker does at one go: a file, or
// some profiles of a large table. What is written of it goes into the tables
// in one go too.
type chunk struct {
	it    *item
	first bool // of its file
	last  bool

	// Of a piece of a table; head is nil where the worker reads the file.
	head  *delimited.Head
	data  []byte
	buf   *buffer // that data lies in
	line  int     // of the file at which data begins
	lines []int32 // of the file, of each line of data, where rows were brought together; nil where they follow one another
	apart bool    // rows were brought together

	stream *stream // that it is a piece of; nil where it is the whole file
	empty  bool    // it only says that its file is at an end

	digest string // SHA-256 of what was read of the file up to the end of the chunk
	size   int64  // bytes of that
	source string // the line of sources.csv; "" but of the last chunk

	before, after chan int // ordinal of the first unit, where it is asked for

	done chan struct{}
	made made
}

// made is what a worker made of a chunk.
type made struct {
	summary, faults []byte
	tally           Tally
	all             int // units, those of other shards among them
	rows            []int
	reports         int
	names           order
	err             error
}

// order says whether the names of profiles that follow one another ascend, as
// letters or as numbers of growing length: then none of them comes twice.
type order struct {
	First, Last string
	Unordered   bool // by letters
	Unnumbered  bool // by length, then letters

	last []byte // room for Last while names are taken; see end
}

// ascends reports whether no name can have come twice.
func (o *order) ascends() bool { return !o.Unordered || !o.Unnumbered }

// next takes a name. It does not allocate but for the first.
func (o *order) next(name []byte) {
	if o.First == "" {
		o.First = string(name)
	} else {
		o.step(o.last, name)
	}
	o.last = append(o.last[:0], name...)
}

// end is called behind the last name.
func (o *order) end() { o.Last, o.last = string(o.last), nil }

func (o *order) step(before, name []byte) {
	ascends := bytes.Compare(before, name) < 0
	if !ascends {
		o.Unordered = true
	}
	if len(name) < len(before) || len(name) == len(before) && !ascends {
		o.Unnumbered = true
	}
}

// follow takes the names of the chunk after.
func (o *order) follow(next *order) {
	if next.First == "" {
		return
	}
	if o.First == "" {
		*o = *next
		return
	}
	o.step([]byte(o.Last), []byte(next.First))
	o.Last = next.Last
	o.Unordered = o.Unordered || next.Unordered
	o.Unnumbered = o.Unnumbered || next.Unnumbered
}

// buffer is room for a piece of a table.
type buffer struct{ b []byte }

// lineOf returns the line of the file of a line of data, counted from the
// chunk's first.
func (c *chunk) lineOf(line int) int {
	if c.lines == nil {
		return line
	}
	if i := line - c.line; i >= 0 && i < len(c.lines) {
		return int(c.lines[i])
	}
	return line
}

// relocate puts what was read of a profile at its places in the file, where
// its rows were brought together.
func (c *chunk) relocate(p *profile.Profile, faults profile.Faults) {
	if c.lines == nil {
		return
	}
	at := func(place *profile.Place) {
		if place.Line >= c.line { // what lies above is the head's
			place.Line = c.lineOf(place.Line)
		}
	}
	for i := range faults {
		at(&faults[i].Place)
	}
	if p == nil {
		return
	}
	for i := range p.Layers {
		p.Layers[i].Line = int32(c.lineOf(int(p.Layers[i].Line)))
	}
	for i := range p.Reading.Rows {
		p.Reading.Rows[i].Line = c.lineOf(p.Reading.Rows[i].Line)
	}
	for i := range p.Notes {
		at(&p.Notes[i].Place)
	}
}
