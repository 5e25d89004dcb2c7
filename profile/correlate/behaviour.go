package correlate

import "math"

// Behaviour is a reading of a cone in the terms of Robertson.
type Behaviour struct {
	Index         float64 // Ic, the soil behaviour type index
	NormalisedTip float64 // Qtn
	FrictionRatio float64 // Fr, %
	Exponent      float64 // n of the stress in Qtn
}

// NewBehaviour returns the normalised quantities of Robertson (2009), Canadian
// Geotechnical Journal 46:1337–1355 (from memory), of a corrected tip resistance
// qt, a sleeve friction fs and the vertical stresses, all in kPa:
//
//	Qtn = ((qt − σv)/pa)·(pa/σ'v)^n
//	Fr  = 100·fs/(qt − σv)
//	n   = 0.381·Ic + 0.05·σ'v/pa − 0.15, at most 1
//	Ic  = √((3.47 − log Qtn)² + (log Fr + 1.22)²)
//
// with pa = 100 kPa. n and Ic depend on each other and are found by repetition
// from n = 1 until n changes by less than 10⁻⁹; each step shrinks the
// change by 0.381·|log(pa/σ'v)| at least, which is below 0.77 above 1 kPa. It
// returns false where qt ≤ σv, where fs or σ'v is not above zero, or where it
// does not settle.
func NewBehaviour(qt, fs, total, effective float64) (Behaviour, bool) {
	net := qt - total
	if !(net > 0 && fs > 0 && effective > 0) || math.IsInf(net, 0) || math.IsInf(fs, 0) {
		return Behaviour{}, false
	}
	b := Behaviour{FrictionRatio: 100 * fs / net, Exponent: 1}
	const most = 500
	for range most {
		b.NormalisedTip = net / Atmosphere * math.Pow(Atmosphere/effective, b.Exponent)
		b.Index = math.Hypot(3.47-math.Log10(b.NormalisedTip), math.Log10(b.FrictionRatio)+1.22)
		n := min(1, 0.381*b.Index+0.05*effective/Atmosphere-0.15)
		if math.Abs(n-b.Exponent) < 1e-9 {
			return b, true
		}
		b.Exponent = n
	}
	return Behaviour{}, false
}

// Soil is the principal soil that the index tells: gravel to sand below 1.31
// and sand up to 2.60, silt up to 2.95, clay up to 3.60, and nothing above,
// where it is organic (zones of Robertson 1990, by the index in Robertson 2009;
// from memory). It tells how the ground behaves, not what it is made of.
func (b Behaviour) Soil() Soil {
	switch {
	case b.Index <= 2.60:
		return Sand
	case b.Index <= 2.95:
		return Silt
	case b.Index <= 3.60:
		return Clay
	}
	return SoilNotStated
}
