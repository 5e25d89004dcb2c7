package profile

import (
	"math"
	"testing"
)

// The factors of all units, against those of the Unified Code for Units of
// Measure (UCUM, version 2.1), from memory, whose atoms are: [ft_i] = 12·2.54 cm,
// [lb_av] = 7000·64.79891 mg, [lbf_av] = [lb_av]·9.80665 m/s², and the prefixes
// c, m, k, M of SI.
func TestUnitFactors(t *testing.T) {
	const (
		ft  = 12 * 2.54e-2
		lb  = 7000 * 64.79891e-6 // kg
		lbf = lb * 9.80665       // N
	)
	for _, c := range []struct {
		spelling string
		d        Dimension
		want     float64
	}{
		{"m", Length, 1}, {"ft", Length, ft}, {"cm", Length, 1e-2}, {"mm", Length, 1e-3},
		{"m/s", Velocity, 1}, {"ft/s", Velocity, ft}, {"km/s", Velocity, 1e3},
		{"kg/m3", MassDensity, 1}, {"g/cm3", MassDensity, 1e-3 / 1e-6}, {"t/m3", MassDensity, 1e3}, {"Mg/m3", MassDensity, 1e3},
		{"pcf", MassDensity, lb / (ft * ft * ft)}, {"lb/ft3", MassDensity, lb / (ft * ft * ft)},
		{"kPa", Stress, 1}, {"kN/m2", Stress, 1}, {"MPa", Stress, 1e3}, {"MN/m2", Stress, 1e3},
		{"psf", Stress, lbf / (ft * ft) / 1e3}, {"ksf", Stress, lbf / (ft * ft)},
		{"%", Percent, 1}, {"blows/0.3 m", Blows, 1}, {"blows/ft", Blows, 1},
	} {
		u, ok := ParseUnit(c.spelling, c.d)
		if !ok || math.Abs(u.Factor-c.want) > 1e-12*c.want {
			t.Errorf("%s: factor %v, %v; want %v", c.spelling, u.Factor, ok, c.want)
		}
	}
	listed := 0
	for d := Dimensionless; d <= Blows; d++ {
		listed += len(UnitNames(d))
	}
	if listed != 16 {
		t.Errorf("%d units are read; the list above knows 16", listed)
	}
}

// A foot is not an inch to a metre, nor Mg a milligram: units are told apart by
// their dimension.
func TestUnitDimensions(t *testing.T) {
	for spelling, d := range map[string]Dimension{"m": Velocity, "ft": Velocity, "m/s": Length, "kPa": Length, "us/ft": Velocity, "": Length} {
		if u, ok := ParseUnit(spelling, d); ok {
			t.Errorf("%q is read as %v of %v", spelling, u, d)
		}
	}
}
