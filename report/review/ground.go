package review

import (
	"fmt"
	"slices"
	"strings"

	"shearbook/vs30/siteclass"
)

// groundRules are about what no average settles.
func groundRules() []Rule {
	return []Rule{
		{ID: "not-assessed", Weight: Explain, check: notAssessed,
			Summary: "Conditions of the code on the ground were not assessed, and the class hangs on them",
			Source:  "the conditions of the code that is applied"},
		{ID: "rock-under-soil", Weight: Answer, check: rockUnderSoil,
			Summary: "A rock class is claimed where the code bars it for the soil above the rock",
			Source:  "the conditions of the code that is applied"},
		{ID: "rock-unmeasured", Weight: Explain, check: rockUnmeasured,
			Summary: "A rock class rests on velocities that were not measured at the site",
			Source:  "what the code that is applied says of velocities that were not measured"},
		{ID: "correlated", Weight: Explain, check: correlatedVelocities,
			Summary: "Velocities inside the average were estimated from N, cone resistance or strength",
			Source:  "what the code that is applied says of velocities that were not measured"},
		{ID: "correlated-as-measured", Weight: Answer, check: correlatedAsMeasured,
			Summary: "Velocities are passed as measured that are estimates: their own basis says so, or a published relation of the stated N gives every one of them",
			Source: "Imai & Tonouchi (1982); Imai (1977); Ohta & Goto (1978), N alone; Specifications for Highway Bridges Part V (Japan); Seed, Idriss & Arango (1983), " +
				"Seed & Idriss (1981), Sykora & Stokoe (1983), these three from memory",
			Limits: []Limit{{"layers", 3, "", "with N, all of which a relation must meet", 0}, {"within", 0.5, "%", "of the relation's velocity", 0}}},
	}
}

// notAssessed tells the conditions that nobody assessed, once for a profile
// and code.
func notAssessed(x *examination) {
	x.eachDecision(func(c *Case) {
		if len(c.Decision.Unassessed) == 0 {
			return
		}
		x.addUnder(c.Code.Edition+", "+c.Code.Clause, c.place(),
			fmt.Sprintf("%s of the code not assessed: %s", count(len(c.Decision.Unassessed), "condition"), strings.Join(c.Decision.Unassessed, "; ")),
			"", "class "+c.Decision.Class)
	})
}

// rockUnderSoil tells rock classes that a condition bars.
func rockUnderSoil(x *examination) {
	x.eachCase(func(c *Case) {
		for _, r := range c.Decision.Conditions {
			barred := func(class string) bool {
				return plainClass(class) == plainClass(undescribed(plainClass(c.Claim.Class)))
			}
			if c.Err == nil && r.State == siteclass.Met && r.Condition.Kind == siteclass.Barred && slices.ContainsFunc(r.Condition.Bars, barred) {
				x.addUnder(c.Code.Edition+", "+r.Condition.Clause, c.place(),
					"the code bars the claimed class here: "+r.Condition.Text, "class "+c.Claim.Class, "class "+c.Decision.Class)
			}
		}
	})
}

// rockUnmeasured tells rock classes that rest on velocities of no measured
// basis.
func rockUnmeasured(x *examination) {
	x.eachDecision(func(c *Case) {
		basis := c.Decision.Basis
		if basis == "" || basis == "measured" || basis == "inverted" || !rockClass(c.Code, c.Decision.Class) {
			return
		}
		x.addUnder(c.Code.Edition+": "+c.Code.Correlated, c.place(),
			"the class is one of rock, and the basis of the velocities is: "+basis, c.claimed(), "class "+c.Decision.Class)
	})
}

// rockClass reports whether a class is one that the code bars under soil, or,
// where it bars none, one whose slowest velocity is that of rock.
func rockClass(code *siteclass.Code, class string) bool {
	bars := false
	for _, k := range code.Conditions {
		if k.Kind == siteclass.Barred {
			bars = true
			if slices.Contains(k.Bars, class) {
				return true
			}
		}
	}
	if bars {
		return false
	}
	const rock = 760 // m/s, the slowest of class B in the codes that bar it
	for _, b := range code.Bands {
		if b.Class == class && b.Vs.Lower.Op != siteclass.Open {
			return b.Vs.Lower.Value*code.Unit.Factor >= rock
		}
	}
	return false
}

// correlatedVelocities tells averages of estimates.
func correlatedVelocities(x *examination) {
	x.eachDecision(func(c *Case) {
		if c.Decision.Basis == "correlated" || c.Decision.Basis == "mixed" {
			x.addUnder(c.Code.Edition+": "+c.Code.Correlated, c.place(),
				"velocities inside the average are estimates: the basis is "+c.Decision.Basis, "", "")
		}
	})
}

// count is a number of things in words.
func count(n int, thing string) string {
	if n == 1 {
		return "1 " + thing
	}
	return fmt.Sprintf("%d %ss", n, thing)
}
