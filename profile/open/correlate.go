package open

import (
	"crypto/sha256"
	"encoding/hex"
	"math"
	"slices"
	"unicode/utf8"

	"shearbook/profile"
	"shearbook/profile/ags"
	"shearbook/profile/correlate"
)

// correlated reads the profiles in data and puts estimates where there are no
// velocities: by the relations from N and su in profiles without velocities,
// and of a file in AGS4 by those from cones in its cone tests, which become
// profiles beside the others. Profiles that state velocities stay as they are.
func correlated(name string, data []byte, opt Options) ([]profile.Profile, error) {
	if err := opt.Correlate.Check(); err != nil {
		return nil, fault(name, "`shearbook correlations` lists the relations, and what each needs", "%v", err)
	}
	layered, coned := split(opt.Correlate)
	opt.Correlate = correlate.Options{}
	profiles, err := Bytes(name, data, opt)
	var cones []profile.Profile
	if len(coned.Relations) > 0 && isAGS(data) {
		var unread error
		if cones, unread = soundings(name, data, opt, coned, profiles); unread != nil {
			return nil, unread
		}
	}
	sayMeasured(profiles)
	switch {
	case err != nil && len(cones) == 0:
		return nil, err
	case len(layered.Relations) > 0:
		if profiles, err = estimated(profiles, layered); err != nil {
			return nil, err
		}
	case len(cones) == 0 && slices.ContainsFunc(profiles, func(p profile.Profile) bool { return p.NoVelocity }):
		return nil, fault(name, "name one from N or su, of `shearbook correlations`",
			"the correlations named estimate from cones, and the file has none")
	}
	return append(profiles, cones...), nil
}

// sayMeasured notes on profiles that state velocities that no estimate is put in
// their place.
func sayMeasured(profiles []profile.Profile) {
	for i := range profiles {
		if p := &profiles[i]; !p.NoVelocity {
			p.Notes = append(slices.Clip(p.Notes), profile.Note{ID: "correlation-not-used",
				Text: "the profile states velocities of its own; the correlations that were asked for are not used"})
		}
	}
}

func isAGS(data []byte) bool {
	kind, ok := sniff(data)
	return ok && kind.begins == `"GROUP"`
}

// split divides options by what the relations estimate from: the layers of a
// profile, or the readings of a cone. A name that is none stays with the first,
// for Check to find.
func split(opt correlate.Options) (layered, coned correlate.Options) {
	layered, coned = opt, opt
	layered.Relations, coned.Relations = nil, nil
	for _, id := range opt.Relations {
		if r, err := correlate.Find(id); err == nil && r.Family == correlate.ConeTest {
			coned.Relations = append(coned.Relations, id)
			continue
		}
		layered.Relations = append(layered.Relations, id)
	}
	return layered, coned
}

// estimated are the profiles with estimates in those without velocities.
func estimated(profiles []profile.Profile, opt correlate.Options) ([]profile.Profile, error) {
	var faults profile.Faults
	for i := range profiles {
		if !profiles[i].NoVelocity {
			continue
		}
		p, err := correlate.Profile(&profiles[i], opt)
		if err != nil {
			faults = appendFaults(faults, &profiles[i], err)
			continue
		}
		profiles[i] = p
	}
	return profiles, faults.Err()
}

// appendFaults adds an error to the faults, at the file of p if it has no place.
func appendFaults(faults profile.Faults, p *profile.Profile, err error) profile.Faults {
	if more, ok := err.(profile.Faults); ok {
		return append(faults, more...)
	}
	var at profile.Place
	if p.Reading != nil {
		at = p.Reading.Place(0, 0)
	}
	return append(faults, profile.Faultf(at, "", "profile %q: %v", p.Name, err))
}

// soundings are the profiles of the cones of a file in AGS4, under names that
// the profiles beside them do not have. A file without cones has none.
func soundings(name string, data []byte, opt Options, coned correlate.Options, beside []profile.Profile) ([]profile.Profile, error) {
	holes, err := ags.ReadHoles(name, data, ags.Options{Map: opt.Map})
	if err != nil {
		return nil, err
	}
	taken := map[string]bool{}
	for i := range beside {
		taken[beside[i].Name] = true
	}
	source := sourceOf(name, data)
	var profiles []profile.Profile
	var faults profile.Faults
	for i := range holes {
		h := &holes[i]
		for k := range h.Cones {
			c := &h.Cones[k]
			if len(c.Readings) == 0 {
				continue
			}
			p, err := sounded(coneOf(h, c, source, taken), h.Strata, coned)
			if err != nil {
				faults = appendFaults(faults, &p, err)
				continue
			}
			p.Notes = append(p.Notes, h.Notes...)
			profiles = append(profiles, p)
		}
	}
	return profiles, faults.Err()
}

// sourceOf is a file, for the profiles of its cones.
func sourceOf(name string, data []byte) profile.Reading {
	sum := sha256.Sum256(data)
	r := profile.Reading{File: name, SHA256: hex.EncodeToString(sum[:]), Size: int64(len(data)), Encoding: "UTF-8"}
	if !utf8.Valid(data) {
		r.Encoding = "Windows-1252"
	}
	return r
}

// tableOf is the readings of a cone, of which there is one at least, in the words
// of the file.
func tableOf(source profile.Reading, c *ags.Cone) *profile.Reading {
	source.Columns = c.Columns
	for _, r := range c.Readings {
		source.Rows = append(source.Rows, profile.Row{Line: r.Line, Cells: r.Cells})
	}
	return &source
}

// coneOf is a cone of a hole, under the name of the hole, with its own behind
// it where that is taken.
func coneOf(h *ags.Hole, c *ags.Cone, source profile.Reading, taken map[string]bool) *correlate.Cone {
	name := h.Name
	if taken[name] {
		name += "/" + c.Name
	}
	for taken[name] {
		name += "+"
	}
	taken[name] = true
	cone := &correlate.Cone{Name: name, Position: h.Position, GroundLevel: h.GroundLevel, WaterTable: c.WaterTable, AreaRatio: c.AreaRatio, Source: tableOf(source, c)}
	for _, r := range c.Readings {
		cone.Readings = append(cone.Readings, correlate.Reading{Depth: r.Depth, Tip: r.Tip, Sleeve: r.Sleeve, PorePressure: r.PorePressure, Line: r.Line})
	}
	return cone
}

// sounded is the profile of a cone, cut at the strata of its hole, whose names
// the layers take.
func sounded(c *correlate.Cone, strata []ags.Stratum, opt correlate.Options) (profile.Profile, error) {
	for _, s := range strata {
		if !math.IsInf(s.Bottom, 1) {
			opt.Boundaries = append(slices.Clip(opt.Boundaries), s.Bottom)
		}
	}
	p, err := correlate.Sounding(c, opt)
	if err != nil {
		return p, err
	}
	k := 0
	for i := range p.Layers {
		l := &p.Layers[i]
		middle := (l.Top + l.Bottom) / 2
		for k < len(strata) && strata[k].Bottom <= middle {
			k++
		}
		if k < len(strata) && strata[k].Top <= middle {
			l.Soil = strata[k].Soil
		}
	}
	return p, nil
}
