package extend

import (
	"strconv"

	"shearbook/profile"
)

// asce7_22 returns the rule of ASCE/SEI 7-22 §20.3 for a profile that ends
// above 100 ft (from memory): where it reaches 50 ft or more and softer layers
// are unlikely below, its last velocity is carried down; where it ends above
// 50 ft the default classes apply. Depths count from the datum. That nothing
// softer is to be expected is for the engineer to say: where the velocity
// falls at the bottom of the profile, the estimate carries a doubt and is made
// nevertheless.
func asce7_22() *Relation {
	return &Relation{
		ID:       "asce-7-22",
		Name:     "ASCE/SEI 7-22, last velocity carried down",
		Source:   "ASCE/SEI 7-22, Minimum Design Loads and Associated Criteria for Buildings and Other Structures, §20.3",
		Cite:     "ASCE/SEI 7-22 §20.3",
		Region:   "United States, under that standard",
		MinDepth: 50 * profile.Foot,
		Limits:   "the depth from the standard; velocities have none, but class A is for measured rock",
		Over:     []float64{hundredFeet},
		Standing: FromMemory,
		shallow:  "; above 50 ft the default classes of the standard apply",
		estimate: lastVelocityASCE,
	}
}

// lastVelocityASCE is the estimate of asce7_22.
func lastVelocityASCE(_ *Relation, g *ground) (result, *Refusal) {
	got := lastVelocity(g)
	got.how += " as the standard allows where no softer layer is to be expected, which the engineer has to confirm"
	return got, nil
}

// lastVelocity is the result of continuing the profile with its deepest
// velocity.
func lastVelocity(g *ground) result {
	last := &g.layers[len(g.layers)-1]
	v := last.VsAt(last.Bottom)
	added := g.thickness - g.depth
	return result{velocity: g.thickness / (g.depth/g.average + added/v), below: v, how: "below it the deepest velocity, " + four(v) +
		" m/s, is taken to go on unchanged over " + four(added) + " m, " +
		strconv.FormatFloat(100*added/g.thickness, 'f', 0, 64) + " % of the averaging depth"}
}
