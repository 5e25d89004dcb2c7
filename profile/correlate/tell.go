package correlate

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"shearbook/profile"
)

// teller gathers what has to be told of the estimates of one profile.
type teller struct {
	relations []*Relation
	told      []told   // of each relation
	capped    []span   // where a blow count was counted as MaxBlows
	bounds    []span   // where penetration was refused
	between   float64  // the largest difference of two relations at one place, as a ratio
	here      []string // why relations refuse at the present place
	best      []Estimate
}

// told is what has to be told of one relation.
type told struct {
	used    bool
	planned float64 // the sigma that stands for one that was not published; 0 if its own is used
	sigma   float64
	reasons []reason
}

// reason is why a relation refuses, and where.
type reason struct {
	text  string
	spans []span
}

func newTeller(relations []*Relation) *teller {
	return &teller{relations: relations, told: make([]told, len(relations))}
}

// next begins a new place.
func (t *teller) next() { t.here, t.best = nil, nil }

// last says why the relations refused at the present place.
func (t *teller) last() string { return strings.Join(t.here, "; ") }

func (t *teller) of(r *Relation) *told { return &t.told[slices.Index(t.relations, r)] }

// used remembers an estimate.
func (t *teller) used(e Estimate, at span) {
	of := t.of(e.Relation)
	of.used, of.sigma = true, e.SigmaLn
	if e.Planned {
		of.planned = e.SigmaLn
	}
	if len(e.Notes) > 0 && !slices.Contains(t.capped, at) {
		t.capped = append(t.capped, at)
	}
	t.best = append(t.best, e)
	for _, o := range t.best {
		t.between = max(t.between, e.Vs/o.Vs, o.Vs/e.Vs)
	}
}

// refused remembers a refusal.
func (t *teller) refused(r *Relation, err error, at span) {
	text := err.Error()
	var refusal *Refusal
	if errors.As(err, &refusal) {
		text = refusal.Text
	}
	t.here = append(t.here, r.ID+" "+text)
	of := t.of(r)
	for i := range of.reasons {
		if of.reasons[i].text == text {
			of.reasons[i].spans = append(of.reasons[i].spans, at)
			return
		}
	}
	of.reasons = append(of.reasons, reason{text, []span{at}})
}

// places lists where something is so: "2–4 m, 6–8 m and 3 more layers". Stretches
// that touch are one.
func places(spans []span) string {
	var joined []span
	for _, s := range spans {
		if n := len(joined); n > 0 && s.top-joined[n-1].bottom <= profile.Joint {
			joined[n-1].bottom = max(joined[n-1].bottom, s.bottom)
			continue
		}
		joined = append(joined, s)
	}
	const most = 5
	var names []string
	for _, s := range joined[:min(most, len(joined))] {
		names = append(names, s.String())
	}
	text := strings.Join(names, ", ")
	if more := len(joined) - most; more > 0 {
		text += " and at " + profile.Plural(more, "more place")
	}
	return text
}

// byRelations is the note that names the relations.
func (t *teller) byRelations() profile.Note {
	var names []string
	for i, r := range t.relations {
		if t.told[i].used {
			names = append(names, fmt.Sprintf("%s (%s; for %s; %s)", r.Name, r.Equation, r.Scope(), r.Standing))
		}
	}
	text := "the velocities are estimated, not measured, by " + strings.Join(names, " and ")
	if len(names) > 1 {
		of := "these"
		if slices.ContainsFunc(t.told, func(of told) bool { return of.reasons != nil }) {
			of = "those of them that hold in its layer"
		}
		text += "; each is the geometric mean of " + of
		if t.between > 1 {
			text += fmt.Sprintf(", which differ by a factor of up to %.2f at one depth", t.between)
		} else {
			text += ", of which no two hold at one depth"
		}
	}
	return profile.Note{ID: "correlated-by", Text: text}
}

// sigmas is the note on where the sigma comes from.
func (t *teller) sigmas(stated bool) profile.Note {
	planned, own := 0.0, []string{}
	for i, of := range t.told {
		switch {
		case !of.used:
		case of.planned > 0:
			planned = of.planned
		default:
			own = append(own, fmt.Sprintf("%.2g of %s", of.sigma, t.relations[i].Name))
		}
	}
	text := "sigma of ln Vs is that published: " + strings.Join(own, ", ")
	if planned > 0 {
		text = fmt.Sprintf("sigma of ln Vs of one correlation is taken as %.3g, the middle of the range of %.2f to %.2f that is planned with "+
			"(common practice), for none was seen in print", planned, PlanningLow, PlanningHigh)
		if stated {
			text = fmt.Sprintf("sigma of ln Vs of one correlation is taken as %.3g, as stated", planned)
		}
		if len(own) > 0 {
			text += "; published: " + strings.Join(own, ", ")
		}
	}
	used := slices.DeleteFunc(slices.Clone(t.told), func(of told) bool { return !of.used })
	if len(used) > 1 {
		text += "; the scatter between the correlations is added"
	}
	return profile.Note{ID: "correlation-sigma", Text: text + "; the error of a correlation is common to all layers and does not average out"}
}

// refusals are the notes on relations that do not hold somewhere.
func (t *teller) refusals() []profile.Note {
	var notes []profile.Note
	for i, of := range t.told {
		for _, why := range of.reasons {
			notes = append(notes, profile.Note{ID: "correlation-refused",
				Text: fmt.Sprintf("%s is left out at %s: it %s", t.relations[i].Name, places(why.spans), why.text)})
		}
	}
	return notes
}

// uses reports whether a relation that was used is of a family.
func (t *teller) uses(f Family) bool {
	return slices.ContainsFunc(t.relations, func(r *Relation) bool { return r.Family == f && t.of(r).used })
}

// needs reports whether a relation that was used needs one of some quantities.
func (t *teller) needs(any ...Quantity) bool {
	return slices.ContainsFunc(t.relations, func(r *Relation) bool {
		return t.of(r).used && slices.ContainsFunc(any, func(q Quantity) bool { return slices.Contains(r.Needs, q) })
	})
}

// bound returns the notes on counts that are bounds.
func (t *teller) bound() []profile.Note {
	var notes []profile.Note
	if len(t.capped) > 0 {
		notes = append(notes, profile.Note{ID: "blows-capped",
			Text: fmt.Sprintf("blow counts above %d are counted as %[1]d at %s; the ground there may be faster", MaxBlows, places(t.capped))})
	}
	if len(t.bounds) > 0 {
		notes = append(notes, profile.Note{ID: "penetration-refused",
			Text: fmt.Sprintf("penetration was refused at %s: N is a bound there, and so is the velocity", places(t.bounds))})
	}
	return notes
}
