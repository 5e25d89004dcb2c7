// Package sitexml reads and writes SiteXML, the XML form in which
// strong-motion networks exchange what is known of a station's site: its
// velocity profiles, Vs30, resonance frequency and site class, with quality
// indices (project SERA, deliverables D7.1, D7.2 and D7.5; version 1.3,
// namespace http://www.orfeus-eu.org/xml/site/1).
//
// # What is read
//
// Each element velocityProfile becomes a profile. Its layers have velocityS,
// and velocityP and density where the file states them. Quantities are in m,
// m/s and kg/m³ by definition of the form. Names of elements are taken
// without regard to case and namespace, and elements may lie inside others
// than the schema says, because files of older versions and published examples
// differ from it.
//
//   - A layer without a top starts at the bottom of the one above; without a
//     bottom it ends at the top of the next, and the last one is a
//     half-space.
//   - An uncertainty u of velocityS is read as one standard deviation: the
//     standard deviation of ln Vs is u/Vs, to first order.
//   - The profile is named by the last part of its publicID.
//   - The method of the survey, which the form does not state for a profile,
//     is that of velocityS30 in the same analysis, and the basis follows from
//     it: crosshole, downhole, uphole, P-S log, seismic cone and downhole
//     arrays measure; refraction, reflection and surface waves are inverted;
//     geology, topographic slope, SPT and CPT are correlated.
//   - latitude, longitude and altitude are those of the siteDescription.
//   - Everything else that the file states, as Vs30, quality indices, site
//     class, owner, is kept in Reading.Metadata under the path of its element,
//     such as analysis/velocityS30, a quantity as "340 ± 17".
//
// # Safety
//
// A document type declaration is refused, so there are no entities but the
// five of XML. Nothing outside the file is read.
package sitexml

import (
	"crypto/sha256"
	"encoding/hex"

	"shearbook/profile"
)

// Namespace is the namespace of SiteXML, and SchemaVersion the version of it
// that Write writes.
const (
	Namespace     = "http://www.orfeus-eu.org/xml/site/1"
	SchemaVersion = "1.3"
)

// Limits of what Read takes in. Beyond them it says so and stops.
const (
	MaxBytes    = 64 << 20  // of a file
	MaxLayers   = 1_000_000 // in a file
	MaxElements = 5_000_000
	MaxProfiles = 10_000
	MaxDepth    = 64        // of elements inside one another
	MaxTag      = 64 << 10  // bytes of a tag or a text
	MaxComment  = 1 << 20   // bytes of a comment
	MaxMetadata = 1_000_000 // statements, counted once for each profile that they are about
)

// Read returns the profiles of a file in its order. The name of the file is
// used in messages. An error is a profile.Faults: everything that is wrong,
// each at its place. Each profile has passed profile.Validate and carries the
// notes of profile.Doubts after its own:
//
//   - edition: the file does not state version 1.3.
//   - method-of-vs30: the method of Vs30 was taken for that of the profile.
//   - uncertainty-as-sigma: what the uncertainties of Vs were taken for.
//   - element-not-read: elements of a layer that were not read.
//   - count-differs: layerCount is not the number of layers.
//   - bottom-from-next: layers had no bottom and end at the top of the next.
//   - density-suspect: densities look as if they were in g/cm³.
//   - average-differs: the Vs30 that the file states is not that of the
//     profile.
//   - not-preferred: the file prefers another profile.
//   - several-sites: the file has several sites, and the analysis names none
//     of them; the first was taken.
func Read(file string, data []byte) ([]profile.Profile, error) {
	r := reader{Collector: profile.Collector{File: file}}
	r.read(data)
	if err := r.Err(); err != nil {
		return nil, err
	}
	return r.profiles, nil
}

// reader is the state of reading one file.
type reader struct {
	profile.Collector
	reading profile.Reading // what the readings of all profiles share
	walk    walk
	file    document
	layers  int // in all profiles

	profiles []profile.Profile
	apart    bool    // each profile has faults of its own
	judged   *column // that is being judged; nil before
}

func (r *reader) read(data []byte) {
	if len(data) > MaxBytes {
		r.stop(spot{}, "split it", "the file is larger than %d MiB", MaxBytes>>20)
		return
	}
	sum := sha256.Sum256(data)
	r.reading = profile.Reading{File: r.File, SHA256: hex.EncodeToString(sum[:]), Size: int64(len(data))}
	text, ok := r.decode(data)
	if !ok || !r.bounded(text) {
		return
	}
	if r.elements(text) {
		r.assemble()
	}
}

// fault adds a fault.
func (r *reader) fault(at spot, hint, format string, args ...any) {
	r.collector().Fault(at.place(), hint, format, args...)
}

// stop adds a fault after which reading cannot go on.
func (r *reader) stop(at spot, hint, format string, args ...any) {
	r.Stop(at.place(), hint, format, args...)
}
