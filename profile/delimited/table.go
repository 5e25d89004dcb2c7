package delimited

import (
	"bytes"
	"math"
	"strings"

	"shearbook/profile"
)

// table is the layers read so far.
type table struct {
	unitless bool // a unit is missing: numbers are checked, but not as depths and velocities
	layers   []profile.Layer
	rows     []profile.Row
	cells    []byte // of the rows from pending on, not yet strings
	ends     []int32
	pending  int
	stacks   []stack
	names    map[string]int // line in which each profile begins
	soil     string         // of the row before
	bounds   bool           // a lower and an upper Vs were used
}

// stack is the layers of one profile as they pile up, downward.
type stack struct {
	name        string
	first, last int  // its layers and rows: [first, last)
	resumed     bool // its layers began further up, which is a fault

	faulty      bool    // a fault of its layers was told
	top, bottom float64 // m, of the layer last read
	known       bool    // top and bottom are good
	open        spot    // of the cell that says that this layer has no bottom; zero if it has one
	openText    string  // of that cell
	stand       bool    // its bottom looks like a stand-in: 999

	placed *placement // what columns say of its position; nil if nothing
}

// readRows reads every layer of the file.
func (r *reader) readRows() bool {
	if r.tooManyRows() {
		return false
	}
	r.readNumerals()
	return r.stackRows()
}

// stackRows reads every row that is left.
func (r *reader) stackRows() bool {
	r.table.names = map[string]int{}
	r.reserve()
	for {
		ok, bad := r.scan.next()
		if bad != nil {
			r.trouble(bad)
			return false
		}
		if !ok {
			break
		}
		if r.scan.blank() {
			continue
		}
		if r.comment() {
			if len(r.preamble.statements) > MaxMetadata {
				r.stop(r.scan.place(0), "", "the file has more than %d comments", MaxMetadata)
				return false
			}
			continue
		}
		if len(r.table.layers) == MaxRows {
			r.stopRows(r.scan.place(0))
			return false
		}
		if !r.row() {
			return false
		}
	}
	r.flush()
	r.closeStack()
	if len(r.table.layers) == 0 && r.total == 0 {
		r.fault(r.headerSpot(), hintTable, "the table has a header but no layers")
	}
	return len(r.table.layers) > 0
}

func (r *reader) stopRows(at spot) {
	r.stop(at, "split the file", "the file has more than %d layers", MaxRows)
}

// tooManyRows looks ahead for more rows than are read, so as not to read
// those that are. It counts only lines that cannot be anything else.
func (r *reader) tooManyRows() bool {
	ahead := r.scan
	if bytes.Count(ahead.text[ahead.off:], []byte("\n")) <= MaxRows || bytes.IndexByte(ahead.text[ahead.off:], '"') >= 0 {
		return false
	}
	rows := 0
	for ahead.off < len(ahead.text) {
		line := ahead.line
		if text := bytes.TrimLeft(ahead.rawLine(), " \t,;"); len(text) > 0 && text[0] != '#' {
			rows++
		}
		if rows > MaxRows {
			r.stopRows(spot{line, 1})
			return true
		}
	}
	return false
}

// reserve makes room for as many layers as there are lines that have all the
// separators of the header.
func (r *reader) reserve() {
	rest := r.scan.text[r.scan.off:]
	lines := max(bytes.Count(rest, []byte("\n")), bytes.Count(rest, []byte("\r"))) + 1
	full := bytes.Count(rest, []byte{r.scan.sep})/max(len(r.columns.list)-1, 1) + 1
	n := min(lines, full, MaxRows)
	r.table.layers = make([]profile.Layer, 0, n)
	r.table.rows = make([]profile.Row, 0, n)
}

// comment keeps a row that is a single cell beginning with #.
func (r *reader) comment() bool {
	cells := r.scan.cells
	if len(cells) != 1 || len(r.columns.list) < 2 || cells[0].quoted || cells[0].text[0] != '#' {
		return false
	}
	text := strings.TrimSpace(strings.TrimLeft(string(cells[0].text), "#"))
	r.preamble.statements = append(r.preamble.statements, statement{value: text, spot: r.scan.place(0)})
	return true
}

// row reads one layer. It returns false if there are too many profiles.
func (r *reader) row() bool {
	if !r.startStack() {
		return false
	}
	s := &r.table.stacks[len(r.table.stacks)-1]
	before := r.total
	if r.totals() {
		s.faulty = true
		return true
	}
	r.tooManyCells()
	r.table.layers = append(r.table.layers, profile.Layer{})
	l := &r.table.layers[len(r.table.layers)-1]
	r.layer(l)
	r.pile(s, l)
	r.position(s)
	s.faulty = s.faulty || r.total > before
	r.keep()
	return true
}

// tooManyCells looks for cells beyond the header.
func (r *reader) tooManyCells() {
	for i := len(r.columns.list); i < len(r.scan.cells); i++ {
		if len(r.scan.cells[i].text) > 0 {
			hint := "quote cells that hold the separator"
			if r.scan.sep == ',' {
				hint += "; decimal commas need semicolons or tabs between the cells"
			}
			r.fault(r.scan.place(i), hint, "the row has more cells than the header, which has %d", len(r.columns.list))
			return
		}
	}
}

// startStack starts a new profile if the row belongs to another one than the
// row before.
func (r *reader) startStack() bool {
	t := &r.table
	i := r.columns.index[profile.ProfileName]
	if i < 0 {
		if len(t.stacks) == 0 {
			t.stacks = append(t.stacks, stack{name: r.fileName()})
		}
		return true
	}
	name := r.scan.cell(i)
	n := len(t.stacks)
	switch {
	case len(name) == 0:
		r.fault(r.scan.place(i), "repeat the name of the profile in every row", "the profile has no name")
		if n == 0 {
			t.stacks = append(t.stacks, stack{resumed: true})
		}
		t.stacks[len(t.stacks)-1].faulty = true
		return true
	case n > 0 && string(name) == t.stacks[n-1].name:
		return true
	}
	return r.newStack(i, strings.Join(strings.Fields(string(name)), " "))
}

// newStack starts the profile that cell i names.
func (r *reader) newStack(i int, name string) bool {
	t := &r.table
	if n := len(t.stacks); n > 0 && name == t.stacks[n-1].name {
		return true
	}
	r.closeStack()
	s := stack{name: name, first: len(t.layers)}
	switch {
	case len(t.stacks) == MaxProfiles:
		r.stop(r.scan.place(i), "split the file", "the file has more than %d profiles", MaxProfiles)
		return false
	case t.names[name] > 0:
		r.fault(r.scan.place(i), "put the layers of a profile in rows that follow one another, or give the profile another name",
			"duplicate profile %s: its layers began in %s, and another profile came between", quote(name), r.line(t.names[name]))
		s.faulty, s.resumed = true, true
	}
	if t.names[name] == 0 {
		t.names[name] = r.scan.place(0).line
	}
	t.stacks = append(t.stacks, s)
	return true
}

// pile puts a layer on the stack: its boundaries, and the joint with the
// layer above.
func (r *reader) pile(s *stack, l *profile.Layer) {
	first := len(r.table.layers) == s.first+1
	if !first {
		r.above(s)
	}
	top, st := r.topOf(s, first)
	if st != good {
		s.known, s.open = false, spot{}
		return
	}
	l.Top = top
	if !r.has(profile.Bottom) && !r.has(profile.Thickness) {
		s.top, s.bottom, s.known = top, math.Inf(1), true
		l.Bottom = s.bottom
		return
	}
	bottom, st := r.bottomOf(top)
	l.Bottom = bottom
	s.known = st == good || st == open
	if s.known {
		s.top, s.bottom = top, bottom
	}
	s.open = spot{}
	if st == open {
		s.open, s.openText = r.scan.place(r.endColumn()), string(r.scan.cell(r.endColumn()))
	}
	s.stand = st == good && r.allNines()
}

// above tells of a layer above that has no bottom.
func (r *reader) above(s *stack) {
	if s.open == (spot{}) {
		return
	}
	what := "is blank"
	if s.openText != "" {
		what = quote(s.openText) + " is a half-space"
	}
	r.fault(s.open, "give it a number; only the last layer may be a half-space", "%s %s, but another layer follows",
		r.columns.list[r.endColumn()].quantity, what)
	s.known, s.open, s.faulty = false, spot{}, true
}

// endColumn is the column that ends a layer.
func (r *reader) endColumn() int {
	if i := r.columns.index[profile.Bottom]; i >= 0 {
		return i
	}
	return r.columns.index[profile.Thickness]
}

// allNines reports whether the bottom is written 999, 9999 and so on.
func (r *reader) allNines() bool {
	text := r.scan.cell(r.columns.index[profile.Bottom])
	return len(text) >= 3 && len(bytes.Trim(text, "9")) == 0
}

// topOf returns the top of the layer in the present row: the one it states,
// joined to the layer above, or the bottom of the layer above.
func (r *reader) topOf(s *stack, first bool) (float64, state) {
	above, known := s.bottom, s.known
	if first {
		above, known = 0, !s.resumed
	}
	if !r.has(profile.Top) {
		if !known {
			above = 0 // below a fault; what follows is not told of this
		}
		return above, good
	}
	top, st := r.positive(profile.Top)
	switch {
	case st == blank:
		r.cellFault(profile.Top, "give the top of every layer, and remove rows that hold totals or averages", "is blank")
		return 0, faulty
	case st == faulty || !known:
		return top, st
	case !first && math.IsInf(above, 1):
		return r.closeAbove(s, top)
	}
	return r.joint(s, first, top, above)
}

// closeAbove closes the layer above, which is given by its top alone.
func (r *reader) closeAbove(s *stack, top float64) (float64, state) {
	if top-s.top <= profile.Joint {
		hint := hintSort
		if top == s.top {
			hint = hintStairs
		}
		r.cellFault(profile.Top, hint, "is not below the top of the layer above, "+r.depth(profile.Top, s.top))
		return 0, faulty
	}
	r.table.layers[len(r.table.layers)-2].Bottom = top
	return top, good
}

// joint compares a stated top with the bottom of the layer above, in m.
func (r *reader) joint(s *stack, first bool, top, above float64) (float64, state) {
	switch {
	case math.Abs(top-above) <= profile.Joint:
		return above, good
	case first:
		r.cellFault(profile.Top, "the first layer starts at 0: add the layer above it", "leaves a gap below ground level")
	case top < s.top:
		r.cellFault(profile.Top, hintSort, "lies above the layer before it, which starts at "+r.depth(profile.Top, s.top))
	case top < above:
		r.cellFault(profile.Top, "", "overlaps the layer above, which ends at "+r.depth(profile.Top, above))
	default:
		r.cellFault(profile.Top, "add the layer that is missing, or move the boundary", "leaves a gap below the layer above, which ends at "+r.depth(profile.Top, above))
	}
	return top, good
}

// closeStack ends the profile last read.
func (r *reader) closeStack() {
	if n := len(r.table.stacks); n > 0 {
		s := &r.table.stacks[n-1]
		s.last = len(r.table.layers)
		r.summed(s)
		r.namedTotals(s)
	}
}

// keep keeps the cells of the present row.
func (r *reader) keep() {
	t := &r.table
	for i := range r.columns.list {
		if i > 0 {
			t.cells = append(t.cells, profile.CellSeparator...)
		}
		text := r.scan.cell(i)
		t.cells = append(t.cells, text...)
		if len(text) > 0 {
			r.columns.list[i].used = true
		}
	}
	t.rows = append(t.rows, profile.Row{Line: r.scan.place(0).line})
	t.ends = append(t.ends, int32(len(t.cells)))
	if len(t.cells) >= 1<<16 {
		r.flush()
	}
}

// flush turns the kept cells into strings, many rows at a time.
func (r *reader) flush() {
	t := &r.table
	all, from := string(t.cells), int32(0)
	for i, to := range t.ends {
		t.rows[t.pending+i].Cells = all[from:to]
		from = to
	}
	t.pending, t.cells, t.ends = len(t.rows), t.cells[:0], t.ends[:0]
}
