package pdf

import (
	"fmt"
	"strconv"
	"strings"
	"unicode"

	"shearbook/report"
)

// flow sets blocks below each other. Of the space that two neighbours ask
// for, the larger counts.
func (s *setter) flow(blocks []report.Block, a area) []*piece {
	var out []*piece
	below, breaks := 0.0, false
	for i, b := range blocks {
		if _, ok := b.(*report.PageBreak); ok {
			breaks = true
			continue
		}
		pieces, above, under := s.block(b, a)
		if len(pieces) == 0 {
			continue
		}
		pieces[0].above = max(above, below)
		pieces[0].breaks = breaks
		if i+1 < len(blocks) && leadsIn(blocks, i, len(pieces)) {
			pieces[len(pieces)-1].keep = true
		}
		out = append(out, pieces...)
		below, breaks = under, false
	}
	if len(out) > 0 && !out[0].breaks {
		out[0].above = 0
	}
	return out
}

// leadsIn tells whether block i belongs to the one after it: a line that
// ends in a colon, or a single line between a heading and more prose.
func leadsIn(blocks []report.Block, i, lines int) bool {
	p, ok := blocks[i].(*report.Paragraph)
	if !ok {
		return false
	}
	if strings.HasSuffix(strings.TrimRightFunc(report.PlainText(p.Inline), unicode.IsSpace), ":") {
		return true
	}
	if lines > 1 || i == 0 {
		return false
	}
	_, afterHeading := blocks[i-1].(*report.Heading)
	switch blocks[i+1].(type) {
	case *report.Paragraph, *report.List, *report.Quote, *report.CodeBlock:
		return afterHeading
	}
	return false
}

// block sets one block and tells the space it asks for above and below.
func (s *setter) block(b report.Block, a area) (pieces []*piece, above, below float64) {
	switch b := b.(type) {
	case *report.Heading:
		return s.heading(b, a)
	case *report.Paragraph:
		return s.paragraph(b.Inline, a), a.gap(), a.gap()
	case *report.List:
		return s.list(b, a), a.gap(), a.gap()
	case *report.Quote:
		return s.quote(b, a), paragraphGap, paragraphGap
	case *report.CodeBlock:
		return s.code(b, a), paragraphGap + 2, paragraphGap + 2
	case *report.Table:
		return s.table(b, a), blockGap, blockGap + 3
	case *report.Figure:
		return s.figure(b, a), blockGap, blockGap + 3
	case *report.Image:
		return s.image(b, a), blockGap, blockGap + 3
	case *report.Formula:
		return s.formula(b, a), blockGap - 2, blockGap - 2
	case *report.Rule:
		return []*piece{{height: 1, keep: true, ops: []op{rule(a.x, 0.5, a.width, 0.6, hair)}}}, blockGap, blockGap
	case *report.TitleBlock:
		return s.titleBlock(b, a), 0, 16
	case *report.Summary:
		return s.summary(b, a), blockGap - 2, blockGap - 2
	case *report.CautionBox:
		return s.cautionBox(b, a), blockGap, blockGap
	case *report.SignOff:
		return s.signOff(b, a), 18, blockGap
	case *report.PageBreak:
		return nil, 0, 0 // flow acts on it
	default:
		panic(fmt.Sprintf("pdf: unknown block %T", b))
	}
}

// gap is the space between paragraphs, and that between the items of a list.
func (a area) gap() float64 {
	if a.tight {
		return 0.25 * a.size
	}
	return 0.68 * a.size
}

// paragraph sets prose, two lines at least at the foot and the head of a
// page.
func (s *setter) paragraph(inlines []report.Inline, a area) []*piece {
	return s.prose(s.words(inlines, a.style), a)
}

func (s *setter) prose(words []word, a area) []*piece {
	lines := s.breakLines(words, a.width)
	pieces := make([]*piece, len(lines))
	for i, l := range lines {
		pieces[i] = &piece{
			height:    a.leading,
			ops:       s.lineOps(l, a.align, a.x, a.baseline(), a.width),
			footnotes: l.notes,
		}
	}
	keepEnds(pieces)
	return pieces
}

// keepEnds keeps the first two pieces on one page, and the last two.
func keepEnds(pieces []*piece) {
	if n := len(pieces); n > 1 {
		pieces[0].keep = true
		pieces[n-2].keep = true
	}
}

// heading sets a heading on one page with what follows, and enters it in the
// outline.
func (s *setter) heading(h *report.Heading, a area) (pieces []*piece, above, below float64) {
	l, above, below := headingLook(h.Level)
	if a.size < bodySize {
		l.size, l.leading = a.size, a.leading
	}
	a.look = l
	pieces = s.paragraph(h.Inline, a)
	if len(pieces) == 0 {
		return nil, 0, 0
	}
	keepAll(pieces)
	pieces[len(pieces)-1].keep = true
	pieces[0].ops = append(pieces[0].ops,
		&destOp{headingDest(s.anchors.Name(h.Inline)), 0},
		&outlineOp{clean(report.PlainText(h.Inline)), min(max(h.Level, 1), 6)})
	return pieces, above, below
}

// Names of the places that links lead to.
func headingDest(name string) string { return "h:" + name }
func noteDest(n int) string          { return "n:" + strconv.Itoa(n) }
func mentionDest(n int) string       { return "m:" + strconv.Itoa(n) }

// list sets a list with its bullets, numbers or boxes hanging at the left.
func (s *setter) list(l *report.List, a area) []*piece {
	hang := indent
	last := strconv.Itoa(l.Start+len(l.Items)-1) + "."
	if l.Ordered {
		hang = max(hang, s.width(a.style, last)+6)
	}
	inner := a.inset(hang)
	inner.depth++
	inner.tight = l.Tight
	var out []*piece
	for i, item := range l.Items {
		pieces := s.flow(item.Blocks, inner)
		if len(pieces) == 0 {
			pieces = []*piece{space(a.leading)}
		}
		if i > 0 {
			pieces[0].above = inner.gap()
		}
		first := pieces[0]
		y := firstBaseline(first, a.baseline())
		switch {
		case item.Task != report.NoTask:
			first.ops = append(first.ops, taskBox(inner.x-hang+1, y, a.size, item.Task)...)
		case l.Ordered:
			number := strconv.Itoa(l.Start+i) + "."
			x := inner.x - 6 - s.width(a.style, number)
			first.ops = append(first.ops, &textOp{x, y, number, a.style})
		default:
			bullet := "•"
			if a.depth%2 == 1 {
				bullet = "–"
			}
			first.ops = append(first.ops, &textOp{inner.x - hang + 3, y, bullet, a.style})
		}
		out = append(out, pieces...)
	}
	return out
}

// firstBaseline returns where the first line of a piece stands.
func firstBaseline(p *piece, otherwise float64) float64 {
	for _, o := range p.ops {
		if t, ok := o.(*textOp); ok {
			return t.y + t.rise
		}
	}
	return otherwise
}

// taskBox draws the box of a task, ticked or not.
func taskBox(x, baseline, size float64, t report.Task) []op {
	side := 0.78 * size
	y := baseline - side + 0.04*size
	ops := []op{box(x, y, side, side, 0.7, ink)}
	switch t {
	case report.TaskOpen:
	case report.TaskDone:
		ops = append(ops, &pathOp{
			points: []point{{x + 0.2*side, y + 0.52*side}, {x + 0.43*side, y + 0.76*side}, {x + 0.84*side, y + 0.2*side}},
			width:  1.2, colour: ink,
		})
	default:
		panic(fmt.Sprintf("pdf: unknown task %d", t))
	}
	return ops
}

// quote sets a quotation with a bar at its left.
func (s *setter) quote(q *report.Quote, a area) []*piece {
	inner := a.inset(14)
	inner.colour = soft
	pieces := s.flow(q.Blocks, inner)
	enframe(&frame{x: inner.x - 11, bar: &line, barWidth: 1.6}, pieces)
	return pieces
}

// note returns the pieces of a footnote, set when first asked for.
func (s *setter) note(n int) []*piece {
	if pieces, ok := s.notes[n]; ok {
		return pieces
	}
	a := s.column()
	a.look = noteLook()
	inner := a.inset(13)
	pieces := cutAll(s.flow(s.doc.Footnotes[n-1].Blocks, inner), 0.5*s.bodyHeight())
	if len(pieces) == 0 {
		pieces = []*piece{space(a.leading)}
	}
	pieces[0].above = 1.5
	number, st := strconv.Itoa(n), a.style
	st.colour = accent
	y := firstBaseline(pieces[0], a.baseline())
	w := s.width(st, number)
	pieces[0].ops = append(pieces[0].ops,
		&textOp{inner.x - 5 - w, y, number, st}, &destOp{noteDest(n), 0},
		&linkOp{inner.x - 5 - w, y - 7, w, 9, &link{dest: mentionDest(n)}})
	s.notes[n] = pieces
	return pieces
}
