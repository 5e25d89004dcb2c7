package pdf

import (
	"fmt"
	"strings"

	"shearbook/report"
)

// The type of formulas: Serif, variables in italics.
const (
	mathSize     = 11.2
	mathSmallest = 7.5 // made smaller only where nothing else fits
	mathLeading  = 5.0 // between the lines of a formula that is broken
)

// mathBox is a piece of a formula: its extent from a base line at Y 0, ink
// only above and below, and what prints it.
type mathBox struct {
	width, up, down float64
	ops             []op
}

// formula sets a formula in the middle of the column. One too wide is broken
// before its operators, the lines below the first set under what follows its
// first = sign; then wherever it can be; then made smaller.
func (s *setter) formula(f *report.Formula, a area) []*piece {
	if f.Math == nil {
		return nil
	}
	items := flatten(f.Math)
	var lines []mathBox
	for _, size := range []float64{mathSize, 10, 8.7, mathSmallest} {
		lines = s.mathLines(items, size, a.width, isBreak)
		if widestBox(lines) <= a.width {
			break
		}
	}
	if widestBox(lines) > a.width {
		items = splitTexts(items)
		lines = s.mathLines(items, mathSmallest, a.width, func([]report.Math, int) bool { return true })
	}
	for size := mathSmallest; ; {
		shrink := min(a.width/widestBox(lines), 0.7*s.bodyHeight()/tallestBox(lines))
		if shrink >= 1 {
			return s.stackLines(lines, a)
		}
		size *= 0.99 * shrink
		lines = s.mathLines(items, size, a.width, func([]report.Math, int) bool { return true })
	}
}

// stackLines makes a piece of each line, the block of them in the middle.
func (s *setter) stackLines(lines []mathBox, a area) []*piece {
	x := a.x + (a.width-widestBox(lines))/2
	pieces := make([]*piece, len(lines))
	for i, l := range lines {
		l.move(x, l.up)
		pieces[i] = &piece{height: l.up + l.down, ops: l.ops}
		if i > 0 {
			pieces[i].above = mathLeading
		}
	}
	if len(pieces) <= 8 {
		keepAll(pieces)
	} else {
		keepEnds(pieces)
	}
	return pieces
}

func widestBox(boxes []mathBox) float64 {
	w := 1.0
	for _, b := range boxes {
		w = max(w, b.width)
	}
	return w
}

func tallestBox(boxes []mathBox) float64 {
	h := 1.0
	for _, b := range boxes {
		h = max(h, b.up+b.down)
	}
	return h
}

// flatten returns the pieces that stand side by side at the top of m.
func flatten(m report.Math) []report.Math {
	row, ok := m.(report.MathRow)
	if !ok {
		return []report.Math{m}
	}
	var out []report.Math
	for _, item := range row {
		if item != nil {
			out = append(out, flatten(item)...)
		}
	}
	return out
}

// splitTexts cuts long texts at their spaces.
func splitTexts(items []report.Math) []report.Math {
	var out []report.Math
	for _, item := range items {
		text, ok := item.(report.MathText)
		if !ok || len(text) < 30 {
			out = append(out, item)
			continue
		}
		for part := range strings.SplitAfterSeq(string(text), " ") {
			out = append(out, report.MathText(part))
		}
	}
	return out
}

// isBreak tells whether a line may end before item i: an operator between
// two others.
func isBreak(items []report.Math, i int) bool {
	switch operator(items[i]) {
	case "=", "+", "−", "≈", "×":
		return i > 0 && operator(items[i-1]) == ""
	}
	return false
}

// mathLines sets items in lines of a width. The first line is flush left,
// the others hang where the first = sign ended.
func (s *setter) mathLines(items []report.Math, size, width float64, mayBreak func([]report.Math, int) bool) []mathBox {
	whole := s.mathRow(items, size)
	if whole.width <= width {
		return []mathBox{whole}
	}
	hang := 2 * size
	for i, item := range items {
		if operator(item) == "=" {
			if w := s.mathRow(items[:i], size).width; w < 0.45*width {
				hang = w
			}
			break
		}
	}
	var lines []mathBox
	for start := 0; start < len(items); {
		room := width
		if start > 0 {
			room -= hang
		}
		end := s.mathFit(items, start, size, room, mayBreak)
		line := s.mathRowFrom(items[start:end], size, start > 0)
		if start > 0 {
			line.move(hang, 0)
			line.width += hang
		}
		lines = append(lines, line)
		start = end
	}
	return lines
}

// mathFit returns where a line that starts at start ends: at the last break
// before the room is used up, or at the first break there is.
func (s *setter) mathFit(items []report.Math, start int, size, room float64, mayBreak func([]report.Math, int) bool) int {
	w, good := 0.0, 0
	for i := start; i < len(items); i++ {
		if i > start && mayBreak(items, i) {
			if w > room && good == 0 {
				return i
			}
			good = i
		}
		w += s.mathGap(items, i, size) + s.math(items[i], size).width
		if w > room && good > 0 {
			return good
		}
	}
	return len(items)
}

// mathRow sets items side by side.
func (s *setter) mathRow(items []report.Math, size float64) mathBox {
	return s.mathRowFrom(items, size, false)
}

// mathRowFrom sets a row; one that continues a line begins with its operator
// spaced as between two terms.
func (s *setter) mathRowFrom(items []report.Math, size float64, continues bool) mathBox {
	var out mathBox
	if continues && len(items) > 0 && operator(items[0]) != "" {
		out.width += mathSpace(operator(items[0])) * size
	}
	for i, item := range items {
		gap := s.mathGap(items, i, size)
		if i == 1 && continues && operator(items[0]) != "" {
			gap = mathSpace(operator(items[0])) * size
		}
		out.join(s.math(item, size), gap)
	}
	return out
}

// join puts b to the right.
func (out *mathBox) join(b mathBox, gap float64) {
	b.move(out.width+gap, 0)
	out.width += gap + b.width
	out.up, out.down = max(out.up, b.up), max(out.down, b.down)
	out.ops = append(out.ops, b.ops...)
}

// operator returns the operator that an item is, "" if it is none.
func operator(m report.Math) string {
	text, ok := m.(report.MathText)
	if !ok {
		return ""
	}
	switch op := strings.TrimSpace(string(text)); op {
	case "=", "+", "−", "×", "/", "<", ">", "≤", "≥", "≈", "·", "±":
		return op
	case "-":
		return "−"
	}
	return ""
}

// mathSpace is the space on either side of an operator in em.
func mathSpace(operator string) float64 {
	switch operator {
	case "/":
		return 0.1
	case "+", "−", "×", "·", "±":
		return 0.22
	}
	return 0.28
}

// mathGap returns the space before item i of a row: around operators, and a
// little between pieces that would else touch. A sign before its number has
// none.
func (s *setter) mathGap(items []report.Math, i int, size float64) float64 {
	if i == 0 {
		return 0
	}
	op, before := operator(items[i]), operator(items[i-1])
	switch {
	case op != "":
		return mathSpace(op) * size
	case before != "":
		if sign := (before == "−" || before == "+") && (i == 1 || operator(items[i-2]) != ""); sign {
			return 0
		}
		return mathSpace(before) * size
	}
	_, text := items[i].(report.MathText)
	_, textBefore := items[i-1].(report.MathText)
	if !text && !textBefore {
		return 0.16 * size
	}
	if _, ok := items[i-1].(report.MathSum); ok {
		return 0.16 * size
	}
	return 0
}

// math sets one piece.
func (s *setter) math(m report.Math, size float64) mathBox {
	switch m := m.(type) {
	case nil:
		return mathBox{}
	case report.MathRow:
		return s.mathRow(flatten(m), size)
	case report.MathIdent:
		return s.mathText(string(m), report.SerifItalic, size)
	case report.MathText:
		text := string(m)
		if op := operator(m); op != "" {
			text = op
		}
		return s.mathText(text, report.Serif, size)
	case report.MathFrac:
		return s.mathFrac(m, size)
	case report.MathSub:
		return s.mathSub(m, size)
	case report.MathOver:
		return s.mathOver(m, size)
	case report.MathSum:
		return s.mathSum(m, size)
	default:
		panic(fmt.Sprintf("pdf: unknown piece of a formula %T", m))
	}
}

// mathText sets letters; up and down are those of their ink.
func (s *setter) mathText(text string, font report.Font, size float64) mathBox {
	var b mathBox
	st := style{font: font, size: size, colour: ink}
	for text = clean(text); text != ""; {
		part, as, rest := s.printable(text, st)
		w := s.width(as, part)
		b.ops = append(b.ops, &textOp{b.width, -as.rise, part, as})
		b.width += w
		up, down := s.inkOf(as, part)
		b.up, b.down = max(b.up, up), max(b.down, down)
		text = rest
	}
	return b
}

// inkOf returns how far letters reach above and below the base line.
func (s *setter) inkOf(st style, text string) (up, down float64) {
	f := s.fonts.get(st.font)
	unit := st.size / float64(f.unitsEm)
	for _, r := range text {
		if b := f.bounds(r); b != (bounds{}) {
			up, down = max(up, unit*float64(b.top)+st.rise), max(down, -unit*float64(b.bottom)-st.rise)
		}
	}
	return up, down
}

// mathAxis is the height of the bar of a fraction above the base line, in em.
const mathAxis = 0.25

func (s *setter) mathFrac(m report.MathFrac, size float64) mathBox {
	inner := size
	if containsFrac(m.Num) || containsFrac(m.Den) {
		inner = 0.85 * size
	}
	num, den := s.math(m.Num, inner), s.math(m.Den, inner)
	const bar = 0.55
	gap, side := 0.27*size, 0.14*size
	w := max(num.width, den.width) + 2*side
	num.move((w-num.width)/2, -mathAxis*size-gap-num.down)
	den.move((w-den.width)/2, -mathAxis*size+gap+den.up)
	return mathBox{
		width: w + 2*side,
		up:    mathAxis*size + gap + num.down + num.up,
		down:  -mathAxis*size + gap + den.up + den.down,
		ops:   append(append(num.ops, den.ops...), rule(0, -mathAxis*size, w, bar, ink)),
	}.shifted(side)
}

func containsFrac(m report.Math) bool {
	for _, item := range flatten(m) {
		if _, ok := item.(report.MathFrac); ok {
			return true
		}
	}
	return false
}

func (b mathBox) shifted(dx float64) mathBox {
	b.move(dx, 0)
	return b
}

func (s *setter) mathSub(m report.MathSub, size float64) mathBox {
	base, sub := s.math(m.Base, size), s.math(m.Sub, 0.7*size)
	drop := max(0.17*size, base.down-0.1*size)
	back := 0.0
	if _, ok := m.Base.(report.MathIdent); ok {
		back = 0.05 * size // an italic leans away from its index
	}
	sub.move(base.width-back, drop)
	return mathBox{
		width: base.width - back + sub.width + 0.04*size,
		up:    max(base.up, sub.up-drop),
		down:  max(base.down, sub.down+drop),
		ops:   append(base.ops, sub.ops...),
	}
}

func (s *setter) mathOver(m report.MathOver, size float64) mathBox {
	base := s.math(m.Base, size)
	y := base.up + 0.13*size
	lean := 0.0
	if _, ok := m.Base.(report.MathIdent); ok {
		lean = 0.1 * size
	}
	base.ops = append(base.ops, rule(lean, -y, max(base.width-0.06*size, 0.2*size), 0.055*size, ink))
	base.up = y + 0.03*size
	return base
}

func (s *setter) mathSum(m report.MathSum, size float64) mathBox {
	const grown = 1.55
	sigma := s.mathText("∑", report.Serif, grown*size)
	centre := (sigma.up - sigma.down) / 2
	sigma.move(0, centre-mathAxis*size)
	up, down := (sigma.up+sigma.down)/2+mathAxis*size, (sigma.up+sigma.down)/2-mathAxis*size
	to, from := s.math(m.To, 0.66*size), s.math(m.From, 0.66*size)
	w := max(sigma.width, to.width, from.width)
	gap := 0.2 * size
	sigma.move((w-sigma.width)/2, 0)
	out := mathBox{width: w, up: up, down: down, ops: sigma.ops}
	if m.To != nil {
		to.move((w-to.width)/2, -up-gap-to.down)
		out.up += gap + to.down + to.up
		out.ops = append(out.ops, to.ops...)
	}
	if m.From != nil {
		from.move((w-from.width)/2, down+gap+from.up)
		out.down += gap + from.up + from.down
		out.ops = append(out.ops, from.ops...)
	}
	return out
}

// move shifts what prints a box.
func (b mathBox) move(dx, dy float64) {
	for _, o := range b.ops {
		switch o := o.(type) {
		case *textOp:
			o.x += dx
			o.y += dy
		case *pathOp:
			for i := range o.points {
				o.points[i].x += dx
				o.points[i].y += dy
			}
		default:
			panic(fmt.Sprintf("pdf: %T in a formula", o))
		}
	}
}
