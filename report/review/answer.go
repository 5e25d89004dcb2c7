package review

import (
	"errors"
	"fmt"
	"strings"
	"unicode"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
	"shearbook/vs30/siteclass"
)

// answerRules are about what is claimed itself.
func answerRules() []Rule {
	return []Rule{
		{ID: "unchecked", Weight: Answer, Unchecked: true, Fixed: true, check: unchecked,
			Summary: "A claim cannot be recomputed from what was handed in, or nothing is claimed",
			Source:  "the code that is applied"},
		{ID: "average", Weight: Answer, Fixed: true, check: averageDiffers,
			Summary: "The claimed average is not the one that the layers give, within the rounding of its printed form",
			Source:  "time-averaged velocity, EN 1998-1:2004 Eq. (3.1); ASCE/SEI 7-16 Eq. 20.4-1",
			Limits:  []Limit{{"tolerance", 0, "%", "how far the claim may be off beyond its own rounding", 10}}},
		{ID: "class", Weight: Answer, Fixed: true, check: classDiffers,
			Summary: "The claimed class is not the one that the code gives",
			Source:  "the table of the code that is applied"},
		{ID: "code", Weight: Answer, check: otherCode,
			Summary: "The claim is made under another code than the one that is applied",
			Source:  "the code that the reviewer names"},
		{ID: "extension-unsaid", Weight: Answer, check: extensionUnsaid,
			Summary: "The profile ends above the averaging depth and nothing says how it was carried on",
			Source:  "Boore (2004), BSSA 94(2) 591–597: an average over a depth that was not reached is an estimate"},
		{ID: "averaging-depth", Weight: Answer, check: averagingDepth,
			Summary: "The average is said to be taken over another depth than the code's",
			Source:  "the code that is applied"},
		{ID: "datum", Weight: Explain, check: datumQuestion,
			Summary: "The average starts elsewhere than the code measures from, or the depth of the foundation is not stated where the code counts from it",
			Source:  "the code that is applied"},
		{ID: "own-datum", Weight: Answer, check: ownDatum,
			Summary: "The claim rests on a datum that the submission chose, and does not follow from that of the code; to be explained alone where the code leaves the datum open",
			Source:  "the code that is applied"},
		{ID: "not-claimed", Weight: Explain, check: notClaimed, Practice: true,
			Summary: "The submission holds a profile of which it claims nothing",
			Source:  "common practice: every measured profile of a site is weighed"},
		{ID: "own-table", Weight: Answer, check: ownTable,
			Summary: "The claim rests on a class table that the submission itself brings along",
			Source:  "the code that the reviewer names", Practice: true},
		{ID: "margin", Weight: Note, check: nearBound, Practice: true,
			Summary: "The average lies close to a bound at which the class changes",
			Source:  "common practice: the scatter of a good survey's average",
			Limits:  []Limit{{"margin", 5, "%", "of the average, to the bound", 0}}},
		{ID: "standing", Weight: Note, check: weakStanding,
			Summary: "The part of the code's table that was used was not checked against two sources",
			Source:  "the standing that the table carries"},
	}
}

// unchecked tells the claims that cannot be recomputed.
func unchecked(x *examination) {
	told := map[profile.Place]bool{}
	for _, f := range x.Faults {
		if !f.Evidence {
			told[f.Place] = true
			x.add(Place{Place: f.Place}, f.Text, "", "")
		}
	}
	if len(x.cases) == 0 && len(x.Faults) == 0 {
		x.add(Place{Place: profile.Place{File: x.Name}}, "the submission claims nothing that could be recomputed", "", "")
	}
	for i := range x.cases {
		c := &x.cases[i]
		if c.Claim.problem != "" || c.Err == errNoProfile && told[c.Claim.Place.Place] {
			continue
		}
		if reason := c.whyUnchecked(); reason != "" {
			x.add(c.place(), reason, c.claimed(), "")
		}
	}
}

// whyUnchecked says why a claim cannot be checked; "" where it can.
func (c *Case) whyUnchecked() string {
	var short *vs30.ShortError
	switch {
	case c.Claim.problem != "":
		return c.Claim.problem
	case c.Code == nil && c.Claim.Code == "":
		return "the claim names no code, and the reviewer names none"
	case c.Code == nil:
		text := fmt.Sprintf("the code %s is not known", profile.Quote(c.Claim.Code))
		var unknown *siteclass.UnknownError
		if _, err := siteclass.Find(c.Claim.Code); errors.As(err, &unknown) && unknown.Nearest != "" {
			text += "; the nearest is " + unknown.Nearest
		}
		return text
	case errors.As(c.Err, &short):
		return fmt.Sprintf("the profile reaches %s below ground level and %s needs %s", metres(short.Reached), c.Code.ID, metres(short.Needed))
	case c.Err != nil:
		return strings.TrimPrefix(c.Err.Error(), c.Code.ID+": ")
	case !c.Claim.saysSomething():
		return "neither a class nor an average is claimed"
	}
	if _, _, _, ok := c.average(); !ok && c.Claim.Average.Known() {
		return "an average velocity is claimed, and the code decides by " + c.Decision.Route + ", without one"
	}
	return ""
}

// claimed is the claim in words: "class D, 287 m/s, under asce-7-16".
func (c *Case) claimed() string {
	var parts []string
	if c.Claim.Class != "" {
		parts = append(parts, "class "+c.Claim.Class)
	}
	if c.Claim.Average.Known() {
		parts = append(parts, c.Claim.Average.String())
	}
	if c.Claim.Code != "" {
		parts = append(parts, "under "+c.Claim.Code)
	}
	return strings.Join(parts, ", ")
}

// averageDiffers compares the claimed average with the recomputed one.
func averageDiffers(x *examination) {
	tolerance := x.limit("tolerance") / 100
	x.eachCase(func(c *Case) {
		claim := c.Claim.Average
		v, from, thickness, ok := c.average()
		if !claim.Known() || !ok || claim.Means(v, tolerance) {
			return
		}
		found := claim.in(v) + over(thickness, from)
		causes := x.causes(func() []Cause { return averageCauses(c, claim) })
		text := "the layers do not average to the claimed velocity"
		if len(causes) == 0 {
			text += ", and none of the usual mistakes gives it"
		}
		x.add(c.place(), text, claim.String(), found, causes...)
	})
}

// classDiffers compares the claimed class with the recomputed one.
func classDiffers(x *examination) {
	x.eachCase(func(c *Case) {
		if c.Err != nil || c.Claim.Class == "" || sameClass(c.Claim.Class, &c.Decision) {
			return
		}
		d := &c.Decision
		found := "class " + d.Class
		if d.Velocity > 0 {
			found += fmt.Sprintf(" by %s %s", short(d.Velocity/c.Code.Unit.Factor, 1), c.Code.Unit.Name)
		}
		x.addUnder(c.Code.Edition+", "+c.Code.Table, c.place(),
			"the code gives another class than the claimed one", "class "+c.Claim.Class, found, x.causes(func() []Cause { return classCauses(c) })...)
	})
}

// sameClass reports whether a claimed class is the decided one: its letter as
// printed, case and outer spaces aside, with or without words that say what
// it is: "Site class D", "D (stiff soil)", "D - stiff soil".
func sameClass(claimed string, d *siteclass.Decision) bool {
	decided := plainClass(d.Class)
	claimed = plainClass(claimed)
	return claimed == decided || plainClass(undescribed(claimed)) == decided
}

// undescribed is a class without the description behind it.
func undescribed(class string) string {
	for _, mark := range []string{" (", " - ", " – ", " — ", ": ", ", "} {
		class, _, _ = strings.Cut(class, mark)
	}
	return class
}

// plainClass is a class in capitals without the words before it.
func plainClass(s string) string {
	s = strings.ToUpper(strings.Join(strings.Fields(s), " "))
	for _, prefix := range []string{"SITE ", "SOIL ", "SUBSOIL ", "GROUND ", "CLASS ", "TYPE ", "PROFILE "} {
		s = strings.TrimPrefix(s, prefix)
	}
	return s
}

// CodeID returns the ID of the built-in code that a text means: itself, or
// the one that it is but for case, spaces, hyphens and the name of a second
// publisher: "ASCE 7-16", "ASCE/SEI 7-16". A text that means none is returned
// as it is.
func CodeID(text string) string {
	if _, err := siteclass.Find(text); err == nil || len(text) > longestKey {
		return text
	}
	squeezed := squeeze(text)
	for _, c := range siteclass.All() {
		if squeezed == squeeze(c.ID) {
			return c.ID
		}
	}
	return text
}

// squeeze keeps the letters and digits of an ID.
func squeeze(id string) string {
	id = strings.Replace(strings.ToLower(id), "/sei", "", 1)
	return strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) {
			return r
		}
		return -1
	}, id)
}

// otherCode tells claims under another code than the reviewer's.
func otherCode(x *examination) {
	for i := range x.cases {
		c := &x.cases[i]
		if x.desk.Code == nil || c.Code == nil || c.Claim.Code == "" || c.Claim.Code == c.Code.ID {
			continue
		}
		if c.Under != nil && (c.Under.Adopts == c.Code.ID || c.Code.Adopts == c.Under.ID) {
			continue
		}
		found := c.Code.ID + " (" + c.Code.Edition + ")"
		x.add(c.place(), "the claim is made under another code than the one that is applied", c.Claim.Code, found)
	}
}

// extensionUnsaid tells averages over a depth that was not reached.
func extensionUnsaid(x *examination) {
	x.eachCase(func(c *Case) {
		var short *vs30.ShortError
		if !errors.As(c.Err, &short) || c.Claim.Stated.Extend != "" || !c.Claim.saysSomething() {
			return
		}
		found := fmt.Sprintf("layers down to %s, of %s that the code needs", metres(short.Reached), metres(short.Needed))
		causes := x.causes(func() []Cause { return extensionCauses(c) })
		text := "the profile ends above the averaging depth, and nothing says how it was carried on"
		x.add(c.place(), text, c.claimed(), found, causes...)
	})
}

// averagingDepth tells averages that are said to be over another depth.
func averagingDepth(x *examination) {
	x.eachCase(func(c *Case) {
		if !c.overOtherDepth() {
			return
		}
		x.addUnder(c.Code.Edition+", "+c.Code.Clause, c.place(),
			"the average is said to be taken over another depth than the code's", c.Claim.Depth.Text,
			fmt.Sprintf("%s (%s)", c.Code.DepthText, metres(c.Decision.Thickness)))
	})
}

// overOtherDepth reports whether the average is said to be taken over another
// depth than that of the code, the claim's own.
func (c *Case) overOtherDepth() bool {
	const loosest = 0.05 // m: 30.5 m may stand for 100 ft, and 30 m may not
	claim := c.Claim.Depth
	claim.Half = min(claim.Half, loosest)
	return c.Err == nil && claim.Known() && c.Decision.Thickness > 0 && (c.Under == nil || c.Under == c.Code) && !claim.Means(c.Decision.Thickness, 0)
}

// datumQuestion passes on what a decision notes of its datum.
func datumQuestion(x *examination) {
	x.eachDecision(func(c *Case) {
		for _, n := range c.Decision.Notes {
			if n.ID == "datum-other" || n.ID == "datum-assumed" && c.Code.Datum == siteclass.DatumFoundation {
				x.addUnder(c.Code.Edition+", "+c.Code.Clause, c.place(), n.Text, "", "datum "+metres(c.Decision.Datum)+" below ground level")
			}
		}
	})
}

// ownDatum tells claims that do not follow from the code's own datum.
func ownDatum(x *examination) {
	tolerance := x.desk.tolerance()
	x.eachCase(func(c *Case) {
		facts := c.Claim.Stated.facts()
		if c.Err != nil || !facts.Datum.Known || !c.Claim.saysSomething() {
			return
		}
		facts.Datum = profile.Optional{}
		own := Case{Claim: c.Claim, Code: c.Code, Entry: c.Entry}
		own.Claim.Depth = Number{}
		if own.Decision, own.Err = report.Classify(c.Entry.Profile, c.Code, facts); own.Err == nil && (same(own.Decision.Datum, c.Decision.Datum) || own.Agrees(tolerance)) {
			return
		}
		weight, says := Answer, "the code measures from the "+c.Code.Datum.String()
		if c.Code.Datum == siteclass.DatumUnstated || c.Code.Datum == siteclass.DatumFoundation && !facts.Foundation.Known {
			weight, says = Explain, "the code leaves that open"
			if c.Code.Datum == siteclass.DatumFoundation {
				says = "the code measures from the underside of the foundation, whose depth is not stated"
			}
		}
		text := fmt.Sprintf("the claim rests on a datum of %s below ground level that the submission states, and does not follow from %s; %s", metres(c.Decision.Datum), metres(own.Decision.Datum), says)
		x.addUnderAs(weight, c.Code.Edition+", "+c.Code.Clause, c.place(), text, c.claimed(), own.Found())
	})
}

// notClaimed tells profiles of which nothing is claimed.
func notClaimed(x *examination) {
	if x.Kind != SiteFolder && x.Kind != ReportFile || len(x.cases) == 0 {
		return
	}
	claimed := map[*Entry]bool{}
	var code *siteclass.Code
	for i := range x.cases {
		claimed[x.cases[i].Entry] = true
		if code == nil {
			code = x.cases[i].Code
		}
	}
	x.each(func(e *Entry) {
		if claimed[e] {
			return
		}
		c := Case{Claim: Claim{Stated: x.Stated}, Entry: e, Code: code}
		found := ""
		if code != nil {
			c.Decision, c.Err = report.Classify(e.Profile, code, x.Stated.facts())
			found = c.Found()
		}
		x.add(e.at(), "nothing is claimed of profile "+profile.Quote(e.Profile.Name)+", which the submission holds", "", found)
	})
}

// ownTable tells decisions under a table that the submission brought.
func ownTable(x *examination) {
	x.eachCase(func(c *Case) {
		if x.desk.Code == nil && c.Code != nil && c.Code.Own != nil {
			x.add(c.place(), "the class table is the submission's own; name the code that holds with --code or --code-file", c.Code.Own.File, "")
		}
	})
}

// nearBound tells averages close to a bound.
func nearBound(x *examination) {
	x.eachDecision(func(c *Case) {
		m := c.Decision.Margin
		if m == nil || !(abs(m.Percent) < x.limit("margin")) {
			return
		}
		lies := "lies " + short(abs(m.Percent), 1) + " % from"
		switch {
		case abs(m.Percent) < 1e-7:
			lies = "lies on"
		case abs(m.Percent) < 0.05:
			lies = "lies less than 0.1 % from"
		}
		x.addUnder(c.Code.Edition+", "+c.Code.Table, c.place(),
			fmt.Sprintf("the average %s the bound of %s %s, where class %s begins", lies, short(m.Bound, 1), m.Unit, m.ToClass),
			"", "class "+c.Decision.Class)
	})
}

func weakStanding(x *examination) {
	seen := map[string]bool{}
	x.eachCase(func(c *Case) {
		if c.Err != nil || c.Decision.Standing <= siteclass.Checked || seen[c.Code.ID+c.Decision.Standing.String()] {
			return
		}
		seen[c.Code.ID+c.Decision.Standing.String()] = true
		x.addUnder(c.Code.Edition+", "+c.Code.Table, c.place(),
			"the standing of the part of the table that was used is: "+c.Decision.Standing.String()+"; compare it with the print", "", "class "+c.Decision.Class)
	})
}

func abs(v float64) float64 { return max(v, -v) }

// over words what an average is taken over.
func over(thickness, from float64) string {
	if from == 0 {
		return " over " + metres(thickness) + " from ground level"
	}
	return " over " + metres(thickness) + " from " + metres(from) + " depth"
}
