// Package profile is the vocabulary of a shear-wave velocity profile: its
// layers, the survey behind it, where it was measured, and the words of the
// file it was read from. Everything inside is SI (m, m/s, kg/m³, Pa·10³ as
// kPa); units are converted once, by the readers below this package.
package profile

import (
	"math"
	"slices"
	"strings"
)

// Profile is one velocity profile: a column of layers from the ground down.
type Profile struct {
	Name     string
	Layers   []Layer // top down, without gaps or overlaps; see Validate
	Survey   Survey
	Position Position
	Reading  *Reading // the profile in its file's own words; nil if it was not read from a file
	Notes    []Note   // what is doubtful about it without being wrong

	// NoVelocity says that the profile states no velocity at all: Vs is 0 in
	// every layer, and the layers are there for their N and su. Nothing can be
	// averaged over travel time in it.
	NoVelocity bool
}

// Layer is one layer of a profile. Its shear-wave velocity is constant, or
// grows linearly from Vs at its top to VsBottom at its bottom.
type Layer struct {
	Top      float64 // m below ground level, ≥ 0
	Bottom   float64 // m below ground level, > Top; +Inf for a half-space
	Vs       float64 // m/s, > 0; at the top of a gradient layer; 0 where Profile.NoVelocity
	VsBottom float64 // m/s, > 0 at the bottom of a gradient layer; 0 where Vs is constant

	// The optional quantities below mean something only where Has says so.

	Vp           float64 // m/s, > 0
	Density      float64 // kg/m³, > 0
	SigmaLnVs    float64 // standard deviation of ln Vs, > 0
	N            float64 // blows per 0.3 m (per foot) of standard penetration, ≥ 0
	Su           float64 // kPa, > 0; undrained shear strength
	PI           float64 // %, ≥ 0; plasticity index
	WaterContent float64 // %, ≥ 0

	Soil    string // description, as the file gives it
	Given   Given  // which optional quantities the file states
	Basis   Basis
	Refusal bool // penetration was refused in this layer

	EnergyRatio float32 // %, of the energy of the free fall in the tests behind N; 0 if not stated

	Line, Column int32 // place of the velocity in its file, from 1; 0 if not read from one
}

// Given is a set of optional quantities of a layer.
type Given uint16

// The optional quantities of a layer.
const (
	GivenVp Given = 1 << iota
	GivenDensity
	GivenSigma
	GivenN
	GivenSu
	GivenPI
	GivenWaterContent
)

// Has reports whether the layer states quantity g.
func (l Layer) Has(g Given) bool { return l.Given&g == g }

// Thickness returns the thickness of the layer in m, +Inf for a half-space.
func (l Layer) Thickness() float64 { return l.Bottom - l.Top }

// HalfSpace reports whether the layer has no bottom.
func (l Layer) HalfSpace() bool { return math.IsInf(l.Bottom, 1) }

// Gradient reports whether the velocity changes inside the layer.
func (l Layer) Gradient() bool { return l.VsBottom != 0 && l.VsBottom != l.Vs }

// VsAt returns the shear-wave velocity in m/s at depth z (m), which must lie
// in the layer.
func (l Layer) VsAt(z float64) float64 {
	if !l.Gradient() {
		return l.Vs
	}
	return l.Vs + (l.VsBottom-l.Vs)*(z-l.Top)/(l.Bottom-l.Top)
}

// Basis says how a velocity came to be known.
type Basis uint8

// The bases of a velocity. Never mixed silently.
const (
	BasisNotStated Basis = iota
	Measured             // an interval velocity timed in the ground (downhole, crosshole, suspension logging, seismic cone)
	Inverted             // a layer of a model fitted to a survey (surface waves, refraction)
	Correlated           // estimated from N, cone resistance or undrained strength
)

var basisWords = [...]string{"not stated", "measured", "inverted", "correlated"}

// String returns the word used for the basis in files and reports.
func (b Basis) String() string { return basisWords[b] }

// ParseBasis returns the basis that a file's word names, and false if it
// names none.
func ParseBasis(word string) (Basis, bool) {
	for b, w := range basisWords {
		if word == w {
			return Basis(b), true
		}
	}
	return BasisNotStated, false
}

// Survey is what is known of how a profile was measured.
type Survey struct {
	Method   string // as stated: "MASW", "downhole", "SH refraction" …
	Date     string // as stated
	Operator string
	Location string
	Basis    Basis // of every layer that does not state its own

	DepthReached float64  // m below ground level, > 0; 0 if not stated
	GroundLevel  Optional // m above the stated datum
	WaterTable   Optional // m below ground level
}

// Override puts what another survey states over what s states, and leaves the
// rest.
func (s *Survey) Override(by Survey) {
	for _, t := range []struct {
		to   *string
		from string
	}{{&s.Method, by.Method}, {&s.Date, by.Date}, {&s.Operator, by.Operator}, {&s.Location, by.Location}} {
		if t.from != "" {
			*t.to = t.from
		}
	}
	if by.Basis != BasisNotStated {
		s.Basis = by.Basis
	}
	if by.DepthReached > 0 {
		s.DepthReached = by.DepthReached
	}
	if by.GroundLevel.Known {
		s.GroundLevel = by.GroundLevel
	}
	if by.WaterTable.Known {
		s.WaterTable = by.WaterTable
	}
}

// Optional is a number that may not be known.
type Optional struct {
	Value float64
	Known bool
}

// Known returns v as a known number.
func Known(v float64) Optional { return Optional{v, true} }

// Position is where a profile was measured: in degrees, in a projected grid,
// or both. One is never computed from the other.
type Position struct {
	Latitude, Longitude Optional // degrees, WGS 84
	Easting, Northing   Optional // in the grid, in its own unit
	EPSG                int      // of the grid, > 0; 0 where it is not stated
}

// BasisOf returns the basis of layer i: its own, or else the survey's.
func (p *Profile) BasisOf(i int) Basis {
	if b := p.Layers[i].Basis; b != BasisNotStated {
		return b
	}
	return p.Survey.Basis
}

// DepthReached returns the depth in m below ground level down to which the
// survey measured: what the survey states, or else the bottom of the lowest
// layer, or the top of the half-space.
func (p *Profile) DepthReached() float64 {
	if p.Survey.DepthReached > 0 {
		return p.Survey.DepthReached
	}
	return p.DepthModelled()
}

// DepthModelled returns the depth in m of the lowest boundary of the
// profile: the bottom of the lowest layer, or the top of the half-space.
func (p *Profile) DepthModelled() float64 {
	if len(p.Layers) == 0 {
		return 0
	}
	last := &p.Layers[len(p.Layers)-1]
	if last.HalfSpace() {
		return last.Top
	}
	return last.Bottom
}

// Reading is a profile in the words of the file it was read from, kept for
// the report's appendix.
type Reading struct {
	File     string // as the user named it
	SHA256   string // of the whole file, lower-case hexadecimal
	Size     int64  // bytes
	Encoding string // "UTF-8", "UTF-16LE", "UTF-16BE" or "Windows-1252"; "XLSX" of a spreadsheet
	Sheet    string // of a spreadsheet; "" in other files
	Metadata []Metadatum
	Columns  []Column
	Rows     []Row
}

// Metadatum is one statement about the whole profile, as its file gives it.
type Metadatum struct {
	Key, Value string
	Line       int
}

// Column is one column of a table of layers.
type Column struct {
	Heading  string   // as the file gives it, without its unit
	Unit     string   // as the file gives it, or the one given for it where the file states none; "" if the column has none
	Quantity Quantity // what the reader took it for; Unknown if it was carried along unread
}

// Row is one row of a table of layers, as its file gives it.
type Row struct {
	Line  int
	Cells string // the cells in the order of the columns, joined by CellSeparator
}

// CellSeparator joins the cells of a Row: U+001F, the unit separator of
// ISO/IEC 646, which no reader lets into a cell.
const CellSeparator = "\x1f"

// Split returns the cells of the row, one for each column of its Reading.
func (r Row) Split() []string { return strings.Split(r.Cells, CellSeparator) }

// Index returns the index of the column that holds quantity q, -1 if there
// is none.
func (r *Reading) Index(q Quantity) int {
	return slices.IndexFunc(r.Columns, func(c Column) bool { return c.Quantity == q })
}

// Unit returns the unit in which quantity q was read, "" if there is no such
// column or it has no unit.
func (r *Reading) Unit(q Quantity) string {
	if i := r.Index(q); i >= 0 {
		return r.Columns[i].Unit
	}
	return ""
}

// Note is a doubt that travels with a result and is printed beside it.
type Note struct {
	ID    string // short, stable, lower case with hyphens
	Text  string // a sentence without its full stop
	Place Place  // of what is doubted; zero if it is not one place
}
