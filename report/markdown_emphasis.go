package report

import "unicode"

// reading is a way in which readers of Markdown find delimiters.
type reading struct {
	punct   func(rune) bool // what is punctuation besides that of ASCII
	through bool            // a star sees through ~~ to what stands behind
}

// readings are those of CommonMark up to 0.30 and from 0.31, and that of
// cmark-gfm 0.29.
func readings() []reading {
	symbols := func(r rune) bool { return unicode.IsPunct(r) || unicode.IsSymbol(r) }
	return []reading{{unicode.IsPunct, false}, {symbols, false}, {unicode.IsPunct, true}}
}

// keepSound returns tokens without the delimiters that some reading takes
// otherwise than they are meant. It reads them as CommonMark does
// (CommonMark 0.31.2, "Emphasis and strong emphasis", and the appendix "A
// parsing strategy"), and takes out what fails until the rest is right.
func keepSound(tokens []token, inLink bool) []token {
	for range 4 {
		bad := map[int]bool{}
		for _, how := range readings() {
			misread(tokens, inLink, how, bad)
		}
		if len(bad) == 0 {
			return tokens
		}
		tokens = without(tokens, func(pair int) bool { return bad[pair] })
	}
	return without(tokens, func(int) bool { return true })
}

// without returns tokens without the delimiters of the pairs for which drop
// is true.
func without(tokens []token, drop func(pair int) bool) []token {
	var out []token
	for _, t := range tokens {
		if !isDelimiter(t) || !drop(t.pair) {
			out = append(out, t)
		}
	}
	return out
}

func isDelimiter(t token) bool { return t.kind == tokenOpen || t.kind == tokenClose }

// run is a delimiter run: delimiters of one character without anything
// between them.
type run struct {
	char              byte
	first, last       int   // tokens
	owners            []int // for each character, the pair it belongs to
	canOpen, canClose bool
	place             int // among the runs
	left, right       int // characters not yet used lie in owners[left:right]
}

func (r *run) length() int { return r.right - r.left }

// span is emphasis that CommonMark sees: from token from to token to, both
// excluded.
type span struct {
	from, to int
	mark     string
}

// misread adds to bad the pairs of delimiters that are read otherwise than
// they are meant: those left over, or else all, if what is emphasised is not
// what should be.
func misread(tokens []token, inLink bool, how reading, bad map[int]bool) {
	runs := delimiterRuns(tokens, inLink, how)
	spans := match(runs)
	sound := true
	for _, r := range runs {
		for _, pair := range r.owners[r.left:r.right] {
			bad[pair], sound = true, false
		}
	}
	if !sound || sameStyles(tokens, spans) {
		return
	}
	for _, t := range tokens {
		if isDelimiter(t) {
			bad[t.pair] = true
		}
	}
}

// delimiterRuns returns the delimiter runs of tokens. Text in a link stands
// between brackets, other text between spaces.
func delimiterRuns(tokens []token, inLink bool, how reading) []*run {
	var runs []*run
	edge := ' '
	if inLink {
		edge = '['
	}
	prev, prevOfStar := edge, edge
	for i := 0; i < len(tokens); i++ {
		if !isDelimiter(tokens[i]) {
			prev = visibleEnd(tokens[i])
			prevOfStar = prev
			continue
		}
		r := &run{char: tokens[i].text[0], first: i}
		i = r.take(tokens)
		next := nextOf(tokens, i+1, edge, how.through && r.char == '*')
		if r.char == '*' {
			prev, prevOfStar = prevOfStar, '*'
		}
		r.canOpen, r.canClose = flanking(prev, next, how.punct)
		if r.char == '~' && (prev == '~' || next == '~' || len(r.owners) != 2) {
			r.canOpen, r.canClose = false, false
		}
		if prev = rune(r.char); !how.through {
			prevOfStar = prev
		}
		runs = append(runs, r)
	}
	return runs
}

// take gives a run the delimiters from its first on, and returns the last.
func (r *run) take(tokens []token) int {
	i := r.first
	for ; i < len(tokens) && isDelimiter(tokens[i]) && tokens[i].text[0] == r.char; i++ {
		for range tokens[i].text {
			r.owners = append(r.owners, tokens[i].pair)
		}
	}
	r.last, r.right = i-1, len(r.owners)
	return r.last
}

// nextOf returns the character that a delimiter sees behind it.
func nextOf(tokens []token, i int, edge rune, through bool) rune {
	for through && i < len(tokens) && isDelimiter(tokens[i]) && tokens[i].text[0] == '~' {
		i++
	}
	if i < len(tokens) {
		return visibleStart(tokens[i])
	}
	return edge
}

// visibleEnd and visibleStart return the characters that a delimiter sees.
func visibleEnd(t token) rune {
	switch t.kind {
	case tokenSpace, tokenBreak:
		return ' '
	case tokenCode:
		return '`'
	}
	return lastRune(t.text)
}

func visibleStart(t token) rune {
	switch t.kind {
	case tokenSpace, tokenBreak:
		return ' '
	case tokenCode:
		return '`'
	}
	return firstRune(t.text)
}

// flanking reports whether a delimiter run between two characters is
// left-flanking, and so can open, and right-flanking, and so can close.
func flanking(prev, next rune, punct func(rune) bool) (left, right bool) {
	is := func(r rune) bool { return isPunct(r) || punct(r) }
	spaceBefore, spaceAfter := unicode.IsSpace(prev), unicode.IsSpace(next)
	left = !spaceAfter && (!is(next) || spaceBefore || is(prev))
	right = !spaceBefore && (!is(prev) || spaceAfter || is(next))
	return left, right
}

// match pairs the delimiters of runs and returns what they emphasise.
func match(runs []*run) []span {
	var spans []span
	var openers []*run         // that may still find their closer
	bottom := map[[3]int]int{} // the place of a closer that found none: nor will others of its kind, below it
	for c, r := range runs {
		r.place = c
		for r.canClose && r.length() > 0 {
			kind := closerKind(r)
			o := len(openers) - 1
			for o >= 0 && openers[o].place >= bottom[kind] && !pairs(openers[o], r) {
				o--
			}
			if o < 0 || openers[o].place < bottom[kind] {
				bottom[kind] = c
				break
			}
			spans = append(spans, join(openers[o], r))
			openers = openers[:o+1]
			if openers[o].length() == 0 {
				openers = openers[:o]
			}
		}
		if r.canOpen && r.length() > 0 {
			openers = append(openers, r)
		}
	}
	return spans
}

func closerKind(r *run) [3]int {
	both := 0
	if r.canOpen {
		both = 1
	}
	return [3]int{int(r.char), both, len(r.owners) % 3}
}

// pairs reports whether opener and closer may belong together: the rule of
// three, and for text struck through the same length.
func pairs(opener, closer *run) bool {
	if opener.char != closer.char {
		return false
	}
	if opener.char == '~' {
		return opener.length() == closer.length()
	}
	a, b := len(opener.owners), len(closer.owners)
	return !(opener.canClose || closer.canOpen) || (a+b)%3 != 0 || a%3 == 0 && b%3 == 0
}

// join uses up two characters of both runs, or one, from their inner ends.
func join(opener, closer *run) span {
	n := 1
	if opener.length() >= 2 && closer.length() >= 2 {
		n = 2
	}
	opener.right -= n
	closer.left += n
	mark := string(opener.char)
	if n == 2 {
		mark += mark
	}
	return span{opener.last, closer.first, mark}
}

// sameStyles reports whether spans emphasise what the tokens mean to.
func sameStyles(tokens []token, spans []span) bool {
	marks := []string{"*", "**", "~~"}
	for _, mark := range marks {
		depth := make([]int, len(tokens)+1)
		for _, s := range spans {
			if s.mark == mark {
				depth[s.from]++
				depth[s.to]--
			}
		}
		meant, seen := 0, 0
		for i, t := range tokens {
			seen += depth[i]
			switch {
			case t.kind == tokenOpen && t.text == mark:
				meant++
			case t.kind == tokenClose && t.text == mark:
				meant--
			case !isDelimiter(t) && (meant > 0) != (seen > 0):
				return false
			}
		}
	}
	return true
}
