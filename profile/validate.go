package profile

import (
	"fmt"
	"math"
)

// Joint is how far in m the top of a layer may miss the bottom of the layer
// above and still be the same boundary: rounding, not a gap. Readers join
// such boundaries exactly. A layer is thicker than Joint.
const Joint = 1e-6

// Limits that Validate holds every profile to. The slowest peats shear at about
// 20 to 30 m/s, and the rock of the Earth's crust stays below 4,000 m/s; Vs
// outside MinVelocity to MaxVelocity is a slip of the unit, a separator of
// thousands taken for a decimal point, or a number that stands for no value
// (common practice, from memory). Those of Vp and depth are far outside anything
// that a site survey can find, and keep the sums made from a profile finite.
const (
	MinVelocity = 10.0  // m/s, of S waves
	MaxVelocity = 5000  // m/s, of S waves
	MinVp       = 1.0   // m/s, of P waves
	MaxVp       = 20000 // m/s, of P waves
	MaxDepth    = 1e5   // m, of a boundary
)

// MinVpVs is the smallest Vp/Vs that an elastic solid can have: its bulk
// modulus K = ρ(Vp² − 4/3 Vs²) is not negative, so
//
//	Vp/Vs ≥ 2/√3 = 1.1547
//
// ZeroPoisson is the Vp/Vs at which Poisson's ratio ν = (r²−2)/(2(r²−1)) of
// r = Vp/Vs is zero, √2; below it ν is negative.
const (
	MinVpVs     = 1.1547005383792515
	ZeroPoisson = math.Sqrt2
)

// vpVsRounding is the relative allowance for ratios of printed velocities.
const vpVsRounding = 1e-6

// What is said of a layer with Vs = 0, by Validate and by every reader.
const (
	ZeroVsReason = "shear waves do not pass through water"
	ZeroVsHint   = "leave water out and measure depths from the mud line"
)

// Validate returns everything that makes p unfit to be averaged: layers that
// do not run from ground level downward without gap or overlap, thicknesses
// and velocities that are not positive and finite, a half-space that is not
// last or has a velocity gradient, Vp/Vs below MinVpVs, velocities where
// NoVelocity says that there are none, and optional quantities outside their
// range. Each fault stands at the velocity of its layer. Of more than MaxFaults
// the first are kept, and a last one says how many more there are. A profile
// without faults is what the rest of the program assumes.
func Validate(p *Profile) Faults {
	v := validator{p: p}
	if len(p.Layers) == 0 {
		v.at(nil, "a profile needs at least one layer", "the profile has no layers")
	}
	for i := range p.Layers {
		v.boundaries(i)
		v.velocities(i)
		v.quantities(&p.Layers[i])
	}
	v.survey()
	if v.more > 0 {
		v.faults = append(v.faults, MoreFaults(p.placeOf(nil).File, v.more))
	}
	return v.faults
}

type validator struct {
	p      *Profile
	faults Faults
	more   int // that are not kept
}

// at adds a fault of layer l, of the whole profile where l is nil.
func (v *validator) at(l *Layer, hint, format string, args ...any) {
	if len(v.faults) == MaxFaults {
		v.more++
		return
	}
	v.faults = append(v.faults, Faultf(v.p.placeOf(l), hint, format, args...))
}

// placeOf returns the place of layer l in the file that p was read from, the
// file where l is nil.
func (p *Profile) placeOf(l *Layer) Place {
	var line, column int
	if l != nil {
		line, column = int(l.Line), int(l.Column)
	}
	if p.Reading == nil {
		return Place{Line: line, Column: column}
	}
	return p.Reading.Place(line, column)
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// boundaries looks at the top and bottom of layer i.
func (v *validator) boundaries(i int) {
	l := &v.p.Layers[i]
	last := i == len(v.p.Layers)-1
	switch {
	case !finite(l.Top):
		v.at(l, "", "top %v of layer %d is not a finite number", l.Top, i+1)
		return
	case l.Top < 0:
		v.at(l, "depths are positive downward from ground level", "top %s of layer %d lies above ground level", metres(l.Top), i+1)
	case math.IsNaN(l.Bottom) || math.IsInf(l.Bottom, -1):
		v.at(l, "", "bottom %v of layer %d is not a depth", l.Bottom, i+1)
		return
	case l.HalfSpace() && !last:
		v.at(l, "only the last layer may be a half-space", "layer %d has no bottom, but another layer follows", i+1)
	case l.Bottom-l.Top <= Joint:
		v.at(l, "", "thickness %s of layer %d is not positive", metres(l.Thickness()), i+1)
	case l.Top > MaxDepth || !l.HalfSpace() && l.Bottom > MaxDepth:
		v.at(l, "check the unit of depth", "layer %d reaches deeper than %s", i+1, metres(MaxDepth))
	}
	v.joint(i)
}

// joint looks at the boundary above layer i.
func (v *validator) joint(i int) {
	l := &v.p.Layers[i]
	if i == 0 {
		if l.Top > 0 {
			v.at(l, "the first layer starts at ground level: add the layer above it", "gap from ground level to %s", metres(l.Top))
		}
		return
	}
	above := &v.p.Layers[i-1]
	switch {
	case l.Top < above.Top:
		v.at(l, "sort the layers from the top down", "layer %d starts at %s, above the layer before it", i+1, metres(l.Top))
	case !finite(above.Bottom) || !finite(above.Top):
		// Said where it stands.
	case l.Top < above.Bottom-Joint:
		v.at(l, "", "layers %d and %d overlap from %s to %s", i, i+1, metres(l.Top), metres(above.Bottom))
	case l.Top > above.Bottom+Joint:
		v.at(l, "add the layer that is missing, or move the boundary", "gap from %s to %s", metres(above.Bottom), metres(l.Top))
	}
}

func metres(x float64) string { return fmt.Sprintf("%.9g m", x) }

// velocities looks at Vs and Vp of layer i.
func (v *validator) velocities(i int) {
	l := &v.p.Layers[i]
	if v.p.NoVelocity {
		v.noVelocity(l, i)
		return
	}
	ok := v.velocity(l, i, "Vs", l.Vs)
	if l.VsBottom != 0 {
		ok = v.velocity(l, i, "Vs at the bottom", l.VsBottom) && ok
	}
	if l.HalfSpace() && l.Gradient() {
		v.at(l, "leave the velocity at its bottom out", "layer %d is a half-space with a velocity gradient", i+1)
	}
	if !l.Has(GivenVp) || !v.velocity(l, i, "Vp", l.Vp) || !ok {
		return
	}
	if r := l.vpVs(); r < MinVpVs*(1-vpVsRounding) {
		v.at(l, "check which column is Vp, and the units of both",
			"Vp/Vs = %.5g of layer %d is below 1.1547, which no solid can have", r, i+1)
	}
}

// noVelocity looks for velocities where the profile states that there are
// none.
func (v *validator) noVelocity(l *Layer, i int) {
	if l.Vs != 0 || l.VsBottom != 0 || l.Has(GivenVp) {
		v.at(l, "", "layer %d states a velocity in a profile without velocities", i+1)
	}
}

// vpVs returns Vp/Vs of a layer, the smallest inside it.
func (l *Layer) vpVs() float64 { return l.Vp / max(l.Vs, l.VsBottom) }

// velocity looks at one velocity, and reports whether it can be one.
func (v *validator) velocity(l *Layer, i int, name string, x float64) bool {
	slowest, fastest := MinVelocity, float64(MaxVelocity)
	if name == "Vp" {
		slowest, fastest = MinVp, MaxVp
	}
	switch {
	case !finite(x):
		v.at(l, "", "%s %v of layer %d is not a finite number", name, x, i+1)
	case x == 0 && name == "Vs":
		v.at(l, ZeroVsHint, "Vs of layer %d is zero: %s", i+1, ZeroVsReason)
	case x <= 0:
		v.at(l, HintNull(x), "%s %.6g m/s of layer %d is not positive", name, x, i+1)
	case x < slowest:
		v.at(l, HintSlow, "%s %.6g m/s of layer %d is slower than %g m/s", name, x, i+1, slowest)
	case x > fastest:
		hint := HintNull(x)
		if hint == "" {
			hint = "check the unit of velocity, and whether the number stands for no value"
		}
		v.at(l, hint, "%s %.6g m/s of layer %d is faster than %g m/s", name, x, i+1, fastest)
	default:
		return true
	}
	return false
}

// HintSlow says what a velocity that is too slow may come from.
const HintSlow = "check the unit of velocity, and whether a point is a separator of thousands"

// HintNull says of a number that is written for no value, such as -999.25 or
// 9999, that it is one; "" of any other (the null values of logs and of
// databases; common practice).
func HintNull(x float64) string {
	switch math.Abs(x) {
	case 999, 9999, 99999, 999999, 999.25, 9999.25, 99, 999.99, 9999.99, 999.9:
		return fmt.Sprintf("%v is often written for no value: give the layer its velocity, or end the profile above it", x)
	}
	return ""
}

// quantities looks at the optional quantities that layer l states.
func (v *validator) quantities(l *Layer) {
	if l.Given == 0 {
		return
	}
	v.quantity(l, GivenDensity, Density, l.Density)
	v.quantity(l, GivenSigma, SigmaLnVs, l.SigmaLnVs)
	v.quantity(l, GivenN, N, l.N)
	v.quantity(l, GivenSu, Su, l.Su)
	v.quantity(l, GivenPI, PI, l.PI)
	v.quantity(l, GivenWaterContent, WaterContent, l.WaterContent)
}

func (v *validator) quantity(l *Layer, g Given, q Quantity, x float64) {
	switch {
	case !l.Has(g):
	case !finite(x):
		v.at(l, "", "%s %v is not a finite number", q, x)
	case x < 0:
		v.at(l, "", "%s %.6g is negative", q, x)
	case x == 0 && !q.MayBeZero():
		v.at(l, "", "%s is zero", q)
	}
}

// MayBeZero reports whether zero is a value of the quantity: of a top, a
// blow count, a plasticity index or a water content it is, of the others it
// is not.
func (q Quantity) MayBeZero() bool {
	return q == Top || q == N || q == PI || q == WaterContent
}

// survey looks at the numbers that describe the whole profile.
func (v *validator) survey() {
	s, at := &v.p.Survey, &v.p.Position
	if d := s.DepthReached; !finite(d) || d < 0 || d > MaxDepth {
		v.at(nil, "", "depth reached %s is not a depth", metres(d))
	}
	v.within("ground level", s.GroundLevel, -MaxDepth, MaxDepth)
	v.within("water table", s.WaterTable, -MaxDepth, MaxDepth)
	v.within("latitude", at.Latitude, -90, 90)
	v.within("longitude", at.Longitude, -180, 180)
	v.within("easting", at.Easting, -MaxGrid, MaxGrid)
	v.within("northing", at.Northing, -MaxGrid, MaxGrid)
	if at.EPSG < 0 || at.EPSG > MaxEPSG {
		v.at(nil, "", "EPSG code %d lies outside 1 to %d", at.EPSG, MaxEPSG)
	}
}

// Limits of a position in a grid: no coordinate on Earth is as large, even in
// feet, and no code of the EPSG registry.
const (
	MaxGrid = 1e8
	MaxEPSG = 99_999_999
)

func (v *validator) within(name string, x Optional, low, high float64) {
	if x.Known && !(x.Value >= low && x.Value <= high) {
		v.at(nil, "", "%s %v lies outside %g to %g", name, x.Value, low, high)
	}
}
