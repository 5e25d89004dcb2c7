package report

import (
	"regexp"
	"strings"
	"unicode"
)

// mustEscape reports whether character i of a line, which is text, would be
// taken for markup where it stands. What is markup only at the start of a
// line is left to escapeLineStart. strike says that the line holds text
// struck through.
func mustEscape(line []char, i int, at place, strike bool) bool {
	prev, next := around(line, i)
	switch line[i].r {
	case '`', '$':
		return true // $ opens a formula in the viewers that know $$
	case '\\':
		return next.raw || next.r == ' ' || isPunct(next.r)
	case '*':
		return at == inLink || prev.r != ' ' || next.r != ' '
	case '_':
		return prev.raw || next.raw || !isWordRune(prev.r) || !isWordRune(next.r)
	case '~':
		return strike || at == inLink || !approximately(prev, next)
	case '[':
		return at == inLink || prev.r == '!' || prev.raw || !unitInBrackets(line, i)
	case ']':
		return at == inLink
	case '^':
		return at == inLink && i == 0
	case '(':
		return prev.raw && prev.r == ']'
	case ':':
		return afterScheme(line, i)
	case '.':
		return afterWWW(line, i)
	case '!':
		// Some readers see a footnote in !x^1] too.
		return next.raw && next.r == '[' || i+2 < len(line) && line[i+2].r == '^'
	case '<':
		return !next.raw && (unicode.IsLetter(next.r) || strings.ContainsRune("/!?", next.r)) || beforeMail(line, i)
	case '&':
		return startsEntity(line, i)
	}
	return false
}

// around returns the characters before and after i; a space where there is
// none.
func around(line []char, i int) (prev, next char) {
	prev, next = char{r: ' '}, char{r: ' '}
	if i > 0 {
		prev = line[i-1]
	}
	if i+1 < len(line) {
		next = line[i+1]
	}
	return prev, next
}

// isPunct reports whether r is ASCII punctuation, which a backslash escapes.
func isPunct(r rune) bool {
	return r > ' ' && r < 0x7f && !(r >= '0' && r <= '9' || r >= 'A' && r <= 'Z' || r >= 'a' && r <= 'z')
}

// isWordRune reports whether r is neither space nor punctuation in the
// sense of CommonMark.
func isWordRune(r rune) bool {
	return !unicode.IsSpace(r) && !unicode.IsPunct(r) && !unicode.IsSymbol(r)
}

// approximately reports whether a tilde stands before a number, as in ~300:
// it can open text struck through, but nothing closes it.
func approximately(prev, next char) bool {
	return !prev.raw && !next.raw && (prev.r == ' ' || prev.r == '(') && next.r >= '0' && next.r <= '9'
}

// unitInBrackets reports whether a bracket opens something like [m/s], which
// is no link, as there are no link definitions in what Markdown writes.
func unitInBrackets(line []char, i int) bool {
	for j := i + 1; j < len(line) && j < i+20 && !line[j].raw; j++ {
		switch r := line[j].r; {
		case r == ']':
			_, next := around(line, j)
			one := j == i+2 && strings.ContainsRune("xX", line[i+1].r) // a task's box
			return j > i+1 && !one && !next.raw && strings.ContainsRune(" ),.;", next.r)
		case !unicode.IsLetter(r) && !unicode.IsNumber(r) && !strings.ContainsRune("/%·.-⁻", r):
			return false
		}
	}
	return false
}

// afterScheme reports whether a colon is the one of http://, https:// or
// ftp://, of which GFM would make a link with all backslashes in it.
func afterScheme(line []char, i int) bool {
	return endsWith(line, i, "http") || endsWith(line, i, "https") || endsWith(line, i, "ftp")
}

// afterWWW reports whether a full stop is the first of www.example.org.
func afterWWW(line []char, i int) bool { return endsWith(line, i, "www") }

func endsWith(line []char, i int, word string) bool {
	if i < len(word) {
		return false
	}
	for j, r := range word {
		if c := line[i-len(word)+j]; c.raw || unicode.ToLower(c.r) != r {
			return false
		}
	}
	return true
}

// beforeMail reports whether < stands before something like me@example.org.
func beforeMail(line []char, i int) bool {
	for _, c := range line[i+1:] {
		switch c.r {
		case '@':
			return true
		case ' ', '<', '>', hardBreak:
			return false
		}
	}
	return false
}

// startsEntity reports whether an ampersand begins something like &lt; or
// &#60;.
func startsEntity(line []char, i int) bool {
	for j := i + 1; j < len(line) && !line[j].raw; j++ {
		switch r := line[j].r; {
		case r == ';':
			return j > i+1
		case r == '#' && j == i+1:
		case r > unicode.MaxASCII || isPunct(r) || r == ' ':
			return false
		}
	}
	return false
}

var entity = regexp.MustCompile(`&(#?[0-9A-Za-z]+;)`)

// escapeEntities returns a destination in which no entity is seen.
func escapeEntities(url string) string { return entity.ReplaceAllString(url, "&amp;$1") }

// escapeTitle returns the title of a picture as it stands between quotation
// marks.
func escapeTitle(s string) string {
	return escapeEntities(strings.NewReplacer(`\`, `\\`, `"`, `\"`).Replace(s))
}

// hasStrike reports whether there is a delimiter of text struck through.
func hasStrike(line []char) bool {
	for _, c := range line {
		if c.raw && c.r == '~' {
			return true
		}
	}
	return false
}

var (
	blockStart = regexp.MustCompile(`^(#{1,6}( |$)|[-+*]( |$)|>|=+$|[-:|][-:| ]*$)`)
	numbered   = regexp.MustCompile(`^([0-9]{1,9})([.)]( |$))`)
	definition = regexp.MustCompile(`^(\[\^[0-9]+\]):`)
)

// escapeLineStart returns a line of a paragraph that does not look like the
// start of another block: a heading, a list, a quotation, the line under a
// heading or under the head of a table, a footnote.
func escapeLineStart(line string) string {
	if blockStart.MatchString(line) {
		return `\` + line
	}
	return definition.ReplaceAllString(numbered.ReplaceAllString(line, `$1\$2`), `$1\:`)
}

var closing = regexp.MustCompile(`(^| )(#+)$`)

// closeHeading returns the text of a heading whose last number signs are not
// taken for the end of it.
func closeHeading(s string) string { return closing.ReplaceAllString(s, `$1\$2`) }
