package json

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"shearbook/profile"
)

// theFile is what messages call the outermost object.
const theFile = "the file"

var documentKeys = []string{"shearbook profiles", "profiles"}

// document reads the outermost object.
func (r *reader) document() {
	at := r.tok.spot
	if r.tok.kind == '[' {
		r.isForeign(at, hintForm, "the file is a list, not an object with the key %q", documentKeys[0])
		return
	}
	found, ok := r.object(theFile, documentKeys, func(i int) {
		if i == 0 {
			r.version()
			return
		}
		if r.apart {
			r.list("profiles", r.profileApart)
			return
		}
		r.list("profiles", r.profile)
	})
	switch {
	case !ok || r.foreign != nil:
	case !found.has(0):
		r.isForeign(at, r.foreignHint(), "the file is JSON, but has no key %q", documentKeys[0])
	case !found.has(1):
		r.fault(at, hintForm, "the file has no key %q", documentKeys[1])
	case len(r.profiles)+len(r.found) == 0 && r.Count() == 0:
		r.fault(at, "", "the list of profiles is empty")
	}
}

func (r *reader) isForeign(at spot, hint, format string, args ...any) {
	place := at.place()
	place.File = r.File
	f := profile.Faultf(place, hint, format, args...)
	r.foreign = &f
}

// foreignHint says what to do with a file of another form.
func (r *reader) foreignHint() string {
	switch {
	case slices.Contains(r.strangers, "results"):
		return "this looks like the results of a report; give the file of the profile itself"
	case slices.Contains(r.strangers, "features"):
		return "this looks like GeoJSON, which holds places; give the file of the profile"
	}
	return hintForm
}

func (r *reader) version() {
	at := r.tok.spot
	v, ok := r.number("the version")
	switch {
	case !ok || v == Version:
	case v > Version && v == math.Trunc(v):
		r.isForeign(at, "read it with a newer shearbook, or write it as version 1", "the file is of version %v; this program reads version %d", v, Version)
	default:
		r.isForeign(at, "write 1", "there is no version %v", v)
	}
}

var profileKeys = []string{"name", "survey", "position", "source", "metadata", "notes", "no_velocity", "layers"}

// profile reads one profile.
func (r *reader) profile() {
	at, before := r.tok.spot, r.Count()
	if len(r.profiles) == MaxProfiles {
		r.stop(at, "split the file", "the file has more than %d profiles", MaxProfiles)
		return
	}
	reading := r.reading
	p := profile.Profile{Reading: &reading}
	r.layer.columns, r.layer.still = r.layer.columns[:0], r.layer.still[:0]
	found, ok := r.object("a profile", profileKeys, func(i int) {
		switch profileKeys[i] {
		case "name":
			r.name(&p)
		case "survey":
			r.survey(&p.Survey)
		case "position":
			r.position(&p.Position)
		case "source":
			r.source(&reading)
		case "metadata":
			r.metadata(&reading)
		case "notes":
			r.notes(&p)
		case "no_velocity":
			p.NoVelocity = r.truth("no_velocity")
		case "layers":
			r.layersOf(&p)
		}
	})
	if !ok {
		return
	}
	for _, i := range []int{0, len(profileKeys) - 1} {
		if !found.has(i) {
			r.fault(at, "", "the profile has no key %q", profileKeys[i])
		}
	}
	r.velocities(&p)
	if r.Count() == before {
		r.judge(at, &p)
	}
	r.profiles = append(r.profiles, p)
}

// judge validates a profile that was read without a fault, and gathers its
// notes.
func (r *reader) judge(at spot, p *profile.Profile) {
	if len(p.Layers) == 0 {
		r.fault(at, "a profile needs at least one layer", "profile %s has no layers", profile.Quote(p.Name))
		return
	}
	if faults := profile.Validate(p); len(faults) > 0 {
		r.Add(faults)
		return
	}
	doubts := profile.Doubts(p)
	p.Notes = slices.DeleteFunc(p.Notes, func(n profile.Note) bool { return hasNote(doubts, n.ID) })
	p.Notes = append(p.Notes, doubts...)
}

func hasNote(notes []profile.Note, id string) bool {
	return slices.ContainsFunc(notes, func(n profile.Note) bool { return n.ID == id })
}

func (r *reader) name(p *profile.Profile) {
	at := r.tok.spot
	name, ok := r.text("the name of a profile")
	switch {
	case !ok:
		return
	case strings.TrimSpace(name) == "" || name != strings.TrimSpace(name):
		r.fault(at, "give the profile a name without blanks at its ends", "the name %s is blank, or has blanks at its ends", profile.Quote(name))
	case r.names[name] != spot{}:
		r.fault(at, "give one of them another name", "two profiles have the name %s, here and in line %d", profile.Quote(name), r.names[name].line)
	}
	p.Name, r.names[name] = name, at
}

var surveyKeys = []string{"method", "date", "operator", "location", "basis", "depth_reached_m", "ground_level_m", "water_table_m"}

func (r *reader) survey(s *profile.Survey) {
	r.object("survey", surveyKeys, func(i int) {
		switch k := surveyKeys[i]; k {
		case "method":
			s.Method, _ = r.text(k)
		case "date":
			s.Date, _ = r.text(k)
		case "operator":
			s.Operator, _ = r.text(k)
		case "location":
			s.Location, _ = r.text(k)
		case "basis":
			s.Basis = r.basis()
		case "depth_reached_m":
			at := r.tok.spot
			d := r.within(k, 0, profile.MaxDepth)
			if d.Known && d.Value == 0 {
				r.fault(at, "leave it out where it is not known", "%s is zero", k)
			}
			s.DepthReached = d.Value
		case "ground_level_m":
			s.GroundLevel = r.within(k, -profile.MaxDepth, profile.MaxDepth)
		case "water_table_m":
			s.WaterTable = r.within(k, -profile.MaxDepth, profile.MaxDepth)
		}
	})
}

// basis reads the word for a basis.
func (r *reader) basis() profile.Basis {
	at := r.tok.spot
	word, ok := r.text("basis")
	if !ok {
		return profile.BasisNotStated
	}
	b, ok := profile.ParseBasis(word)
	if !ok || b == profile.BasisNotStated {
		r.fault(at, "write measured, inverted or correlated, or leave it out", "basis %s is not known", profile.Quote(word))
	}
	return b
}

// within reads a number between two others.
func (r *reader) within(k string, low, high float64) profile.Optional {
	at := r.tok.spot
	v, ok := r.number(k)
	if ok && (v < low || v > high) {
		r.fault(at, "", "%s %v lies outside %v to %v", k, v, low, high)
		ok = false
	}
	return profile.Optional{Value: v, Known: ok}
}

var positionKeys = []string{"latitude", "longitude", "easting", "northing", "epsg"}

func (r *reader) position(p *profile.Position) {
	at, before := r.tok.spot, r.Count()
	found, ok := r.object("position", positionKeys, func(i int) {
		switch k := positionKeys[i]; k {
		case "latitude":
			p.Latitude = r.within(k, -90, 90)
		case "longitude":
			p.Longitude = r.within(k, -180, 180)
		case "easting":
			p.Easting = r.within(k, -profile.MaxGrid, profile.MaxGrid)
		case "northing":
			p.Northing = r.within(k, -profile.MaxGrid, profile.MaxGrid)
		case "epsg":
			p.EPSG = r.epsg()
		}
	})
	switch {
	case !ok || r.Count() > before:
	case found.has(0) != found.has(1) || !found.has(0) && !found.has(2) && !found.has(3):
		r.fault(at, "state both, or leave the position out", "position states not both latitude and longitude")
	case found.has(2) != found.has(3):
		r.fault(at, "state both, or neither", "position states not both easting and northing")
	}
}

// epsg reads the code of a grid.
func (r *reader) epsg() int {
	at := r.tok.spot
	v, ok := r.number("epsg")
	if ok && (v != math.Trunc(v) || v < 1 || v > profile.MaxEPSG) {
		r.fault(at, "it is the number of the grid, such as 32631", "epsg %v is no code of a grid", v)
		return 0
	}
	return int(v)
}

// WrittenFrom is the key of the metadatum in which Read keeps the source of a
// profile. Write leaves it out, and states the file that the profile was last
// read from.
const WrittenFrom = "written from"

var sourceKeys = []string{"file", "sha256"}

func (r *reader) source(reading *profile.Reading) {
	line := int(r.tok.line)
	var file, sum string
	r.object("source", sourceKeys, func(i int) {
		if i == 0 {
			file, _ = r.text("file")
		} else {
			sum, _ = r.text("sha256")
		}
	})
	if sum != "" {
		file = strings.TrimSpace(file + " SHA-256 " + sum)
	}
	if file != "" {
		reading.Metadata = append(reading.Metadata, profile.Metadatum{Key: WrittenFrom, Value: file, Line: line})
	}
}

var metadatumKeys = []string{"key", "value"}

func (r *reader) metadata(reading *profile.Reading) {
	r.pairs("metadata", "a metadatum", metadatumKeys, func(at spot, key, value string) {
		reading.Metadata = append(reading.Metadata, profile.Metadatum{Key: key, Value: value, Line: int(at.line)})
	})
}

var noteKeys = []string{"id", "text"}

func (r *reader) notes(p *profile.Profile) {
	r.pairs("notes", "a note", noteKeys, func(at spot, id, text string) {
		if id == "" || text == "" {
			r.fault(at, "", "the note has no id or no text")
		}
		place := at.place()
		place.File = r.File
		p.Notes = append(p.Notes, profile.Note{ID: id, Text: text, Place: place})
	})
}

// pairs reads a list of objects of two texts.
func (r *reader) pairs(what, item string, keys []string, add func(at spot, a, b string)) {
	r.list(what, func() {
		at, before := r.tok.spot, r.Count()
		var pair [2]string
		found, ok := r.object(item, keys, func(i int) { pair[i], _ = r.text(keys[i]) })
		switch {
		case !ok || r.Count() > before:
		case !found.has(0) || !found.has(1):
			r.fault(at, "", "%s", fmt.Sprintf("%s needs the keys %q and %q", item, keys[0], keys[1]))
		default:
			add(at, pair[0], pair[1])
		}
	})
}
