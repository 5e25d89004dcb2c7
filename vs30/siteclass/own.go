package siteclass

import "slices"

// Own says of a code that it is no published one but a jurisdiction's own
// table, read from a file.
type Own struct {
	AdoptedBy string // who adopted the table, as its file says; "" where it does not say
	Edition   string // as the file has it; Code.Edition says beside it whose table it is
	File      string // as the user named it
}

// String says whose table it is: "own table of the Municipality of Orvasta".
func (o *Own) String() string {
	if o.AdoptedBy == "" {
		return "own table of a jurisdiction that its file does not name"
	}
	return "own table of " + o.AdoptedBy
}

// OwnRule reports whether the code decides by a rule of its own, an ordinary
// function beside its table, and not by bands and conditions alone. Its
// table without that rule would decide otherwise.
func (c *Code) OwnRule() bool {
	return c.decide != nil || slices.ContainsFunc(c.Routes, func(r Route) bool { return r.decide != nil })
}

// own notes that the table is a jurisdiction's own.
func (r *ruling) own() {
	if o := r.code.Own; o != nil {
		r.note("own-table", "the class table %s is no published code but the %s, read from %s; its bounds, conditions and standing are as that file states them",
			r.code.ID, o, o.File)
	}
}
