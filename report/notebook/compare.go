package notebook

import (
	"shearbook/report"
	"shearbook/vs30/siteclass"
)

var compareWorking = Working{
	Summary: "One profile under several codes in one table, with the average that each uses, and a figure of it against their bounds.",
	Keys: []Key{ofKey,
		{"codes", "a list of codes of `shearbook codes`; the front matter's if left out"},
		{"figure", "no to leave the figure out"},
	},
	Example:  "of: L1\ncodes: [asce-7-16, ec8-2004]\n",
	evaluate: evaluateCompare,
}

func evaluateCompare(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	codes := ev.codes(&m, "codes")
	drawn := m.word("figure", []string{"yes", "no"}) != "no"
	m.rest()
	return ev.each(sites, func(s *site) []report.Block {
		t := &report.Table{
			Caption: words("Profile " + s.profile.Name + " under several codes"),
			Columns: []report.TableColumn{column("Code", report.AlignLeft), column("Average ("+ev.system.velocity().Name+")", report.AlignDecimal),
				column("In the code's unit", report.AlignRight), column("Over ("+ev.system.length().Name+")", report.AlignDecimal),
				column("Datum ("+ev.system.length().Name+")", report.AlignDecimal), column("Class", report.AlignLeft),
				wide("Next class"), column("Standing", report.AlignLeft)},
		}
		var strips []siteclass.Decision
		for _, code := range codes {
			d, ok := ev.decide(s, code, s.entry.place)
			if !ok {
				continue
			}
			next := "–"
			if d.Margin != nil {
				next = d.Margin.ToClass + ", " + MarginText(d.Margin)
			}
			inUnit := ev.averages(d.Averages)
			if d.Velocity > 0 {
				inUnit = fixed(d.Velocity/d.Code.Unit.Factor, 1) + " " + d.Code.Unit.Name
			}
			r := row(d.Code.ID, averageCell(ev, d), inUnit, ev.length(d.Thickness), ev.length(d.Datum), "", next, d.Standing.String())
			r.Cells[5] = append(strong(d.Class), ev.refs(d.Notes)...)
			t.Rows = append(t.Rows, r)
			t.Notes = append(t.Notes, words(d.Code.ID+": "+d.Code.Edition+", "+d.Code.Table+"."))
			if d.Velocity > 0 && len(classes(d.Code).Bounds) > 0 {
				strips = append(strips, d) // the others have no bounds of velocity to draw
			}
		}
		blocks := one(t)
		if drawn && len(strips) > 0 {
			blocks = append(blocks, ev.comparisonFigure(s, strips, c.at)...)
		}
		return blocks
	})
}
