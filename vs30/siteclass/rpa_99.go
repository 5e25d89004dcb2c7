package siteclass

import (
	"math"

	"shearbook/profile"
)

// rpa99 returns the Algerian seismic rules RPA 99, version 2003, the site
// classes.
func rpa99() *Code {
	return &Code{
		ID:        "rpa-99",
		Title:     "Règles parasismiques algériennes",
		Edition:   "RPA 99, version 2003 (decree of 11 January 2004)",
		Region:    "Algeria, designs before RPA 2024",
		Clause:    "3.3",
		Table:     "Table 3.2",
		Source:    "RPA 99, version 2003, section 3.3 and Table 3.2, from memory",
		Parameter: "Vs",
		Depth:     20,
		DepthText: "20 m",
		Datum:     DatumUnstated,
		Unit:      profile.MetrePerSecond,
		Length:    profile.Metre,
		Standing:  FromMemory,

		//  Class, name, Vs (m/s), N
		Bands: []Band{
			{Class: "S1", Name: "rock", Vs: atLeast(800), Standing: FromMemory},
			{Class: "S2", Name: "firm ground", Vs: atLeast(400).to(below(800)), Also: "from 3 m down", Standing: FromMemory},
			{Class: "S3", Name: "loose ground", Vs: atLeast(200).to(below(400)), Also: "from 10 m down", Standing: FromMemory},
			{Class: "S4", Name: "very loose ground", Vs: below(200), Also: "in the upper 20 m", Standing: FromMemory},
		},

		//  The velocity that each class asks for, and from which depth on.
		Rules: []Rule{
			{Class: "S1", Asks: []Ask{{"Vs", atLeast(800), profile.MetrePerSecond}}, Clause: "3.3.1", Standing: FromMemory},
			{Class: "S2", Asks: []Ask{{"Vs from 3 m down", atLeast(400), profile.MetrePerSecond}}, Clause: "3.3.1", Standing: FromMemory},
			{Class: "S3", Asks: []Ask{{"Vs from 10 m down", atLeast(200), profile.MetrePerSecond}}, Clause: "3.3.1", Standing: FromMemory},
			{Class: "S4", Clause: "3.3.1", Standing: FromMemory},
		},

		Terms: []Term{
			{ID: "s2-from", Text: "S2 is asked from 3 m down", Range: atLeast(3), Unit: profile.Metre, Clause: "3.3.1", Standing: FromMemory},
			{ID: "s3-from", Text: "S3 is asked from 10 m down", Range: atLeast(10), Unit: profile.Metre, Clause: "3.3.1", Standing: FromMemory},
		},

		Notes: []string{
			"the table's bounds leave no gap and do not overlap: 800, 400 and 200 m/s are in the stiffer class",
			"S2 has its velocity from 3 m down and S3 from 10 m down; that is read here as no layer slower than the bound from there to 20 m, the depth that S4 names; in S1 no layer is slower from the surface down",
			"ground of none of the other classes is S4, as the softest, even where its average over 20 m is not below 200 m/s; a note then says so",
			"the table also has columns for cone and pressuremeter tests, N (about 50 and 10) and strength, which are not carried here",
			"clause 3.3.3 says what to do where there are no tests; which class it names was not verified",
			"the limits of RPA 2024 are not carried here",
		},
		Short:      "the rules were not seen to speak of profiles that end above 20 m",
		Correlated: "the rules were not seen to speak of correlated velocities",
		Superseded: "RPA 2024 was approved on 15 May 2024 (one source)",
		decide:     decideRPA,
	}
}

// decideRPA holds the slowest layer against each class, from the depth on
// from which the class asks for its velocity.
func decideRPA(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.averageOver(c.Depth); err != nil {
		return Decision{}, err
	}
	found := []Found{
		r.slowestFrom("Vs", 0),
		r.slowestFrom("Vs from 3 m down", c.term("s2-from").lower()),
		r.slowestFrom("Vs from 10 m down", c.term("s3-from").lower()),
	}
	r.ground()
	r.d.Class = r.byRules(found)
	if row := c.ClassOf(r.d.Velocity); r.d.Class != row {
		r.note("average", "%s is %s, that of the row of class %s; the class comes of the slowest layers", r.over, r.speed(r.velocity), row)
	}
	r.nearRules(found)
	return r.finish(), nil
}

// slowestFrom is the slowest velocity from a depth below the datum down to
// the averaging depth.
func (r *ruling) slowestFrom(of string, depth float64) Found {
	v := slowest(r.layers, r.datum+depth, r.bottom())
	if math.IsInf(v, 1) {
		v = velocityAt(r.layers, r.datum+depth)
	}
	return Found{Of: of, Text: "slowest velocity from " + r.length(depth) + " to " + r.length(r.thickness) + " below the datum", Value: v, Unit: profile.MetrePerSecond.Name}
}
