package spread

import (
	"math"
	"slices"
)

// ToroClass is one set of parameters of the model of Toro (1995) for velocity
// profiles of a class of sites: how much ln Vs scatters, and how that of one
// layer goes with that of the layer above.
//
// The sigmas are for ground of which the class alone is known. For a measured
// site they are too large (Toro 2022, Journal of Seismology 26:713–730); there
// the class gives the correlation, and the sigma comes from the survey.
//
// Source: Toro (1995), Probabilistic models of site velocity profiles for
// generic and site-specific ground-motion amplification studies, Brookhaven
// National Laboratory, report 779574. The values stand as one source, the form
// of the equations is from memory.
type ToroClass struct {
	Name    string
	SigmaLn float64 // of ln Vs
	Rho0    float64 // correlation of adjacent layers of no thickness at no depth
	Delta   float64 // m over which it falls by a factor e
	Rho200  float64 // correlation at 200 m and below
	D0      float64 // m
	B       float64
}

// ToroStanding is how well the model is known to agree with its source.
const ToroStanding = "from memory"

// ToroSource is the report the model stems from.
const ToroSource = "Toro 1995, Brookhaven National Laboratory, report 779574"

// toroClasses holds the classes in the order of ToroClasses. It is never
// changed.
var toroClasses = []ToroClass{
	//  name, σ of ln Vs, ρ₀, Δ (m), ρ₂₀₀, d₀ (m), b
	{"GeoMatrix A+B", 0.46, 0.96, 13.1, 0.96, 0.0, 0.095}, // rock, shallow soil
	{"GeoMatrix C+D", 0.38, 0.99, 8.0, 1.00, 0.0, 0.160},  // deep soil
	{"USGS A+B", 0.35, 0.95, 4.2, 1.00, 0.0, 0.138},       // Vs30 > 360 m/s
	{"USGS C+D", 0.36, 0.99, 3.9, 1.00, 0.0, 0.293},       // Vs30 < 360 m/s
	{"USGS A", 0.36, 0.95, 3.4, 0.42, 0.0, 0.063},         // Vs30 > 750 m/s
	{"USGS B", 0.27, 0.97, 3.8, 1.00, 0.0, 0.293},         // 360 to 750 m/s
	{"USGS C", 0.31, 0.99, 3.9, 0.98, 0.0, 0.344},         // 180 to 360 m/s
	{"USGS D", 0.37, 0.00, 5.0, 0.50, 0.0, 0.744},         // < 180 m/s
}

// ToroClasses returns the classes as the report lists them.
func ToroClasses() []ToroClass { return slices.Clone(toroClasses) }

// FindToro returns the class of that name, and false if there is none.
func FindToro(name string) (ToroClass, bool) {
	for _, c := range toroClasses {
		if c.Name == name {
			return c, true
		}
	}
	return ToroClass{}, false
}

// ToroFor returns the class of a site whose Vs30 is v m/s: USGS A above 750,
// B above 360, C above 180, D below.
func ToroFor(v float64) ToroClass {
	name := "USGS D"
	switch {
	case v > 750:
		name = "USGS A"
	case v > 360:
		name = "USGS B"
	case v > 180:
		name = "USGS C"
	}
	c, _ := FindToro(name)
	return c
}

// Correlation returns the correlation of ln Vs between two adjacent layers:
//
//	ρ(d, t) = [1 − ρ_d(d)]·ρ_t(t) + ρ_d(d)
//	ρ_t(t)  = ρ₀·exp(−t/Δ)
//	ρ_d(d)  = ρ₂₀₀·[(d + d₀)/(200 + d₀)]^b for d ≤ 200 m, ρ₂₀₀ below
//
// where d is the mean of the depths of their middles and t the distance
// between these, in m, ≥ 0.
func (c ToroClass) Correlation(d, t float64) float64 {
	byDepth := c.Rho200
	if d <= 200 {
		byDepth *= power((d+c.D0)/(200+c.D0), c.B)
	}
	return (1-byDepth)*c.Rho0*exponential(-t/c.Delta) + byDepth
}

// Layering is a random layering: boundaries that come with depth z (m) like
// the events of a Poisson process of the rate
//
//	λ(z) = c₃·(z + c₁)^c₂ per m
//
// Its zero value is no random layering.
type Layering struct{ C1, C2, C3 float64 }

// ToroLayering returns the layering of Toro (1995): c₁ = 10.86, c₂ = −0.89, c₃
// = 1.98 (one source; the form from memory). Layers are some 4 m thick at the
// surface and 14 m at 30 m.
func ToroLayering() Layering { return Layering{C1: 10.86, C2: -0.89, C3: 1.98} }

// Rate returns λ, the boundaries per m at depth z m.
func (l Layering) Rate(z float64) float64 { return l.C3 * math.Pow(z+l.C1, l.C2) }

// Expected returns the expected number of boundaries between the ground
// surface and depth z m, the integral of Rate.
func (l Layering) Expected(z float64) float64 {
	m := l.C2 + 1
	if m == 0 {
		return l.C3 * math.Log1p(z/l.C1)
	}
	return l.C3 / m * (math.Pow(z+l.C1, m) - math.Pow(l.C1, m))
}

// inverse is that of Expected.
type inverse struct {
	Layering
	m, first float64 // C2 + 1, and C1 to that power
}

func (l Layering) inverse() inverse {
	return inverse{Layering: l, m: l.C2 + 1, first: math.Pow(l.C1, l.C2+1)}
}

// depth returns the depth in m above which n boundaries are expected, +Inf
// where there are never so many.
func (l *inverse) depth(n float64) float64 {
	if l.m == 0 {
		return l.C1 * math.Expm1(n/l.C3)
	}
	x := l.first + n*l.m/l.C3
	if x <= 0 {
		return math.Inf(1)
	}
	return power(x, 1/l.m) - l.C1
}

// valid reports whether the layering has boundaries, and not too many of them
// down to depth z m.
func (l Layering) valid(z float64) bool {
	n := l.Expected(z)
	return l.C1 > 0 && l.C3 > 0 && n > 0 && n <= MaxLayers/2
}
