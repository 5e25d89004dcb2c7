package siteclass

import "shearbook/profile"

// Criterion is one printed limit of a condition.
type Criterion struct {
	Property Property
	Range    Range
	Unit     profile.Unit // as printed; without a name where the print has no unit
	About    bool         // the print says "about"
}

// Property is what a criterion limits.
type Property uint8

// The properties. Those of the cover and the stiff ground are taken from the
// profile.
const (
	Thickness       Property = iota // of a deposit, in all
	PlasticityIndex                 // PI
	WaterContent                    // w
	Strength                        // undrained, su or cu
	CoverThickness                  // of the ground above the stiff ground
	CoverVelocity                   // time-averaged, of the ground above the stiff ground
	StiffVelocity                   // slowest, of the stiff ground
	LiquidLimit                     // LL; no site states it
)

var propertyWords = [...]string{"total thickness", "plasticity index", "water content", "undrained strength",
	"thickness above the stiff ground", "average velocity above the stiff ground", "velocity of the stiff ground", "liquid limit"}

// String returns the words of the property.
func (p Property) String() string { return propertyWords[p] }

// Units of the limits that profile does not name. A plasticity index is
// printed without a unit.
var (
	percent = profile.Unit{Name: "%", Dimension: profile.Percent, Factor: 1}
	bare    = profile.Unit{Dimension: profile.Percent, Factor: 1}
)

// property returns a property of a deposit in SI.
func (d Deposit) property(p Property) profile.Optional {
	switch p {
	case Thickness:
		return d.Thickness
	case PlasticityIndex:
		return d.PI
	case WaterContent:
		return d.WaterContent
	case Strength:
		return d.Su
	}
	return profile.Optional{}
}

// String returns the property and its limit: "undrained strength < 500 psf".
func (k Criterion) String() string {
	s := k.Property.String() + " "
	if k.About {
		s += "about "
	}
	s += k.Range.String()
	if k.Unit.Name != "" {
		s += " " + k.Unit.Name
	}
	return s
}

// compare holds a value in SI against the limit, each bound a step.
func (k Criterion) compare(si float64, subject, clause string) (steps []Step, holds bool) {
	v := si / k.Unit.Factor
	for i, bound := range [...]Limit{k.Range.Lower, k.Range.Upper} {
		if bound.Op == Open {
			continue
		}
		text := subject
		if bound.Op == Dash {
			text += [...]string{", lower end", ", upper end"}[i]
		}
		s := newStep(text, clause, v, bound, i == 0, k.Unit)
		steps = append(steps, s)
		if !s.Holds {
			return steps, false
		}
	}
	return steps, true
}
