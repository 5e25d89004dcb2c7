package las

import (
	"bytes"
	"cmp"
	"math"
	"slices"
	"strings"

	"shearbook/profile"
)

// rows is the state of reading the data.
type rows struct {
	width   int  // values in a row
	comma   bool // commas separate the values
	tab     bool // tabs do, and blanks do not
	wrapped bool // a row stands in several lines
	null    float64
	wanted  []*curve
	signs   signs

	tokens     []token // of the row being read
	text       []byte  // of its cells, joined
	last       [][]byte
	runOn      int // rows whose numbers had to be taken apart
	runOnAt    spot
	undeclared map[string]int // words and numbers taken for no value
	nullAt     spot
}

// token is one value in a row.
type token struct {
	text []byte
	at   spot
}

// readRows reads the data.
func (r *reader) readRows() bool {
	d := &r.rows
	d.null = r.header.null
	d.undeclared = map[string]int{}
	for i := range r.curves {
		c := &r.curves[i]
		if c.role != unread && (r.vs == nil || c.role != shear || c == r.vs) {
			d.wanted = append(d.wanted, c)
		}
	}
	if !r.shape() {
		return false
	}
	for _, c := range r.curves[:d.width] {
		column := profile.Column{Heading: c.name, Unit: cmp.Or(c.given, c.item.unit)}
		r.reading.Columns = append(r.reading.Columns, column)
	}
	r.makeRoom()
	ok := r.eachLine(r.header.data, r.dataLine)
	if ok && len(d.tokens) > 0 {
		r.fault(d.tokens[0].at, "the file seems to be cut off", "the last row has %s, not %d", profile.Plural(len(d.tokens), "value"), d.width)
	}
	return ok && r.decimalSigns()
}

// makeRoom makes room for a row in each line.
func (r *reader) makeRoom() {
	if r.rows.wrapped {
		return
	}
	body := r.header.data.body
	n := min(max(bytes.Count(body, []byte("\n")), bytes.Count(body, []byte("\r")))+1, len(body)/(2*r.rows.width)+1, MaxRows)
	r.reading.Rows = make([]profile.Row, 0, n)
	for _, c := range r.rows.wanted {
		c.values, c.places = make([]float64, 0, n), make([]spot, 0, n)
	}
}

// dataLine reads one line of data.
func (r *reader) dataLine(l line) bool {
	d := &r.rows
	if len(l.text) > MaxLine {
		return r.stop(l.spot(0), "", "the line is longer than 1 MiB")
	}
	if !d.wrapped {
		d.tokens = d.tokens[:0]
	}
	d.cut(l)
	switch n := len(d.tokens); {
	case n == 0:
		return true
	case d.wrapped && n < d.width:
		return true
	case n < d.width:
		d.takeApart()
	}
	if len(d.tokens) != d.width && !(len(d.tokens) > d.width && d.width == len(r.curves) && r.extra()) {
		r.fault(d.tokens[0].at, "a row has a value for each curve of ~C; what is not known is the NULL of the file", "the row has %s, not %d as there are curves", profile.Plural(len(d.tokens), "value"), d.width)
		d.tokens = d.tokens[:0]
		return true
	}
	if len(r.reading.Rows) == MaxRows {
		return r.stop(l.first(), "split the file", "the file has more than %d rows", MaxRows)
	}
	r.row()
	d.tokens = d.tokens[:0]
	return true
}

// row takes the row that is complete.
func (r *reader) row() {
	d := &r.rows
	d.text = d.text[:0]
	for i, t := range d.tokens[:d.width] {
		if i > 0 {
			d.text = append(d.text, profile.CellSeparator...)
		}
		d.text = append(d.text, t.text...)
	}
	r.reading.Rows = append(r.reading.Rows, profile.Row{Line: int(d.tokens[0].at.line), Cells: string(d.text)})
	for _, c := range d.wanted {
		if c.column >= d.width {
			continue // otherWidth has refused it for Vs
		}
		t := d.tokens[c.column]
		if c.take(t.text, t.at, d.null) {
			d.nothing(tidy(t.text), t.at)
		} else if !math.IsNaN(c.values[len(c.values)-1]) {
			d.signs.see(t.text, t.at)
		}
	}
	d.last = d.last[:0]
	for _, t := range d.tokens {
		d.last = append(d.last, t.text)
	}
}

// nothing counts a text that was taken for no value.
func (d *rows) nothing(word string, at spot) {
	const most = 8
	if _, there := d.undeclared[word]; there || len(d.undeclared) < most {
		d.undeclared[word]++
	}
	if d.nullAt == (spot{}) {
		d.nullAt = at
	}
}

// cut adds the values of a line to the tokens.
func (d *rows) cut(l line) {
	text := l.text
	place := placer{line: &l}
	add := func(from, to int) {
		d.tokens = append(d.tokens, token{text[from:to], place.at(from)})
	}
	if d.comma || d.tab {
		d.separated(text, add)
		return
	}
	for i := 0; ; {
		for i < len(text) && (isSpace(text[i]) || text[i] == ',' && (i+1 == len(text) || isSpace(text[i+1]) || i == 0 || isSpace(text[i-1]))) {
			i++
		}
		if i == len(text) {
			return
		}
		from := i
		if text[i] == '"' {
			if n := bytes.IndexByte(text[i+1:], '"'); n >= 0 {
				i += n + 2
				add(from, i)
				continue
			}
		}
		for i < len(text) && !isSpace(text[i]) && !(text[i] == ',' && (i+1 == len(text) || isSpace(text[i+1]))) {
			i++
		}
		add(from, i)
	}
}

// separated cuts a line at its commas or tabs.
func (d *rows) separated(text []byte, add func(from, to int)) {
	sep := byte(',')
	if d.tab {
		sep = '\t'
	}
	if len(bytes.TrimFunc(text, isBlank)) == 0 {
		return
	}
	for from := 0; from <= len(text); {
		to := len(text)
		if n := bytes.IndexByte(text[from:], sep); n >= 0 {
			to = from + n
		}
		a, b := from, to
		for a < b && isSpace(text[a]) {
			a++
		}
		for b > a && isSpace(text[b-1]) {
			b--
		}
		add(a, b)
		from = to + 1
	}
}

// isSpace reports whether a byte separates values. Control characters do.
func isSpace(b byte) bool { return b <= ' ' || b == 0x7f }

// placer finds the places in a line, from left to right.
type placer struct {
	line *line
	seen int
	last spot
}

func (p *placer) at(off int) spot {
	if p.last.line == 0 || off < p.seen {
		p.seen, p.last = 0, spot{p.line.number, 1}
	}
	for _, b := range p.line.text[p.seen:off] {
		if b&0xc0 != 0x80 { // not inside a character
			p.last.column++
		}
	}
	p.seen = off
	return p.last
}

// shape finds out how many values a row has and what separates them, from the
// first rows.
func (r *reader) shape() bool {
	d, n := &r.rows, len(r.curves)
	d.tab = r.header.dlm == "TAB"
	first := r.head(50)
	if r.header.dlm == "COMMA" {
		d.comma = true
	} else if len(first) > 0 && !d.tab {
		blanks := d.count(first[0])
		d.comma = true
		commas := d.count(first[0])
		d.comma = commas > 1 && blanks != n && (commas == n || blanks == 1)
	}
	widths := map[int]int{}
	for _, l := range first {
		widths[d.count(l)]++
	}
	d.width = n
	if len(first) > 0 {
		r.wrapping(first[0], widths)
	}
	if d.wrapped || widths[n] > 0 || len(widths) != 1 {
		return true
	}
	return r.otherWidth(first[0], d.count(first[0]))
}

// head is the first lines of the data.
func (r *reader) head(most int) []line {
	var list []line
	r.eachLine(r.header.data, func(l line) bool {
		list = append(list, l)
		return len(list) < most
	})
	return list
}

// count is how many values a line has.
func (d *rows) count(l line) int {
	d.tokens = d.tokens[:0]
	d.cut(l)
	n := len(d.tokens)
	d.tokens = d.tokens[:0]
	return n
}

// wrapping finds out whether rows stand in several lines.
func (r *reader) wrapping(first line, widths map[int]int) {
	d := &r.rows
	alone := d.width > 1 && d.count(first) == 1 && len(widths) > 1 && widths[d.width] == 0
	switch r.header.wrap {
	case "YES":
		d.wrapped = true
	case "NO":
		if d.wrapped = alone; alone {
			r.note("wrap-assumed", first.first(), "the file says that no row is wrapped, but depths stand alone in their lines; the rows were read as wrapped")
		}
	default:
		if d.wrapped = alone; alone {
			r.note("wrap-assumed", first.first(), "the file does not say whether rows are wrapped; they were read as wrapped, because depths stand alone in their lines")
		}
	}
}

// otherWidth looks at data all of whose rows have more or fewer values than
// there are curves.
func (r *reader) otherWidth(first line, width int) bool {
	d, n := &r.rows, len(r.curves)
	d.cut(first)
	tokens := slices.Clone(d.tokens)
	d.tokens = d.tokens[:0]
	for _, t := range tokens {
		if _, ok := parseNumber(t.text); !ok && !isNullWord(t.text) {
			return r.stop(first.first(), "list a curve for each column in ~C", "rows have %d values, but there are %s, and %s is not a number", width, profile.Plural(n, "curve"), profile.Quote(t.text))
		}
	}
	for _, c := range d.wanted {
		if c.column >= width && (c.role == shear || c == r.vp || c == r.rho) {
			return r.stop(first.first(), "list a curve for each column in ~C", "rows have %s, so none of curve %s", profile.Plural(width, "value"), profile.Quote(c.name))
		}
	}
	r.note("columns-differ", first.first(), "rows have %s, but there are %s; they were taken to agree from the left", profile.Plural(width, "value"), profile.Plural(n, "curve"))
	d.width = min(width, n)
	d.tokens = d.tokens[:0]
	return true
}

// extra reports whether the values behind the last curve are to be let pass,
// which otherWidth has noted.
func (r *reader) extra() bool {
	return slices.ContainsFunc(r.notes, func(n profile.Note) bool { return n.ID == "columns-differ" })
}

// takeApart takes numbers apart that ran together because a wide value left
// no blank: at a minus sign inside, or behind the decimals that the column
// has in the row above.
func (d *rows) takeApart() {
	var apart []token
	for _, t := range d.tokens {
		apart = append(apart, d.pieces(t, len(apart))...)
		if len(apart) > d.width {
			return
		}
	}
	if len(apart) != d.width {
		return
	}
	if d.runOn++; d.runOn == 1 {
		d.runOnAt = apart[0].at
	}
	d.tokens = append(d.tokens[:0], apart...)
}

// pieces takes one value apart; column is that of the first piece.
func (d *rows) pieces(t token, column int) []token {
	var list []token
	rest := t
	for len(list) < d.width {
		i := d.seam(rest.text, column+len(list))
		if i <= 0 || i >= len(rest.text) {
			break
		}
		list = append(list, token{rest.text[:i], rest.at})
		rest.text = rest.text[i:]
		rest.at.column += int32(i) // numbers are ASCII
	}
	return append(list, rest)
}

// seam is where a second number begins in a text: 0 or its length if none
// does.
func (d *rows) seam(text []byte, column int) int {
	for _, b := range text {
		if b != '.' && b != '-' && b != '+' && b != 'e' && b != 'E' && (b < '0' || b > '9') {
			return 0
		}
	}
	end := len(text)
	for i := 1; i < len(text); i++ {
		if text[i] == '-' && text[i-1] != 'e' && text[i-1] != 'E' {
			end = i
			break
		}
	}
	dot := bytes.IndexByte(text[:end], '.')
	if dot < 0 || bytes.IndexByte(text[dot+1:end], '.') < 0 || column >= len(d.last) {
		return end
	}
	above := d.last[column]
	decimals := len(above) - 1 - bytes.IndexByte(above, '.')
	if bytes.IndexByte(above, '.') < 0 || strings.ContainsAny(string(above), "eE") {
		return 0
	}
	return dot + 1 + decimals
}

// decimalSigns looks whether the decimal signs can be understood in one way
// only.
func (r *reader) decimalSigns() bool {
	s := r.rows.signs
	none := spot{}
	const hint = "use one decimal sign throughout, and none between thousands"
	switch {
	case s.comma == none && s.either == none:
		return true
	case s.point != none && s.comma != none:
		return r.stop(s.comma, hint, "a number has a decimal comma, but line %d has a decimal point", s.point.line)
	case s.comma == none:
		return r.stop(s.either, hint, "a number may have a decimal comma or a separator of thousands")
	}
	r.note("decimal-comma", s.comma, "commas in numbers were read as decimal signs")
	return true
}
