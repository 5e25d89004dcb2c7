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

// Extensions returns the IDs of the ways in which a profile that ends above
// the averaging depth may be carried down to it.
func Extensions() []string {
	var ids []string
	for _, r := range extend.All() {
		ids = append(ids, r.ID)
	}
	return ids
}

// Extended returns the layers of a profile carried down to thickness m below
// depth from by the relation of an ID, with the notes that must stand beside
// their average. The error is an *extend.Refusal where the relation does not
// hold for the profile.
func Extended(p *profile.Profile, id string, from, thickness float64) ([]profile.Layer, []profile.Note, error) {
	relation, err := extend.Find(id)
	if err != nil {
		return nil, nil, err
	}
	e, err := relation.Estimate(p.Layers, from, thickness)
	if err != nil {
		return nil, nil, err
	}
	return e.Continue(p.Layers), append([]profile.Note{e.Note}, e.Doubts...), nil
}

// Classify decides the class of a profile under a code. A profile that ends
// above the averaging depth is extended as facts say, unless it has no
// velocities, and the decision notes it; otherwise the error is a
// *vs30.ShortError, or an *extend.Refusal. The doubts about the profile itself
// join the decision's notes.
func Classify(p *profile.Profile, code *siteclass.Code, facts Facts) (siteclass.Decision, error) {
	site := siteclass.Site{Profile: p, Layers: p.Layers, Datum: facts.Datum,
		FoundationDepth: facts.Foundation, Ground: facts.Ground}
	d, err := code.Decide(site)
	var short *vs30.ShortError
	if errors.As(err, &short) && facts.Extend != "" && !p.NoVelocity { // N and su are not carried down
		from, _ := code.DatumOf(site)
		if site.Layers, site.Notes, err = Extended(p, facts.Extend, from, short.Needed-from); err != nil {
			return d, err
		}
		site.Extended = true
		d, err = code.Decide(site)
	}
	if err != nil {
		return d, err
	}
	d.Notes = append(d.Notes[:len(d.Notes):len(d.Notes)], p.Notes...)
	return d, nil
}

// constantVelocity is the ID of the relation that continues the last velocity.
const constantVelocity = "constant-velocity"

// Average30 returns the average in m/s over 30 m below a datum, of the
// profile extended as facts say where it is too short; nil if there is none.
func Average30(p *profile.Profile, datum float64, facts Facts) *float64 {
	if p.NoVelocity {
		return nil
	}
	layers := p.Layers
	last := &layers[len(layers)-1]
	switch short := last.Bottom < datum+30-vs30.Touching; {
	case short && datum == 0 && facts.Extend == constantVelocity: // the same sum, without the words
		t, err := vs30.TravelTime(layers, 0, last.Bottom)
		if err != nil {
			return nil
		}
		v := 30 / (t + (30-last.Bottom)/last.VsAt(last.Bottom))
		return &v
	case short && facts.Extend != "":
		var err error
		if layers, _, err = Extended(p, facts.Extend, datum, 30); err != nil {
			return nil
		}
	}
	v, err := vs30.Average(layers, datum, 30)
	if err != nil {
		return nil
	}
	return &v
}
