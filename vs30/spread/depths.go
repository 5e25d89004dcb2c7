package spread

import (
	"math"
	"slices"

	"shearbook/profile"
	"shearbook/vs30"
)

// Slice is a range of depth inside which no line changes its layer.
type Slice struct {
	Top, Bottom float64 // m below ground level

	Lines     int     // how many lines reach its bottom
	Geometric float64 // m/s: geometric mean of their velocities
	SigmaLn   float64 // sample standard deviation of their ln V, with n−1; 0 for one line
	Mean      float64 // m/s: that of the mean of their slownesses
}

// Slices returns the velocities of several lines against depth, between the
// depths from and to in m below ground level, cut at every boundary of every
// line, and every step m besides; a step that is not positive adds no cuts, and
// one that would add more than 10,000 is made larger. A gradient layer counts
// with its time average in each slice. A slice that no line reaches the bottom
// of is left out.
func Slices(lines []Line, from, to, step float64) []Slice {
	var list []Slice
	eachSlice(lines, from, to, step, func(top, bottom float64, v []float64, _ []*profile.Layer) {
		s := Slice{Top: top, Bottom: bottom}
		ln, slow := 0.0, 0.0
		known := v[:0:0]
		for _, x := range v {
			if x > 0 {
				known = append(known, x)
				ln += math.Log(x)
				slow += 1 / x
			}
		}
		if s.Lines = len(known); s.Lines == 0 {
			return
		}
		n := float64(s.Lines)
		s.Geometric, s.Mean = math.Exp(ln/n), n/slow
		s.SigmaLn = deviation(known, s.Geometric)
		list = append(list, s)
	})
	return list
}

// eachSlice calls f for each slice with the velocities of the lines in it, 0
// for one that ends above its bottom, and their layers. f must keep neither.
func eachSlice(lines []Line, from, to, step float64, f func(top, bottom float64, v []float64, layers []*profile.Layer)) {
	cuts := cutsOf(lines, from, to, step)
	at := make([]int, len(lines)) // the layer that each line has come to
	v, layers := make([]float64, len(lines)), make([]*profile.Layer, len(lines))
	for k := 1; k < len(cuts); k++ {
		top, bottom := cuts[k-1], cuts[k]
		middle := top + (bottom-top)/2
		for i := range lines {
			own := lines[i].Layers
			for at[i] < len(own) && own[at[i]].Bottom <= middle {
				at[i]++
			}
			v[i], layers[i] = 0, nil
			if at[i] == len(own) {
				continue
			}
			if t, err := vs30.TravelTime(own[at[i]:], top, bottom); err == nil {
				v[i], layers[i] = (bottom-top)/t, &own[at[i]]
			}
		}
		f(top, bottom, v, layers)
	}
}

// maxCuts is the largest number of cuts that a step makes.
const maxCuts = 10_000

// cutsOf returns the depths between which no line changes its layer.
func cutsOf(lines []Line, from, to, step float64) []float64 {
	deepest := from
	for i := range lines {
		if n := len(lines[i].Layers); n > 0 {
			deepest = max(deepest, lines[i].Layers[n-1].Bottom)
		}
	}
	if to = min(to, deepest); !(to > from) || math.IsInf(to, 0) {
		return nil
	}
	cuts := []float64{from, to}
	for i := range lines {
		for j := range lines[i].Layers {
			if z := lines[i].Layers[j].Bottom; z > from && z < to {
				cuts = append(cuts, z)
			}
		}
	}
	if step > 0 {
		step = max(step, (to-from)/maxCuts)
		for k := 1; from+float64(k)*step < to; k++ {
			cuts = append(cuts, from+float64(k)*step)
		}
	}
	slices.Sort(cuts)
	return slices.CompactFunc(cuts, func(a, b float64) bool { return math.Abs(b-a) <= vs30.Touching })
}
