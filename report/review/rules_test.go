package review_test

import (
	"fmt"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/report/review"
)

// submission is a profile file with a claim on its first profile.
func submission(table string, claim review.Claim) *review.Submission {
	profiles, err := open.Bytes("site.csv", []byte(table), open.Options{})
	if err != nil {
		panic(err)
	}
	s := &review.Submission{Name: "site.csv", Claims: []review.Claim{claim}, Stated: claim.Stated}
	for i := range profiles {
		s.Profiles = append(s.Profiles, review.Entry{Profile: &profiles[i]})
	}
	s.Claims[0].Profile = profiles[0].Name
	return s
}

// claim is a class and an average under a code.
func claim(code, class, average string) review.Claim {
	c := review.Claim{Code: code, Class: class}
	if average != "" {
		var err error
		if c.Average, err = review.ParseNumber(average, profile.Velocity, profile.Unit{}); err != nil {
			panic(err)
		}
	}
	return c
}

// tell prints what one rule finds.
func tell(rule string, s *review.Submission) { tellUnder(rule, s, review.Desk{}) }

func tellUnder(rule string, s *review.Submission, desk review.Desk) {
	n := 0
	for _, f := range review.Examine(s, desk).Findings {
		if f.Rule != rule {
			continue
		}
		n++
		fmt.Printf("%s: %s: %s\n", f.Weight, f.Where(), f.Text)
		if f.Claimed != "" || f.Found != "" {
			fmt.Printf("  claimed %q, found %q\n", f.Claimed, f.Found)
		}
		for i, c := range f.Causes {
			fmt.Printf("  %s%s\n", f.CauseLabel(i), c.Words())
		}
	}
	if n == 0 {
		fmt.Println("nothing")
	}
}

// threeLayers averages over 30 m to 30 / (5/150 + 10/250 + 15/400) =
// 30/0.1108333 = 270.68 m/s, and over 30.48 m to 30.48 / (5/150 + 10/250 +
// 15.48/400) = 30.48/0.1120333 = 272.06 m/s.
const threeLayers = "# method: downhole\n# basis: measured\n# date: 2026-03-02\n# operator: Example Survey Crew\n# depth reached: 45 m\n" +
	"top (m),bottom (m),vs (m/s)\n0,5,150\n5,15,250\n15,45,400\n"

// (5·150 + 10·250 + 15·400)/30 = 308.33.
func Example_average() {
	tell("average", submission(threeLayers, claim("ec8-2004", "C", "270.7 m/s")))
	tell("average", submission(threeLayers, claim("ec8-2004", "C", "308.3 m/s")))
	// Output:
	// nothing
	// answer: site: the layers do not average to the claimed velocity
	//   claimed "308.3 m/s", found "270.68 m/s over 30 m from ground level"
	//   likely: the arithmetic mean of the velocities, weighted by thickness, in place of the average by travel time (308.33 m/s)
}

// 892.6 ft/s lies between 600 and 1,200 ft/s (ASCE/SEI 7-16 Table 20.3-1).
func Example_class() {
	tell("class", submission(threeLayers, claim("asce-7-16", "C", "")))
	// Output:
	// answer: site: the code gives another class than the claimed one
	//   claimed "class C", found "class D by 892.6 ft/s"
	//   possibly: the travel time of the lowest layer or half-space left out, the full depth kept (415.6 m/s)
	//   possibly: depths in feet taken for metres, and velocities in ft/s for m/s (603.6 m/s)
}

func Example_code() {
	desk := review.Desk{Code: code("ec8-2004")}
	tellUnder("code", submission(threeLayers, claim("asce-7-16", "D", "")), desk)
	// Output:
	// answer: site: the claim is made under another code than the one that is applied
	//   claimed "asce-7-16", found "ec8-2004 (EN 1998-1:2004 with AC:2009 and A1:2013)"
}

func Example_unchecked() {
	tell("unchecked", submission(threeLayers, claim("ec8-2005", "C", "")))
	tell("unchecked", submission(threeLayers, claim("ec8-2004", "", "")))
	// Output:
	// answer: site: the code "ec8-2005" is not known; the nearest is ec8-2004
	//   claimed "class C, under ec8-2005", found ""
	// answer: site: neither a class nor an average is claimed
	//   claimed "under ec8-2004", found ""
}

// 20 m in 5/150 + 15/250 = 0.0933333 s; with 250 m/s carried on over 10 m
// more, 30 / 0.1333333 = 225 m/s. By chance (5·150 + 15·250)/20 is 225 m/s too.
func Example_extensionUnsaid() {
	const short = "top (m),bottom (m),vs (m/s)\n0,5,150\n5,20,250\n"
	tell("extension-unsaid", submission(short, claim("ec8-2004", "C", "225 m/s")))
	// Output:
	// answer: site: the profile ends above the averaging depth, and nothing says how it was carried on
	//   claimed "class C, 225 m/s, under ec8-2004", found "layers down to 20 m, of 30 m that the code needs"
	//   likeliest: the deepest velocity carried on to the averaging depth without a word (225.0 m/s)
	//   or: the arithmetic mean by thickness of what was reached (225.0 m/s)
}

func Example_extension() {
	c := claim("ec8-2004", "C", "225 m/s")
	c.Stated.Extend = "constant-velocity"
	const short = "top (m),bottom (m),vs (m/s)\n0,5,150\n5,20,250\n"
	tell("extension", submission(short, c))
	// Output:
	// explain: site: the profile ends 20 m below ground level; below it the deepest velocity, 250 m/s, is taken to go on unchanged over 10 m, 33 % of the averaging depth (Boore 2004, BSSA 94(2):591–597, doi:10.1785/0120030105, one source; no sigma is published for it); it puts the ground below the profile at 250 m/s, and is too high where that is slower
	//   claimed "constant-velocity", found ""
}

func Example_averagingDepth() {
	c := claim("asce-7-16", "D", "")
	c.Depth, _ = review.ParseNumber("30 m", profile.Length, profile.Unit{})
	tell("averaging-depth", submission(threeLayers, c))
	// Output:
	// answer: site: the average is said to be taken over another depth than the code's
	//   claimed "30 m", found "100 ft (30.48 m)"
}

func Example_datum() {
	c := claim("ec8-2004", "C", "")
	c.Stated.Datum = profile.Known(2)
	tell("datum", submission(threeLayers, c))
	// Output:
	// nothing
}

// The average of 270.7 m/s lies far from 180 and 360 m/s; 355 m/s lies 1.4 %
// below 360.
func Example_margin() {
	tell("margin", submission("top (m),bottom (m),vs (m/s)\n0,10,355\n10,40,355\n", claim("ec8-2004", "C", "355 m/s")))
	// Output:
	// note: site: the average lies 1.4 % from the bound of 360 m/s, where class B begins
	//   claimed "", found "class C"
}

func Example_standing() {
	tell("standing", submission(threeLayers, claim("asce-7-22", "D", "")))
	// Output:
	// note: site: the standing of the part of the table that was used is: from memory; compare it with the print
	//   claimed "", found "class D"
}

// Example_uncheckedRoute claims a velocity of a profile that has N alone.
func Example_uncheckedRoute() {
	tell("unchecked", submission("top (m),bottom (m),N\n0,10,12\n10,40,30\n", claim("asce-7-16", "D", "250 m/s")))
	// Output:
	// answer: site: an average velocity is claimed, and the code decides by N, without one
	//   claimed "class D, 250 m/s, under asce-7-16", found ""
}
