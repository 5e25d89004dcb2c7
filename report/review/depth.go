package review

import (
	"fmt"
	"strings"

	"shearbook/profile"
	"shearbook/report"
)

// depthRules are about how deep a survey can see, and how finely.
func depthRules() []Rule {
	return []Rule{
		{ID: "depth-reached", Weight: Explain, check: belowReached,
			Summary: "The average uses velocities below the depth that the survey states to have reached",
			Source:  "Boore (2004), BSSA 94(2) 591–597: an average over a depth that was not reached is an estimate"},
		{ID: "extension", Weight: Explain, check: extensionSaid,
			Summary: "The average rests on a profile that was carried on below its end",
			Source:  "Boore (2004), BSSA 94(2) 591–597; Boore, Thompson & Cadet (2011), BSSA 101(6) 3046–3059"},
		{ID: "wavelength", Weight: Explain, check: wavelength, Practice: true,
			Summary: "A surface-wave profile is used deeper than its longest wavelength over a divisor",
			Source:  "Park, Miller & Xia (1999), from memory; Foti et al. (2018), Bull Earthq Eng 16:2367–2420",
			Limits:  []Limit{{"divisor", 2, "", "of the longest wavelength; 3 is the cautious one", 0}}},
		{ID: "receiver-depth", Weight: Explain, check: receiverDepth,
			Summary: "A survey in a hole is used below its deepest receiver",
			Source:  "ASTM D7400, D4428: velocities are timed between or above receivers"},
		{ID: "thin-layer", Weight: Explain, check: thinLayers, Practice: true,
			Summary: "A surface-wave profile has a top layer thinner than its shortest wavelength over a divisor (twice the spacing of receivers, where no wavelength is stated)",
			Source:  "Foti et al. (2018), Bull Earthq Eng 16:2367–2420; the divisor is common practice",
			Limits:  []Limit{{"divisor", 3, "", "of the shortest wavelength", 0}}},
		{ID: "fine-at-depth", Weight: Note, check: fineAtDepth, Practice: true,
			Summary: "A surface-wave profile has a layer that is thin against its depth, which the method cannot tell from its neighbours",
			Source:  "Foti et al. (2018), Bull Earthq Eng 16:2367–2420, on resolution falling with depth; the share is common practice",
			Limits:  []Limit{{"share", 10, "%", "of the depth of its middle, the least that is not told", 0}}},
		{ID: "interface-at-depth", Weight: Note, check: interfaceAtDepth, Practice: true,
			Summary: "A boundary lies at exactly the averaging depth: the average just misses what lies below",
			Source:  "common practice: nature does not know the depth of a code"},
	}
}

// belowReached tells averages that use what was not reached.
func belowReached(x *examination) {
	x.eachProfile(func(e *Entry, from, to float64) {
		reached := e.reached()
		if used := min(to, e.Profile.DepthModelled()); reached > 0 && used > reached+profile.Joint && to > reached+profile.Joint {
			x.add(e.layer(layerAt(e.Profile, reached)), fmt.Sprintf("the average uses velocities down to %s, and the survey reached %s", metres(to), metres(reached)),
				"reached "+metres(reached), "used to "+metres(to))
		} else if reached > 0 && to > reached+profile.Joint && e.Profile.Layers[len(e.Profile.Layers)-1].HalfSpace() {
			x.add(e.layer(len(e.Profile.Layers)-1), fmt.Sprintf("the average uses the half-space down to %s, and the survey reached %s", metres(to), metres(reached)),
				"reached "+metres(reached), "used to "+metres(to))
		}
	})
}

// layerAt returns the index of the layer that holds a depth.
func layerAt(p *profile.Profile, depth float64) int {
	for i := range p.Layers {
		if p.Layers[i].Bottom > depth+profile.Joint {
			return i
		}
	}
	return len(p.Layers) - 1
}

// extensionSaid tells averages of profiles that were carried on.
func extensionSaid(x *examination) {
	x.eachDecision(func(c *Case) {
		for _, n := range c.Decision.Notes {
			if n.ID == "extended" {
				x.add(c.place(), n.Text, c.Claim.Stated.Extend, "")
				x.otherRelations(c)
			}
		}
	})
}

// otherRelations tells a class that hangs on the relation by which a profile
// was carried on.
func (x *examination) otherRelations(c *Case) {
	hold, give := 0, map[string]int{}
	var classes []string
	facts := c.Claim.Stated.facts()
	for _, facts.Extend = range report.Extensions() {
		d, err := report.Classify(c.Entry.Profile, c.Code, facts)
		if err != nil {
			continue // the relation does not hold here
		}
		hold++
		if give[d.Class]++; give[d.Class] == 1 {
			classes = append(classes, d.Class)
		}
	}
	if len(classes) < 2 {
		return
	}
	var parts []string
	for _, class := range classes {
		parts = append(parts, fmt.Sprintf("class %s under %d", class, give[class]))
	}
	x.add(c.place(), fmt.Sprintf("the class hangs on the relation by which the profile is carried on: of the %d that hold here, %s", hold, strings.Join(parts, ", ")),
		c.Claim.Stated.Extend, "class "+c.Decision.Class)
}

// wavelength tells surface-wave profiles that are used too deep.
func wavelength(x *examination) {
	x.eachProfile(func(e *Entry, from, to float64) {
		longest, ok := length(e.Profile, longestWavelength...)
		reach := longest / x.limit("divisor")
		if ok && e.method() != refraction && to > reach*(1+noise) {
			x.add(e.layer(layerAt(e.Profile, reach)), fmt.Sprintf("a longest wavelength of %s lets a profile be known to about %s (a half; a third is %s), and the average uses it to %s",
				metres(longest), metres(reach), metres(longest/3), metres(to)), "used to "+metres(to), metres(reach))
		}
	})
}

// receiverDepth tells profiles from holes that are used too deep.
func receiverDepth(x *examination) {
	x.eachProfile(func(e *Entry, from, to float64) {
		deepest, ok := length(e.Profile, deepestReceiver...)
		if ok && to > deepest+profile.Joint {
			x.add(e.layer(layerAt(e.Profile, deepest)), fmt.Sprintf("the deepest receiver stood at %s, and the average uses velocities to %s", metres(deepest), metres(to)),
				"used to "+metres(to), "receivers to "+metres(deepest))
		}
	})
}

// thinLayers tells top layers that a surface-wave survey cannot resolve.
func thinLayers(x *examination) {
	x.each(func(e *Entry) {
		if e.method() != surfaceWaves || e.Profile.NoVelocity {
			return
		}
		shortest, ok := length(e.Profile, shortestWavelength...)
		what := "a shortest wavelength of " + metres(shortest)
		if !ok {
			var spacing float64
			if spacing, ok = length(e.Profile, receiverSpacing...); ok {
				shortest = 2 * spacing // spatial Nyquist
				what = fmt.Sprintf("receivers %s apart, and so no wavelength below %s,", metres(spacing), metres(shortest))
			}
		}
		least := shortest / x.limit("divisor")
		if h := e.Profile.Layers[0].Thickness(); ok && h < least*(1-noise) {
			x.add(e.layer(0), fmt.Sprintf("the first layer is %s thick; %s cannot resolve one thinner than about %s", metres(h), what, metres(least)), metres(h), metres(least))
		}
	})
}

// fineAtDepth tells thin layers of surface-wave profiles.
func fineAtDepth(x *examination) {
	x.eachProfile(func(e *Entry, from, to float64) {
		if e.method() != surfaceWaves {
			return
		}
		for i := range e.Profile.Layers {
			l := &e.Profile.Layers[i]
			middle := (l.Top + l.Bottom) / 2
			if share := x.limit("share") / 100; l.Top < to && l.Thickness() < share*middle*(1-noise) {
				x.add(e.layer(i), fmt.Sprintf("the layer is %s thick at a depth of %s; less than about %s cannot be told from its neighbours there",
					metres(l.Thickness()), metres(middle), metres(share*middle)), metres(l.Thickness()), metres(share*middle))
			}
		}
	})
}

// interfaceAtDepth tells profiles with a boundary at exactly the averaging
// depth, across which the velocity changes.
func interfaceAtDepth(x *examination) {
	x.eachDecision(func(c *Case) {
		_, to, ok := c.span()
		if !ok {
			return
		}
		layers := c.layers()
		for i := 1; i < len(layers); i++ {
			above, below := layers[i-1].VsAt(layers[i-1].Bottom), layers[i].Vs
			if abs(layers[i].Top-to) <= profile.Joint && !same(above, below) {
				x.add(c.Entry.layer(i), fmt.Sprintf("a boundary lies at exactly the averaging depth of %s, with %s above and %s below", metres(to), speed(above), speed(below)),
					"", metres(layers[i].Top))
			}
		}
	})
}
