// Package extend carries a profile that ends above the averaging depth down
// to it. Every way of doing so is an assumption about ground that nobody
// measured: nothing here is applied unless the user asks for it, and each
// comes with the note that must stand beside its result.
//
// One file holds one relation; All lists them. A relation that does not hold
// for a profile refuses and says why.
package extend

import (
	"fmt"

	"shearbook/profile"
	"shearbook/vs30"
)

// ConstantVelocity returns the layers continued to depth to (m below ground
// level) with the deepest velocity they have. What is added is one layer of
// its own at the end, which states a velocity and nothing else, so that a
// working shows it on its own line; its index is len(layers). Layers that
// reach to already, and empty ones, come back as they are. The result is
// always a new slice.
//
// Source: Boore (2004), Estimating Vs(30) (or NEHRP site classes) from
// shallow velocity models (depths < 30 m), Bulletin of the Seismological
// Society of America 94(2):591–597, doi:10.1785/0120030105, according to whose
// abstract the average comes out too low more often than not. Where the ground
// is slower below the survey it comes out too high.
func ConstantVelocity(layers []profile.Layer, to float64) []profile.Layer {
	out := make([]profile.Layer, len(layers), len(layers)+1)
	copy(out, layers)
	if len(layers) == 0 {
		return out
	}
	last := &layers[len(layers)-1]
	if last.Bottom >= to-vs30.Touching {
		return out
	}
	return append(out, profile.Layer{Top: last.Bottom, Bottom: to, Vs: last.VsAt(last.Bottom)})
}

// Note is the note that must stand beside an average over thickness m, > 0,
// below depth from (m below ground level) of layers that ConstantVelocity
// continued down to from+thickness. layers are those of the profile, before
// they were continued. It is the zero Note where they reach far enough and
// nothing was added.
func Note(layers []profile.Layer, from, thickness float64) profile.Note {
	if len(layers) == 0 {
		return profile.Note{}
	}
	last := &layers[len(layers)-1]
	to := from + thickness
	if last.Bottom >= to-vs30.Touching {
		return profile.Note{}
	}
	added := to - max(last.Bottom, from)
	return profile.Note{ID: "extended", Text: fmt.Sprintf(
		"the profile ends %.4g m below ground level; below it the deepest velocity, %.4g m/s, "+
			"is taken to go on unchanged over %.4g m, %.0f %% of the averaging depth "+
			"(constant-velocity extension, Boore 2004, BSSA 94(2):591–597, doi:10.1785/0120030105); "+
			"the average is too high where the ground is slower there",
		last.Bottom, last.VsAt(last.Bottom), added, 100*added/thickness)}
}

// constantVelocity returns ConstantVelocity as a relation. It is the only one
// that holds from any datum, over any depth and for any profile; where the
// velocity falls at the bottom of the profile the estimate carries a doubt.
func constantVelocity() *Relation {
	return &Relation{
		ID:   "constant-velocity",
		Name: "constant velocity",
		Source: "Boore (2004), Estimating Vs(30) (or NEHRP site classes) from shallow velocity models (depths < 30 m), " +
			"BSSA 94(2):591–597, doi:10.1785/0120030105",
		Cite:     "Boore 2004, BSSA 94(2):591–597, doi:10.1785/0120030105",
		Region:   "any",
		Limits:   "none",
		Standing: OneSource,
		estimate: func(_ *Relation, g *ground) (result, *Refusal) { return lastVelocity(g), nil },
	}
}
