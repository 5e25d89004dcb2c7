package correlate

import "shearbook/profile"

// Quantity is one that relations estimate from.
type Quantity uint8

// The quantities.
const (
	BlowCount         Quantity = iota // N, blows per 0.3 m, as measured
	BlowCount60                       // N60, blows per 0.3 m
	Depth                             // D or z, m below ground level
	EffectiveStress                   // σ'v, kPa
	TotalStress                       // σv, kPa
	Tip                               // qc, kPa
	CorrectedTip                      // qt, kPa
	Sleeve                            // fs, kPa
	BehaviourIndex                    // Ic
	NormalisedTip                     // Qtn
	PorePressureRatio                 // Bq
	Strength                          // su, kPa
	quantityCount
)

var quantities = [quantityCount]struct{ symbol, name string }{
	BlowCount:         {"N", "blow count"},
	BlowCount60:       {"N60", "blow count at 60 % of the energy"},
	Depth:             {"D", "depth"},
	EffectiveStress:   {"σ'v", "effective vertical stress"},
	TotalStress:       {"σv", "total vertical stress"},
	Tip:               {"qc", "tip resistance"},
	CorrectedTip:      {"qt", "corrected tip resistance"},
	Sleeve:            {"fs", "sleeve friction"},
	BehaviourIndex:    {"Ic", "soil behaviour type index"},
	NormalisedTip:     {"Qtn", "normalised tip resistance"},
	PorePressureRatio: {"Bq", "pore pressure ratio"},
	Strength:          {"su", "undrained shear strength"},
}

// String returns the symbol of the quantity, as equations print it.
func (q Quantity) String() string { return quantities[q].symbol }

// Name returns the quantity in words.
func (q Quantity) Name() string { return quantities[q].name }

// Input is what is known of one place in the ground. The zero value knows
// nothing; Set makes a quantity known.
type Input struct {
	Soil Soil

	values [quantityCount]profile.Optional
	why    [quantityCount]string // it is not known: "no unit weight is stated"
}

// Set makes a quantity known: in blows per 0.3 m, in m, in kPa, or a pure number.
func (in *Input) Set(q Quantity, value float64) {
	in.values[q] = profile.Known(value)
}

// Get returns a quantity, if it is known.
func (in *Input) Get(q Quantity) profile.Optional { return in.values[q] }

// missing says why a quantity is not known.
func (in *Input) missing(q Quantity, why string) { in.why[q] = why }

// of returns a quantity that is known.
func (in *Input) of(q Quantity) float64 { return in.values[q].Value }
