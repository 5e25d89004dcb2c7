package review

import (
	"encoding/json"
	"fmt"
	"slices"
	"strings"

	"shearbook/profile"
	"shearbook/report"
)

// wholeResult compares the fields of an entry of results.json that are no
// claims of their own with those of the result that the data give.
func (x *examination) wholeResult(c *Case, want report.Result) {
	raw := c.Claim.result.raw
	if raw == nil {
		return
	}
	var lacks []string
	differ := func(name, said, is string) {
		if said != is {
			x.add(c.place(), "results.json says another "+name+" than the data give", said, is)
		}
	}
	words := func(name, said, is string) {
		if said == "" && is != "" {
			lacks = append(lacks, name)
			return
		}
		differ(name, said, is)
	}
	missing := func(name string, gone bool) {
		if gone {
			lacks = append(lacks, name)
		}
	}
	words("edition", raw.Edition, want.Edition)
	words("route", raw.Route, want.Route)
	words("standing", raw.Standing, want.Standing)
	missing("class", raw.Class == "" && want.Class != "")
	missing("basis", raw.Basis == "" && want.Basis != "")
	missing("velocity_mps", raw.Average == "" && want.VelocitySI != nil)
	missing("vs30_mps", raw.Vs30 == "" && want.Vs30 != nil)
	missing("depth_m", raw.Depth == "")
	missing("datum_m", raw.Datum == "")
	missing("depth_reached_m", raw.Reached == "")
	switch {
	case raw.Velocity == nil:
		missing("velocity", want.Velocity != nil)
	case want.Velocity == nil:
		differ("velocity", string(raw.Velocity.Value)+" "+raw.Velocity.Unit, "none")
	case raw.Velocity.Unit != want.Velocity.Unit || !near9(raw.Velocity.Value, want.Velocity.Value):
		differ("velocity", string(raw.Velocity.Value)+" "+raw.Velocity.Unit, short(want.Velocity.Value, 9)+" "+want.Velocity.Unit)
	}
	switch {
	case raw.Margin == nil:
		missing("margin", want.Margin != nil)
	case want.Margin != nil && (raw.Margin.ToClass != want.Margin.ToClass || raw.Margin.Unit != want.Margin.Unit || !near9(raw.Margin.Bound, want.Margin.Bound)):
		differ("margin", fmt.Sprintf("class %s at %s %s", raw.Margin.ToClass, raw.Margin.Bound, raw.Margin.Unit),
			fmt.Sprintf("class %s at %s %s", want.Margin.ToClass, short(want.Margin.Bound, 9), want.Margin.Unit))
	}
	if raw.Steps == nil {
		missing("steps", len(want.Steps) > 0)
	} else {
		var said, is []string
		for _, s := range *raw.Steps {
			said = append(said, fmt.Sprintf("%s: %v", s.Text, s.Holds))
		}
		for _, s := range want.Steps {
			is = append(is, fmt.Sprintf("%s: %v", s.Text, s.Holds))
		}
		a, b := firstOther(said, is)
		differ("sequence of steps", a, b)
	}
	var said, is []string
	for _, n := range raw.Notes {
		said = append(said, n.ID)
	}
	for _, n := range want.Notes {
		is = append(is, n.ID)
	}
	slices.Sort(said)
	slices.Sort(is)
	differ("list of notes", strings.Join(said, ", "), strings.Join(is, ", "))
	if !slices.EqualFunc(raw.Averages, want.Averages, func(a, b report.Average) bool {
		return a.Symbol == b.Symbol && a.Unit == b.Unit && a.Class == b.Class && same(a.Value, b.Value)
	}) {
		differ("averages", averagesText(raw.Averages), averagesText(want.Averages))
	}
	if len(lacks) > 0 {
		x.add(c.place(), "results.json lacks what the data give: "+strings.Join(lacks, ", "), "", "")
	}
}

// firstOther is the first of two lists that differs, or "" twice.
func firstOther(said, is []string) (string, string) {
	for i := range max(len(said), len(is)) {
		a, b := "nothing", "nothing"
		if i < len(said) {
			a = said[i]
		}
		if i < len(is) {
			b = is[i]
		}
		if a != b {
			return a, b
		}
	}
	return "", ""
}

func averagesText(of []report.Average) string {
	var parts []string
	for _, a := range of {
		parts = append(parts, fmt.Sprintf("%s %s %s class %s", a.Symbol, short(a.Value, 6), a.Unit, a.Class))
	}
	return or(strings.Join(parts, "; "), "none")
}

// near9 reports whether a printed number stands for a value.
func near9(text json.Number, v float64) bool {
	n, err := printed(string(text), profile.Unit{Name: "1", Factor: 1})
	return err == nil && n.Means(v, noise)
}
