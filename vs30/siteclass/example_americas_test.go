package siteclass_test

import (
	"fmt"
	"math"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// tell prints a decision shorter than show: the class, the averages, and the
// notes.
func tell(id string, site siteclass.Site) {
	code, err := siteclass.Find(id)
	if err != nil {
		fmt.Println(err)
		return
	}
	d, err := code.Decide(site)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("class %s by %s under %s, %s\n", d.Class, d.Route, d.Code.Edition, d.Code.Table)
	for _, a := range d.Averages {
		fmt.Printf("  %s %.1f %s over %.2f m: %s\n", a.Symbol, a.Value, a.Unit, a.Thickness, a.Class)
	}
	for _, o := range d.Others {
		fmt.Printf("  by %s: %s\n", o.Route, o.Class)
	}
	for _, n := range d.Notes {
		fmt.Printf("%s: %s\n", n.ID, n.Text)
	}
	fmt.Println(d.Standing)
}

// fromGround is the invented sandOnRock with all that a code could ask for.
func fromGround() siteclass.Site {
	return siteclass.Site{Profile: sandOnRock(), Datum: profile.Known(0), FoundationDepth: profile.Known(0), Ground: quiet}
}

// clayAndSand is an invented boring without velocities. By hand, over 30 m:
// the clay 12/(5/60 + 7/90) = 74.48 kPa, the sand 18/(8/14 + 10/35) = 21.
func clayAndSand() siteclass.Site {
	const n, su = profile.GivenN, profile.GivenSu
	return siteclass.Site{Ground: quiet, Blow: siteclass.BlowN60, Profile: &profile.Profile{Name: "B1", NoVelocity: true, Layers: []profile.Layer{
		{Top: 0, Bottom: 5, Su: 60, Given: su},
		{Top: 5, Bottom: 13, N: 14, Given: n},
		{Top: 13, Bottom: 20, Su: 90, Given: su},
		{Top: 20, Bottom: 40, N: 35, Given: n},
	}}}
}

// AASHTO's guide specifications of 2011 print strict signs on both sides:
// 600 ft/s is in no class.
func ExampleCode_Decide_aashto2011() {
	p := &profile.Profile{Layers: []profile.Layer{{Bottom: math.Inf(1), Vs: 600 * profile.Foot}}}
	tell("aashto-2011", siteclass.Site{Profile: p, Datum: profile.Known(0), Ground: quiet})
	// Output:
	// class E by velocity under AASHTO guide specifications, 2nd ed. (2011); LRFD specifications, 2008 interims to 9th ed., Table 3.4.2.1-1
	//   v̄s 600.0 ft/s over 30.48 m: E
	// half-space: from ground level on, the ground averaged is the half-space, 182.9 m/s
	// boundary-gap: 600 ft/s is in no class as printed: D is > 600, < 1,200, E is < 600; the softer, E, is taken
	// standing: from memory: class E of Table 3.4.2.1-1
	// from memory
}

// AASHTO follows the classes of ASCE/SEI 7-22 from 2023 on.
func ExampleCode_Decide_aashto2023() {
	tell("aashto-2023", fromGround())
	// Output:
	// class C by velocity under AASHTO guide specifications, 3rd ed. (2023); LRFD specifications, 10th ed. (2024), Table 20.2-1 of ASCE/SEI 7-22
	//   v̄s 1515.1 ft/s over 30.48 m: C
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// adopted: AASHTO (3.4.2.1 of the guide specifications, 3.10.3.1 of the LRFD specifications) aligns its site classes with Table 20.2-1 of ASCE/SEI 7-22, by velocity alone; that table and the conditions beside it decide
	// standing: from memory: class C of Table 20.2-1 of ASCE/SEI 7-22
	// standing: one source: that AASHTO guide specifications, 3rd ed. (2023); LRFD specifications, 10th ed. (2024) takes the table of asce-7-22
	// from memory
}

// ASCE/SEI 7-10 takes the softer class of N̄ch over the sand and s̄u over the
// clay, each with its own thickness. By hand, over 30.48 m: N̄ch =
// 18.48/(8/14 + 10.48/35) = 21.2, s̄u = 74.48 kPa = 1,556 psf.
func ExampleCode_Decide_asce7_10() {
	tell("asce-7-10", clayAndSand())
	// Output:
	// class D by Nch and su under ASCE/SEI 7-10, Table 20.3-1
	//   N̄ch 21.2 blows/ft over 18.48 m: D
	//   s̄u 1555.6 psf over 12.00 m: D
	// kind-assumed: where no plasticity index tells, layers that state su are taken for cohesive and those that state N alone for cohesionless
	// blow-count: the code asks for N as measured; the data give N corrected for energy (N60), and it is taken as it stands
	// standing: from memory: the class by Nch and su (20.3.3)
	// standing: one source: the averages of N and su (20.4)
	// from memory
}

// DS 61 lowers the type of a velocity that stands alone.
func ExampleCode_Decide_ds61() {
	tell("ds61-2011", fromGround())
	// Output:
	// class D by velocity under DS 61 (V. y U.) of 2011, Diario Oficial of 13 December 2011, with NCh433.Of1996 Mod.2009, table of the types of soil
	//   Vs30 458.0 m/s over 30.00 m: C
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// velocity-alone: the strength of the ground is not known throughout; by the velocity alone the type is lowered
	// superseded: DS 61 is in force until NCh433:2026 replaces it about 10 February 2027 (D.Ex. 28 MINVU, Diario Oficial of 10 August 2026; one source)
	// checked
}

// E.030 of 2018 measures from below the foundation; it is superseded.
func ExampleCode_Decide_e0302018() {
	tell("e030-2018", siteclass.Site{Profile: sandOnRock(), FoundationDepth: profile.Known(2), Ground: quiet})
	// Output:
	// class S1 by velocity under E.030 (2018), RM 355-2018-VIVIENDA, amended by RM 043-2019-VIVIENDA, Tabla 2
	//   V̄s 531.1 m/s over 30.00 m: S1
	// datum-foundation: the code measures from the underside of the foundation; no datum is stated, and the average starts at the stated depth of the foundation, 2 m
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// superseded: E.030-2018 is superseded by E.030-2026 (RM 183-2026-VIVIENDA, El Peruano, 3 May 2026); RM 217-2026-VIVIENDA keeps the edition of 2018 for projects under way
	// checked
}

// The International Building Codes send the reader to an edition of ASCE/SEI 7.
func ExampleCode_Decide_ibc2012() {
	tell("ibc-2012", fromGround())
	// Output:
	// class C by velocity under IBC 2012, Table 20.3-1 of ASCE/SEI 7-10
	//   v̄s 1515.1 ft/s over 30.48 m: C
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// adopted: IBC 2012 (1613.3) takes its site classes from ASCE/SEI 7-10, chapter 20; that table decides
	// checked
}

func ExampleCode_Decide_ibc2015() {
	tell("ibc-2015", fromGround())
	// Output:
	// class C by velocity under IBC 2015, Table 20.3-1 of ASCE/SEI 7-10
	//   v̄s 1515.1 ft/s over 30.48 m: C
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// adopted: IBC 2015 (1613.3) takes its site classes from ASCE/SEI 7-10, chapter 20; that table decides
	// checked
}

func ExampleCode_Decide_ibc2018() {
	tell("ibc-2018", fromGround())
	// Output:
	// class C by velocity under IBC 2018, Table 20.3-1 of ASCE/SEI 7-16
	//   v̄s 1515.1 ft/s over 30.48 m: C
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// adopted: IBC 2018 (1613.2.2) takes its site classes from ASCE/SEI 7-16, chapter 20; that table decides
	// standing: one source: that IBC 2018 takes the table of asce-7-16
	// one source
}

func ExampleCode_Decide_ibc2021() {
	tell("ibc-2021", fromGround())
	// Output:
	// class C by velocity under IBC 2021, Table 20.3-1 of ASCE/SEI 7-16
	//   v̄s 1515.1 ft/s over 30.48 m: C
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// adopted: IBC 2021 (1613.2.2) takes its site classes from ASCE/SEI 7-16, chapter 20; that table decides
	// standing: from memory: that IBC 2021 takes the table of asce-7-16
	// from memory
}

func ExampleCode_Decide_ibc2024() {
	tell("ibc-2024", fromGround())
	// Output:
	// class C by velocity under IBC 2024, Table 20.2-1 of ASCE/SEI 7-22
	//   v̄s 1515.1 ft/s over 30.48 m: C
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// adopted: IBC 2024 (1613.2) takes its site classes from ASCE/SEI 7-22, chapter 20; that table decides
	// standing: from memory: class C of Table 20.2-1 of ASCE/SEI 7-22
	// standing: one source: that IBC 2024 takes the table of asce-7-22
	// from memory
}

// NBCC 2010 prints no way to average blow counts; the harmonic mean is taken
// and said so.
func ExampleCode_Decide_nbcc2010() {
	tell("nbcc-2010", clayAndSand())
	// Output:
	// class D by Nch and su under NBCC 2010, Division B, Table 4.1.8.4.A
	//   N̄60 21.0 blows/0.3 m over 18.00 m: D
	//   su 74.5 kPa over 12.00 m: D
	// datum-assumed: the code does not say where its depth is measured from; the average starts at ground level
	// kind-assumed: where no plasticity index tells, layers that state su are taken for cohesive and those that state N alone for cohesionless
	// averaging-assumed: the code prints no formula for averages of N and su; the harmonic mean is taken, each over its own layers
	// standing: one source: the averages of N and su (4.1.8.4.); the class by Nch and su (4.1.8.4.); class D of Table 4.1.8.4.A
	// one source
}

// NBCC 2020 designates a site by its velocity where that was measured in
// place.
func ExampleCode_Decide_nbcc2020() {
	tell("nbcc-2020", fromGround())
	// Output:
	// class X458 by velocity under NBCC 2020, Division B, Table 4.1.8.4.-B
	//   Vs30 458.0 m/s over 30.00 m: XC
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// checked
}

// NEC-SE-DS has lower bounds of its own, and leaves the contrast of impedance
// and uncontrolled fill to the engineer.
func ExampleCode_Decide_nec2015() {
	code, _ := siteclass.Find("nec-2015")
	d, _ := code.Decide(fromGround())
	fmt.Println(d.Class)
	for _, text := range d.Unassessed {
		fmt.Println(text)
	}
	// Output:
	// C
	// a contrast of impedance within the upper 30 m, soft soil on rock included (a ratio α of at most 0.5)
	// fill placed without engineering control
}

// The NEHRP provisions of 2020 are where ASCE/SEI 7-22 took its classes from.
func ExampleCode_Decide_nehrp2020() {
	tell("nehrp-2020", fromGround())
	// Output:
	// class C by velocity under 2020 NEHRP provisions, FEMA P-2082-1, Table 20.2-1 of ASCE/SEI 7-22
	//   v̄s 1515.1 ft/s over 30.48 m: C
	// half-space: from 10 m below ground level on, the ground averaged is the half-space, 950 m/s
	// adopted: the site classes of the 2020 NEHRP provisions are those of ASCE/SEI 7-22, chapter 20; that table decides
	// standing: from memory: class C of Table 20.2-1 of ASCE/SEI 7-22
	// standing: one source: that 2020 NEHRP provisions, FEMA P-2082-1 takes the table of asce-7-22
	// from memory
}

// NSR-10 caps N at 100 and su at 250 kPa.
func ExampleCode_Decide_nsr10() {
	tell("nsr-10", clayAndSand())
	// Output:
	// class D by Nch and su under NSR-10, Decreto 926 of 2010, Title A, Tabla A.2.4-1
	//   N̄ch 21.0 blows/0.3 m over 18.00 m: D
	//   s̄u 74.5 kPa over 12.00 m: D
	// kind-assumed: where no plasticity index tells, layers that state su are taken for cohesive and those that state N alone for cohesionless
	// checked
}

// UBC-97 prints feet, with metres in parentheses that are no conversions.
func ExampleCode_Decide_ubc97() {
	p := &profile.Profile{Layers: []profile.Layer{{Bottom: math.Inf(1), Vs: 361}}}
	tell("ubc-97", siteclass.Site{Profile: p, Datum: profile.Known(0), FoundationDepth: profile.Known(0), Ground: quiet})
	// Output:
	// class SD by velocity under UBC 1997, Volume 2, Table 16-J
	//   v̄s 1184.4 ft/s over 30.48 m: SD
	// half-space: from ground level on, the ground averaged is the half-space, 361 m/s
	// unit-print: 361 m/s is 1,184 ft/s: class SD by this table's bounds in ft/s, class SC by the print in m/s (the same table, in parentheses); the code's own unit decides
	// standing: one source: class SD of Table 16-J
	// one source
}

// Of two surface-wave lines DS 61 lets the worse govern, not their mean.
func ExampleGoverning() {
	code, _ := siteclass.Find("ds61-2011")
	var lines []siteclass.Decision
	for _, v := range []float64{610, 480} {
		p := &profile.Profile{Layers: []profile.Layer{{Bottom: math.Inf(1), Vs: v}}}
		d, _ := code.Decide(siteclass.Site{Profile: p})
		lines = append(lines, d)
	}
	d, err := siteclass.Governing(lines)
	fmt.Println(d.Class, err)
	fmt.Println(d.Notes[len(d.Notes)-1].Text)
	// Output:
	// D <nil>
	// of 2 profiles the second governs, with class D and 480 m/s; of two surface-wave lines, at right angles if possible, the worse profile governs
}

// A decision by correlated velocities lists every class that results.
func ExampleDecision_classes() {
	p := &profile.Profile{Survey: profile.Survey{Basis: profile.Correlated}, Layers: []profile.Layer{{Bottom: math.Inf(1), Vs: 277}}}
	code, _ := siteclass.Find("asce-7-22")
	d, _ := code.Decide(siteclass.Site{Profile: p})
	fmt.Println(d.Class, d.Classes)
	// Output:
	// D [CD D DE]
}

// A step tells what was compared.
func ExampleStep_Comparison() {
	fmt.Println(siteclass.Step{Value: 810.1, Operator: ">", Bound: 5000, Unit: "ft/s"}.Comparison())
	fmt.Println(siteclass.Step{Value: 810.1, Operator: "–", Bound: 600, Unit: "ft/s"}.Comparison())
	fmt.Println(siteclass.Step{Value: 359.99999, Operator: ">", Bound: 360, Unit: "m/s"}.Comparison())
	fmt.Println(siteclass.Step{Value: 21, Operator: ">", Bound: 20}.Comparison())
	fmt.Println(siteclass.Step{Value: 0.0512, Operator: "≥", Bound: 0.05, Unit: "MPa"}.Comparison())
	// Output:
	// 810.1 ft/s > 5,000 ft/s
	// 810.1 ft/s, bound 600 ft/s
	// 359.99999 m/s > 360 m/s
	// 21 > 20
	// 0.051 MPa ≥ 0.05 MPa
}
