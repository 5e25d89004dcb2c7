package report

import (
	"encoding/xml"
	"io"
	"math"
	"slices"
	"strings"
	"testing"
)

// checkHTML reads d back from its HTML, which must be well-formed XML, and
// compares the text with what was meant and the elements with those of
// plain, the same document with plain texts.
func checkHTML(t testing.TB, d, plain *Document) {
	t.Helper()
	source := htmlOf(t, d)
	seen := readXML(t, bodyOf(t, source), true)
	compareChunks(t, seen.chunks, meantBy(d, true), false, source)
	want := readXML(t, bodyOf(t, htmlOf(t, plain)), true)
	if !slices.Equal(withoutMath(seen.elements), withoutMath(want.elements)) {
		t.Fatalf("elements\n%s\nwant\n%s\nin\n%s", seen.elements, want.elements, source)
	}
	checkAttributes(t, source)
}

// withoutMath takes numbers, operators and words of formulas for the same:
// which it is depends on the text.
func withoutMath(elements []string) []string {
	out := slices.Clone(elements)
	for i, e := range out {
		if e == "<mn>" || e == "<mo>" || e == "<mi>" {
			out[i] = "<mtext>"
		}
	}
	return out
}

var htmlAttributes = strings.Fields(`alt aria-current aria-label checked class content charset d desc disabled display
	fill font-family font-size height href http-equiv id lang lspace movablelimits name role rspace scope src start stretchy
	accent title transform type viewBox width xmlns stroke stroke-width stroke-dasharray font-weight font-style x y displaystyle scriptlevel mathvariant`)

// checkAttributes reports attributes that no printer writes, scripts, links
// that are not Linkable, sources that are not data, and identifiers that are
// there twice or not at all.
func checkAttributes(t testing.TB, source string) {
	t.Helper()
	ids, refs := map[string]bool{}, map[string]bool{}
	d := xml.NewDecoder(strings.NewReader(source))
	for {
		tok, err := d.Token()
		if err == io.EOF {
			break
		}
		if err != nil {
			t.Fatalf("not well-formed: %v\n%s", err, source)
		}
		e, ok := tok.(xml.StartElement)
		if !ok {
			continue
		}
		if slices.Contains([]string{"script", "iframe", "object", "embed", "form", "link", "base"}, e.Name.Local) {
			t.Fatalf("element %s in\n%s", e.Name.Local, source)
		}
		for _, a := range e.Attr {
			switch name := a.Name.Local; {
			case !slices.Contains(htmlAttributes, name):
				t.Fatalf("attribute %s in\n%s", name, source)
			case name == "href" && !Linkable(a.Value):
				t.Fatalf("link to %q in\n%s", a.Value, source)
			case name == "href" && (strings.HasPrefix(a.Value, "#fn:") || strings.HasPrefix(a.Value, "#ref:")):
				refs[a.Value[1:]] = true
			case name == "src" && !strings.HasPrefix(a.Value, "data:image/"):
				t.Fatalf("source %q in\n%s", a.Value, source)
			case name == "id" && ids[a.Value]:
				t.Fatalf("identifier %q twice in\n%s", a.Value, source)
			case name == "id":
				ids[a.Value] = true
			}
		}
	}
	for ref := range refs {
		if !ids[ref] {
			t.Fatalf("no identifier %q in\n%s", ref, source)
		}
	}
}

func TestHTMLKeepsHostileText(t *testing.T) {
	for i := range hostileTexts {
		checkHTML(t, everything(cycle(hostileTexts, i)), everything(cycle([]string{"word"}, 0)))
	}
}

func TestHTMLKeepsRandomDocuments(t *testing.T) {
	for seed := range uint64(500) {
		checkHTML(t, randomDocument(seed, hostile), randomDocument(seed, benign))
	}
}

func TestHTMLHead(t *testing.T) {
	source := htmlOf(t, &Document{Title: "A & B", Author: `"me"`, Keywords: []string{"a", "b"}, Generator: "shearbook 1"})
	for _, want := range []string{
		"<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\"/>\n", "<title>A &amp; B</title>",
		`<meta name="author" content="&#34;me&#34;"/>`, `<meta name="keywords" content="a, b"/>`,
		"default-src 'none'; img-src data:; style-src 'sha256-", "base-uri 'none'; form-action 'none'",
	} {
		if !strings.Contains(source, want) {
			t.Errorf("no %q in\n%s", want, source)
		}
	}
}

// The sum is what OpenSSL 3.0.19 gives:
//
//	printf '\np{}\n' | openssl dgst -sha256 -binary | base64
func TestHTMLPolicyHoldsTheSumOfTheStyle(t *testing.T) {
	var b strings.Builder
	if err := HTML(&b, &Document{}, HTMLOptions{Lang: "nl-BE", Style: "p{}"}); err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"'sha256-S1+1UhUBsQI+oYzHJq9H6zGUGt9DphQexnvaBQ874Hc='", "<style>\np{}\n</style>", `lang="nl-BE"`, "<title>Report</title>"} {
		if !strings.Contains(b.String(), want) {
			t.Errorf("no %q in\n%s", want, b.String())
		}
	}
}

func TestHTMLRefusesStyleThatEnds(t *testing.T) {
	for _, style := range []string{"</style><script>", "a & b"} {
		if err := HTML(io.Discard, &Document{}, HTMLOptions{Style: style}); err == nil {
			t.Errorf("style %q is not refused", style)
		}
	}
}

func TestHTMLRefusesInfinitePicture(t *testing.T) {
	d := &Document{Blocks: []Block{&Figure{Name: "a", Picture: &Picture{Width: math.NaN()}}}}
	var b strings.Builder
	if err := HTML(&b, d, HTMLOptions{}); err == nil || b.Len() > 0 {
		t.Errorf("error %v, %d bytes written", err, b.Len())
	}
}

func TestHTMLPrintsOtherSchemesAsText(t *testing.T) {
	d := &Document{Blocks: []Block{&Paragraph{[]Inline{&Link{"javascript:alert(1)", []Inline{Text("here")}}}}}}
	if got, want := bodyOf(t, htmlOf(t, d)), "<p>here (javascript:alert(1))</p>\n"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}
