package ags

import (
	"slices"
	"strings"

	"shearbook/profile"
)

// header is what the file states of itself.
type header struct {
	metadata []profile.Metadatum // of PROJ and TRAN
	location string
	operator string
	edition  string
	notes    []profile.Note
	codes    map[string]string    // descriptions in ABBR, by heading, a blank and code
	words    map[string]described // in DICT, by heading, or by group
	files    []string             // that FILE names
}

// described is what DICT says of a heading or a group.
type described struct {
	text, unit string
}

// projectHeadings are those of PROJ and TRAN that are kept for the report.
var projectHeadings = []string{
	"PROJ_ID", "PROJ_NAME", "PROJ_LOC", "PROJ_CLNT", "PROJ_CONT", "PROJ_ENG",
	"TRAN_ISNO", "TRAN_DATE", "TRAN_PROD", "TRAN_STAT", "TRAN_DESC", "TRAN_AGS", "TRAN_RECV",
}

// codeHeadings are those whose codes are looked up in ABBR.
var codeHeadings = []string{"WGPG_TOOL", "WGPT_PARA", "ISTG_TYPE", "LOCA_GREF"}

// mostWords bounds what is kept of ABBR, and of DICT. A whole dictionary is a
// fifth of it.
const mostWords = 20_000

// readHeader reads PROJ, TRAN, ABBR, DICT and FILE.
func (r *reader) readHeader() bool {
	h := &r.header
	h.codes, h.words = map[string]string{}, map[string]described{}
	for _, name := range []string{"PROJ", "TRAN"} {
		for _, g := range r.named(name) {
			r.project(g)
		}
	}
	for _, g := range r.named("ABBR") {
		heading, code, text := g.column("ABBR_HDNG"), g.column("ABBR_CODE"), g.column("ABBR_DESC")
		for c := r.cursor(g); c.row() && len(h.codes) < mostWords; {
			if slices.Contains(codeHeadings, string(c.get(heading))) {
				h.codes[c.text(heading)+" "+c.text(code)] = c.text(text)
			}
		}
	}
	for _, g := range r.named("DICT") {
		r.dictionary(g)
	}
	for _, g := range r.named("FILE") {
		name := g.column("FILE_NAME")
		for c := r.cursor(g); c.row() && len(h.files) < 1000; {
			h.files = append(h.files, c.text(name))
		}
	}
	r.edition()
	return true
}

// project reads PROJ or TRAN.
func (r *reader) project(g *group) {
	h := &r.header
	if len(h.metadata) >= 2*len(projectHeadings) {
		return // the group comes again and again
	}
	c := r.cursor(g)
	if !c.row() { // there is to be one
		return
	}
	h.metadata = append(h.metadata, metadataOf(c, projectHeadings)...)
	for _, to := range []struct {
		heading string
		text    *string
	}{{"PROJ_LOC", &h.location}, {"PROJ_CONT", &h.operator}, {"TRAN_AGS", &h.edition}} {
		if text := c.text(g.column(to.heading)); text != "" && *to.text == "" {
			*to.text = text
		}
	}
}

// metadataOf are the fields of a row that are not blank, of some headings,
// with their units.
func metadataOf(c *cursor, headings []string) []profile.Metadatum {
	var list []profile.Metadatum
	for _, h := range headings {
		i := c.g.column(h)
		if text := c.text(i); text != "" {
			if unit := c.g.unit(i); unit != "" && !strings.Contains(unit, "yy") {
				text += " " + unit
			}
			list = append(list, profile.Metadatum{Key: h, Value: text, Line: c.first})
		}
	}
	return list
}

// dictionary reads what DICT says of groups and headings of the user's own.
func (r *reader) dictionary(g *group) {
	name, heading, text, unit := g.column("DICT_GRP"), g.column("DICT_HDNG"), g.column("DICT_DESC"), g.column("DICT_UNIT")
	for c := r.cursor(g); c.row() && len(r.header.words) < mostWords; {
		key := c.text(heading)
		if key == "" {
			key = c.text(name)
		}
		r.header.words[strings.ToUpper(key)] = described{c.text(text), c.text(unit)}
	}
}

// edition notes an edition that is not stated, or not known.
func (r *reader) edition() {
	h := &r.header
	if slices.Contains(editions, h.edition) {
		return
	}
	at, text := profile.Place{File: r.File}, "the file states no edition of AGS4"
	for _, g := range r.named("TRAN") {
		at.Line = g.at.Line
	}
	if h.edition != "" {
		text = "TRAN_AGS " + profile.Quote(h.edition) + " is no edition of AGS4 that is known"
	}
	h.notes = append(h.notes, profile.Note{ID: "edition-assumed", Text: text + "; read as " + editionAssumed, Place: at})
}

// code is the description of a code, or the code itself.
func (h *header) code(heading, code string) string {
	if text := h.codes[heading+" "+code]; text != "" {
		return text
	}
	return code
}
