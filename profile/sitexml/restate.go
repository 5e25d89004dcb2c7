package sitexml

import (
	"slices"
	"strconv"
	"strings"

	"shearbook/profile"
)

// restated is an element that Write takes from what the file of a profile
// stated, if it is of the form.
type restated struct {
	name string
	form form
}

// form is what an element may hold.
type form func(text string) bool

// The elements that are written again, in the order of the schema. The
// references to literature are not among them.
var (
	morphology = []restated{
		{"siteClassEC8", oneOf("A", "B", "C", "D", "E", "S1", "S2", "Undefined")},
		{"siteClassEC8Qindex1", index},
		{"bedrockDepth", quantity},
		{"bedrockDepthQindex1", index},
		{"h800", quantity},
		{"h800Qindex1", index},
	}
	beforeMethod = []restated{
		{"resonanceFrequency", quantity},
		{"resonanceFrequencyQindex1", index},
		{"resonanceFrequencyMethod", oneOf("HVSR EARTHQUAKE RECORDS", "HVSR NOISE", "SSR EARTHQUAKE RECORDS", "SSR NOISE", "INFERRED")},
		{"velocityS30", quantity},
		{"velocityS30Qindex1", index},
	}
	afterMethod = []restated{
		{"velocityS30MethodCombIndex", oneOf("1.0", "1.2")},
		{"velocityS30ManualIndex", oneOf("0.2", "0.4", "0.8", "1.0")},
	}
	afterProfile = []restated{{"velocityProfileQindex1", index}}
)

func oneOf(words ...string) form {
	return func(text string) bool { return slices.Contains(words, text) }
}

// quantity is a number with or without an uncertainty, in the form of
// Reading.Metadata: "340 ± 17".
func quantity(text string) bool {
	_, _, ok := parseQuantity(text)
	return ok
}

// index is a quality index, 0 to 1.
func index(text string) bool {
	v, u, ok := parseQuantity(text)
	return ok && v >= 0 && v <= 1 && u == 0
}

func parseQuantity(text string) (value, uncertainty float64, ok bool) {
	left, right, both := strings.Cut(text, " ± ")
	value, err := strconv.ParseFloat(left, 64)
	if err == nil && both {
		uncertainty, err = strconv.ParseFloat(right, 64)
	}
	return value, uncertainty, err == nil && uncertainty >= 0 && strings.Trim(left+right, "+-.0123456789eE") == ""
}

// repeated writes what was stated of a profile under a path again. The
// elements before and after it are only written if there is something.
func (w *printer) repeated(p *profile.Profile, path string, list []restated, before, after func()) {
	begun := false
	for _, e := range list {
		for i, text := range allStated(p, path+e.name) {
			if !e.form(text) || i > 0 && !strings.HasSuffix(e.name, "Method") {
				continue
			}
			if !begun && before != nil {
				before()
			}
			begun = true
			if v, u, ok := parseQuantity(text); ok && !strings.HasPrefix(e.name, "velocityS30M") {
				w.quantity(e.name, v, u)
			} else {
				w.leaf(e.name, text)
			}
		}
	}
	if begun && after != nil {
		after()
	}
}

// methodWords are the words of the form for the method of a profile.
func methodWords(p *profile.Profile) []string {
	var words []string
	for part := range strings.SplitSeq(p.Survey.Method, ",") {
		if m := methodOf(part); m != nil {
			words = append(words, m.word)
		}
	}
	return words
}
