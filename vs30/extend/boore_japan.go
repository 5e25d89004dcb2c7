package extend

import "math"

// booreJapan returns the pair of boore2011 and boore2004 that Boore, Thompson
// & Cadet (2011) weight by depth for the K-NET holes of Japan (electronic
// supplement; one source): the first alone for profiles of 10 m or less, the
// second alone from 20 m on, and in between a weight that changes linearly
// with depth.
//
// What is weighted, and the sigma of the pair, are not in the source at hand.
// Here ln Vs30 is weighted, and sigma is that of the mixture of the two:
//
//	σ² = w·σ₁² + (1−w)·σ₂² + w·(1−w)·(ln V₁ − ln V₂)²
func booreJapan() *Relation {
	return &Relation{
		ID:   "boore-japan",
		Name: "Boore (2004) and Boore et al. (2011), weighted by depth",
		Source: "Boore, Thompson & Cadet (2011), BSSA 101(6):3046–3059, electronic supplement, " +
			"with the coefficients of Boore (2004), BSSA 94(2):591–597",
		Cite:        "Boore, Thompson & Cadet 2011, BSSA 101(6):3046–3059, electronic supplement, with Boore 2004, BSSA 94(2):591–597",
		Region:      "Japan (K-NET, soil sites)",
		AverageOnly: true,
		MinDepth:    5, MaxDepth: 29,
		MinVelocity: slowGround, MaxVelocity: hardRock,
		Limits:   "depths from the tables of the papers; velocities are our own limits",
		Surface:  true,
		Over:     []float64{thirty, hundredFeet},
		Standing: OneSource,
		refuses:  true,
		estimate: weighted,
	}
}

// kikShare returns the weight of boore2011 for a depth of profile in m.
func kikShare(depth float64) float64 { return min(1, max(0, (20-depth)/10)) }

// weighted is the estimate of booreJapan.
func weighted(_ *Relation, g *ground) (result, *Refusal) {
	mean, sigma := japan(g.depth, g.average)
	return overThirty(g, math.Exp(mean), sigma), nil
}

// japan returns ln Vs30 and its sigma for the average v in m/s over a depth in
// m that booreJapan is for.
func japan(depth, v float64) (mean, sigma float64) {
	w := kikShare(depth)
	kik, _ := between(boore2011().table, depth)
	california, _ := between(boore2004().table, depth)
	switch w {
	case 1:
		return kik.ln(v), kik.sigma * math.Ln10
	case 0:
		return california.ln(v), california.sigma * math.Ln10
	}
	a, b := kik.ln(v), california.ln(v)
	s, t := kik.sigma*math.Ln10, california.sigma*math.Ln10
	return w*a + (1-w)*b, math.Sqrt(w*s*s + (1-w)*t*t + w*(1-w)*(a-b)*(a-b))
}
