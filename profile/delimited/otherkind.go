package delimited

import (
	"slices"
	"strings"

	"shearbook/profile"
)

// sign is a column by which a table of another kind is known: names in the form
// of plain, and units that let a name of one letter count.
type sign struct {
	names []string
	units []string
}

var (
	frequency     = sign{[]string{"frequency", "freq", "f"}, []string{"hz", "khz"}}
	wavelength    = sign{[]string{"wavelength", "wave length", "lambda", "λ"}, nil}
	period        = sign{[]string{"period", "t"}, []string{"s", "sec"}}
	phaseVelocity = sign{[]string{
		"phase velocity", "velocity", "vph", "v ph", "vr", "v r", "c", "rayleigh wave velocity", "rayleigh velocity", "rayleigh phase velocity",
		"love wave velocity", "love phase velocity", "dispersion velocity", "wave velocity", "surface wave velocity", "slowness", "phase slowness",
	}, nil}
	offset = sign{[]string{
		"offset", "geophone", "geophone position", "receiver", "receiver position", "receiver x", "source receiver distance", "distance", "x", "station", "shot", "shot position", "source", "source position", "shot x", "source x",
	}, []string{"m", "ft"}}
	arrival = sign{[]string{
		"time", "arrival time", "first arrival", "first arrival time", "first break", "first break time", "travel time", "traveltime", "arrival", "pick", "t", "s wave arrival", "s wave travel time", "s wave time", "p wave arrival", "p wave time",
	}, []string{"s", "ms", "sec", "msec", "us"}}
)

// is reports whether a heading is the sign. A name of one letter counts only
// with one of its units.
func (s sign) is(heading string) bool {
	if len(heading) > longestHeading {
		return false
	}
	base, groups := brackets(heading)
	name := plain(base)
	unit := ""
	if len(groups) > 0 {
		unit = strings.ToLower(groups[0])
	} else if i := strings.LastIndexByte(name, ' '); i > 0 && slices.Contains(s.units, name[i+1:]) {
		name, unit = name[:i], name[i+1:]
	} else if bare, _, _ := cutUnit(base, profile.Velocity); bare != "" {
		name = plain(bare)
	} else if bare, _, _ := cutUnit(base, profile.Length); bare != "" {
		name = plain(bare)
	}
	if !slices.Contains(s.names, name) {
		return false
	}
	return len([]rune(name)) > 1 || s.units == nil || slices.Contains(s.units, unit)
}

func hasSign(headings []string, s sign) bool { return slices.ContainsFunc(headings, s.is) }

// Measurements recognises a header of measurements that velocities have yet to
// be found from: a dispersion curve of surface waves, or first-arrival times. It
// says what they are, and what is needed instead.
func Measurements(headings []string) (text, hint string, ok bool) {
	depth := slices.ContainsFunc(headings, func(h string) bool {
		switch parseHeading(h).quantity {
		case profile.Top, profile.Bottom, profile.Thickness:
			return true
		}
		return false
	})
	switch {
	case (hasSign(headings, frequency) || hasSign(headings, wavelength) || hasSign(headings, period)) && hasSign(headings, phaseVelocity):
		return "this is a dispersion curve, not a profile: " + listed(headings),
			"give the layers and velocities that its inversion found, as top_m,bottom_m,vs_mps", true
	case hasSign(headings, arrival) && depth:
		return "these are first-arrival times in a hole, not a profile: " + listed(headings),
			"give the interval velocities that were found from them, as top_m,bottom_m,vs_mps", true
	case hasSign(headings, arrival) && hasSign(headings, offset):
		return "these are first-arrival times, not a profile: " + listed(headings),
			"give the layers and velocities of their interpretation, as top_m,bottom_m,vs_mps", true
	}
	return "", "", false
}
