package vs30

import (
	"errors"
	"fmt"

	"shearbook/profile"
)

// Crossing is where a profile comes up to a velocity.
type Crossing struct {
	Reached bool    // whether it does at all
	Depth   float64 // m below ground level at which it first does; 0 if it does not
	Stays   bool    // whether it is nowhere slower below Depth, as far as the profile goes
}

// DepthTo returns the depth at which the profile first comes up to velocity
// (m/s): the top of a layer, or a depth inside one whose velocity grows. It
// answers for the profile alone: Stays says nothing of the ground below it.
//
// One part in 10⁹ below velocity counts as velocity, so that a value that
// went through a conversion of units is still itself.
func DepthTo(layers []profile.Layer, velocity float64) Crossing {
	return depthTo(layers, 0, velocity)
}

// depthTo is DepthTo for what lies below depth from (m below ground level).
func depthTo(layers []profile.Layer, from, velocity float64) Crossing {
	var c Crossing
	bound := velocity * (1 - 1e-9)
	for i := range layers {
		l := &layers[i]
		if l.Bottom-from <= Touching {
			continue
		}
		top := max(l.Top, from)
		v0, v1 := l.VsAt(top), l.VsAt(l.Bottom)
		switch {
		case c.Reached:
			c.Stays = c.Stays && v0 >= bound && v1 >= bound
		case v0 >= bound:
			c = Crossing{Reached: true, Depth: top, Stays: v1 >= bound}
		case v1 >= bound:
			z := top + (l.Bottom-top)*min(1, (velocity-v0)/(v1-v0))
			c = Crossing{Reached: true, Depth: z, Stays: true}
		}
	}
	return c
}

// ErrNoRock is the error of a profile that nowhere comes up to the velocity
// of rock.
var ErrNoRock = errors.New("the profile does not come up to the velocity of rock")

// ErrNoSoil is the error of a profile that is rock from the datum down.
var ErrNoSoil = errors.New("there is no soil above the rock")

// AboveRock returns the time-averaged velocity in m/s from the depth from (m
// below ground level) down to the first depth below it at which the velocity
// is rock (m/s) or more, and that depth in m below ground level. It does not
// ask whether the velocity falls again below; DepthTo does. The error is
// ErrNoRock where the profile nowhere comes up to rock, and ErrNoSoil where it
// is rock at from.
func AboveRock(layers []profile.Layer, from, rock float64) (velocity, depth float64, err error) {
	c := depthTo(layers, from, rock)
	if !c.Reached {
		return 0, 0, fmt.Errorf("%w, %.4g m/s", ErrNoRock, rock)
	}
	if c.Depth-from <= Touching {
		return 0, c.Depth, fmt.Errorf("%w: at the datum, %.4g m below ground level, the velocity is %.4g m/s or more",
			ErrNoSoil, from, rock)
	}
	velocity, err = Average(layers, from, c.Depth-from)
	return velocity, c.Depth, err
}
