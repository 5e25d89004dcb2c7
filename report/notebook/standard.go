package notebook

import (
	"errors"
	"slices"
	"strconv"
	"strings"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/templates"
)

// Standard is what the standard template's front matter is filled with.
type Standard struct {
	Profile           string // of the file, the one to report; "" for every one
	Extract           bool   // the file is the rows of one profile of a larger table, and the report says so
	Codes             []string
	CodeFiles         []string         // files of tables of their own, as ReadFile knows them
	Read              open.Options     // how to read the file
	Datum, Foundation profile.Optional // m below ground level
	Project           string
	PreparedBy        string
	Date              string
}

// StandardFile is the name under which the standard template appears in
// faults and in the appendix.
const StandardFile = "standard report template"

// NewStandard returns the standard notebook of every profile of a file, or of
// the one that is named. The error is a profile.Faults.
func NewStandard(file string, data []byte, s Standard) (*Notebook, error) {
	profiles, err := open.Bytes(file, data, s.Read)
	if err != nil {
		return nil, err
	}
	if s.Profile != "" {
		profiles = slices.DeleteFunc(profiles, func(p profile.Profile) bool { return p.Name != s.Profile })
		if len(profiles) == 0 {
			return nil, profile.Faults{profile.Faultf(profile.Place{File: file}, "check the name", "the file holds no profile %s", profile.Quote(s.Profile))}
		}
	}
	if len(profiles) > MaxStandardProfiles {
		return nil, profile.Faults{profile.Faultf(profile.Place{File: file},
			"write a notebook that names the profiles to report",
			"the file holds %d profiles; one report holds at most %d", len(profiles), MaxStandardProfiles)}
	}
	nb, err := Parse(StandardFile, []byte(s.frontMatter(file, profiles)+s.body()))
	if err != nil {
		return nil, errors.Join(errors.New("the standard template is at fault"), err)
	}
	return nb, nil
}

// body is the standard template. What is said of an extract stands above the
// data as read.
func (s Standard) body() string {
	if !s.Extract {
		return templates.Standard
	}
	const at = "```data\n"
	return strings.Replace(templates.Standard, at, extractText+"\n\n"+at, 1)
}

const extractText = "The file is an extract of a table of several profiles: what stands above the table's rows, and the rows of this profile. Its lines, its size and its SHA-256 are the extract's own."

// MaxStandardProfiles is how many profiles one standard report takes.
const MaxStandardProfiles = 50

// frontMatter is the front matter of a standard notebook. Every text is
// written as a double-quoted scalar.
func (s Standard) frontMatter(file string, profiles []profile.Profile) string {
	var b strings.Builder
	b.WriteString("---\ntitle: Seismic site classification\n")
	for _, f := range []struct{ key, value string }{
		{"project", s.Project}, {"prepared by", s.PreparedBy}, {"date", s.Date},
	} {
		if f.value != "" {
			b.WriteString(f.key + ": " + quote(f.value) + "\n")
		}
	}
	codes := slices.Clone(s.Codes)
	for _, file := range s.CodeFiles {
		codes = append(codes, "{file: "+quote(file)+"}")
	}
	b.WriteString("code: [" + strings.Join(codes, ", ") + "]\n")
	if s.Datum.Known {
		b.WriteString("datum: " + metreText(s.Datum.Value) + "\n")
	}
	if s.Foundation.Known {
		b.WriteString("site: {foundation depth: " + metreText(s.Foundation.Value) + "}\n")
	}
	b.WriteString("profiles:\n")
	for _, p := range profiles {
		b.WriteString("  " + quote(p.Name) + ": {file: " + quote(file) + ", profile: " + quote(p.Name))
		b.WriteString(readKeys(&s.Read))
		b.WriteString("}\n")
	}
	b.WriteString("---\n\n")
	return b.String()
}

// readKeys are the keys of a profile that say how to read its file.
func readKeys(o *open.Options) string {
	var b strings.Builder
	key := func(is bool, name, value string) {
		if is {
			b.WriteString(", " + name + ": " + value)
		}
	}
	var bounds []string
	for _, z := range o.Bounds {
		bounds = append(bounds, metreText(z))
	}
	key(o.Units != "", "units", quote(o.Units))
	key(len(o.Map) > 0, "map", "["+quoteAll(o.Map)+"]")
	key(o.Step != 0, "step", metreText(o.Step))
	key(len(bounds) > 0, "bounds", "["+strings.Join(bounds, ", ")+"]")
	key(o.CarryUp != 0, "carry up", metreText(o.CarryUp))
	key(o.LogDatum != 0, "log datum", metreText(o.LogDatum))
	key(o.N60, "n60", "yes")
	key(o.AllHoles, "all holes", "yes")
	return b.String() + correlationKeys(&o.Correlate)
}

func metreText(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) + " m" }

func quoteAll(texts []string) string {
	var quoted []string
	for _, t := range texts {
		quoted = append(quoted, quote(t))
	}
	return strings.Join(quoted, ", ")
}

// quote writes text as a double-quoted YAML scalar.
func quote(text string) string {
	var b strings.Builder
	b.WriteByte('"')
	for _, r := range text {
		switch {
		case r == '"' || r == '\\':
			b.WriteByte('\\')
			b.WriteRune(r)
		case r < 0x20 || r == 0x7f:
			b.WriteString(`\x` + strconv.FormatInt(int64(r)+0x100, 16)[1:])
		default:
			b.WriteRune(r)
		}
	}
	b.WriteByte('"')
	return b.String()
}
