package review

import (
	"errors"
	"fmt"
	"strings"

	"shearbook/vs30"
)

// Where words the place of a finding: file and line, layer, page or section.
func (f *Finding) Where() string { return f.Place.String() }

// String words a place: "line-1.csv:7:5, L1, layer 3".
func (p Place) String() string {
	var parts []string
	if at := p.Place.String(); at != "" {
		parts = append(parts, at)
	}
	if p.Page > 0 {
		parts = append(parts, fmt.Sprintf("page %d", p.Page))
	}
	if p.Section != "" {
		parts = append(parts, p.Section)
	}
	if p.Profile != "" && p.Profile != p.File {
		parts = append(parts, p.Profile)
	}
	if p.Layer > 0 {
		parts = append(parts, fmt.Sprintf("layer %d", p.Layer))
	}
	if len(parts) == 0 {
		return "the submission"
	}
	return strings.Join(parts, ", ")
}

// Behind is the source of a finding, with a word where it is common practice.
func (f *Finding) Behind() string { return behind(f.Source, f.Practice) }

// Behind is the source of a rule, with a word where it is common practice.
func (r *Rule) Behind() string { return behind(r.Source, r.Practice) }

func behind(source string, practice bool) string {
	if practice && !strings.Contains(source, "common practice") {
		return source + " (common practice)"
	}
	return source
}

// Words is a cause with what it gives.
func (c Cause) Words() string {
	if c.Value == "" {
		return c.Text
	}
	return c.Text + " (" + c.Value + ")"
}

// CauseLabel says of cause i whether it is the likeliest, the only one that
// is known, or another that fits as well.
func (f *Finding) CauseLabel(i int) string {
	switch {
	case f.Causes[i].Loose:
		return "possibly: "
	case len(f.Causes) == 1:
		return "likely: "
	case i == 0:
		return "likeliest: "
	}
	return "or: "
}

// Name is the profile of a claim, or the place where it stands.
func (c *Case) Name() string {
	if c.Claim.Profile != "" {
		return c.Claim.Profile
	}
	return c.place().Place.String()
}

// Claimed is the claim in words.
func (c *Case) Claimed() string {
	if text := c.claimed(); text != "" {
		return text
	}
	return "nothing"
}

// Found is what recomputing gave, in words.
func (c *Case) Found() string {
	var short *vs30.ShortError
	switch {
	case errors.As(c.Err, &short):
		return "too short: it reaches " + metres(short.Reached) + " of " + metres(short.Needed)
	case c.Err != nil:
		return "nothing: " + c.Err.Error()
	}
	text := "class " + c.Decision.Class
	if v, from, thickness, ok := c.average(); ok {
		printed := speed(v)
		if c.Claim.Average.Known() {
			printed = c.Claim.Average.in(v)
		}
		text += ", " + printed + over(thickness, from)
	}
	return text + ", under " + c.Code.ID
}

// Agrees reports whether the class and the average that are claimed, and the
// depth that it is said to be taken over, are those that were found.
func (c *Case) Agrees(tolerance float64) bool {
	if c.Err != nil || !c.Claim.saysSomething() || c.overOtherDepth() {
		return false
	}
	v, _, _, ok := c.average()
	return (c.Claim.Class == "" || sameClass(c.Claim.Class, &c.Decision)) &&
		(!c.Claim.Average.Known() || ok && c.Claim.Average.Means(v, tolerance))
}

// String words a change: "average: tolerance 0 % → 1 %".
func (c Change) String() string { return c.Rule + ": " + c.What + " " + c.From + " → " + c.To }
