package notebook

import (
	"strconv"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
)

var averageWorking = Working{
	Summary: "The time-averaged velocity with its formula, the travel time layer by layer, and the numbers put in.",
	Keys: []Key{ofKey,
		{"depth", "thickness to average over, as 20 m; the code's own and 30 m if left out"},
		{"datum", "depth below ground level to start from, as 2.5 m; the front matter's if left out"},
		{"name", "a name under which expressions may use the average (one profile and one depth)"},
	},
	Example:  "of: L1\ndepth: 20 m\nname: v20\n",
	evaluate: evaluateAverage,
}

func evaluateAverage(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	depth := m.value("depth", profile.Length, "20 m")
	datum := m.value("datum", profile.Length, "2.5 m")
	name := m.text("name")
	m.rest()
	if depth.Known && depth.Value <= 0 {
		m.add(m.at(m.get("depth")), "give the thickness to average over, as `depth: 20 m`", "the averaging depth is not positive")
		return nil
	}
	if name != "" {
		ev.nameAverage(&m, name, sites, datum, depth)
	}
	return ev.eachMeasured(sites, func(s *site) []report.Block {
		from := s.datum
		if datum.Known {
			from = datum.Value
		}
		var blocks []report.Block
		for i, thickness := range ev.depths(s, depth) {
			if i == 0 {
				blocks = ev.averageBlocks(s, from, thickness, c.at)
			} else {
				blocks = append(blocks, ev.otherAverage(s, from, thickness)...)
			}
		}
		return blocks
	})
}

// nameAverage makes an average known to expressions.
func (ev *evaluation) nameAverage(m *mapping, name string, sites []*site, datum, depth profile.Optional) {
	if len(sites) != 1 || !depth.Known {
		m.add(m.at(m.get("name")), "add `of: L1` and `depth: 20 m`", "a named average needs one profile and one depth")
		return
	}
	from := sites[0].datum
	if datum.Known {
		from = datum.Value
	}
	ev.define(m, name, ev.average(sites[0], from, depth.Value))
}

// depths returns the thicknesses to average over: the one asked for, or 30 m
// and the one of each code where that is another.
func (ev *evaluation) depths(s *site, asked profile.Optional) []float64 {
	if asked.Known {
		return []float64{asked.Value}
	}
	code := ev.code()
	if code == nil {
		return []float64{30}
	}
	d, ok := ev.decide(s, code, s.entry.place)
	switch {
	case !ok:
		return nil
	case d.Thickness == 30 || d.Velocity == 0:
		return []float64{30}
	case ev.average(s, s.datum, 30).Missing != "":
		return []float64{d.Thickness}
	}
	return []float64{d.Thickness, 30}
}

// averageBlocks is one average with its whole working.
func (ev *evaluation) averageBlocks(s *site, from, thickness float64, at profile.Place) []report.Block {
	layers, notes := ev.layersTo(s, from, thickness)
	w, err := vs30.Work(layers, from, thickness)
	if err != nil {
		ev.add(at, shortHint, "%s", ev.shortText(s, err))
		return nil
	}
	over := ev.bothLengths(thickness)
	symbol := ev.symbol(thickness)
	lead := "Over " + over + " " + ev.below(from) + ", the thickness divided by the vertical travel time of a shear wave:"
	return []report.Block{
		para(lead),
		&report.Formula{Math: report.MathRow{symbol, report.MathText("="),
			report.MathFrac{Num: report.MathIdent("Z"), Den: sumOfTimes()}}},
		ev.workingTable(s, w, layers, notes),
		&report.Formula{Math: ev.substituted(symbol, w)},
		&report.Paragraph{Inline: append(append(words("The time-averaged velocity is "), strong(ev.both(w.Velocity))...),
			append(ev.refs(notes), report.Text("."))...)},
	}
}

// otherAverage is a second average of the same layers in short: only the
// last line of the working differs.
func (ev *evaluation) otherAverage(s *site, from, thickness float64) []report.Block {
	layers, notes := ev.layersTo(s, from, thickness)
	w, err := vs30.Work(layers, from, thickness)
	if err != nil {
		return nil // depths leaves out what cannot be had
	}
	last := w.Rows[len(w.Rows)-1]
	return []report.Block{
		&report.Paragraph{Inline: append(words("Over "+ev.bothLengths(thickness)+" "+ev.below(from)+", for comparison with other codes and maps, the last layer counts with "+
			ev.length(last.Thickness)+" "+ev.system.length().Name+" and "+fixed(last.Time, 6)+" s instead"), append(ev.refs(notes), report.Text(":"))...)},
		&report.Formula{Math: ev.quotient(ev.symbol(thickness), w)},
	}
}

// symbol is v̄ with the depth as its index, in the report's unit.
func (ev *evaluation) symbol(thickness float64) report.Math {
	index := shortest(thickness/ev.system.length().Factor, 2)
	if ev.system == US {
		index += " ft"
	}
	return report.MathSub{Base: report.MathOver{Base: report.MathIdent("v")}, Sub: report.MathText("S," + index)}
}

// sumOfTimes is Σ hᵢ/vᵢ.
func sumOfTimes() report.Math {
	index := report.MathIdent("i")
	return report.MathRow{report.MathSum{From: index},
		report.MathFrac{Num: report.MathSub{Base: report.MathIdent("h"), Sub: index},
			Den: report.MathSub{Base: report.MathIdent("v"), Sub: index}}}
}

// maxTerms is how many layers a formula writes out before it gives the sum
// of the table.
const maxTerms = 8

// substituted is the formula with the numbers of the table in it.
func (ev *evaluation) substituted(symbol report.Math, w vs30.Working) report.Math {
	if len(w.Rows) > maxTerms {
		return ev.quotient(symbol, w)
	}
	unit := ev.system.length()
	terms := report.MathRow{}
	for i, r := range w.Rows {
		if i > 0 {
			terms = append(terms, report.MathText("+"))
		}
		terms = append(terms, report.MathFrac{Num: report.MathText(shortest(r.Thickness/unit.Factor, 3)),
			Den: report.MathText(ev.velocity(r.Vs))})
	}
	sum := report.MathFrac{Num: report.MathText(shortest(w.Thickness/unit.Factor, 2)), Den: terms}
	return append(report.MathRow{symbol, report.MathText("="), sum}, ev.quotient(symbol, w)[1:]...)
}

// quotient is the thickness over the travel time, and what comes out.
func (ev *evaluation) quotient(symbol report.Math, w vs30.Working) report.MathRow {
	unit := ev.system.length()
	return report.MathRow{symbol, report.MathText("="),
		report.MathFrac{Num: report.MathText(shortest(w.Thickness/unit.Factor, 2) + " " + unit.Name), Den: report.MathText(fixed(w.Time, 6) + " s")},
		report.MathText("="), report.MathText(metresPerSecond(w.Velocity).Print(ev.system))}
}

// workingTable is the travel time layer by layer.
func (ev *evaluation) workingTable(s *site, w vs30.Working, layers []profile.Layer, notes []profile.Note) *report.Table {
	unit, speed := ev.system.length().Name, ev.system.velocity().Name
	t := &report.Table{
		Caption: words("Travel time through profile " + s.profile.Name + " over " + ev.length(w.Thickness) + " " + unit + " " + ev.below(w.From)),
		Columns: []report.TableColumn{
			column("Layer", report.AlignRight), column("From ("+unit+")", report.AlignDecimal), column("To ("+unit+")", report.AlignDecimal),
			column("h ("+unit+")", report.AlignDecimal), column("v ("+speed+")", report.AlignDecimal),
			column("h/v (s)", report.AlignDecimal), column("Σ h/v (s)", report.AlignDecimal), column("Share (%)", report.AlignDecimal),
		},
	}
	for _, r := range w.Rows {
		cells := row(ev.layerName(s, r.Layer), ev.length(r.Top), ev.length(r.Bottom), shortest(r.Thickness/ev.system.length().Factor, 3),
			ev.velocity(r.Vs), fixed(r.Time, 6), fixed(r.Cumulative, 6), fixed(100*r.Time/w.Time, 1))
		if r.Layer >= len(s.profile.Layers) {
			cells.Cells[0] = append(cells.Cells[0], ev.refs(notes)...)
		}
		t.Rows = append(t.Rows, cells)
	}
	total := row("Sum", "", "", shortest(w.Thickness/ev.system.length().Factor, 3), "", fixed(w.Time, 6), "", "100.0")
	total.Emphasis = true
	t.Rows = append(t.Rows, total)
	for _, r := range w.Rows {
		if layers[r.Layer].Gradient() {
			t.Notes = append(t.Notes, words("In a layer whose velocity grows with depth, v is its average by travel time, (v₂ − v₁)/ln(v₂/v₁) between its velocities at From and To."))
			break
		}
	}
	return t
}

// layerName is the number of a layer, or a word for what extends the
// profile.
func (ev *evaluation) layerName(s *site, layer int) string {
	if layer >= len(s.profile.Layers) {
		return "extended"
	}
	return strconv.Itoa(layer + 1)
}
