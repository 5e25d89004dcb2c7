package batch

import (
	"math"
	"math/rand/v2"
	"strconv"
	"testing"
)

// The quick texts of numbers are those of package strconv.
func TestAppendNumbers(t *testing.T) {
	random := rand.New(rand.NewPCG(5, 5))
	for range 400000 {
		n := uint64(math.Exp(22 * random.Float64()))
		if got, want := string(appendDigits(nil, n)), strconv.FormatUint(n, 10); got != want {
			t.Fatalf("%d is written %s", n, got)
		}
		x, decimals := math.Exp(26*random.Float64()-6), random.IntN(3)
		switch random.IntN(4) {
		case 0:
			x = -x
		case 1:
			x = math.Round(1000*x) / 1000
		case 2:
			x = math.Floor(x) + 0.5
		}
		want := string(appendTrimmed(nil, strconv.FormatFloat(x, 'f', decimals, 64)))
		if got := string(appendRounded(nil, x, decimals)); got != want {
			t.Fatalf("%v to %d decimals is written %s, want %s", x, decimals, got, want)
		}
	}
}
