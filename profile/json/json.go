// Package json reads and writes profiles in shearbook's own JSON, the form
// that keeps everything that a profile.Profile says:
//
//	{
//	  "shearbook profiles": 1,
//	  "profiles": [
//	    {
//	      "name": "L1",
//	      "survey": {"method": "MASW", "basis": "inverted", "depth_reached_m": 34},
//	      "position": {"latitude": 51.02, "longitude": 4.1},
//	      "layers": [
//	        {"top_m": 0, "bottom_m": 4.5, "vs_mps": 180, "soil": "soft clay"},
//	        {"top_m": 4.5, "bottom_m": null, "vs_mps": 420}
//	      ]
//	    }
//	  ]
//	}
//
// The number after "shearbook profiles" is the version of the form; this is
// version 1. The order of keys does not matter. A key that is not listed
// here, or stands twice in one object, is a fault at its place: a slip in a
// key would otherwise pass for a value that is not stated. A value that is
// not known is left out; null stands for nothing but a bottom that is not
// there.
//
// # A profile
//
// A profile has a name that no other in the file has, and layers. All else
// may be left out:
//
//   - survey: the texts method, date, operator and location as stated; basis,
//     one of "measured", "inverted" and "correlated"; and depth_reached_m,
//     ground_level_m and water_table_m.
//   - position: latitude and longitude, degrees in WGS 84, south and west
//     negative; or easting and northing, in a grid and in its own unit, and
//     epsg, the number of the grid in the EPSG registry; or all of them.
//   - source: file and sha256 of the file that the profile was read from
//     before it was written here.
//   - metadata: a list of {"key": …, "value": …}, what that file stated of the
//     profile in its own words.
//   - notes: a list of {"id": …, "text": …}, what was doubtful when it was
//     read.
//   - no_velocity: true for a profile of blow counts or strengths alone, whose
//     layers have no vs_mps.
//
// # A layer
//
// Layers run from ground level down without gaps. Every layer has top_m,
// bottom_m and vs_mps; the bottom of a half-space, which only the last layer
// can be, is null. The keys that may be left out are
//
//	vs_bottom_mps      m/s     Vs at the bottom of a layer in which it grows linearly from vs_mps
//	vp_mps             m/s     P-wave velocity
//	density_kg_m3      kg/m³
//	sigma_ln_vs        –       standard deviation of ln Vs
//	n, n60, n1_60      –       blows per 0.3 m; which kind of count, as far as it is known. One of them in a profile
//	su_kpa             kPa     undrained shear strength
//	pi_pct             %       plasticity index
//	water_content_pct  %
//	refusal            true where penetration was refused
//	basis              of this layer, where it differs from the survey's
//	soil               description
//
// # Text
//
// The file is UTF-8 (RFC 8259). Texts are of at most 1 MiB and hold no
// control characters.
package json

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"unicode/utf8"

	"shearbook/profile"
)

// Version is the version of the form that Write writes and Read reads.
const Version = 1

// Limits of what Read takes in. Beyond them it says so and stops.
const (
	MaxBytes    = 64 << 20  // of a file
	MaxLayers   = 2_000_000 // in a file
	MaxText     = 1 << 20   // bytes of a text or number
	MaxProfiles = 100_000
	MaxDepth    = 64 // of lists and objects inside one another
)

// Read returns the profiles of a file in its order. The name of the file is
// used in messages. An error is a profile.Faults: everything that is wrong,
// each at its place. Each profile has passed profile.Validate; it carries the
// notes that the file has of it, and after them those of profile.Doubts.
func Read(file string, data []byte) ([]profile.Profile, error) {
	r := reader{Collector: profile.Collector{File: file}}
	r.read(data)
	if r.foreign != nil {
		return nil, profile.Faults{*r.foreign}
	}
	if err := r.Err(); err != nil {
		return nil, err
	}
	return r.profiles, nil
}

// reader is the state of reading one file.
type reader struct {
	profile.Collector
	scan scanner
	tok  token // the next one, not yet taken
	dead bool  // the text cannot be followed any more; tok is the end

	reading   profile.Reading // what the readings of all profiles share
	profiles  []profile.Profile
	apart     bool            // each profile has faults of its own
	found     []profile.Found // where apart
	names     map[string]spot
	layers    int            // in all profiles so far
	foreign   *profile.Fault // the one thing to say of a file that is not of this form
	strangers []string       // keys of the file that are not of this form
	layer     layer
}

func (r *reader) read(data []byte) {
	if !r.decode(data) {
		return
	}
	r.names = map[string]spot{}
	r.advance()
	r.document()
	if !r.dead && r.tok.kind != tokenEnd {
		r.stop(r.tok.spot, "write all profiles into one list", "the file goes on after its end")
	}
}

// decode checks the bytes and prepares the scanner.
func (r *reader) decode(data []byte) bool {
	sum := sha256.Sum256(data)
	r.reading = profile.Reading{File: r.File, SHA256: hex.EncodeToString(sum[:]), Size: int64(len(data)), Encoding: "UTF-8"}
	text := bytes.TrimPrefix(data, []byte("\ufeff"))
	switch {
	case len(data) > MaxBytes:
		r.stop(spot{}, "split it", "the file is larger than %d MiB", MaxBytes>>20)
		return false
	case len(bytes.TrimSpace(text)) == 0:
		r.stop(spot{}, hintForm, "the file is empty")
		return false
	}
	r.scan = scanner{text: text, spot: spot{1, 1}}
	if i := invalid(text); i >= 0 {
		r.stop(textSpot(text, i), "save the file as UTF-8", "the file is not UTF-8")
		return false
	}
	return true
}

// invalid returns the offset of the first byte that is not UTF-8, -1 if there
// is none.
func invalid(text []byte) int {
	if utf8.Valid(text) {
		return -1
	}
	for i := 0; ; {
		r, n := utf8.DecodeRune(text[i:])
		if r == utf8.RuneError && n <= 1 {
			return i
		}
		i += n
	}
}

// textSpot is the place of byte i of a text, which may be no JSON.
func textSpot(text []byte, i int) spot {
	s := scanner{text: text[:i], spot: spot{1, 1}}
	for ; s.off < i; s.off++ {
		s.blanks()
	}
	return s.spotOf(i)
}

// hintForm shows the form.
const hintForm = `the form is {"shearbook profiles": 1, "profiles": [{"name": "L1", "layers": [{"top_m": 0, "bottom_m": null, "vs_mps": 300}]}]}`

// fault adds a fault.
func (r *reader) fault(at spot, hint, format string, args ...any) {
	r.Fault(at.place(), hint, format, args...)
}

// stop adds a fault and ends the reading.
func (r *reader) stop(at spot, hint, format string, args ...any) {
	if !r.dead {
		r.Stop(at.place(), hint, format, args...)
	}
	r.dead, r.tok = true, token{kind: tokenEnd}
}
