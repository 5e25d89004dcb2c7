package correlate

import (
	"fmt"
	"math"
)

// Drive is how a standard penetration test was driven, for the correction of
// its blow count to 60 % of the energy.
type Drive struct {
	EnergyRatio float64 // %, of the energy of the free fall; 0 if it was not measured: nothing is corrected
	Borehole    float64 // mm, diameter; 0 is 65 to 115 mm
	Sampler     float64 // the factor CS: 0 or 1 with liners, 1.1 to 1.3 where there is room for them and none are in
	RodAbove    float64 // m of rods above ground level, added to the depth of the test for the length of the rods
}

// N60 returns a blow count n at depth m below ground level corrected to 60 % of
// the energy:
//
//	N60 = N·(ER/60)·CB·CS·CR
//
// The factors are those of Skempton (1986), Géotechnique 36(3), and Youd et al.
// (2001), ASCE JGGE 127(10), from memory: CB is 1.0 for boreholes of 65 to
// 115 mm, 1.05 for 150 mm, 1.15 for 200 mm, and linear between these, which is
// our choice; CR is 0.75 for rods up to 4 m, 0.85 up to 6 m, 0.95 up to 10 m,
// and 1.0 beyond. The error says which statement is none.
func (d Drive) N60(n, depth float64) (float64, error) {
	if err := d.check(); err != nil {
		return 0, err
	}
	return n * d.EnergyRatio / 60 * d.borehole() * max(1, d.Sampler) * rods(depth+d.RodAbove), nil
}

// The energy ratios that are believed, in %: less or more was not seen of any
// hammer (common practice; from memory).
const (
	MinEnergyRatio = 30
	MaxEnergyRatio = 110
)

func (d Drive) check() error {
	switch {
	case !(d.EnergyRatio >= MinEnergyRatio && d.EnergyRatio <= MaxEnergyRatio):
		return fmt.Errorf("an energy ratio of %.4g %% is not one: hammers give %d to %d %%", d.EnergyRatio, MinEnergyRatio, MaxEnergyRatio)
	case d.Borehole != 0 && !(d.Borehole >= 65 && d.Borehole <= 200):
		return fmt.Errorf("a borehole of %.4g mm is not one of 65 to 200 mm, for which there is a correction", d.Borehole)
	case d.Sampler != 0 && !(d.Sampler >= 1 && d.Sampler <= 1.3):
		return fmt.Errorf("a sampler factor of %.4g is not one of 1 to 1.3", d.Sampler)
	case !(d.RodAbove >= 0 && d.RodAbove <= 10):
		return fmt.Errorf("rods of %.4g m above ground level are not 0 to 10 m", d.RodAbove)
	}
	return nil
}

// borehole is CB.
func (d Drive) borehole() float64 {
	switch b := d.Borehole; {
	case b <= 115:
		return 1
	case b <= 150:
		return 1 + 0.05*(b-115)/(150-115)
	default:
		return 1.05 + 0.10*(b-150)/(200-150)
	}
}

// rods is CR for a length of rods in m. At a bound of two rows the lower
// factor is taken, for the slower ground.
func rods(length float64) float64 {
	switch {
	case length <= 4:
		return 0.75
	case length <= 6:
		return 0.85
	case length <= 10:
		return 0.95
	}
	return 1
}

// MaxOverburden is the cap on the factor by which NormalisedBlows raises a blow
// count (Youd et al. 2001; from memory).
const MaxOverburden = 1.7

// NormalisedBlows returns (N1)60, a blow count N60 brought to an effective
// vertical stress of one atmosphere (one ton per square foot, 95.76 kPa), after
// Liao & Whitman (1986), ASCE JGE 112(3) (one source):
//
//	(N1)60 = N60·√(95.76/σ'v)
//
// where the root is at most MaxOverburden. The stress, in kPa, must be > 0.
func NormalisedBlows(n60, effective float64) float64 {
	return n60 * min(MaxOverburden, math.Sqrt(95.76/effective))
}
