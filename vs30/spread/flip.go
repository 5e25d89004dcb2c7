package spread

import (
	"fmt"
	"math"

	"shearbook/profile"
	"shearbook/vs30"
)

// Flip is what it takes for an average to come to a bound between two classes.
// At the bound itself the class is the softer one: to leave it upward takes
// more than what is given here, however little more.
type Flip struct {
	Class    string  // on the other side of the bound
	Bound    float64 // m/s: what the average would have to be
	Velocity float64 // m/s: what it is
	Factor   float64 // Bound / Velocity: on the velocities of all layers together
	Time     float64 // s: Thickness/Bound − Thickness/Velocity, by how much the travel time would have to grow; negative where it would have to shrink

	Layers []LayerFlip // one for each layer inside the averaging depth, from the top down
}

// LayerFlip is what it takes of one layer, the others left as they are.
type LayerFlip struct {
	Layer int // index into the layers

	// Factor is that on the velocity of the layer, of its whole thickness:
	//
	//	f = tᵢ / (tᵢ + Time)
	//
	// 0 where there is none.
	Factor float64

	Velocity float64 // m/s: what the layer would then have, its time average; 0 where there is none

	// Impossible says why the layer alone cannot do it; "" where it can. A
	// layer that takes less time than would have to be saved cannot, however
	// stiff; nor is a velocity looked at that no ground has.
	Impossible string
}

// Possible reports whether the layer alone can do it.
func (l *LayerFlip) Possible() bool { return l.Impossible == "" }

// Easiest returns the layer that would have to change least, by |ln Factor|,
// and false where none alone can.
func (f *Flip) Easiest() (LayerFlip, bool) {
	best, found := LayerFlip{}, false
	for _, l := range f.Layers {
		if l.Possible() && (!found || math.Abs(math.Log(l.Factor)) < math.Abs(math.Log(best.Factor))) {
			best, found = l, true
		}
	}
	return best, found
}

// Flips returns what it would take for the class of the average over thickness
// m below depth from to flip to the next softer and to the next stiffer one;
// nil where there is none. The errors are those of vs30.Average and of Classes
// that are none.
func Flips(layers []profile.Layer, from, thickness float64, c Classes) (softer, stiffer *Flip, err error) {
	if err := c.check(); err != nil {
		return nil, nil, err
	}
	w, err := vs30.Work(layers, from, thickness)
	if err != nil {
		return nil, nil, err
	}
	i := c.index(w.Velocity)
	if i > 0 {
		softer = flipTo(w, c.Bounds[i-1], c.Names[i-1])
	}
	if i < len(c.Bounds) {
		stiffer = flipTo(w, c.Bounds[i], c.Names[i+1])
	}
	return softer, stiffer, nil
}

// flipTo returns what it takes for the average to come to a bound in m/s.
func flipTo(w vs30.Working, bound float64, class string) *Flip {
	f := &Flip{Class: class, Bound: bound, Velocity: w.Velocity, Factor: bound / w.Velocity,
		Time: w.Thickness/bound - w.Time}
	for _, row := range w.Rows {
		f.Layers = append(f.Layers, flipLayer(row, f.Time))
	}
	return f
}

// flipLayer returns what it takes of one layer for the travel time to change
// by dt in s.
func flipLayer(row vs30.Row, dt float64) LayerFlip {
	needed := row.Time + dt
	if !(needed > 0) {
		return LayerFlip{Layer: row.Layer, Impossible: fmt.Sprintf(
			"the layer takes %.4g ms, and %.4g ms would have to be saved", 1e3*row.Time, -1e3*dt)}
	}
	v := row.Thickness / needed
	if v < profile.MinVelocity || v > profile.MaxVelocity {
		return LayerFlip{Layer: row.Layer, Impossible: fmt.Sprintf("the layer would have to have %.4g m/s", v)}
	}
	return LayerFlip{Layer: row.Layer, Factor: row.Time / needed, Velocity: v}
}
