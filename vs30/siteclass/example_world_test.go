package siteclass_test

import (
	"fmt"
	"math"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// ground builds an invented profile from thicknesses in m and velocities in
// m/s in turn; the last thickness may be +Inf.
func ground(pairs ...float64) *profile.Profile {
	p := &profile.Profile{Name: "L1"}
	top := 0.0
	for i := 0; i < len(pairs); i += 2 {
		p.Layers = append(p.Layers, profile.Layer{Top: top, Bottom: top + pairs[i], Vs: pairs[i+1]})
		top += pairs[i]
	}
	return p
}

var inf = math.Inf(1)

// showAverages prints a decision by its averages: the class, the route, every
// average, and what the other routes give.
func showAverages(id string, site siteclass.Site) {
	code, _ := siteclass.Find(id)
	d, err := code.Decide(site)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("class %s by %s\n", d.Class, d.Route)
	for _, a := range d.Averages {
		fmt.Printf("  %s %.1f %s over %g m, class %s\n", a.Symbol, a.Value, a.Unit, a.Thickness, a.Class)
	}
	for _, s := range d.Steps {
		fmt.Println(" ", s)
	}
	for _, n := range d.Notes {
		fmt.Printf("%s: %s\n", n.ID, n.Text)
	}
	fmt.Println(d.Standing)
}

// EN 1998-1-1:2024 reads one table by two parameters: the depth of the ground
// of 800 m/s, and the average down to it. By hand, 10 m in 4/180 + 6/270 s.
func ExampleCode_Decide_ec8_2024() {
	show("ec8-2024", siteclass.Site{Profile: sandOnRock(), Datum: profile.Known(0)})
	// Output:
	// class E, vs,H 225.0 m/s over 10.00 m
	//   vs,H over 10 m: 225 m/s ≥ 800 m/s: no (table of site categories)
	//   depth of the rock, H800: 10 m ≤ 5 m: no (table of site categories)
	//   depth of the rock, H800: 10 m > 5 m: yes (table of site categories)
	//   depth of the rock, H800: 10 m ≤ 30 m: yes (table of site categories)
	//   vs,H over 10 m: 225 m/s ≥ 400 m/s: no (table of site categories)
	//   vs,H over 10 m: 225 m/s ≥ 250 m/s: no (table of site categories)
	//   vs,H over 10 m: 225 m/s ≥ 150 m/s: yes (table of site categories)
	//   vs,H over 10 m: 225 m/s < 250 m/s: yes (table of site categories)
	// outside A–F beyond 150 m/s, -33.3 %
	// standing: from memory: class E of table of site categories
	// from memory
}

// NTC 2008 has thin soil on rock in a category of its own, whatever VS,30.
func ExampleCode_Decide_ntc2008() {
	show("ntc-2008", siteclass.Site{Profile: sandOnRock(), Datum: profile.Known(0), Ground: quiet})
	// Output:
	// class E, VS,30 458.0 m/s over 30.00 m
	//   soft clay, total thickness: 0 m ≥ 8 m: no (Tab. 3.2.III)
	//   peat, total thickness: 0 m ≥ 3 m: no (Tab. 3.2.III)
	//   velocity of the stiff ground: 950 m/s > 800 m/s: yes (Tab. 3.2.II)
	//   thickness above the stiff ground: 10 m ≤ 20 m: yes (Tab. 3.2.II)
	//   average velocity above the stiff ground, upper end: 225 m/s, bound 360 m/s: yes (Tab. 3.2.II)
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// override: class E whatever the average (Tab. 3.2.II); by the average alone, 458 m/s, the class would be B
	// superseded: the rules of 2008 were superseded by NTC 2018 on 22 March 2018
	// standing: from memory: reference substrate of VS > 800 m/s under at most 20 m of soil of C or D velocities (to 360 m/s) (Tab. 3.2.II)
	// from memory
}

// NCSE-02 puts no site into a class: each layer has a type, and the types'
// coefficients are weighted by thickness. By hand, (6·2.0 + 14·1.6 +
// 10·1.0)/30 = 1.48.
func ExampleCode_Decide_ncse02() {
	show("ncse-02", siteclass.Site{Profile: ground(6, 180, 14, 320, inf, 900)})
	// Output:
	// class C = 1.48, vs 340.2 m/s over 30.00 m
	//   ground of type IV from 0 m to 6 m, fastest: 180 m/s ≤ 200 m/s: yes (Table 2.1)
	//   ground of type III from 6 m to 20 m, slowest: 320 m/s > 200 m/s: yes (Table 2.1)
	//   ground of type III from 6 m to 20 m, fastest: 320 m/s ≤ 400 m/s: yes (Table 2.1)
	//   ground of type I from 20 m to 30 m, slowest: 900 m/s > 750 m/s: yes (Table 2.1)
	//   coefficient of the ground, C: 1.5 > 1.8: no (2.4)
	// half-space: from 20 m below ground level on, the ground averaged is the half-space, 900 m/s
	// standing: one source: type IV of Table 2.1; type III of Table 2.1; type I of Table 2.1; C > 1.8, for which the spectrum may not hold beyond TB (2.4)
	// one source
}

// The Turkish code of 2007 goes by the group and the thickness of the topmost
// layer. What the layers are made of is in their descriptions.
func ExampleCode_Decide_tec2007() {
	p := ground(7, 210, 11, 280, inf, 850)
	p.Layers[0].Soil, p.Layers[1].Soil, p.Layers[2].Soil = "medium dense sand", "dense sand, some gravel", "sandstone"
	show("tec-2007", siteclass.Site{Profile: p, Datum: profile.Known(0)})
	// Output:
	// class Z3, Vs 247.9 m/s over 18.00 m
	//   ground of group C of sand from 0 m to 18 m, slowest: 210 m/s, bound 200 m/s: yes (Table 6.1)
	//   ground of group C of sand from 0 m to 18 m, fastest: 280 m/s, bound 400 m/s: yes (Table 6.1)
	//   thickness of the topmost layer, h1 of group C: 18 m ≤ 15 m: no (Table 6.2)
	//   thickness of the topmost layer, h1 of group C: 18 m > 15 m: yes (Table 6.2)
	//   thickness of the topmost layer, h1 of group C: 18 m ≤ 50 m: yes (Table 6.2)
	// Z2 beyond 15 m, -16.7 %
	// superseded: the code of 2007 was repealed on 1 January 2019; TBDY 2018 is in force since
	// standing: from memory: soil group C of sand (Table 6.1); class Z3 of Table 6.2
	// from memory
}

// GB 50011 reads its table by vse over the cover, at most 20 m, and by the
// cover itself; a hard volcanic interlayer is taken out of it.
func ExampleCode_Decide_gb50011_2010() {
	p := ground(5, 160, 11, 240, 2, 900, 8, 260, inf, 640)
	p.Layers[2].Soil = "volcanic interlayer"
	show("gb-50011-2010", siteclass.Site{Profile: p})
	// Output:
	// class II, vse 216.3 m/s over 20.00 m
	//   velocity at 24 m, the end of the cover: 640 m/s > 500 m/s: yes (4.1.4-1)
	//   slowest velocity below 24 m: 640 m/s ≥ 500 m/s: yes (4.1.4-1)
	//   cover thickness: 24 m ≤ 0 m: no (Table 4.1.6)
	//   vse over 20 m: 216.3 m/s > 250 m/s: no (Table 4.1.6)
	//   vse over 20 m: 216.3 m/s > 150 m/s: yes (Table 4.1.6)
	//   vse over 20 m: 216.3 m/s ≤ 250 m/s: yes (Table 4.1.6)
	//   cover thickness: 24 m < 3 m: no (Table 4.1.6)
	//   cover thickness, lower end: 24 m, bound 3 m: yes (Table 4.1.6)
	//   cover thickness, upper end: 24 m, bound 50 m: yes (Table 4.1.6)
	// III beyond 150 m/s, -30.6 %
	// volcanic-interlayer: the 2 m at 16 m are a hard volcanic interlayer by their description and are taken out of the cover (4.1.4-4)
	// standing: one source: hard volcanic interlayers are taken out of the cover (4.1.4-4); ground of vs > 500 m/s (4.1.4-1); no layer below of vs < 500 m/s (4.1.4-1); class II of Table 4.1.6
	// one source
}

// Notification 1793 types the ground below the foundation by a period in
// which deep layers weigh more. By hand, Tg = √(32·(6·3/140² + 9·10.5/220²)) s.
func ExampleCode_Decide_jp1793() {
	show("jp-1793", siteclass.Site{Profile: ground(6, 140, 9, 220, inf, 480), Datum: profile.Known(0)})
	// Output:
	// class 2, Tg 179.1 m/s over 15.00 m
	//   period Tg: 0.303 s ≤ 0.2 s: no (commentary)
	//   period Tg: 0.303 s > 0.2 s: yes (commentary)
	//   period Tg: 0.303 s ≤ 0.75 s: yes (commentary)
	// 1 beyond 0.2 s, -34.0 %
	// standing: from memory: base layer of Vs ≥ 400 m/s (commentary)
	// standing: one source: class 2 of commentary
	// from memory
}

// The specifications for highway bridges take four times the travel time to
// the base layer of 300 m/s: 4·(6/140 + 9/220) = 0.335 s.
func ExampleCode_Decide_jpBridgesV() {
	show("jp-bridges-v", siteclass.Site{Profile: ground(6, 140, 9, 220, inf, 480)})
	// Output:
	// class II, TG 179.1 m/s over 15.00 m
	//   characteristic period TG: 0.335 s < 0.2 s: no (table of ground types)
	//   characteristic period TG: 0.335 s ≥ 0.2 s: yes (table of ground types)
	//   characteristic period TG: 0.335 s < 0.6 s: yes (table of ground types)
	// I beyond 0.2 s, -40.3 %
	// standing: one source: class II of table of ground types
	// one source
}

// SNI 1726 asks for two of three parameters, of which the worse governs: here
// the blow counts.
func ExampleCode_Decide_sni1726_2019() {
	p := ground(8, 240, inf, 480)
	for i, n := range []float64{14, 45} {
		p.Layers[i].N, p.Layers[i].Given = n, profile.GivenN
	}
	showAverages("sni-1726-2019", siteclass.Site{Profile: p, Datum: profile.Known(0), Ground: quiet})
	// Output:
	// class SD by N
	//   N̄ 28.3 blows/0.3 m over 30 m, class SD
	//   peat, total thickness: 0 m > 3 m: no (Table 5, SF)
	//   high-plasticity clay, total thickness: 0 m > 7.5 m: no (Table 5, SF)
	//   soft to medium clay, total thickness: 0 m > 35 m: no (Table 5, SF)
	//   soft clay, total thickness: 0 m > 3 m: no (Table 5, SE)
	//   N̄ of 30 m, class SC: 28.3 blows/0.3 m > 50 blows/0.3 m: no (Table 5)
	//   N̄ of 30 m, class SD, lower end: 28.3 blows/0.3 m, bound 15 blows/0.3 m: yes (Table 5)
	//   N̄ of 30 m, class SD, upper end: 28.3 blows/0.3 m, bound 50 blows/0.3 m: yes (Table 5)
	// blow-count: the code asks for N as measured; the data do not say which N theirs is, and it is taken as it stands
	// standing: one source: the averages of N and su (5.4)
	// other-route: by velocity, v̄s of 378.9 m/s, the class would be SC; of routes side by side the softer class is taken
	// one source
}

// BC3 takes the most onerous of velocity, N and cu, from existing ground level
// down.
func ExampleCode_Decide_bc3_2013() {
	p := ground(12, 150, inf, 300)
	for i, n := range []float64{6, 25} {
		p.Layers[i].N, p.Layers[i].Given = n, profile.GivenN
	}
	showAverages("bc3-2013", siteclass.Site{Profile: p, Ground: quiet})
	// Output:
	// class D by N
	//   NSPT 11.0 blows/0.3 m over 30 m, class D
	//   soft clay, total thickness: 0 m ≥ 10 m: no (table of ground types)
	//   NSPT of 30 m, class B: 11 blows/0.3 m > 50 blows/0.3 m: no (table of ground types)
	//   NSPT of 30 m, class C, lower end: 11 blows/0.3 m, bound 15 blows/0.3 m: no (table of ground types)
	//   NSPT of 30 m, class D: 11 blows/0.3 m < 15 blows/0.3 m: yes (table of ground types)
	// standing: one source: the averages of N and su (weighted value P = Σd/Σ(d/P)); the class by N (ground types); class D of table of ground types
	// other-route: by velocity, vs,30 of 214.3 m/s, the class would be C; of routes side by side the softer class is taken
	// one source
}

// Standard 2800 bars type I under more than 5 m of weaker cover.
func ExampleCode_Decide_iran2800() {
	show("iran-2800", siteclass.Site{Profile: ground(6, 420, inf, 1600)})
	// Output:
	// class II, V̄s30 1024.4 m/s over 30.00 m
	//   V̄s30 over 30 m, class I: 1,024.4 m/s > 750 m/s: yes (table of ground types)
	//   material softer than 750 m/s below ground level, class I: 6 m > 5 m: yes (table of ground types)
	// III beyond 375 m/s, -63.4 %
	// half-space: from 6 m below ground level on, the ground averaged is the half-space, 1,600 m/s
	// rock-barred: class I is barred: more than 5 m of weaker cover bars type I (table of ground types); the print names no class to take instead, and II, the next, is taken
	// standing: from memory: more than 5 m of weaker cover bars type I (table of ground types)
	// from memory
}

// KDS 41 17 00 looks at the depth of the bedrock of 760 m/s and at the soil
// above it alone.
func ExampleCode_Decide_kds41_17() {
	show("kds-41-17", siteclass.Site{Profile: sandOnRock(), Ground: quiet})
	// Output:
	// class S3, Vs,soil 225.0 m/s over 10.00 m
	//   peat, total thickness: 0 m > 3 m: no (KDS 17 10 00, 4.2.1.2)
	//   high-plasticity clay, total thickness: 0 m > 7 m: no (KDS 17 10 00, 4.2.1.2)
	//   soft to medium clay, total thickness: 0 m > 36 m: no (KDS 17 10 00, 4.2.1.2)
	//   depth of the bedrock, H: 10 m < 3 m: no (4.1.1(1) item 1)
	//   depth of the bedrock, H: 10 m > 20 m: no (KDS 17 10 00, 4.2.1.2)
	//   Vs,soil over 10 m: 225 m/s ≤ 120 m/s: no (KDS 17 10 00, 4.2.1.2)
	//   depth of the bedrock, H: 10 m ≥ 1 m: yes (KDS 17 10 00, 4.2.1.2)
	//   depth of the bedrock, H: 10 m ≤ 20 m: yes (KDS 17 10 00, 4.2.1.2)
	//   Vs,soil over 10 m: 225 m/s ≥ 260 m/s: no (KDS 17 10 00, 4.2.1.2)
	//   Vs,soil over 10 m: 225 m/s < 260 m/s: yes (KDS 17 10 00, 4.2.1.2)
	// S2 beyond 260 m/s, +15.6 %
	// standing: one source: class S3 of KDS 17 10 00, 4.2.1.2
	// one source
}

// NSCP 2015 is a table of the NEHRP kind in metres per second.
func ExampleCode_Decide_nscp2015() {
	show("nscp-2015", siteclass.Site{Profile: sandOnRock(), Datum: profile.Known(0), Ground: quiet})
	// Output:
	// class SC, Vs 458.0 m/s over 30.00 m
	//   peat, total thickness: 0 m > 3 m: no (208.4.3, SF)
	//   high-plasticity clay, total thickness: 0 m > 7.5 m: no (208.4.3, SF)
	//   soft to medium clay, total thickness: 0 m > 35 m: no (208.4.3, SF)
	//   soft clay, total thickness: 0 m > 3 m: no (Table 208-2, SE)
	//   Vs over 30 m, class SA: 458 m/s > 1,500 m/s: no (Table 208-2)
	//   Vs over 30 m, class SB, lower end: 458 m/s, bound 760 m/s: no (Table 208-2)
	//   Vs over 30 m, class SC, lower end: 458 m/s, bound 360 m/s: yes (Table 208-2)
	//   Vs over 30 m, class SC, upper end: 458 m/s, bound 760 m/s: yes (Table 208-2)
	// SD beyond 360 m/s, -21.4 %
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// standing: from memory: class SC of Table 208-2
	// from memory
}

// AS 1170.4 looks for very soft soil, then for rock, and lets the site period
// decide what is left.
func ExampleCode_Decide_as1170_4() {
	show("as-1170.4", siteclass.Site{Profile: ground(9, 140, 14, 260, inf, 900), Datum: profile.Known(0), Ground: quiet})
	// Output:
	// class Ce, Vs,30 238.3 m/s over 30.00 m
	//   soft clay, total thickness: 0 m > 10 m: no (clause 4.2)
	//   very soft soil, total thickness: 9 m > 10 m: no (clause 4.2)
	//   Vs,30 over 30 m: 238.3 m/s > 1,500 m/s: no (clause 4.2)
	//   Vs,30 over 30 m: 238.3 m/s > 360 m/s: no (clause 4.2)
	//   soil very weak by su or N, total thickness: 0 m > 0 m: no (clause 4.2)
	//   site period T: 0.473 s ≤ 0.6 s: yes (clause 4.2)
	// Ee beyond 10 m, +11.1 %
	// half-space: from 23 m below ground level on, the ground averaged is the half-space, 900 m/s
	// standing: from memory: class Ce of clause 4.2; rock of Vs > 360 m/s (clause 4.2)
	// from memory
}

// NZS 1170.5 asks rock for strength as well, which velocities do not tell.
func ExampleCode_Decide_nzs1170_5() {
	code, _ := siteclass.Find("nzs-1170.5")
	d, _ := code.Decide(siteclass.Site{Profile: ground(2, 250, inf, 820), Datum: profile.Known(0), Ground: quiet})
	fmt.Println("class", d.Class)
	for _, s := range d.Steps {
		fmt.Println(" ", s)
	}
	fmt.Println("not assessed:", d.Unassessed)
	// Output:
	// class B
	//   soft clay, total thickness: 0 m > 10 m: no (clause 3.1.3)
	//   very soft soil, total thickness: 0 m > 10 m: no (clause 3.1.3)
	//   Vs,30 over 30 m: 711.8 m/s > 1,500 m/s: no (clause 3.1.3)
	//   Vs,30 over 30 m: 711.8 m/s > 360 m/s: yes (clause 3.1.3)
	//   soil above rock of Vs > 360 m/s: 2 m ≤ 3 m: yes (clause 3.1.3)
	//   slowest velocity below that: 820 m/s ≥ 300 m/s: yes (clause 3.1.3)
	// not assessed: [rock of UCS not above 50 MPa (class A) or below 1 MPa (class B), or weaker than 18 MPa (A) or 0.8 MPa (B) below]
}

// IS 1893 types the ground by N alone.
func ExampleCode_Decide_is1893_2016() {
	p := &profile.Profile{Layers: []profile.Layer{
		{Top: 0, Bottom: 6, N: 5, Given: profile.GivenN},
		{Top: 6, Bottom: 30, N: 40, Given: profile.GivenN},
	}}
	showAverages("is-1893-2016", siteclass.Site{Profile: p, Blow: siteclass.BlowCorrected})
	// Output:
	// class II by N
	//   N 16.7 blows/0.3 m over 30 m, class II
	//   N of 30 m, class I: 16.7 blows/0.3 m > 30 blows/0.3 m: no (Table 4)
	//   N of 30 m, class II, lower end: 16.7 blows/0.3 m, bound 10 blows/0.3 m: yes (Table 4)
	//   N of 30 m, class II, upper end: 16.7 blows/0.3 m, bound 30 blows/0.3 m: yes (Table 4)
	// averaging-assumed: the code prints no formula for averages of N and su; the harmonic mean is taken, each over its own layers
	// standing: from memory: the averages of N and su (6.4.2); the class by N (6.4.2); class II of Table 4
	// other-mean: the mean of N weighted by thickness, 33, would be type I; the harmonic mean, the softer, is taken
	// from memory
}

// RPA 99 asks for each class's velocity from a depth on.
func ExampleCode_Decide_rpa99() {
	show("rpa-99", siteclass.Site{Profile: ground(5, 220, 9, 430, inf, 900), Datum: profile.Known(0)})
	// Output:
	// class S3, Vs 397.4 m/s over 20.00 m
	//   slowest velocity from 0 m to 20 m below the datum: 220 m/s ≥ 800 m/s: no (3.3.1)
	//   slowest velocity from 3 m to 20 m below the datum: 220 m/s ≥ 400 m/s: no (3.3.1)
	//   slowest velocity from 10 m to 20 m below the datum: 430 m/s ≥ 200 m/s: yes (3.3.1)
	// S4 beyond 200 m/s, -53.5 %
	// half-space: from 14 m below ground level on, the ground averaged is the half-space, 900 m/s
	// superseded: RPA 2024 was approved on 15 May 2024 (one source)
	// standing: from memory: class S3 of 3.3.1
	// from memory
}

// BNBC 2020 has the table of EN 1998-1:2004 under other names.
func ExampleCode_Decide_bnbc2020() {
	show("bnbc-2020", siteclass.Site{Profile: ground(25, 190, inf, 420), Datum: profile.Known(0), Ground: quiet})
	// Output:
	// class SC, Vs,30 209.1 m/s over 30.00 m
	//   soft clay, total thickness: 0 m ≥ 10 m: no (Table 6.2.13)
	//   velocity at 30 m, with no stiff ground above: 420 m/s > 800 m/s: no (Table 6.2.13)
	//   Vs,30 over 30 m, class SA: 209.1 m/s > 800 m/s: no (Table 6.2.13)
	//   Vs,30 over 30 m, class SB, lower end: 209.1 m/s, bound 360 m/s: no (Table 6.2.13)
	//   Vs,30 over 30 m, class SC, lower end: 209.1 m/s, bound 180 m/s: yes (Table 6.2.13)
	//   Vs,30 over 30 m, class SC, upper end: 209.1 m/s, bound 360 m/s: yes (Table 6.2.13)
	// SD beyond 180 m/s, -13.9 %
	// half-space: from 25 m below ground level on, the ground averaged is the half-space, 420 m/s
	// standing: from memory: material of Vs > 800 m/s under a surface layer about 5 – 20 m thick with velocities of SC or SD (to 360 m/s) (Table 6.2.13); class SC of Table 6.2.13
	// from memory
}

// RulesOf prints a class of a table of two parameters.
func ExampleCode_RulesOf() {
	code, _ := siteclass.Find("gb-50011-2010")
	for _, rule := range code.RulesOf("III") {
		fmt.Println(rule)
	}
	// Output:
	// vse > 150, ≤ 250 m/s; cover > 50 m
	// vse ≤ 150 m/s; cover 15 – 80 m
}
