// Package correlate estimates shear-wave velocity where none was measured: from
// blow counts of the standard penetration test, from cone resistance and from
// undrained shear strength, by published relations.
//
// Such a velocity is an estimate. Its basis is always profile.Correlated, and
// it always carries a sigma of ln Vs. Relations of several authors differ by a
// third and more for the same ground, so more than one should be asked: Profile
// and Sounding take the geometric mean of those that are chosen and put the
// scatter between them into the sigma.
//
// A relation that lacks a quantity, or is for another soil, refuses and says
// why. No quantity is made up: stresses come from the densities of the layers
// or a unit weight that the user states, and from the stated water table.
//
// # Blow counts
//
// N is as measured, in blows per 0.3 m. N60 is N corrected to 60 % of the energy
// of the hammer; Drive.N60 corrects it, and only where it is asked to. (N1)60 is
// N60 at an effective stress of one atmosphere, by NormalisedBlows; none of the
// relations here asks for it.
//
// # Sources
//
// The coefficients have the standing that each relation states. Titles and
// volumes of the papers are from memory. No range of validity and no sigma of
// the whole scatter was seen in print for any of them, so Planning stands for
// the sigma where the caller states none.
//
// # What is left out, and why
//
//   - Wair, DeJong & Shantz (2012), PEER 2012/08, in N60 and effective stress:
//     the factors and the powers are from memory and have to be held against the
//     report first. Quoted with the power of N60 alone, without that of the
//     stress, they are wrong.
//   - 85.35·N^0.348·D^0.199 mixes two equations of Ohta & Goto (1978), that in N
//     alone and that in N and depth. Neither is meant by it.
//   - McGann et al. (2015) with 0.0823 as the power of fs: two digits changed
//     places on the way. It is 0.0832.
//   - The unit weight from the velocity itself (Mayne 2001), which would run in
//     a circle: relations that need a stress would need their own result.
package correlate

import (
	"fmt"
	"slices"

	"shearbook/profile"
)

// Standing is how well the numbers of a relation are known to agree with the
// paper, in the words that reports print.
type Standing string

// The standings.
const (
	Checked    Standing = "checked"     // two independent published sources agree
	OneSource  Standing = "one source"  // one published source
	FromMemory Standing = "from memory" // not checked against a source
)

// Family is the test that a relation estimates from.
type Family string

// The families.
const (
	Penetration Family = "SPT" // blow counts of the standard penetration test
	ConeTest    Family = "CPT" // readings of a cone
	Shear       Family = "su"  // undrained shear strength
)

// Relation is one published way from the result of a test to a shear-wave
// velocity. The relations that All and Find return are shared: they are to be
// read and not changed.
type Relation struct {
	ID       string // "imai-tonouchi-1982"
	Name     string // "Imai & Tonouchi (1982)"
	Family   Family
	Equation string     // as printed, Vs in m/s
	Units    string     // of the printed form
	Needs    []Quantity // in the order of Equation
	Source   string     // the paper

	For    string // soils and ages that it is for, in words
	Soils  []Soil // to which it is held; nil for all
	Region string // where the data behind it come from; "" if it was not seen
	Limits string // what is said of the range of its quantities

	// SigmaLn is the published standard deviation of ln Vs; 0 where none was
	// seen, so that a planning value stands for it. SigmaNote says what is
	// known of it beside that.
	SigmaLn   float64
	SigmaNote string

	Standing Standing
	Note     string // what else has to be known to use it; "" if nothing

	formula func(*Input) float64 // of an Input that has what Needs says; m/s
}

// NoLimits is what Relation.Limits says where no range was seen.
const NoLimits = "none was seen in print"

// relations holds the relations in the order of All. It is never changed.
var relations = slices.Concat(blowCounts(), blowCountsAndStress(), cones(), conesOfOneSoil(), strengths())

// All returns the relations by family: from blow counts, from cones, from
// strength.
func All() []*Relation { return slices.Clone(relations) }

// IDs returns the IDs of the relations in the order of All.
func IDs() []string {
	ids := make([]string, len(relations))
	for i, r := range relations {
		ids[i] = r.ID
	}
	return ids
}

// Find returns the relation of that ID. The error names the nearest ID there is.
func Find(id string) (*Relation, error) {
	for _, r := range relations {
		if r.ID == id {
			return r, nil
		}
	}
	if like := profile.Nearest(id, IDs()); like != "" {
		return nil, fmt.Errorf("no correlation is called %q; did you mean %q", id, like)
	}
	return nil, fmt.Errorf("no correlation is called %q", id)
}

// Scope returns the soils, ages and region of a relation in one phrase.
func (r *Relation) Scope() string {
	if r.Region == "" {
		return r.For
	}
	return r.For + "; " + r.Region
}
