package vs30

import "shearbook/profile"

// Reversal is a place where the velocity falls with depth.
type Reversal struct {
	Layer int     // index of the slower layer, below; of the layer itself where it falls inside
	Depth float64 // m below ground level of the interface; where the fall begins in a gradient layer
	Above float64 // m/s just above the interface; where the fall begins in a gradient layer
	Below float64 // m/s just below the interface, < Above; where the fall ends in a gradient layer
}

// Reversals returns, top down, every place between the depths from and to
// (m below ground level) where the velocity falls with depth: the interfaces
// strictly between them, and the layers whose own gradient falls, clipped to
// from and to. It returns nil where there is none. A refraction survey cannot
// see what lies below such a place.
func Reversals(layers []profile.Layer, from, to float64) []Reversal {
	var found []Reversal
	for i := range layers {
		l := &layers[i]
		if i > 0 && inside(l.Top, from, to) {
			above, below := velocitiesAt(layers, i)
			if Slower(below, above) {
				found = append(found, Reversal{Layer: i, Depth: l.Top, Above: above, Below: below})
			}
		}
		if top, bottom, ok := clip(l, from, to); ok && l.Gradient() && Slower(l.VsBottom, l.Vs) {
			found = append(found, Reversal{Layer: i, Depth: top, Above: l.VsAt(top), Below: l.VsAt(bottom)})
		}
	}
	return found
}

// Slower reports whether one velocity is below another by more than a part in
// 10⁹, the noise of what was computed of one number in two ways.
func Slower(v, than float64) bool { return than-v > 1e-9*than }

// inside reports whether depth z lies between from and to and touches neither.
func inside(z, from, to float64) bool { return z-from > Touching && to-z > Touching }

// velocitiesAt returns the velocities in m/s just above and just below the
// top of layer i > 0.
func velocitiesAt(layers []profile.Layer, i int) (above, below float64) {
	u := &layers[i-1]
	return u.VsAt(u.Bottom), layers[i].Vs
}
