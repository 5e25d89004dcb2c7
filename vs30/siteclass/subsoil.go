package siteclass

import (
	"math"

	"shearbook/profile"
)

// The standards of Australia and of New Zealand share their subsoil classes:
// rock by its strength and Vs,30, very soft soil by its thickness, and what
// is left by the site period.

// Names of the quantities that the rules of subsoil classes ask for.
const (
	verySoft     = "very soft soil"      // m, by velocity, strength or N
	weakSoil     = "very weak soil"      // m, by strength or N alone
	vs30Asked    = "Vs,30"               // m/s
	soilOnRock   = "soil above the rock" // m
	underlying   = "Vs below"            // m/s, slowest below the top of the rock
	sitePeriod   = "T"                   // s
	soilDepth    = "soil depth"          // m
	suOfCohesive = "su of cohesive soil" // kPa
	nOfSand      = "N of cohesionless soil"
	nOfGravel    = "N of gravel"
)

// blows is the unit of N, which the prints leave without a name.
var blows = profile.Unit{Dimension: profile.Blows, Factor: 1}

// decideSubsoil looks for very soft soil, then for rock, and lets the site
// period decide what is left.
func decideSubsoil(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.averageOver(c.Depth); err != nil {
		return Decision{}, err
	}
	rock := c.term("rock")
	found := r.subsoil(rock)
	column, tooShort := r.columnToBase(rock, c.lastBound(sitePeriod), quarterWave)
	if tooShort == nil {
		found = append(found, column.periodOf(sitePeriod, "site period T"))
	}
	r.alone(vs30Asked, found)
	r.ground()
	if r.settled() {
		r.rockStrength("")
		return r.finish(), nil
	}
	if r.d.Class = r.byRules(found); !r.settled() {
		return Decision{}, tooShort // no rule is left but the period's
	}
	r.rockStrength(r.d.Class)
	r.byPeriod(column, rock)
	r.nearRules(found)
	return r.finish(), nil
}

// byPeriod says what a class that the site period gave rests on.
func (r *ruling) byPeriod(column soilColumn, rock *Term) {
	const shallow, deep = 2, 3 // rows of the table
	if class := r.d.Class; class == r.code.Bands[shallow].Class || class == r.code.Bands[deep].Class {
		r.d.Route = "period"
		r.noteColumn(column, rock)
		r.depthLimits(column)
	}
}

// subsoil is what the rules ask for beside the period.
func (r *ruling) subsoil(rock *Term) []Found {
	soft, weak := r.softSoil()
	found := []Found{
		{Of: verySoft, Text: "very soft soil, total thickness", Value: soft, Unit: profile.Metre.Name},
		{Of: weakSoil, Text: "soil very weak by su or N, total thickness", Value: weak, Unit: profile.Metre.Name},
		{Of: vs30Asked, Text: r.over, Value: r.d.Velocity, Unit: profile.MetrePerSecond.Name},
	}
	top := firstDepth(r.layers, r.datum, rock.Range.Lower, rock.Unit)
	if math.IsInf(top, 1) {
		return found
	}
	return append(found,
		Found{Of: soilOnRock, Text: "soil above " + rock.Text, Value: cover{from: r.datum, bottom: top}.thickness(), Unit: profile.Metre.Name},
		Found{Of: underlying, Text: "slowest velocity below that", Value: slowest(r.layers, top, math.Inf(1)), Unit: profile.MetrePerSecond.Name})
}

// softSoil returns the total thickness in m of the soil that is very soft by
// velocity, strength or N, and of the soil that is so by strength or N alone,
// down to the deepest of the depth limits.
func (r *ruling) softSoil() (soft, weak float64) {
	const deepest = 100 // m
	v, su, n := r.code.term("very-soft-vs"), r.code.term("very-soft-su"), r.code.term("very-soft-n")
	for i := range r.layers {
		l := &r.layers[i]
		top, bottom := max(l.Top, r.datum), min(l.Bottom, r.datum+deepest)
		switch {
		case bottom <= top:
		case l.Has(profile.GivenSu) && su.Range.Contains(l.Su/su.Unit.Factor), l.Has(profile.GivenN) && n.Range.Contains(l.N):
			soft, weak = soft+bottom-top, weak+bottom-top
		default:
			soft += partWithin(l, top, bottom, v.Range, v.Unit)
		}
	}
	return soft, weak
}

// rockStrength records that the strength of rock is not asked here: not
// assessed where the class is one of rock.
func (r *ruling) rockStrength(class string) {
	k := r.condition("rock-strength")
	state := NotApplicable
	for _, barred := range k.Bars {
		if barred == class {
			state = NotAssessed
		}
	}
	r.record(k, Outcome{State: state})
}

// depthLimits notes where the depth of soil that is one row of the table of
// depth limits gives another class than the period.
func (r *ruling) depthLimits(column soilColumn) {
	for i := range r.code.Rules {
		u := &r.code.Rules[i]
		if !u.Indicative || !r.allOf(u.Asks[0], column) {
			continue
		}
		limit := u.Asks[1]
		class := r.code.Bands[2].Class
		if limit.Range.Contains(column.thickness / limit.Unit.Factor) {
			class = u.Class
		}
		if class != r.d.Class {
			r.note("depth-limit", "the soil is all of %s, and by the depth limit of %s (%s) its %s would be class %s; the period decides",
				u.Asks[0], withUnit(limit.Range.Lower.Value, limit.Unit), u.clause(r.code), r.length(column.thickness), class)
		}
		return
	}
}

// allOf reports whether every layer of the column is of the material, and
// within the range, of a row of the depth limits.
func (r *ruling) allOf(row Ask, column soilColumn) bool {
	some := false
	for i := range r.layers {
		l := &r.layers[i]
		if l.Bottom <= r.datum || l.Top >= r.datum+column.thickness {
			continue
		}
		some = true
		m, v, given := materialOf(l), l.N, profile.GivenN
		if row.Of == suOfCohesive {
			v, given = l.Su, profile.GivenSu
		}
		fits := row.Of == suOfCohesive && m == cohesive || row.Of == nOfSand && m == sandy || row.Of == nOfGravel && m == gravelly
		if !fits || !l.Has(given) || !row.Range.Contains(v/row.Unit.Factor) {
			return false
		}
	}
	return some
}

// depthRows are the limits on the depth of soil of one kind beyond which it
// is of the class for deep soil, as both standards print them.
func depthRows(class, clause string) []Rule {
	row := func(of Ask, depth float64) Rule {
		return Rule{Class: class, Asks: []Ask{of, {soilDepth, above(depth), profile.Metre}}, Indicative: true, Clause: clause, Standing: FromMemory}
	}
	return []Rule{
		row(Ask{suOfCohesive, below(12.5), profile.Kilopascal}, 0),
		row(Ask{suOfCohesive, dash(12.5, 25), profile.Kilopascal}, 20),
		row(Ask{suOfCohesive, dash(25, 50), profile.Kilopascal}, 25),
		row(Ask{suOfCohesive, dash(50, 100), profile.Kilopascal}, 40),
		row(Ask{suOfCohesive, dash(100, 200), profile.Kilopascal}, 60),
		row(Ask{nOfSand, below(6), blows}, 0),
		row(Ask{nOfSand, dash(6, 10), blows}, 40),
		row(Ask{nOfSand, dash(10, 30), blows}, 45),
		row(Ask{nOfSand, dash(30, 50), blows}, 55),
		row(Ask{nOfSand, above(50), blows}, 60),
		row(Ask{nOfGravel, above(30), blows}, 100),
	}
}
