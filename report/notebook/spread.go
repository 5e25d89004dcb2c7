package notebook

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
	"shearbook/vs30/extend"
	"shearbook/vs30/spread"
)

var spreadWorking = Working{
	Summary: "How sure the average is: the sigmas of the layers carried into it by formula and by drawing, the chance of each class, and what would flip the class.",
	Keys: []Key{ofKey,
		{"sigma", "standard deviation of ln Vs of every layer, as 0.15; those of the file if left out"},
		{"average sigma", "standard deviation of ln of the average itself, as 0.10, instead of those of layers"},
		{"boundaries", "standard error of the depth of each boundary, as 0.5 m; none if left out"},
		{"correlation", "independent, full, or toro: how the errors of the layers go together; if left out, independent, but full where velocities are correlated from other tests"},
		{"equivalents", "a list of profiles that fit one survey about equally well, drawn from in place of sigmas"},
		{"layering", "random to draw the boundaries anew in every profile (Toro 1995); fixed if left out"},
		{"realisations", "how many profiles are drawn; 100000 if left out"},
		{"seed", "of the random numbers; 1995 if left out"},
		{"figure", "no to leave the figures out"},
	},
	Example:  "of: L1\nsigma: 0.12\n",
	evaluate: evaluateSpread,
}

// spreadKeys is what a spread working asks for.
type spreadKeys struct {
	sigma, average float64 // 0 where not given
	boundaries     float64 // m
	correlation    spread.Rule
	ruled          bool // the notebook states the correlation
	random         bool // layering
	draw           spread.Options
	figures        bool
	equivalents    []*site
	at             profile.Place
}

func evaluateSpread(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	k := spreadKeys{
		sigma: m.positive("sigma", spread.MaxSigma), average: m.positive("average sigma", spread.MaxSigma),
		boundaries: m.value("boundaries", profile.Length, "0.5 m").Value,
		random:     m.word("layering", []string{"fixed", "random"}) == "random",
		figures:    m.word("figure", []string{"yes", "no"}) != "no",
		at:         c.at,
	}
	rule := m.word("correlation", []string{"independent", "full", "toro"})
	k.ruled = rule != ""
	switch rule {
	case "full":
		k.correlation = spread.Full
	case "toro":
		k.correlation = spread.Interlayer
	}
	k.equivalents = ev.sitesNamed(&m, "equivalents")
	k.draw.Realisations = int(m.positive("realisations", spread.MaxRealisations))
	k.draw.Seed = uint64(m.positive("seed", 1<<53))
	if k.sigma > 0 && k.average > 0 {
		m.add(m.at(m.get("sigma")), "keep one of them", "sigma and average sigma are two ways to say it")
	}
	m.rest()
	return ev.eachMeasured(sites, func(s *site) []report.Block { return ev.spreadBlocks(s, k) })
}

// positive returns the value of a key as a plain number above 0 and at most
// limit; 0 if there is none.
func (m *mapping) positive(key string, limit float64) float64 {
	text := m.text(key)
	if text == "" {
		return 0
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || !(v > 0 && v <= limit) {
		m.add(m.at(m.get(key)), "", "%s of %s is %q, not a number above 0 and at most %g", key, m.what, text, limit)
		return 0
	}
	return v
}

// spreadBlocks is all of it for one profile.
func (ev *evaluation) spreadBlocks(s *site, k spreadKeys) []report.Block {
	if !k.ruled && s.correlated() {
		k.correlation = spread.Full // the error of a correlation is common to all layers
	}
	depths := ev.depths(s, profile.Optional{})
	if len(depths) == 0 {
		return nil
	}
	thickness := depths[0]
	layers, notes := ev.layersTo(s, s.datum, thickness)
	v, err := vs30.Average(layers, s.datum, thickness)
	if err != nil {
		ev.add(k.at, shortHint, "%s", ev.shortText(s, err))
		return nil
	}
	classes, _ := ev.spreadClasses()
	var blocks []report.Block
	var shares []spread.Share
	if len(k.equivalents) > 0 {
		blocks = ev.equivalentSpread(s, thickness, classes, k)
	} else if k.average > 0 {
		blocks = ev.averageSpread(s, v, ev.withRelation(s, thickness, k.average), thickness, classes, k)
	} else {
		blocks, shares = ev.layerSpread(s, layers, thickness, notes, classes, k)
	}
	return append(blocks, ev.flipBlocks(s, layers, thickness, classes, shares, k)...)
}

// spreadClasses are the velocity classes of the notebook's code, false where
// it has none.
func (ev *evaluation) spreadClasses() (spread.Classes, bool) {
	code := ev.code()
	if code == nil {
		return spread.Classes{}, false
	}
	drawn := classes(code)
	if len(drawn.Bounds) == 0 {
		return spread.Classes{}, false
	}
	out := spread.Classes{Names: []string{drawn.Lowest}}
	if drawn.Lowest == "" {
		out.Names[0] = "below " + drawn.Bounds[0].Class
	}
	for _, b := range drawn.Bounds {
		out.Names, out.Bounds = append(out.Names, b.Class), append(out.Bounds, b.Value)
	}
	return out, true
}

// withRelation adds the scatter of the relation that extended the profile to
// a sigma of the average.
func (ev *evaluation) withRelation(s *site, thickness, sigma float64) float64 {
	if s.extend == "" {
		return sigma
	}
	relation, err := extend.Find(s.extend)
	if err != nil {
		return sigma
	}
	e, err := relation.Estimate(s.profile.Layers, s.datum, thickness)
	if err != nil {
		return sigma // it reaches, or it was refused where the class was asked for
	}
	return spread.Total(sigma, e.SigmaLn)
}

// averageSpread is the spread of an average whose own sigma is given.
func (ev *evaluation) averageSpread(s *site, v, sigma, thickness float64, classes spread.Classes, k spreadKeys) []report.Block {
	l := spread.Lognormal{Median: v, SigmaLn: sigma}
	b := l.Band()
	t := ev.bandTable("Spread of the average of profile " + s.profile.Name + " over " + ev.bothLengths(thickness))
	t.Rows = append(t.Rows, ev.bandRow("given sigma of the average", sigma, b, ""))
	blocks := []report.Block{t}
	if len(classes.Names) > 0 {
		if o, err := l.Outlook(classes); err == nil {
			blocks = append(blocks, ev.chanceTable(s, o, false))
		}
		if k.figures {
			blocks = append(blocks, ev.densityFigure(s, nil, l, classes, k.at)...)
		}
	}
	return blocks
}

// equivalentSpread is the spread of the averages of profiles that fit one
// survey about equally well.
func (ev *evaluation) equivalentSpread(s *site, thickness float64, classes spread.Classes, k spreadKeys) []report.Block {
	var q spread.Equivalents
	var names []string
	for _, other := range k.equivalents {
		layers, _ := ev.layersTo(other, s.datum, thickness)
		average, err := vs30.Average(layers, s.datum, thickness)
		if err != nil {
			ev.add(k.at, shortHint, "%s", ev.shortText(other, err))
			return nil
		}
		q.Averages, names = append(q.Averages, average), append(names, other.profile.Name)
	}
	q.SigmaLn = k.average
	sample, err := q.Draw(k.draw)
	if err != nil {
		ev.add(k.at, "", "the profiles cannot be drawn: %v", err)
		return nil
	}
	t := ev.bandTable("Spread of the average over " + ev.bothLengths(thickness) + " by equivalent profiles of one survey")
	t.Rows = append(t.Rows, ev.bandRow(fmt.Sprintf("%s draws from %d profiles, seed %d", fixed(float64(len(sample.Velocities)), 0), len(names), sample.Seed), sample.SigmaLn, sample.Band, ""))
	t.Notes = append(t.Notes, words("Profiles: "+strings.Join(names, ", ")+". Their scatter is that of the inversion alone; `average sigma` adds what the survey errs as a whole."))
	blocks := one(t)
	if len(classes.Names) > 0 {
		if o, err := sample.Outlook(classes); err == nil {
			blocks = append(blocks, ev.chanceTable(s, o, true))
		}
	}
	return blocks
}

// bandTable is an empty table of quantiles.
func (ev *evaluation) bandTable(caption string) *report.Table {
	unit := " (" + ev.system.velocity().Name + ")"
	return &report.Table{Caption: words(caption), Columns: []report.TableColumn{wide("How"), column("σ of ln V", report.AlignDecimal),
		column("5 %"+unit, report.AlignDecimal), column("16 %"+unit, report.AlignDecimal), column("Median"+unit, report.AlignDecimal),
		column("84 %"+unit, report.AlignDecimal), column("95 %"+unit, report.AlignDecimal)}}
}

// bandRow is one row of it; after stands behind the median.
func (ev *evaluation) bandRow(how string, sigma float64, b spread.Band, after string) report.TableRow {
	v := func(x float64) string { return fixed(x/ev.system.velocity().Factor, 1) }
	return row(how, fixed(sigma, 4), v(b.P5), v(b.P16), v(b.Median)+after, v(b.P84), v(b.P95))
}

// layerSpread carries the sigmas of the layers into the average.
func (ev *evaluation) layerSpread(s *site, layers []profile.Layer, thickness float64, notes []profile.Note, classes spread.Classes, k spreadKeys) ([]report.Block, []spread.Share) {
	layers, carried := s.carrySigma(layers)
	model := spread.Model{Layers: layers, From: s.datum, Thickness: thickness}
	if k.sigma > 0 {
		model.Sigmas = make([]float64, len(layers))
		for i := range model.Sigmas {
			model.Sigmas[i] = k.sigma
		}
	}
	if k.boundaries > 0 {
		model.Boundaries = make([]float64, len(layers))
		for i := range model.Boundaries {
			model.Boundaries[i] = k.boundaries
		}
	}
	t := ev.bandTable("Spread of the average of profile " + s.profile.Name + " over " + ev.bothLengths(thickness))
	var chosen spread.Propagation
	for _, rule := range []spread.Rule{spread.Independent, spread.Interlayer, spread.Full} {
		model.Correlation = ev.correlation(rule, layers, s.datum, thickness)
		p, err := model.Propagate()
		if err != nil {
			return ev.noSigma(s, err, k), nil
		}
		sigma := ev.withRelation(s, thickness, p.SigmaLn)
		t.Rows = append(t.Rows, ev.bandRow("formula, "+model.Correlation.String(), sigma, spread.Lognormal{Median: p.Velocity, SigmaLn: sigma}.Band(), ""))
		if rule == k.correlation {
			chosen = p
			t.Rows[len(t.Rows)-1].Marked = true
		}
	}
	model.Correlation = ev.correlation(k.correlation, layers, s.datum, thickness)
	if k.random {
		model.Layering, model.Boundaries = spread.ToroLayering(), nil
	}
	sample, err := model.Draw(k.draw)
	if err != nil {
		ev.add(k.at, "", "the profiles cannot be drawn: %v", err)
		return nil, nil
	}
	t.Rows = append(t.Rows, ev.bandRow(fmt.Sprintf("%s profiles drawn, seed %d", fixed(float64(len(sample.Velocities)), 0), sample.Seed), sample.SigmaLn, sample.Band,
		" ± "+fixed(sample.MedianError/ev.system.velocity().Factor, 1)))
	t.Notes = append(t.Notes, words(ev.sigmaSource(s, k)), words("The errors of the layers are taken as lognormal. Drawing: "+spread.ToroSource+" ("+spread.ToroStanding+"); ± is the error of drawing no more. The median drawn lies a little below the average, because slow errors cost more travel time than fast ones save."))
	if carried && k.sigma == 0 {
		t.Notes = append(t.Notes, words("The layer by which the profile is extended takes the sigma of the one above it."))
	}
	for _, n := range notes {
		if n.ID == "extended" {
			t.Notes = append(t.Notes, words("Where the profile is extended the scatter of the relation, as its source gives it, is added to the formula; drawing varies the measured layers."))
		}
	}
	blocks := []report.Block{t}
	if len(classes.Names) > 0 {
		if o, err := sample.Outlook(classes); err == nil {
			blocks = append(blocks, ev.chanceTable(s, o, true))
		}
		if k.figures {
			blocks = append(blocks, ev.densityFigure(s, sample, spread.Lognormal{Median: chosen.Velocity, SigmaLn: ev.withRelation(s, thickness, chosen.SigmaLn)}, classes, k.at)...)
		}
	}
	return blocks, chosen.Shares
}

// correlation is a rule with the Toro class of the average.
func (ev *evaluation) correlation(rule spread.Rule, layers []profile.Layer, from, thickness float64) spread.Correlation {
	c := spread.Correlation{Rule: rule}
	if rule == spread.Interlayer {
		if v, err := vs30.Average(layers, from, thickness); err == nil {
			c.Class = spread.ToroFor(v)
		}
	}
	return c
}

// sigmaSource says where the sigmas come from.
func (ev *evaluation) sigmaSource(s *site, k spreadKeys) string {
	text := "Sigmas of ln Vs: those that " + s.entry.File + " states for the layers."
	if by := s.estimatedBy(); k.sigma > 0 {
		text = "Sigma of ln Vs of every layer: " + shortest(k.sigma, 3) + ", as the notebook states."
	} else if by != "" {
		text = "Sigmas of ln Vs: those of the correlations that the velocities are estimated by (" + by + ")."
	}
	return text + s.commonError()
}

// commonError says why the errors of correlated velocities go together; "" where
// there are none.
func (s *site) commonError() string {
	switch {
	case !s.correlated():
		return ""
	case basisOf(s.profile) == "mixed":
		return " Some of the velocities are correlated from other tests. The error of a correlation is common to its layers; one rule is taken for all layers, the others included, so full correlation is what holds unless the notebook states another."
	case s.estimatedBy() == "":
		return " The velocities are correlated from other tests. The error of a correlation is common to all layers, so full correlation is what holds unless the notebook states another."
	}
	return " The error of a correlation is common to all layers, so full correlation is what holds unless the notebook states another."
}

// noSigma says that nobody states a sigma, and offers what is published.
func (ev *evaluation) noSigma(s *site, err error, k spreadKeys) []report.Block {
	var missing *spread.MissingError
	if !errors.As(err, &missing) {
		ev.add(k.at, "", "the spread cannot be had: %v", err)
		return nil
	}
	text := "How sure the velocities of profile " + s.profile.Name + " are is not stated, and none is assumed: no spread is given."
	if r, ok := spread.Published(s.profile.Survey.Method); ok {
		text += fmt.Sprintf(" For %s, sigmas of ln V of %s are published for an average over some 30 m (%s; %s); `average sigma: %s` in a spread working takes it up.",
			r.Method, rangeText(r.Low, r.High), r.Source, r.Standing, shortest(r.High, 3))
	}
	return one(para(text))
}

func rangeText(low, high float64) string {
	if low == high {
		return shortest(low, 3)
	}
	return shortest(low, 3) + " to " + shortest(high, 3)
}

// chanceTable is the chance of each class.
func (ev *evaluation) chanceTable(s *site, o spread.Outlook, drawn bool) *report.Table {
	t := &report.Table{
		Caption: words("Chance of each velocity class of " + ev.code().Edition + " for profile " + s.profile.Name),
		Columns: []report.TableColumn{column("Class", report.AlignLeft), column("From ("+ev.system.velocity().Name+")", report.AlignDecimal),
			column("To ("+ev.system.velocity().Name+")", report.AlignDecimal), column("Chance (%)", report.AlignRight), wide("")},
	}
	bound := func(v float64) string {
		if v == 0 || math.IsInf(v, 1) {
			return "–"
		}
		return ev.velocity(v)
	}
	for _, c := range o.Chances {
		chance := percent(c.Chance)
		if drawn && c.Error > 0 {
			chance += " ± " + fixed(100*c.Error, 1)
		}
		r := row(c.Class, bound(c.Lower), bound(c.Upper), chance, "")
		if c.Class == o.Class {
			r.Marked = true
			r.Cells[4] = words("class of the median")
		}
		t.Rows = append(t.Rows, r)
	}
	t.Notes = append(t.Notes, words("Classes with a chance above "+shortest(100*spread.LikelyAbove, 0)+" %: "+strings.Join(o.Likely, ", ")+
		". By velocity alone: geometry and conditions beside the average are not varied."))
	return t
}

// percent prints a chance; one that rounds to nothing is not nothing.
func percent(p float64) string {
	switch {
	case p == 0:
		return "0"
	case p < 0.0005:
		return "< 0.1"
	case p < 1 && p > 0.9995:
		return "> 99.9"
	}
	return fixed(100*p, 1)
}

// flipBlocks says what would flip the class, layer by layer.
func (ev *evaluation) flipBlocks(s *site, layers []profile.Layer, thickness float64, classes spread.Classes, shares []spread.Share, k spreadKeys) []report.Block {
	if len(classes.Names) == 0 {
		return nil
	}
	softer, stiffer, err := spread.Flips(layers, s.datum, thickness, classes)
	if err != nil {
		ev.add(k.at, "", "what would flip the class cannot be said: %v", err)
		return nil
	}
	var blocks []report.Block
	for _, f := range []*spread.Flip{softer, stiffer} {
		if f == nil {
			continue
		}
		blocks = append(blocks, para(fmt.Sprintf("To class %s: the average would have to be %s, %s of what it is; all layers together %s.",
			f.Class, metresPerSecond(f.Bound).Print(ev.system), factor(f.Factor), change(f.Factor))))
	}
	if t := ev.flipTable(s, layers, softer, stiffer, shares); t != nil {
		blocks = append(blocks, t)
	}
	if k.figures && len(shares) > 0 {
		blocks = append(blocks, ev.flipFigure(s, shares, softer, stiffer, k.at)...)
	}
	return blocks
}

func factor(f float64) string { return fixed(100*f, 1) + " %" }

func change(f float64) string {
	if f < 1 {
		return fixed(100*(1-f), 1) + " % slower"
	}
	return fixed(100*(f-1), 1) + " % faster"
}

// flipTable is each layer's share and the factor on its velocity alone that
// would flip the class.
func (ev *evaluation) flipTable(s *site, layers []profile.Layer, softer, stiffer *spread.Flip, shares []spread.Share) *report.Table {
	flips := softer
	if flips == nil {
		flips = stiffer
	}
	if flips == nil {
		return nil
	}
	t := &report.Table{
		Caption: words("What each layer of profile " + s.profile.Name + " alone would have to be for the class to flip"),
		Columns: []report.TableColumn{column("Layer", report.AlignRight), column("Vs ("+ev.system.velocity().Name+")", report.AlignDecimal)},
	}
	parts := map[int]float64{}
	for _, sh := range shares {
		if !sh.Boundary {
			parts[sh.Layer] = sh.Part
		}
	}
	if len(shares) > 0 {
		t.Columns = append(t.Columns, column("Share of the variance (%)", report.AlignDecimal))
	}
	for _, f := range []*spread.Flip{softer, stiffer} {
		if f != nil {
			t.Columns = append(t.Columns, column("To "+f.Class+" ("+ev.system.velocity().Name+")", report.AlignLeft))
		}
	}
	for i, l := range flips.Layers {
		r := row(ev.layerName(s, l.Layer), ev.velocity(layers[l.Layer].Vs))
		if len(shares) > 0 {
			r.Cells = append(r.Cells, words(fixed(100*parts[l.Layer], 1)))
		}
		for _, f := range []*spread.Flip{softer, stiffer} {
			if f != nil {
				r.Cells = append(r.Cells, words(ev.layerFlip(f.Layers[i])))
			}
		}
		t.Rows = append(t.Rows, r)
	}
	return t
}

func (ev *evaluation) layerFlip(l spread.LayerFlip) string {
	if !l.Possible() {
		return "not by this layer alone"
	}
	return fixed(l.Velocity/ev.system.velocity().Factor, 0) + ", × " + fixed(l.Factor, 2)
}
