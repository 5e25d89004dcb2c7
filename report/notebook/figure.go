package notebook

import (
	"fmt"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/figure"
	"shearbook/vs30"
	"shearbook/vs30/siteclass"
)

var figureWorking = Working{
	Summary: "Shear-wave velocity against depth with the running average and the code's bounds.",
	Keys: []Key{ofKey,
		{"kind", "velocity, or travel for each layer's share of the travel time; velocity if left out"},
		{"caption", "a caption of your own"},
		{"code", "the code whose bounds are drawn; the front matter's first if left out"},
	},
	Example:  "of: L1\nkind: travel\n",
	evaluate: evaluateFigure,
}

func evaluateFigure(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	kind := m.word("kind", []string{"velocity", "travel"})
	caption := m.text("caption")
	var code *siteclass.Code
	if m.has("code") || len(ev.nb.Header.Codes) > 0 {
		if codes := ev.codes(&m, "code"); len(codes) > 0 {
			code = codes[0]
		}
	}
	m.rest()
	if kind == "travel" {
		return ev.eachMeasured(sites, func(s *site) []report.Block {
			thickness := ev.averagingDepth(s, code)
			layers, _ := ev.layersTo(s, s.datum, thickness)
			return ev.travelFigure(s, layers, s.datum, thickness, c.at)
		})
	}
	with := measured(sites)
	if len(with) == 0 {
		return ev.eachMeasured(sites, nil)
	}
	return ev.velocityFigure(with, code, caption, c.at)
}

// averagingDepth is the thickness a code averages over, 30 m without one.
func (ev *evaluation) averagingDepth(s *site, code *siteclass.Code) float64 {
	if code == nil {
		return 30
	}
	if d, ok := s.decisions[code.ID]; ok {
		return d.Thickness
	}
	if d, err := ev.classify(s, code); err == nil {
		return d.Thickness
	}
	return code.Depth
}

// velocityFigure draws profiles against depth.
func (ev *evaluation) velocityFigure(sites []*site, code *siteclass.Code, caption string, at profile.Place) []report.Block {
	thickness := ev.averagingDepth(sites[0], code)
	datum := sites[0].datum
	var lines []figure.Line
	var names []string
	for _, s := range sites {
		layers, _ := ev.layersTo(s, datum, thickness)
		line := figure.Line{Name: s.profile.Name, Layers: layers, Reached: s.profile.Survey.DepthReached}
		if line.Reached == 0 && len(layers) > len(s.profile.Layers) {
			line.Reached = s.profile.DepthModelled()
		}
		for _, p := range vs30.Curve(layers, datum, datum+thickness, 0.25) {
			line.Average = append(line.Average, figure.Point{Velocity: p.Average, Depth: p.Depth})
		}
		lines, names = append(lines, line), append(names, s.profile.Name)
	}
	options := figure.VelocityOptions{Units: figure.Units(ev.system), Datum: datum, Thickness: thickness}
	behind := ""
	if code != nil {
		options.Classes = classes(code)
		behind = ", over the class bounds of " + code.Edition
	}
	picture, err := figure.Velocity(lines, options)
	if err != nil {
		ev.add(at, "", "the figure cannot be drawn: %v", err)
		return nil
	}
	of := "profile " + names[0]
	if len(names) > 1 {
		of = "profiles " + strings.Join(names[:len(names)-1], ", ") + " and " + names[len(names)-1]
	}
	if caption == "" {
		caption = "Shear-wave velocity of " + of + " against depth, with the average from the datum down to each depth" + behind + "."
	}
	return one(&report.Figure{Name: ev.figureName("velocity-" + fileName(names[0])), Caption: words(caption), Picture: picture,
		Alt: "Shear-wave velocity of " + of + " against depth; the layer table gives the numbers"})
}

// classes are the velocity bounds of a code in m/s, softest first.
func classes(code *siteclass.Code) figure.Classes {
	out := figure.Classes{Code: code.ID}
	for i := len(code.Bands) - 1; i >= 0; i-- {
		b := code.Bands[i]
		switch {
		case b.Vs.Empty():
		case b.Vs.Lower.Op == siteclass.Open:
			out.Lowest = b.Class
		default:
			out.Bounds = append(out.Bounds, figure.Bound{Value: b.Vs.Lower.Value * code.Unit.Factor, Class: b.Class})
		}
	}
	return out
}

// figureName returns a name no other figure of the report has.
func (ev *evaluation) figureName(name string) string {
	return unused(ev.figureNames, name, name, "")
}

// travelFigure draws each layer's share of the travel time.
func (ev *evaluation) travelFigure(s *site, layers []profile.Layer, from, thickness float64, at profile.Place) []report.Block {
	w, err := vs30.Work(layers, from, thickness)
	if err != nil {
		ev.add(at, shortHint, "%s", ev.shortText(s, err))
		return nil
	}
	var shares []figure.Share
	for _, r := range w.Rows {
		shares = append(shares, figure.Share{Top: r.Top, Bottom: r.Bottom, Time: r.Time})
	}
	picture, err := figure.Travel(shares, figure.TravelOptions{Units: figure.Units(ev.system)})
	if err != nil {
		ev.add(at, "", "the figure cannot be drawn: %v", err)
		return nil
	}
	caption := fmt.Sprintf("Share of each layer of profile %s in the travel time over %s.", s.profile.Name, ev.bothLengths(thickness))
	return one(&report.Figure{Name: ev.figureName("travel-" + fileName(s.profile.Name)), Caption: words(caption), Picture: picture,
		Alt: "Share of each layer in the travel time; the table of the average gives the numbers"})
}

// comparisonFigure draws one average against the bounds of several codes.
func (ev *evaluation) comparisonFigure(s *site, decided []siteclass.Decision, at profile.Place) []report.Block {
	var strips []figure.Strip
	for _, d := range decided {
		strips = append(strips, figure.Strip{Classes: classes(d.Code), Average: d.Velocity, Class: d.Class})
	}
	picture, err := figure.Comparison(strips, figure.ComparisonOptions{Units: figure.Units(ev.system)})
	if err != nil {
		ev.add(at, "", "the figure cannot be drawn: %v", err)
		return nil
	}
	return one(&report.Figure{Name: ev.figureName("codes-" + fileName(s.profile.Name)), Picture: picture,
		Caption: words("The average velocity of profile " + s.profile.Name + " as each code takes it, against the bounds of its classes."),
		Alt:     "The average velocity against the class bounds of each code; the table gives the numbers"})
}
