package batch

import (
	"bytes"
	"slices"
	"strings"

	"shearbook/profile"
	"shearbook/profile/delimited"
)

// piece is the rows of one profile that follow one another.
type piece struct {
	name  string
	text  []byte
	lines int
}

// cutAll cuts the rows of a table into pieces.
func cutAll(h *delimited.Head, text []byte) []piece {
	var pieces []piece
	for len(text) > 0 {
		name, n, lines, _ := h.Next(text)
		pieces = append(pieces, piece{oneName(name), text[:n], lines})
		text = text[n:]
	}
	return pieces
}

// oneName is a name as the reader has it, with single blanks.
func oneName(name []byte) string { return strings.Join(strings.Fields(string(name)), " ") }

// gather brings the pieces of one name together, in the order in which the names
// first appear. It returns their text, the line of the file of each of its
// lines, and whether any name came twice; if none did, nothing else.
func gather(pieces []piece, line int) (text []byte, lines []int32, apart bool) {
	first := map[string]int{}
	order := make([]int, len(pieces))
	starts := make([]int, len(pieces))
	for i, p := range pieces {
		if _, twice := first[p.name]; twice {
			apart = true
		} else {
			first[p.name] = i
		}
		order[i], starts[i] = i, line
		line += p.lines
	}
	if !apart {
		return nil, nil, false
	}
	slices.SortStableFunc(order, func(a, b int) int { return first[pieces[a].name] - first[pieces[b].name] })
	for _, i := range order {
		text, lines = appendPiece(text, lines, pieces[i].text, starts[i], pieces[i].lines)
	}
	return text, lines, true
}

// appendPiece adds a piece to a text, and its lines to those of the text.
func appendPiece(text []byte, lines []int32, piece []byte, line, n int) ([]byte, []int32) {
	if len(piece) == 0 {
		return text, lines
	}
	text = append(text, piece...)
	if last := piece[len(piece)-1]; last != '\n' && last != '\r' {
		text = append(text, '\n')
		n++
	}
	for i := range n {
		lines = append(lines, int32(line+i))
	}
	return text, lines
}

// wholeTable does a table that is one chunk.
func (w *worker) wholeTable(h *delimited.Head, data []byte) error {
	rows := data[h.Size():]
	if len(bytes.TrimSpace(rows)) == 0 {
		return w.unread(profile.Faults{profile.Faultf(profile.Place{File: h.File(), Line: h.Line() - 1, Column: 1}, "",
			"the table has a header but no layers")})
	}
	var names order
	pieces := cutAll(h, rows)
	for _, p := range pieces {
		names.next([]byte(p.name))
	}
	w.unknown = nil
	for _, name := range h.Scoped() {
		if !slices.ContainsFunc(pieces, func(p piece) bool { return p.name == name }) {
			w.unknown = append(w.unknown, profile.Note{ID: "no-such-profile", Place: profile.Place{File: h.File()},
				Text: "a line above the header is about profile " + profile.Quote(name) + ", which the file does not have"})
		}
	}
	if !names.ascends() {
		if text, lines, apart := gather(pieces, h.Line()); apart {
			w.run.job.sayApart(h.File())
			rows, w.chunk.lines, w.chunk.apart = text, lines, true
		}
	}
	return w.table(h, rows)
}

// table does rows of a table.
func (w *worker) table(h *delimited.Head, text []byte) error {
	c := w.chunk
	if c.before != nil {
		w.pass(len(cutAll(h, text)))
	}
	var notes []profile.Note
	if c.first {
		notes = append(h.Notes(), w.unknown...)
	}
	plain := w.fast(h)
	line, units := c.line, 0
	for len(text) > 0 {
		u := &w.u
		n, lines := 0, 0
		if plain != nil {
			n, lines = plain.read(text, line)
		}
		if n > 0 && w.brief(plain, line) {
			c.made.names.next(plain.name)
			text, line, units = text[n:], line+lines, units+1
			continue
		}
		if n > 0 {
			plain.base.Name = string(plain.name)
			*u = unit{file: h.File(), line: line, name: plain.base.Name, profile: &plain.base, setting: &w.run.setting, plain: plain}
			if w.run.job.Reports != NoReports {
				u.data, u.extract = tableData(h, text[:n]), w.isPart(h, text[:n])
			}
		} else {
			var name []byte
			name, n, lines, _ = h.Next(text)
			*u = w.piece(c, h, piece{oneName(name), text[:n], lines}, line)
		}
		u.notes, notes = notes, nil
		c.made.names.next([]byte(u.name))
		if err := w.unit(u); err != nil {
			return err
		}
		text, line, units = text[n:], line+lines, units+1
	}
	c.made.names.end()
	if c.before == nil {
		c.made.all = units
		w.counted = true
	}
	return nil
}

// brief writes the plain profile that was read last if it is one of the shard.
// It returns false where unit must.
func (w *worker) brief(plain *fast, line int) bool {
	if !plain.brief || w.run.job.Shard.takes(w.next) && !plain.write(&w.clerk, line) {
		return false
	}
	w.next++
	return true
}

// fast returns what reads the plain profiles of a table, nil where it can have
// none. Rows that were brought together have places that it does not know.
func (w *worker) fast(h *delimited.Head) *fast {
	if w.chunk.lines != nil || w.run.job.ordinary {
		return nil
	}
	if w.head != h {
		w.head, w.plain = h, newFast(h, w.run.job, &w.run.setting)
	}
	if w.plain != nil {
		w.plain.next = nil // it lies in the chunk before
	}
	return w.plain
}

// tableData is the table of one profile: the head and its rows.
func tableData(h *delimited.Head, rows []byte) func() []byte {
	return func() []byte { return append(h.Text(), rows...) }
}

// isPart reports whether a table's head and rows are not the whole file.
func (w *worker) isPart(h *delimited.Head, rows []byte) bool {
	c := w.chunk
	return c.stream != nil || c.lines != nil || int64(h.Size()+len(rows)) != c.size
}
