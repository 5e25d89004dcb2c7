package correlate

import (
	"fmt"
	"math"

	"shearbook/profile"
)

// The range of the standard deviation of ln Vs that is planned with for a
// relation from penetration tests, and its middle, which stands for that of a
// relation whose own was not seen (common practice, as in the NGA-West2 site data
// base: Seyhan et al. 2014, Earthquake Spectra 30, and Ancheta et al. 2013, PEER
// 2013/03; from memory). ASCE/SEI 7-22
// looks a factor of 1.3 up and down where no velocity was measured, and ln 1.3
// is 0.262.
const (
	PlanningLow  = 0.20
	PlanningHigh = 0.35
	Planning     = (PlanningLow + PlanningHigh) / 2
)

// MaxBlows is the blow count above which N and N60 are counted as 100, for
// more is refusal, and its count an extrapolation. The codes count it so in
// their averages of N (ASCE/SEI 7-16, 20.4.2); here it is our own choice.
const MaxBlows = 100

// Estimate is a velocity that a relation gives.
type Estimate struct {
	Relation *Relation
	Vs       float64 // m/s
	SigmaLn  float64 // of Vs; published, or Planning
	Planned  bool    // SigmaLn is Planning
	Notes    []profile.Note
}

// Reason is why a relation refuses, in a few words that fit a table.
type Reason string

// The reasons.
const (
	NotStated   Reason = "not stated"  // a quantity that it needs is not known
	NotPossible Reason = "not one"     // a quantity has a value that it cannot have
	OtherSoil   Reason = "soil"        // is for another soil, or the soil is not stated
	OutOfRange  Reason = "range"       // the equation gives no velocity for these values
	Implausible Reason = "implausible" // the velocity is one that no ground has
)

// Refusal is the error of a relation that does not hold. Its text says why
// without naming the relation or the values, so that the layers in which it is
// the same can be told together.
type Refusal struct {
	Relation string // ID
	Reason   Reason
	Quantity Quantity // of NotStated and NotPossible
	Text     string
}

// Error returns the relation and why it refuses.
func (e *Refusal) Error() string { return e.Relation + " " + e.Text }

// Estimate returns the velocity that the relation gives for what is known. The
// error is a *Refusal where a quantity that it needs is not known or cannot be
// one, where it is for another soil, or where its equation gives no velocity
// between profile.MinVelocity and profile.MaxVelocity.
//
// Every relation grows with each of its blow count, tip resistance, sleeve
// friction and strength while the others stand, but for Hegazy & Mayne (1995),
// which falls slowly with the tip above 3.5 MPa unless the sleeve grows with it.
func (r *Relation) Estimate(in Input) (Estimate, error) {
	for _, q := range r.Needs {
		if refusal := r.check(&in, q); refusal != nil {
			return Estimate{}, refusal
		}
	}
	if ok, why := r.fits(&in); !ok {
		return Estimate{}, &Refusal{Relation: r.ID, Reason: OtherSoil, Text: why}
	}
	var notes []profile.Note
	for _, q := range []Quantity{BlowCount, BlowCount60} {
		if in.Get(q).Value > MaxBlows {
			in.Set(q, MaxBlows)
			notes = append(notes, profile.Note{ID: "blows-capped", Text: fmt.Sprintf("%s above %d is counted as %[2]d", q, MaxBlows)})
		}
	}
	v := r.formula(&in)
	switch {
	case math.IsNaN(v) || v <= 0:
		return Estimate{}, &Refusal{Relation: r.ID, Reason: OutOfRange, Text: "gives no velocity for values so low"}
	case v < profile.MinVelocity || v > profile.MaxVelocity:
		return Estimate{}, &Refusal{Relation: r.ID, Reason: Implausible, Text: "gives a velocity that no ground has"}
	}
	e := Estimate{Relation: r, Vs: v, SigmaLn: r.SigmaLn, Notes: notes}
	if e.SigmaLn == 0 {
		e.SigmaLn, e.Planned = Planning, true
	}
	return e, nil
}

// check refuses a quantity that is not known or not possible.
func (r *Relation) check(in *Input, q Quantity) *Refusal {
	x := in.Get(q)
	if !x.Known {
		text := fmt.Sprintf("needs %s, which is not stated", q)
		if why := in.why[q]; why != "" {
			text = fmt.Sprintf("needs %s, and %s", q, why)
		}
		return &Refusal{Relation: r.ID, Reason: NotStated, Quantity: q, Text: text}
	}
	if math.IsNaN(x.Value) || math.IsInf(x.Value, 0) {
		return &Refusal{Relation: r.ID, Reason: NotPossible, Quantity: q, Text: fmt.Sprintf("needs %s, which is not a finite number", q)}
	}
	if q != PorePressureRatio && x.Value <= 0 {
		return &Refusal{Relation: r.ID, Reason: NotPossible, Quantity: q, Text: fmt.Sprintf("needs %s above zero", q)}
	}
	return nil
}

// Combine returns the mean of ln Vs of several relations as a velocity in m/s,
// which is the geometric mean of their velocities, and its sigma:
//
//	σ² = mean of σᵢ² + Σ(ln Vᵢ − ln V)²/n
//
// the law of total variance, with each relation as a branch of a logic tree of
// the same weight (common practice). between is the root of the second part.
// So averaging never makes the sigma smaller than that of the relations: their
// errors are not independent. There must be at least one estimate.
func Combine(estimates []Estimate) (vs, sigmaLn, between float64) {
	n := float64(len(estimates))
	mean, within, scatter := 0.0, 0.0, 0.0
	for _, e := range estimates {
		mean += math.Log(e.Vs) / n
		within += e.SigmaLn * e.SigmaLn / n
	}
	for _, e := range estimates {
		d := math.Log(e.Vs) - mean
		scatter += d * d / n
	}
	return math.Exp(mean), math.Sqrt(within + scatter), math.Sqrt(scatter)
}
