package siteclass

import (
	"math"

	"shearbook/profile"
	"shearbook/vs30"
)

// jp1793 returns the ground types of the Japanese Notification No. 1793 of
// 1980, section 2, on which the vibration characteristic Rt of a building's
// seismic shear depends.
func jp1793() *Code {
	return &Code{
		ID:        "jp-1793",
		Title:     "Notification No. 1793 of 1980 of the Ministry of Construction",
		Edition:   "Notification No. 1793 (1980), with its technical commentary",
		Region:    "Japan, buildings",
		Clause:    "section 2",
		Table:     "table of ground types",
		Source:    "Notification No. 1793 (1980), section 2, for the types; its commentary for Tg and its limits",
		Parameter: "Tg",
		DepthText: "soil above the base",
		Datum:     DatumFoundation,
		DatumNote: "directly below the footing, or at the bearing level of stiff piles",
		Unit:      profile.MetrePerSecond,
		Length:    profile.Metre,
		Standing:  OneSource,

		//  Type, ground
		Bands: []Band{
			{Class: "1", Name: "rock, hard sandy gravel, and other ground mainly Tertiary or older", Also: "or shown by its period to be alike: Tg ≤ 0.2 s (commentary)", Standing: OneSource},
			{Class: "2", Name: "ground of neither type 1 nor type 3", Also: "0.2 < Tg ≤ 0.75 s (commentary)", Standing: OneSource},
			{Class: "3", Name: "thick alluvium of mud or humus, or young fill on marsh or mud", Also: "or shown by its period to be alike: Tg > 0.75 s (commentary)", Standing: OneSource},
		},

		Rules: []Rule{
			{Class: "1", Asks: []Ask{{"Tg", atMost(0.2), second}}, Clause: "commentary", Standing: OneSource},
			{Class: "2", Asks: []Ask{{"Tg", above(0.2).to(atMost(0.75)), second}}, Clause: "commentary", Standing: OneSource},
			{Class: "3", Asks: []Ask{{"Tg", above(0.75), second}}, Clause: "commentary", Standing: OneSource},
		},

		Terms: []Term{
			{ID: "base", Text: "base layer of Vs ≥ 400 m/s", Range: atLeast(400), Unit: profile.MetrePerSecond,
				Clause: "commentary", Standing: FromMemory},
		},

		Conditions: []Condition{
			{ID: "mud-alluvium", Kind: Softer, Class: "3", Clause: "section 2", Standing: OneSource, Fact: Described,
				Text: "alluvium, fill included, mostly of humus or mud and about 30 m deep or more"},
			{ID: "young-fill", Kind: Softer, Class: "3", Clause: "section 2", Standing: OneSource, Fact: Described,
				Text: "marsh or mud sea filled in to a depth of about 3 m or more, less than about 30 years ago"},
		},

		Notes: []string{
			"Tg = √(32·Σ hi·((Hi−1+Hi)/2)/Vsi²) s, Hi the depth of the bottom of layer i below the foundation; for uniform ground it is 4·H/Vs",
			"the notification describes the types in words and prints no limits of the period; they are the commentary's: the range of type 2 has one source, and those of 1 and 3 follow from it",
			"0.2 s is type 1 and 0.75 s is type 2",
			"a foundation guide takes T = 4·Σ(h/Vs) instead (one source)",
			"which velocity makes a base layer is not printed beside the formula; 400 m/s is taken, from memory of the rules for response calculation, and must be kept as far down as the profile goes",
			"ground that ends above the base has a Tg of more than that of what is known; it is typed only where that is already type 3",
		},
		Short:      "Tg needs the ground down to the base; what lies below the end of the profile only makes it longer",
		Correlated: "the commentary's formula is for Vs, measured or estimated",
		decide:     decide1793,
	}
}

// decide1793 finds the base, and lets the commentary's period of the ground
// above it give the type.
func decide1793(c *Code, s Site) (Decision, error) {
	return decideByPeriod(c, s, "Tg", "period Tg", gravityPeriod)
}

// gravityPeriod is the commentary's formula: that of the deflection of the
// column under its own weight laid sideways,
//
//	Tg = √(32 Σ hᵢ·((Hᵢ₋₁+Hᵢ)/2)/Vsᵢ²)
//
// Within a layer the mean depth over V² is the integral of z/V² over it, which
// is also what a linear gradient gives when cut finely.
var gravityPeriod = columnPeriod{
	of: func(layers []profile.Layer, from, to float64) (float64, error) {
		if _, err := vs30.TravelTime(layers, from, to); err != nil {
			return 0, err
		}
		sum := 0.0
		for i := range layers {
			l := &layers[i]
			if top, bottom := max(l.Top, from), min(l.Bottom, to); bottom > top {
				sum += depthOverSquare(top-from, bottom-from, l.VsAt(top), l.VsAt(bottom))
			}
		}
		return math.Sqrt(32 * sum), nil
	},
	carry: func(t, depth, v, enough float64) float64 {
		return math.Sqrt(depth*depth + (enough*enough-t*t)*v*v/16)
	},
}

// depthOverSquare returns ∫ z/V² dz between the depths a and b (m), V growing
// linearly from va to vb (m/s). With k = (vb−va)/(b−a) it is
//
//	(a − va/k)/k · (1/va − 1/vb) + ln(vb/va)/k²
//
// A slight gradient makes that the difference of two large numbers; the
// integral is then taken at three points (Gauss and Legendre), which is as
// good as exact.
func depthOverSquare(a, b, va, vb float64) float64 {
	h, x := b-a, (vb-va)/va
	if x == 0 {
		return h * (a + b) / 2 / (va * va)
	}
	if math.Abs(x) < 0.02 {
		at := func(u float64) float64 { v := va * (1 + x*u); return (a + h*u) / (v * v) }
		d := math.Sqrt(0.6) / 2
		return h * (5*at(0.5-d) + 8*at(0.5) + 5*at(0.5+d)) / 18
	}
	k := (vb - va) / h
	return (a-va/k)/k*(1/va-1/vb) + math.Log1p(x)/(k*k)
}
