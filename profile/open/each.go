package open

import (
	"errors"
	"slices"

	"shearbook/profile"
	"shearbook/profile/ags"
	"shearbook/profile/correlate"
	"shearbook/profile/json"
	"shearbook/profile/sitexml"
	"shearbook/profile/spreadsheet"
)

// Each reads the profiles in data as Bytes does, but where one is at fault and
// its form keeps profiles apart it leaves the others alone. It does so for
// workbooks, AGS4, SiteXML and our own JSON. Of every other form, and of an AGS4 file
// whose cones are asked for, a fault is the whole file's, as it is of Bytes; so
// is one outside the profiles. An error is a profile.Faults.
func Each(name string, data []byte, opt Options) ([]profile.Found, error) {
	profiles, err := Bytes(name, data, opt)
	if err == nil {
		return profile.FoundOf(profiles), nil
	}
	layered, coned := split(opt.Correlate)
	opt.Correlate = correlate.Options{}
	f, other := formOf(name, data)
	if other != nil || f.each == nil || f.refuse(name, &opt) != nil || len(coned.Relations) > 0 || len(layered.Relations) > 0 && layered.Check() != nil {
		return nil, err
	}
	found, whole := f.each(name, data, &opt)
	if whole != nil {
		return nil, err
	}
	if len(layered.Relations) > 0 {
		estimatedEach(found, layered)
	}
	if !slices.ContainsFunc(found, func(f profile.Found) bool { return f.Profile == nil }) {
		return nil, err // it is of none of them
	}
	return found, nil
}

// estimatedEach puts estimates into the profiles without velocities, or why
// there are none.
func estimatedEach(found []profile.Found, opt correlate.Options) {
	for i := range found {
		f := &found[i]
		if f.Profile == nil || !f.Profile.NoVelocity {
			continue
		}
		p, err := correlate.Profile(f.Profile, opt)
		switch faults := (profile.Faults)(nil); {
		case err == nil:
			f.Profile = &p
		case errors.As(err, &faults):
			f.Profile, f.Faults = nil, faults
		default:
			f.Faults, f.Profile = appendFaults(nil, f.Profile, err), nil
		}
	}
}

// The readers of forms that keep profiles apart.
func eachOfWorkbook(name string, data []byte, o *Options) ([]profile.Found, error) {
	return spreadsheet.ReadEach(name, data, spreadsheet.Options{Units: o.Units, Map: o.Map})
}

func eachOfAGS(name string, data []byte, o *Options) ([]profile.Found, error) {
	return ags.ReadEach(name, data, ags.Options{Map: o.Map, CarryUp: o.CarryUp, N60: o.N60, Untimed: o.AllHoles})
}

func eachOfSiteXML(name string, data []byte, _ *Options) ([]profile.Found, error) {
	return sitexml.ReadEach(name, data)
}

func eachOfJSON(name string, data []byte, _ *Options) ([]profile.Found, error) {
	return json.ReadEach(name, data)
}
