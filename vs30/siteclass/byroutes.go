package siteclass

import (
	"errors"
	"fmt"
	"strings"

	"shearbook/vs30"
)

// answer is what a route gives.
type answer struct {
	route    *Route
	decision Decision
	err      error
}

// byRoutes goes every route of the code that the data allow, lets the code's
// priority, or the site's choice, decide, and shows the others.
func (c *Code) byRoutes(s Site) (Decision, error) {
	routes := c.routes()
	answers := make([]answer, len(routes))
	for i := range routes {
		d, err := c.by(&routes[i], s)
		answers[i] = answer{&routes[i], d, err}
	}
	chosen, err := c.choose(answers, s)
	if err != nil {
		return Decision{}, err
	}
	d := answers[chosen].decision
	d.showOthers(answers, chosen)
	c.sayNeeds(&d)
	return d, nil
}

// by goes one route.
func (c *Code) by(route *Route, s Site) (Decision, error) {
	switch {
	case route.has(AverageVs) && !s.timed():
		return Decision{}, c.noVelocity()
	case route.decide != nil:
		return route.decide(c, s)
	case route.has(AverageVs):
		return c.byVelocity(s)
	case !s.tested():
		return Decision{}, errors.New("the profile states neither N nor su")
	}
	return decideByColumns(c, s, route)
}

// choose returns the index of the answer that decides. Where no route can be
// gone the error says why of each; where there are velocities but none of
// their routes can be, why not: N and su do not take their place unsaid.
func (c *Code) choose(answers []answer, s Site) (int, error) {
	if s.Route != "" {
		return c.asked(answers, s.Route)
	}
	best, timed := -1, false
	var slip error // of the last route by velocity
	for i := range answers {
		a := &answers[i]
		switch {
		case a.err == nil && (best < 0 || c.before(a, &answers[best])):
			best = i
		case a.err != nil && a.route.has(AverageVs):
			slip = a.err
		}
		timed = timed || a.err == nil && a.route.has(AverageVs)
	}
	switch {
	case slip != nil && !timed && s.timed():
		return 0, c.named(slip)
	case best < 0:
		return 0, c.noRoute(answers)
	}
	return best, nil
}

// before reports whether an answer goes before another: by its rank, or else
// by the softer class.
func (c *Code) before(a, b *answer) bool {
	if a.route.Rank != b.route.Rank {
		return a.route.Rank < b.route.Rank
	}
	return c.rank(a.decision.Row) > c.rank(b.decision.Row)
}

// asked returns the answer of the route of a name.
func (c *Code) asked(answers []answer, name string) (int, error) {
	var names []string
	for i, a := range answers {
		if a.route.Name == name {
			return i, c.named(a.err)
		}
		names = append(names, a.route.Name)
	}
	return 0, fmt.Errorf("%s: no route is called %q: there are %s", c.ID, name, strings.Join(names, ", "))
}

// named puts the code before an error that does not begin with it.
func (c *Code) named(err error) error {
	if err == nil || strings.HasPrefix(err.Error(), c.ID) {
		return err
	}
	return fmt.Errorf("%s: %w", c.ID, err)
}

// noRoute says why none of the routes can be gone.
func (c *Code) noRoute(answers []answer) error {
	var reasons []string
	for _, a := range answers {
		var short *vs30.ShortError
		if errors.As(a.err, &short) {
			return c.named(a.err)
		}
		reasons = append(reasons, a.route.Name+": "+strings.TrimPrefix(a.err.Error(), c.ID+": "))
	}
	return fmt.Errorf("%s: no way to a class: %s", c.ID, strings.Join(reasons, "; "))
}

// showOthers lists the routes that did not decide, and notes those that give
// another class.
func (d *Decision) showOthers(answers []answer, chosen int) {
	for i := range answers {
		a := &answers[i]
		if i == chosen || a.err != nil || a.same(&answers[chosen]) {
			continue
		}
		o := &a.decision
		d.Others = append(d.Others, Alternative{o.Route, o.Class, o.Averages, o.Standing})
		if o.Class != d.Class {
			d.Notes = append(d.Notes, note("other-route", "by "+o.Route+", "+averagesText(o.Averages)+", the class would be "+o.Class+"; "+why(a, &answers[chosen])))
		}
	}
}

// same reports whether two answers are averages of the same blow counts over
// the same ground: N and Nch where all of it is cohesionless.
func (a *answer) same(b *answer) bool {
	x, y := a.decision.Averages, b.decision.Averages
	if len(x) != 1 || len(y) != 1 || x[0].Of == AverageVs || y[0].Of == AverageVs {
		return false
	}
	return x[0].Unit == y[0].Unit && x[0].Value == y[0].Value && x[0].Thickness == y[0].Thickness
}

// why says why an answer did not decide.
func why(a, chosen *answer) string {
	switch {
	case a.route.Rank > chosen.route.Rank:
		return chosen.decision.Route + " goes first"
	case a.route.Rank == chosen.route.Rank:
		return "of routes side by side the softer class is taken"
	}
	return "the route was chosen"
}

// averagesText lists averages: "N̄ of 23.81 blows/ft".
func averagesText(averages []Average) string {
	var list []string
	for _, a := range averages {
		list = append(list, a.Symbol+" of "+short(a.Value)+" "+a.Unit)
	}
	return strings.Join(list, ", ")
}

// sayNeeds notes that the code asks for more routes than were gone.
func (c *Code) sayNeeds(d *Decision) {
	if gone := 1 + len(d.Others); gone < c.Needs {
		d.Notes = append(d.Notes, note("needs-more", fmt.Sprintf("the code asks for at least %d of its parameters; %d is known", c.Needs, gone)))
	}
}
