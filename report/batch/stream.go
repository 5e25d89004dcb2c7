package batch

import (
	"errors"
	"fmt"
	"io"
	"os"
	"slices"
	"sync/atomic"

	"shearbook/profile/delimited"
)

// stream is a table that is read in pieces.
type stream struct {
	it     *item
	file   *os.File
	head   *delimited.Head
	sorted string // the line of sources.csv, where its rows were brought together; else ""
	handed bool   // a piece was handed out

	// Of the writer:

	start   state       // before the first piece
	names   order       // so far
	checked bool        // the file was searched for names that come twice
	apart   atomic.Bool // some do
	verdict chan bool   // at the end: whether the table must be done again
}

// watch takes the names of the next piece and reports whether one of the table
// comes twice with others between. As long as they ascend none can; then the
// file is searched, once.
func (s *stream) watch(r *run, names *order) (apart bool, err error) {
	if s.sorted != "" || s.checked {
		return false, nil
	}
	s.names.follow(names)
	if s.names.ascends() {
		return false, nil
	}
	s.checked = true
	apart, err = s.twice(r)
	if apart {
		r.job.sayApart(s.it.name)
		s.apart.Store(true)
	}
	return apart, err
}

func (j *Job) sayApart(file string) {
	j.say("sort the table by profile and depth to spare this", "%s: the rows of some profiles do not follow one another; they are brought together first", file)
}

// cutter cuts a table into pieces between profiles.
type cutter struct {
	in     io.Reader
	head   *delimited.Head
	size   int // bytes of a piece, about
	buffer func() *buffer

	rest []byte // behind the last cut
	err  error  // of in
}

// errLongProfile is the error of a profile that no piece can hold.
var errLongProfile = errors.New("a profile is too long")

// next puts the next piece into a chunk. Behind the last one in.last is set.
func (k *cutter) next(c *chunk) error {
	c.buf = k.buffer()
	b := append(c.buf.b[:0], k.rest...)
	for cut := 0; ; {
		b, cut = k.fill(b)
		if cut > 0 || k.err == io.EOF {
			c.buf.b, c.data, c.last = b, b[:cut], k.err == io.EOF && cut == len(b)
			if k.err == io.EOF && !c.last && cut == 0 {
				c.data, c.last = b, true
			}
			k.rest = append(k.rest[:0], b[len(c.data):]...)
			return nil
		}
		if k.err != nil {
			return k.err
		}
		if len(b) > maxFile {
			return fmt.Errorf("%w: the rows of one take more than %d MiB", errLongProfile, maxFile>>20)
		}
	}
}

// fill reads about one piece more and returns where it can be cut, 0 where it
// cannot.
func (k *cutter) fill(b []byte) ([]byte, int) {
	if k.err == nil {
		from := len(b)
		want := max(k.size, from+k.size/2) - from
		b = slices.Grow(b, want)[:from+want]
		n, err := io.ReadFull(k.in, b[from:])
		b = b[:from+n]
		if err == io.ErrUnexpectedEOF {
			err = io.EOF
		}
		k.err = err
	}
	if k.err == io.EOF && len(b) <= k.size {
		return b, len(b)
	}
	return b, k.head.Cut(b)
}
