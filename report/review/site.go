package review

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"io/fs"
	"path"
	"slices"
	"strings"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/report/folder"
	"shearbook/report/notebook"
	"shearbook/vs30/siteclass/codefile"
)

// Limits of the files of a submission.
const (
	MaxProfileFile = 24 << 20  // bytes of one profile file
	MaxBytes       = 128 << 20 // bytes of all files together
	MaxFiles       = 2000
	MaxLayers      = 500_000 // of all profiles together
	MaxFaults      = 200
)

// intake is the files of a submission: of a folder, or inside a report.pdf.
type intake struct {
	read  func(name string) ([]byte, error)
	bytes int64
	files int

	layers   int
	profiles map[string][]profile.Profile // by file, units and map
	sub      *Submission
	entries  map[*profile.Profile]int
	names    map[*profile.Profile]map[string]int // by the first profile of a file
}

// get reads a file and keeps its digest.
func (f *intake) get(name, role string, most int64) ([]byte, error) {
	if f.files++; f.files > MaxFiles {
		return nil, fmt.Errorf("the submission holds more than %d files", MaxFiles)
	}
	data, err := f.read(name)
	switch {
	case err != nil:
		return nil, profile.FileError(err)
	case int64(len(data)) > most:
		return nil, fmt.Errorf("it is larger than %d MiB", most>>20)
	}
	if f.bytes += int64(len(data)); f.bytes > MaxBytes {
		return nil, fmt.Errorf("the files of the submission are larger than %d MiB together", MaxBytes>>20)
	}
	f.keep(name, role, data)
	return data, nil
}

// keep notes a file with its digest.
func (f *intake) keep(name, role string, data []byte) {
	if slices.ContainsFunc(f.sub.Files, func(had File) bool { return had.Name == name }) {
		return
	}
	sum := sha256.Sum256(data)
	f.sub.Files = append(f.sub.Files, File{Name: name, SHA256: hex.EncodeToString(sum[:]), Size: int64(len(data)), Role: role})
}

// fault adds what cannot be checked.
func (f *intake) fault(at profile.Place, format string, args ...any) {
	f.add(profile.Faultf(at, "", format, args...))
}

func (f *intake) add(faults ...profile.Fault) {
	for _, fault := range faults {
		if len(f.sub.Faults) < MaxFaults {
			f.sub.Faults = append(f.sub.Faults, Fault{Fault: fault})
		}
	}
}

// addErr adds an error: its faults, or itself at a place.
func (f *intake) addErr(at profile.Place, err error) {
	var faults profile.Faults
	if errors.As(err, &faults) {
		f.add(faults...)
		return
	}
	f.fault(at, "%v", err)
}

// profilesOf reads the profiles of a file, once.
func (f *intake) profilesOf(file string, opt open.Options, at profile.Place) []profile.Profile {
	key := file + "\x00" + opt.Key()
	if had, ok := f.profiles[key]; ok {
		return had
	}
	if f.profiles == nil {
		f.profiles = map[string][]profile.Profile{}
	}
	f.profiles[key] = nil
	data, err := f.get(file, "profile", MaxProfileFile)
	if err != nil {
		f.fault(at, "%s cannot be read: %v", profile.Quote(file), err)
		return nil
	}
	profiles, err := open.Bytes(file, data, opt)
	if err != nil {
		f.addErr(at, err)
		return nil
	}
	for i := range profiles {
		f.layers += len(profiles[i].Layers)
	}
	if f.layers > MaxLayers {
		f.fault(at, "%s brings the submission to %d layers; a review takes %d", profile.Quote(file), f.layers, MaxLayers)
		return nil
	}
	f.profiles[key] = profiles
	return profiles
}

// site takes a notebook, which is never evaluated: its front matter alone is
// read.
func (f *intake) site(name string, data []byte) {
	f.keep(name, "notebook", data)
	nb, err := notebook.Parse(name, data)
	if err != nil {
		f.addErr(profile.Place{File: name}, err)
		return
	}
	h := &nb.Header
	f.sub.Stated = Stated{Datum: h.Datum, Foundation: h.Foundation, Ground: h.Ground, Extend: h.Extend}
	f.ownTables(name, h)
	for i := range h.Profiles {
		f.entry(name, &h.Profiles[i])
	}
}

// ownTables reads the class tables that the notebook brings along.
func (f *intake) ownTables(name string, h *notebook.Header) {
	for _, c := range h.Codes {
		if c.File == "" {
			continue
		}
		data, err := f.get(c.File, "code table", codefile.MaxSize)
		if err != nil {
			f.fault(profile.Place{File: name}, "the class table %s cannot be read: %v", profile.Quote(c.File), err)
			continue
		}
		code, err := codefile.Read(c.File, data)
		if err != nil {
			f.addErr(profile.Place{File: c.File}, err)
			continue
		}
		f.sub.Tables = append(f.sub.Tables, code)
	}
}

// entry takes one profile of a notebook.
func (f *intake) entry(name string, e *notebook.ProfileEntry) {
	at := profile.Place{File: name}
	of := f.profilesOf(e.File, e.Options(), at)
	if of == nil {
		return
	}
	i := 0
	if e.Profile != "" {
		i = slices.IndexFunc(of, func(p profile.Profile) bool { return p.Name == e.Profile })
	}
	if i < 0 || e.Profile == "" && len(of) > 1 {
		f.fault(at, "the notebook's profile %s does not say which of the profiles in %s it is", profile.Quote(e.Key), profile.Quote(e.File))
		return
	}
	as := of[i]
	p := as
	p.Name = e.Key
	p.Survey.Override(e.Survey)
	for _, n := range profile.Doubts(&p) { // what the notebook's own statements raise
		if !slices.ContainsFunc(as.Notes, func(had profile.Note) bool { return had.ID == n.ID && had.Text == n.Text }) {
			p.Notes = append(p.Notes[:len(p.Notes):len(p.Notes)], n)
		}
	}
	f.sub.Profiles = append(f.sub.Profiles, Entry{Profile: &p, AsRead: &as, Unmapped: f.unmapped(e, as.Name)})
}

// unmapped reads a profile without the notebook's map; nil where there is no
// map, or the file cannot be read without it.
func (f *intake) unmapped(e *notebook.ProfileEntry, name string) *profile.Profile {
	opt := e.Options()
	if len(opt.Map) == 0 {
		return nil
	}
	opt.Map = nil
	key := e.File + "\x00" + opt.Key()
	had, ok := f.profiles[key]
	if !ok {
		data, err := f.read(e.File)
		if err != nil {
			return nil
		}
		if had, err = open.Bytes(e.File, data, opt); err != nil {
			had = nil
		}
		for i := range had {
			f.layers += len(had[i].Layers)
		}
		f.profiles[key] = had
	}
	if i := slices.IndexFunc(had, func(p profile.Profile) bool { return p.Name == name }); i >= 0 {
		return &had[i]
	}
	return nil
}

// results takes a results.json: each result is a claim.
func (f *intake) results(name string, data []byte) {
	f.keep(name, "results", data)
	results, err := readResults(name, data)
	if err != nil {
		f.addErr(profile.Place{File: name}, err)
		return
	}
	f.sub.Results = results
	var top struct {
		Confirmation string `json:"confirmation"`
	}
	if json.Unmarshal(data, &top) == nil {
		f.sub.Confirmation = &top.Confirmation
	}
	for i := range results {
		r := &results[i]
		if r.Source.SHA256 != "" {
			f.sub.Digests = append(f.sub.Digests, r.Source)
		}
		f.claim(r)
	}
}

// claim makes a claim of a result.
func (f *intake) claim(r *Result) {
	if len(f.sub.Claims) == MaxClaims {
		return
	}
	c := Claim{Profile: r.Profile, Code: r.Code, Class: r.Class, Average: r.Average, Depth: r.Depth,
		Stated: f.sub.Stated, Basis: r.Basis, Place: r.Place, result: r}
	if r.Extend != "" {
		c.Stated.Extend = r.Extend
	}
	c.Entry = f.sub.entryNamed(r.Profile)
	f.sub.Claims = append(f.sub.Claims, c)
}

// entryNamed returns the index of the profile of a name, −1 if there is none.
func (s *Submission) entryNamed(name string) int {
	return slices.IndexFunc(s.Profiles, func(e Entry) bool { return e.Profile.Name == name })
}

// markdown takes the text of a report.
func (f *intake) markdown(name string, data []byte) {
	f.keep(name, "report", data)
	text := string(data)
	if strings.HasSuffix(name, ".html") { // most of it may be drawings
		text = strings.Join(plainHTML(strings.ToValidUTF8(text, "\ufffd")), "\n")
	}
	if len(text) > MaxPrinted {
		f.fault(profile.Place{File: name}, "the text of the report is longer than %d MiB", MaxPrinted>>20)
		return
	}
	p := Printed{File: name, Text: strings.Split(text, "\n")}
	f.sub.Printed = append(f.sub.Printed, p)
	for _, d := range p.digests() {
		if d.File == folder.Results {
			d.File = path.Join(path.Dir(name), d.File)
		}
		f.sub.Digests = append(f.sub.Digests, d)
	}
}

// clean is the name of a file below a folder, "" if it is none.
func clean(name string) string {
	name = path.Clean(strings.ReplaceAll(name, `\`, "/"))
	if !fs.ValidPath(name) {
		return ""
	}
	return name
}
