package notebook

import (
	"slices"
	"strings"

	"shearbook/report"
)

var limitsWorking = Working{
	Summary:  "Limits and assumptions: what the results rest on, and what was not assessed.",
	Keys:     []Key{ofKey},
	Example:  "of: L1\n",
	evaluate: evaluateLimits,
}

func evaluateLimits(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	m.rest()
	list := &report.List{Tight: true}
	add := func(in ...report.Inline) {
		list.Items = append(list.Items, report.ListItem{Blocks: one(&report.Paragraph{Inline: in})})
	}
	say := func(text string) { add(report.Text(text)) }

	say("The classification rests on the velocities as read and on the statements of the notebook; shearbook does not interpret field records.")
	say("The ground is taken to be layered horizontally and the profile to stand for the whole site; ground that changes across the site needs profiles of its own.")
	say("Velocities are of small strain. The average is a weight of layers, not a property of any one of them: two sites of one class can shake differently.")
	for _, s := range sites {
		for _, note := range ev.siteNotes(s) {
			say(note)
		}
	}
	for _, u := range ev.unassessed(sites) {
		add(append(strong("Not assessed"), report.Text(", "+sentence(u.text)+" ("+u.codes+")"))...)
	}
	return one(list)
}

// siteNotes are the doubts about a site and its decisions, each with the
// codes it concerns where they are not all.
func (ev *evaluation) siteNotes(s *site) []string {
	ids := ev.decidedCodes(s)
	notes := s.profile.Notes
	concerns := map[string][]string{}
	for _, id := range ids {
		d := s.decisions[id]
		notes = union(notes, d.Notes)
		for _, n := range d.Notes {
			concerns[n.Text] = append(concerns[n.Text], d.Code.Edition)
		}
	}
	var texts []string
	for _, n := range notes {
		of := "Profile " + s.profile.Name
		if editions := concerns[n.Text]; len(editions) < len(ids) && len(editions) > 0 {
			of += ", " + strings.Join(editions, " and ")
		}
		texts = append(texts, of+": "+strings.TrimSuffix(n.Text, ".")+".")
	}
	return texts
}

// decidedCodes are the codes under which a site was classified, in the order
// of allCodes.
func (ev *evaluation) decidedCodes(s *site) []string {
	var ids []string
	for _, code := range ev.allCodes() {
		if _, ok := s.decisions[code.ID]; ok {
			ids = append(ids, code.ID)
		}
	}
	return ids
}

// openCondition is a condition that nobody assessed, with the codes that ask
// for it.
type openCondition struct{ text, codes string }

func (ev *evaluation) unassessed(sites []*site) []openCondition {
	var open []openCondition
	for _, s := range sites {
		for _, id := range ev.decidedCodes(s) {
			d := s.decisions[id]
			for _, text := range d.Unassessed {
				if !slices.ContainsFunc(open, func(o openCondition) bool { return o.text == text }) {
					open = append(open, openCondition{text, d.Code.Edition})
				}
			}
		}
	}
	return open
}
