package batch

import (
	"bufio"
	"cmp"
	"container/heap"
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"errors"
	"hash/fnv"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strconv"

	"shearbook/profile/delimited"
)

// Sizes of what is sorted on disk.
const (
	spillRun    = 1 << 19 // hashes of names that are sorted in memory
	spillBucket = 4 << 20 // bytes of a table that are sorted in memory, about
	spillMost   = 256     // parts that a table is sorted in at most; beyond 1 GiB they grow
)

// twice searches a table for a name that comes again with others between. It
// holds no more than spillRun hashes of names in memory. Names of one hash,
// which may be different ones, count as one: the table is then sorted without
// need.
func (s *stream) twice(r *run) (bool, error) {
	file, err := s.it.open()
	if err != nil {
		return false, err
	}
	defer file.Close() // opened for reading
	if _, err := file.Seek(int64(s.head.Size()), io.SeekStart); err != nil {
		return false, err
	}
	spill, err := newSpill(filepath.Join(unfinished(r.job.Out), spillName))
	if err != nil {
		return false, r.work.failed(err)
	}
	defer spill.remove()
	cut := &cutter{in: file, head: s.head, size: chunkSize, buffer: sameBuffer()}
	for c := (chunk{}); !c.last; {
		if err := cut.next(&c); err != nil {
			return false, err
		}
		for _, p := range cutAll(s.head, c.data) {
			if err := spill.add(hashOf(p.name)); err != nil {
				return false, r.work.failed(err)
			}
		}
	}
	return spill.repeats()
}

// sameBuffer gives the same buffer again and again.
func sameBuffer() func() *buffer {
	b := &buffer{}
	return func() *buffer { return b }
}

func hashOf(name string) uint64 {
	h := fnv.New64a()
	io.WriteString(h, name) // cannot fail
	return h.Sum64()
}

// spill is many hashes, sorted in runs of which all but the last are on disk.
type spill struct {
	dir   string
	run   []uint64
	files []*os.File
}

func newSpill(dir string) (*spill, error) {
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return nil, err
	}
	return &spill{dir: dir}, nil
}

func (s *spill) add(hash uint64) error {
	if s.run = append(s.run, hash); len(s.run) < spillRun {
		return nil
	}
	return s.flush()
}

// flush brings the run to disk.
func (s *spill) flush() error {
	slices.Sort(s.run)
	f, err := os.Create(filepath.Join(s.dir, "names-"+strconv.Itoa(len(s.files))))
	if err != nil {
		return err
	}
	s.files = append(s.files, f)
	w := bufio.NewWriter(f)
	for _, hash := range s.run {
		var b [8]byte
		binary.LittleEndian.PutUint64(b[:], hash)
		w.Write(b[:]) // its error is kept for Flush
	}
	s.run = s.run[:0]
	return w.Flush()
}

// repeats reports whether any hash was added twice.
func (s *spill) repeats() (bool, error) {
	if len(s.files) == 0 {
		slices.Sort(s.run)
		n := len(s.run)
		return len(slices.Compact(s.run)) < n, nil
	}
	if err := s.flush(); err != nil {
		return false, err
	}
	var h runs[uint64]
	for _, f := range s.files {
		if _, err := f.Seek(0, io.SeekStart); err != nil {
			return false, err
		}
		in := bufio.NewReader(f)
		h.push(func() (uint64, uint64, error) {
			var b [8]byte
			_, err := io.ReadFull(in, b[:])
			hash := binary.LittleEndian.Uint64(b[:])
			return hash, hash, err
		})
	}
	for before, first := uint64(0), true; h.Len() > 0; first = false {
		hash, err := h.pop()
		if err != nil {
			return false, err
		}
		if !first && hash == before {
			return true, nil
		}
		before = hash
	}
	return false, h.err
}

func (s *spill) remove() {
	for _, f := range s.files {
		_ = f.Close() // it goes away
	}
	os.RemoveAll(s.dir)
}

// runs merges sorted runs of values by their keys.
type runs[T any] struct {
	of  []*sortedRun[T]
	err error
}

type sortedRun[T any] struct {
	key   uint64
	value T
	next  func() (uint64, T, error)
}

// push adds a run; next returns its values in order, and io.EOF at its end.
func (r *runs[T]) push(next func() (uint64, T, error)) {
	run := &sortedRun[T]{next: next}
	var err error
	if run.key, run.value, err = next(); err == nil {
		heap.Push(r, run)
	} else if err != io.EOF {
		r.err = err
	}
}

// pop takes the first of all values.
func (r *runs[T]) pop() (T, error) {
	run := r.of[0]
	value := run.value
	var err error
	if run.key, run.value, err = run.next(); err == nil {
		heap.Fix(r, 0)
	} else {
		heap.Pop(r)
	}
	if err != nil && err != io.EOF {
		r.err = err
	}
	return value, r.err
}

// Len, Less, Swap, Push and Pop are for package heap.
func (r *runs[T]) Len() int           { return len(r.of) }
func (r *runs[T]) Less(i, j int) bool { return r.of[i].key < r.of[j].key }
func (r *runs[T]) Swap(i, j int)      { r.of[i], r.of[j] = r.of[j], r.of[i] }
func (r *runs[T]) Push(x any)         { r.of = append(r.of, x.(*sortedRun[T])) }
func (r *runs[T]) Pop() any {
	n := len(r.of) - 1
	x := r.of[n]
	r.of = r.of[:n]
	return x
}

// spilled is rows of one profile that follow one another, with their place.
type spilled struct {
	first int // line in which the profile begins
	line  int
	name  string
	text  []byte
}

func (p *spilled) write(w *bufio.Writer) {
	var b []byte
	for _, n := range [...]int{p.first, p.line, len(p.name), len(p.text)} {
		b = binary.AppendUvarint(b, uint64(n))
	}
	w.Write(b) // its error is kept for Flush, as that of the next two
	w.WriteString(p.name)
	w.Write(p.text)
}

func (p *spilled) read(in *bufio.Reader) error {
	var n [4]uint64
	for i := range n {
		var err error
		if n[i], err = binary.ReadUvarint(in); err != nil {
			return err
		}
	}
	if n[2] > maxFile || n[3] > 2*maxFile {
		return errors.New("a file of rows that are brought together was changed")
	}
	p.first, p.line = int(n[0]), int(n[1])
	name := make([]byte, n[2])
	p.text = make([]byte, n[3])
	_, err := io.ReadFull(in, name)
	if err == nil {
		_, err = io.ReadFull(in, p.text)
	}
	p.name = string(name)
	return err
}

// sorted takes a large table whose rows must be brought together first: those
// of each profile, the profiles in the order in which they first appear.
//
// The rows are spread over files by the hash of the profile's name, each file is
// sorted in memory, and the sorted files are merged. The memory is that of one
// file and a small buffer for each.
func (f *feeder) sorted(s *stream) error {
	b := &buckets{dir: filepath.Join(f.run.work.dir, spillName), head: s.head}
	defer b.remove()
	source, err := b.fill(s)
	if err == nil {
		err = b.sort()
	}
	if err != nil {
		return f.run.work.failed(err)
	}
	t := &stream{it: s.it, file: s.file, head: s.head, sorted: source, verdict: make(chan bool, 1)}
	_, err = f.pieces(t, &merged{in: b.merge(), size: int(f.pieceSize(chunkSize)), buffer: f.buffer})
	return err
}

// buckets are the files that the rows of a table are spread over.
type buckets struct {
	dir   string
	head  *delimited.Head
	files []*os.File
}

// fill spreads the rows, and returns the line of sources.csv.
func (b *buckets) fill(s *stream) (source string, err error) {
	info, err := s.file.Stat()
	if err != nil {
		return "", err
	}
	if err := os.MkdirAll(b.dir, 0o777); err != nil {
		return "", err
	}
	var out []*bufio.Writer
	for i := range min(spillMost, int(info.Size()/spillBucket)+1) {
		f, err := os.Create(filepath.Join(b.dir, "rows-"+strconv.Itoa(i)))
		if err != nil {
			return "", err
		}
		b.files, out = append(b.files, f), append(out, bufio.NewWriterSize(f, 8<<10))
	}
	if _, err := s.file.Seek(int64(s.head.Size()), io.SeekStart); err != nil {
		return "", err
	}
	sum := sha256.New()
	sum.Write(s.head.Text())
	size, line := int64(s.head.Size()), s.head.Line()
	cut := &cutter{in: s.file, head: s.head, size: chunkSize, buffer: sameBuffer()}
	for c := (chunk{}); !c.last; {
		if err := cut.next(&c); err != nil {
			return "", err
		}
		sum.Write(c.data)
		size += int64(len(c.data))
		for _, p := range cutAll(s.head, c.data) {
			row := spilled{line: line, name: p.name, text: p.text}
			row.write(out[hashOf(p.name)%uint64(len(out))])
			line += p.lines
		}
	}
	for _, w := range out {
		if err := w.Flush(); err != nil {
			return "", err
		}
	}
	return sourceLine(s.it.name, hex.EncodeToString(sum.Sum(nil)), size), nil
}

// sort sorts each file.
func (b *buckets) sort() error {
	for _, f := range b.files {
		if _, err := f.Seek(0, io.SeekStart); err != nil {
			return err
		}
		in := bufio.NewReader(f)
		var rows []spilled
		first := map[string]int{}
		for {
			var p spilled
			if err := p.read(in); err == io.EOF {
				break
			} else if err != nil {
				return err
			}
			if _, again := first[p.name]; !again {
				first[p.name] = p.line
			}
			p.first = first[p.name]
			rows = append(rows, p)
		}
		slices.SortFunc(rows, func(x, y spilled) int { return cmp.Or(x.first-y.first, x.line-y.line) })
		if err := f.Truncate(0); err != nil {
			return err
		}
		if _, err := f.Seek(0, io.SeekStart); err != nil {
			return err
		}
		w := bufio.NewWriter(f)
		for i := range rows {
			rows[i].write(w)
		}
		if err := w.Flush(); err != nil {
			return err
		}
		if _, err := f.Seek(0, io.SeekStart); err != nil {
			return err
		}
	}
	return nil
}

// merge merges the sorted files.
func (b *buckets) merge() *runs[spilled] {
	var r runs[spilled]
	for _, f := range b.files {
		in := bufio.NewReaderSize(f, 8<<10)
		r.push(func() (uint64, spilled, error) {
			var p spilled
			err := p.read(in)
			return uint64(p.first), p, err
		})
	}
	return &r
}

func (b *buckets) remove() {
	for _, f := range b.files {
		_ = f.Close() // it goes away
	}
	os.RemoveAll(b.dir)
}

// merged makes chunks of rows that were brought together.
type merged struct {
	in     *runs[spilled]
	size   int
	buffer func() *buffer
}

// next puts the next profiles into a chunk.
func (m *merged) next(c *chunk) error {
	c.buf = m.buffer()
	b, first := c.buf.b[:0], -1
	c.lines = []int32{}
	for m.in.Len() > 0 && (len(b) < m.size || int(m.in.of[0].key) == first) {
		p, err := m.in.pop()
		if err != nil {
			return err
		}
		first = p.first
		b, c.lines = appendPiece(b, c.lines, p.text, p.line, delimited.Lines(p.text))
	}
	c.buf.b, c.data, c.last = b, b, m.in.Len() == 0
	return m.in.err
}
