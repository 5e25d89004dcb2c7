package spread

import (
	"math"
	"testing"
)

// From the parameters of Toro (1995), computed outside this program. By hand
// for USGS C, d = 10, t = 5 m: ρ_d = 0.98·0.05^0.344 = 0.349687, ρ_t =
// 0.99·exp(−5/3.9) = 0.274695, together 0.650313·0.274695 + 0.349687 = 0.528325
// with these roundings.
func TestToroCorrelation(t *testing.T) {
	near(t, "USGS C, 10 m, 5 m", class(t, "USGS C").Correlation(10, 5), 0.5283188343, 1e-9)
	near(t, "USGS B, 20 m, 10 m", class(t, "USGS B").Correlation(20, 10), 0.5435824229, 1e-9)
	// At no distance and no depth it is ρ₀; at 200 m and far apart ρ₂₀₀.
	for _, c := range ToroClasses() {
		near(t, c.Name+" at the surface", c.Correlation(0, 0), c.Rho0, 1e-12)
		near(t, c.Name+" at 200 m", c.Correlation(200, 1e6), c.Rho200, 1e-12)
		near(t, c.Name+" below", c.Correlation(300, 1e6), c.Rho200, 0)
		for d := 0.0; d < 250; d += 10 {
			for x := 0.0; x < 50; x += 5 {
				if rho := c.Correlation(d, x); rho < 0 || rho > 1 || rho < c.Correlation(d, x+5) {
					t.Errorf("%s: correlation %g at %g m, %g m apart", c.Name, rho, d, x)
				}
			}
		}
	}
}

// 1.98·(z + 10.86)^−0.89, computed outside this program; at 0 m by hand:
// ln 10.86 = 2.385086, 1.98·exp(−2.122727) = 0.237016.
func TestToroRate(t *testing.T) {
	l := ToroLayering()
	for _, c := range [][2]float64{{0, 0.237015444}, {10, 0.13257922}, {30, 0.0728802155}, {100, 0.0299788903}} {
		near(t, "rate", l.Rate(c[0]), c[1], 1e-9)
	}
}

// The expected number is the integral of the rate (Simpson's rule), and depth
// is its inverse, for exponents above, at and below −1.
func TestExpectedBoundaries(t *testing.T) {
	for _, l := range []Layering{ToroLayering(), {10, -1, 2}, {5, -1.5, 3}, {1, 0, 0.25}} {
		const n = 2000
		sum := 0.0
		for i := range n {
			a, b := 30*float64(i)/n, 30*float64(i+1)/n
			sum += (l.Rate(a) + 4*l.Rate((a+b)/2) + l.Rate(b)) * (b - a) / 6
		}
		near(t, "expected", l.Expected(30), sum, 1e-9)
		inverse := l.inverse()
		for _, z := range []float64{0.01, 3, 30, 200} {
			near(t, "depth", inverse.depth(l.Expected(z)), z, 1e-9*z)
		}
	}
	// There are 3·5^−0.5/0.5 = 2.683 boundaries in all of this one.
	inverse := Layering{5, -1.5, 3}.inverse()
	if z := inverse.depth(2.7); !math.IsInf(z, 1) {
		t.Errorf("the 2.7th boundary lies at %g m", z)
	}
}

// The published classes, entered a second time.
func TestToroClasses(t *testing.T) {
	second := map[string][6]float64{
		"USGS D":        {0.37, 0.00, 5.0, 0.50, 0.0, 0.744},
		"USGS C":        {0.31, 0.99, 3.9, 0.98, 0.0, 0.344},
		"USGS B":        {0.27, 0.97, 3.8, 1.00, 0.0, 0.293},
		"USGS A":        {0.36, 0.95, 3.4, 0.42, 0.0, 0.063},
		"USGS C+D":      {0.36, 0.99, 3.9, 1.00, 0.0, 0.293},
		"USGS A+B":      {0.35, 0.95, 4.2, 1.00, 0.0, 0.138},
		"GeoMatrix C+D": {0.38, 0.99, 8.0, 1.00, 0.0, 0.160},
		"GeoMatrix A+B": {0.46, 0.96, 13.1, 0.96, 0.0, 0.095},
	}
	if len(ToroClasses()) != len(second) {
		t.Fatalf("%d classes, want %d", len(ToroClasses()), len(second))
	}
	for _, c := range ToroClasses() {
		if got := [6]float64{c.SigmaLn, c.Rho0, c.Delta, c.Rho200, c.D0, c.B}; got != second[c.Name] {
			t.Errorf("%s: %v, second entry %v", c.Name, got, second[c.Name])
		}
	}
	for v, name := range map[float64]string{751: "USGS A", 750: "USGS B", 361: "USGS B", 360: "USGS C", 181: "USGS C", 180: "USGS D"} {
		if c := ToroFor(v); c.Name != name {
			t.Errorf("%g m/s is %s, want %s", v, c.Name, name)
		}
	}
	if _, ok := FindToro("USGS X"); ok {
		t.Error("a class that there is not")
	}
}

func TestExponential(t *testing.T) {
	worst := 0.0
	for x := -40.0; x <= 40; x += 0.00137 {
		worst = max(worst, math.Abs(exp(x)/math.Exp(x)-1))
	}
	if worst > 1e-13 {
		t.Errorf("exp is off by %.2g", worst)
	}
	if exp(0) != 1 {
		t.Errorf("exp(0) = %v", exp(0))
	}
	near(t, "power", power(3, 9.0909), math.Pow(3, 9.0909), 1e-8)
	if power(0, 0.3) != 0 || power(0, 0) != 1 || exponential(-800) != 0 {
		t.Error("powers of 0")
	}
}
