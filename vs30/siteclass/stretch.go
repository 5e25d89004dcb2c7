package siteclass

import (
	"math"

	"shearbook/profile"
	"shearbook/vs30"
)

// stretch is neighbouring ground of one type, in a code that types the ground
// layer by layer.
type stretch struct {
	kind             int     // index of the type
	top, bottom      float64 // m below ground level
	slowest, fastest float64 // m/s
}

// stretches cuts the ground between the datum and the depth to (m below
// ground level) where its type changes. kindOf gives the type of ground of a
// layer at a velocity in m/s, and bounds are the velocities at which it may
// change. Ground of one type is one stretch however finely it is layered.
func (r *ruling) stretches(to float64, bounds []float64, kindOf func(l *profile.Layer, v float64) int) []stretch {
	var all []stretch
	for i := range r.layers {
		l := &r.layers[i]
		top, bottom := max(l.Top, r.datum), min(l.Bottom, to)
		if bottom-top <= vs30.Touching {
			continue
		}
		if !l.Gradient() {
			all = joined(all, stretch{kindOf(l, l.Vs), top, bottom, l.Vs, l.Vs})
			continue
		}
		for _, part := range cutAt(l, top, bottom, bounds) {
			part.kind = kindOf(l, l.VsAt((part.top+part.bottom)/2))
			all = joined(all, part)
		}
	}
	return all
}

// cutAt returns the parts of a gradient layer between two depths, cut where
// its velocity passes one of the bounds (m/s).
func cutAt(l *profile.Layer, top, bottom float64, bounds []float64) []stretch {
	var parts []stretch
	v0, v1 := l.VsAt(top), l.VsAt(bottom)
	for z := top; bottom-z > vs30.Touching; {
		end := bottom
		for _, b := range bounds {
			if at := top + (bottom-top)*(b-v0)/(v1-v0); at-z > vs30.Touching && at < end {
				end = at
			}
		}
		a, b := l.VsAt(z), l.VsAt(end)
		parts = append(parts, stretch{top: z, bottom: end, slowest: min(a, b), fastest: max(a, b)})
		z = end
	}
	return parts
}

// joined adds a part to the stretches, to the last of them where it is of the
// same type.
func joined(all []stretch, part stretch) []stretch {
	if n := len(all); n > 0 && all[n-1].kind == part.kind {
		last := &all[n-1]
		last.bottom, last.slowest, last.fastest = part.bottom, min(last.slowest, part.slowest), max(last.fastest, part.fastest)
		return all
	}
	return append(all, part)
}

// stretchSteps holds the slowest and the fastest ground of a stretch against
// the bounds of its type. Where a gradient passes a bound the stretch ends
// there, and ground just inside is compared.
func (r *ruling) stretchSteps(s stretch, within Range, u profile.Unit, text, clause string) {
	inside := func(v, bound, side float64) float64 {
		if equal(v, bound) {
			return bound * (1 + side*beside)
		}
		return v
	}
	text += " from " + r.length(s.top) + depthEnd(s.bottom)
	if low := within.Lower; low.Op != Open {
		v := s.slowest / u.Factor
		if low.Op == Above {
			v = inside(v, low.Value, 1)
		}
		r.d.Steps = append(r.d.Steps, newStep(text+", slowest", clause, v, low, true, u))
	}
	if high := within.Upper; high.Op != Open {
		v := s.fastest / u.Factor
		if high.Op == Below {
			v = inside(v, high.Value, -1)
		}
		r.d.Steps = append(r.d.Steps, newStep(text+", fastest", clause, v, high, false, u))
	}
}

func depthEnd(z float64) string {
	if math.IsInf(z, 1) {
		return " down"
	}
	return " to " + metres(z)
}
