package delimited

import (
	"math"
	"strconv"
	"strings"

	"shearbook/profile"
)

// positions are the quantities of a position, with their keys above the
// header and the one that each comes with, Unknown of one that may stand alone.
var positions = [...]struct {
	q    profile.Quantity
	key  key
	with profile.Quantity
}{
	{profile.Latitude, keyLatitude, profile.Longitude},
	{profile.Longitude, keyLongitude, profile.Latitude},
	{profile.Easting, keyEasting, profile.Northing},
	{profile.Northing, keyNorthing, profile.Easting},
	{profile.EPSG, keyEPSG, profile.Unknown},
}

// quantity is the quantity of a position that a key states.
func (k key) quantity() profile.Quantity {
	for _, each := range positions {
		if each.key == k {
			return each.q
		}
	}
	return profile.Unknown
}

// placed is what a column says of the position of a profile.
type placed struct {
	text string
	spot spot // zero if it says nothing
}

// placement is what columns say of each of the positions.
type placement [len(positions)]placed

// at is the cell that says quantity number i, zero if none does.
func (p *placement) at(i int) spot {
	if p == nil {
		return spot{}
	}
	return p[i].spot
}

// position reads the columns of the position in the present row.
func (r *reader) position(s *stack) {
	for i := range positions {
		q := positions[i].q
		if !r.has(q) {
			continue
		}
		text := r.scan.cell(r.columns.index[q])
		if s.placed == nil {
			s.placed = new(placement)
		}
		switch before := &s.placed[i]; {
		case len(text) == 0 || string(text) == before.text:
		case before.spot != spot{}:
			r.cellFault(q, "a profile has one position: give each profile a name of its own", "is not "+quote(before.text)+", which "+r.line(before.spot.line)+" says of the same profile")
			s.faulty = true
		default:
			*before = placed{string(text), r.scan.place(r.columns.index[q])}
			var scratch profile.Position // positionOf reads it again
			if problem, hint := placeBy(&scratch, q, before.text); problem != "" {
				r.cellFault(q, hint, problem)
				s.faulty = true
			}
		}
	}
}

// placeBy puts one quantity of a position into it. It returns what is wrong
// with the text, as the end of a sentence.
func placeBy(p *profile.Position, q profile.Quantity, text string) (problem, hint string) {
	switch q {
	case profile.Latitude:
		p.Latitude, problem = degrees(text, 90, "N", "S")
		return problem, hintDegrees
	case profile.Longitude:
		p.Longitude, problem = degrees(text, 180, "E", "W")
		return problem, hintDegrees
	case profile.Easting:
		p.Easting, problem = gridCoordinate(text)
	case profile.Northing:
		p.Northing, problem = gridCoordinate(text)
	case profile.EPSG:
		p.EPSG, problem = epsg(text)
		return problem, "write the number alone, as 32631"
	}
	return problem, "write a plain number such as 523145.5"
}

const hintDegrees = "write decimal degrees, south and west negative"

// degrees reads a latitude or longitude in decimal degrees.
func degrees(text string, limit float64, positive, negative string) (x profile.Optional, problem string) {
	number, rest := cutNumber(text)
	v, problem := metadataNumber(number)
	rest = strings.TrimSpace(strings.TrimPrefix(strings.TrimSpace(rest), "°"))
	switch {
	case rest == "" || strings.EqualFold(rest, positive):
	case strings.EqualFold(rest, negative):
		v = -v
	default:
		problem = "more"
	}
	if problem != "" || v < -limit || v > limit {
		return x, "is not an angle of at most " + strconv.Itoa(int(limit)) + " degrees"
	}
	return profile.Known(v), ""
}

// gridCoordinate reads an easting or a northing; a unit of length after it is
// let pass, for the grid has its own.
func gridCoordinate(text string) (x profile.Optional, problem string) {
	number, rest := text, ""
	v, problem := metadataNumber(number)
	if problem != "" {
		number, rest = cutNumber(text)
		v, problem = metadataNumber(number)
	}
	if _, ok := unitOf(rest, profile.Length); problem != "" || strings.TrimSpace(rest) != "" && !ok {
		return x, "is not a coordinate"
	}
	if math.Abs(v) > profile.MaxGrid {
		return x, "is too large for a coordinate"
	}
	return profile.Known(v), ""
}

// epsg reads the code of a grid: 32631, or EPSG:32631.
func epsg(text string) (code int, problem string) {
	if len(text) > 5 && strings.EqualFold(text[:5], "EPSG:") {
		text = text[5:]
	}
	v, problem := numerals{}.parse([]byte(strings.TrimSpace(text)))
	if problem != "" || v != math.Trunc(v) || v < 1 || v > profile.MaxEPSG {
		return 0, "is not an EPSG code"
	}
	return int(v), ""
}

// positionOf puts what the columns say into the position of a profile, and
// looks for what is said twice, and for half a position.
func (r *reader) positionOf(p *profile.Profile, s *stack) {
	if len(r.preamble.seen) == 0 && s.placed == nil {
		return
	}
	for i := range positions {
		each, at := &positions[i], s.placed.at(i)
		if at == (spot{}) {
			continue
		}
		if line := r.lineOf(p.Name, each.key); line > 0 {
			r.fault(at, "keep one of them", "%s is stated in %s already", each.q, r.line(line))
			continue
		}
		_, _ = placeBy(&p.Position, each.q, s.placed[i].text) // what is wrong with it was told
	}
	for i := range positions {
		each := &positions[i]
		if each.with == profile.Unknown || r.states(p, s, each.with) {
			continue
		}
		at := s.placed.at(i)
		if line := r.lineOf(p.Name, each.key); line > 0 {
			at = spot{line, 1}
		}
		if at != (spot{}) && !r.halfTold[at] {
			r.halfTold[at] = true
			r.fault(at, "state both, or neither", "%s is stated without %s", each.q, each.with)
		}
	}
}

// states reports whether a position states quantity q, well or not.
func (r *reader) states(p *profile.Profile, s *stack, q profile.Quantity) bool {
	for i := range positions {
		if positions[i].q == q {
			return s.placed.at(i) != spot{} || r.lineOf(p.Name, positions[i].key) > 0
		}
	}
	return false
}
