package siteclass

import (
	"math"
	"strings"

	"shearbook/profile"
	"shearbook/vs30"
)

// tec2007 returns the Turkish earthquake code of 2007, chapter 6, repealed on
// 1 January 2019.
func tec2007() *Code {
	return &Code{
		ID:        "tec-2007",
		Title:     "Deprem bölgelerinde yapılacak binalar hakkında yönetmelik",
		Edition:   "DBYBHY 2007 (repealed on 1 January 2019)",
		Region:    "Türkiye, designs before 2019",
		Clause:    "ch. 6",
		Table:     "Table 6.2",
		Source:    "DBYBHY 2007, Tables 6.1 and 6.2, from memory",
		Parameter: "Vs",
		DepthText: "topmost layer",
		Datum:     DatumUnstated,
		Unit:      profile.MetrePerSecond,
		Length:    profile.Metre,
		Standing:  FromMemory,

		//  Local site class by the group and the thickness h1 of the topmost layer
		Bands: []Band{
			{Class: "Z1", Name: "rock or hard ground, or a thin layer of dense", Also: "group A; group B with h1 ≤ 15 m", Standing: FromMemory},
			{Class: "Z2", Name: "dense ground, or a thin layer of medium", Also: "group B with h1 > 15 m; group C with h1 ≤ 15 m", Standing: FromMemory},
			{Class: "Z3", Name: "medium ground, or a thin layer of soft", Also: "group C with 15 < h1 ≤ 50 m; group D with h1 ≤ 10 m", Standing: FromMemory},
			{Class: "Z4", Name: "thick medium or soft ground", Also: "group C with h1 > 50 m; group D with h1 > 10 m", Standing: FromMemory},
		},

		Rules: []Rule{
			{Class: "Z1", Asks: []Ask{{"h1 of group A", above(0), profile.Metre}}, Standing: FromMemory},
			{Class: "Z1", Asks: []Ask{{"h1 of group B", atMost(15), profile.Metre}}, Standing: FromMemory},
			{Class: "Z2", Asks: []Ask{{"h1 of group B", above(15), profile.Metre}}, Standing: FromMemory},
			{Class: "Z2", Asks: []Ask{{"h1 of group C", atMost(15), profile.Metre}}, Standing: FromMemory},
			{Class: "Z3", Asks: []Ask{{"h1 of group C", above(15).to(atMost(50)), profile.Metre}}, Standing: FromMemory},
			{Class: "Z3", Asks: []Ask{{"h1 of group D", atMost(10), profile.Metre}}, Standing: FromMemory},
			{Class: "Z4", Asks: []Ask{{"h1 of group C", above(50), profile.Metre}}, Standing: FromMemory},
			{Class: "Z4", Asks: []Ask{{"h1 of group D", above(10), profile.Metre}}, Standing: FromMemory},
		},

		//  Table 6.1, the soil groups by velocity, for rock, for sand and
		//  gravel, and for clay.
		Terms: []Term{
			group("A", "rock", above(1000)), group("A", "sand", above(700)), group("A", "clay", above(700)),
			group("B", "rock", dash(700, 1000)), group("B", "sand", dash(400, 700)), group("B", "clay", dash(300, 700)),
			group("C", "rock", dash(400, 700)), group("C", "sand", dash(200, 400)), group("C", "clay", dash(200, 300)),
			group("D", "sand", below(200)), group("D", "clay", below(200)),
		},

		Notes: []string{
			"the group of a layer depends on its velocity and on what it is: rock, sand and gravel, or clay; that is taken from its description where it says so in plain words",
			"where the description does not say, or the table has no group of that material for the velocity, the softest group that any of the three materials has for it is taken",
			"bounds are printed in two groups each; the softer is taken",
			"h1 is the thickness of the topmost layer, all ground of its group together",
			"h1 of exactly 15, 50 and 10 m is in the stiffer class",
			"the table also has columns for N, relative density, cone resistance and strength, which are not carried here",
		},
		Short:      "h1 needs the whole of the topmost layer, or as much of it as the last class asks for",
		Correlated: "the table has a column for N where the velocity was not measured",
		Superseded: "the code of 2007 was repealed on 1 January 2019; TBDY 2018 is in force since",
		decide:     decideTEC,
	}
}

// group is a row of Table 6.1 for a material.
func group(name, material string, r Range) Term {
	return Term{ID: name + " " + material, Text: "soil group " + name + " of " + material, Range: r,
		Unit: profile.MetrePerSecond, Clause: "Table 6.1", Standing: FromMemory}
}

// decideTEC finds the group of the topmost ground and how far down it goes.
func decideTEC(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	top, atLeast, err := r.topmost()
	if err != nil {
		return Decision{}, err
	}
	name := "h1 of group " + c.groupOf(&top[0])
	h1 := top[len(top)-1].bottom - r.datum
	if math.IsInf(h1, 1) {
		h1 = max(r.known(), passing*c.lastBound(name), rockLook)
	}
	if err := r.averageTo(h1, ""); err != nil {
		return Decision{}, err
	}
	for _, part := range top {
		t := &c.Terms[part.kind]
		r.stretchSteps(part, t.Range, t.Unit, "ground of "+strings.TrimPrefix(t.Text, "soil "), t.Clause)
		r.use(t.Standing, "%s (%s)", t.Text, t.Clause)
	}
	found := []Found{{Of: name, Text: "thickness of the topmost layer, " + name, Value: h1, Unit: profile.Metre.Name, AtLeast: atLeast}}
	r.alone("", found)
	r.ground()
	r.d.Class = r.byRules(found)
	r.nearRules(found)
	return r.finish(), nil
}

// topmost returns the ground below the datum that is all of one group. That
// ground may go on below the profile; the error is that of a profile too
// short where the class depends on how far.
func (r *ruling) topmost() (top []stretch, atLeast bool, err error) {
	end := &r.layers[len(r.layers)-1]
	all := r.stretches(end.Bottom, r.code.groupBounds(), r.groupAt)
	if len(all) == 0 {
		return nil, false, r.tooShort(&vs30.ShortError{Reached: end.Bottom, Needed: r.datum})
	}
	group := r.code.groupOf(&all[0])
	for n := range all {
		if r.code.groupOf(&all[n]) != group {
			return all[:n], false, nil
		}
	}
	needed := passing * r.code.lastBound("h1 of group "+group)
	if !end.HalfSpace() && end.Bottom-r.datum < needed*(1-beside) {
		short := r.tooShort(&vs30.ShortError{Reached: end.Bottom, Needed: r.datum + needed}).(*shortError)
		short.text += ": the topmost layer, of group " + group + ", goes down to the end of the profile"
		return nil, false, short
	}
	return all, true, nil
}

// groupOf returns the letter of a stretch's group.
func (c *Code) groupOf(s *stretch) string {
	letter, _, _ := strings.Cut(c.Terms[s.kind].ID, " ")
	return letter
}

// groupBounds returns the velocities in m/s at which a group may change.
func (c *Code) groupBounds() []float64 {
	var bounds []float64
	for i := range c.Terms {
		for _, l := range [...]Limit{c.Terms[i].Range.Lower, c.Terms[i].Range.Upper} {
			if l.Op != Open {
				bounds = append(bounds, l.Value*c.Terms[i].Unit.Factor)
			}
		}
	}
	return bounds
}

// groupAt returns the index of the row of Table 6.1 for ground of a layer at
// a velocity: of its material, or else the softest of any material.
func (r *ruling) groupAt(l *profile.Layer, v float64) int {
	own := materialOf(l).inTable61()
	if i := r.softestGroup(v, own); own != "" && i >= 0 {
		return i
	}
	if !r.noted("material-unknown") {
		r.note("material-unknown", "for ground of %s the description does not say, or Table 6.1 does not hold, what its material is in the table's words; the softest group of any material is taken",
			quantity(v, r.code.Unit))
	}
	return max(0, r.softestGroup(v, ""))
}

// inTable61 returns the material as Table 6.1 parts it, "" if it is not
// stated.
func (m material) inTable61() string {
	switch m {
	case cohesive:
		return "clay"
	case sandy, gravelly:
		return "sand"
	case rocky:
		return "rock"
	}
	return ""
}

// softestGroup returns the index of the last row of Table 6.1, of a material
// or of any, that has the velocity; −1 if none has.
func (r *ruling) softestGroup(v float64, material string) int {
	for i := len(r.code.Terms) - 1; i >= 0; i-- {
		if t := &r.code.Terms[i]; strings.HasSuffix(t.ID, material) && t.Range.Contains(v/t.Unit.Factor) {
			return i
		}
	}
	return -1
}
