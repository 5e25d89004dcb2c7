package vs30

import (
	"math"

	"shearbook/profile"
)

// Point is one point of the running average against depth.
type Point struct {
	Depth   float64 // m below ground level
	Average float64 // m/s, from the datum down to Depth
}

// curveSteps is the largest number of steps that Curve takes between the
// interfaces.
const curveSteps = 10_000

// Curve returns the time-averaged velocity from the datum from down to each
// of a sequence of depths, for a figure: at from itself, where it is the
// velocity just below; every step m below it; at each interface; and at to.
// Every point is exact. Where the layers end above to the curve ends with
// them; it is nil where they end above from.
//
// A step that is not positive leaves the interfaces only, and one that would
// take more than 10,000 steps is made larger. For an infinite to the curve
// ends at the lowest boundary.
func Curve(layers []profile.Layer, from, to, step float64) []Point {
	to = min(to, depthModelled(layers, to))
	if !(step > 0) {
		step = math.Inf(1)
	}
	step = max(step, (to-from)/curveSteps)

	var points []Point
	t, k := 0.0, 1 // time down to top; the next step
	for i := range layers {
		l := &layers[i]
		top, bottom, ok := clip(l, from, to)
		if !ok {
			continue
		}
		if points == nil {
			points = append(points, Point{from, l.VsAt(top)})
		}
		for ; from+float64(k)*step < bottom-Touching; k++ {
			if z := from + float64(k)*step; z > top+Touching {
				points = append(points, Point{z, (z - from) / (t + timeInside(l, top, z))})
			}
		}
		t += timeInside(l, top, bottom)
		points = append(points, Point{bottom, (bottom - from) / t})
	}
	return points
}

// depthModelled returns the depth in m of the lowest boundary if to is
// infinite, and to if it is not.
func depthModelled(layers []profile.Layer, to float64) float64 {
	if !math.IsInf(to, 1) {
		return to
	}
	p := profile.Profile{Layers: layers}
	return p.DepthModelled()
}
