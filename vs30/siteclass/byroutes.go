package siteclass

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"shearbook/vs30"
)

// answer is what a route gives.
type answer struct {
	route    *Route
	rank     int // the route's, or behind
	decision Decision
	err      error
}

// behind is the rank of a route by velocities that are estimated from the very
// tests that the code's other routes take as they are: it comes after them.
const behind = math.MaxInt

// nextRank is that of the routes of N or su that come next after a route. Where
// velocities were added below the profile N and su end above the code's depth, so
// that neither way is whole: they stand side by side.
func (c *Code) nextRank(route *Route) int {
	next := behind
	for _, r := range c.routes() {
		if r.Rank > route.Rank && !r.has(AverageVs) {
			next = min(next, r.Rank)
		}
	}
	return next
}

// standsBehind reports whether a route goes behind the others where the
// velocities are estimated: it rests on the velocity alone, and the code has
// routes of N or su that otherwise come after it. Routes that stand side by
// side with the velocity are left there, for of them the softer class governs.
func (c *Code) standsBehind(route *Route) bool {
	return len(route.Measures) == 1 && route.has(AverageVs) &&
		slices.ContainsFunc(c.routes(), func(r Route) bool { return r.Rank > route.Rank && !r.has(AverageVs) })
}

// byRoutes goes every route of the code that the data allow, lets the code's
// priority, or the site's choice, decide, and shows the others.
func (c *Code) byRoutes(s Site) (Decision, error) {
	routes := c.routes()
	answers := make([]answer, len(routes))
	estimated := s.estimated(c)
	for i := range routes {
		d, err := c.by(&routes[i], s)
		answers[i] = answer{&routes[i], routes[i].Rank, d, err}
		switch {
		case !estimated || !c.standsBehind(&routes[i]):
		case s.Extended:
			answers[i].rank = c.nextRank(&routes[i])
		default:
			answers[i].rank = behind
		}
	}
	chosen, err := c.choose(answers, s)
	if err != nil {
		return Decision{}, err
	}
	d := answers[chosen].decision
	c.sayBehind(&d, answers, chosen, s)
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
		case a.err != nil && a.route.has(AverageVs) && a.rank != behind:
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
	if a.rank != b.rank {
		return a.rank < b.rank
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

// sayBehind notes that the velocity would have decided, had it been measured.
func (c *Code) sayBehind(d *Decision, answers []answer, chosen int, s Site) {
	before := func(a answer) bool {
		return a.rank == behind && a.err == nil && a.route.Rank < answers[chosen].route.Rank
	}
	if s.Route == "" && slices.ContainsFunc(answers, before) {
		d.Notes = append(d.Notes, note("estimated-behind", "the velocities are correlated from other tests, not measured; the code's own way from penetration or strength, "+
			d.Route+", therefore goes before them and gives the class"))
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
	case a.rank > chosen.rank:
		return chosen.decision.Route + " goes first"
	case a.rank == chosen.rank:
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
