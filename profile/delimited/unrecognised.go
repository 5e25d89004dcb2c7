package delimited

import (
	"cmp"
	"slices"
	"strconv"
	"strings"

	"shearbook/profile"
)

// noTable says what is wrong with a header that lacks Vs or depth, and what to
// do.
func (r *reader) noTable(vs, depth bool) (text, hint string) {
	headings := make([]string, len(r.columns.list))
	for i := range r.columns.list {
		headings[i] = r.columns.list[i].text
	}
	text = NotFound(vs, depth, headings)
	if hint, ok := r.headerElsewhere(); ok {
		return text, hint
	}
	if hint := r.hintMissing(vs, depth); hint != "" {
		return text, hint
	}
	return text, hintTable
}

// NotFound says which columns a header lacks, and which it has.
func NotFound(vs, depth bool, headings []string) string {
	seen := listed(headings)
	if len(headings) == 0 {
		seen = "a row of blank cells"
	}
	switch {
	case vs:
		return "no column of top, bottom or thickness in " + seen
	case depth:
		return "no column of Vs in " + seen
	}
	return "this does not look like a table of layers: no column of depth and none of Vs in " + seen
}

// listed is the first few of the headings of a table, between quotes.
func listed(headings []string) string {
	const most = 8
	var seen []string
	for i, text := range headings {
		if i == most {
			seen = append(seen, "…")
			break
		}
		seen = append(seen, quote(text))
	}
	return strings.Join(seen, ", ")
}

// headerElsewhere says what to do with a header that is none: numbers were
// found in its place, or a row further down looks like one.
func (r *reader) headerElsewhere() (hint string, ok bool) {
	for i := range r.columns.list {
		if _, problem := metadataNumber(r.columns.list[i].name); problem == "" {
			return "put a row with the names of the columns above it, such as top_m,bottom_m,vs_mps", true
		}
	}
	if r.scan.grid != nil {
		return "", false
	}
	ahead := r.scan
	ahead.cells = nil
	for range 50 {
		for _, sep := range []byte(separators) {
			try := ahead
			try.sep, try.cells = sep, nil
			if ok, bad := try.next(); ok && bad == nil && r.recognised(try.cells) > 2*MaxColumns {
				return "line " + strconv.Itoa(try.end.line) + " looks like the header: begin the lines above it with #", true
			}
		}
		ahead.rawLine()
	}
	return "", false
}

// hintMissing suggests the mapping of what a header lacks.
func (r *reader) hintMissing(vs, depth bool) string {
	var unread []string
	for i := range r.columns.list {
		if c := &r.columns.list[i]; c.quantity == profile.Unknown && c.text != "" {
			unread = append(unread, c.text)
		}
	}
	return HintMap(vs, depth, unread)
}

// HintMap suggests the mapping of the columns that a header lacks to those of
// its headings that are not read, the likeliest first; "" if there are none, or
// none looks like what is lacking.
func HintMap(vs, depth bool, unread []string) string {
	var items, questions, others []string
	suggest := func(q profile.Quantity, word, what, unit string) bool {
		ranked := likely(q, unread)
		if len(ranked) == 0 {
			return false
		}
		item := word + "=" + ranked[0]
		if !statesUnit(ranked[0], q.Dimension()) {
			item += " [" + unit + "]"
		}
		items = append(items, strings.NewReplacer(`"`, "", `\`, "").Replace(item))
		questions = append(questions, quote(ranked[0])+" "+what)
		others = append(others, ranked[1:]...)
		return true
	}
	if !vs {
		suggest(profile.Vs, "Vs", "the shear-wave velocity", "m/s")
	}
	if !depth && !suggest(profile.Top, "top", "the top of each layer", "m") {
		suggest(profile.Bottom, "bottom", "the bottom of each layer", "m")
	}
	if len(items) == 0 {
		return ""
	}
	hint := "is " + strings.Join(questions, ", and ") + `? then add --map "` + strings.Join(items, `" --map "`) +
		"\", or `map: [\"" + strings.Join(items, `", "`) + "\"]` to the profile in a notebook"
	if others = slices.Compact(others); len(others) > 0 {
		hint += "; other columns: " + listed(others[:min(len(others), 3)])
	}
	return hint
}

// likely are the headings that may be quantity q, the likeliest first: by the
// unit that they state, the words that they share with its names, and how
// little they differ from one of them.
func likely(q profile.Quantity, headings []string) []string {
	type rated struct {
		text  string
		score int
	}
	var list []rated
	for _, text := range headings {
		if len(text) > longestHeading {
			continue
		}
		base, _ := brackets(text)
		p, score := plain(base), 0
		if statesUnit(text, q.Dimension()) {
			score += 4
		}
		if profile.Nearest(p, names[q]) != "" {
			score += 2
		}
		if sharesWord(p, names[q]) || q == profile.Vs && sharesWord(p, speedWords) {
			score++
		}
		if score > 0 {
			list = append(list, rated{text, score})
		}
	}
	slices.SortStableFunc(list, func(a, b rated) int { return cmp.Compare(b.score, a.score) })
	texts := make([]string, len(list))
	for i := range list {
		texts[i] = list[i].text
	}
	return texts
}

// speedWords are words of velocities beside those in names.
var speedWords = []string{"speed", "swave", "mps"}

// statesUnit reports whether a heading ends in a unit of a dimension, in
// brackets or not.
func statesUnit(text string, d profile.Dimension) bool {
	base, groups := brackets(text)
	if len(groups) > 0 {
		_, ok := unitOf(groups[len(groups)-1], d)
		return ok
	}
	name, _, _ := cutUnit(base, d)
	return name != ""
}

// sharesWord reports whether a name has a word of at least three letters in
// common with one of others; that it is of a layer says nothing.
func sharesWord(name string, others []string) bool {
	for word := range strings.SplitSeq(name, " ") {
		if len(word) < 3 || word == "layer" {
			continue
		}
		for _, other := range others {
			if slices.Contains(strings.Fields(other), word) {
				return true
			}
		}
	}
	return false
}
