package report

import (
	"encoding/xml"
	"io"
	"math"
	"strings"
	"testing"
)

// samplePicture holds every kind of mark, movement and font.
func samplePicture() *Picture {
	grey := Colour{0x80, 0x80, 0x80}
	p := &Picture{Width: 240, Height: 90.5, Marks: []Mark{
		&Fill{Path{{Kind: MoveTo}, {Kind: LineTo, X: 240}, {Kind: LineTo, X: 240, Y: 90.5}, {Kind: LineTo, Y: 90.5}, {Kind: Close}}, Colour{255, 255, 255}},
		&Stroke{Path{{Kind: MoveTo, X: 10, Y: 80}, {Kind: CurveTo, X: 200, Y: 10.12345, X1: 60, Y1: 80, X2: 100, Y2: 1e-9}}, 0.75, Colour{0, 0x72, 0xb2}, []float64{4, 2.5}},
		&Stroke{Path{{Kind: MoveTo, X: -1.0004}, {Kind: LineTo, X: 1.0 / 3, Y: 90.5}}, 1, grey, nil},
		&Label{X: 12, Y: 45, Turn: 90, Text: "Depth (m) <30 & \u202emore", Size: 9},
	}}
	for f := Sans; f <= MonoBold; f++ {
		p.Marks = append(p.Marks, &Label{X: 120, Y: 85 - 8*float64(f), Text: "Vₛ ≤ 360 m/s", Font: f, Size: 7.5, Colour: grey})
	}
	return p
}

func svgOf(t testing.TB, p *Picture, title, desc string) string {
	t.Helper()
	var b strings.Builder
	if err := p.SVG(&b, title, desc); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func TestSVGIsWellFormed(t *testing.T) {
	for _, s := range hostileTexts {
		source := svgOf(t, &Picture{Width: 10, Height: 10, Marks: []Mark{&Label{Text: s, Size: 9}}}, s, s)
		d := xml.NewDecoder(strings.NewReader(source))
		var elements, text string
		for {
			tok, err := d.Token()
			if err == io.EOF {
				break
			}
			if err != nil {
				t.Fatalf("%v in %s", err, source)
			}
			switch tok := tok.(type) {
			case xml.StartElement:
				elements += tok.Name.Local + " "
			case xml.CharData:
				text += string(tok)
			}
		}
		if elements != "svg title desc text " {
			t.Errorf("elements %s in\n%s", elements, source)
		}
		want := words(s + " " + s + " " + s)
		if words(text) != want {
			t.Errorf("text %q, want %q", words(text), want)
		}
	}
}

func TestSVGNumbers(t *testing.T) {
	s := &svg{}
	for x, want := range map[float64]string{0: "0", -0.0001: "0", 1: "1", 1.5: "1.5", 100: "100", 2.0 / 3: "0.667", -12.3404: "-12.34", 1e6: "1000000"} {
		if got := s.number(x); got != want {
			t.Errorf("number(%v) = %s, want %s", x, got, want)
		}
	}
}

func TestSVGTurnsYOver(t *testing.T) {
	p := &Picture{Width: 10, Height: 30, Marks: []Mark{&Stroke{Path: Path{{Kind: MoveTo, X: 1, Y: 0}, {Kind: LineTo, X: 2, Y: 30}}, Width: 1}}}
	if got := svgOf(t, p, "", ""); !strings.Contains(got, `d="M1 30L2 0"`) {
		t.Errorf("path in %s", got)
	}
}

func TestSVGRefusesInfinity(t *testing.T) {
	for _, p := range []*Picture{
		{Width: math.Inf(1)},
		{Marks: []Mark{&Label{X: math.NaN()}}},
		{Marks: []Mark{&Fill{Path: Path{{Kind: LineTo, Y: math.Inf(-1)}}}}},
		{Marks: []Mark{&Stroke{Dash: []float64{math.NaN()}}}},
	} {
		if err := p.SVG(io.Discard, "", ""); err == nil {
			t.Errorf("%+v is not refused", p)
		}
	}
}
