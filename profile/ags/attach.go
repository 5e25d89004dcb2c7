package ags

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"sort"
	"strings"

	"shearbook/profile"
)

// stratumOf finds for each layer the stratum that holds most of it, -1 where
// most of it is in none; of a half-space, that at its top. It counts the
// layers of which another stratum holds a quarter or more.
func stratumOf(layers []profile.Layer, strata []stratum) (in []int, across int) {
	in = make([]int, len(layers))
	first := 0
	for i := range layers {
		l := &layers[i]
		bottom := l.Bottom
		if l.HalfSpace() {
			bottom = l.Top + 2*profile.Joint
		}
		for first < len(strata) && strata[first].bottom <= l.Top {
			first++
		}
		best, most, second, rest := -1, 0.0, 0.0, bottom-l.Top
		for k := first; k < len(strata) && strata[k].top < bottom; k++ {
			d := min(strata[k].bottom, bottom) - max(strata[k].top, l.Top)
			rest -= d
			switch {
			case d > most:
				best, most, second = k, d, most
			case d > second:
				second = d
			}
		}
		if rest > most {
			best = -1
		}
		in[i] = best
		if second >= (bottom-l.Top)/4 {
			across++
		}
	}
	return in, across
}

// attached are the quantities that layers get from tests, with the rule for
// several of them in one layer.
var attached = []struct {
	q    profile.Quantity
	g    profile.Given
	to   func(*profile.Layer) *float64
	rule string
	of   func([]result) float64
}{
	{profile.N, profile.GivenN, func(l *profile.Layer) *float64 { return &l.N }, "harmonic mean", harmonic},
	{profile.Su, profile.GivenSu, func(l *profile.Layer) *float64 { return &l.Su }, "lowest", lowest},
	{profile.PI, profile.GivenPI, func(l *profile.Layer) *float64 { return &l.PI }, "mean", mean},
	{profile.WaterContent, profile.GivenWaterContent, func(l *profile.Layer) *float64 { return &l.WaterContent }, "mean", mean},
	{profile.Density, profile.GivenDensity, func(l *profile.Layer) *float64 { return &l.Density }, "mean", mean},
}

// harmonic is the harmonic mean n/Σ(1/x), 0 where one of them is 0.
func harmonic(list []result) float64 {
	if len(list) == 1 {
		return list[0].value
	}
	sum := 0.0
	for i := range list {
		sum += 1 / list[i].value
	}
	return float64(len(list)) / sum
}

func lowest(list []result) float64 {
	x := list[0].value
	for i := range list {
		x = min(x, list[i].value)
	}
	return x
}

func mean(list []result) float64 {
	sum := 0.0
	for i := range list {
		sum += list[i].value
	}
	return sum / float64(len(list))
}

// attach gives the layers soil and the results of tests, and returns the
// notes on it.
func (r *reader) attach(h *hole, layers []profile.Layer) []profile.Note {
	in, across := stratumOf(layers, h.strata)
	for i, k := range in {
		if k >= 0 {
			layers[i].Soil = h.strata[k].soil
		}
	}
	var notes []profile.Note
	if across > 0 {
		text := profile.Plural(across, "layer") + " each lie in several strata; the soil named is that which holds most of the layer"
		notes = append(notes, profile.Note{ID: "layers-cross-strata", Text: strings.Replace(text, "1 layer each lie", "1 layer lies", 1), Place: r.at(h.at)})
	}
	var rules, near []string
	for _, a := range attached {
		list := h.resultsOf(a.q)
		if len(list) == 0 {
			continue
		}
		inside, beside := 0, 0
		for i := range layers {
			got, isInside := nearTests(&layers[i], i == len(layers)-1, in[i], h.strata, list)
			if len(got) == 0 {
				continue
			}
			if isInside {
				inside++
			} else {
				beside++
			}
			give(&layers[i], a.q, a.g, a.to, a.of, got)
		}
		if inside+beside == 0 {
			continue
		}
		rules = append(rules, fmt.Sprintf("%s is the %s of %s", a.q, a.rule, sourcesOf(list)))
		if beside > 0 {
			near = append(near, fmt.Sprintf("%s of %s", a.q, profile.Plural(beside, "layer")))
		}
	}
	if len(rules) > 0 {
		text := "of the tests inside a layer, " + strings.Join(rules, ", ")
		if len(near) > 0 {
			text += "; where none is inside, the nearest in the same stratum was taken (" + strings.Join(near, ", ") + ")"
		}
		notes = append(notes, profile.Note{ID: "tests-to-layers", Text: text, Place: r.at(h.at)})
	}
	return notes
}

// give gives a layer the result of its tests. It is refused where all of them
// are.
func give(l *profile.Layer, q profile.Quantity, g profile.Given, to func(*profile.Layer) *float64, of func([]result) float64, list []result) {
	*to(l) = of(list)
	l.Given |= g
	if q == profile.N {
		l.EnergyRatio = float32(energyOf(list))
		l.Refusal = !slices.ContainsFunc(list, func(x result) bool { return !x.refused })
	}
}

// energyOf is the energy ratio in % that turns the harmonic mean of blow counts
// into that of the counts each times its own; 0 where one of them has none.
func energyOf(list []result) float64 {
	same, sum, byEnergy := true, 0.0, 0.0
	for i := range list {
		x := &list[i]
		if x.energy == 0 {
			return 0
		}
		same = same && x.energy == list[0].energy
		sum, byEnergy = sum+1/x.value, byEnergy+1/(x.value*x.energy)
	}
	if same || math.IsInf(sum, 1) {
		return list[0].energy
	}
	return sum / byEnergy
}

// resultsOf are the results of one quantity, from the top down.
func (h *hole) resultsOf(q profile.Quantity) []result {
	var list []result
	for i := range h.results {
		if h.results[i].source.q == q {
			list = append(list, h.results[i])
		}
	}
	slices.SortStableFunc(list, func(a, b result) int { return cmp.Compare(a.depth, b.depth) })
	return list
}

// nearTests are the tests inside a layer; where there is none, the nearest to
// its middle in the same stratum.
func nearTests(l *profile.Layer, last bool, in int, strata []stratum, list []result) (got []result, inside bool) {
	from := sort.Search(len(list), func(i int) bool { return list[i].depth >= l.Top })
	to := from + sort.Search(len(list)-from, func(i int) bool { return list[from+i].depth >= l.Bottom })
	for last && to < len(list) && list[to].depth <= l.Bottom+profile.Joint {
		to++
	}
	if from < to {
		return list[from:to], true
	}
	if in < 0 {
		return nil, false
	}
	s, middle := &strata[in], (l.Top+l.Bottom)/2
	if l.HalfSpace() {
		middle = l.Top
	}
	// No test is inside, so those beside it are at from-1 and from.
	above, below := math.Inf(1), math.Inf(1)
	if from > 0 && list[from-1].depth >= s.top {
		above = middle - list[from-1].depth
	}
	if from < len(list) && list[from].depth < s.bottom {
		below = list[from].depth - middle
	}
	switch {
	case math.IsInf(above, 1) && math.IsInf(below, 1):
		return nil, false
	case above <= below+profile.Joint:
		return list[from-1 : from], false
	}
	return list[from : from+1], false
}

// sourcesOf names the headings that results stand under.
func sourcesOf(list []result) string {
	var names []string
	for i := range list {
		if name := list[i].source.name; !slices.Contains(names, name) {
			names = append(names, name)
		}
	}
	last := len(names) - 1
	if last == 0 {
		return names[0]
	}
	return strings.Join(names[:last], ", ") + " and " + names[last]
}
