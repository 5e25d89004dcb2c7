package extend

import (
	"fmt"
	"math"

	"shearbook/profile"
	"shearbook/vs30"
)

// row holds the coefficients for one depth d of profile in a relation
//
//	log V = c₀ + c₁·log v + c₂·(log v)²
//
// between the average v over d and the average V over 30 m, in m/s, with log
// to base 10.
type row struct {
	depth      float64 // m
	c0, c1, c2 float64
	sigma      float64 // standard deviation of log V
}

// between returns the row for a depth of profile, with coefficients linear
// between those of the rows above and below it, and false outside the table:
// nothing is extrapolated. As log V is linear in the coefficients, it makes no
// difference whether they are interpolated or the log V of two rows for the
// same v.
func between(table []row, depth float64) (row, bool) {
	n := len(table)
	if n == 0 || !(depth >= table[0].depth-vs30.Touching && depth <= table[n-1].depth+vs30.Touching) {
		return row{}, false
	}
	i := 0
	for i < n-2 && depth >= table[i+1].depth {
		i++
	}
	a, b := table[i], table[i+1]
	w := min(1, max(0, (depth-a.depth)/(b.depth-a.depth)))
	mix := func(x, y float64) float64 { return x + w*(y-x) }
	return row{depth: depth, c0: mix(a.c0, b.c0), c1: mix(a.c1, b.c1), c2: mix(a.c2, b.c2),
		sigma: mix(a.sigma, b.sigma)}, true
}

// ln returns the natural logarithm of the average over 30 m for the average v
// over the depth of the row.
func (c row) ln(v float64) float64 {
	x := math.Log10(v)
	return (c.c0 + x*(c.c1+x*c.c2)) * math.Ln10
}

// fitted is the estimate of a relation that has a table.
func fitted(r *Relation, g *ground) (result, *Refusal) {
	c, ok := between(r.table, g.depth)
	if !ok {
		return result{}, r.refuse(TooShallow, "the relation has no row for %.4g m of profile", g.depth)
	}
	return overThirty(g, math.Exp(c.ln(g.average)), c.sigma*math.Ln10), nil
}

// The averaging depths of the relations from shallow averages. They are
// published for 30 m. For 100 ft the velocity that the estimate implies
// between the end of the profile and 30 m is taken to go on for the 0.48 m
// more; that rule is ours, and moves the average by less than 1 %.
const (
	thirty      = 30.0
	hundredFeet = 100 * profile.Foot
)

// overThirty is the result for an estimate v30 in m/s of the average over
// 30 m, over the averaging depth asked for.
func overThirty(g *ground, v30, sigma float64) result {
	got := result{velocity: v30, sigma: sigma, how: fmt.Sprintf(
		"the average over 30 m is estimated from that over the upper %.4g m, %.4g m/s", g.depth, g.average)}
	if same(g.thickness, thirty) {
		return got
	}
	measured := g.depth / g.average
	perMetre := (thirty/v30 - measured) / (thirty - g.depth)
	got.velocity = g.thickness / (measured + perMetre*(g.thickness-g.depth))
	got.how += ", and the velocity that it implies goes on from 30 to 30.48 m"
	return got
}

// hardRock is the velocity in m/s above which no relation between averages
// speaks: the bound of the hardest rock class of NEHRP and NBCC. Hard rock is
// a class to be measured (common practice).
const hardRock = 1500

// slowGround is the average in m/s below which an estimate carries a note. It
// is ours.
const slowGround = 100
