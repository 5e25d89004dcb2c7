package vs30

import (
	"math"

	"shearbook/profile"
)

// QuarterWavePeriod returns four times the vertical travel time between the
// depths from and to (m below ground level), in s:
//
//	T = 4·Σ hᵢ/vᵢ
//
// It is the fundamental period of a uniform column; of a column whose velocity
// grows with depth it is an upper estimate (common practice). It fails as
// TravelTime does.
func QuarterWavePeriod(layers []profile.Layer, from, to float64) (float64, error) {
	t, err := TravelTime(layers, from, to)
	return 4 * t, err
}

// FundamentalPeriod returns the longest period in s at which the undamped
// column between the depths from and to (m below ground level) rings in shear
// on rock that does not move at to. It is exact for the layers as they are,
// gradient layers included.
//
// The densities count where every layer of the column states one (see
// DensitiesStated); otherwise one density is taken for all, which then does
// not matter. It fails as TravelTime does.
//
// Displacement u and shear stress τ are carried down from u = 1, τ = 0 at the
// top (Haskell 1953, BSSA 43:17–34), and the period is that of the lowest
// angular frequency ω with u = 0 at the rock. A scan for a change of sign of u
// could step over two roots at once. Here the phase
//
//	p = −τ / (ρvωu)
//
// is carried instead: 0 at the top, and +∞ where u comes to 0. It grows with
// ω everywhere, so below the lowest root u has no zero in the column, and
// above it has one. Halving the interval between the two finds that root and
// no other.
func FundamentalPeriod(layers []profile.Layer, from, to float64) (float64, error) {
	t, err := TravelTime(layers, from, to)
	if err != nil {
		return 0, err
	}
	c := column{layers: layers, from: from, to: to, densities: DensitiesStated(layers, from, to)}
	return 2 * math.Pi / c.lowest(math.Pi/(2*t)), nil
}

// DensitiesStated reports whether every layer between the depths from and to
// (m below ground level) states its density.
func DensitiesStated(layers []profile.Layer, from, to float64) bool {
	stated := false
	for i := range layers {
		if _, _, ok := clip(&layers[i], from, to); !ok {
			continue
		}
		if stated = layers[i].Given&profile.GivenDensity != 0; !stated {
			return false
		}
	}
	return stated
}

// column is a column of layers on rigid rock.
type column struct {
	layers    []profile.Layer
	from, to  float64 // m below ground level
	densities bool    // whether the layers' own densities count
}

// lowest returns the lowest natural angular frequency of the column in rad/s,
// to one part in 10¹⁴, starting the search at guess.
func (c *column) lowest(guess float64) float64 {
	lo, hi := 0.0, guess
	for hi > 0 && hi <= math.MaxFloat64 && !c.zero(hi) {
		lo, hi = hi, 2*hi
	}
	for hi-lo > 1e-14*hi {
		mid := lo + (hi-lo)/2
		if mid == lo || mid == hi {
			break
		}
		if c.zero(mid) {
			hi = mid
		} else {
			lo = mid
		}
	}
	return hi
}

// zero reports whether the displacement comes to zero anywhere in the column
// when it rings at angular frequency w (rad/s).
func (c *column) zero(w float64) bool {
	p, above := 0.0, 0.0 // the phase; impedance of the layer above
	for i := range c.layers {
		l := &c.layers[i]
		if l.Top >= c.to {
			break
		}
		top, bottom, ok := clip(l, c.from, c.to)
		if !ok {
			continue
		}
		density := 1.0
		if c.densities {
			density = l.Density
		}
		v0, v1 := l.VsAt(top), l.VsAt(bottom)
		p *= above / (density * v0) // u and τ go on unchanged
		if v0 == v1 {
			p = phaseBelow(p, w*(bottom-top)/v0)
		} else {
			p = phaseBelowGradient(p, w, bottom-top, v0, v1)
		}
		if math.IsInf(p, 1) {
			return true
		}
		above = density * v1
	}
	return false
}

// phaseBelow returns the phase at the bottom of a uniform layer that a wave
// takes the angle a = ωh/v to cross, from the phase p ≥ 0 at its top: tan(φ+a)
// with tan φ = p; +∞ where the displacement comes to zero inside.
func phaseBelow(p, a float64) float64 {
	if a >= math.Pi/2 {
		return math.Inf(1)
	}
	s, c := math.Sincos(a)
	u := c - p*s // of the displacement at the top
	if u <= 0 {
		return math.Inf(1)
	}
	return (p*c + s) / u
}

// phaseBelowGradient is phaseBelow for a layer of thickness h m in which the
// velocity goes from v0 to v1 m/s linearly. With b = (v₁−v₀)/h, κ = ω/|b| and
// x = |ln(v/v₀)| the equation of motion (ρv²u′)′ + ρω²u = 0 is of Euler's kind
// and, with u = w·√(v₀/v), becomes
//
//	d²w/dx² = (1/4 − κ²)·w
//
// whose solutions are circular functions, hyperbolic ones, or a straight line
// (our derivation; checked against fine layering and a numerical solution of
// the equation of motion). The start is w = 1, dw/dx = ±1/2 − κp with the sign
// of b.
func phaseBelowGradient(p, w, h, v0, v1 float64) float64 {
	k := w * h / math.Abs(v1-v0)
	x := math.Abs(math.Log1p((v1 - v0) / v0))
	half := math.Copysign(0.5, v1-v0)
	slope := half - k*p
	d := (0.5 - k) * (0.5 + k) // 1/4 − κ²
	n := math.Sqrt(math.Abs(d))
	if d < 0 && n*x >= math.Pi {
		return math.Inf(1) // half a wave or more
	}
	c, s := solutions(d, n, x)
	end := c + slope*s
	if end <= 0 {
		return math.Inf(1)
	}
	return max(0, (half-(slope*c+d*s)/end)/k)
}

// solutions returns the two solutions of y″ = d·y at x, n = √|d|: the one
// that starts with y = 1, y′ = 0 and the one with y = 0, y′ = 1.
func solutions(d, n, x float64) (c, s float64) {
	switch {
	case n*x < 1e-8:
		return 1, x
	case d < 0:
		s, c = math.Sincos(n * x)
	default:
		s, c = math.Sinh(n*x), math.Cosh(n*x)
	}
	return c, s / n
}
