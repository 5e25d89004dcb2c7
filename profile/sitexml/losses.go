package sitexml

import (
	"slices"
	"strings"

	"shearbook/profile"
)

// Losses returns what of a profile Write leaves out or changes because
// SiteXML has no place for it, each in a few words; none if the profile comes
// back as it was.
func Losses(p *profile.Profile) []string {
	var list []string
	for _, l := range []struct {
		is   bool
		what string
	}{
		{some(p, func(l *profile.Layer) bool { return l.Gradient() }), "velocity gradients, written as the constant velocity with the same travel time"},
		{some(p, func(l *profile.Layer) bool { return l.Has(profile.GivenN) }), "blow counts"},
		{some(p, func(l *profile.Layer) bool { return l.Has(profile.GivenSu) }), "undrained shear strengths"},
		{some(p, func(l *profile.Layer) bool { return l.Has(profile.GivenPI) }), "plasticity indices"},
		{some(p, func(l *profile.Layer) bool { return l.Has(profile.GivenWaterContent) }), "water contents"},
		{some(p, func(l *profile.Layer) bool { return l.Refusal }), "refusal of penetration"},
		{some(p, func(l *profile.Layer) bool { return l.Soil != "" }), "soil descriptions"},
		{p.Survey.Method != strings.Join(slices.Compact(methodWords(p)), ", "), "the method as worded"},
		{basisDiffers(p), "the basis of the velocities"},
		{p.Survey.Date != "", "the date, which stands as that of the analysis if it is written as 2026-03-02"},
		{p.Survey.Operator != "", "the operator"},
		{p.Survey.Location != "", "the location in words"},
		{p.Survey.DepthReached > 0 && p.Survey.DepthReached != p.DepthModelled(), "the depth reached"},
		{p.Survey.WaterTable.Known, "the water table"},
		{p.Position.Easting.Known || p.Position.Northing.Known || p.Position.EPSG > 0, "the position in a grid"},
		{len(p.Notes) > len(profile.Doubts(p)), "notes on how the profile was read"},
	} {
		if l.is {
			list = append(list, l.what)
		}
	}
	return list
}

func some(p *profile.Profile, is func(*profile.Layer) bool) bool {
	return slices.ContainsFunc(p.Layers, func(l profile.Layer) bool { return is(&l) })
}

// basisDiffers reports whether a velocity has another basis than Read will
// take from the method.
func basisDiffers(p *profile.Profile) bool {
	read := basisOf(methodWords(p))
	for i := range p.Layers {
		if p.BasisOf(i) != read {
			return true
		}
	}
	return false
}
