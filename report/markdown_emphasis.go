package report

import "unicode"

// keepSound returns tokens without the delimiters that CommonMark would read
// otherwise than they are meant. It reads them as CommonMark does
// (CommonMark 0.31.2, "Emphasis and strong emphasis", and the appendix "A
// parsing strategy"), with both of the sets of punctuation that its editions
// have known, and takes out what fails until the rest is right.
func keepSound(tokens []token, inLink bool) []token {
	for range 4 {
		bad := misread(tokens, inLink, unicode.IsPunct)
		for pair := range misread(tokens, inLink, isPunctOrSymbol) {
			bad[pair] = true
		}
		if len(bad) == 0 {
			return tokens
		}
		tokens = without(tokens, func(pair int) bool { return bad[pair] })
	}
	return without(tokens, func(int) bool { return true })
}

func isPunctOrSymbol(r rune) bool { return unicode.IsPunct(r) || unicode.IsSymbol(r) }

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
	gone              bool
	left, right       int // characters not yet used lie in owners[left:right]
}

func (r *run) length() int { return r.right - r.left }

// span is emphasis that CommonMark sees: from token from to token to, both
// excluded.
type span struct {
	from, to int
	mark     string
}

// misread returns the pairs of delimiters that CommonMark reads otherwise
// than they are meant: those left over, or else all, if what is emphasised
// is not what should be.
func misread(tokens []token, inLink bool, punct func(rune) bool) map[int]bool {
	runs := delimiterRuns(tokens, inLink, punct)
	spans := match(runs)
	bad := map[int]bool{}
	for _, r := range runs {
		for _, pair := range r.owners[r.left:r.right] {
			bad[pair] = true
		}
	}
	if len(bad) == 0 && !sameStyles(tokens, spans) {
		for _, t := range tokens {
			if isDelimiter(t) {
				bad[t.pair] = true
			}
		}
	}
	return bad
}

// delimiterRuns returns the delimiter runs of tokens. Text in a link stands
// between brackets, other text between spaces.
func delimiterRuns(tokens []token, inLink bool, punct func(rune) bool) []*run {
	var runs []*run
	edge := ' '
	if inLink {
		edge = '['
	}
	prev := edge
	for i := 0; i < len(tokens); i++ {
		t := tokens[i]
		if !isDelimiter(t) {
			prev = visibleEnd(t)
			continue
		}
		r := &run{char: t.text[0], first: i}
		for ; i < len(tokens) && isDelimiter(tokens[i]) && tokens[i].text[0] == r.char; i++ {
			for range tokens[i].text {
				r.owners = append(r.owners, tokens[i].pair)
			}
		}
		i--
		r.last, r.right = i, len(r.owners)
		next := edge
		if i+1 < len(tokens) {
			next = visibleStart(tokens[i+1])
		}
		r.canOpen, r.canClose = flanking(prev, next, punct)
		if r.char == '~' && (prev == '~' || next == '~' || len(r.owners) != 2) {
			r.canOpen, r.canClose = false, false
		}
		runs = append(runs, r)
		prev = rune(r.char)
	}
	return runs
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
	bottom := map[[3]int]int{} // below which no opener is left for a kind of closer
	for c := 0; c < len(runs); {
		closer := runs[c]
		if !closer.canClose || closer.gone || closer.length() == 0 {
			c++
			continue
		}
		kind := closerKind(closer)
		o := c - 1
		for o >= bottom[kind] && !pairs(runs[o], closer) {
			o--
		}
		if o < bottom[kind] {
			bottom[kind] = c
			closer.gone = !closer.canOpen
			c++
			continue
		}
		spans = append(spans, join(runs[o], closer))
		for _, between := range runs[o+1 : c] {
			between.gone = true
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
	if opener.gone || !opener.canOpen || opener.length() == 0 || opener.char != closer.char {
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
