package report

import (
	"errors"

	"shearbook/profile"
	"shearbook/vs30"
	"shearbook/vs30/extend"
	"shearbook/vs30/siteclass"
)

// Facts is what a classification needs to know beside the profile.
type Facts struct {
	Datum      profile.Optional // m below ground level from which to average
	Foundation profile.Optional // m below ground level of the underside of the foundation
	Ground     siteclass.Ground
	Extend     string // one of Extensions; "" refuses a profile that is too short
}

// Extensions are the ways in which a profile that ends above the averaging
// depth may be carried down to it.
var Extensions = []string{"constant-velocity"}

// Classify decides the class of a profile under a code. A profile that ends
// above the averaging depth is extended as facts say, and the decision notes
// it; otherwise the error is a *vs30.ShortError. The doubts about the
// profile itself join the decision's notes.
func Classify(p *profile.Profile, code *siteclass.Code, facts Facts) (siteclass.Decision, error) {
	site := siteclass.Site{Profile: p, Layers: p.Layers, Datum: facts.Datum,
		FoundationDepth: facts.Foundation, Ground: facts.Ground}
	d, err := code.Decide(site)
	var short *vs30.ShortError
	if errors.As(err, &short) && facts.Extend != "" {
		site.Layers, site.Extended = extend.ConstantVelocity(p.Layers, short.Needed), true
		site.Notes = []profile.Note{extend.Note(p.Layers, facts.Datum.Value, short.Needed-facts.Datum.Value)}
		d, err = code.Decide(site)
	}
	if err != nil {
		return d, err
	}
	d.Notes = append(d.Notes[:len(d.Notes):len(d.Notes)], p.Notes...)
	return d, nil
}

// Average30 returns the average in m/s over 30 m below a datum, of the
// profile extended as facts say where it is too short; nil if there is none.
func Average30(p *profile.Profile, datum float64, facts Facts) *float64 {
	layers := p.Layers
	if facts.Extend != "" {
		layers = extend.ConstantVelocity(layers, datum+30)
	}
	v, err := vs30.Average(layers, datum, 30)
	if err != nil {
		return nil
	}
	return &v
}
