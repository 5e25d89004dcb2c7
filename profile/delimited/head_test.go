package delimited

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"shearbook/profile"
)

// readPieces reads a table profile by profile, cutting the text behind the head
// into chunks of about size bytes first.
func readPieces(t *testing.T, text string, size int) ([]profile.Profile, profile.Faults) {
	t.Helper()
	h, err := ReadHead("t.csv", []byte(text), Options{})
	if err != nil || h == nil {
		t.Fatalf("head %v, %v", h, err)
	}
	var found []profile.Profile
	var faults profile.Faults
	rest, line := []byte(text)[h.Size():], h.Line()
	for len(rest) > 0 {
		cut := 0
		for n := size; cut == 0; n += size {
			if n >= len(rest) {
				cut = len(rest)
				break
			}
			cut = h.Cut(rest[:n])
		}
		for chunk := rest[:cut]; len(chunk) > 0; {
			_, n, lines, more := h.Next(chunk)
			if more != (n < len(chunk)) || lines != Lines(chunk[:n]) && strings.HasSuffix(string(chunk[:n]), "\n") {
				t.Errorf("%d of %d bytes, %d lines, more %v", n, len(chunk), lines, more)
			}
			p, err := h.Read(chunk[:n], line)
			if err != nil {
				faults = append(faults, err.(profile.Faults)...)
			} else {
				found = append(found, p)
			}
			chunk, line = chunk[n:], line+lines
		}
		rest = rest[cut:]
	}
	return found, faults
}

// Read profile by profile, a table without faults gives what it gives as a whole,
// wherever it is cut.
func TestReadByProfile(t *testing.T) {
	const text = "# method: MASW\n# [B] water table: 3 m\nprofile,top (ft),bottom (ft),vs (ft/s),colour\n" +
		"A,0,20,600,red\nA,20,,1200,\n\nB,0,40,500,\"a \"\"b\"\", c\nd\"\n# a comment\nB,40,100,900,\nC  c,0,50,700,\r\nC c,50,120,800,\r\nD,0,9,300,"
	want, err := Read("t.csv", []byte(text), Options{})
	if err != nil {
		t.Fatal(err)
	}
	for _, size := range []int{20, 50, 1000} {
		got, faults := readPieces(t, text, size)
		if len(faults) > 0 {
			t.Fatal(faults)
		}
		for i := range got { // what only the whole file has
			got[i].Reading.SHA256, got[i].Reading.Size = want[i].Reading.SHA256, want[i].Reading.Size
			got[i].Reading.Metadata, want[i].Reading.Metadata = nil, nil
		}
		if diff := cmp.Diff(want, got); diff != "" {
			t.Errorf("in pieces of %d bytes (-whole +pieces):\n%s", size, diff)
		}
	}
}

// A fault is told at the place at which it is told of the whole table, and the
// other profiles are read.
func TestFaultsByProfile(t *testing.T) {
	const text = "profile;top_m;bottom_m;vs_mps\nA;0;5;1,5e2\nA;5;60;310,5\nB;0;5;fast\nB;4;9;250\nC;0;60;300\n;60;70;1\nD;0;\"60;200\nD;0;60;200\nE;0;60;200\n"
	_, err := Read("t.csv", []byte(strings.ReplaceAll(text, `"`, "")), Options{})
	got, faults := readPieces(t, strings.ReplaceAll(text, `"`, ""), 30)
	if diff := cmp.Diff(err, error(faults)); diff != "" {
		t.Errorf("(-whole +pieces):\n%s", diff)
	}
	names := func(list []profile.Profile) string {
		text := ""
		for _, p := range list {
			text += p.Name
		}
		return text
	}
	if names(got) != "AE" {
		t.Errorf("read %s", names(got))
	}
	if got, faults = readPieces(t, text, 30); names(got) != "AE" || !strings.Contains(faults.Error(), "t.csv:8:5: the quote is not closed") {
		t.Errorf("read %s; %v", names(got), faults)
	}
}
