package pdf

import (
	"bytes"
	"slices"
	"strings"
	"testing"

	"github.com/go-pdf/fpdf"

	"shearbook/report"
)

const sample = "Aa Vv 0123456789 éÅŁź ½ ≤≥ σρΣ ж Я \u0304\u0305"

// The widths must be those that fpdf writes to the file (github.com/go-pdf/fpdf
// v0.9.0 reads the whole face to find them).
func TestAdvancesAreThoseOfTheFile(t *testing.T) {
	for font := range report.Font(faceCount) {
		f := loadFace(trueType(font))
		p := fpdf.New("P", "pt", "A4", "")
		p.AddUTF8FontFromBytes("f", "", slices.Clone(f.file))
		p.SetFont("f", "", 10)
		for r := rune(' '); r < 0x530; r++ {
			if f.glyph(r) == 0 {
				continue
			}
			if got, want := f.advance(r), p.GetStringSymbolWidth(string(r)); got != want {
				t.Errorf("font %d: %q is %d wide, fpdf says %d", font, r, got, want)
			}
		}
	}
}

func TestSubsetHoldsWhatIsUsed(t *testing.T) {
	for font := range report.Font(faceCount) {
		f := loadFace(trueType(font))
		for _, r := range sample {
			f.use(r)
		}
		file, _ := f.subset()
		cut := loadFace(file)
		for _, r := range sample {
			if f.glyph(r) == 0 {
				continue
			}
			if cut.glyph(r) == 0 {
				t.Errorf("font %d: %q was cut out", font, r)
				continue
			}
			if f.advance(r) != cut.advance(r) || f.bounds(r) != cut.bounds(r) {
				t.Errorf("font %d: %q was changed", font, r)
			}
			eachComponent(cut.outline(cut.glyph(r)), func(number []byte) {
				part := cut.outline(be16(number, 0))
				if len(part) == 0 {
					t.Errorf("font %d: a part of %q was cut out", font, r)
				}
			})
		}
		if cut.glyph('Q') != 0 {
			t.Errorf("font %d: Q is not used but there", font)
		}
		if len(cut.file) > 60000 {
			t.Errorf("font %d: the cut file has %d bytes", font, len(cut.file))
		}
	}
}

func TestPrintingLeavesTheFontsAlone(t *testing.T) {
	before := slices.Clone(trueType(report.Mono))
	printed(t, demo(), Options{})
	if !bytes.Equal(before, trueType(report.Mono)) {
		t.Error("a font of the program was written to")
	}
}

// Sans, units of 1/2048 em: v reaches from 7 to 1017 and up to 1082, the
// macron from -275 to 274 and from 1236 up. Centred: (7+1017)/2 - (-275+274)/2
// = 512.5; 140 clear of the letter: 1082 + 140 - 1236 = -14.
func TestMacronStandsOverItsLetter(t *testing.T) {
	f := loadFace(trueType(report.Sans))
	var stack markStack
	if dx, dy := stack.place(f, 'v', '\u0304'); dx != 512.5 || dy != -14 {
		t.Errorf("macron moved by %g, %g; want 512.5, -14", dx, dy)
	}
	// A second mark clears the first: up by its height of 127 and 140 more.
	if _, dy := stack.place(f, 'v', '\u0304'); dy != -14+127+140 {
		t.Errorf("second macron moved up by %g, want 253", dy)
	}
	s := &setter{}
	st := style{font: report.Sans, size: 9.5}
	if got, want := s.width(st, "v\u0304"), s.width(st, "v"); got != want {
		t.Errorf("v with a macron is %g wide, v alone %g", got, want)
	}
	segs := s.segments(st, "av\u0304b")
	var texts []string
	for _, g := range segs {
		texts = append(texts, g.text)
	}
	if !slices.Equal(texts, []string{"av", "\u0304", "b"}) {
		t.Errorf("segments %q", texts)
	}
	if got, want := segs[2].x, s.width(st, "av"); got != want {
		t.Errorf("what follows starts at %g, want %g", got, want)
	}
}

func TestKerning(t *testing.T) {
	s := &setter{}
	f := s.fonts.get(report.Sans)
	if f.kern('A', 'V') >= 0 {
		t.Error("A and V are not drawn together")
	}
	if f.kern('1', '1') != 0 {
		t.Error("figures are kerned and would not stand below each other")
	}
	large, small := style{font: report.Sans, size: 20}, style{font: report.Sans, size: 9.5}
	if s.width(large, "AV") >= s.width(large, "A")+s.width(large, "V") {
		t.Error("large type is not kerned")
	}
	if segs := s.segments(small, "AVAVA"); len(segs) != 1 {
		t.Errorf("small type is cut in %d", len(segs))
	}
	var joined strings.Builder
	for _, g := range s.segments(large, "AVATAR To") {
		joined.WriteString(g.text)
	}
	if joined.String() != "AVATAR To" {
		t.Errorf("kerning lost letters: %q", joined.String())
	}
}
