package notebook

import (
	"errors"
	"slices"

	"shearbook/profile"
	"shearbook/report"
)

// OwnWorking is a working that the caller of Evaluate brings, for a notebook
// over data that no front matter names, such as the tables of a batch. It is
// known in that evaluation alone.
type OwnWorking struct {
	Name    string // behind the fence
	Summary string // as of a Working
	Keys    []Key  // those it reads, each a plain text

	// Evaluate returns the blocks in the place of the fence. It gets the value
	// of each key that the fence states. An error becomes a fault at the fence;
	// one made by OwnFault brings its hint.
	Evaluate func(keys map[string]string) ([]report.Block, error)
}

// OwnFault is the error of an own working whose keys are at fault.
func OwnFault(hint, format string, args ...any) error {
	return profile.Faults{profile.Faultf(profile.Place{}, hint, format, args...)}
}

// ParseOwn is Parse for a notebook over its caller's own data: its front
// matter need not name a profile.
func ParseOwn(file string, source []byte) (*Notebook, error) {
	return parse(file, source, true)
}

// ownNamed returns the own working of a name, and false if there is none.
func (ev *evaluation) ownNamed(name string) (OwnWorking, bool) {
	i := slices.IndexFunc(ev.opt.Own, func(w OwnWorking) bool { return w.Name == name })
	if i < 0 {
		return OwnWorking{}, false
	}
	return ev.opt.Own[i], true
}

// evaluateOwn evaluates a caller's working.
func (ev *evaluation) evaluateOwn(w OwnWorking, c call) []report.Block {
	m := ev.keys(c)
	values := map[string]string{}
	for _, k := range w.Keys {
		if m.has(k.Name) {
			values[k.Name] = m.text(k.Name)
		}
	}
	before := len(ev.faults)
	m.rest()
	if len(ev.faults) > before {
		return nil
	}
	blocks, err := w.Evaluate(values)
	var faults profile.Faults
	switch {
	case errors.As(err, &faults):
		for _, f := range faults {
			ev.add(c.at, f.Hint, "working %s: %s", w.Name, f.Text)
		}
	case err != nil:
		ev.add(c.at, "", "working %s: %v", w.Name, err)
	}
	ev.cautioned = ev.cautioned || slices.ContainsFunc(blocks, holdsCaution)
	return blocks
}

// holdsCaution reports whether a block is the caution itself.
func holdsCaution(b report.Block) bool {
	box, ok := b.(*report.CautionBox)
	return ok && slices.ContainsFunc(box.Blocks, func(inside report.Block) bool {
		p, ok := inside.(*report.Paragraph)
		return ok && report.PlainText(p.Inline) == report.Caution
	})
}
