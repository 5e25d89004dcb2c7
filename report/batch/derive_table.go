package batch

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"

	"shearbook/profile"
)

// maxRecord is the longest record of a table that is read, in bytes: a line
// that does not end is no table of a batch.
const maxRecord = 1 << 20

// table reads comma-separated values (RFC 4180) record by record and holds
// one record at a time. It is several times as fast as encoding/csv, because
// it copies no cell: what is made from a summary of a million rows should
// wait for the disk. Its records are those of encoding/csv; a test holds the
// two side by side.
type table struct {
	file string // as errors name it
	in   io.Reader

	buffer   []byte
	from, to int   // what is read and not yet given out
	err      error // of the input, io.EOF at its end
	line     int   // of the record given last, from 1
	next     int   // of the next one
	record   [][]byte
	width    int // cells of a record; 0 before the first
}

func newTable(file string, in io.Reader) *table {
	return &table{file: file, in: in, buffer: make([]byte, 256<<10), next: 1}
}

// openTable opens a table of a batch's folder and checks that its columns are
// those it should have.
func openTable(dir, file string, columns []Column) (*table, io.Closer, error) {
	path := filepath.Join(dir, file)
	f, err := os.Open(path)
	if err != nil {
		return nil, nil, fmt.Errorf("%s cannot be read: %w", path, profile.FileError(err))
	}
	t := newTable(path, f)
	if err := t.header(columns); err != nil {
		f.Close()
		return nil, nil, err
	}
	return t, f, nil
}

// header reads the first record, which must name the columns.
func (t *table) header(columns []Column) error {
	names, err := t.read()
	if err != nil && err != io.EOF {
		return err
	}
	if len(names) != len(columns) {
		return t.fault("has %d columns, not the %d of a batch", len(names), len(columns))
	}
	for i, c := range columns {
		if string(names[i]) != c.Name {
			return t.fault("has a column %q where a batch has %q", names[i], c.Name)
		}
	}
	return nil
}

// fault is what is wrong with the record given last. No table that a run wrote
// whole has any.
func (t *table) fault(format string, args ...any) error {
	return profile.Faults{profile.Faultf(profile.Place{File: t.file, Line: max(t.line, 1)}, "run the batch again", format, args...)}
}

var errQuote = errors.New(`a " stands in a cell that is not quoted as a whole`)

// read returns the cells of the next record, io.EOF after the last. They hold
// until the next call. Blank lines are passed over.
func (t *table) read() ([][]byte, error) {
	for {
		record, err := t.take()
		if err != nil {
			return nil, err
		}
		if len(record) == 0 {
			continue
		}
		if err := t.split(record); err != nil {
			return nil, t.fault("%v", err)
		}
		if t.width == 0 {
			t.width = len(t.record)
		}
		if len(t.record) != t.width {
			return nil, t.fault("the record has %d cells, the header %d", len(t.record), t.width)
		}
		return t.record, nil
	}
}

// take returns the bytes of the next record without its line end.
func (t *table) take() ([]byte, error) {
	seen := 0 // bytes of the record that are looked through
	quotes := 0
	for {
		rest := t.buffer[t.from+seen : t.to]
		i := bytes.IndexByte(rest, '\n')
		part := rest
		if i >= 0 {
			part = rest[:i]
		}
		quotes += bytes.Count(part, quote)
		switch {
		case i >= 0 && quotes%2 == 0:
			return t.give(seen+i, seen+i+1), nil
		case i >= 0: // a line end inside quotes
			seen += i + 1
		default:
			seen += len(rest)
			if err := t.fill(seen); err != nil {
				return t.last(seen, quotes, err)
			}
		}
	}
}

var quote = []byte{'"'}

// give takes n bytes off the input as a record that takes whole bytes there.
func (t *table) give(n, whole int) []byte {
	record := t.buffer[t.from : t.from+n]
	t.line = t.next
	t.next += bytes.Count(t.buffer[t.from:t.from+whole], []byte{'\n'})
	t.from += whole
	return bytes.TrimSuffix(record, []byte{'\r'})
}

// last returns the record that ends with the input.
func (t *table) last(n, quotes int, err error) ([]byte, error) {
	switch {
	case err != io.EOF:
		return nil, err
	case quotes%2 != 0:
		t.line = t.next
		return nil, t.fault("a quoted cell does not end")
	case n == 0:
		return nil, io.EOF
	}
	return t.give(n, n), nil
}

// fill reads on behind the seen bytes of a record.
func (t *table) fill(seen int) error {
	if t.err != nil {
		return t.err
	}
	if seen > maxRecord {
		t.line = t.next
		return t.fault("a record is longer than %d KiB", maxRecord>>10)
	}
	if t.from > 0 {
		copy(t.buffer, t.buffer[t.from:t.to])
		t.from, t.to = 0, t.to-t.from
	}
	if t.to == len(t.buffer) {
		t.buffer = append(t.buffer, make([]byte, len(t.buffer))...)
	}
	n, err := t.in.Read(t.buffer[t.to:])
	t.to += n
	if err != nil && err != io.EOF {
		err = fmt.Errorf("%s cannot be read: %w", t.file, profile.FileError(err))
	}
	t.err = err
	if n > 0 {
		return nil
	}
	return err
}

// split cuts a record into its cells.
func (t *table) split(record []byte) error {
	t.record = t.record[:0]
	if bytes.IndexByte(record, '"') >= 0 {
		return t.splitQuoted(record)
	}
	for {
		i := bytes.IndexByte(record, ',')
		if i < 0 {
			t.record = append(t.record, record)
			return nil
		}
		t.record = append(t.record, record[:i])
		record = record[i+1:]
	}
}

// splitQuoted cuts a record some of whose cells are quoted, and takes their
// quotes off in place.
func (t *table) splitQuoted(record []byte) error {
	for {
		cell, rest, more, err := unquote(record)
		if err != nil {
			return err
		}
		t.record = append(t.record, cell)
		if !more {
			return nil
		}
		record = rest
	}
}

// unquote returns the first cell of a record, what follows its comma, and
// whether there was one.
func unquote(record []byte) (cell, rest []byte, more bool, err error) {
	if len(record) == 0 || record[0] != '"' {
		cell, rest, more = bytes.Cut(record, []byte{','})
		if bytes.IndexByte(cell, '"') >= 0 {
			return nil, nil, false, errQuote
		}
		return cell, rest, more, nil
	}
	n := 0 // bytes of the cell, moved to the front of record
	for i := 1; i < len(record); i++ {
		if c := record[i]; c != '"' {
			if c == '\r' && i+1 < len(record) && record[i+1] == '\n' {
				continue // as encoding/csv has it: a line end is \n
			}
			record[n] = c
			n++
			continue
		}
		if i+1 == len(record) {
			return record[:n], nil, false, nil
		}
		switch record[i+1] {
		case '"':
			record[n] = '"'
			n++
			i++
		case ',':
			return record[:n], record[i+2:], true, nil
		default:
			return nil, nil, false, errQuote
		}
	}
	return nil, nil, false, errQuote
}
