package evidence

import (
	"bytes"
	"errors"
	"fmt"
)

// file is a PDF file that is read object by object.
type file struct {
	data    []byte
	budget  *budget
	table   map[int]entry // where the objects are, the newest of each
	trailer dict          // the newest
	objects map[int]object
	open    map[int]bool        // being read: an object that needs itself is at fault
	packs   map[int]*objectPack // object streams
}

// entry is where an object is: at an offset, or in an object stream.
type entry struct {
	offset int // of the object; 0 where it is in a stream
	pack   int // the number of its stream
}

// Limits on a file.
const (
	maxObjects  = 500_000
	maxSections = 1_000 // cross-reference sections, one for each time the file was added to
)

var errDamaged = errors.New("the file is damaged or cut off")

// damaged says what is wrong with a file that is not whole; what is refused
// for its cost is not damaged.
func damaged(format string, args ...any) error {
	err := fmt.Errorf(format, args...)
	if errors.Is(err, errCostly) || errors.Is(err, errTooLarge) {
		return err
	}
	return fmt.Errorf("%w: %w", errDamaged, err)
}

// open reads the tables of a file.
func open(data []byte) (*file, error) {
	f := &file{data: data, budget: newBudget(), table: map[int]entry{},
		objects: map[int]object{}, open: map[int]bool{}, packs: map[int]*objectPack{}}
	at, err := f.startxref()
	if err != nil {
		return nil, err
	}
	seen := map[int]bool{}
	for at >= 0 {
		if seen[at] {
			return nil, damaged("its cross-reference tables lead in a circle")
		}
		if seen[at] = true; len(seen) > maxSections {
			return nil, damaged("it has more than %d cross-reference tables", maxSections)
		}
		if at, err = f.section(at); err != nil {
			return nil, err
		}
	}
	return f, nil
}

func (f *file) scanner(at int) *scanner {
	return &scanner{data: f.data, at: min(max(at, 0), len(f.data)), budget: f.budget}
}

// objectAt reads the indirect object at an offset.
func (f *file) objectAt(at int) (n int, o object, err error) {
	if at < 0 || at >= len(f.data) {
		return 0, nil, damaged("an object lies outside the file")
	}
	s := f.scanner(at)
	s.space()
	n, ok1 := s.integer()
	s.space()
	_, ok2 := s.integer()
	s.space()
	if !ok1 || !ok2 || !bytes.HasPrefix(f.data[s.at:], []byte("obj")) {
		return 0, nil, damaged("no object is where its table says, at byte %d", at)
	}
	s.at += len("obj")
	o, _ = s.object()
	if s.err != nil {
		return 0, nil, damaged("object %d: %w", n, s.err)
	}
	d, ok := o.(dict)
	if s.space(); !ok || !bytes.HasPrefix(f.data[s.at:], []byte("stream")) {
		return n, o, nil
	}
	st, err := f.stream(s, d)
	if err != nil {
		return 0, nil, damaged("object %d: %w", n, err)
	}
	return n, st, nil
}

// stream takes the bytes of a stream behind its dictionary.
func (f *file) stream(s *scanner, d dict) (*stream, error) {
	s.at += len("stream")
	if s.peek(0) == '\r' {
		s.at++
	}
	if s.peek(0) == '\n' {
		s.at++
	}
	length, ok := f.resolve(d["Length"]).(float64)
	if !ok || length < 0 || length > float64(len(f.data)-s.at) {
		return nil, errors.New("a stream has no length, or is longer than the file")
	}
	raw := f.data[s.at : s.at+int(length) : s.at+int(length)]
	s.at += int(length)
	if s.blank(); !bytes.HasPrefix(f.data[s.at:], []byte("endstream")) {
		return nil, errors.New("a stream does not end where it says")
	}
	return &stream{d, raw}, nil
}

// resolve returns the object that a reference leads to; what cannot be read
// is nil, as the standard has it for what is missing.
func (f *file) resolve(o object) object {
	r, ok := o.(ref)
	if !ok {
		return o
	}
	o, err := f.load(r.number)
	if err != nil {
		return nil
	}
	return o
}

// load reads an object by its number, once.
func (f *file) load(n int) (object, error) {
	if o, ok := f.objects[n]; ok {
		return o, nil
	}
	e, ok := f.table[n]
	if !ok || e == (entry{}) {
		return nil, damaged("object %d is missing", n)
	}
	if f.open[n] || len(f.open) > maxDepth {
		return nil, damaged("object %d needs itself, or too many others", n)
	}
	f.open[n] = true
	defer delete(f.open, n)
	o, err := f.read(n, e)
	if err != nil {
		return nil, err
	}
	if _, again := o.(ref); again {
		return nil, damaged("object %d is only a reference", n)
	}
	f.objects[n] = o
	return o, nil
}

func (f *file) read(n int, e entry) (object, error) {
	if e.pack != 0 {
		return f.fromPack(n, e.pack)
	}
	found, o, err := f.objectAt(e.offset)
	if err == nil && found != n {
		err = damaged("object %d is where object %d should be", found, n)
	}
	return o, err
}

// objectPack is an object stream (ISO 32000-1, 7.5.7).
type objectPack struct {
	data    []byte
	offsets map[int]int // of the objects in data
}

func (f *file) fromPack(n, pack int) (object, error) {
	p := f.packs[pack]
	if p == nil {
		var err error
		if p, err = f.openPack(pack); err != nil {
			return nil, err
		}
		f.packs[pack] = p
	}
	at, ok := p.offsets[n]
	if !ok {
		return nil, damaged("object %d is not in its object stream", n)
	}
	s := &scanner{data: p.data, at: at, budget: f.budget}
	o, _ := s.object()
	if s.err != nil {
		return nil, damaged("object %d: %w", n, s.err)
	}
	return o, nil
}

func (f *file) openPack(pack int) (*objectPack, error) {
	if f.table[pack].pack != 0 {
		return nil, damaged("an object stream lies in another")
	}
	o, err := f.load(pack)
	if err != nil {
		return nil, err
	}
	st, ok := o.(*stream)
	if !ok {
		return nil, damaged("object %d is no object stream", pack)
	}
	p := &objectPack{offsets: map[int]int{}}
	if p.data, err = f.unpack(st, &f.budget.packed); err != nil {
		return nil, err
	}
	first, _ := f.resolve(st.dict["First"]).(float64)
	n, ok := count(f.resolve(st.dict["N"]))
	if first < 0 || first > float64(len(p.data)) || !ok {
		return nil, damaged("object stream %d cannot be read", pack)
	}
	s := &scanner{data: p.data[:int(first)], budget: f.budget}
	for range n {
		s.space()
		n, ok1 := s.integer()
		s.space()
		at, ok2 := s.integer()
		if !ok1 || !ok2 || at > len(p.data)-int(first) {
			return nil, damaged("object stream %d cannot be read", pack)
		}
		p.offsets[n] = int(first) + at
	}
	return p, nil
}

// same reports whether all objects of an older state of the file are still
// those of this one, but for the catalog.
func (f *file) same(older *file) bool {
	root, ok := older.trailer["Root"].(ref)
	if !ok || f.trailer["Root"] != object(root) {
		return false
	}
	for n, e := range older.table {
		if n != root.number && f.table[n] != e {
			return false
		}
	}
	a, _ := f.resolve(root).(dict)
	b, _ := older.resolve(root).(dict)
	for _, key := range []name{"Pages", "Outlines", "OpenAction", "AcroForm", "OCProperties"} {
		if fmt.Sprint(a[key]) != fmt.Sprint(b[key]) {
			return false
		}
	}
	return true
}
