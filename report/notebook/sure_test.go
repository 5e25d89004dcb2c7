package notebook

import (
	"strings"
	"testing"

	"shearbook/report"
	"shearbook/templates"
)

// markdown returns a report as Markdown.
func markdown(t *testing.T, r *Report) string {
	t.Helper()
	var b strings.Builder
	if err := report.Markdown(&b, r.Document, report.MarkdownOptions{}); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// cellsOf returns the cells of the first table row that begins with a cell.
func cellsOf(t *testing.T, r *Report, first string) []string {
	t.Helper()
	for b := range r.Document.All() {
		table, ok := b.(*report.Table)
		if !ok {
			continue
		}
		for _, row := range table.Rows {
			if report.PlainText(row.Cells[0]) == first {
				var cells []string
				for _, c := range row.Cells {
					cells = append(cells, report.PlainText(c))
				}
				return cells
			}
		}
	}
	t.Fatalf("no row begins with %q in\n%s", first, markdown(t, r))
	return nil
}

func TestExtendWorkingChoosesForTheWholeNotebook(t *testing.T) {
	// short.csv is 22 m of 250 m/s. Boore (2004, BSSA 94:591, table 2, 22 m):
	// log Vs30 = 0.026900 + 1.0044·2.397940 = 2.435391, so 272.515 m/s; σ = 0.024087
	// in log10, ×2.302585 = 0.055.
	before := "---\ncode: ec8-2004\nprofiles:\n  S: {file: short.csv}\n---\n{{ S.vs30 }}\n\n```extend\nof: S\nby: boore-2004\n```\n\n```class\n```\n"
	r := mustEvaluate(t, before)
	if got := prose(t, r); got != "272.5 m/s" {
		t.Errorf("average before the working %q, want 272.5 m/s", got)
	}
	row := cellsOf(t, r, "Boore (2004)")
	if row[1] != "272.5" || row[2] != "0.055" || row[3] != "C" {
		t.Errorf("row %q", row)
	}
	if row := cellsOf(t, r, "constant velocity"); row[1] != "250.0" {
		t.Errorf("constant velocity %q, want 250.0", row)
	}
	if r.Results[0].Basis != "extended" {
		t.Errorf("basis %q, want extended", r.Results[0].Basis)
	}
	if v := *r.Results[0].VelocitySI; v < 272.514 || v > 272.517 {
		t.Errorf("the decision uses %v, want 272.515", v)
	}
	if !strings.Contains(markdown(t, r), "10.1785/0120030105") {
		t.Error("the report does not name the relation's paper")
	}
}

func TestRefusedRelationSaysWhy(t *testing.T) {
	_, err := evaluate(t, "---\ncode: ec8-2004\nextend: asce-7-22\nprofiles:\n  S: {file: short.csv}\n---\n```class\n```\n")
	if err == nil || !strings.Contains(err.Error(), `profile "S" cannot be extended by asce-7-22`) {
		t.Errorf("got %v", err)
	}
}

func TestChanceOfEachClass(t *testing.T) {
	folder["u350.csv"] = "bottom (m),vs (m/s)\n40,350\n"
	// Median 350 m/s and σ = 0.10 against 360: Φ(ln(360/350)/0.1) = 0.610917
	// (gonum v0.17.0 distuv.Normal), so D 61.1 % and C 38.9 %.
	r := mustEvaluate(t, "---\ncode: nbcc-2015\nprofiles:\n  U: {file: u350.csv}\n---\n```spread\naverage sigma: 0.10\nfigure: no\n```\n")
	for class, want := range map[string]string{"D": "61.1", "C": "38.9"} {
		if got := cellsOf(t, r, class)[3]; got != want {
			t.Errorf("chance of %s is %q, want %s", class, got, want)
		}
	}
	if !strings.Contains(markdown(t, r), "102.9 % of what it is") { // 360/350
		t.Error("the factor to class C is not told")
	}
}

func TestNoSigmaIsAssumed(t *testing.T) {
	r := mustEvaluate(t, "---\ncode: nbcc-2015\nprofiles:\n  U: {file: k7.csv, method: MASW}\n---\n```spread\n```\n")
	text := markdown(t, r)
	if !strings.Contains(text, "none is assumed") || !strings.Contains(text, "average sigma: 0.15") {
		t.Errorf("the published range is not offered:\n%s", text)
	}
}

// The errors of correlated velocities are common to all layers, whether they are
// correlated here or stand so in their file: 0.3 at each layer is 0.3 of the
// average, and not √(Σwᵢ²)·0.3.
func TestCorrelatedFileKeepsFullCorrelation(t *testing.T) {
	const common = "The error of a correlation is common to "
	folder["kept.csv"] = "# basis: correlated\ntop (m),bottom (m),vs (m/s),sigma ln vs\n0,10,200,0.3\n10,20,300,0.3\n20,40,400,0.3\n"
	folder["some.csv"] = "top (m),bottom (m),vs (m/s),sigma ln vs,basis\n0,10,200,0.3,measured\n10,20,300,0.3,measured\n20,40,400,0.3,correlated\n"
	folder["none.csv"] = "# basis: inverted\ntop (m),bottom (m),vs (m/s),sigma ln vs\n0,10,200,0.3\n10,20,300,0.3\n20,40,400,0.3\n"
	for _, c := range []struct{ file, keys, row, said string }{
		{"kept.csv", "", "layers fully correlated", "The velocities are correlated from other tests. " + common + "all layers"},
		{"some.csv", "", "layers fully correlated", "Some of the velocities are correlated from other tests. " + common + "its layers; one rule is taken for all layers, the others included"},
		{"none.csv", "", "layers independent", ""},
		{"kept.csv", "sigma: 0.2\n", "layers fully correlated", common + "all layers"},
		{"kept.csv", "correlation: independent\n", "layers independent", common + "all layers"},
	} {
		r := mustEvaluate(t, "---\ncode: nbcc-2015\nprofiles:\n  U: {file: "+c.file+"}\n---\n```spread\nrealisations: 1000\nfigure: no\n"+c.keys+"```\n")
		text := strings.Join(strings.Fields(markdown(t, r)), " ")
		if !strings.Contains(text, "▸ formula, "+c.row) || (c.said == "") == strings.Contains(text, common) || !strings.Contains(text, c.said) {
			t.Errorf("%s %q: want %q and %q in\n%s", c.file, c.keys, c.row, c.said, markdown(t, r))
		}
	}
}

func TestProfilesTogether(t *testing.T) {
	folder["three.csv"] = "profile,bottom (m),vs (m/s)\nA,40,300\nB,40,330\nC,40,270\n"
	// By hand: (300·330·270)^(1/3) = 298.9966, sample σ of ln 0.100377,
	// harmonic mean 3/(1/300+1/330+1/270) = 297.99.
	r := mustEvaluate(t, "---\ncode: nbcc-2015\nprofiles:\n  A: {file: three.csv, profile: A}\n  B: {file: three.csv, profile: B}\n  C: {file: three.csv, profile: C}\n---\n```site\nfigure: no\n```\n")
	if row := cellsOf(t, r, "Geometric mean of all"); row[2] != "299.0" || row[3] != "0.100" {
		t.Errorf("geometric mean %q", row)
	}
	if row := cellsOf(t, r, "Average of the averages (for comparison)"); row[2] != "300.0" {
		t.Errorf("average of averages %q", row)
	}
	if row := cellsOf(t, r, "Average of the mean slowness (for comparison)"); row[2] != "298.0" {
		t.Errorf("average of the mean slowness %q", row)
	}
}

func TestWorseProfileGovernsWhereTheCodeSaysSo(t *testing.T) {
	folder["pair.csv"] = "profile,bottom (m),vs (m/s)\nA,40,600\nB,40,400\n"
	// DS 61 (2011): of two surface-wave lines the worse governs. Vs30 alone
	// drops a class: 600 is B by its bound of 500 and becomes C; 400 is C by
	// its bound of 350 and becomes D (art. 6).
	r := mustEvaluate(t, "---\ncode: ds61-2011\nprofiles:\n  A: {file: pair.csv, profile: A}\n  B: {file: pair.csv, profile: B}\n---\n```site\nfigure: no\n```\n")
	for profile, class := range map[string]string{"A": "C", "B": "D"} {
		if row := cellsOf(t, r, profile); row[4] != class {
			t.Errorf("profile %s is %q, want %s", profile, row[4], class)
		}
	}
	if !strings.Contains(markdown(t, r), "The site is class **D**") {
		t.Error("the worse profile does not govern")
	}
}

func TestEquivalentProfilesOfOneSurvey(t *testing.T) {
	folder["three.csv"] = "profile,bottom (m),vs (m/s)\nA,40,300\nB,40,330\nC,40,270\n"
	r := mustEvaluate(t, "---\ncode: nbcc-2015\nprofiles:\n  A: {file: three.csv, profile: A}\n  B: {file: three.csv, profile: B}\n  C: {file: three.csv, profile: C}\n---\n```spread\nof: A\nequivalents: [A, B, C]\nrealisations: 3000\nfigure: no\n```\n")
	// A draw is one of three averages: the median is the middle one, and the
	// 5 % and 95 % are the outer ones.
	row := cellsOf(t, r, "3,000 draws from 3 profiles, seed 1995")
	if row[2] != "270.0" || row[4] != "300.0" || row[6] != "330.0" {
		t.Errorf("row %q", row)
	}
}

// A profile of blow counts alone goes through the standard template: K9 of
// three layers, capped at 100 blows: 100 ft / (20/8 + 30/25 + 50/100) = 23.81.
func TestProfileWithoutVelocities(t *testing.T) {
	folder["blows.csv"] = "bottom (ft),N,soil\n20,8,fill\n50,25,sand\n100,140,gravel\n"
	r := mustEvaluate(t, "---\ncode: asce-7-16\nprofiles:\n  B: {file: blows.csv}\n---\n"+templates.Standard)
	if got := r.Results[0]; got.Class != "D" || got.VelocitySI != nil || got.Vs30 != nil || got.Route == "velocity" {
		t.Errorf("class %s by %s, velocity %v", got.Class, got.Route, got.VelocitySI)
	}
	text := markdown(t, r)
	for _, want := range []string{"states no velocities", "23.8"} {
		if !strings.Contains(text, want) {
			t.Errorf("the report does not say %q", want)
		}
	}
	if strings.Contains(text, "NaN") || strings.Contains(text, "Inf") {
		t.Error("the report prints a number that is none")
	}
}

// TestSymbolsKeepTheirCase: a footnote that begins with a symbol does not make
// another of it.
func TestSymbolsKeepTheirCase(t *testing.T) {
	for text, want := range map[string]string{
		"qt is taken to be qc": "qt is taken to be qc.", "v̄s of 600 ft/s is class DE": "v̄s of 600 ft/s is class DE.",
		"quick clay": "Quick clay.", "the end.": "the end.", "": "",
	} {
		if got := sentence(text); got != want {
			t.Errorf("%q: got %q, want %q", text, got, want)
		}
	}
}
