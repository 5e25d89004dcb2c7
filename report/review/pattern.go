package review

import (
	"encoding/binary"
	"fmt"
	"hash/fnv"
	"math"

	"shearbook/profile"
)

// patternRules are about profiles that look made rather than measured.
func patternRules() []Rule {
	return []Rule{
		{ID: "regular", Weight: Explain, check: regular, Practice: true,
			Summary: "All layers are equally thick, and their velocities are equal or go up in equal steps or in one ratio",
			Source:  "common practice: ground is not so regular",
			Limits:  []Limit{{"layers", 4, "", "from which a profile is looked at"}}},
		{ID: "copied", Weight: Answer, check: copied, Practice: true,
			Summary: "Two profiles have the same layers, or the same layers with all velocities in one ratio",
			Source:  "common practice: no two surveys find the same",
			Limits:  []Limit{{"layers", 3, "", "from which a profile is looked at"}}},
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
		if pattern := patternOf(layers); pattern != "" {
			x.add(e.at(), fmt.Sprintf("all layers are %s thick and their velocities %s", metres(finite[0].Thickness()), pattern), count(len(layers), "layer"), "")
		}
	})
}

// patternOf words the pattern of the velocities, "" if there is none.
func patternOf(layers []profile.Layer) string {
	step, ratio := layers[1].Vs-layers[0].Vs, layers[1].Vs/layers[0].Vs
	steps, ratios := true, true
	for i := 2; i < len(layers); i++ {
		steps = steps && near(layers[i].Vs-layers[i-1].Vs, step)
		ratios = ratios && near(layers[i].Vs/layers[i-1].Vs, ratio)
	}
	switch {
	case steps && near(step, 0):
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
	exact, scaled := map[uint64]*Entry{}, map[uint64]*Entry{}
	x.each(func(e *Entry) {
		if len(e.Profile.Layers) < max(least, 2) || e.Profile.NoVelocity {
			return
		}
		whole, shape := fingerprint(e.Profile, 1), fingerprint(e.Profile, e.Profile.Layers[0].Vs)
		if other := exact[whole]; other != nil {
			x.add(e.at(), "the layers are those of profile "+profile.Quote(other.Profile.Name)+where(other), "", count(len(e.Profile.Layers), "layer"))
			return
		}
		exact[whole] = e
		if other := scaled[shape]; other != nil {
			x.add(e.at(), fmt.Sprintf("the layers are those of profile %s with every velocity times %s%s", profile.Quote(other.Profile.Name),
				short(e.Profile.Layers[0].Vs/other.Profile.Layers[0].Vs, 4), where(other)), "", count(len(e.Profile.Layers), "layer"))
			return
		}
		scaled[shape] = e
	})
}

func where(e *Entry) string {
	if at := e.at(); at.File != "" {
		return " (" + at.Place.String() + ")"
	}
	return ""
}

// fingerprint is a digest of the boundaries in millimetres and the velocities
// over unit, to six digits.
func fingerprint(p *profile.Profile, unit float64) uint64 {
	h := fnv.New64a()
	var buf [8]byte
	put := func(v float64) {
		if math.IsInf(v, 0) {
			v = -1
		}
		binary.LittleEndian.PutUint64(buf[:], uint64(int64(math.Round(v))))
		h.Write(buf[:]) // a hash takes everything
	}
	for _, l := range p.Layers {
		put(l.Bottom * 1000)
		put(l.Vs / unit * 1e6)
		put(l.VsBottom / unit * 1e6)
	}
	return h.Sum64()
}
