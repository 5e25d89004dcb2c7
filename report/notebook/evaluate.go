package notebook

import (
	"errors"
	"path"
	"strconv"
	"strings"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/report"
	"shearbook/report/evidence"
	"shearbook/vs30/siteclass"
)

// Options says what an evaluation may use of the world.
type Options struct {
	// ReadFile returns the content of a file beside the notebook. It must not
	// leave the notebook's folder, and must refuse files over a sane size.
	ReadFile func(name string) ([]byte, error)

	Version string // printed in the appendix: "shearbook 1.0.0"
	Command string // printed in the appendix: the command that made the report

	Own []OwnWorking // workings of the caller's, which go before those of the same name
}

// Report is an evaluated notebook.
type Report struct {
	Document *report.Document
	Results  []report.Result // one for each profile and code that a working decided, in the order of the notebook
	Letter   bool            // print on Letter paper, not A4

	Evidence evidence.Bundle // the notebook, every file that was read for it, and results.json
}

// maxFaults is how many faults of a notebook are told before the rest is
// only counted.
const maxFaults = 50

// Evaluate evaluates a notebook. The error is a profile.Faults: those of the
// notebook, or of the profile files it names.
func Evaluate(nb *Notebook, opt Options) (*Report, error) {
	h := nb.Header
	ev := &evaluation{
		faultList: &faultList{file: nb.File}, nb: nb, opt: opt, system: h.Units,
		doc: &report.Document{
			Title: h.Title, Subject: "Seismic site classification", Author: h.PreparedBy,
			Keywords: []string{"site class", "shear-wave velocity", "Vs30"},
			Project:  h.Project, Reference: h.Reference, Revision: h.Revision, Date: h.Date,
			Generator: opt.Version,
		},
		figureNames: map[string]bool{}, imageNames: map[string]bool{}, footnotes: map[string]int{},
		named: map[string]Quantity{},
	}
	ev.findCodes()
	ev.load()
	if len(ev.faults) > 0 {
		return nil, ev.faults
	}
	ev.doc.Blocks = ev.withCaution(ev.convert(nb.body))
	if n := len(ev.faults); n > maxFaults {
		ev.faults = append(ev.faults[:maxFaults], profile.Faultf(profile.Place{File: nb.File}, "mend these first", "%d more faults", n-maxFaults))
	}
	if len(ev.faults) > 0 {
		return nil, ev.faults
	}
	if ev.doc.Title == "" {
		ev.doc.Title = firstHeading(ev.doc.Blocks)
	}
	bundle, err := ev.bundle()
	if err != nil {
		return nil, err
	}
	ev.printDigests(bundle.Manifest)
	return &Report{Document: ev.doc, Results: ev.results, Letter: h.Letter, Evidence: bundle}, nil
}

// evaluation is the state of evaluating one notebook.
type evaluation struct {
	*faultList
	nb     *Notebook
	opt    Options
	system System
	doc    *report.Document

	own     []ownTable        // the notebook's own tables, in the order of the front matter
	chosen  []*siteclass.Code // the codes of the front matter, in its order
	sites   []*site           // in the order of the front matter
	results []report.Result
	named   map[string]Quantity // results that calc and average named

	files       []evidence.File // read for the notebook, each once
	digestLists []*report.Table // of the appendix, filled when all is known

	figureNames map[string]bool
	imageNames  map[string]bool
	footnotes   map[string]int // number of a note, by its text
	cautioned   bool
}

// load reads every profile that the front matter names.
func (ev *evaluation) load() {
	files := map[string][]profile.Profile{}
	for _, e := range ev.nb.Header.Profiles {
		opt := e.Options()
		key := e.File + "\x00" + opt.Key()
		if _, ok := files[key]; !ok {
			files[key] = ev.read(e)
		}
		if p := ev.pick(e, files[key]); p != nil {
			ev.sites = append(ev.sites, ev.newSite(e, p))
		}
	}
}

// read reads one profile file and adds its faults to the notebook's.
func (ev *evaluation) read(e ProfileEntry) []profile.Profile {
	data, err := ev.readFile(e.File, evidence.Profile)
	if err != nil {
		ev.add(e.place, "name a file in the notebook's folder", "profile %q: %s cannot be read: %v", e.Key, e.File, profile.FileError(err))
		return nil
	}
	profiles, err := open.Bytes(e.File, data, e.Options())
	var faults profile.Faults
	switch {
	case errors.As(err, &faults):
		ev.faults = append(ev.faults, faults...)
	case err != nil:
		ev.add(e.place, "", "profile %q: %v", e.Key, err)
	}
	return profiles
}

// pick returns the profile of a file that an entry means, with what the
// notebook states put over what the file states.
func (ev *evaluation) pick(e ProfileEntry, of []profile.Profile) *profile.Profile {
	var found *profile.Profile
	var names []string
	for i := range of {
		names = append(names, of[i].Name)
		if of[i].Name == e.Profile {
			found = &of[i]
		}
	}
	switch {
	case len(of) == 0:
		return nil // its faults are told
	case e.Profile == "" && len(of) == 1:
		found = &of[0]
	case e.Profile == "":
		ev.add(e.place, "add `profile: "+names[0]+"`, or one entry for each of: "+strings.Join(names, ", "),
			"%s holds %d profiles and %q does not say which", e.File, len(of), e.Key)
		return nil
	case found == nil:
		ev.add(e.place, suggest(e.Profile, names), "%s holds no profile %q", e.File, e.Profile)
		return nil
	}
	p := *found
	p.Name = e.Key
	p.Survey.Override(e.Survey)
	if e.Position.Latitude.Known {
		p.Position = e.Position
	}
	p.Notes = append(p.Notes[:len(p.Notes):len(p.Notes)], newDoubts(&p, found)...)
	return &p
}

// newDoubts returns the doubts that the notebook's own statements raise.
func newDoubts(p, asRead *profile.Profile) []profile.Note {
	var fresh []profile.Note
	for _, n := range profile.Doubts(p) {
		if !holds(asRead.Notes, n) {
			fresh = append(fresh, n)
		}
	}
	return fresh
}

// refs returns footnote references for notes; a note that was mentioned
// before keeps its number.
func (ev *evaluation) refs(notes []profile.Note) []report.Inline {
	var out []report.Inline
	for _, n := range notes {
		number, ok := ev.footnotes[n.Text]
		if !ok {
			ev.doc.Footnotes = append(ev.doc.Footnotes, report.Footnote{Blocks: one(para(sentence(n.Text)))})
			number = len(ev.doc.Footnotes)
			ev.footnotes[n.Text] = number
		}
		out = append(out, report.FootnoteRef(number))
	}
	return out
}

// sentence ends a note's text with a full stop.
func sentence(text string) string {
	if text == "" || strings.HasSuffix(text, ".") {
		return text
	}
	return report.Capital(text) + "."
}

func para(text string) *report.Paragraph {
	return &report.Paragraph{Inline: []report.Inline{report.Text(text)}}
}

// withCaution puts the caution behind the first heading or title block of a
// document that does not hold it already. Nothing removes it.
func (ev *evaluation) withCaution(blocks []report.Block) []report.Block {
	if ev.cautioned {
		return blocks
	}
	at := 0
	if len(blocks) > 0 {
		switch blocks[0].(type) {
		case *report.Heading, *report.TitleBlock:
			at = 1
		}
	}
	out := append([]report.Block{}, blocks[:at]...)
	out = append(out, cautionBox())
	return append(out, blocks[at:]...)
}

func cautionBox() report.Block {
	return &report.CautionBox{Blocks: one(para(report.Caution))}
}

func firstHeading(blocks []report.Block) string {
	for _, b := range blocks {
		if h, ok := b.(*report.Heading); ok {
			return report.PlainText(h.Inline)
		}
	}
	return ""
}

// unused returns a name no other file of the output has.
func unused(taken map[string]bool, file, base, ext string) string {
	name := base + ext
	for i := 2; taken[name]; i++ {
		name = base + "-" + strconv.Itoa(i) + ext
	}
	taken[name] = true
	return name
}

// fileName makes a plain file name of a profile's name.
func fileName(name string) string {
	clean := strings.Map(func(r rune) rune {
		switch {
		case r >= 'a' && r <= 'z', r >= 'A' && r <= 'Z', r >= '0' && r <= '9', r == '-', r == '_', r == '.':
			return r
		}
		return '-'
	}, path.Base(name))
	if clean = strings.Trim(clean, "-."); clean == "" {
		return "profile"
	}
	if len(clean) > 60 {
		clean = clean[:60]
	}
	return clean
}
