package notebook

import (
	"math"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/figure"
	"shearbook/vs30/spread"
)

// drawn is a figure of the report, or the fault of one that cannot be drawn.
func (ev *evaluation) drawn(picture *report.Picture, err error, name, caption, alt string, at profile.Place) []report.Block {
	if err != nil {
		ev.add(at, "", "the figure cannot be drawn: %v", err)
		return nil
	}
	return one(&report.Figure{Name: ev.figureName(name), Caption: words(caption), Alt: alt, Picture: picture})
}

// densityBins is how many bars a sample is drawn in.
const densityBins = 60

// densityFigure is the density of the average over the bounds of the code:
// as drawn, if there is a sample, and as the lognormal of the formula.
func (ev *evaluation) densityFigure(s *site, sample *spread.Sample, l spread.Lognormal, c spread.Classes, at profile.Place) []report.Block {
	o := figure.DensityOptions{Units: figure.Units(ev.system), Classes: classes(ev.code()),
		Lognormal: figure.Lognormal{Median: l.Median, SigmaLn: l.SigmaLn}}
	caption := "Density of the average of profile " + s.profile.Name + " by formula, over the class bounds of " + ev.code().Edition + ", with the chance of each class."
	outlook, err := l.Outlook(c)
	if sample != nil {
		if low, high := sample.Velocities[0], sample.Velocities[len(sample.Velocities)-1]; low < high {
			for _, b := range sample.Histogram(low, high, densityBins) {
				o.Bins = append(o.Bins, figure.Bin{Lower: b.Lower, Upper: b.Upper, Part: b.Part})
			}
		}
		o.Quantiles = figure.Quantiles{Low: sample.P16, Median: sample.Median, High: sample.P84}
		caption = "Density of the average of profile " + s.profile.Name + " as drawn (bars) and by formula (line), over the class bounds of " +
			ev.code().Edition + ", with the chance of each class as drawn."
		outlook, err = sample.Outlook(c)
	}
	if err != nil {
		ev.add(at, "", "the chance of each class cannot be had: %v", err)
		return nil
	}
	for _, chance := range outlook.Chances {
		o.Chances = append(o.Chances, chance.Chance)
	}
	picture, err := figure.Density(o)
	return ev.drawn(picture, err, "density-"+fileName(s.profile.Name), caption,
		"Density of the average velocity over the class bounds; the table of chances gives the numbers", at)
}

// flipFigure is each layer's share in the travel time and in the variance,
// with the factors that would flip the class.
func (ev *evaluation) flipFigure(s *site, shares []spread.Share, softer, stiffer *spread.Flip, at profile.Place) []report.Block {
	o := figure.FlipOptions{Units: figure.Units(ev.system)}
	down, up := factors(softer), factors(stiffer)
	if softer != nil {
		o.Softer = softer.Class
	}
	if stiffer != nil {
		o.Stiffer = stiffer.Class
	}
	var bars []figure.FlipShare
	for _, sh := range shares {
		bar := figure.FlipShare{Interface: sh.Boundary, Top: sh.Top, Bottom: sh.Bottom, Time: sh.TimePart, Variance: math.Max(0, sh.Part)}
		if sh.Boundary {
			bar.Top = 0
		} else {
			bar.Softer, bar.Stiffer = down[sh.Layer], up[sh.Layer]
		}
		bars = append(bars, bar)
	}
	picture, err := figure.Flip(bars, o)
	return ev.drawn(picture, err, "flip-"+fileName(s.profile.Name),
		"Share of each layer of profile "+s.profile.Name+" in the travel time and in the variance of the average, and the factor on its velocity alone at which the class would flip.",
		"Shares of the layers in travel time and variance; the tables give the numbers", at)
}

// factors are the factors of a flip by layer; none where there is no flip.
func factors(f *spread.Flip) map[int]float64 {
	out := map[int]float64{}
	if f != nil {
		for _, l := range f.Layers {
			out[l.Layer] = l.Factor
		}
	}
	return out
}

// bandFigure is all profiles of a site with their geometric mean and the
// band of one sample standard deviation about it.
func (ev *evaluation) bandFigure(sites []*site, lines []spread.Line, thickness float64, at profile.Place) []report.Block {
	from := sites[0].datum
	o := figure.VelocityOptions{Units: figure.Units(ev.system), Datum: from, Thickness: thickness}
	if code := ev.code(); code != nil {
		o.Classes = classes(code)
	}
	for _, sl := range spread.Slices(lines, from, from+thickness, 0) {
		if sl.Lines < 2 {
			o.Band = append(o.Band, figure.BandPoint{Depth: sl.Top})
			continue
		}
		b := spread.Lognormal{Median: sl.Geometric, SigmaLn: sl.SigmaLn}.Band()
		o.Band = append(o.Band, figure.BandPoint{Depth: sl.Top, Low: b.P16, Median: b.Median, High: b.P84})
	}
	o.Band = append(o.Band, figure.BandPoint{Depth: from + thickness}) // nothing is said below
	var drawn []figure.Line
	var names []string
	for i, l := range lines {
		drawn = append(drawn, figure.Line{Name: l.Name, Layers: l.Layers, Reached: sites[i].profile.Survey.DepthReached})
		names = append(names, l.Name)
	}
	picture, err := figure.Velocity(drawn, o)
	return ev.drawn(picture, err, "profiles-"+fileName(names[0]),
		"Profiles "+strings.Join(names, ", ")+" with their geometric mean and the band of one sample standard deviation of ln Vs about it (16–84 % if they are lognormal).",
		"All profiles against depth with their mean and band", at)
}
