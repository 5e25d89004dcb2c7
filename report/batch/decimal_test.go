package batch

import (
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"
)

// What plainDecimal reads, strconv.ParseFloat reads too, to the last bit; and
// it stops where the number does, wherever in the text that is.
func TestPlainDecimal(t *testing.T) {
	random := rand.New(rand.NewPCG(8, 8))
	const characters = "0123456789.0123456789.,\n- e/:\xb9"
	for range 400000 {
		b := make([]byte, random.IntN(22))
		for i := range b {
			b[i] = characters[random.IntN(len(characters))]
			if random.IntN(3) > 0 {
				b[i] = byte('0' + random.IntN(10))
			}
		}
		at := random.IntN(len(b) + 1)
		v, end := plainDecimal(b, at)
		if v2, end2 := longDecimal(b, at); v != v2 || end != end2 {
			t.Fatalf("%q from %d: %v to %d, digit by digit %v to %d", b, at, v, end, v2, end2)
		}
		text := string(b[at:end])
		if end > at {
			if want, err := strconv.ParseFloat(text, 64); err != nil || v != want {
				t.Fatalf("%q: %v, want %v, %v", text, v, want, err)
			}
			if rest := string(b[end:]); rest != "" && (rest[0] >= '0' && rest[0] <= '9' || rest[0] == '.' && !strings.Contains(text, ".")) {
				t.Fatalf("%q from %d ends at %d", b, at, end)
			}
		} else if len(b) > at && b[at] >= '0' && b[at] <= '9' && len(b)-at < 15 {
			t.Fatalf("%q from %d is not read", b, at)
		}
	}
}
