package ags

import (
	"fmt"
	"regexp"
	"strconv"

	"shearbook/profile"
)

// penetration is where ISPT says how far a test was driven.
type penetration struct {
	report int       // ISPT_REP, such as "25/50 for 140mm"
	drives []measure // ISPT_PEN3 to ISPT_PEN6: the increments of the main drive
	kind   int       // ISPT_TYPE
	energy measure   // ISPT_ERAT, of counts as measured
}

// The main drive of a standard penetration test is 0.3 m, in increments of
// 0.15 m by ASTM D1586 and of 0.075 m by BS EN ISO 22476-3. Refusal is that of
// the former: 50 blows in one increment. All from memory.
const (
	mainDrive     = 0.3  // m
	increment     = 0.15 // m
	refusalBlows  = 50
	driveRounding = 1e-6 // m
)

func (r *reader) penetration(g *group) *penetration {
	p := &penetration{report: g.column("ISPT_REP"), kind: g.column("ISPT_TYPE"), energy: r.soft(g, g.column("ISPT_ERAT"), profile.Percent)}
	for i := 3; i <= 6; i++ {
		if m := r.soft(g, g.column(fmt.Sprintf("ISPT_PEN%d", i)), profile.Length); m.i > 0 {
			p.drives = append(p.drives, m)
		}
	}
	return p
}

// judge reports whether the test in the present row, of v blows, was refused,
// and remarks what else is to be said of it.
func (p *penetration) judge(h *hole, c *cursor, s *source, v float64) (refused bool) {
	if kind := c.get(p.kind); len(kind) == 1 && (kind[0] == 'C' || kind[0] == 'c') {
		h.remark("cone", s.name, c.placeOf(p.kind), "N is of a solid cone (ISPT_TYPE C) in place of the sampler")
	}
	driven, known := p.driven(c)
	if !known || driven >= mainDrive-driveRounding {
		return false
	}
	if v >= refusalBlows && driven <= increment+driveRounding {
		return true
	}
	h.remark("test-incomplete", s.name, c.placeOf(max(s.value, 1)),
		fmt.Sprintf("%s %s is of a test driven %.0f mm in place of 300 mm, and was taken as it stands", s.name, profile.Quote(s.cell(c)), driven*1000))
	return false
}

// reported finds the penetration in ISPT_REP. The last one is that of the
// main drive.
var reported = regexp.MustCompile(`(?i)(?:\bfor|/)\s*([0-9]+(?:\.[0-9]+)?)\s*mm\b`)

// unfinished finds the blows of a drive that ISPT_REP says was not finished, as
// in "50 for 140mm". The last ones are those of the main drive.
var unfinished = regexp.MustCompile(`(?i)\b([0-9]{1,4})\s*(?:blows?\s*)?(?:for|/)\s*[0-9]+(?:\.[0-9]+)?\s*mm\b`)

// reportedBlows is the blow count in ISPT_REP where there is no other: a lower
// bound, for the drive was not finished.
func reportedBlows(text []byte) (v float64, is bound, problem string) {
	all := unfinished.FindAllSubmatch(text[:min(len(text), longestReport)], -1)
	if len(all) == 0 {
		return 0, exact, "gives no blow count"
	}
	v, problem = parseNumber(all[len(all)-1][1])
	return v, atLeast, problem
}

// longestReport bounds what is looked at of ISPT_REP.
const longestReport = 200

// driven is how far in m the main drive went, and false if the row does not
// say.
func (p *penetration) driven(c *cursor) (float64, bool) {
	sum, known := 0.0, false
	for _, m := range p.drives {
		if v, problem := parseNumber(c.get(m.i)); problem == "" && v >= 0 {
			sum, known = sum+v*m.factor, true
		}
	}
	if known {
		return sum, true
	}
	text := c.get(p.report)
	all := reported.FindAllSubmatch(text[:min(len(text), longestReport)], -1)
	if len(all) == 0 {
		return 0, false
	}
	mm, err := strconv.ParseFloat(string(all[len(all)-1][1]), 64)
	return mm / 1000, err == nil
}
