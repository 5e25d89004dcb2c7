package siteclass

import (
	"math"

	"shearbook/profile"
	"shearbook/vs30"
)

// cover is the ground above the stiff ground: above the first depth at which
// a velocity is reached and from which it is kept, as far down as the profile
// was looked at.
type cover struct {
	from, bottom float64 // m below ground level
	found        bool    // the stiff ground is there; else bottom is where the looking ended
	stiff        float64 // m/s; the slowest of the stiff ground, just above the bound where it grows through it; or the last of the cover
}

// thickness returns the thickness of the cover in m, 0 if there is none.
func (c cover) thickness() float64 {
	if t := c.bottom - c.from; t > vs30.Touching {
		return t
	}
	return 0
}

// average returns the time-averaged velocity of the cover in m/s, 0 where it
// has no thickness.
func (c cover) average(layers []profile.Layer) float64 {
	if c.thickness() == 0 {
		return 0
	}
	v, err := vs30.Average(layers, c.from, c.thickness())
	if err != nil {
		return 0
	}
	return v
}

// coverAbove looks for ground whose velocity satisfies the bound, given in a
// unit, between the depths from and to. Ground that begins at depth to counts
// as found.
func coverAbove(layers []profile.Layer, from, to float64, bound Limit, u profile.Unit) cover {
	stiffEnough := func(v float64) bool { return bound.holds(v/u.Factor, true) }
	c := cover{from: from, bottom: to, stiff: math.Inf(1)}
	if end := layers[len(layers)-1].Bottom; end < to {
		c.bottom = end
	}
	for i := len(layers) - 1; i >= 0; i-- {
		l := &layers[i]
		begins := l.Top >= to || equal(l.Top, to)
		if begins && (!equal(l.Top, to) || !stiffEnough(l.Vs)) {
			continue
		}
		top, bottom := max(l.Top, from), min(l.Bottom, max(to, l.Top))
		if bottom <= from {
			break
		}
		v0, v1 := l.VsAt(top), l.VsAt(bottom)
		if !stiffEnough(v1) {
			if !c.found {
				c.stiff = v1
			}
			break
		}
		c.found, c.bottom = true, top
		if !stiffEnough(v0) {
			c.bottom = top + (bottom-top)*min(1, (bound.Value*u.Factor-v0)/(v1-v0))
			c.stiff = min(c.stiff, bound.Value*u.Factor*(1+beside))
			break
		}
		c.stiff = min(c.stiff, v0, v1)
	}
	return c
}
