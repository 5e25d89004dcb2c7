package correlate

import (
	"fmt"
	"strings"

	"shearbook/profile"
)

// Gravity is standard gravity in m/s², exact by definition (3rd CGPM, 1901).
const Gravity = 9.80665

// WaterWeight is the unit weight of fresh water in kN/m³.
const WaterWeight = Gravity

// The unit weights of ground that are believed, in kN/m³: peat is hardly
// heavier than water, and no rock near the surface reaches the other (common
// practice; from memory).
const (
	MinUnitWeight = 9
	MaxUnitWeight = 32
)

// ParseUnitWeight returns a unit weight in kN/m³, such as "18 kN/m3" or "115
// pcf". A density, such as "1900 kg/m3", is one times standard gravity.
func ParseUnitWeight(text string) (float64, error) {
	text = strings.TrimSpace(text)
	var v float64
	var err error
	if number, ok := withoutUnit(text); ok {
		if v, err = profile.ParseValue(number+" kg/m3", profile.MassDensity); err != nil {
			return 0, fmt.Errorf("%q is not a number with its unit", text)
		}
	} else if v, err = profile.ParseValue(text, profile.MassDensity); err != nil {
		return 0, fmt.Errorf("%q is no unit weight: it is written as 18 kN/m3, 115 pcf or 1900 kg/m3", text)
	} else {
		v *= Gravity / 1000
	}
	return v, checkUnitWeight(v)
}

// withoutUnit is the number before kN/m³.
func withoutUnit(text string) (string, bool) {
	for _, unit := range []string{"kn/m3", "kn/m³", "kn/m^3"} {
		if number, ok := strings.CutSuffix(strings.ToLower(text), unit); ok {
			return strings.TrimSpace(number), true
		}
	}
	return "", false
}

func checkUnitWeight(v float64) error {
	if !(v >= MinUnitWeight && v <= MaxUnitWeight) {
		return fmt.Errorf("a unit weight of %.4g kN/m³ is not one of the ground: %d to %d kN/m³", v, MinUnitWeight, MaxUnitWeight)
	}
	return nil
}

// weightOf is the unit weight of a layer in kN/m³, by its density or else as
// the user states it; 0 if neither is there.
func weightOf(l *profile.Layer, stated float64) float64 {
	if l.Has(profile.GivenDensity) {
		return l.Density * Gravity / 1000
	}
	return stated
}

// water is the water in the ground.
type water struct {
	table profile.Optional // m below ground level; negative where it stands above
}

// pressure is that of water at rest at depth z, in kPa. Above the water table
// it is 0: no suction is counted.
func (w water) pressure(z float64) float64 {
	return WaterWeight * max(0, z-w.table.Value)
}

// above is the stress in kPa of the water that stands on the ground.
func (w water) above() float64 { return WaterWeight * max(0, -w.table.Value) }

// ofSoil is the total vertical stress in kPa of the layers above depth z,
// without water on the ground; false where the unit weight of one is not known.
//
//	σ = Σ γᵢ·hᵢ
func ofSoil(layers []profile.Layer, z, stated float64) (float64, bool) {
	sum := 0.0
	for i := range layers {
		l := &layers[i]
		if l.Top >= z {
			break
		}
		weight := weightOf(l, stated)
		if weight == 0 {
			return 0, false
		}
		sum += weight * (min(l.Bottom, z) - l.Top)
	}
	return sum, true
}

// setStresses makes the stresses at a depth known, or says why they are not:
// soil is the stress of the ground alone.
//
//	σ'v = σv − u
func (in *Input) setStresses(z, soil float64, known bool, w water) {
	switch {
	case !known:
		in.missing(TotalStress, noWeight)
		in.missing(EffectiveStress, noWeight)
	case !w.table.Known:
		in.missing(EffectiveStress, noWater)
		in.Set(TotalStress, soil) // a water table in the ground does not change it
	default:
		in.Set(TotalStress, soil+w.above())
		in.Set(EffectiveStress, soil+w.above()-w.pressure(z))
	}
}

// What is said where a stress is not known.
const (
	noWeight = "the unit weight of the ground down to there is not stated"
	noWater  = "the water table is not stated"
)
