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
	Codes             []string
	CodeFiles         []string         // files of tables of their own, as ReadFile knows them
	Units             string           // that the file does not state
	Map               []string         // of its columns
	Datum, Foundation profile.Optional // m below ground level
	Project           string
	PreparedBy        string
	Date              string
}

// StandardFile is the name under which the standard template appears in
// faults and in the appendix.
const StandardFile = "standard report template"

// NewStandard returns the standard notebook of every profile of a file. The
// error is a profile.Faults.
func NewStandard(file string, data []byte, s Standard) (*Notebook, error) {
	profiles, err := open.Bytes(file, data, open.Options{Units: s.Units, Map: s.Map})
	if err != nil {
		return nil, err
	}
	if len(profiles) > MaxStandardProfiles {
		return nil, profile.Faults{profile.Faultf(profile.Place{File: file},
			"write a notebook that names the profiles to report",
			"the file holds %d profiles; one report holds at most %d", len(profiles), MaxStandardProfiles)}
	}
	nb, err := Parse(StandardFile, []byte(s.frontMatter(file, profiles)+templates.Standard))
	if err != nil {
		return nil, errors.Join(errors.New("the standard template is at fault"), err)
	}
	return nb, nil
}

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
		if s.Units != "" {
			b.WriteString(", units: " + quote(s.Units))
		}
		if len(s.Map) > 0 {
			b.WriteString(", map: [" + quoteAll(s.Map) + "]")
		}
		b.WriteString("}\n")
	}
	b.WriteString("---\n\n")
	return b.String()
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
