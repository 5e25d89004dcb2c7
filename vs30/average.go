// Package vs30 averages the shear-wave velocity of a layered profile by
// vertical travel time, and describes its layers.
//
// The time-averaged velocity over a thickness Z below a datum D is
//
//	VsZ = Z / t,   t = Σ hᵢ/vᵢ
//
// where hᵢ is the part of layer i between D and D+Z. Vs30 is VsZ with Z =
// 30 m from the ground surface (Borcherdt 1994, Earthquake Spectra 10:617,
// checked in no copy; EN 1998-1:2004 Eq. (3.1); ASCE/SEI 7-16 Eq. 20.4-1).
//
// Depths are in m below ground level throughout. The datum is the depth that
// an average starts from: 0, or the underside of a foundation. A layer that a
// depth cuts counts with the part that lies inside.
//
// The functions assume a profile that profile.Validate accepts; they do not
// look for gaps, overlaps or velocities that are not positive. None of them
// changes the layers it is given.
package vs30

import (
	"fmt"
	"math"

	"shearbook/profile"
)

// Touching is how close in m a layer boundary and a depth may be and still
// be the same depth: sums of thicknesses are seldom exact in binary.
const Touching = 1e-9

// ShortError reports a profile that ends above the depth asked for.
type ShortError struct {
	Reached float64 // m below ground level, bottom of the lowest layer
	Needed  float64 // m below ground level
}

// Error says how far the profile reaches and how far it would have to, with
// as many digits as it takes to tell the two apart.
func (e *ShortError) Error() string {
	reached, needed := fmt.Sprintf("%.4g", e.Reached), fmt.Sprintf("%.4g", e.Needed)
	for digits := 5; reached == needed && digits <= 17; digits++ {
		reached, needed = fmt.Sprintf("%.*g", digits, e.Reached), fmt.Sprintf("%.*g", digits, e.Needed)
	}
	return fmt.Sprintf("the profile reaches %s m below ground level, %s m are needed", reached, needed)
}

// Average returns the time-averaged velocity in m/s over thickness m, > 0,
// below depth from (m below ground level). The error is a *ShortError where
// the layers end more than Touching above from+thickness. It does not allocate.
func Average(layers []profile.Layer, from, thickness float64) (float64, error) {
	t, err := TravelTime(layers, from, from+thickness)
	if err != nil {
		return 0, err
	}
	return thickness / t, nil
}

// TravelTime returns the vertical travel time in s of a shear wave between
// the depths from and to (m below ground level, from < to). The error is a
// *ShortError where the layers do not reach to.
func TravelTime(layers []profile.Layer, from, to float64) (float64, error) {
	t := 0.0
	for i := range layers {
		l := &layers[i]
		if l.Bottom <= from {
			continue
		}
		top, bottom := max(l.Top, from), min(l.Bottom, to)
		if bottom > top {
			t += timeInside(l, top, bottom)
		}
		if l.Bottom >= to {
			return t, nil
		}
	}
	if n := len(layers); n > 0 && to-layers[n-1].Bottom <= Touching {
		// An ulp short: the last velocity carries the missing picometres.
		l := &layers[n-1]
		return t + (to-l.Bottom)/l.VsAt(l.Bottom), nil
	}
	return 0, &ShortError{Reached: bottomOf(layers), Needed: to}
}

// timeInside returns the travel time in s between two depths inside layer l.
// In a linear gradient V = V₀ + k(z−z₀) it is (1/k)·ln(V₁/V₀), here written
//
//	t = h/V₀ · ln(1+x)/x,   x = k·h/V₀
//
// which does not lose digits as k goes to 0.
func timeInside(l *profile.Layer, top, bottom float64) float64 {
	h := bottom - top
	if !l.Gradient() {
		return h / l.Vs
	}
	v0, v1 := l.VsAt(top), l.VsAt(bottom)
	x := (v1 - v0) / v0
	if x == 0 {
		return h / v0
	}
	return h / v0 * math.Log1p(x) / x
}

// bottomOf returns the depth in m at which the layers end.
func bottomOf(layers []profile.Layer) float64 {
	if len(layers) == 0 {
		return 0
	}
	return layers[len(layers)-1].Bottom
}

// Row is one line of the working of an average: the part of one layer that
// lies between the datum and the averaging depth.
type Row struct {
	Layer       int     // index into the layers
	Top, Bottom float64 // m below ground level, clipped
	Thickness   float64 // m inside the averaging depth
	Vs          float64 // m/s; for a gradient layer the average by travel time over the part
	Time        float64 // s
	Cumulative  float64 // s, down to Bottom
}

// Working is an average with everything a checker needs to follow it.
type Working struct {
	From      float64 // m below ground level: the datum
	Thickness float64 // m
	Rows      []Row
	Time      float64 // s
	Velocity  float64 // m/s
}

// Work returns the average over thickness m, > 0, below depth from with its
// whole working. Its Velocity is the very number that Average returns, and it
// fails as Average does.
func Work(layers []profile.Layer, from, thickness float64) (Working, error) {
	to := from + thickness
	t, err := TravelTime(layers, from, to)
	if err != nil {
		return Working{}, err
	}
	w := Working{From: from, Thickness: thickness, Time: t, Velocity: thickness / t}
	cumulative := 0.0
	for i := range layers {
		l := &layers[i]
		top, bottom, ok := clip(l, from, to)
		if !ok {
			continue
		}
		dt := timeInside(l, top, bottom)
		cumulative += dt
		w.Rows = append(w.Rows, Row{Layer: i, Top: top, Bottom: bottom, Thickness: bottom - top,
			Vs: averageInside(l, top, bottom), Time: dt, Cumulative: cumulative})
	}
	return w, nil
}

// clip returns the part of layer l between the depths from and to, and false
// where no more than Touching of it lies there.
func clip(l *profile.Layer, from, to float64) (top, bottom float64, ok bool) {
	top, bottom = max(l.Top, from), min(l.Bottom, to)
	return top, bottom, bottom-top > Touching
}

// averageInside returns the time-averaged velocity in m/s between two depths
// inside layer l.
func averageInside(l *profile.Layer, top, bottom float64) float64 {
	if !l.Gradient() {
		return l.Vs
	}
	return (bottom - top) / timeInside(l, top, bottom)
}
