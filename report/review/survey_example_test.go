package review_test

import (
	"strings"

	"shearbook/profile"
	"shearbook/report/review"
)

// with is a table with statements above it.
func with(table string, statements ...string) string {
	return "# " + strings.Join(statements, "\n# ") + "\n" + table
}

const plain = "top (m),bottom (m),vs (m/s)\n0,5,150\n5,15,250\n15,45,400\n"

func Example_notAssessed() {
	tell("not-assessed", submission(plain, claim("nbcc-2015", "D", "")))
	// Output:
	// explain: site: 7 conditions of the code not assessed: liquefiable soil; quick or highly sensitive clay; collapsible, weakly cemented soil; peat or highly organic clay more than 3 m thick; clay of PI > 75 more than 8 m thick; soft to medium stiff clay more than 30 m thick; more than 3 m of soft clay: PI > 20, w ≥ 40 % and su < 25 kPa
	//   claimed "", found "class D"
}

func Example_rockUnmeasured() {
	tell("rock-unmeasured", submission("top (m),bottom (m),vs (m/s)\n0,40,1000\n", claim("asce-7-16", "B", "")))
	// Output:
	// explain: site: the class is one of rock, and the basis of the velocities is: not stated
	//   claimed "class B, under asce-7-16", found "class B"
}

func Example_rockUnderSoil() {
	// 4 m of soil above rock: more than the 10 ft of ASCE/SEI 7-16 20.1.
	tell("rock-under-soil", submission("top (m),bottom (m),vs (m/s),soil\n0,4,400,Gravel\n4,40,1500,Granite\n", claim("asce-7-16", "B", "")))
	// Output:
	// answer: site: the code bars the claimed class here: more than 10 ft of soil between the rock and the bottom of the footing or mat bars classes A and B
	//   claimed "class B", found "class C"
}

func Example_correlated() {
	tell("correlated", submission(with(plain, "basis: correlated"), claim("ec8-2004", "C", "")))
	// Output:
	// explain: site: velocities inside the average are estimates: the basis is correlated
}

// 97.0 N^0.314 of 4, 10, 30, 50: 149.9, 199.9, 282.2, 331.3 m/s.
func Example_correlatedAsMeasured() {
	const byN = "# basis: measured\ntop (m),bottom (m),vs (m/s),N\n0,5,150,4\n5,15,200,10\n15,25,282,30\n25,45,331,50\n"
	tell("correlated-as-measured", submission(byN, claim("ec8-2004", "C", "")))
	// Output:
	// answer: site.csv:3:5, site, layer 1: Imai & Tonouchi (1982), 97.0 N^0.314 gives the velocity of every layer with a stated N, which measured velocities would not follow
	//   claimed "basis measured", found "4 layers met"
}

func Example_depthReached() {
	tell("depth-reached", submission(with(plain, "depth reached: 22 m"), claim("ec8-2004", "C", "")))
	// Output:
	// explain: site.csv:5:7, site, layer 3: the average uses velocities down to 30 m, and the survey reached 22 m
	//   claimed "reached 22 m", found "used to 30 m"
}

func Example_wavelength() {
	tell("wavelength", submission(with(plain, "method: MASW", "longest wavelength: 44 m"), claim("ec8-2004", "C", "")))
	tell("wavelength", submission(with(plain, "method: MASW", "longest wavelength (ft): 200"), claim("ec8-2004", "C", "")))
	// Output:
	// explain: site.csv:6:7, site, layer 3: a longest wavelength of 44 m lets a profile be known to about 22 m (a half; a third is 14.67 m), and the average uses it to 30 m
	//   claimed "used to 30 m", found "22 m"
	// nothing
}

func Example_receiverDepth() {
	tell("receiver-depth", submission(with(plain, "method: downhole", "deepest receiver: 25 m"), claim("ec8-2004", "C", "")))
	// Output:
	// explain: site.csv:6:7, site, layer 3: the deepest receiver stood at 25 m, and the average uses velocities to 30 m
	//   claimed "used to 30 m", found "receivers to 25 m"
}

// Receivers 9 m apart give no wavelength below 18 m; a third of it is 6 m.
func Example_thinLayer() {
	tell("thin-layer", submission(with(plain, "method: MASW", "receiver spacing: 9 m"), claim("ec8-2004", "C", "")))
	// Output:
	// explain: site.csv:4:5, site, layer 1: the first layer is 5 m thick; receivers 9 m apart, and so no wavelength below 18 m, cannot resolve one thinner than about 6 m
	//   claimed "5 m", found "6 m"
}

// 1.5 m at a middle of 20.75 m are 7 % of it; a tenth is 2.08 m.
func Example_fineAtDepth() {
	tell("fine-at-depth", submission(with("top (m),bottom (m),vs (m/s)\n0,5,150\n5,20,250\n20,21.5,300\n21.5,45,400\n", "method: MASW"), claim("ec8-2004", "C", "")))
	// Output:
	// note: site.csv:5:9, site, layer 3: the layer is 1.5 m thick at a depth of 20.75 m; less than about 2.08 m cannot be told from its neighbours there
	//   claimed "1.5 m", found "2.08 m"
}

func Example_interfaceAtDepth() {
	tell("interface-at-depth", submission("top (m),bottom (m),vs (m/s)\n0,30,300\n30,,180\n", claim("ec8-2004", "C", "")))
	// Output:
	// note: site.csv:3:5, site, layer 2: a boundary lies at exactly the averaging depth of 30 m, with 300 m/s above and 180 m/s below
	//   claimed "", found "30 m"
}

func Example_refractionReversal() {
	tell("refraction-reversal", submission(with("top (m),bottom (m),vs (m/s)\n0,5,300\n5,15,250\n15,45,400\n", "method: SH refraction"), claim("ec8-2004", "C", "")))
	// Output:
	// answer: site.csv:4:6, site, layer 2: the velocity falls from 300 m/s to 250 m/s at 5 m; refraction finds no layer slower than one above it
	//   claimed "250 m/s", found ""
}

// 300, 600, 3000 m/s under a first layer of 5 m: the second layer is blind up
// to a thickness of 5.75485 m, where both intercepts meet at one distance
// (hand computation; see TestBlindZone).
func Example_hiddenLayer() {
	for _, bottom := range []string{"10.75", "10.76"} {
		tell("hidden-layer", submission(with("top (m),bottom (m),vs (m/s)\n0,5,300\n5,"+bottom+",600\n"+bottom+",40,3000\n", "method: SH refraction"), claim("ec8-2004", "B", "")))
	}
	// Output:
	// explain: site.csv:4:9, site, layer 2: the head wave of the layer from 5 m to 10.75 m at 600 m/s arrives first nowhere: it lies in the blind zone of the method
	//   claimed "5.75 m of 600 m/s", found "no first arrival"
	// nothing
}

// With h = 5 m and 6 m the intercepts are 10·√(600² − 300²)/(600·300) =
// 28.8675 ms and 10·√(3000² − 300²)/(3000·300) + 12·√(3000² − 600²)/(3000·600)
// = 52.7621 ms; the second layer is first from 28.8675/(1/0.3 − 1/0.6) =
// 17.3205 m to (52.7621 − 28.8675)/(1/0.6 − 1/3) = 17.9210 m.
func Example_fewReceivers() {
	tell("few-receivers", submission(with("top (m),bottom (m),vs (m/s)\n0,5,300\n5,11,600\n11,40,3000\n", "method: SH refraction", "receiver spacing: 2 m", "spread length: 100 m"), claim("ec8-2004", "B", "")))
	// Output:
	// explain: site.csv:6:6, site, layer 2: the wave of this layer arrives first over 0.6 m of the spread, fewer than 2 receivers at 2 m
	//   claimed "", found "0.6 m"
}

func Example_refractionSpread() {
	tell("refraction-spread", submission(with(plain, "method: SH refraction", "spread length: 60 m"), claim("ec8-2004", "C", "")))
	// Output:
	// explain: site.csv, site: a spread of 60 m is short for a depth of 30 m: 3 times the depth is 90 m
	//   claimed "60 m", found "90 m"
}

func Example_metadata() {
	tell("metadata", submission(with(plain, "method: MASW"), claim("ec8-2004", "C", "")))
	// Output:
	// explain: site.csv, site: the survey does not state: date, operator, depth reached, basis of the velocities
}

func Example_statedOtherwise() {
	s := submission(with(plain, "method: MASW", "basis: inverted"), claim("ec8-2004", "C", ""))
	was := *s.Profiles[0].Profile
	s.Profiles[0].AsRead = &was
	s.Profiles[0].Profile.Survey.Basis = profile.Measured
	tell("stated-otherwise", s)
	// Output:
	// explain: site.csv, site: the notebook states another basis than the file
	//   claimed "measured", found "inverted"
}

func Example_doubt() {
	tell("doubt", submission("top (m),bottom (m),vs (m/s)\n0,40,300\n", claim("ec8-2004", "C", "")))
	// Output:
	// explain: site.csv:2:6, site: the profile is a single layer
}

// 260/200 = 1.3: ν = (1.69 − 2)/(2·0.69) = −0.225.
func Example_poisson() {
	tell("poisson", submission("top (m),bottom (m),vs (m/s),vp (m/s)\n0,5,200,260\n5,40,400,1600\n", claim("ec8-2004", "C", "")))
	// Output:
	// explain: site.csv:2:5, site, layer 1: Vp/Vs = 1.3 means a Poisson's ratio of -0.225
	//   claimed "1.3", found "at least 1.4142"
}

func Example_saturation() {
	const wet = "top (m),bottom (m),vs (m/s),vp (m/s)\n0,5,200,1500\n5,40,400,900\n"
	tell("saturation", submission(with(wet, "water table: 5 m"), claim("ec8-2004", "C", "")))
	// Output:
	// explain: site.csv:3:5, site, layer 1: Vp of 1500 m/s says that the soil is saturated, and the layer lies above the water table at 5 m
	//   claimed "water table 5 m", found "Vp 1500 m/s"
	// explain: site.csv:4:6, site, layer 2: Vp of 900 m/s says that the soil is not saturated, and the layer lies below the water table at 5 m
	//   claimed "water table 5 m", found "Vp 900 m/s"
}

func Example_soilWindow() {
	tell("soil-window", submission("top (m),bottom (m),vs (m/s),soil\n0,5,320,Soft grey clay\n5,40,400,Dense sand\n", claim("ec8-2004", "B", "")))
	// Output:
	// explain: site.csv:2:5, site, layer 1: 320 m/s is far outside what handbooks give for soft clay, 60 to 180 m/s
	//   claimed "\"Soft grey clay\"", found "320 m/s"
}

func Example_regular() {
	tell("regular", submission("top (m),bottom (m),vs (m/s)\n0,8,200\n8,16,250\n16,24,300\n24,32,350\n", claim("ec8-2004", "C", "")))
	// Output:
	// explain: site.csv, site: all layers are 8 m thick and their velocities change in equal steps of 50 m/s
	//   claimed "4 layers", found ""
}

func Example_copied() {
	s := submission(plain, claim("ec8-2004", "C", ""))
	other := *s.Profiles[0].Profile
	other.Name = "elsewhere"
	other.Layers = append([]profile.Layer{}, other.Layers...)
	for i := range other.Layers {
		other.Layers[i].Vs *= 1.1
	}
	s.Profiles = append(s.Profiles, review.Entry{Profile: &other})
	tell("copied", s)
	// Output:
	// answer: site.csv, elsewhere: the layers are those of profile "site" (site.csv) with every velocity times 1.1
	//   claimed "", found "3 layers"
}

func Example_digest() {
	s := submission(plain, claim("ec8-2004", "C", ""))
	s.Files = []review.File{{Name: "line-1.csv", SHA256: "aa00"}}
	s.Digests = []review.Digest{{File: "line-1.csv", SHA256: "bb00", Place: review.Place{Place: profile.Place{File: "report.md", Line: 90}}}}
	tell("digest", s)
	// Output:
	// answer: report.md:90: the digest printed of "line-1.csv" is not that of the file: one of the two was changed
	//   claimed "bb00", found "aa00"
}

func Example_evidence() {
	s := submission(plain, claim("ec8-2004", "C", ""))
	s.Faults = []review.Fault{
		{Fault: profile.Fault{Text: "line-1.csv is not what manifest.json lists"}, Evidence: true, Page: 4, Claimed: "bb00", Found: "aa00"},
		{Fault: profile.Fault{Text: "more.csv is attached, and manifest.json does not list it"}, Evidence: true, Lesser: true},
	}
	tell("evidence", s)
	tell("evidence-loose", s)
	// Output:
	// answer: page 4: line-1.csv is not what manifest.json lists
	//   claimed "bb00", found "aa00"
	// explain: the submission: more.csv is attached, and manifest.json does not list it
}

func Example_text() {
	s := submission(plain, claim("ec8-2004", "C", ""))
	average, _ := review.ParseNumber("270.6767 m/s", profile.Velocity, profile.Unit{})
	s.Results = []review.Result{{Profile: "site", Code: "ec8-2004", Class: "C", Average: average}}
	s.Printed = []review.Printed{{File: "report.md", Text: []string{
		"Profile site is site class **B** under EN 1998-1:2004 with AC:2009 and", "A1:2013, 3.1.2, with an average velocity of 370.7 m/s (1216.2 ft/s) over 30 m.", "", "A stiffer one might be in site class A."}}}
	tell("text", s)
	tell("text-mention", s)
	// Output:
	// answer: report.md:1, site: the text gives another class than results.json for this profile under ec8-2004
	//   claimed "class B", found "class C"
	// answer: report.md:1, site: the text gives another average than results.json for this profile under ec8-2004
	//   claimed "370.7 m/s", found "270.68 m/s"
	// answer: the submission: the text of report.md prints the average of this result nowhere
	//   claimed "270.6767 m/s", found ""
	// answer: the submission: the text of report.md prints the class of this result nowhere
	//   claimed "class C", found ""
	// note: report.md:4: the prose names a site class that results.json gives nowhere
	//   claimed "class A", found "class C"
}

// From 5 m: 30.48 / (10/250 + 20.48/400) = 334.2 m/s, 1,096.5 ft/s; from
// ground level 272.06 m/s. ASCE/SEI 7-16 measures from the ground surface.
func Example_ownDatum() {
	c := claim("asce-7-16", "D", "334.2 m/s")
	c.Stated.Datum = profile.Known(5)
	tell("own-datum", submission(plain, c))
	c.Code, c.Class, c.Average = "ec8-2004", "C", claim("", "", "332.4 m/s").Average
	tell("own-datum", submission(plain, c))
	// Output:
	// answer: site: the claim rests on a datum of 5 m below ground level that the submission states, and does not follow from 0 m; the code measures from the ground surface
	//   claimed "class D, 334.2 m/s, under asce-7-16", found "class D, 272.06 m/s over 30.48 m from ground level, under asce-7-16"
	// explain: site: the claim rests on a datum of 5 m below ground level that the submission states, and does not follow from 0 m; the code leaves that open
	//   claimed "class C, 332.4 m/s, under ec8-2004", found "class C, 270.68 m/s over 30 m from ground level, under ec8-2004"
}

func Example_notClaimed() {
	s := submission("profile,top (m),bottom (m),vs (m/s)\nA,0,40,300\nB,0,40,170\n", claim("ec8-2004", "C", ""))
	s.Kind = review.SiteFolder
	tell("not-claimed", s)
	// Output:
	// explain: site.csv, B: nothing is claimed of profile "B", which the submission holds
	//   claimed "", found "class D, 170 m/s over 30 m from ground level, under ec8-2004"
}

func Example_mappedColumn() {
	s := submission("top (m),bottom (m),vs (m/s)\n0,40,400\n", claim("ec8-2004", "B", ""))
	s.Profiles[0].Unmapped = submission("top (m),bottom (m),vs (m/s)\n0,40,300\n", claim("ec8-2004", "B", "")).Profiles[0].Profile
	tell("mapped-column", s)
	// Output:
	// answer: site.csv, site: the notebook's map takes another column for the shear-wave velocity than the file's own: layer 1 has 400 m/s in place of 300 m/s
	//   claimed "400 m/s", found "300 m/s"
}
