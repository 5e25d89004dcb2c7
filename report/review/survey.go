package review

import (
	"fmt"
	"slices"
	"strings"

	"shearbook/profile"
)

// surveyRules are about what is said of the survey.
func surveyRules() []Rule {
	return []Rule{
		{ID: "metadata", Weight: Explain, check: metadataMissing, Practice: true,
			Summary: "Nothing says how, when, by whom, how deep or on what basis the profile was measured",
			Source:  "Foti et al. (2018), Bull Earthq Eng 16:2367–2420, on what a report of a survey holds; what is asked for here is common practice"},
		{ID: "stated-otherwise", Weight: Explain, check: statedOtherwise,
			Summary: "The notebook states something else of the survey than the profile's own file",
			Source:  "the profile's own file", Practice: true},
		{ID: "mapped-column", Weight: Answer, check: mappedColumn, Practice: true,
			Summary: "The notebook's map takes another column for the shear-wave velocity than the one that the file calls so",
			Source:  "the profile's own file"},
		{ID: "doubt", Weight: Explain, check: doubts, Practice: true,
			Summary: "The profile is doubtful in itself: a single layer, velocities in what looks like another unit, layers below the depth reached",
			Source:  "common practice"},
	}
}

// metadataMissing lists what is not said of a survey.
func metadataMissing(x *examination) {
	x.each(func(e *Entry) {
		s := &e.Profile.Survey
		var missing []string
		for _, m := range []struct {
			name string
			gone bool
		}{
			{"method", s.Method == ""}, {"date", s.Date == ""}, {"operator", s.Operator == ""},
			{"depth reached", s.DepthReached == 0},
			{"basis of the velocities", s.Basis == profile.BasisNotStated && e.Profile.Layers[0].Basis == profile.BasisNotStated},
		} {
			if m.gone {
				missing = append(missing, m.name)
			}
		}
		if len(missing) > 0 {
			x.add(e.at(), "the survey does not state: "+strings.Join(missing, ", "), "", "")
		}
	})
}

// statedOtherwise tells what a notebook puts over the words of a file.
func statedOtherwise(x *examination) {
	x.each(func(e *Entry) {
		if e.AsRead == nil {
			return
		}
		file, over := &e.AsRead.Survey, &e.Profile.Survey
		tell := func(what, was, is string) {
			if was != "" && was != is {
				x.add(e.at(), fmt.Sprintf("the notebook states another %s than the file", what), is, was)
			}
		}
		tell("method", file.Method, over.Method)
		tell("date", file.Date, over.Date)
		tell("operator", file.Operator, over.Operator)
		tell("location", file.Location, over.Location)
		if file.DepthReached > 0 {
			tell("depth reached", metres(file.DepthReached), metres(over.DepthReached))
		}
		if file.Basis != profile.BasisNotStated {
			tell("basis", file.Basis.String(), over.Basis.String())
		}
	})
}

// mappedColumn tells velocities that a map takes from elsewhere.
func mappedColumn(x *examination) {
	x.each(func(e *Entry) {
		if e.Unmapped == nil || e.Profile.NoVelocity {
			return
		}
		own := e.Unmapped
		if own.NoVelocity || slices.EqualFunc(own.Layers, e.Profile.Layers, func(a, b profile.Layer) bool { return same(a.Vs, b.Vs) && same(a.VsBottom, b.VsBottom) }) {
			return
		}
		at, taken, given := 0, e.Profile.Layers, own.Layers
		for at < min(len(taken), len(given))-1 && same(taken[at].Vs, given[at].Vs) {
			at++
		}
		x.add(e.at(), fmt.Sprintf("the notebook's map takes another column for the shear-wave velocity than the file's own: layer %d has %s in place of %s", at+1, speed(taken[at].Vs), speed(given[at].Vs)),
			speed(taken[at].Vs), speed(given[at].Vs))
	})
}

// said are the doubts that rules of their own tell.
var said = map[string]bool{"refraction-reversal": true, "below-depth-reached": true, "low-vp-vs": true}

// doubts passes on what the profile's reader doubts.
func doubts(x *examination) {
	x.each(func(e *Entry) {
		for _, n := range e.Profile.Notes {
			if !said[n.ID] {
				at := e.at()
				if n.Place.File != "" {
					at.Place = n.Place
				}
				x.add(at, n.Text, "", "")
			}
		}
	})
}
