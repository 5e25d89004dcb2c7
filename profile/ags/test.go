package ags

import (
	"fmt"
	"slices"
	"strings"

	"shearbook/profile"
)

// result is the result of one test.
type result struct {
	depth   float64 // m
	value   float64 // in SI
	source  *source
	row     rowAt
	column  int32   // of the value, in characters
	refused bool    // penetration was
	energy  float64 // %, of the hammer; 0 if not stated
}

// test is a heading that holds results.
type test struct {
	group, heading string
	q              profile.Quantity
}

// tests are the headings that are read, in the order in which reports name
// them. Of blow counts a hole has one kind.
var tests = []test{
	{"ISPT", "ISPT_NVAL", profile.N},
	{"ISPT", "ISPT_N60", profile.N},
	{"TRIT", "TRIT_CU", profile.Su},
	{"TRET", "TRET_CU", profile.Su},
	{"IVAN", "IVAN_IVAN", profile.Su},
	{"LLPL", "LLPL_PI", profile.PI},
	{"LNMC", "LNMC_MC", profile.WaterContent},
	{"LDEN", "LDEN_BDEN", profile.Density},
}

// readTests reads the results of tests.
func (r *reader) readTests() bool {
	for _, t := range tests {
		for _, g := range r.named(t.group) {
			r.test(g, t.heading, t.q)
		}
	}
	for _, m := range r.maps {
		switch m.q {
		case profile.N, profile.Su, profile.PI, profile.WaterContent, profile.Density:
			for _, g := range r.ofHoles() {
				if g.column(m.name) > 0 && !slices.Contains(tests, test{g.name, m.name, m.q}) {
					r.test(g, m.name, m.q)
				}
			}
		}
	}
	for _, h := range r.holes {
		h.oneBlowCount(r.opt.N60)
	}
	return true
}

// oneBlowCount keeps of two kinds of blow counts the one that is asked for.
func (h *hole) oneBlowCount(n60 bool) {
	corrected := func(s *source) bool { return s.q == profile.N && s.name == "ISPT_N60" }
	measured := func(s *source) bool { return s.q == profile.N && s.name != "ISPT_N60" }
	has := func(kind func(*source) bool) bool {
		return slices.ContainsFunc(h.results, func(x result) bool { return kind(x.source) })
	}
	if !has(corrected) || !has(measured) {
		return
	}
	drop, text := corrected, "N is ISPT_NVAL, as measured; ISPT_N60 was not used"
	if n60 {
		drop, text = measured, "N is ISPT_N60, corrected to 60 % of the energy; ISPT_NVAL was not used"
	}
	h.results = slices.DeleteFunc(h.results, func(x result) bool { return drop(x.source) })
	h.remarks = append(h.remarks, remark{id: "blow-count", text: text, n: 1, at: h.at})
}

// test reads one heading with results.
func (r *reader) test(g *group, heading string, q profile.Quantity) {
	s := newSource(g, q, g.column(heading))
	s.name = heading
	switch heading {
	case "LLPL_PI":
		s.instead = []int{g.column("LLPL_LL"), g.column("LLPL_PL")}
	case "ISPT_NVAL":
		s.instead = []int{g.column("ISPT_MAIN"), g.column("ISPT_REP")}
	}
	if s.value == 0 && !slices.ContainsFunc(s.instead, func(i int) bool { return i > 0 }) {
		return
	}
	if d := q.Dimension(); d != profile.Blows && s.value > 0 {
		m := r.soft(g, s.value, d)
		if m.i == 0 {
			return
		}
		s.factor, s.unit = m.factor, m.unit
	}
	r.depthColumns(s)
	p := r.penetration(g)
	for c := r.cursor(g); c.row(); {
		if !s.blank(c) {
			r.result(c, s, p)
		}
	}
}

// blank reports whether the present row has no result.
func (s *source) blank(c *cursor) bool {
	for _, i := range s.instead {
		if len(c.get(i)) > 0 {
			return false
		}
	}
	return len(c.get(s.value)) == 0
}

// result reads the result in the present row. One that cannot be read is left
// out and remarked.
func (r *reader) result(c *cursor, s *source, p *penetration) {
	h := r.hole(c, s.loca)
	if h == nil {
		return
	}
	x := result{source: s, row: c.here()}
	v, is, problem := s.resultIn(c)
	z, column, trouble := s.depth(c)
	switch {
	case problem != "":
	case column == 0:
		problem = "has no depth"
	case trouble != "":
		problem = "has a depth, " + profile.Quote(c.get(column)) + ", that " + trouble
	case z < 0 || z > profile.MaxDepth:
		problem = "has a depth, " + profile.Quote(c.get(column)) + ", that cannot be one"
	case v < 0:
		problem = "is negative"
	case v == 0 && !s.q.MayBeZero():
		problem = "is zero"
	}
	at := c.placeOf(max(s.value, 1))
	if problem != "" {
		h.remark("not-read", s.name, at, s.name+" "+profile.Quote(s.cell(c))+" "+problem+" and was left out")
		return
	}
	if is != exact {
		text := s.name + " " + profile.Quote(s.cell(c)) + " is " + string(is) + " and was read as its number"
		if s.q == profile.N && len(c.get(s.value)) == 0 {
			text += fmt.Sprintf(", %.4g", v)
		}
		h.remark("test-bound", s.name, at, text)
	}
	x.depth, x.value, x.column = z, v*s.factor, int32(at.Column)
	if s.g.name == "ISPT" {
		x.refused = p.judge(h, c, s, v)
		if s.name == "ISPT_NVAL" {
			x.energy, _ = r.optional(h, c, p.energy, profile.Percent)
		}
	}
	h.results = append(h.results, x)
}

// resultIn is the result in the present row, in the unit of its column. A
// plasticity index that is blank is the difference of the limits; NP, which
// is non-plastic, is 0. A blow count that is blank is that of the main drive, or
// of one that was not finished, as ISPT_REP tells.
func (s *source) resultIn(c *cursor) (v float64, is bound, problem string) {
	text := c.get(s.value)
	if s.q == profile.PI && nonPlastic(text) {
		return 0, exact, ""
	}
	if len(text) > 0 || len(s.instead) == 0 {
		return parseResult(text)
	}
	if s.q == profile.N {
		if main := c.get(s.instead[0]); len(main) > 0 {
			return parseResult(main)
		}
		return reportedBlows(c.get(s.instead[1]))
	}
	if nonPlastic(c.get(s.instead[0])) || nonPlastic(c.get(s.instead[1])) {
		return 0, exact, ""
	}
	liquid, problem := parseNumber(c.get(s.instead[0]))
	plastic, also := parseNumber(c.get(s.instead[1]))
	if problem != "" || also != "" {
		return 0, exact, "gives no plasticity index"
	}
	return liquid - plastic, exact, ""
}

func nonPlastic(text []byte) bool {
	return strings.EqualFold(strings.ReplaceAll(strings.ReplaceAll(string(text), "-", ""), " ", ""), "NP") ||
		strings.EqualFold(string(text), "non-plastic")
}

// cell is the result in the present row as the file gives it.
func (s *source) cell(c *cursor) string {
	if text := c.text(s.value); text != "" {
		return text
	}
	var parts []string
	for _, i := range s.instead {
		if text := c.text(i); text != "" {
			parts = append(parts, c.g.headings[i][len("GGGG_"):]+" "+text)
		}
	}
	return strings.Join(parts, ", ")
}
