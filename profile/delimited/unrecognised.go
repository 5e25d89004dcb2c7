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
	if hint, ok := oneColumn(headings); ok {
		return text, hint
	}
	if hint := r.hintMissing(vs, depth); hint != "" {
		return text, hint
	}
	if !vs && slices.ContainsFunc(headings, averageVs) {
		return text, "an average is no profile: give the layers that it was made from, as top_m,bottom_m,vs_mps"
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

// averageVs reports whether a heading is one of averages of Vs.
func averageVs(text string) bool {
	p := " " + plain(text) + " "
	return len(text) <= longestHeading && (strings.Contains(p, " vs30 ") || strings.Contains(p, " vs 30 ") || strings.Contains(p, " s30 ") || strings.Contains(p, " average "))
}

// oneColumn says what to do with a header whose cells nothing separates that
// is read as a separator.
func oneColumn(headings []string) (hint string, ok bool) {
	if len(headings) != 1 || len(headings[0]) > longestHeading {
		return "", false
	}
	n := 0
	text := headings[0]
	for _, part := range strings.FieldsFunc(text, func(c rune) bool { return c == '|' || c == ' ' }) {
		if parseHeading(part).quantity != profile.Unknown {
			n++
		}
	}
	switch {
	case strings.Contains(text, "|"):
		return "put a comma, a semicolon or a tab between the cells, not |", true
	case n >= 2:
		return "put a comma, a semicolon or a tab between the cells, not blanks", true
	}
	return "", false
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
// none looks like what is lacking. What a heading itself contradicts, by its unit
// or by its words, is never suggested.
func HintMap(vs, depth bool, unread []string) string {
	var items []suggestion
	var others []string
	if !vs {
		if ranked := likely(profile.Vs, unread); len(ranked) > 0 {
			what := "the shear-wave velocity"
			if slowness(ranked[0]).Name != "" {
				what = "the slowness of shear waves"
			}
			items, others = append(items, suggestion{"Vs", ranked[0], what, "m/s"}), ranked[1:]
		}
	}
	if !depth {
		list, more := depthItems(slices.DeleteFunc(slices.Clone(unread), func(text string) bool { return isItem(items, text) }))
		if items, others = append(items, list...), append(others, more...); len(list) == 0 && slices.ContainsFunc(unread, elevation) {
			return "elevations are not read: give depths below ground level, as top_m,bottom_m,vs_mps"
		}
	}
	if len(items) == 0 {
		return ""
	}
	hint := mapHint(items)
	others = slices.DeleteFunc(others, func(text string) bool { return isItem(items, text) })
	if others = slices.Compact(others); len(others) > 0 {
		hint += "; other columns: " + listed(others[:min(len(others), 3)])
	}
	return hint
}

func isItem(items []suggestion, text string) bool {
	return slices.ContainsFunc(items, func(s suggestion) bool { return s.heading == text })
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
		if len(text) > longestHeading || q == profile.Vs && cannotBeVs(text) {
			continue
		}
		base, _ := brackets(text)
		p, score := plain(base), 0
		if statesUnit(text, q.Dimension()) || q == profile.Vs && slowness(text).Name != "" {
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
