package review

import (
	"encoding/binary"
	"fmt"
	"hash/fnv"
	"math"
	"slices"

	"shearbook/profile"
)

// patternRules are about profiles that look made rather than measured.
func patternRules() []Rule {
	return []Rule{
		{ID: "regular", Weight: Explain, check: regular, Practice: true,
			Summary: "All layers are equally thick, and their velocities are equal or go up in equal steps or in one ratio",
			Source:  "common practice: ground is not so regular",
			Limits:  []Limit{{"layers", 4, "", "from which a profile is looked at", 0}}},
		{ID: "copied", Weight: Answer, check: copied, Practice: true,
			Summary: "Two profiles have the same layers, or the same layers with all velocities in one ratio",
			Source:  "common practice: no two surveys find the same",
			Limits:  []Limit{{"layers", 3, "", "from which a profile is looked at", 0}}},
	}
}

func regular(x *examination) {
	least := int(x.limit("layers"))
	x.each(func(e *Entry) {
		layers := e.Profile.Layers
		if len(layers) < max(least, 3) || e.Profile.NoVelocity {
			return
		}
		finite := layers
		if layers[len(layers)-1].HalfSpace() {
			finite = layers[:len(layers)-1]
		}
		for _, l := range finite[1:] {
			if !near(l.Thickness(), finite[0].Thickness()) || l.Gradient() {
				return
			}
		}
		if pattern := patternOf(layers, halfPlace(e.Profile)); pattern != "" {
			x.add(e.at(), fmt.Sprintf("all layers are %s thick and their velocities %s", metres(finite[0].Thickness()), pattern), count(len(layers), "layer"), "")
		}
	})
}

// patternOf words the pattern of velocities that are printed to half a place,
// "" if there is none.
func patternOf(layers []profile.Layer, half float64) string {
	n := len(layers)
	step := (layers[n-1].Vs - layers[0].Vs) / float64(n-1)
	ratio := math.Pow(layers[n-1].Vs/layers[0].Vs, 1/float64(n-1))
	steps, ratios := true, true
	for i, l := range layers {
		steps = steps && math.Abs(l.Vs-layers[0].Vs-float64(i)*step) <= 2*half+1e-6*l.Vs
		ratios = ratios && math.Abs(l.Vs-layers[0].Vs*math.Pow(ratio, float64(i))) <= 2*half+1e-6*l.Vs
	}
	switch {
	case steps && math.Abs(step) < half/10:
		return "are all equal"
	case steps:
		return "change in equal steps of " + speed(step)
	case ratios:
		return "change in one ratio, " + short(ratio, 4)
	}
	return ""
}

// near reports whether two numbers that were printed are the same.
func near(a, b float64) bool { return math.Abs(a-b) <= 1e-6*max(1, math.Abs(a), math.Abs(b)) }

func copied(x *examination) {
	least := int(x.limit("layers"))
	alike := map[uint64][]*Entry{} // by their boundaries
	x.each(func(e *Entry) {
		if len(e.Profile.Layers) < max(least, 2) || e.Profile.NoVelocity || len(e.Profile.Layers) > maxCompared {
			return
		}
		key := boundaries(e.Profile)
		for _, other := range alike[key] {
			if ratio, ok := inOneRatio(e.Profile, other.Profile); ok {
				x.copy(e, other, ratio)
				return
			}
		}
		if len(alike[key]) < maxAlike {
			alike[key] = append(alike[key], e)
		}
	})
}

// maxAlike is how many profiles with the same boundaries are compared with
// each other.
const maxAlike = 50

// copy tells one profile that is another's.
func (x *examination) copy(e, other *Entry, ratio float64) {
	found := count(len(e.Profile.Layers), "layer")
	name := profile.Quote(other.Profile.Name) + where(other)
	switch {
	case sameSource(e, other):
		x.addAs(Note, e.at(), "these are the same data as those of profile "+name+": one file is named twice", "", found)
	case ratio == 1:
		x.add(e.at(), "the layers are those of profile "+name, "", found)
	default:
		x.add(e.at(), fmt.Sprintf("the layers are those of profile %s with every velocity times %s", name, short(ratio, 4)), "", found)
	}
}

// sameSource reports whether two profiles are one of one file.
func sameSource(a, b *Entry) bool {
	p, q := a.Profile, b.Profile
	if a.AsRead != nil && b.AsRead != nil { // the names that the file has
		p, q = a.AsRead, b.AsRead
	}
	return p.Reading != nil && q.Reading != nil && p.Reading.File == q.Reading.File && p.Reading.SHA256 == q.Reading.SHA256 && p.Name == q.Name
}

// inOneRatio returns the ratio of the velocities of a profile to those of
// another with the same boundaries, and false where no single ratio holds
// within half a unit of the last printed place of each. It is 1 where they
// are the same.
func inOneRatio(p, q *profile.Profile) (float64, bool) {
	if p == q || slices.EqualFunc(p.Layers, q.Layers, func(a, b profile.Layer) bool { return near(a.Vs, b.Vs) && near(a.VsBottom, b.VsBottom) }) {
		return 1, true
	}
	low, high := 0.0, math.Inf(1)
	hp, hq := halfPlace(p), halfPlace(q)
	meet := func(a, b float64) {
		if a == 0 && b == 0 {
			return
		}
		low, high = max(low, (a-hp)/(b+hq)), min(high, (a+hp)/max(b-hq, 1e-9))
	}
	for i := range p.Layers {
		meet(p.Layers[i].Vs, q.Layers[i].Vs)
		meet(p.Layers[i].VsBottom, q.Layers[i].VsBottom)
	}
	ratio := p.Layers[0].Vs / q.Layers[0].Vs
	return min(max(ratio, low), high), low <= high*(1+noise) && !same(ratio, 0)
}

// halfPlace is half a unit, in m/s, of the last place to which the velocities
// of a profile are printed: the fewest decimals that give all of them.
func halfPlace(p *profile.Profile) float64 {
	factor := 1.0
	if p.Reading != nil {
		if u, ok := profile.ParseUnit(p.Reading.Unit(profile.Vs), profile.Velocity); ok {
			factor = u.Factor
		}
	}
	for _, place := range []float64{1, 0.1, 0.01} {
		if !slices.ContainsFunc(p.Layers, func(l profile.Layer) bool {
			n := l.Vs / factor / place
			return math.Abs(n-math.Round(n)) > 1e-6*math.Max(1, n)
		}) {
			return place / 2 * factor
		}
	}
	return 0.0005 * factor
}

func where(e *Entry) string {
	if at := e.at(); at.File != "" {
		return " (" + at.Place.String() + ")"
	}
	return ""
}

// boundaries is a digest of the boundaries in millimetres.
func boundaries(p *profile.Profile) uint64 {
	h := fnv.New64a()
	var buf [8]byte
	for _, l := range p.Layers {
		v := l.Bottom * 1000
		if math.IsInf(v, 0) {
			v = -1
		}
		binary.LittleEndian.PutUint64(buf[:], uint64(int64(math.Round(v))))
		h.Write(buf[:]) // a hash takes everything
	}
	return h.Sum64() ^ uint64(len(p.Layers))
}
