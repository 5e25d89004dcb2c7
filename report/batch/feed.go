package batch

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"io"
	"os"

	"shearbook/profile/delimited"
	"shearbook/profile/open"
)

// feeder cuts the input into chunks and hands them out. What an earlier run
// has done of them it skips.
type feeder struct {
	run   *run
	find  inputs
	fed   bool // a chunk was handed out
	rooms int  // buffers that were made
}

// item takes a file.
func (f *feeder) item(it *item) error {
	if f.over() {
		return errStopped
	}
	if s := f.large(it); s != nil {
		defer s.file.Close() // opened for reading
		return f.table(s)
	}
	c := &chunk{it: it, first: true, last: true}
	if f.resuming() {
		if c.digest, c.size = identify(it); f.skip(c) {
			return nil
		}
	}
	f.hand(c)
	return nil
}

// over reports whether nothing more is to be handed out.
func (f *feeder) over() bool { return f.run.stopped() || f.run.failed.Load() }

// identify returns the digest and the size of a file's content, or the digest
// of why there is none.
func identify(it *item) (digest string, size int64) {
	data, faults := it.content()
	if faults != nil {
		return digestOf([]byte(faults.Error())), 0
	}
	return digestOf(data), int64(len(data))
}

func digestOf(data []byte) string {
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:])
}

// end is called behind the last file. What an earlier run left beyond it is
// cut off.
func (f *feeder) end() error {
	if !f.fed {
		return f.run.work.reset(f.run.work.at)
	}
	return nil
}

// resuming reports whether an earlier run may have done the next chunk.
func (f *feeder) resuming() bool { return !f.fed && f.run.work.peek() != nil }

// skip reports whether an earlier run has done a chunk, and takes over what it
// counted.
func (f *feeder) skip(c *chunk) bool {
	r := f.run
	m := r.work.peek()
	if m == nil || m.File != c.it.name || m.Digest != c.digest || m.Size != c.size || m.Last != c.last || m.Apart != c.apart {
		r.work.old, r.work.ahead = nil, nil
		return false
	}
	if s := c.stream; s != nil {
		if c.first {
			s.start = r.state()
		}
		s.names.follow(&m.Names)
	}
	r.work.take()
	r.count(m)
	r.outcome.Reused += m.Tally.Units
	return true
}

// hand hands a chunk out.
func (f *feeder) hand(c *chunk) {
	r := f.run
	if !f.fed {
		f.fed = true
		c.made.err = r.work.reset(r.work.at)
		f.number()
	}
	if c.stream != nil {
		c.stream.handed = true
	}
	if c.empty || c.made.err != nil {
		r.order <- c
		return
	}
	if r.ordinal != nil {
		c.before, c.after = r.ordinal, make(chan int, 1)
		r.ordinal = c.after
	}
	c.done = make(chan struct{})
	r.order <- c
	r.todo <- c
}

// number lets the numbers of the units begin at those that are written.
// Nothing may be in hand.
func (f *feeder) number() {
	if f.run.ordinal != nil {
		f.run.ordinal = make(chan int, 1)
		f.run.ordinal <- f.run.all
	}
}

// buffer is room for a piece of a table: a new one, or one that was given back
// once there are enough.
func (f *feeder) buffer() *buffer {
	select {
	case b := <-f.run.free:
		return b
	default:
	}
	if f.rooms == cap(f.run.free) {
		return <-f.run.free
	}
	f.rooms++
	return &buffer{}
}

// large opens a file that is a table with a column of names and too large to be
// one chunk; it returns nil for any other.
func (f *feeder) large(it *item) *stream {
	if it.entries != nil || it.listing || len(it.faults) > 0 {
		return nil
	}
	file, err := it.open()
	if err != nil {
		return nil // which the worker tells
	}
	if s := f.openStream(it, file); s != nil {
		return s
	}
	_ = file.Close() // opened for reading
	return nil
}

func (f *feeder) openStream(it *item, file *os.File) *stream {
	info, err := file.Stat()
	if err != nil || info.Size() <= f.pieceSize(wholeFile) {
		return nil
	}
	beginning := make([]byte, min(info.Size(), wholeFile))
	if _, err := io.ReadFull(file, beginning); err != nil || !open.IsTable(beginning) {
		return nil
	}
	if int64(len(beginning)) < info.Size() {
		beginning = beginning[:bytes.LastIndexByte(beginning, '\n')+1]
	}
	h, err := delimited.ReadHead(it.name, beginning, f.run.tableOptions())
	if err != nil || h == nil || info.Size() <= maxFile && len(h.Scoped()) > 0 {
		return nil
	}
	return &stream{it: it, file: file, head: h, verdict: make(chan bool, 1)}
}

// pieceSize is the size of a piece where each profile may take a while, and
// else size.
func (f *feeder) pieceSize(size int64) int64 {
	if f.run.job.Reports != NoReports {
		return reportChunk
	}
	return size
}

// table takes a large table.
func (f *feeder) table(s *stream) error {
	if m := f.run.work.peek(); !f.fed && m != nil && m.Apart && m.File == s.it.name {
		return f.sorted(s)
	}
	if _, err := s.file.Seek(int64(s.head.Size()), io.SeekStart); err != nil {
		return f.broken(s, err)
	}
	apart, err := f.pieces(s, &cutter{in: s.file, head: s.head, size: int(f.pieceSize(chunkSize)), buffer: f.buffer})
	if err != nil || !apart {
		return err
	}
	f.number()
	return f.sorted(s)
}

// broken tells of a file that cannot be read, or not any further.
func (f *feeder) broken(s *stream, err error) error {
	f.hand(&chunk{it: &item{name: s.it.name, faults: cannotOpen(s.it.name, err)}, first: true, last: true})
	return nil
}

// pieces hands the pieces of a table out. It returns whether they must be done
// again, because names come twice.
func (f *feeder) pieces(s *stream, cut interface{ next(*chunk) error }) (apart bool, err error) {
	sum := sha256.New()
	sum.Write(s.head.Text())
	size, line, first := int64(s.head.Size()), s.head.Line(), true
	for last := false; !last; first = false {
		if f.over() || s.apart.Load() {
			break
		}
		c := &chunk{it: s.it, stream: s, head: s.head, line: line, first: first, apart: s.sorted != ""}
		if err = cut.next(c); err != nil {
			break
		}
		last = c.last
		sum.Write(c.data)
		size += int64(len(c.data))
		c.size, c.digest = size, hex.EncodeToString(sum.Sum(nil))
		if last {
			c.source = s.sorted
			if c.source == "" {
				c.source = sourceLine(s.it.name, c.digest, size)
			}
		}
		line += delimited.Lines(c.data)
		if f.resuming() && f.skip(c) {
			f.run.free <- c.buf
		} else {
			f.hand(c)
		}
		if last {
			return s.handed && <-s.verdict, nil
		}
	}
	if s.handed {
		f.hand(&chunk{it: s.it, stream: s, last: true, empty: true})
		apart = <-s.verdict
	}
	switch {
	case err != nil:
		return false, f.broken(s, err)
	case f.over():
		return false, errStopped
	}
	return apart, nil
}
