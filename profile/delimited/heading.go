package delimited

import (
	"slices"
	"strings"

	"shearbook/profile"
)

// heading is what the heading of a column says.
type heading struct {
	name     string // without the unit
	text     string // all of it, single blanks between its words
	quantity profile.Quantity
	depth    bool // may be the top or the bottom: quantity is Top for now
	unitText string
	unit     profile.Unit // Name is "" if the heading states none
	problem  string       // what is wrong with its unit
	mapped   *mapItem     // what Options.Map says of it; nil if nothing
}

// longestHeading is how many bytes of a heading are looked at; a longer one
// names nothing.
const longestHeading = 120

// parseHeading takes a heading apart: a name that is read and its unit, which
// stands in brackets or after the name. What is not read is Unknown.
func parseHeading(text string) heading {
	text = strings.Join(strings.Fields(text), " ")
	h := readHeading(text)
	h.text = text
	return h
}

func readHeading(text string) heading {
	unread := heading{name: text}
	if len(text) > longestHeading {
		return unread
	}
	base, groups := brackets(text)
	if h := suffixed(base); h.quantity != profile.Unknown {
		h.bracketed(groups)
		return h
	}
	for _, name := range []string{text, base} {
		if h := named(name); h.quantity != profile.Unknown {
			h.name = name
			if len(groups) > 0 {
				h.name = base
			}
			h.bracketed(groups)
			return h
		}
	}
	return unread
}

// named is the heading of a name without a unit.
func named(name string) heading {
	p := plain(name)
	if slices.Contains(bareDepths, p) {
		return heading{name: name, quantity: profile.Top, depth: true}
	}
	return heading{name: name, quantity: quantityOf[p]}
}

// brackets takes the parts in brackets out of a heading.
func brackets(text string) (base string, groups []string) {
	for {
		from := strings.IndexAny(text, "([{")
		if from < 0 {
			break
		}
		length := strings.IndexAny(text[from:], ")]}")
		if length < 0 {
			break
		}
		groups = append(groups, strings.TrimSpace(text[from+1:from+length]))
		base += text[:from] + " "
		text = text[from+length+1:]
	}
	return strings.Join(strings.Fields(base+text), " "), groups
}

// bracketed takes the unit from the parts in brackets. A part that is another
// name of the same quantity says nothing; another part where a unit is due is
// a problem.
func (h *heading) bracketed(groups []string) {
	d := h.quantity.Dimension()
	if d == profile.Dimensionless {
		return
	}
	for _, g := range groups {
		u, ok := columnUnit(g, d)
		switch {
		case ok && h.unit.Name != "" && h.unit != u:
			h.problem = "two units, " + h.unit.Name + " and " + u.Name
		case ok:
			h.unit, h.unitText = u, g
		case g != "" && h.problem == "" && named(g).quantity != h.quantity && d != profile.Blows:
			h.problem = notAUnit(g, d)
		}
	}
}

// afterName are what may stand between a name and its unit.
const afterName = " _,;:/-."

// suffixed looks for a name followed by a unit, the longest name first:
// vs_mps, "Vs, m/s", "depth m".
func suffixed(text string) heading {
	for i := len(text) - 1; i > 0; i-- {
		if !strings.ContainsRune(afterName, rune(text[i])) {
			continue
		}
		h := named(text[:i])
		if h.quantity == profile.Unknown || h.quantity.Dimension() == profile.Dimensionless {
			continue
		}
		unit := strings.TrimLeft(text[i+1:], " _")
		if u, ok := unitOf(unit, h.quantity.Dimension()); ok {
			h.name = strings.TrimRight(text[:i], afterName)
			h.unit, h.unitText = u, unit
			return h
		}
	}
	return heading{}
}
