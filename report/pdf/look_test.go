package pdf

import (
	"os"
	"testing"
)

func TestLook(t *testing.T) {
	for name, p := range map[string]Paper{"a4": A4, "letter": Letter} {
		f, _ := os.Create("/tmp/look/" + name + ".pdf")
		if err := Write(f, demo(), Options{Paper: p}); err != nil {
			t.Fatal(err)
		}
		f.Close()
	}
}
