package ags

import (
	"cmp"
	"math"
	"slices"
	"strconv"
	"strings"

	"shearbook/profile"
)

// hole is what the file says of one hole, or other location, beside its
// velocities.
type hole struct {
	id          string
	at          spot // of its row in LOCA; zero if it has none
	position    profile.Position
	groundLevel profile.Optional
	location    string
	date        string
	metadata    []profile.Metadatum
	strata      []stratum // top down, without overlaps
	results     []result  // of tests
	remarks     []remark
	index       int                // among the holes of the file
	timed       bool               // it has velocities
	tested      bool               // it has none, but a profile all the same
	entries     []entry            // of strata and tests, in the appendix; nil before they are needed
	faults      *profile.Collector // of its own, where holes are read apart; nil if there are none
}

// stratum is a row of GEOL.
type stratum struct {
	top, bottom float64 // m; bottom is +Inf where GEOL_BASE is blank
	soil        string
	source      *source
	row         rowAt
}

// remark is a note in the making, about one kind of thing in a hole: the
// first of them, and how many.
type remark struct {
	id, heading, text string
	at                spot
	n                 int
}

// remark adds a remark, or counts it where there is one of that kind.
func (h *hole) remark(id, heading string, at profile.Place, text string) {
	for i := range h.remarks {
		if m := &h.remarks[i]; m.id == id && m.heading == heading {
			m.n++
			return
		}
	}
	h.remarks = append(h.remarks, remark{id, heading, text, spotOf(at), 1})
}

// remarkNotes returns the remarks on a hole as notes.
func (r *reader) remarkNotes(h *hole) []profile.Note {
	var notes []profile.Note
	for _, m := range h.remarks {
		text := m.text
		switch {
		case m.n == 2:
			text += ", and so in 1 more row"
		case m.n > 2:
			text += ", and so in " + profile.Plural(m.n-1, "more row")
		}
		notes = append(notes, profile.Note{ID: m.id, Text: text, Place: r.at(m.at)})
	}
	return notes
}

// at is a place in the file, for notes.
func (r *reader) at(s spot) profile.Place {
	p := s.place()
	p.File = r.File
	return p
}

// locaHeadings are those of LOCA that are kept for the report.
var locaHeadings = []string{
	"LOCA_TYPE", "LOCA_NATE", "LOCA_NATN", "LOCA_GREF", "LOCA_GL", "LOCA_FDEP", "LOCA_STAR", "LOCA_ENDD",
	"LOCA_LOCX", "LOCA_LOCY", "LOCA_LOCZ", "LOCA_LREF", "LOCA_DATM", "LOCA_NATD",
	"LOCA_LAT", "LOCA_LON", "LOCA_LLZ", "LOCA_LLSI", "LOCA_NSRI",
}

// hole returns the hole of the row that the cursor is at, whose name stands
// in column i. It is nil where the name is blank, which is a fault, or where
// there are too many.
func (r *reader) hole(c *cursor, i int) *hole {
	text := c.get(i)
	h := r.byID[string(text)]
	if h == nil {
		h = r.newHole(c, i, text)
	}
	r.each.row(h, c)
	return h
}

// newHole makes a hole, unless its name differs from that of another in
// blanks alone.
func (r *reader) newHole(c *cursor, i int, text []byte) *hole {
	id := clean(text)
	switch {
	case id == "":
		r.Fault(c.placeOf(i), "name the hole of every row", "LOCA_ID is blank")
		return nil
	case r.byID[id] != nil:
		return r.byID[id]
	case len(r.holes) == MaxHoles:
		if r.Count() == 0 {
			r.Stop(c.placeOf(i), "split it", "the file has more than %d holes", MaxHoles)
		}
		return nil
	}
	h := &hole{id: id, index: len(r.holes)}
	r.holes = append(r.holes, h)
	r.byID[id] = h
	return h
}

// readHoles reads LOCA and GEOL.
func (r *reader) readHoles() bool {
	for _, g := range r.named("LOCA") {
		id := g.column("LOCA_ID")
		level := r.soft(g, g.column("LOCA_GL"), profile.Length)
		for c := r.cursor(g); c.row(); {
			if h := r.hole(c, id); h != nil && h.at.line == 0 {
				r.loca(h, c, level)
			} else if h != nil {
				r.Fault(c.placeOf(id), "keep one row of each hole", "hole %s stands twice in LOCA", profile.Quote(h.id))
			}
		}
	}
	for _, g := range r.named("GEOL") {
		r.geol(g)
	}
	for _, h := range r.holes {
		r.settle(h)
	}
	return true
}

// loca reads the row of a hole.
func (r *reader) loca(h *hole, c *cursor, level measure) {
	g := c.g
	h.at = spotOf(c.placeOf(g.column("LOCA_ID")))
	h.metadata = metadataOf(c, locaHeadings)
	h.date = c.text(g.column("LOCA_STAR"))
	if v, ok := r.optional(h, c, level, profile.Length); ok {
		h.groundLevel = profile.Known(v)
	}
	h.position.Latitude = r.angle(h, c, "LOCA_LAT", 90, 'N', 'S')
	h.position.Longitude = r.angle(h, c, "LOCA_LON", 180, 'E', 'W')
	r.datum(h, c)
	h.location = c.text(g.column("LOCA_LOCA"))
	if h.location == "" {
		h.location = r.header.location
	}
	if r.grid(h, c) {
		return
	}
	grid := strings.TrimSpace(strings.Join([]string{gridPart(c, "LOCA_NATE", "E"), gridPart(c, "LOCA_NATN", "N")}, ""))
	if grid == "" {
		return
	}
	if system := c.text(g.column("LOCA_GREF")); system != "" {
		grid = r.header.code("LOCA_GREF", system) + " " + grid
	}
	h.location = strings.TrimPrefix(h.location+", "+strings.TrimSuffix(grid, ","), ", ")
}

// grid reads the position in the national grid; false if it is not all there.
// Then what there is of it goes to the location, in the words of the file. The
// EPSG code of the grid is read where the file names it so.
func (r *reader) grid(h *hole, c *cursor) bool {
	var at [2]profile.Optional
	for i, heading := range []string{"LOCA_NATE", "LOCA_NATN"} {
		column := c.g.column(heading)
		v, problem := parseNumber(c.get(column))
		if len(c.get(column)) == 0 || problem != "" || math.Abs(v) > profile.MaxGrid {
			return false
		}
		at[i] = profile.Known(v)
	}
	h.position.Easting, h.position.Northing = at[0], at[1]
	system := c.text(c.g.column("LOCA_GREF"))
	for _, text := range []string{system, r.header.code("LOCA_GREF", system)} {
		if code, ok := epsgIn(text); ok {
			h.position.EPSG = code
			break
		}
	}
	return true
}

// epsgIn is the code in a text such as "EPSG:27700" or "British National Grid
// (EPSG 27700)".
func epsgIn(text string) (code int, ok bool) {
	_, rest, found := strings.Cut(strings.ToUpper(text), "EPSG")
	rest = strings.TrimLeft(rest, " :.-_=")
	end := 0
	for end < len(rest) && rest[end] >= '0' && rest[end] <= '9' {
		end++
	}
	if !found || end == 0 || end > 8 {
		return 0, false
	}
	code, err := strconv.Atoi(rest[:end])
	return code, err == nil && code > 0
}

// gridPart is one coordinate of the national grid as the file gives it.
func gridPart(c *cursor, heading, letter string) string {
	i := c.g.column(heading)
	text := c.text(i)
	if text == "" {
		return ""
	}
	if unit := c.g.unit(i); unit != "" {
		text += " " + unit
	}
	return text + " " + letter + ", "
}

// angle reads a latitude or longitude. What cannot be one is left out and
// remarked.
func (r *reader) angle(h *hole, c *cursor, heading string, limit float64, positive, negative byte) profile.Optional {
	i := c.g.column(heading)
	text := c.text(i)
	if text == "" {
		return profile.Optional{}
	}
	v, ok := parseAngle(text, positive, negative)
	if !ok || math.Abs(v) > limit {
		h.remark("position-not-read", heading, c.placeOf(i), heading+" "+profile.Quote(text)+" is not an angle in degrees, or degrees:minutes:seconds, and was left out")
		return profile.Optional{}
	}
	return profile.Known(v)
}

// datum remarks a position in a system that is not the world's.
func (r *reader) datum(h *hole, c *cursor) {
	i := c.g.column("LOCA_LLZ")
	text := c.text(i)
	plain := strings.ToUpper(strings.NewReplacer(" ", "", "-", "", "_", "").Replace(text))
	if text == "" || !h.position.Latitude.Known || strings.Contains(plain, "WGS84") || strings.Contains(plain, "ETRS") || strings.Contains(plain, "4326") {
		return
	}
	h.remark("position-datum", "LOCA_LLZ", c.placeOf(i), "latitude and longitude are in "+profile.Quote(text)+", and were taken for WGS 84")
}

// geol reads the strata.
func (r *reader) geol(g *group) {
	src := newSource(g, profile.Soil, g.column("GEOL_DESC"))
	if src.value == 0 {
		return
	}
	top, base := r.length(g, g.column("GEOL_TOP")), r.length(g, g.column("GEOL_BASE"))
	src.depths, src.base = []measure{top}, base
	soil := ""
	for c := r.cursor(g); c.row(); {
		h := r.hole(c, src.loca)
		if h == nil {
			continue
		}
		s := stratum{bottom: math.Inf(1), source: src, row: c.here()}
		var ok bool
		if s.top, ok = r.optional(h, c, top, profile.Length); !ok {
			continue
		}
		if v, ok := r.optional(h, c, base, profile.Length); ok {
			s.bottom = v
		}
		if s.bottom <= s.top {
			h.remark("not-read", "GEOL", c.placeOf(base.i), "GEOL_BASE "+profile.Quote(c.get(base.i))+" is not below GEOL_TOP; the stratum was left out")
			continue
		}
		if text := c.get(src.value); string(text) != soil {
			soil = clean(text)
		}
		s.soil = soil
		h.strata = append(h.strata, s)
	}
}

// settle sorts the strata of a hole and lets each end where the next begins
// at the latest.
func (r *reader) settle(h *hole) {
	slices.SortStableFunc(h.strata, func(a, b stratum) int { return cmp.Compare(a.top, b.top) })
	for i := range h.strata[:max(0, len(h.strata)-1)] {
		s, next := &h.strata[i], &h.strata[i+1]
		if s.bottom <= next.top+profile.Joint {
			continue
		}
		if !math.IsInf(s.bottom, 1) {
			h.remark("strata-overlap", "GEOL", profile.Place{Line: int(s.row.line)}, "strata of GEOL overlap; the lower one was taken")
		}
		s.bottom = next.top
	}
}
