package evidence

import (
	"cmp"
	"errors"
	"math"
	"slices"
	"strings"
)

// Page is the text of one page.
type Page struct {
	Number int    // from 1
	Lines  []Line // from the top down
}

// Line is the text on one base line, from left to right, with what is raised
// or lowered in its place. Where there is more room than a word space, as
// between the cells of a row, Text has a tab.
type Line struct {
	Y    float64 // points above the lower edge of the page
	Text string
}

// matrix is [a b c d e f] of ISO 32000-1, 8.3.3.
type matrix [6]float64

var identity = matrix{1, 0, 0, 1, 0, 0}

// times is m followed by n.
func (m matrix) times(n matrix) matrix {
	return matrix{
		m[0]*n[0] + m[1]*n[2], m[0]*n[1] + m[1]*n[3],
		m[2]*n[0] + m[3]*n[2], m[2]*n[1] + m[3]*n[3],
		m[4]*n[0] + m[5]*n[2] + n[4], m[4]*n[1] + m[5]*n[3] + n[5],
	}
}

// state is what q saves.
type state struct {
	ctm     matrix
	font    *font
	size    float64
	leading float64
}

// run is text that was shown in one piece.
type run struct {
	x, end, y float64
	size      float64
	turned    bool
	text      string
}

// typist follows the operators of a page that show text.
type typist struct {
	walk  *pageWalk
	fonts dict
	used  map[name]*font
	now   state
	saved []state
	text  matrix // where the next letter goes
	line  matrix // where the line started
	runs  []run
}

// Limits on a page.
const (
	maxOperands = 20_000  // values of one operator, those in lists among them
	maxSaved    = 1_000   // states
	maxRuns     = 100_000 // on a page
)

// read follows the operators of one stream.
func (t *typist) read(data []byte) error {
	s := &scanner{data: data, content: true, budget: &budget{}}
	var operands []object
	for {
		if len(operands) == 0 {
			s.budget.values, s.budget.bytes = maxOperands, 8<<20
		}
		o, done := s.object()
		if s.err != nil {
			return damaged("%w", s.err)
		}
		if done {
			return nil
		}
		op, ok := o.(operator)
		if !ok {
			operands = append(operands, o)
			continue
		}
		if err := t.do(op, operands); err != nil {
			return err
		}
		operands = operands[:0]
	}
}

func numbers(operands []object, n int) ([]float64, bool) {
	if len(operands) < n {
		return nil, false
	}
	out := make([]float64, n)
	for i, o := range operands[len(operands)-n:] {
		v, ok := o.(float64)
		if !ok || math.Abs(v) > 1e7 {
			return nil, false
		}
		out[i] = v
	}
	return out, true
}

// do follows one operator; those that show no text are passed over.
func (t *typist) do(op operator, operands []object) error {
	switch op {
	case "q":
		if len(t.saved) == maxSaved {
			return errCostly
		}
		t.saved = append(t.saved, t.now)
	case "Q":
		if n := len(t.saved); n > 0 {
			t.now, t.saved = t.saved[n-1], t.saved[:n-1]
		}
	case "cm":
		if v, ok := numbers(operands, 6); ok {
			t.now.ctm = matrix(v).times(t.now.ctm)
		}
	case "BT":
		t.text, t.line = identity, identity
	case "Tf":
		return t.setFont(operands)
	case "TL":
		if v, ok := numbers(operands, 1); ok {
			t.now.leading = v[0]
		}
	case "Td", "TD":
		if v, ok := numbers(operands, 2); ok {
			t.move(v[0], v[1])
			if op == "TD" {
				t.now.leading = -v[1]
			}
		}
	case "Tm":
		if v, ok := numbers(operands, 6); ok {
			t.text, t.line = matrix(v), matrix(v)
		}
	case "T*":
		t.move(0, -t.now.leading)
	case "Tj", "TJ":
		return t.show(operands)
	case "'":
		t.move(0, -t.now.leading)
		return t.show(operands)
	}
	return nil
}

func (t *typist) move(x, y float64) {
	t.line = matrix{1, 0, 0, 1, x, y}.times(t.line)
	t.text = t.line
}

func (t *typist) setFont(operands []object) error {
	if len(operands) < 2 {
		return nil
	}
	key, _ := operands[0].(name)
	if v, ok := numbers(operands, 1); ok {
		t.now.size = v[0]
	}
	f, known := t.used[key]
	if !known {
		var err error
		if f, err = t.walk.font(t.fonts[key]); err != nil {
			return err
		}
		t.used[key] = f
	}
	t.now.font = f
	return nil
}

// show notes a string, or a list of strings and the moves between them.
func (t *typist) show(operands []object) error {
	if len(operands) == 0 || t.now.font == nil {
		return nil
	}
	pieces, ok := operands[len(operands)-1].(list)
	if !ok {
		pieces = list{operands[len(operands)-1]}
	}
	for _, p := range pieces {
		switch p := p.(type) {
		case text:
			if err := t.note(p); err != nil {
				return err
			}
		case float64:
			t.advance(-p / 1000 * t.now.size)
		}
	}
	return nil
}

func (t *typist) advance(x float64) { t.text = matrix{1, 0, 0, 1, x, 0}.times(t.text) }

var errMuchText = errors.New("its pages hold more text than a report does")

func (t *typist) note(p text) error {
	shown, width := t.now.font.decode(p)
	b := t.walk.budget
	b.runs--
	b.text -= len(shown)
	if b.runs < 0 || b.text < 0 || len(t.runs) >= maxRuns {
		return errMuchText
	}
	start := t.text.times(t.now.ctm)
	t.advance(width / 1000 * t.now.size)
	end := t.text.times(t.now.ctm)
	scale := math.Hypot(start[2], start[3])
	turned := math.Abs(start[1]) > 0.1*math.Abs(start[0]) || start[0] <= 0
	t.runs = append(t.runs, run{start[4], end[4], start[5], math.Abs(t.now.size) * scale, turned, shown})
	return nil
}

// arrangeLines makes lines of runs. What is turned stands on lines of its
// own, below the rest.
func arrangeLines(runs []run) []Line {
	slices.SortStableFunc(runs, func(a, b run) int {
		if a.turned != b.turned {
			if a.turned {
				return 1
			}
			return -1
		}
		return cmp.Compare(b.y, a.y)
	})
	var lines []Line
	for len(runs) > 0 {
		n := onLine(runs)
		lines = append(lines, joined(runs[:n]))
		runs = runs[n:]
	}
	return lines
}

// onLine counts the runs at the front that stand on one line: not further
// apart than the smaller of two is raised or lowered beside the other.
func onLine(runs []run) int {
	if runs[0].turned {
		return 1
	}
	base := runs[0]
	for n, r := range runs {
		if r.turned || math.Abs(base.y-r.y) > 0.55*min(base.size, r.size) {
			return n
		}
		if r.size > base.size {
			base = r
		}
	}
	return len(runs)
}

func joined(runs []run) Line {
	slices.SortStableFunc(runs, func(a, b run) int { return cmp.Compare(a.x, b.x) })
	big := runs[0]
	var b strings.Builder
	for i, r := range runs {
		if r.size > big.size {
			big = r
		}
		if i > 0 {
			switch gap := r.x - runs[i-1].end; {
			case gap > 0.9*r.size:
				b.WriteByte('\t')
			case gap > 0.15*r.size && !strings.HasSuffix(runs[i-1].text, " ") && !strings.HasPrefix(r.text, " "):
				b.WriteByte(' ')
			}
		}
		b.WriteString(r.text)
	}
	return Line{big.y, b.String()}
}
