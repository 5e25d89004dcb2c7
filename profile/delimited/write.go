package delimited

import (
	"bufio"
	"encoding/csv"
	"fmt"
	"io"
	"strconv"
	"strings"
	"unicode"

	"shearbook/profile"
)

// Write writes profiles as a table that Read reads back: comma-separated, in
// UTF-8, lengths in m and velocities in m/s, a column for each optional
// quantity that any layer states, and above the header what is known of the
// survey. What is the same for all profiles is written once. Numbers have the
// fewest digits that give the same value again. What a profile says of the
// file it was read from, and its notes, are not written.
//
// The error is that of w; or it names a profile that Read would refuse: one
// that profile.Validate finds faulty, or whose name is blank, not plain text
// or that of another.
func Write(w io.Writer, profiles []profile.Profile) error {
	if err := writable(profiles); err != nil {
		return err
	}
	buffered := bufio.NewWriter(w)
	writePreamble(buffered, profiles)
	table := csv.NewWriter(buffered)
	fields := statedFields(profiles)
	record := make([]string, len(fields))
	for i, f := range fields {
		record[i] = f.heading
	}
	table.Write(record) // its error is kept for Error
	for i := range profiles {
		p := &profiles[i]
		for j := range p.Layers {
			for k, f := range fields {
				record[k] = f.text(p, &p.Layers[j])
			}
			table.Write(record)
		}
	}
	table.Flush()
	if err := table.Error(); err != nil {
		return err
	}
	return buffered.Flush()
}

func writable(profiles []profile.Profile) error {
	names := map[string]bool{}
	for i := range profiles {
		p := &profiles[i]
		switch {
		case p.Name == "" || p.Name != oneLine(p.Name):
			return fmt.Errorf("the name %s of profile %d is blank or not one line of plain text", quote(p.Name), i+1)
		case names[p.Name]:
			return fmt.Errorf("two profiles have the name %s", quote(p.Name))
		case p.NoVelocity != profiles[0].NoVelocity:
			return fmt.Errorf("profile %s and profile %s cannot share a table: only one of them states velocities", quote(p.Name), quote(profiles[0].Name))
		}
		names[p.Name] = true
		if faults := profile.Validate(p); len(faults) > 0 {
			return fmt.Errorf("profile %s: %w", quote(p.Name), faults)
		}
	}
	return nil
}

// field is one column of the table.
type field struct {
	heading string
	stated  func(*profile.Layer) bool // nil for a column that is always there
	text    func(*profile.Profile, *profile.Layer) string
}

// fields are the columns in their order.
var fields = []field{
	{"profile", nil, func(p *profile.Profile, _ *profile.Layer) string { return p.Name }},
	{"top_m", nil, func(_ *profile.Profile, l *profile.Layer) string { return digits(l.Top) }},
	{"bottom_m", nil, func(_ *profile.Profile, l *profile.Layer) string {
		if l.HalfSpace() {
			return ""
		}
		return digits(l.Bottom)
	}},
	{"vs_mps", func(l *profile.Layer) bool { return l.Vs != 0 }, func(_ *profile.Profile, l *profile.Layer) string { return digits(l.Vs) }},
	{
		"vs_bottom_mps",
		func(l *profile.Layer) bool { return l.VsBottom != 0 },
		func(_ *profile.Profile, l *profile.Layer) string {
			if l.VsBottom == 0 {
				return ""
			}
			return digits(l.VsBottom)
		},
	},
	optional("vp_mps", profile.GivenVp, func(l *profile.Layer) float64 { return l.Vp }),
	optional("density_kg_m3", profile.GivenDensity, func(l *profile.Layer) float64 { return l.Density }),
	optional("sigma_ln_vs", profile.GivenSigma, func(l *profile.Layer) float64 { return l.SigmaLnVs }),
	optional("n", profile.GivenN, func(l *profile.Layer) float64 { return l.N }),
	optional("su_kpa", profile.GivenSu, func(l *profile.Layer) float64 { return l.Su }),
	optional("pi_pct", profile.GivenPI, func(l *profile.Layer) float64 { return l.PI }),
	optional("water_content_pct", profile.GivenWaterContent, func(l *profile.Layer) float64 { return l.WaterContent }),
	{
		"refusal",
		func(l *profile.Layer) bool { return l.Refusal },
		func(_ *profile.Profile, l *profile.Layer) string {
			if l.Refusal {
				return "yes"
			}
			return ""
		},
	},
	{
		"basis",
		func(l *profile.Layer) bool { return l.Basis != profile.BasisNotStated },
		func(_ *profile.Profile, l *profile.Layer) string {
			if l.Basis == profile.BasisNotStated {
				return ""
			}
			return l.Basis.String()
		},
	},
	{
		"soil",
		func(l *profile.Layer) bool { return l.Soil != "" },
		func(_ *profile.Profile, l *profile.Layer) string { return oneLine(l.Soil) },
	},
}

// optional is the column of an optional quantity.
func optional(heading string, g profile.Given, value func(*profile.Layer) float64) field {
	return field{
		heading,
		func(l *profile.Layer) bool { return l.Has(g) },
		func(_ *profile.Profile, l *profile.Layer) string {
			if !l.Has(g) {
				return ""
			}
			return digits(value(l))
		},
	}
}

// statedFields are the columns that some layer needs.
func statedFields(profiles []profile.Profile) []field {
	var stated []field
	for _, f := range fields {
		if f.stated == nil || anyLayer(profiles, f.stated) {
			stated = append(stated, f)
		}
	}
	return stated
}

func anyLayer(profiles []profile.Profile, is func(*profile.Layer) bool) bool {
	for i := range profiles {
		for j := range profiles[i].Layers {
			if is(&profiles[i].Layers[j]) {
				return true
			}
		}
	}
	return false
}

// digits is a number with the fewest digits that give it again.
func digits(x float64) string {
	if x != 0 && (x < 1e-6 || x >= 1e15) {
		return strconv.FormatFloat(x, 'e', -1, 64)
	}
	return strconv.FormatFloat(x, 'f', -1, 64)
}

// oneLine is text without line ends, characters that cannot be printed, and
// blanks at its ends or side by side.
func oneLine(text string) string {
	text = strings.Map(func(r rune) rune {
		if r == '\u007f' || r < ' ' && !unicode.IsSpace(r) {
			return -1
		}
		return r
	}, strings.ToValidUTF8(text, "\ufffd"))
	return strings.Join(strings.Fields(text), " ")
}

// writePreamble writes what is known of the surveys. What all profiles state
// alike stands without a name.
func writePreamble(w *bufio.Writer, profiles []profile.Profile) {
	for _, k := range surveyKeys {
		if len(profiles) == 0 {
			return
		}
		common, same := k.text(&profiles[0]), true
		for i := range profiles {
			same = same && k.text(&profiles[i]) == common
		}
		if same {
			writeLine(w, "", k.key, common)
			continue
		}
		for i := range profiles {
			writeLine(w, "["+profiles[i].Name+"] ", k.key, k.text(&profiles[i]))
		}
	}
}

// writeLine writes one line above the header, quoted where it would not come
// back as it is.
func writeLine(w *bufio.Writer, name string, k key, value string) {
	if value == "" {
		return
	}
	line := "# " + name + string(k) + ": " + value
	if strings.ContainsAny(line, `",;`) {
		line = `"` + strings.ReplaceAll(line, `"`, `""`) + `"`
	}
	w.WriteString(line + "\n") // its error is kept for Flush
}

// surveyKeys are the lines above the header in their order.
var surveyKeys = []struct {
	key  key
	text func(*profile.Profile) string
}{
	{keyMethod, func(p *profile.Profile) string { return oneLine(p.Survey.Method) }},
	{keyBasis, func(p *profile.Profile) string {
		if p.Survey.Basis == profile.BasisNotStated {
			return ""
		}
		return p.Survey.Basis.String()
	}},
	{keyDate, func(p *profile.Profile) string { return oneLine(p.Survey.Date) }},
	{keyOperator, func(p *profile.Profile) string { return oneLine(p.Survey.Operator) }},
	{keyLocation, func(p *profile.Profile) string { return oneLine(p.Survey.Location) }},
	{keyLatitude, func(p *profile.Profile) string { return known(p.Position.Latitude, "") }},
	{keyLongitude, func(p *profile.Profile) string { return known(p.Position.Longitude, "") }},
	{keyGroundLevel, func(p *profile.Profile) string { return known(p.Survey.GroundLevel, " m") }},
	{keyWaterTable, func(p *profile.Profile) string { return known(p.Survey.WaterTable, " m") }},
	{keyDepthReached, func(p *profile.Profile) string {
		return known(profile.Optional{Value: p.Survey.DepthReached, Known: p.Survey.DepthReached > 0}, " m")
	}},
}

// known is a number with its unit, "" if it is not known.
func known(x profile.Optional, unit string) string {
	if !x.Known {
		return ""
	}
	return strconv.FormatFloat(x.Value, 'f', -1, 64) + unit
}
