package notebook

import "shearbook/report"

var signOffWorking = Working{
	Summary: "The place to sign: prepared, checked, and the licensed engineer with room for a seal.",
	Keys: []Key{
		{"prepared", "who prepared the report; the front matter's `prepared by` if left out"},
		{"checked", "who checked it; the front matter's `checked by` if left out"},
		{"engineer", "the licensed engineer; the front matter's `engineer` if left out"},
	},
	Example:  "checked: A. Checker\n",
	evaluate: evaluateSignOff,
}

func evaluateSignOff(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	h := ev.nb.Header
	name := func(key, other string) string {
		if text := m.text(key); text != "" {
			return text
		}
		return other
	}
	s := &report.SignOff{Signatures: []report.Signature{
		{Role: "Prepared by", Name: name("prepared", h.PreparedBy)},
		{Role: "Checked by", Name: name("checked", h.CheckedBy)},
		{Role: "Licensed engineer", Name: name("engineer", h.Engineer), Title: "Licence no.:", Seal: true},
	}}
	m.rest()
	return one(s)
}
