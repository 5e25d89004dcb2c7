package spread

import "testing"

// Planning values (from memory), by the method as profiles state it.
func TestPublished(t *testing.T) {
	for method, want := range map[string][2]float64{
		"downhole": {0.05, 0.10}, "Cross-hole test": {0.05, 0.10}, "PS logging": {0.05, 0.10}, "P-S Log": {0.05, 0.10}, "suspension logger": {0.05, 0.10},
		"MASW": {0.05, 0.15}, "SPAC/F-K": {0.05, 0.15}, "refraction microtremor (ReMi)": {0.05, 0.15}, "Active surface waves": {0.05, 0.15},
		"SCPTu": {0.10, 0.10}, "Seismic cone": {0.10, 0.10},
		"SPT": {0.20, 0.35}, "CPTU correlation": {0.20, 0.35},
		"surface geology": {0.30, 0.40}, "topographic slope": {0.35, 0.50},
	} {
		r, ok := Published(method)
		if !ok || r.Low != want[0] || r.High != want[1] {
			t.Errorf("%q: %g to %g, %v; want %g to %g", method, r.Low, r.High, ok, want[0], want[1])
		}
		if r.Method == "" || r.Source == "" || r.Standing != "from memory" {
			t.Errorf("%q: %+v does not say where it comes from", method, r)
		}
	}
	for _, method := range []string{"", "SH refraction", "guess", "MASW and downhole", "respite", "aspect"} {
		if r, ok := Published(method); ok {
			t.Errorf("%q: %+v, want none", method, r)
		}
	}
}
