package report

import (
	"errors"
	"fmt"
	"slices"
	"strings"
	"unicode"

	"shearbook/profile"
	"shearbook/vs30"
	"shearbook/vs30/siteclass"
)

// symbols are those of small letters that a text may begin with. Qt is another
// quantity than qt.
var symbols = []string{"qt", "qc", "qu", "fs", "u2", "u0", "su", "cu", "vs", "vs,30", "w"}

// Capital is text with its first letter in upper case; a symbol such as v̄s or qt
// stays as it is.
func Capital(text string) string {
	r := []rune(text)
	first, _, _ := strings.Cut(text, " ")
	if len(r) == 0 || len(r) > 1 && unicode.Is(unicode.Mn, r[1]) || slices.Contains(symbols, first) {
		return text
	}
	return strings.ToUpper(string(r[:1])) + string(r[1:])
}

// Failure is why Classify gave no class, as the fault of the profile at its
// lowest layer.
func Failure(p *profile.Profile, code *siteclass.Code, err error) profile.Fault {
	at := profile.Place{}
	if p.Reading != nil {
		last := p.Layers[len(p.Layers)-1]
		at = p.Reading.Place(int(last.Line), int(last.Column))
	}
	var short *vs30.ShortError
	if !errors.As(err, &short) {
		return profile.Faultf(at, "", "%s", err)
	}
	hint := "add --extend constant-velocity if the lowest velocity may be taken to continue, or survey deeper"
	if p.NoVelocity {
		hint = "N and su are not carried below their tests: bore deeper, or add --correlate imai-tonouchi-1982 with --extend constant-velocity if velocities may be estimated so"
	}
	return profile.Fault{Place: at, Hint: hint,
		Text: fmt.Sprintf("profile %q reaches %.4g m below ground level; %s needs %.4g m", p.Name, short.Reached, code.ID, short.Needed)}
}
