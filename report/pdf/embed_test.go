package pdf

import (
	"bytes"
	"strings"
	"testing"

	"shearbook/report"
)

// The sum of a whole font file, its adjustment included, is 0xB1B0AFBA
// (OpenType specification 1.9, "head": checksumAdjustment), and each table's
// is what its entry says, head's taken with an adjustment of zero.
func TestSumsOfTheEmbeddedFile(t *testing.T) {
	for font := range report.Font(faceCount) {
		f := loadFace(trueType(font))
		for _, r := range sample {
			f.use(r)
		}
		file, glyphs := f.subset()
		if got := tableSum(file); got != 0xB1B0AFBA {
			t.Errorf("font %d: sum %X", font, got)
		}
		if len(glyphs) != len(f.usedRunes()) {
			t.Errorf("font %d: %d glyphs for %d characters", font, len(glyphs), len(f.usedRunes()))
		}
		for i := range be16(file, 4) {
			entry := file[12+16*i:]
			start, size := be32(entry, 8), be32(entry, 12)
			table := bytes.Clone(file[start : start+(size+3)/4*4])
			if string(entry[:4]) == "head" {
				copy(table[8:12], []byte{0, 0, 0, 0})
			}
			if got := tableSum(table); int(got) != be32(entry, 4) {
				t.Errorf("font %d: table %s sums to %X, its entry says %X", font, entry[:4], got, be32(entry, 4))
			}
		}
	}
}

func TestCharactersAreNumberedInOrder(t *testing.T) {
	f := loadFace(trueType(report.Sans))
	for _, r := range sample + "\uFFFE" {
		f.use(r)
	}
	f.number()
	for i, r := range f.usedRunes() {
		if got := f.numberOf(r); int(got) != i+1 {
			t.Errorf("%q has number %d, want %d", r, got, i+1)
		}
	}
}

// A file that is not laid out as fpdf lays it out is refused, not spoilt.
func TestFinishRefusesAnotherLayout(t *testing.T) {
	const sound = "%PDF-1.3\n3 0 obj\n<</Length 1>>\nstream\nq\nendstream\nendobj\n1 0 obj\n<<>>\nendobj\n2 0 obj\n<<\n/Font <<\n>>\n>>\nendobj\n" +
		"xref\n0 4\n0000000000 65535 f \n0000000057 00000 n \n0000000077 00000 n \n0000000009 00000 n \ntrailer\n<<\n/Size 4\n/Root 1 0 R\n/Info 3 0 R\n>>\nstartxref\n110\n%%EOF\n"
	if _, err := finish([]byte(sound), nil); err != nil {
		t.Fatalf("the sound file: %v", err)
	}
	for _, change := range [][2]string{
		{"startxref", "startxrex"}, {"\n110\n", "\n999\n"}, {"xref\n0", "xrex\n0"}, {"0000000077", "0000009977"},
		{"0000000077", "x000000077"}, {"trailer\n<<\n", "trailer <<\n"}, {"\nendstream", " endstream"},
	} {
		if _, err := finish([]byte(strings.Replace(sound, change[0], change[1], 1)), nil); err == nil {
			t.Errorf("%q for %q is taken", change[1], change[0])
		}
	}
	for n := range len(sound) - 8 {
		if _, err := finish([]byte(sound[:n]), nil); err == nil {
			t.Fatalf("cut at %d it is taken", n)
		}
	}
}
