package vs30

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// What AppendFour writes is what fmt writes, and it leaves few numbers out.
func TestAppendFour(t *testing.T) {
	random := rand.New(rand.NewPCG(4, 4))
	wrote := 0
	const n = 500000
	for range n {
		v := math.Exp(10*random.Float64() - 0.5)
		switch random.IntN(4) {
		case 0:
			v = math.Round(v*10) / 10
		case 1:
			v = math.Round(v*100) / 100
		}
		b, ok := AppendFour([]byte("x"), v)
		want := "x"
		if ok {
			wrote++
			want += fmt.Sprintf("%.4g", v)
		}
		if string(b) != want {
			t.Fatalf("%v: %q, want %q", v, b, want)
		}
	}
	if wrote < n*8/10 {
		t.Errorf("%d of %d were written", wrote, n)
	}
	for _, v := range []float64{0, -1, 0.5, 1e4, math.NaN(), math.Inf(1), 1000.04, 9.9995, 12.345, 99.995} {
		if b, ok := AppendFour(nil, v); ok && string(b) != fmt.Sprintf("%.4g", v) {
			t.Errorf("%v: %q", v, b)
		}
	}
}
