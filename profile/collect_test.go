package profile

import (
	"errors"
	"strings"
	"testing"
)

func TestCollector(t *testing.T) {
	c := Collector{File: "a.txt"}
	if err := c.Err(); err != nil {
		t.Fatalf("an empty collector: %v", err)
	}
	c.Fault(Place{Line: 3, Column: 2}, "mend it", "wrong %d", 1)
	c.Fault(Place{Line: 1, Column: 9}, "", "wrong %d", 2)
	c.Fault(Place{Line: 1, Column: 4}, "", "wrong %d", 3)
	const want = "a.txt:1:4: wrong 3\na.txt:1:9: wrong 2\na.txt:3:2: wrong 1"
	var faults Faults
	if err := c.Err(); !errors.As(err, &faults) || faults.Error() != want || faults[2].Hint != "mend it" {
		t.Errorf("got\n%v\nwant\n%s", err, want)
	}
}

// Twenty faults are told, the one that ends the reading, and a number.
func TestCollectorBounds(t *testing.T) {
	c := Collector{File: "a.txt"}
	for i := range MaxFaults + 5 {
		c.Fault(Place{Line: i + 1}, "", "wrong")
	}
	c.Stop(Place{Line: 99}, "", "the end")
	lines := strings.Split(c.Err().Error(), "\n")
	if len(lines) != MaxFaults+2 || lines[MaxFaults] != "a.txt:99: the end" || lines[MaxFaults+1] != "a.txt: and 5 more faults" || c.Count() != MaxFaults+6 {
		t.Errorf("got %d lines, the last ones %q", len(lines), lines[MaxFaults:])
	}
	// Nothing is added by asking twice.
	if again := c.Err().Error(); again != strings.Join(lines, "\n") {
		t.Errorf("asked again\n%s", again)
	}
}

func TestQuote(t *testing.T) {
	for text, want := range map[string]string{
		"":                      `""`,
		"a\x00\u202eb":          `"a\x00\u202eb"`,
		strings.Repeat("ö", 40): `"` + strings.Repeat("ö", 40) + `"`,
		strings.Repeat("ö", 41): `"` + strings.Repeat("ö", 40) + `…"`,
	} {
		if got := Quote(text); got != want {
			t.Errorf("Quote(%q) = %s, want %s", text, got, want)
		}
	}
}
