package spreadsheet

import (
	"shearbook/profile"
	"shearbook/profile/delimited"
)

// candidate is the row that looks most like a header of those that are none.
type candidate struct {
	at       profile.Place
	headings []string
	score    int
}

// consider compares a row with the candidate, while no table was found.
func (f *finder) consider(r *row) {
	if len(f.tables) > 0 {
		return
	}
	var headings []string
	from, score := -1, 0
	for i, text := range r.cells {
		if text == "" || numeric(text) {
			continue
		}
		if from < 0 {
			from = i
		}
		headings = append(headings, text)
		if f.mapping.Heading(text) != profile.Unknown {
			score += 2
		}
	}
	if len(headings) < 2 || len(headings) > delimited.MaxColumns {
		return
	}
	if _, _, ok := delimited.Measurements(headings); ok {
		score += 4
	}
	if delimited.HintMap(false, false, headings) != "" {
		score++
	}
	if score > f.nearest.score {
		f.nearest = candidate{f.place(f.sheet.name, r.number, from+1), headings, score}
	}
}

// noTable tells that no sheet holds a table, and what to do.
func (r *reader) noTable() {
	const text = "no sheet holds a table of layers: no row names a column of Vs and one of depth"
	c := &r.nearest
	if c.score == 0 {
		r.fault(profile.Place{}, "name the columns in a row above the layers, such as top_m, bottom_m, vs_mps", text)
		return
	}
	vs, depth := false, false
	var unread []string
	for _, heading := range c.headings {
		switch r.mapping.Heading(heading) {
		case profile.Vs, profile.N, profile.Su:
			vs = true
		case profile.Top, profile.Bottom, profile.Thickness:
			depth = true
		case profile.Unknown:
			unread = append(unread, heading)
		}
	}
	if text, hint, ok := delimited.Measurements(c.headings); ok {
		r.fault(c.at, hint, "%s", text)
		return
	}
	hint := delimited.HintMap(vs, depth, unread)
	if hint == "" {
		hint = "name the columns in a row above the layers, such as top_m, bottom_m, vs_mps"
	}
	r.fault(c.at, hint, "no sheet holds a table of layers; the row most like a header: %s", delimited.NotFound(vs, depth, c.headings))
}

// allMapped tells of items of the mapping that no table has.
func (r *reader) allMapped() bool {
	ok := true
	for i, found := range r.mapped {
		if !found {
			f := r.mapping.Missing(i, r.nearest.headings)
			r.fault(f.Place, f.Hint, "%s", f.Text)
			ok = false
		}
	}
	return ok
}
