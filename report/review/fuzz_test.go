package review

import (
	"bytes"
	"encoding/json"
	"io"
	"math/rand/v2"
	"os"
	"testing"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30/extend"
	"shearbook/vs30/siteclass"
)

// examined reviews a table of claims over one profile file, own.csv, and a
// notebook's folder over the same file with results.
func examined(claims, own, results []byte) []*Review {
	read := func(name string) ([]byte, error) {
		if name == "own.csv" {
			return own, nil
		}
		return nil, os.ErrNotExist
	}
	table := &intake{sub: &Submission{Name: "claims.csv", Kind: ClaimsTable}, read: read}
	table.claims("claims.csv", claims)
	site := &intake{sub: &Submission{Name: "site", Kind: SiteFolder}, read: read}
	site.site("notebook.md", []byte("---\nprofiles: {L1: own.csv}\nextend: constant-velocity\n---\n"))
	site.results("results.json", results)
	site.markdown("report.md", claims)
	code, err := siteclass.Find("ec8-2004")
	if err != nil {
		panic(err)
	}
	return []*Review{Examine(table.sub, Desk{}), Examine(table.sub, Desk{Code: code}), Examine(site.sub, Desk{})}
}

// FuzzReview is the review as a whole: whatever a submission holds, it ends,
// gives the same twice, says something at every finding, agrees with nothing
// that it has a finding to be answered about, and prints. Run it with
// -fuzzminimizetime 5x: shrinking each input takes the fuzzer longer than
// trying many.
func FuzzReview(f *testing.F) {
	const four = "# method: SH refraction\n# receiver spacing: 2 m\n# spread length (ft): 300\n# longest wavelength: 44 m\ntop (m),bottom (m),vs (m/s),vp (m/s),N,soil\n" +
		"0,4,160,500,4,Soft clay\n4,12,240,1500,10,Loose sand\n12,22,310,1600,,Dense sand\n22,42,450,1700,,Gravel\n"
	const results = `{"schema":1,"results":[{"profile":"L1","source":{"file":"own.csv","sha256":"00"},"code":"ec8-2004","class":"C","depth_m":30,"velocity_mps":276.9,"vs30_mps":276.9,"depth_reached_m":42,"datum_m":0,"basis":"not stated","margin":{"percent":30.0},"notes":[{"id":"extended","text":"x"}],"unassessed":["a"]}]}`
	for _, own := range []string{four, "thickness (ft),vs (ft/s)\n10,500\n200,2000\n", "top (m),bottom (m),vs (m/s),vs bottom (m/s)\n0,10,200,400\n10,,800,\n", "top (m),bottom (m),N\n0,10,4\n10,40,30\n"} {
		f.Add([]byte("file,profile,code,class,average (m/s),datum,foundation depth,extension,basis,depth\nown.csv,,asce-7-16,C,276.9,1 m,2 m,boore-2004,measured,30 m\nown.csv,,ec8-2004,B,296.0,,,,,\n"), []byte(own), []byte(results))
	}
	f.Add([]byte("site class **D** with an average velocity of 276.9 m/s | a | 0000000000000000000000000000000000000000000000000000000000000000 |\n"), []byte(four), []byte(`{"results":[]}`))
	f.Fuzz(func(t *testing.T, claims, own, results []byte) {
		again := examined(claims, own, results)
		for i, r := range examined(claims, own, results) {
			sound(t, r)
			if a, b := printedJSON(t, r), printedJSON(t, again[i]); !bytes.Equal(a, b) {
				t.Fatalf("two reviews of one submission differ:\n%s\n%s", a, b)
			}
		}
	})
}

// TestRandomSubmissions is FuzzReview over a fixed sequence of inputs: the
// seeds with a few characters changed.
func TestRandomSubmissions(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 7))
	changed := func(text string) []byte {
		b := []byte(text)
		for range rng.IntN(4) {
			b[rng.IntN(len(b))] = byte(rng.IntN(128))
		}
		return b
	}
	for range 200 {
		for _, r := range examined(
			changed("file,profile,code,class,average (m/s),datum,extension\nown.csv,,asce-7-16,C,276.9,1 m,boore-2004\nown.csv,,ec8-2004,B,296.0,,\n"),
			changed("# method: SH refraction\n# receiver spacing: 2 m\ntop (m),bottom (m),vs (m/s),soil\n0,4,160,Soft clay\n4,12,240,Sand\n12,42,310,Gravel\n"),
			changed(`{"results":[{"profile":"L1","code":"ec8-2004","class":"C","depth_m":30,"velocity_mps":276.9}]}`)) {
			sound(t, r)
		}
	}
}

// sound checks what holds of every review.
func sound(t *testing.T, r *Review) {
	t.Helper()
	for i, f := range r.Findings {
		if f.Text == "" || f.Source == "" || f.Rule == "" || f.Weight == Off || f.Where() == "" {
			t.Fatalf("a finding says too little: %+v", f)
		}
		if f.Weight == Answer && r.Outcome == Agrees {
			t.Fatalf("it agrees, with %+v", f)
		}
		if i > 0 && f.Weight > r.Findings[i-1].Weight {
			t.Fatal("the findings are not in the order of their weights")
		}
		for k := range f.Causes {
			_ = f.CauseLabel(k)
		}
	}
	for i := range r.Cases {
		if c := &r.Cases[i]; r.Outcome == Agrees && !c.Agrees(0) {
			t.Fatalf("it agrees, and does not with %s: %s", c.Claimed(), c.Found())
		}
	}
	m := Memo{Version: "shearbook test"}
	d, err := m.document(r, nil)
	if err != nil {
		t.Fatal(err)
	}
	if err := report.Markdown(io.Discard, d, report.MarkdownOptions{}); err != nil {
		t.Fatal(err)
	}
}

func printedJSON(t *testing.T, r *Review) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := WriteJSON(&b, r); err != nil {
		t.Fatal(err)
	}
	if !json.Valid(b.Bytes()) {
		t.Fatalf("no JSON: %s", b.Bytes())
	}
	return b.Bytes()
}

// FuzzRules reads files of rules: what is read gives the weights and limits
// that it says, and every fault has a place in the file.
func FuzzRules(f *testing.F) {
	f.Add([]byte("department: D\nrules:\n  average: {tolerance: 1 %, weight: note}\n  wavelength: {divisor: 3}\n  soil-window: off\n"))
	f.Add([]byte("rules: {average: {tolerance: -1}, averge: off, class: [a]}\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		set, err := ReadRules("rules.yaml", data)
		if err != nil {
			for _, fault := range err.(profile.Faults) {
				if fault.Place.File != "rules.yaml" || fault.Text == "" {
					t.Fatalf("%+v", fault)
				}
			}
			return
		}
		if len(set.Rules()) != len(Rules()) {
			t.Fatal("rules are lost")
		}
	})
}

// TestRelationIn: the note that each relation leaves names it.
func TestRelationIn(t *testing.T) {
	layers := []profile.Layer{{Bottom: 5, Vs: 180}, {Top: 5, Bottom: 12, Vs: 240}, {Top: 12, Bottom: 20, Vs: 300}}
	checked := 0
	for _, r := range extend.All() {
		e, err := r.Estimate(layers, 0, 30)
		if err != nil {
			continue // it does not hold for this profile
		}
		checked++
		if got := relationIn(e.Note.Text); got != r.ID {
			t.Errorf("%s is taken for %s: %s", r.ID, got, e.Note.Text)
		}
	}
	if checked < 5 {
		t.Errorf("%d relations hold", checked)
	}
}

// TestBlindZone: of 300, 600 and 3,000 m/s under 5 m of the first the second
// layer is hidden up to h = 5.75485 m. By hand: both crossovers meet where
//
//	x12 = t2/(1/V1 − 1/V2) = (t3 − t2)/(1/V2 − 1/V3) = x23
//
// with t2 = 28.8675 ms and t3 = 33.1662 ms + h·3.26599 ms: x12 = 17.3205 m,
// (1/600 − 1/3000)·17.3205 = 23.0940 ms, and h = (28.8675 + 23.0940 −
// 33.1662)/3.26599 = 5.7549 m.
func TestBlindZone(t *testing.T) {
	seen := func(h float64) bool {
		layers := []profile.Layer{{Bottom: 5, Vs: 300}, {Top: 5, Bottom: 5 + h, Vs: 600}, {Top: 5 + h, Bottom: 100, Vs: 3000}}
		for _, b := range firstArrivals(layers) {
			if b.layer == 1 && b.end-b.start > 1e-9 {
				return true
			}
		}
		return false
	}
	if seen(5.7548) || !seen(5.7550) {
		t.Errorf("seen at 5.7548 m: %v, at 5.7550 m: %v", seen(5.7548), seen(5.7550))
	}
}

// TestMemoHoldsNoSurprise: characters that the PDF's fonts lack are shown by
// number in every output, and two memos of one review are the same bytes.
func TestMemoHoldsNoSurprise(t *testing.T) {
	own := []byte("profile,top (m),bottom (m),vs (m/s)\n漢字 שלום,0,40,300\n")
	r := examined([]byte("file,code,class\nown.csv,ec8-2004,D\n"), own, nil)[0]
	first, err := Files(r, Memo{PreparedBy: "一 Reviewer", Date: "2026-11-03", Version: "shearbook test"})
	if err != nil {
		t.Fatal(err)
	}
	second, err := Files(r, Memo{PreparedBy: "一 Reviewer", Date: "2026-11-03", Version: "shearbook test"})
	if err != nil {
		t.Fatal(err)
	}
	for i, f := range first {
		if !bytes.Equal(f.Data, second[i].Data) {
			t.Errorf("%s differs", f.Name)
		}
	}
	text := string(first[0].Data)
	for _, want := range []string{"‹U+6F22›", "‹U+4E00› Reviewer", "differs", "The design site class must be confirmed"} {
		if !bytes.Contains([]byte(text), []byte(want)) {
			t.Errorf("memo.md does not hold %q", want)
		}
	}
}
