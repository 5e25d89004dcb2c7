package evidence

import (
	"sort"
	"strings"
)

// font is what the text in a font says and how wide it is.
type font struct {
	wide     bool            // two bytes a character, as composite fonts have
	meaning  []meaning       // from its table to Unicode, sorted by first
	widths   map[int]float64 // in 1/1000 of the size
	standard float64         // of characters without a width
}

// meaning is a run of characters that follow each other in Unicode as well.
type meaning struct {
	first, last int
	to          rune
	more        string // behind to, where one character stands for several
}

// maxMeanings is the most runs of a table that are read.
const maxMeanings = 70_000

// maxLetters is the most letters that one character may stand for.
const maxLetters = 8

// font returns the font of a resource, nil where there is none: text in it
// is passed over.
func (w *pageWalk) font(o object) (*font, error) {
	r, isRef := o.(ref)
	if f, ok := w.fonts[r.number]; ok && isRef {
		return f, nil
	}
	o, err := w.need(o)
	if err != nil {
		return nil, err
	}
	d, ok := o.(dict)
	if !ok {
		return nil, nil
	}
	f := &font{wide: d["Subtype"] == object(name("Type0")), widths: map[int]float64{}, standard: 500}
	if f.wide {
		w.compositeWidths(f, d)
	} else {
		w.simpleWidths(f, d)
	}
	if w.budget.values < 0 {
		return nil, errCostly
	}
	if table, ok := w.resolve(d["ToUnicode"]).(*stream); ok {
		data, err := w.unpack(table, &w.budget.packed)
		if err != nil {
			return nil, err
		}
		if err := f.readMeaning(data); err != nil {
			return nil, err
		}
	}
	if isRef {
		w.fonts[r.number] = f
	}
	return f, nil
}

func (w *pageWalk) simpleWidths(f *font, d dict) {
	first, _ := w.resolve(d["FirstChar"]).(float64)
	widths, _ := w.resolve(d["Widths"]).(list)
	w.budget.values -= len(widths)
	for i, o := range widths {
		if v, ok := w.resolve(o).(float64); ok && first >= 0 && first < 256 {
			f.widths[int(first)+i] = v
		}
	}
}

// compositeWidths reads W of ISO 32000-1, 9.7.4.3: `c [w …]` and `c c w`.
func (w *pageWalk) compositeWidths(f *font, d dict) {
	f.standard = 1000
	below, _ := w.resolve(d["DescendantFonts"]).(list)
	if len(below) == 0 {
		return
	}
	cid, _ := w.resolve(below[0]).(dict)
	if v, ok := w.resolve(cid["DW"]).(float64); ok {
		f.standard = v
	}
	widths, _ := w.resolve(cid["W"]).(list)
	for i := 0; i+1 < len(widths) && w.budget.values >= 0; {
		w.budget.values--
		first, _ := w.resolve(widths[i]).(float64)
		switch next := w.resolve(widths[i+1]).(type) {
		case list:
			w.budget.values -= len(next)
			for k, o := range next {
				if v, ok := w.resolve(o).(float64); ok && first >= 0 && first < 1<<16 {
					f.widths[int(first)+k] = v
				}
			}
			i += 2
		case float64:
			if i+2 >= len(widths) {
				return
			}
			v, _ := w.resolve(widths[i+2]).(float64)
			for c := max(first, 0); c <= min(next, 1<<16) && w.budget.values >= 0; c++ {
				w.budget.values--
				f.widths[int(c)] = v
			}
			i += 3
		default:
			return
		}
	}
}

// readMeaning reads a table to Unicode (ISO 32000-1, 9.10.3): bfchar and
// bfrange.
func (f *font) readMeaning(data []byte) error {
	s := &scanner{data: data, content: true, budget: &budget{values: 4 * maxMeanings, bytes: 8 << 20}}
	var operands []object
	for {
		o, done := s.object()
		if s.err != nil {
			return damaged("a table of characters: %w", s.err)
		}
		if done {
			break
		}
		switch o {
		case operator("begin"):
			operands = operands[:0]
		case operator("endbfchar"):
			f.chars(operands)
		case operator("endbfrange"):
			f.ranges(operands)
		default:
			operands = append(operands, o)
		}
		if len(f.meaning) > maxMeanings {
			return errCostly
		}
	}
	sort.SliceStable(f.meaning, func(i, j int) bool { return f.meaning[i].first < f.meaning[j].first })
	return nil
}

func (f *font) chars(operands []object) {
	for i := 0; i+1 < len(operands); i += 2 {
		from, ok1 := operands[i].(text)
		to, ok2 := operands[i+1].(text)
		if ok1 && ok2 {
			c := number([]byte(from))
			f.mean(c, c, to)
		}
	}
}

func (f *font) ranges(operands []object) {
	for i := 0; i+2 < len(operands); i += 3 {
		low, ok1 := operands[i].(text)
		high, ok2 := operands[i+1].(text)
		if !ok1 || !ok2 {
			continue
		}
		first, last := number([]byte(low)), number([]byte(high))
		switch to := operands[i+2].(type) {
		case text:
			f.mean(first, last, to)
		case list:
			for k, o := range to {
				if t, ok := o.(text); ok && first+k <= last {
					f.mean(first+k, first+k, t)
				}
			}
		}
	}
}

func (f *font) mean(first, last int, to text) {
	letters := []rune(fromUTF16(string(to)))
	if len(letters) == 0 || len(letters) > maxLetters || last < first || last > 1<<16 {
		return
	}
	f.meaning = append(f.meaning, meaning{first, last, letters[0], string(letters[1:])})
}

// decode returns the text of a string in the font, and its width in 1/1000
// of the size. Without a table to Unicode simple fonts are read as Latin-1,
// and composite ones say nothing that can be read: U+FFFD.
func (f *font) decode(t text) (string, float64) {
	var b strings.Builder
	width := 0.0
	step := 1
	if f.wide {
		step = 2
	}
	for i := 0; i+step <= len(t); i += step {
		c := number([]byte(t[i : i+step]))
		f.write(&b, c)
		if w, ok := f.widths[c]; ok {
			width += w
		} else {
			width += f.standard
		}
	}
	return b.String(), width
}

func (f *font) write(b *strings.Builder, c int) {
	i := sort.Search(len(f.meaning), func(i int) bool { return f.meaning[i].first > c }) - 1
	switch {
	case i >= 0 && c <= f.meaning[i].last:
		m := f.meaning[i]
		b.WriteRune(m.to + rune(c-m.first))
		b.WriteString(m.more)
	case f.meaning == nil && !f.wide:
		b.WriteRune(rune(c))
	default:
		b.WriteRune('\uFFFD')
	}
}
