package spread

import "math"

// Lognormal is a velocity that is not sure: ln V is normal.
type Lognormal struct {
	Median  float64 // m/s, > 0
	SigmaLn float64 // standard deviation of ln V, ≥ 0
}

// Below returns the chance that the velocity is v m/s or less:
//
//	Φ((ln v − ln median)/σ)
func (l Lognormal) Below(v float64) float64 {
	if l.SigmaLn == 0 {
		if l.Median <= v {
			return 1
		}
		return 0
	}
	return normalCDF(math.Log(v/l.Median) / l.SigmaLn)
}

// Quantile returns the velocity in m/s that is not exceeded with chance p, 0 <
// p < 1: median·exp(σ·Φ⁻¹(p)).
func (l Lognormal) Quantile(p float64) float64 {
	return l.Median * math.Exp(l.SigmaLn*normalQuantile(p))
}

// Band returns the quantiles that reports print.
func (l Lognormal) Band() Band {
	return Band{P5: l.Quantile(0.05), P16: l.Quantile(0.16), Median: l.Median, P84: l.Quantile(0.84), P95: l.Quantile(0.95)}
}

// Band holds the quantiles that reports print, in m/s: velocities that are not
// exceeded with a chance of 5, 16, 50, 84 and 95 %.
type Band struct{ P5, P16, Median, P84, P95 float64 }

// normalCDF returns Φ(x), accurate in the lower tail too.
func normalCDF(x float64) float64 { return 0.5 * math.Erfc(-x/math.Sqrt2) }

// normalQuantile returns Φ⁻¹(p).
func normalQuantile(p float64) float64 { return -math.Sqrt2 * math.Erfcinv(2*p) }
