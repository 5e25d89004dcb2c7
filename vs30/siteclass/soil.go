package siteclass

import (
	"fmt"
	"slices"
	"strings"

	"shearbook/profile"
	"shearbook/vs30"
)

// soilKind is the kind of a layer, as the averages of N and su ask for it.
type soilKind uint8

const (
	kindUnknown      soilKind = iota // the layer states nothing that tells
	kindCohesive                     // clay
	kindCohesionless                 // sand, gravel
	kindRefused                      // refused penetration and states nothing else: rock, as a rule
)

// soilOf returns the kind of a layer: by its plasticity index where the code
// gives limits for it; else cohesive if it states su, cohesionless if it
// states N, refused if it states refusal alone. byIndex says that the
// plasticity index told it.
func (a *Averaging) soilOf(l *profile.Layer) (kind soilKind, byIndex bool) {
	if l.Has(profile.GivenPI) && !a.Cohesive.Empty() {
		switch {
		case a.Cohesive.Contains(l.PI):
			return kindCohesive, true
		case a.Cohesionless.Contains(l.PI):
			return kindCohesionless, true
		}
	}
	switch {
	case l.Has(profile.GivenSu):
		return kindCohesive, false
	case l.Has(profile.GivenN):
		return kindCohesionless, false
	case l.Refusal:
		return kindRefused, false
	}
	return kindUnknown, false
}

// refusalCount is the blow count of a layer that refused penetration, in
// blows per 0.3 m.
const refusalCount = 100

// blowsOf returns the blow count of a layer before any cap, and false if it
// states none.
func blowsOf(l *profile.Layer) (float64, bool) {
	switch {
	case l.Refusal:
		return max(refusalCount, l.N), true
	case l.Has(profile.GivenN):
		return l.N, true
	}
	return 0, false
}

// tally is a harmonic average in the making.
type tally struct {
	measure   Measure
	thickness float64 // m of the layers taken
	sum       float64 // Σ d/x, of capped values
	uncapped  float64 // Σ d/x
	capped    float64 // m of the layers whose value was capped

	missing *profile.Layer // first layer that should be in and states no value; nil if there is none
	left    float64        // m of the layers of no known kind, in neither average
	refused float64        // m of the layers counted at refusal
	guessed bool           // the kind of at least one layer is from what it states, not from its plasticity index
	gap     float64        // m of the layers whose plasticity index the code gives to neither kind
}

// average returns Σd/Σ(d/x), 0 where a value is 0.
func (t *tally) average() float64 { return t.thickness / t.sum }

// tallyUp averages one measure over thickness m below the datum, in the unit
// of its column.
func (r *ruling) tallyUp(m Measure, thickness float64) tally {
	t := tally{measure: m}
	for i := range r.layers {
		l := &r.layers[i]
		d := min(l.Bottom, r.from+thickness) - max(l.Top, r.from)
		if d > vs30.Touching {
			r.code.count(&t, l, d)
		}
	}
	return t
}

// count adds d m of a layer to the tally.
func (c *Code) count(t *tally, l *profile.Layer, d float64) {
	a := &c.Averaging
	kind, byIndex := a.soilOf(l)
	if t.measure != AverageN {
		if kind == kindUnknown || kind == kindRefused {
			t.left += d
			return
		}
		t.guessed = t.guessed || !byIndex
		if l.Has(profile.GivenPI) && !byIndex && !a.Cohesive.Empty() {
			t.gap += d
		}
		if (kind == kindCohesive) != (t.measure == AverageSu) {
			return
		}
	}
	v, limit, ok := l.Su/c.suUnit().Factor, a.SuCap, l.Has(profile.GivenSu)
	if t.measure != AverageSu {
		v, ok = blowsOf(l)
		limit = a.NCap
	}
	if !ok || !(v >= 0) {
		if t.missing == nil {
			t.missing = l
		}
		return
	}
	if t.measure != AverageSu && l.Refusal {
		t.refused += d
	}
	t.add(d, v, limit)
}

// add adds d m of a value, of which no more than the cap counts; a cap of 0
// is none.
func (t *tally) add(d, v, limit float64) {
	t.thickness += d
	t.uncapped += d / v
	if limit > 0 && v > limit && !equal(v, limit) {
		t.capped += d
		v = limit
	}
	t.sum += d / v
}

// suUnit returns the unit of the strength column; kPa where the table has
// none.
func (c *Code) suUnit() profile.Unit {
	if c.SuUnit.Name == "" {
		return profile.Kilopascal
	}
	return c.SuUnit
}

// blowUnit is the unit of blow counts as notes and steps print it.
var blowUnit = profile.Unit{Name: "blows/0.3 m", Dimension: profile.Blows, Factor: 1}

// blowUnitFeet is the same in a code of feet.
var blowUnitFeet = profile.Unit{Name: "blows/ft", Dimension: profile.Blows, Factor: 1}

// unitOf returns the unit of a column.
func (c *Code) unitOf(m Measure) profile.Unit {
	switch {
	case m == AverageVs:
		return c.Unit
	case m == AverageSu:
		return c.suUnit()
	case c.Length.Factor != 1:
		return blowUnitFeet
	}
	return blowUnit
}

// symbolOf returns the symbol of an average as the code prints it, or else
// the name of the measure.
func (c *Code) symbolOf(m Measure) string {
	symbol := [...]string{c.Parameter, c.Averaging.N, c.Averaging.Nch, c.Averaging.Su}[m]
	if symbol == "" {
		return m.String()
	}
	return symbol
}

// fault returns why a tally is no average, nil if it is one.
func (r *ruling) fault(t *tally) error {
	switch {
	case t.missing != nil:
		what := "N"
		if t.measure == AverageSu {
			what = "su"
		}
		return fmt.Errorf("the layer from %s to %s states no %s", metres(t.missing.Top), metres(t.missing.Bottom), what)
	case t.thickness <= 0:
		return fmt.Errorf("no layer counts for %s", r.code.symbolOf(t.measure))
	}
	return nil
}

// sayTally notes what must be known of an average of N or su: caps, refusal,
// the kind of blow count, and how the layers were told apart.
func (r *ruling) sayTally(t *tally) {
	a, c := &r.code.Averaging, r.code
	if t.capped > 0 {
		limit := a.NCap
		if t.measure == AverageSu {
			limit = a.SuCap
		}
		u := c.unitOf(t.measure).Name
		r.note("capped", "%s of ground have more than %s %s, and no more than that counts (%s); without the cap %s would be %s",
			metres(t.capped), number(limit), u, a.Clause, c.symbolOf(t.measure), short(t.thickness/t.uncapped))
	}
	if t.refused > 0 {
		rule := ""
		if a.NCap == 0 {
			rule = ", a rule that " + c.Table + " does not print"
		}
		r.note("refusal", "%s of ground refused penetration and are counted as %d blows%s", metres(t.refused), refusalCount, rule)
	}
	if t.gap > 0 {
		r.sayOnce("index-gap", metres(t.gap)+" of ground have a plasticity index between cohesionless ("+a.Cohesionless.String()+
			") and cohesive ("+a.Cohesive.String()+"), which the code gives to neither; what the layer states decides")
	} else if t.guessed {
		r.sayOnce("kind-assumed", "where no plasticity index tells, layers that state su are taken for cohesive and those that state N alone for cohesionless")
	}
	if t.left > 0 {
		r.sayOnce("left-out", metres(t.left)+" of ground state nothing to tell whether they are cohesive, and are in none of these averages")
	}
	if a.Unstated {
		r.sayOnce("averaging-assumed", "the code prints no formula for averages of N and su; the harmonic mean is taken, each over its own layers")
	}
}

// sayBlow notes how the kind of blow count that the code asks for stands to
// that of the data.
func (r *ruling) sayBlow() {
	asked, stated := r.code.Averaging.Blow, r.blow()
	switch {
	case asked == BlowUnstated || asked == stated:
	case stated == BlowUnstated:
		r.note("blow-count", "the code asks for N %s; the data do not say which N theirs is, and it is taken as it stands", asked)
	default:
		r.note("blow-count", "the code asks for N %s; the data give N %s, and it is taken as it stands", asked, stated)
	}
}

// blow returns the kind of the data's blow counts: what the site states, or
// else what the heading of their column says. Counts with an energy ratio beside
// them were not corrected by it.
func (r *ruling) blow() Blow {
	switch {
	case r.site.Blow != BlowUnstated || r.site.Profile == nil:
		return r.site.Blow
	case slices.ContainsFunc(r.layers, func(l profile.Layer) bool { return l.EnergyRatio > 0 }):
		return BlowField
	case r.site.Profile.Reading == nil:
		return BlowUnstated
	}
	reading := r.site.Profile.Reading
	i := reading.Index(profile.N)
	if i < 0 {
		return BlowUnstated
	}
	heading := strings.ToLower(reading.Columns[i].Heading)
	switch {
	case strings.Contains(heading, "n1"):
		return BlowN1
	case strings.Contains(heading, "60"):
		return BlowN60
	}
	return BlowUnstated
}
