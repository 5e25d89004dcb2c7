package extend

import (
	"fmt"
	"math"

	"shearbook/vs30"
)

// wang2015 returns the relation of Wang & Wang (2015), which takes the average
// to grow as a power of the depth that it is over, and the power from the
// averages over two depths z₁ < z₂ of the profile itself:
//
//	log Vs30 = log Vs_z₂ + (log 30 − log z₂)/(log z₂ − log z₁)·(log Vs_z₂ − log Vs_z₁)
//
// The equation is from memory. It has no coefficients, and so no region; a
// sigma is not at hand. z₂ is the whole depth of the profile here, and z₁ half
// of it: that choice, and the 10 m of profile that are asked for, are ours. For
// 100 ft, log 30.48 stands for log 30.
func wang2015() *Relation {
	return &Relation{
		ID:          "wang-2015",
		Name:        "Wang & Wang (2015), two depths",
		Source:      "Wang & Wang (2015), BSSA 105(3):1359–1370",
		Cite:        "Wang & Wang 2015, BSSA 105(3):1359–1370",
		Region:      "any: no coefficients are fitted to a region",
		AverageOnly: true,
		MinDepth:    10,
		MinVelocity: slowGround, MaxVelocity: hardRock,
		Limits:   "our own",
		Surface:  true,
		Over:     []float64{thirty, hundredFeet},
		Standing: FromMemory,
		refuses:  true,
		estimate: fromTwoDepths,
	}
}

// fromTwoDepths is the estimate of wang2015.
func fromTwoDepths(r *Relation, g *ground) (result, *Refusal) {
	z1, z2 := g.depth/2, g.depth
	v1, err := vs30.Average(g.layers, g.from, z1)
	if err != nil {
		return result{}, r.refuse(NoProfile, "%v", err)
	}
	v := twoDepths(z1, v1, z2, g.average, g.thickness)
	return result{velocity: v, how: fmt.Sprintf(
		"the average is estimated from those over the upper %.4g m, %.4g m/s, and over %.4g m, %.4g m/s, "+
			"as a power of the depth", z1, v1, z2, g.average)}, nil
}

// twoDepths carries the averages v1 over z1 m and v2 over z2 m on to z m as a
// power of the depth.
func twoDepths(z1, v1, z2, v2, z float64) float64 {
	return v2 * math.Pow(v2/v1, math.Log(z/z2)/math.Log(z2/z1))
}
