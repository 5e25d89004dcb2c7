package vs30

import (
	"errors"
	"math"
	"testing"

	"shearbook/profile"
)

// period is FundamentalPeriod for a profile that reaches.
func period(t testing.TB, layers []profile.Layer, from, to float64) float64 {
	t.Helper()
	v, err := FundamentalPeriod(layers, from, to)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// A uniform column has T = 4H/V, however it is cut.
func TestPeriodOfUniformColumn(t *testing.T) {
	near(t, "period", period(t, stack(30, 200), 0, 30), 0.6, 1e-13)
	near(t, "period", period(t, stack(10, 200, 3, 200, 27, 200), 0, 30), 0.6, 1e-13)
	near(t, "period from 5 m to 25 m", period(t, stack(10, 200, 30, 200), 5, 25), 0.4, 1e-13)
}

// 10 m of 150 m/s and 1.7 t/m³ over 20 m of 300 m/s and 1.9 t/m³: both layers
// take 1/15 s, so tan²(ω/15) = Z₂/Z₁ = 570/255 by the equation of two layers,
// tan(ωt₁)·tan(ωt₂) = Z₂/Z₁ (u and τ continuous, by hand), and T = 0.426870 s.
// 5, 10, 15 m of 180, 300, 500 m/s and 1.8, 1.9, 2.0 t/m³: 0.278679 s (scipy
// 1.10.1, brentq on the layer-matrix product).
func TestPeriodOfLayeredColumns(t *testing.T) {
	two := dense(stack(10, 150, 20, 300), 1700, 1900)
	near(t, "two layers", period(t, two, 0, 30), 2*math.Pi/(15*math.Atan(math.Sqrt(570.0/255))), 1e-13)
	near(t, "two layers", period(t, two, 0, 30), 0.426870, 5e-7)
	near(t, "three layers", period(t, dense(stack(5, 180, 10, 300, 15, 500), 1800, 1900, 2000), 0, 30), 0.278679, 5e-7)

	// 4·Σh/v by hand: 4·(10/150 + 20/300) and 4·(5/180 + 10/300 + 15/500).
	for _, c := range []struct {
		layers []profile.Layer
		want   float64
	}{{two, 0.533333}, {stack(5, 180, 10, 300, 15, 500), 0.364444}} {
		got, err := QuarterWavePeriod(c.layers, 0, 30)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "quarter wave", got, c.want, 5e-7)
	}
}

// A linear gradient from the surface with ω > |b|/2: the displacement
// (v₀/v)^½·[cos νx + sin νx/2ν] is 0 at the rock where tan νx = −2ν, ν² = (ω/b)²
// − 1/4, x = ln(v₁/v₀). Here it is checked against 20,000 uniform layers.
func TestPeriodOfGradient(t *testing.T) {
	for _, c := range []struct{ v0, v1 float64 }{
		{100, 400}, {400, 100}, {200, 210}, {50, 2000}, {2000, 50}, {200, 200.0001},
	} {
		layers := gradient(30, c.v0, c.v1)
		const n = 20000
		cut := make([]profile.Layer, n)
		for i := range cut {
			top, bottom := 30*float64(i)/n, 30*float64(i+1)/n
			cut[i] = profile.Layer{Top: top, Bottom: bottom, Vs: layers[0].VsAt((top + bottom) / 2)}
		}
		want := period(t, cut, 0, 30)
		near(t, "period", period(t, layers, 0, 30), want, 1e-6*want)
	}
}

// Nothing is skipped: the layer matrices of Haskell (1953), multiplied out
// plainly, give a displacement at the rock that is 0 at the frequency found and
// changes its sign nowhere below it, in strong contrasts too.
func TestLowestPeriodIsFound(t *testing.T) {
	rng := seeded(40)
	displacement := func(layers []profile.Layer, to, w float64) float64 {
		u, tau := 1.0, 0.0
		for _, l := range layers {
			h := min(l.Bottom, to) - l.Top
			if h <= 0 {
				break
			}
			s, c := math.Sincos(w * h / l.Vs)
			z := l.Density * l.Vs * w
			u, tau = u*c+tau*s/z, -u*z*s+tau*c
		}
		return u
	}
	for range 300 {
		layers := randomLayers(rng, false)
		w := 2 * math.Pi / period(t, layers, 0, 35)
		if above, below := displacement(layers, 35, w*(1-1e-9)), displacement(layers, 35, w*(1+1e-9)); above < 0 || below > 0 {
			t.Fatalf("no root at ω = %v: %v and %v beside it", w, above, below)
		}
		for k := range 2000 {
			if u := displacement(layers, 35, w*(float64(k)+0.5)/2000); u <= 0 {
				t.Fatalf("a root below ω = %v: %v at its share %d/2000", w, u, k)
			}
		}
	}
}

// The search rests on this: below the lowest root the displacement has no zero
// in the column, and above it, however far, it has one.
func TestZeroOnlyAboveTheLowestRoot(t *testing.T) {
	rng := seeded(42)
	for range 200 {
		layers := randomLayers(rng, true)
		w := 2 * math.Pi / period(t, layers, 0, 35)
		c := column{layers: layers, from: 0, to: 35, densities: true}
		for k := 1; k <= 400; k++ {
			at := w * float64(k) / 10.05 // never the root itself
			if c.zero(at) != (at > w) {
				t.Fatalf("zero at %v of the lowest frequency: %v", at/w, c.zero(at))
			}
		}
	}
}

// What theory says of every column: splitting a layer changes nothing; with
// one density a faster layer never makes the period longer (Rayleigh's
// principle), so it lies between 4H/v of the fastest and of the slowest;
// densities in another unit change nothing.
func TestPeriodProperties(t *testing.T) {
	rng := seeded(41)
	for range 300 {
		layers := randomLayers(rng, true)
		want := period(t, layers, 1, 36)
		near(t, "split", period(t, split(rng, layers), 1, 36), want, 1e-9*want)

		light := append([]profile.Layer(nil), layers...)
		for i := range light {
			light[i].Density /= 1000
		}
		near(t, "t/m³", period(t, light, 1, 36), want, 1e-12*want)

		for i := range light {
			light[i].Given = 0
		}
		one := period(t, light, 1, 36)
		s, err := Describe(light, 1, 35)
		if err != nil {
			t.Fatal(err)
		}
		if one < 140/s.Max*(1-1e-12) || one > 140/s.Min*(1+1e-12) {
			t.Fatalf("period %v outside %v to %v", one, 140/s.Max, 140/s.Min)
		}
		i := rng.IntN(len(light))
		light[i].Vs *= 1.3
		light[i].VsBottom *= 1.3
		if faster := period(t, light, 1, 36); faster > one*(1+1e-12) {
			t.Fatalf("layer %d faster: period from %v up to %v", i, one, faster)
		}
	}
}

// One missing density, and none counts.
func TestDensitiesStated(t *testing.T) {
	layers := dense(stack(10, 150, 20, 300), 1700, 1900)
	bare := stack(10, 150, 20, 300)
	if !DensitiesStated(layers, 0, 30) || DensitiesStated(bare, 0, 30) || DensitiesStated(nil, 0, 30) {
		t.Error("DensitiesStated is wrong for all, none, or no layers")
	}
	half := dense(stack(10, 150, 20, 300), 1700)
	if DensitiesStated(half, 0, 30) {
		t.Error("one density of two is taken for all")
	}
	if !DensitiesStated(half, 0, 10) {
		t.Error("a layer below the column has a say")
	}
	if a, b := period(t, half, 0, 30), period(t, bare, 0, 30); a != b {
		t.Errorf("period %v with one density of two, %v with none", a, b)
	}
}

func TestPeriodOfShortProfile(t *testing.T) {
	var short *ShortError
	if _, err := FundamentalPeriod(stack(10, 200), 0, 30); !errors.As(err, &short) {
		t.Errorf("error %v, want a *ShortError", err)
	}
	if _, err := QuarterWavePeriod(stack(10, 200), 0, 30); !errors.As(err, &short) {
		t.Errorf("error %v, want a *ShortError", err)
	}
}

// Velocities at the far ends of what a float64 holds come back, in time.
func TestPeriodOfAbsurdProfiles(t *testing.T) {
	for _, layers := range [][]profile.Layer{
		stack(10, 1e-300, 20, 1e300),
		stack(10, 1e300, 20, 1e-300),
		gradient(30, 1e-300, 1e300),
		gradient(30, 1e300, 1e-300),
		stack(10, math.NaN(), 20, 300),
		stack(10, math.Inf(1), 20, 300),
	} {
		if v, err := FundamentalPeriod(layers, 0, 30); err != nil {
			t.Errorf("%v m/s: %v, %v", layers[0].Vs, v, err)
		}
	}
}
