package open

import (
	"fmt"
	"slices"

	"shearbook/profile"
	"shearbook/profile/ags"
	"shearbook/profile/correlate"
	"shearbook/profile/delimited"
	"shearbook/profile/json"
	"shearbook/profile/las"
	"shearbook/profile/sitexml"
	"shearbook/profile/spreadsheet"
)

// Options says how to read a file. The zero value reads what the file states.
// A file that has no use for an option that is given is refused, but for Units:
// where a file states its units, those hold.
type Options struct {
	// Units are for what the file states no unit for, as "ft, ft/s"; see
	// delimited.ParseUnits.
	Units string

	// Map names the headings or curves of a file that would not be recognised,
	// each as "Vs=DTS [us/ft]"; see delimited.Options, ags.Options and
	// las.Options. Of tables, AGS4 and LAS.
	Map []string

	// Step is the thickness in m of the layers that the samples of a log are
	// averaged onto; Bounds are the depths in m below ground level of the lower
	// bounds of such layers instead. LogDatum is the height in m above ground
	// level of the point from which its depths are measured. Of LAS.
	Step     float64
	Bounds   []float64
	LogDatum float64

	// CarryUp is how far in m the first velocity may be carried up to ground
	// level; 0 leaves that to the reader. Of LAS and AGS4.
	CarryUp float64

	// N60 takes blow counts corrected for energy where the file has them;
	// AllHoles gives the holes without velocities too. Of AGS4.
	N60      bool
	AllHoles bool

	// Correlate asks for estimates by published relations where there are no
	// velocities, if it names any: from N and su in profiles without velocities,
	// of every form of file, and from the cones of an AGS4 file, which become
	// profiles beside the others. Profiles that state velocities stay as they are.
	Correlate correlate.Options
}

// Key is a text that two options have in common only if they are the same.
func (o *Options) Key() string { return fmt.Sprintf("%q", fmt.Sprintf("%#v", *o)) }

// form is a form of file: what it is called, what of the options it has a use
// for, and its reader.
type form struct {
	what string
	uses []string // besides units
	read func(name string, data []byte, opt *Options) ([]profile.Profile, error)
	each func(name string, data []byte, opt *Options) ([]profile.Found, error) // nil where a fault is the whole file's
}

// The options, as messages call them.
const (
	useMap      = "a map"
	useStep     = "a step"
	useBounds   = "bounds of layers"
	useDatum    = "a log datum"
	useCarryUp  = "carrying up"
	useN60      = "N60"
	useAllHoles = "all holes"
)

var (
	tableForm = form{"a table of layers", []string{useMap}, func(name string, data []byte, o *Options) ([]profile.Profile, error) {
		return delimited.Read(name, data, delimited.Options{Units: o.Units, Map: o.Map})
	}, nil}
	workbookForm = form{"a workbook", []string{useMap}, func(name string, data []byte, o *Options) ([]profile.Profile, error) {
		return spreadsheet.Read(name, data, spreadsheet.Options{Units: o.Units, Map: o.Map})
	}, eachOfWorkbook}
	agsForm = form{"an AGS4 file", []string{useMap, useCarryUp, useN60, useAllHoles}, func(name string, data []byte, o *Options) ([]profile.Profile, error) {
		return ags.Read(name, data, ags.Options{Map: o.Map, CarryUp: o.CarryUp, N60: o.N60, Untimed: o.AllHoles})
	}, eachOfAGS}
	lasForm = form{"a LAS file", []string{useMap, useStep, useBounds, useDatum, useCarryUp}, func(name string, data []byte, o *Options) ([]profile.Profile, error) {
		return las.Read(name, data, las.Options{Units: o.Units, Map: o.Map, Step: o.Step, Bounds: o.Bounds, CarryUp: o.CarryUp, Datum: o.LogDatum})
	}, nil}
	siteXMLForm = form{"a SiteXML file", nil, func(name string, data []byte, _ *Options) ([]profile.Profile, error) {
		return sitexml.Read(name, data)
	}, eachOfSiteXML}
	jsonForm = form{"a file of our own JSON", nil, func(name string, data []byte, _ *Options) ([]profile.Profile, error) {
		return json.Read(name, data)
	}, eachOfJSON}
)

// forms are the forms of text that are no tables, by how they begin.
var forms = map[string]*form{
	`"GROUP"`: &agsForm,

	"~V": &lasForm,
	"~W": &lasForm,
	"~C": &lasForm,
	"~A": &lasForm,
	"<":  &siteXMLForm,
	"{":  &jsonForm,
	"[":  &jsonForm,
}

// refuse tells of the options given that a file has no use for.
func (f *form) refuse(name string, o *Options) error {
	var faults profile.Faults
	for _, each := range []struct {
		is   bool
		what string
		does string
	}{
		{len(o.Map) > 0, useMap, "names columns of tables, AGS4 and LAS files"},
		{o.Step != 0, useStep, "averages the samples of a LAS file"},
		{len(o.Bounds) > 0, useBounds, "are for the samples of a LAS file"},
		{o.LogDatum != 0, useDatum, "is for the depths of a LAS file"},
		{o.CarryUp != 0, useCarryUp, "is for the first reading of an AGS4 or LAS file"},
		{o.N60, useN60, "chooses blow counts of an AGS4 file"},
		{o.AllHoles, useAllHoles, "are of an AGS4 file"},
	} {
		if !each.is || slices.Contains(f.uses, each.what) {
			continue
		}
		faults = append(faults, profile.Faultf(profile.Place{File: name}, "leave it out for this file", "%s %s; this is %s", each.what, each.does, f.what))
	}
	return faults.Err()
}
