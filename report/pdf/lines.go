package pdf

import (
	"math"
	"strings"
	"unicode/utf8"

	"shearbook/report"
)

// setLine is a line of type.
type setLine struct {
	runs  []run
	width float64
	notes []int
}

// breakLines sets words in lines of a width.
func (s *setter) breakLines(words []word, width float64) []setLine {
	words = s.breakWords(words, width)
	var lines []setLine
	for len(words) > 0 {
		n := 0
		for n < len(words)-1 && !words[n].ends {
			n++
		}
		lines = append(lines, s.raggedLines(words[:n+1], width)...)
		words = words[n+1:]
	}
	return lines
}

// partCost is what it costs to part words that belong together: as much as a
// line that is half empty.
const partCost = 0.25

// mostWords bounds the words of a line, for those that take no room.
const mostWords = 500

// raggedLines divides words, none of them wider than a line, so that the sum
// of the squares of the space left over at the right is least: an even edge.
// The last line is free, but not to hold a scrap.
func (s *setter) raggedLines(words []word, width float64) []setLine {
	n := len(words)
	cost := make([]float64, n+1) // of the best division of words[:i]
	from := make([]int, n+1)     // where its last line starts
	for end := 1; end <= n; end++ {
		cost[end] = math.Inf(1)
		w := 0.0
		if end < n && words[end-1].hyphen {
			w = s.hyphenWidth(words[end-1])
		}
		for start := end - 1; start >= max(0, end-mostWords); start-- {
			w += words[start].width
			if start < end-1 {
				w += words[start].gapWidth()
			}
			if w > width+0.01 && start < end-1 {
				break
			}
			c := cost[start] + rag(w, width, start > 0, end == n)
			if end < n && words[end-1].binds {
				c += partCost
			}
			if c <= cost[end] {
				cost[end], from[end] = c, start
			}
		}
	}
	count := 0
	for end := n; end > 0; end = from[end] {
		count++
	}
	lines := make([]setLine, count)
	for end := n; end > 0; end = from[end] {
		count--
		lines[count] = s.joinWords(words[from[end]:end])
	}
	return lines
}

// rag is what a line costs.
func rag(w, width float64, later, last bool) float64 {
	left := max(0, 1-w/width)
	switch {
	case !last:
		return left*left + 1e-4
	case later && w < 0.1*width:
		return 0.04
	}
	return 0
}

// joinWords makes a line, one run for each stretch of equal style.
func (s *setter) joinWords(words []word) setLine {
	var l setLine
	add := func(r run) {
		l.width += r.width
		if n := len(l.runs); n > 0 && l.runs[n-1].style == r.style {
			l.runs[n-1].text += r.text
			l.runs[n-1].width += r.width
			return
		}
		l.runs = append(l.runs, r)
	}
	size := 0
	for _, w := range words {
		size += len(w.runs) + 1
	}
	l.runs = make([]run, 0, size)
	for i, w := range words {
		for _, r := range w.runs {
			add(r)
		}
		l.notes = append(l.notes, w.notes...)
		switch last := i == len(words)-1; {
		case !last && w.gap != nil:
			add(*w.gap)
		case last && w.hyphen:
			add(run{w.runs[len(w.runs)-1].style, "-", s.hyphenWidth(w)})
		}
	}
	return l
}

func (s *setter) hyphenWidth(w word) float64 {
	return s.width(w.runs[len(w.runs)-1].style, "-")
}

// breakWords cuts words that are wider than a line.
func (s *setter) breakWords(words []word, width float64) []word {
	for i := range words {
		if words[i].width > width {
			out := append([]word{}, words[:i]...)
			for _, w := range words[i:] {
				out = append(out, s.breakWord(w, width)...)
			}
			return out
		}
	}
	return words
}

// breakWord cuts a word in parts that fit: after a mark such as / or _ in
// the last third of a line, else between any two characters. No hyphen is
// added, which would read as a part of a path or a digest.
func (s *setter) breakWord(w word, width float64) []word {
	if w.width <= width {
		return []word{w}
	}
	m := maker{s: s}
	for _, r := range w.runs {
		text := r.text
		for text != "" {
			n := s.fitting(r.style, text, width-m.now.width, width, len(m.now.runs) == 0)
			if n > 0 {
				part := run{r.style, text[:n], s.width(r.style, text[:n])}
				m.now.runs = append(m.now.runs, part)
				m.now.width += part.width
				text = text[n:]
			}
			if text != "" {
				m.flush()
			}
		}
	}
	m.close()
	end := &m.words[len(m.words)-1]
	end.gap, end.hyphen, end.ends, end.notes = w.gap, w.hyphen, w.ends, w.notes
	return m.words
}

// fitting returns how many bytes of text fit a space; at least one character
// if the line is empty.
func (s *setter) fitting(st style, text string, space, width float64, empty bool) int {
	f := s.fonts.get(st.font)
	w := 0.0
	good := 0
	for i, r := range text {
		if isMark(r) {
			continue
		}
		w += st.size * float64(f.advance(r)) / 1000
		if w > space {
			switch {
			case good > 0:
				return good
			case i == 0 && empty:
				return utf8.RuneLen(r) + marks(text[utf8.RuneLen(r):])
			}
			return i
		}
		if w > space-width/3 && strings.ContainsRune(" /\\_-.?&=,;:)]}@#+", r) && i+1 < len(text) {
			good = i + 1
		}
	}
	return len(text)
}

// marks returns the bytes of the combining marks that text begins with.
func marks(text string) int {
	n := 0
	for _, r := range text {
		if !isMark(r) {
			break
		}
		n += utf8.RuneLen(r)
	}
	return n
}

// widest returns the width of the widest word.
func widest(words []word) float64 {
	w := 0.0
	for i := range words {
		w = max(w, words[i].width)
	}
	return w
}

// natural returns the width of the words without line breaks but their own.
func natural(words []word) float64 {
	most, w := 0.0, 0.0
	for i := range words {
		w += words[i].width
		most = max(most, w)
		if words[i].ends {
			w = 0
			continue
		}
		w += words[i].gapWidth()
	}
	return most
}

// ops returns what prints a line whose base line is at y.
func (s *setter) lineOps(l setLine, align report.Align, x, y, width float64) []op {
	switch align {
	case report.AlignCentre:
		x += (width - l.width) / 2
	case report.AlignRight, report.AlignDecimal:
		x += width - l.width
	}
	ops := make([]op, 0, len(l.runs))
	for i := 0; i < len(l.runs); i++ {
		r := l.runs[i]
		ops = append(ops, &textOp{x, y - r.rise, r.text, r.style})
		if r.strike {
			ops = append(ops, rule(x, y-r.rise-0.27*r.size, r.width, 0.06*r.size, r.colour))
		}
		if r.link != nil {
			ops = append(ops, &linkOp{x, y - r.rise - 0.8*r.size, r.width, 1.05 * r.size, r.link})
		}
		x += r.width
	}
	for _, n := range l.notes {
		if !s.mentioned[n] {
			s.mentioned[n] = true
			ops = append(ops, &destOp{mentionDest(n), y - bodyLeading})
		}
	}
	return ops
}
