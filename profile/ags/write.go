package ags

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"slices"
	"time"

	"shearbook/profile"
)

// WriteOptions says how to write a file. The zero value writes edition 4.1.1.
type WriteOptions struct {
	Edition string // "4.0.4", "4.1", "4.1.1" or "4.2"; "" is 4.1.1

	// Date of the issue, as yyyy-mm-dd. AGS4 demands one; "" is the latest
	// date of the surveys that is written so.
	Date string

	// The rest of the transmission and the project. What AGS4 demands and is
	// blank is written as "not stated".
	Issue       string // "" is 1
	Status      string
	Description string
	Producer    string
	Recipient   string
	Project     Project
}

// Project is what PROJ states.
type Project struct {
	ID, Name, Location, Client, Contractor, Engineer string
}

// writtenEditions are the editions that are written.
var writtenEditions = []string{"4.0.4", "4.1", "4.1.1", "4.2"}

// Write writes profiles as an AGS4 file that keeps its rules, each profile as
// a hole of its own. A profile goes into the groups that AGS has for it where
// Read gives it back from them as it was:
//
//   - WGPG and WGPT, from edition 4.1 on: suspension and sonic logs;
//   - ISTG and ISTA, in edition 4.2: intervals of seismic cones and
//     dilatometers, downhole and crosshole tests;
//   - otherwise VSPG and VSPL, groups of our own that DICT declares, with
//     every quantity that a layer may state. So N, su and the others are not
//     made out to be tests.
//
// The EPSG code of a grid is written into LOCA_GREF, as EPSG27700. Soil goes into GEOL too. The text is ASCII; what that and the precision of
// LOCA_GL, LOCA_NATE and LOCA_NATN lose, Lost tells.
//
// The error is that of w; or it names an edition or a date that is none, or a
// profile that Read would not give back: one that profile.Validate finds
// faulty, or whose name is blank, not one line of plain text, or that of
// another.
func Write(w io.Writer, profiles []profile.Profile, opt WriteOptions) error {
	f := newFile(opt)
	if err := f.check(); err != nil {
		return err
	}
	plain, err := plainProfiles(profiles)
	if err != nil {
		return err
	}
	if f.opt.Date, err = dateOf(plain, opt.Date); err != nil {
		return err
	}
	f.fill(plain)
	_, err = w.Write(f.bytes())
	return err
}

// check looks at the options.
func (f *file) check() error {
	if !slices.Contains(writtenEditions, f.opt.Edition) {
		return fmt.Errorf("AGS4 edition %s is not one that is written (4.0.4, 4.1, 4.1.1, 4.2)", profile.Quote(f.opt.Edition))
	}
	return nil
}

// dateOf returns the date of the issue.
func dateOf(profiles []profile.Profile, date string) (string, error) {
	if date != "" && !isDate(date) {
		return "", fmt.Errorf("date %s of the issue is not a date such as 2026-03-31", profile.Quote(date))
	}
	if date != "" {
		return date, nil
	}
	for i := range profiles {
		if d := profiles[i].Survey.Date; isDate(d) && d > date {
			date = d
		}
	}
	if date == "" {
		return "", errors.New("AGS4 demands the date of the issue, and no profile states the date of its survey as yyyy-mm-dd")
	}
	return date, nil
}

func isDate(text string) bool {
	_, err := time.Parse(time.DateOnly, text)
	return err == nil
}

// plainProfiles returns the profiles with their texts in ASCII.
func plainProfiles(profiles []profile.Profile) ([]profile.Profile, error) {
	plain := make([]profile.Profile, len(profiles))
	names := map[string]bool{}
	for i := range profiles {
		p := plainProfile(&profiles[i])
		switch {
		case p.Name == "" || clean([]byte(profiles[i].Name)) != profiles[i].Name:
			return nil, fmt.Errorf("the name %s of profile %d is blank or not one line of plain text", profile.Quote(profiles[i].Name), i+1)
		case names[p.Name]:
			return nil, fmt.Errorf("two profiles have the name %s in ASCII", profile.Quote(p.Name))
		}
		names[p.Name] = true
		if faults := profile.Validate(&profiles[i]); len(faults) > 0 {
			return nil, fmt.Errorf("profile %s: %w", profile.Quote(p.Name), faults)
		}
		plain[i] = p
	}
	return plain, nil
}

// plainProfile is a profile with its texts in one line of ASCII each.
func plainProfile(p *profile.Profile) profile.Profile {
	plain := *p
	plain.Name = ascii(p.Name)
	s := &plain.Survey
	s.Method, s.Date, s.Operator, s.Location = ascii(s.Method), ascii(s.Date), ascii(s.Operator), ascii(s.Location)
	plain.Layers = slices.Clone(p.Layers)
	for i := range plain.Layers {
		plain.Layers[i].Soil, plain.Layers[i].EnergyRatio = ascii(plain.Layers[i].Soil), 0
	}
	return plain
}

// form is the groups that a profile goes into.
type form uint8

const (
	formOwn form = iota
	formLog
	formSeismic
)

// formOf is the form for a profile: the one that AGS has for its method, if
// Read gives the profile back from it.
func (f *file) formOf(p *profile.Profile) form {
	try := formOf(p, f.opt.Edition)
	if try == formOwn {
		return formOwn
	}
	trial := newFile(WriteOptions{Edition: f.opt.Edition, Date: "2000-01-01"})
	trial.head()
	trial.put(p, try)
	back, err := Read("", trial.bytes(), Options{})
	if err != nil || len(back) != 1 || !equal(&back[0], p) {
		return formOwn
	}
	return try
}

// formOf is the form that AGS has for a profile, by its method, basis and
// what its layers state.
func formOf(p *profile.Profile, edition string) form {
	code := codeOf(p.Survey.Method)
	if code == "" || p.NoVelocity || edition == "4.0.4" || p.Survey.Basis != profile.Measured || p.Survey.Date != "" && !isDate(p.Survey.Date) {
		return formOwn
	}
	for i := range p.Layers {
		if l := &p.Layers[i]; l.Given&^profile.GivenVp != 0 || l.Refusal || l.VsBottom != 0 || l.Basis != profile.BasisNotStated || l.HalfSpace() {
			return formOwn
		}
	}
	switch {
	case slices.Contains(wells, code):
		return formLog
	case edition == "4.2":
		return formSeismic
	}
	return formOwn
}

// place is a position as it is written: to 0.01 in a grid, and the grid only
// beside a position in it.
func place(p profile.Position) profile.Position {
	if !p.Easting.Known || !p.Northing.Known {
		p.Easting, p.Northing, p.EPSG = profile.Optional{}, profile.Optional{}, 0
	}
	p.Easting.Value, p.Northing.Value = round(p.Easting.Value), round(p.Northing.Value)
	return p
}

// equal reports whether two profiles are the same but for the file that they
// were read from and the notes on them. Ground levels and positions are
// compared as they are written.
func equal(a, b *profile.Profile) bool {
	if a.Name != b.Name || a.NoVelocity != b.NoVelocity || place(a.Position) != place(b.Position) || len(a.Layers) != len(b.Layers) {
		return false
	}
	s, t := a.Survey, b.Survey
	if s.GroundLevel.Known != t.GroundLevel.Known || decimals(s.GroundLevel.Value, 2) != decimals(t.GroundLevel.Value, 2) {
		return false
	}
	s.GroundLevel, t.GroundLevel = profile.Optional{}, profile.Optional{}
	for i := range a.Layers {
		l, m := a.Layers[i], b.Layers[i]
		l.Line, l.Column, m.Line, m.Column = 0, 0, 0, 0
		if l != m {
			return false
		}
	}
	return s == t
}

// Lost tells what Write does not keep of the profiles: characters that ASCII
// has not, decimals of the ground level and of a position in a grid, the energy
// ratio of blow counts, and the notes, each as what a sentence says is not kept.
// What a profile says of the file it was read from is not written either, and
// not told.
func Lost(profiles []profile.Profile) []profile.Note {
	var notes []profile.Note
	note := func(p *profile.Profile, id, text string) {
		notes = append(notes, profile.Note{ID: id, Text: "profile " + p.Name + ": " + text})
	}
	for i := range profiles {
		p := &profiles[i]
		plain := plainProfile(p)
		trimmed := *p
		trimmed.Layers = slices.Clone(p.Layers)
		for _, s := range []*string{&trimmed.Survey.Method, &trimmed.Survey.Date, &trimmed.Survey.Operator, &trimmed.Survey.Location} {
			*s = clean([]byte(*s))
		}
		for k := range trimmed.Layers {
			trimmed.Layers[k].Soil, trimmed.Layers[k].EnergyRatio = clean([]byte(trimmed.Layers[k].Soil)), 0
		}
		if !equal(&plain, &trimmed) {
			note(p, "ascii", "characters that are not ASCII, and replaces them")
		}
		if level := p.Survey.GroundLevel; level.Known && !sameDecimal(level.Value) {
			note(p, "ground-level", "the ground level to more than 0.01 m")
		}
		switch at := p.Position; {
		case at.Easting.Known != at.Northing.Known || at.EPSG > 0 && !at.Easting.Known:
			note(p, "position", "half a position in a grid")
		case !sameDecimal(at.Easting.Value) || !sameDecimal(at.Northing.Value):
			note(p, "position", "the position in its grid to more than 0.01")
		}
		if slices.ContainsFunc(p.Layers, func(l profile.Layer) bool { return l.EnergyRatio != 0 }) {
			note(p, "energy", "the energy ratio of its blow counts")
		}
		if len(p.Notes) > len(profile.Doubts(p)) {
			note(p, "notes", "notes on how it was read")
		}
	}
	return notes
}

// bytes is the file.
func (f *file) bytes() []byte {
	var b bytes.Buffer
	for _, t := range f.tables() {
		t.write(&b)
	}
	return b.Bytes()
}
