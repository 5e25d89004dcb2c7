package sitexml

import (
	"fmt"
	"math"
	"strings"

	"shearbook/profile"
)

// The Vs30 that a file states may come from another profile than the one beside
// it, or from a proxy; averageApart is how far it may lie from that of the
// profile and still be the same, relative to it (our choice).
const (
	averageDepth = 30.0 // m
	averageApart = 0.01
)

// otherAverage says that the Vs30 that the file states is not that of the
// profile,
//
//	Vs30 = 30 m / Σ(hᵢ/vᵢ)
//
// by more than averageApart and the rounding of the printed number. Of a profile
// that does not reach 30 m nothing is said.
func otherAverage(p *profile.Profile) (text string, ok bool) {
	stated := allStated(p, "analysis/velocityS30")
	own, reaches := average(p.Layers)
	if len(stated) == 0 || !reaches {
		return "", false
	}
	v, _, number := parseQuantity(stated[0])
	if !number || v <= 0 || math.Abs(v-own) <= max(averageApart*own, rounding(stated[0])) {
		return "", false
	}
	text = fmt.Sprintf("the file states a velocityS30 of %.5g m/s, but that of this profile is %.1f m/s, %+.1f %% from it", v, own, 100*(own/v-1))
	if class := allStated(p, "siteDescription/siteMorphology/siteClassEC8"); len(class) > 0 {
		text += "; its siteClassEC8 " + profile.Quote(class[0]) + " may go with the former"
	}
	return text, true
}

// average is Vs30 of layers in m/s, false where they end above 30 m.
func average(layers []profile.Layer) (v float64, ok bool) {
	time := 0.0
	for i := range layers {
		l := &layers[i]
		time += (math.Min(l.Bottom, averageDepth) - l.Top) / l.Vs
		if l.Bottom >= averageDepth-profile.Joint {
			return averageDepth / time, true
		}
	}
	return 0, false
}

// rounding is half of the last digit that is printed of a number.
func rounding(text string) float64 {
	number, _, _ := strings.Cut(text, " ")
	_, decimals, _ := strings.Cut(number, ".")
	return 0.5 * math.Pow10(-len(decimals))
}
