package pdf

import (
	"slices"

	"shearbook/report"
)

// titleBlock sets the head of a report: its title, a rule, and what it is
// about in two columns of labels and values.
func (s *setter) titleBlock(t *report.TitleBlock, a area) []*piece {
	title := a
	title.font, title.size, title.leading = report.SansBold, 20, 25
	name := []report.Inline{report.Text(t.Title)}
	out := s.paragraph(name, title)
	if len(out) > 0 {
		out[0].ops = append(out[0].ops, &destOp{headingDest(s.anchors.Name(name)), 0})
	}
	out = append(out, &piece{above: 6, height: 8, ops: []op{rule(a.x, 1, a.width, 1.6, accent)}})
	const gutter = 22.0
	half := (a.width - gutter) / 2
	labels := min(s.widestLabel(t.Fields, a)+10, 0.45*half)
	for i := 0; i < len(t.Fields); i += 2 {
		var row *piece
		if i+1 < len(t.Fields) {
			row = beside(s.fieldRow(t.Fields[i], a.x, labels, half, a),
				s.fieldRow(t.Fields[i+1], a.x+half+gutter, labels, half, a))
		} else {
			row = s.fieldRow(t.Fields[i], a.x, labels, a.width, a)
		}
		row.height += 3
		out = append(out, row)
	}
	out = append(out, &piece{above: 2, height: 1, ops: []op{rule(a.x, 0.5, a.width, 0.5, line)}})
	keepAll(out)
	return out
}

// labelStyle is how the label of a field is set.
func labelStyle(l look) style {
	st := l.style
	st.font, st.size, st.colour = report.Sans, 0.88*l.size, soft
	return st
}

func (s *setter) widestLabel(fields []report.Field, a area) float64 {
	w := 0.0
	for _, f := range fields {
		w = max(w, natural(s.plainWords(f.Label, labelStyle(a.look))))
	}
	return w
}

// fieldRow sets a label and its value beside it, in one piece.
func (s *setter) fieldRow(f report.Field, x, labels, width float64, a area) *piece {
	label := s.linesPiece(s.plainWords(f.Label, labelStyle(a.look)), x, labels-6, a.look)
	value := s.linesPiece(s.words(f.Value, a.style), x+labels, width-labels, a.look)
	return beside(label, value)
}

// linesPiece sets words in one piece.
func (s *setter) linesPiece(words []word, x, width float64, l look) *piece {
	p := &piece{}
	for _, line := range s.breakLines(words, width) {
		p.ops = append(p.ops, s.lineOps(line, l.align, x, p.height+l.baseline(), width)...)
		p.footnotes = append(p.footnotes, line.notes...)
		p.height += l.leading
	}
	return p
}

// beside joins two pieces whose tops are level.
func beside(a, b *piece) *piece {
	a.ops = append(a.ops, b.ops...)
	a.footnotes = append(a.footnotes, b.footnotes...)
	a.height = max(a.height, b.height)
	return a
}

// summary sets the answer large at the left, what stands behind it at the
// right, in a frame.
func (s *setter) summary(b *report.Summary, a area) []*piece {
	const pad, gutter = 12.0, 16.0
	inner := a.inset(pad)
	inner.width -= pad
	answer := s.answer(b, inner)
	if answer.height > s.bodyHeight()/2 {
		return s.wordySummary(b, a)
	}
	right := inner.x + answer.width + 2*gutter
	width := inner.x + inner.width - right
	fields := inner
	fields.size, fields.leading = 0.95*a.size, 0.95*a.leading
	labels := min(s.widestLabel(b.Fields, fields)+10, 0.4*width)

	head := space(pad - 3)
	var body []*piece
	for i, f := range b.Fields {
		row := s.fieldRow(f, right, labels, width, fields)
		if i > 0 {
			row.above = 1.5
		}
		body = append(body, row)
	}
	if len(body) == 0 {
		body = []*piece{space(0)}
	}
	if missing := answer.height - height(body, true); missing > 0 {
		body = append(body, space(missing))
	}
	middle := rule(right-gutter, 0, 0, 0, hair).(*pathOp)
	middle.points[1] = point{right - gutter, height(body, true)}
	middle.width = 0.6
	body[0].ops = append(append(body[0].ops, answer.ops...), middle)

	out := append(append([]*piece{head}, body...), space(pad-2))
	keepAll(out)
	enframe(&frame{x: a.x, width: a.width, stroke: &line, bar: &accent, barWidth: 3}, out)
	return out
}

// wordySummary sets a summary whose answer is no word but a page: as prose.
func (s *setter) wordySummary(b *report.Summary, a area) []*piece {
	blocks := []report.Block{
		&report.Paragraph{Inline: []report.Inline{&report.Strong{Inline: []report.Inline{report.Text(b.Heading)}}}},
		&report.Paragraph{Inline: []report.Inline{report.Text(b.Label)}},
		&report.Paragraph{Inline: []report.Inline{&report.Strong{Inline: []report.Inline{report.Text(b.Answer)}}}},
	}
	out := s.flow(blocks, a)
	labels := min(s.widestLabel(b.Fields, a)+10, 0.4*a.width)
	for _, f := range b.Fields {
		out = append(out, s.fieldRow(f, a.x, labels, a.width, a))
	}
	return out
}

// setAnswer is the left half of a summary.
type setAnswer struct {
	ops           []op
	width, height float64
}

// answer sets heading, label and answer below each other. The answer is as
// large as its widest word allows.
func (s *setter) answer(b *report.Summary, a area) setAnswer {
	const largest, smallest, least, most = 34.0, 12.0, 84.0, 150.0
	big := a.look
	big.font, big.colour, big.size = report.SansBold, accent, largest
	words := s.plainWords(b.Answer, big.style)
	if w := natural(words); w > most {
		big.size = max(largest*most/w, min(22, largest*most/widest(words)), smallest)
		words = s.plainWords(b.Answer, big.style)
	}
	big.leading = 1.12 * big.size
	heading := a.with(report.SansBold)
	label := a.look
	label.style = labelStyle(a.look)
	headWords := s.plainWords(b.Heading, heading.style)
	width := max(min(natural(words), most), min(natural(headWords), most), least)

	var out setAnswer
	out.width = width
	for i, part := range []*piece{
		s.linesPiece(headWords, a.x, width, heading),
		s.linesPiece(s.plainWords(b.Label, label.style), a.x, width, label),
		s.linesPiece(words, a.x, width, big),
	} {
		if i == 1 && part.height > 0 {
			out.height += 3
		}
		shift(part.ops, out.height)
		out.ops = append(out.ops, part.ops...)
		out.height += part.height
	}
	return out
}

// cautionBox frames what the reader must not miss, its first paragraph in
// bold.
func (s *setter) cautionBox(c *report.CautionBox, a area) []*piece {
	const pad = 11.0
	inner := a.inset(pad + 2)
	inner.width -= pad
	blocks := slices.Clone(c.Blocks)
	if len(blocks) > 0 {
		if first, ok := blocks[0].(*report.Paragraph); ok {
			blocks[0] = &report.Paragraph{Inline: []report.Inline{&report.Strong{Inline: first.Inline}}}
		}
	}
	out := append([]*piece{space(pad - 4)}, s.flow(blocks, inner)...)
	out = append(out, space(pad-3))
	keepEnds(out)
	if height(out, true) < s.bodyHeight()/2 {
		keepAll(out)
	}
	enframe(&frame{x: a.x, width: a.width, fill: &wash, stroke: &ink, bar: &ink, barWidth: 3}, out)
	return out
}

// The form of a signature.
const (
	signSpace  = 40.0 // above the line to sign on
	writeSpace = 19.0 // above a line to write on
	sealSpace  = 92.0
	sealSize   = 76.0
)

// signOff sets the spaces to sign in, three in a row at most, each row on
// one page.
func (s *setter) signOff(o *report.SignOff, a area) []*piece {
	const gutter = 20.0
	perRow := 3
	if n := len(o.Signatures); n == 4 || n < 3 {
		perRow = 2
	}
	width := (a.width - float64(perRow-1)*gutter) / float64(perRow)
	var out []*piece
	for i := 0; i < len(o.Signatures); i += perRow {
		group := o.Signatures[i:min(i+perRow, len(o.Signatures))]
		row := s.signatureRow(group, a, width, gutter)
		if i > 0 {
			row.above = 18
		}
		out = append(out, row)
	}
	keepAll(out)
	return out
}

// signatureRow sets signatures beside each other, their lines level.
func (s *setter) signatureRow(group []report.Signature, a area, width, gutter float64) *piece {
	row := &piece{}
	small := a.look
	small.size, small.leading, small.colour = 7, 9.5, soft
	fields := []struct {
		label string
		value func(report.Signature) string
		space float64
	}{
		{"Signature", func(report.Signature) string { return "" }, signSpace},
		{"Name", func(g report.Signature) string { return g.Name }, writeSpace},
		{"Qualification, licence", func(g report.Signature) string { return g.Title }, writeSpace},
		{"Date", func(g report.Signature) string { return g.Date }, writeSpace},
	}
	at := func(i int) float64 { return a.x + float64(i)*(width+gutter) }
	row.band(len(group), 0, func(i int) *piece {
		return s.linesPiece(s.plainWords(group[i].Role, a.with(report.SansBold).style), at(i), width, a.look)
	})
	for _, f := range fields {
		row.band(len(group), f.space, func(i int) *piece {
			return s.linesPiece(s.plainWords(f.value(group[i]), a.style), at(i), width, a.look)
		})
		for i := range group {
			row.ops = append(row.ops, rule(at(i), row.height+1, width, 0.5, line))
		}
		row.height++
		row.band(len(group), 0, func(i int) *piece {
			return s.linesPiece(s.plainWords(f.label, small.style), at(i), width, small)
		})
	}
	s.seals(row, group, at, width, small)
	return row
}

// band adds a stretch to a row, as tall as its tallest part, at least least;
// the parts stand at its foot.
func (p *piece) band(n int, least float64, part func(int) *piece) {
	parts := make([]*piece, n)
	tall := least
	for i := range parts {
		parts[i] = part(i)
		tall = max(tall, parts[i].height)
	}
	for _, part := range parts {
		shift(part.ops, p.height+tall-part.height)
		p.ops = append(p.ops, part.ops...)
	}
	p.height += tall
}

// seals adds the room for seals.
func (s *setter) seals(row *piece, group []report.Signature, at func(int) float64, width float64, small look) {
	any := false
	for i, g := range group {
		if !g.Seal {
			continue
		}
		any = true
		y := row.height + sealSpace/2 + 4
		row.ops = append(row.ops, circle(at(i)+width/2, y, sealSize/2, line))
		small.align = report.AlignCentre
		word := s.linesPiece(s.plainWords("Seal", small.style), at(i), width, small)
		shift(word.ops, y-small.leading/2)
		row.ops = append(row.ops, word.ops...)
	}
	if any {
		row.height += sealSpace
	}
}
