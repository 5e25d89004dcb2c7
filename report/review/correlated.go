package review

import (
	"fmt"
	"math"

	"shearbook/profile"
)

// relation is a published estimate of Vs (m/s) from N alone, a·N^b.
type relation struct {
	name string
	a, b float64
}

// relations are those that are recognised by their velocities.
var relations = []relation{
	{"Imai & Tonouchi (1982), 97.0 N^0.314", 97.0, 0.314},
	{"Imai (1977), 91 N^0.337", 91, 0.337},
	{"Ohta & Goto (1978), 85.35 N^0.348", 85.35, 0.348},
	{"Specifications for Highway Bridges Part V (Japan), clay, 100 N^(1/3)", 100, 1. / 3},
	{"Specifications for Highway Bridges Part V (Japan), sand, 80 N^(1/3)", 80, 1. / 3},
	{"Seed, Idriss & Arango (1983), 56.4 N^0.5 (from memory)", 56.4, 0.5},
	{"Seed & Idriss (1981), 61.4 N^0.5 (from memory)", 61.4, 0.5},
	{"Sykora & Stokoe (1983), 100.5 N^0.29 (from memory)", 100.5, 0.29},
}

// correlatedAsMeasured tells estimates that are passed as measured.
func correlatedAsMeasured(x *examination) {
	least, within := int(x.limit("layers")), x.limit("within")/100
	x.each(func(e *Entry) {
		p := e.Profile
		if p.NoVelocity {
			return
		}
		if i := ownWord(e); i >= 0 {
			x.add(e.layer(i), "the file says of this layer that its velocity is correlated, the submission says of the profile that it is "+p.Survey.Basis.String(),
				p.Survey.Basis.String(), "correlated")
		}
		if p.Survey.Basis == profile.Correlated {
			return
		}
		if r, i, n := recognised(p, least, within); n > 0 {
			x.add(e.layer(i), fmt.Sprintf("%s gives the velocity of every layer with a stated N, which measured velocities would not follow", r.name),
				"basis "+p.Survey.Basis.String(), count(n, "layer")+" met")
		}
	})
	x.eachCase(func(c *Case) {
		claimed, found := c.Claim.Basis, c.Decision.Basis
		if c.Err == nil && (claimed == "measured" || claimed == "inverted") && (found == "correlated" || found == "mixed") {
			x.add(c.place(), "velocities are said to be "+claimed+", and the data say "+found, claimed, found)
		}
	})
}

// ownWord returns the first layer that is correlated by its file where the
// notebook says otherwise of the profile, −1 if there is none.
func ownWord(e *Entry) int {
	if e.AsRead == nil || e.Profile.Survey.Basis == e.AsRead.Survey.Basis || e.Profile.Survey.Basis == profile.Correlated {
		return -1
	}
	for i := range e.AsRead.Layers {
		if e.AsRead.BasisOf(i) == profile.Correlated {
			return i
		}
	}
	return -1
}

// recognised returns the relation that gives the velocity of every layer with
// a stated N that is not said to be correlated, the first such layer and how
// many they are; 0 if there is no such relation, or fewer than least layers.
func recognised(p *profile.Profile, least int, within float64) (r relation, at, n int) {
	for _, r := range relations {
		at, n = -1, 0
		for i := range p.Layers {
			l := &p.Layers[i]
			if !l.Has(profile.GivenN) || l.N <= 0 || p.BasisOf(i) == profile.Correlated {
				continue
			}
			v := r.a * math.Pow(l.N, r.b)
			if math.Abs(l.Vs-v) > max(within*v, 0.5) { // velocities are printed to 1 m/s
				n = 0
				break
			}
			if n++; at < 0 {
				at = i
			}
		}
		if n >= max(least, 1) {
			return r, at, n
		}
	}
	return relation{}, 0, 0
}
