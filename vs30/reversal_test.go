package vs30

import (
	"slices"
	"testing"

	"shearbook/profile"
)

func TestReversals(t *testing.T) {
	ground := stack(5, 197, 5, 146, 10, 367, 20, 243)
	falling := stack(5, 200, 10, 300, 10, 400)
	falling[1].VsBottom = 180
	for _, c := range []struct {
		name     string
		layers   []profile.Layer
		from, to float64
		want     []Reversal
	}{
		{"two interfaces", ground, 0, 30, []Reversal{{1, 5, 197, 146}, {3, 20, 367, 243}}},
		{"an interface at the lower end", ground, 0, 20, []Reversal{{1, 5, 197, 146}}},
		{"an interface an ulp above the lower end", ground, 0, 20 + 1e-12, []Reversal{{1, 5, 197, 146}}},
		{"an interface at the upper end", ground, 5, 30, []Reversal{{3, 20, 367, 243}}},
		{"growing", stack(5, 200, 5, 300, 30, 300), 0, 30, nil},
		// 300 m/s at 5 m to 180 m/s at 15 m: 276 m/s at 7 m, by hand.
		{"a falling gradient", falling, 0, 25, []Reversal{{1, 5, 300, 180}}},
		{"a falling gradient cut above", falling, 7, 25, []Reversal{{1, 7, 276, 180}}},
		{"a falling gradient cut below", falling, 0, 7, []Reversal{{1, 5, 300, 276}}},
		{"a growing gradient", gradient(30, 180, 360), 0, 30, nil},
		{"no layers", nil, 0, 30, nil},
	} {
		if got := Reversals(c.layers, c.from, c.to); !slices.Equal(got, c.want) {
			t.Errorf("%s: %v, want %v", c.name, got, c.want)
		}
	}
}

// A slower layer below one with a gradient is compared with the velocity that
// the gradient ends with.
func TestReversalBelowGradient(t *testing.T) {
	layers := stack(10, 200, 10, 300)
	layers[0].VsBottom = 350
	want := []Reversal{{1, 10, 350, 300}}
	if got := Reversals(layers, 0, 20); !slices.Equal(got, want) {
		t.Errorf("%v, want %v", got, want)
	}
}

// Float noise is no fall: 200 m/s computed twice of one slowness.
func TestFloatNoiseIsNoReversal(t *testing.T) {
	layers := stack(0.1, 200.00000000000003, 0.1, 200, 30, 200*(1-1e-10))
	layers[2].VsBottom = 200 * (1 - 2e-10)
	if got := Reversals(layers, 0, 30); got != nil {
		t.Errorf("%v", got)
	}
	if got := Reversals(stack(5, 200, 30, 200*(1-2e-9)), 0, 30); len(got) != 1 {
		t.Errorf("a fall of two parts in 10⁹: %v", got)
	}
}
