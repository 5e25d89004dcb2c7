package notebook

import (
	"bytes"
	"errors"
	"image"
	"image/png"
	"io/fs"
	"math"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/templates"
)

// files is a folder in memory.
type files map[string]string

func (f files) read(name string) ([]byte, error) {
	if text, ok := f[name]; ok {
		return []byte(text), nil
	}
	return nil, fs.ErrNotExist
}

// uniform is 40 m of 300 m/s, so that every average is 300 m/s; the two
// layers of k7 average to 30/(6/220+24/430) = 361.069 m/s over 30 m by hand.
var folder = files{
	"uniform.csv": "top (m),bottom (m),vs (m/s)\n0,10,300\n10,40,300\n",
	"k7.csv":      "top (m),bottom (m),vs (m/s)\n0,6,220\n6,40,430\n",
	"short.csv":   "top (m),bottom (m),vs (m/s)\n0,22,250\n",
	"two.csv":     "profile,bottom (m),vs (m/s)\nA,40,300\nB,40,500\n",
	"bad.csv":     "top (m),bottom (m),vs (m/s)\n0,22,fast\n",
}

// front is a front matter of two profiles; its body starts on line 6.
const front = "---\ncode: asce-7-16\nprofiles:\n  L1: {file: k7.csv}\n---\n"

func evaluate(t *testing.T, source string) (*Report, error) {
	t.Helper()
	nb, err := Parse("site.md", []byte(source))
	if err != nil {
		return nil, err
	}
	return Evaluate(nb, Options{ReadFile: folder.read, Version: "shearbook test"})
}

func mustEvaluate(t *testing.T, source string) *Report {
	t.Helper()
	r, err := evaluate(t, source)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// prose returns the plain text of the first paragraph behind the caution.
func prose(t *testing.T, r *Report) string {
	t.Helper()
	for _, b := range r.Document.Blocks {
		if p, ok := b.(*report.Paragraph); ok {
			return report.PlainText(p.Inline)
		}
	}
	t.Fatal("no paragraph")
	return ""
}

func TestExpressions(t *testing.T) {
	// The expected values are hand calculations: 6/220+24/430 = 0.083086681 s
	// and 30/0.083086681 = 361.068 m/s; 361.068/0.3048 = 1184.61 ft/s.
	for source, want := range map[string]string{
		"L1.vs30":                   "361.1 m/s",
		"round(L1.vs30, 3)":         "361.069 m/s",
		"30 m / L1.vs30":            "0.08309 s",
		"L1.vs30 / 2":               "180.5 m/s",
		"2 * L1.vs30":               "722.1 m/s",
		"L1.vs30 + 10 m/s":          "371.1 m/s",
		"L1.vs30 - 1200 ft/s":       "−4.7 m/s",
		"L1.vs30 > 360 m/s":         "yes",
		"L1.vs30 > 1200 ft/s":       "no",
		"L1.vs30 / 360 m/s":         "1.003",
		"number(L1.vs30, \"ft/s\")": "1185",
		"sqrt(4 m * 9 m)":           "6 m",
		"sqrt(2)":                   "1.414",
		"ln(1)":                     "0",
		"1 + 2 * 3":                 "7",
		"min(L1.vs30, 300 m/s)":     "300.0 m/s",
		"max(1 m, 10 ft)":           "3.05 m",
		"L1.class":                  "D",
		"L1.name + \"!\"":           "L1!",
		"L1.layers":                 "2",
		"L1.reached":                "40 m",
		"profile(\"L1\").slowest":   "220.0 m/s",
		"L1.vs30 * L1.vs30 * 1 kPa": "1.304e+05 m²·kPa/s²",
		"L1.class == \"D\"":         "yes",
	} {
		r, err := evaluate(t, front+"{{ "+source+" }}\n")
		if err != nil {
			t.Errorf("%s: %v", source, err)
			continue
		}
		if got := prose(t, r); got != want {
			t.Errorf("%s = %q, want %q", source, got, want)
		}
	}
}

func TestExpressionFaults(t *testing.T) {
	for source, want := range map[string]string{
		"L1.vs31":                         `no field vs31`,
		"L2.vs30":                         `unknown name L2`,
		"L1.vs30 + 1 m":                   "units do not agree",
		"L1.vs30 > 3 m":                   "units do not agree",
		"L1.vs30 / (1 - 1)":               "by zero",
		"1 / 0":                           "no finite value",
		"sqrt(-1)":                        "no finite value",
		"number(L1.vs30, \"kPa\")":        "cannot be given in kPa",
		"":                                "",
		"1..1000000000":                   "",
		"L1":                              "cannot be printed",
		"map(1..9, # * 2)":                "",
		"L1.vs30 +":                       "",
		strings.Repeat("1 + ", 999) + "1": "",
	} {
		_, err := evaluate(t, front+"\ntext {{ "+source+" }}\n")
		var faults profile.Faults
		if !errors.As(err, &faults) {
			t.Errorf("%.40s: no fault, but %v", source, err)
			continue
		}
		if at := faults[0].Place; at.Line != 7 || at.Column != 6 || at.File != "site.md" {
			t.Errorf("%.40s: fault at %v, want site.md:7:6", source, at)
		}
		if !strings.Contains(faults[0].Text, want) {
			t.Errorf("%.40s: fault %q does not say %q", source, faults[0].Text, want)
		}
	}
}

func TestFaultsNameThePlace(t *testing.T) {
	for _, c := range []struct{ name, source, want string }{
		{"no front matter", "# A\n", "site.md:1: the notebook has no front matter"},
		{"front matter not closed", "---\ncode: x\n", "site.md:1: the notebook has no front matter"},
		{"not YAML", "---\na: b: c\n---\n", "site.md:2:5: the front matter is not readable YAML"},
		{"unknown key", "---\nprofiles: {L1: {file: k7.csv}}\ncodes: ec8-2004\n---\n", `site.md:3:1: the front matter has no key "codes"`},
		{"twice", "---\ncode: a\ncode: b\n---\n", `site.md:3:1: the front matter states "code" twice`},
		{"no profile", "---\ncode: ec8-2004\n---\n", "names no profile"},
		{"no file", "---\nprofiles: {L1: {method: MASW}}\n---\n", `site.md:2:12: profile "L1" names no file`},
		{"missing file", "---\nprofiles: {L1: {file: nonesuch.csv}}\n---\n", `site.md:2:12: profile "L1": nonesuch.csv cannot be read`},
		{"file at fault", "---\nprofiles: {L1: {file: bad.csv}}\n---\n", "bad.csv:2:6: "},
		{"which profile", "---\nprofiles: {L1: {file: two.csv}}\n---\n", `two.csv holds 2 profiles and "L1" does not say which`},
		{"no such profile", "---\nprofiles: {L1: {file: two.csv, profile: C}}\n---\n", `two.csv holds no profile "C"`},
		{"unknown code", "---\ncode: ec9\nprofiles: {L1: {file: k7.csv}}\n---\n", "site.md:2:7: "},
		{"length without unit", "---\ndatum: 3\nprofiles: {L1: {file: k7.csv}}\n---\n", `site.md:2:8: datum of the front matter: "3" states no unit`},
		{"bad word", "---\nunits: imperial\nprofiles: {L1: {file: k7.csv}}\n---\n", `site.md:2:8: units of the front matter is "imperial"`},
		{"bad ground", "---\nground: {peat: thick}\nprofiles: {L1: {file: k7.csv}}\n---\n", "site.md:2:16: peat of ground"},
		{"bad latitude", "---\nsite: {latitude: 95, longitude: 4}\nprofiles: {L1: {file: k7.csv}}\n---\n", "latitude"},
		{"too short", "---\ncode: ec8-2004\nprofiles:\n  S: {file: short.csv}\n---\n```class\n```\n", `site.md:4:3: ec8-2004: profile "S" reaches 22 m below ground level, 30 m are needed`},
		{"unknown key of working", front + "```layers\noff: L1\n```\n", `site.md:7:1: working layers has no key "off"`},
		{"unknown profile", front + "```layers\nof: L7\n```\n", `site.md:7:5: no profile is named "L7"`},
		{"words beside the name", front + "```layers L1\n```\n", "site.md:6:1: working layers has"},
		{"html block", front + "\n<div>x</div>\n", "site.md:7:1: raw HTML does not reach the report"},
		{"inline html", front + "\na <b>x</b>\n", "site.md:7:3: raw HTML does not reach the report"},
		{"inline image", front + "\na ![x](y.png) b\n", "site.md:7:3: an image inside a line of text"},
		{"missing image", front + "\n![x](y.png)\n", `image "y.png" cannot be read`},
		{"remote image", front + "\n![x](https://example.com/y.png)\n", "is not a file"},
		{"image that is none", front + "\n![x](k7.csv)\n", "neither PNG nor JPEG"},
		{"no code", "---\nprofiles: {L1: {file: k7.csv}}\n---\n```class\n```\n", "working class needs a code"},
		{"bad calc", front + "```calc\n1 + 1\n```\n", `site.md:7:1: "1 + 1" is not a line of a calculation`},
		{"calc twice", front + "```calc\na = 1\na = 2\n```\n", `site.md:8:1: "a" is a name already`},
		{"calc words", front + "```calc\na = L1.class\n```\n", "a is not a number"},
		{"named average", front + "```average\nname: v\n```\n", "one profile and one depth"},
		{"bad depth", front + "```average\ndepth: -3 m\n```\n", "site.md:7:8: the averaging depth is not positive"},
		{"deep quotes", front + strings.Repeat(">", 60) + " deep\n", "nest deeper"},
	} {
		_, err := evaluate(t, c.source)
		var faults profile.Faults
		if !errors.As(err, &faults) {
			t.Errorf("%s: no faults, but %v", c.name, err)
			continue
		}
		if !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s:\n got %v\nwant %s", c.name, err, c.want)
		}
	}
}

func TestImageReachesTheDocument(t *testing.T) {
	var data bytes.Buffer
	if err := png.Encode(&data, image.NewGray(image.Rect(0, 0, 3, 2))); err != nil {
		t.Fatal(err)
	}
	folder["photo.png"] = data.String()
	folder["more/photo.png"] = data.String()
	r := mustEvaluate(t, front+"![The *crew*](photo.png \"At work\")\n\n![](more/photo.png)\n")
	var got []report.Image
	for b := range r.Document.All() {
		if i, ok := b.(*report.Image); ok {
			got = append(got, *i)
		}
	}
	if len(got) != 2 || got[0].Alt != "The crew" || got[0].Title != "At work" || got[0].Width != 3 || got[0].Height != 2 || got[0].Format != "png" {
		t.Fatalf("images %+v", got)
	}
	if got[0].Name == got[1].Name {
		t.Errorf("two images have the name %s", got[0].Name)
	}
}

func TestSeveralFaultsAtOnce(t *testing.T) {
	_, err := evaluate(t, front+"{{ L1.a }} {{ L1.b }}\n\n<br>\n\n```layers\nx: 1\ny: 2\n```\n")
	var faults profile.Faults
	if !errors.As(err, &faults) || len(faults) != 5 {
		t.Errorf("%d faults, want 5:\n%v", len(faults), err)
	}
}

func TestCautionCannotBeLeftOut(t *testing.T) {
	for name, body := range map[string]string{
		"empty": "", "prose": "Just prose.\n", "heading": "# Site\n\nProse.\n",
		"title": "```title\n```\n", "summary": "```summary\n```\n", "standard": templates.Standard,
	} {
		cautions := 0
		for b := range mustEvaluate(t, front+body).Document.All() {
			if box, ok := b.(*report.CautionBox); ok {
				if p, ok := box.Blocks[0].(*report.Paragraph); ok && report.PlainText(p.Inline) == report.Caution {
					cautions++
				}
			}
		}
		if cautions != 1 {
			t.Errorf("%s: %d cautions, want 1", name, cautions)
		}
	}
}

func TestAuthorsMarkdownReachesTheDocument(t *testing.T) {
	r := mustEvaluate(t, front+`# Head *ing*

Prose with **strong**, *em*, ~~gone~~, `+"`code`"+`, a [link](https://example.com), a note[^n], &amp; an \*escape\*.\
Next line.

- [x] done
- [ ] open
  1. nested

> quoted

| a | b |
|:-:|--:|
| 1 | 2 |

    indented code

`+"```python\nx = 1\n```"+`

---

[^n]: The note with {{ L1.vs30 }}.
`)
	var kinds []string
	for b := range r.Document.All() {
		switch b := b.(type) {
		case *report.Heading:
			kinds = append(kinds, "heading "+report.PlainText(b.Inline))
		case *report.Paragraph:
			kinds = append(kinds, "para "+report.PlainText(b.Inline))
		case *report.List:
			kinds = append(kinds, "list")
			if len(b.Items) == 2 && (b.Items[0].Task != report.TaskDone || b.Items[1].Task != report.TaskOpen) {
				t.Errorf("tasks %v", b.Items)
			}
		case *report.Quote:
			kinds = append(kinds, "quote")
		case *report.Table:
			kinds = append(kinds, "table "+report.PlainText(b.Rows[0].Cells[1]))
			if b.Columns[0].Align != report.AlignCentre || b.Columns[1].Align != report.AlignRight {
				t.Errorf("alignments %v", b.Columns)
			}
		case *report.CodeBlock:
			kinds = append(kinds, "code "+b.Language+" "+b.Text)
		case *report.Rule:
			kinds = append(kinds, "rule")
		}
	}
	want := []string{
		"heading Head ing", "para " + report.Caution,
		"para Prose with strong, em, gone, code, a link, a note, & an *escape*. Next line.",
		"list", "para done", "para open", "list", "para nested",
		"quote", "para quoted", "table 2", "code  indented code\n", "code python x = 1\n", "rule",
		"para The note with 361.1 m/s.",
	}
	if got := strings.Join(kinds, "\n"); got != strings.Join(want, "\n") {
		t.Errorf("got\n%s\nwant\n%s", got, strings.Join(want, "\n"))
	}
}

// Each working's example stands in the manual; here each is evaluated, and
// must put something into the report.
func TestExamplesOfWorkings(t *testing.T) {
	for _, name := range WorkingNames() {
		w, _ := WorkingNamed(name)
		r, err := evaluate(t, front+"```"+name+"\n"+w.Example+"```\n")
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if len(r.Document.Blocks) < 2 { // the caution is one
			t.Errorf("%s puts nothing into the report", name)
		}
		if w.Summary == "" {
			t.Errorf("%s has no summary", name)
		}
	}
}

// Every key that a working's page names is read, and no other.
func TestKeysOfWorkings(t *testing.T) {
	for _, name := range WorkingNames() {
		w, _ := WorkingNamed(name)
		if name == "calc" {
			continue // its lines are not keys
		}
		_, err := evaluate(t, front+"```"+name+"\nnonesuch: 1\n```\n")
		if err == nil || !strings.Contains(err.Error(), "nonesuch") {
			t.Errorf("%s takes a key it does not know: %v", name, err)
		}
		for _, k := range w.Keys {
			_, err := evaluate(t, front+"```"+name+"\n"+k.Name+": ~\n```\n")
			if err != nil && strings.Contains(err.Error(), "has no key") {
				t.Errorf("%s: its page names %q, but: %v", name, k.Name, err)
			}
		}
	}
}

func TestResultsFollowTheNotebook(t *testing.T) {
	r := mustEvaluate(t, "---\ncode: [asce-7-16, ec8-2004]\nprofiles:\n  B: {file: uniform.csv}\n  A: {file: k7.csv}\n---\n```class\n```\n")
	var got []string
	for _, x := range r.Results {
		got = append(got, x.Profile+" "+x.Code+" "+x.Class)
	}
	// 300 m/s = 984.3 ft/s is D and C; K7 is D under the feet print and,
	// at 361.07 m/s, B under Eurocode 8.
	want := "B asce-7-16 D,B ec8-2004 C,A asce-7-16 D,A ec8-2004 B"
	if strings.Join(got, ",") != want {
		t.Errorf("results %v, want %s", got, want)
	}
	if v := *r.Results[0].VelocitySI; math.Abs(v-300) > 1e-9 {
		t.Errorf("average %v, want 300", v)
	}
}

func TestNotebookStatesOverFile(t *testing.T) {
	r := mustEvaluate(t, "---\ncode: ec8-2004\nprofiles:\n  L: {file: k7.csv, method: downhole, basis: measured, depth reached: 25 m}\n---\n{{ L.method }}, {{ L.basis }}, {{ L.reached }}\n")
	if got := prose(t, r); got != "downhole, measured, 25 m" {
		t.Errorf("got %q", got)
	}
}

func TestExtensionIsAsked(t *testing.T) {
	source := "---\ncode: ec8-2004\nextend: constant-velocity\nprofiles:\n  S: {file: short.csv}\n---\n{{ S.vs30 }}\n\n```class\n```\n"
	r := mustEvaluate(t, source)
	// One layer of 250 m/s, carried on at 250 m/s.
	if got := prose(t, r); got != "250.0 m/s" {
		t.Errorf("average %q, want 250.0 m/s", got)
	}
	if r.Results[0].Basis != "extended" {
		t.Errorf("basis %q, want extended", r.Results[0].Basis)
	}
	if len(r.Document.Footnotes) == 0 {
		t.Error("no footnote says that the profile was extended")
	}
}

func TestSameNotebookSameDocument(t *testing.T) {
	source := strings.Replace(templates.StarterNotebook, "line-1.csv", "k7.csv", 1)
	var first string
	for range 5 {
		r := mustEvaluate(t, source)
		var b strings.Builder
		if err := report.Markdown(&b, r.Document, report.MarkdownOptions{}); err != nil {
			t.Fatal(err)
		}
		if first == "" {
			first = b.String()
		}
		if b.String() != first {
			t.Fatal("the same notebook gave two documents")
		}
	}
}

func FuzzNotebook(f *testing.F) {
	f.Add(templates.StarterNotebook)
	f.Add(front + "{{ L1.vs30 + 3 m/s }}\n\n```calc\na = 1 m\n```\n")
	f.Add(front + "- [x] a\n\n> b[^1]\n\n[^1]: c\n\n|a|\n|-|\n|{{1}}|\n")
	f.Add("---\n{}\n---\n")
	f.Fuzz(func(t *testing.T, source string) {
		nb, err := Parse("site.md", []byte(source))
		if err != nil {
			return
		}
		_, _ = Evaluate(nb, Options{ReadFile: folder.read, Version: "shearbook test"})
	})
}
