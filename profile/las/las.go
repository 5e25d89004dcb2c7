// Package las reads borehole logs in the Log ASCII Standard of the Canadian
// Well Logging Society, version 2.0 (1992, updated 2014 and 2017) and the
// older 1.2. A log becomes one profile.
//
// # Which curve is Vs
//
// The unit of a curve decides, not its name alone: a curve is taken for Vs if
// it is named as shear curves are (VS, DTS, DTSM …) or described as shear, and
// its unit is one of velocity (m/s, ft/s, km/s) or slowness (us/ft, us/m):
//
//	Vs [m/s] = 304,800 / DTS [us/ft] = 1,000,000 / DTS [us/m]
//
// A curve VS in feet is a vertical section, not a velocity. Two shear curves
// that agree within 0.5 % are one velocity in two forms; others are a fault,
// and Options.Map chooses. P-wave velocity and density come along where
// they are in the file.
//
// # From samples to layers
//
// A sample stands for the ground halfway to its neighbours; the lowest one
// reaches as far below itself as above. The first one is carried up to ground
// level. Samples without a value are left out, so that their neighbours meet
// halfway. Both are noted, and refused where too much ground is without
// velocity (MaxCarry, MaxGap). The log is never carried on below its end.
//
// Options.Step or Options.Bounds average these layers by travel time onto
// thicker ones, which keeps the time to every bound:
//
//	v = h / Σ(hᵢ/vᵢ)
//
// and a note says how much detail that hides.
//
// # Tolerance
//
// Files differ from the standard in many ways. What can be understood in one
// way only is read and noted: missing sections and items, blank lines and
// comments among the data, decimal commas, numbers run together, words and
// undeclared numbers for no value, values in wrapped lines, depths that go
// up. What could be understood in two ways is a fault.
package las

import (
	"shearbook/profile"
)

// Limits of what Read takes in. Beyond them it says so and stops.
const (
	MaxBytes    = 64 << 20 // of a file
	MaxRows     = 2_000_000
	MaxCurves   = 1000
	MaxLine     = 1 << 20 // bytes of a line
	MaxSections = 1000
	MaxMetadata = 100_000 // lines above the data
)

// MaxCarry is how far in m the first velocity is carried up to ground level
// where Options does not say, and MaxGap how much ground between two samples
// is filled from them. They are our choice: a tool in a casing cannot measure
// the uppermost metres, but more than that may be another soil.
const (
	MaxCarry = 5.0
	MaxGap   = 3.0
)

// Options says how to read a log. The zero value reads what the file states
// and makes a layer of every sample.
type Options struct {
	// Units are for what the file states no unit for: a unit of length for
	// the depths and one of velocity or slowness for Vs, as "m, us/ft". Where
	// the file states another unit of that kind, that is a fault.
	Units string

	// Map names the curves that are Vs, Vp and density, each as "Vs=DTS" or
	// "Vs=DTS [us/ft]": where the file has several, or their names do not tell.
	// The unit is for what the file states none for; where it states another,
	// that is a fault. Of two curves with one mnemonic the second is "VS:2".
	Map []string

	// Step is the thickness in m of the layers that samples are averaged onto
	// by travel time; 0 leaves every sample a layer.
	Step float64

	// Bounds are the depths in m below ground level of the lower bounds of
	// layers to average onto, instead of Step. Below the last bound one more
	// layer reaches to the end of the log.
	Bounds []float64

	// CarryUp is how far in m the first velocity may be carried up to ground
	// level; 0 means MaxCarry.
	CarryUp float64

	// Datum is the height in m above ground level of the point from which
	// depths are measured, such as a casing top.
	Datum float64
}

// Read returns the profile of a log, named by its WELL, or after the file. An
// error is a profile.Faults: everything that is wrong, each at its place. The
// profile has passed profile.Validate and carries the notes of profile.Doubts
// after its own:
//
//   - edition: the version is not stated, or is 1.2.
//   - samples-as-layers, samples-averaged: how samples became layers.
//   - basis-assumed: a log is taken for measured velocities; correlated, if
//     the description of the curve says that it is estimated.
//   - depth-datum: depths are measured from another point than the ground.
//   - top-gap, gaps: where velocities were carried over ground without
//     samples.
//   - nulls-undeclared: numbers and words that were taken for no value.
//   - units-given: units that the file does not state and Options does.
//   - curves-agree: which of two shear curves was taken.
//   - curve-not-read: a P-wave or density curve that was not read.
//   - wrap-assumed, columns-differ, column-order, run-on, decimal-comma,
//     data-misplaced, range-differs: where the file departs from the standard.
func Read(file string, data []byte, opt Options) ([]profile.Profile, error) {
	r := reader{Collector: profile.Collector{File: file}, opt: opt}
	r.read(data)
	if err := r.Err(); err != nil {
		return nil, err
	}
	return []profile.Profile{r.profile}, nil
}

// reader is the state of reading one file.
type reader struct {
	profile.Collector
	opt     Options
	given   units
	text    []byte
	reading profile.Reading
	header  header
	curves  []curve
	index   *curve
	vs      *curve
	vp, rho *curve // nil if there is none
	rows    rows
	notes   []profile.Note
	samples []sample
	step    float64 // m, the spacing of most samples
	profile profile.Profile
}

// read runs from the bytes to the profile. Each step that returns false has
// told why the next makes no sense.
func (r *reader) read(data []byte) {
	_ = r.options() && r.decode(data) && r.sections() && r.readHeader() &&
		r.readCurves() && r.readRows() && r.choose() && r.sample() && r.layers()
}

// fault adds a fault.
func (r *reader) fault(at spot, hint, format string, args ...any) {
	r.Fault(at.place(), hint, format, args...)
}

// stop adds a fault after which reading cannot go on, and returns false.
func (r *reader) stop(at spot, hint, format string, args ...any) bool {
	r.Stop(at.place(), hint, format, args...)
	return false
}

// note adds a note.
func (r *reader) note(id string, at spot, format string, args ...any) {
	place := at.place()
	place.File = r.File
	f := profile.Faultf(place, "", format, args...)
	r.notes = append(r.notes, profile.Note{ID: id, Text: f.Text, Place: place})
}
