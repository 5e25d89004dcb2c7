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
		"s travel time", "s arrival", "s time", "shear wave travel time", "shear wave arrival", "p travel time", "one way time", "two way time", "owt", "twt",
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

// Signs of other kinds of tables, whose names are sure.
var (
	surfaceVelocity = sign{[]string{
		"phase velocity", "group velocity", "vr", "v r", "vph", "v ph", "rayleigh velocity", "rayleigh wave velocity", "rayleigh phase velocity",
		"rayleigh group velocity", "love velocity", "love wave velocity", "love phase velocity", "dispersion velocity", "surface wave velocity", "phase slowness",
	}, nil}
	ratio         = sign{[]string{"h v", "hv", "hvsr", "h v ratio", "hv ratio", "h v amplitude", "hvsr amplitude", "hvsr ratio", "h v spectral ratio"}, nil}
	tipResistance = sign{[]string{"qc", "qt", "q c", "q t", "cone resistance", "cone tip resistance", "tip resistance", "corrected cone resistance", "cone resistance qc", "tip resistance qc"}, nil}
	modulus       = sign{[]string{"shear modulus", "g0", "g 0", "gmax", "g max", "small strain shear modulus", "maximum shear modulus", "shear modulus g0", "shear modulus gmax"}, nil}
)

const hintInversion = "give the layers and velocities that its inversion found, as top_m,bottom_m,vs_mps"

// Measurements recognises a header of measurements that velocities have yet to
// be found from: a dispersion curve of surface waves, ratios of their spectra,
// first-arrival times, a cone sounding, shear moduli. It says what they are, and
// what is needed instead. With a column of Vs only frequencies and wavelengths
// tell: a profile has neither.
func Measurements(headings []string) (text, hint string, ok bool) {
	return measurements(headings, false)
}

// measurements is Measurements; vs says that a column is mapped to Vs.
func measurements(headings []string, vs bool) (text, hint string, ok bool) {
	depth, tested := false, false
	for _, h := range headings {
		switch parseHeading(h).quantity {
		case profile.Top, profile.Bottom, profile.Thickness:
			depth = true
		case profile.Vs:
			vs = true
		case profile.N, profile.Su:
			tested = true
		}
	}
	seen := listed(headings)
	spectral := hasSign(headings, frequency) || hasSign(headings, wavelength)
	switch {
	case vs && spectral:
		return "this is a dispersion curve, not a profile: " + seen + "; a profile has neither frequencies nor wavelengths",
			hintInversion + "; of a table of layers leave that column out", true
	case vs:
	case (spectral || hasSign(headings, period) || depth) && hasSign(headings, ratio):
		return "these are H/V ratios, not a profile: " + seen, "a ratio of spectra gives no velocities by itself: give a profile, as top_m,bottom_m,vs_mps", true
	case (spectral || hasSign(headings, period)) && (hasSign(headings, phaseVelocity) || hasSign(headings, surfaceVelocity)):
		return "this is a dispersion curve, not a profile: " + seen, hintInversion, true
	case hasSign(headings, surfaceVelocity):
		return "these are velocities of surface waves, not of shear waves: " + seen, hintInversion, true
	case hasSign(headings, arrival) && depth && !hasVelocity(headings):
		return "these are first-arrival times in a hole, not a profile: " + seen,
			"give the interval velocities that were found from them, as top_m,bottom_m,vs_mps", true
	case hasSign(headings, arrival) && hasSign(headings, offset):
		return "these are first-arrival times, not a profile: " + seen,
			"give the layers and velocities of their interpretation, as top_m,bottom_m,vs_mps", true
	case hasSign(headings, tipResistance) && !tested && !hasVelocity(headings):
		return "this is a cone sounding, not a profile of layers: " + seen,
			"give the sounding as AGS4 with --correlate, or a table of its velocities, as top_m,bottom_m,vs_mps", true
	case hasSign(headings, modulus) && !tested && !hasVelocity(headings):
		return "these are shear moduli, not velocities: " + seen,
			"give the velocities, the root of modulus over density, as top_m,bottom_m,vs_mps", true
	}
	return "", "", false
}

// hasVelocity reports whether a heading that is not read may be Vs.
func hasVelocity(headings []string) bool { return len(likely(profile.Vs, headings)) > 0 }
