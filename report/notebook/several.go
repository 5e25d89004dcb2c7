package notebook

import (
	"fmt"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
	"shearbook/vs30/siteclass"
	"shearbook/vs30/spread"
)

var siteWorking = Working{
	Summary: "Several profiles of one site together: their averages, the mean and its spread, and where they part.",
	Keys: []Key{ofKey,
		{"depth", "the averaging depth, as 30 m; the code's own if left out"},
		{"sigma", "standard deviation of ln of each average, as 0.10; from the layers' where the files state them, else none"},
		{"heading", "a heading over it all, which is left out with it where there is only one profile"},
		{"figure", "no to leave the figure out"},
	},
	Example:  "depth: 20 m\n",
	evaluate: evaluateSite,
}

func evaluateSite(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := measured(ev.of(&m))
	depth := m.value("depth", profile.Length, "30 m")
	sigma := m.positive("sigma", spread.MaxSigma)
	title := m.text("heading")
	drawn := m.word("figure", []string{"yes", "no"}) != "no"
	m.rest()
	if len(sites) < 2 {
		if title != "" || len(sites) == 0 {
			return nil
		}
		return one(para("There is one profile, and nothing to put together."))
	}
	thickness := ev.averagingDepth(sites[0], ev.code())
	if depth.Known {
		thickness = depth.Value
	}
	lines, ok := ev.lines(sites, thickness, sigma, c.at)
	if !ok {
		return nil
	}
	var blocks []report.Block
	if title != "" {
		blocks = one(heading(3, title))
	}
	blocks = append(blocks, ev.together(sites, lines, thickness, c.at)...)
	if drawn {
		blocks = append(blocks, ev.bandFigure(sites, lines, thickness, c.at)...)
	}
	return blocks
}

// lines are the profiles as package spread takes them.
func (ev *evaluation) lines(sites []*site, thickness, sigma float64, at profile.Place) ([]spread.Line, bool) {
	var lines []spread.Line
	for _, s := range sites {
		layers, _ := ev.layersTo(s, s.datum, thickness)
		if _, err := vs30.Average(layers, s.datum, thickness); err != nil {
			ev.add(at, shortHint, "%s", ev.shortText(s, err))
			return nil, false
		}
		line := spread.Line{Name: s.profile.Name, Layers: layers, Basis: commonBasis(s.profile), SigmaLn: sigma}
		if sigma == 0 {
			model := spread.Model{Layers: layers, From: s.datum, Thickness: thickness}
			if p, err := model.Propagate(); err == nil {
				line.SigmaLn = ev.withRelation(s, thickness, p.SigmaLn)
			}
		}
		lines = append(lines, line)
	}
	return lines, true
}

// commonBasis is the basis all layers share, else not stated.
func commonBasis(p *profile.Profile) profile.Basis {
	if b, ok := profile.ParseBasis(basisOf(p)); ok {
		return b
	}
	return profile.BasisNotStated
}

// together is the table of the lines, the groups by basis, and whether they
// agree.
func (ev *evaluation) together(sites []*site, lines []spread.Line, thickness float64, at profile.Place) []report.Block {
	from := sites[0].datum
	whole, err := spread.Combine(lines, from, thickness)
	if err != nil {
		ev.add(at, "", "the profiles cannot be put together: %v", err)
		return nil
	}
	groups, err := spread.Groups(lines, from, thickness)
	if err != nil {
		ev.add(at, "", "the profiles cannot be grouped: %v", err)
		return nil
	}
	t := &report.Table{
		Caption: words("Averages of " + fmt.Sprint(len(lines)) + " profiles over " + ev.bothLengths(thickness) + " " + ev.below(from)),
		Columns: []report.TableColumn{wide("Profile"), column("Basis", report.AlignLeft), column("Average ("+ev.system.velocity().Name+")", report.AlignDecimal), column("σ of ln", report.AlignDecimal), column("Class", report.AlignLeft)},
	}
	var decisions []siteclass.Decision
	for i, l := range lines {
		sigma := "–"
		if l.SigmaLn > 0 {
			sigma = fixed(l.SigmaLn, 3)
		}
		class := "–"
		if code := ev.code(); code != nil {
			if d, ok := ev.decide(sites[i], code, sites[i].entry.place); ok {
				class = d.Class
				decisions = append(decisions, d)
			}
		}
		t.Rows = append(t.Rows, row(l.Name, l.Basis.String(), fixed(whole.Averages[i]/ev.system.velocity().Factor, 1), sigma, class))
	}
	if len(groups) > 1 {
		for _, g := range groups {
			t.Rows = append(t.Rows, ev.meanRow("Geometric mean, "+g.Name, &g.Site))
		}
	}
	t.Rows = append(t.Rows, ev.meanRow("Geometric mean of all", &whole))
	t.Rows = append(t.Rows, row("Average of the averages (for comparison)", "", fixed(whole.Arithmetic/ev.system.velocity().Factor, 1), "", ""),
		row("Average of the mean slowness (for comparison)", "", fixed(whole.OfMeanSlowness/ev.system.velocity().Factor, 1), "", ""))
	t.Notes = append(t.Notes, words(fmt.Sprintf("σ of the mean is the sample standard deviation of ln V, with n − 1; its standard error is %s, and the interval of the mean at 68 %% uses Student's t with %d degrees of freedom.",
		fixed(whole.StandardError, 3), len(lines)-1)))
	if low, high, ok := whole.Interval(0.68); ok {
		t.Notes = append(t.Notes, words("Mean at 68 %: "+metresPerSecond(low).Print(ev.system)+" to "+metresPerSecond(high).Print(ev.system)+"."))
	}
	return []report.Block{t, ev.governing(decisions), ev.agreement(lines, from, thickness)}
}

// governing says what the code makes of several profiles.
func (ev *evaluation) governing(of []siteclass.Decision) report.Block {
	code := ev.code()
	if code == nil || len(of) == 0 {
		return para("No code is named, and no class is given.")
	}
	if code.Several == "" {
		return para(code.Edition + " does not say which of several profiles decides. A mean of profiles is not a class: that is the engineer's to say.")
	}
	text := code.Edition + ": " + code.Several + "."
	if !code.WorstOf {
		return para(text)
	}
	d, err := siteclass.Governing(of)
	if err != nil {
		return para(text + " It cannot be applied: " + err.Error() + ".")
	}
	in := append(words(text+" The site is class "), strong(d.Class)...)
	return &report.Paragraph{Inline: append(append(in, ev.refs(d.Notes)...), report.Text("."))}
}

func (ev *evaluation) meanRow(name string, s *spread.Site) report.TableRow {
	sigma := "–"
	if s.SigmaLn > 0 {
		sigma = fixed(s.SigmaLn, 3)
	}
	r := row(name, "", fixed(s.Geometric/ev.system.velocity().Factor, 1), sigma, "")
	r.Emphasis = true
	return r
}

// agreement says whether the profiles differ by more than their sigmas
// allow, and where.
func (ev *evaluation) agreement(lines []spread.Line, from, thickness float64) report.Block {
	d, err := spread.Disagree(lines, from, thickness)
	if err != nil {
		return para("Whether the profiles agree cannot be said: " + err.Error() + ".")
	}
	text := "The fastest average is " + fixed(d.Ratio, 2) + " times the slowest (" + lines[d.Fastest].Name + " over " + lines[d.Slowest].Name + ")."
	switch {
	case d.Why != "":
		text += " Whether that is more than their errors allow was not judged: " + d.Why + "."
	case d.Beyond:
		text += fmt.Sprintf(" That is more than their sigmas allow: χ² = %s with %d degrees of freedom, a chance of %s %%.", fixed(d.ChiSquare, 2), d.Freedom, percent(d.Chance))
	default:
		text += fmt.Sprintf(" Their sigmas allow for that: χ² = %s with %d degrees of freedom, a chance of %s %%.", fixed(d.ChiSquare, 2), d.Freedom, percent(d.Chance))
	}
	var parts []string
	for _, p := range d.Partings {
		parts = append(parts, fmt.Sprintf("%s to %s %s (%s over %s, %s times)", ev.length(p.Top), ev.length(p.Bottom), ev.system.length().Name,
			lines[p.Fastest].Name, lines[p.Slowest].Name, fixed(p.Ratio, 2)))
	}
	if len(parts) > 0 {
		text += " The velocities part by more than their sigmas at " + strings.Join(parts, "; ") + "."
	}
	in := words(text)
	if d.Beyond {
		in = append(in, ev.refs([]profile.Note{d.Note})...)
	}
	return &report.Paragraph{Inline: in}
}
