package delimited

import (
	"slices"
	"strings"

	"shearbook/profile"
)

// What a heading that is not read may stand for, or cannot. It serves the hints
// alone, and the refusal of mappings that the heading itself contradicts.

// otherUnits are units of quantities that no table of layers has.
var otherUnits = []string{
	"hz", "khz", "1/s", "ms", "msec", "sec", "min", "deg", "°", "rad", "rad/m", "1/m",
	"pa", "gpa", "bar", "tsf", "tsi", "psi", "t/m2", "t/m²", "kgf/cm2", "kgf/cm²", "kg/cm2", "kg/cm²", "kg", "kn", "kn/m3", "kn/m³", "mv", "v", "ohm m", "ohm-m", "ωm", "°c",
}

// contradicts returns the unit that a heading states where it is one that
// quantity q cannot have; "" otherwise. Behind a name without brackets only units
// that are no word of a name count.
func contradicts(text string, q profile.Quantity) string {
	d := q.Dimension()
	base, groups := brackets(text)
	for _, g := range groups {
		if _, ok := unitOf(g, d); ok {
			return ""
		}
	}
	for _, g := range groups {
		for other := profile.Length; other <= profile.Percent; other++ {
			if _, ok := unitOf(g, other); ok && other != d {
				return g
			}
		}
		if g == "s" || slices.Contains(otherUnits, strings.ToLower(g)) {
			return g
		}
	}
	if name, _, _ := cutUnit(base, d); len(groups) > 0 || name != "" {
		return ""
	}
	for _, other := range []profile.Dimension{profile.Stress, profile.MassDensity} {
		if name, _, unit := cutUnit(base, other); name != "" {
			return unit
		}
	}
	return ""
}

// words are the words of a heading, its brackets included, in the form of plain.
func words(text string) []string { return strings.Fields(plain(text)) }

func hasWord(text string, list []string) bool {
	return slices.ContainsFunc(words(text), func(w string) bool { return slices.Contains(list, w) })
}

// elevations are words of headings that give heights and not depths.
var elevations = []string{"elevation", "elev", "elevations", "rl", "od", "mod", "aod", "maod", "ahd", "mahd", "asl", "masl", "amsl", "msl", "altitude", "height", "cota", "quota", "höhe", "hoehe", "kote", "nhn", "reduced"}

// elevation reports whether a heading is one of heights. A level is one unless
// it is the ground's, below which depths are.
func elevation(text string) bool {
	p := plain(text)
	return hasWord(text, elevations) || hasWord(text, []string{"level"}) && !strings.Contains(p, "below")
}

// sideways are words of lengths that are not down the profile, or are no
// boundaries of layers.
var sideways = []string{
	"easting", "northing", "distance", "chainage", "offset", "spacing", "station", "x", "y", "radius", "diameter", "wavelength", "lambda", "λ",
	"water", "groundwater", "gwl", "gwt", "wt", "error", "uncertainty", "sigma", "accuracy", "tolerance", "width", "length", "settlement", "casing",
}

// notVs are words of velocities that are none of shear waves through one layer,
// and of what is no velocity.
var notVs = []string{
	"vs30", "average", "avg", "mean", "rayleigh", "love", "group", "phase", "modulus", "moduli", "hv", "hvsr", "qc", "qt", "fs", "u2", "cone",
	"compression", "compressional", "vp", "p", "pwave", "density", "stress", "strength", "n60", "sigma", "error", "uncertainty", "std",
	"frequency", "freq", "period", "wavelength", "dispersion", "vr", "vph", "g0", "gmax", "ratio", "sound", "pore",
}

// cannotBeVs reports whether a heading names something that is not Vs.
func cannotBeVs(text string) bool {
	p := " " + plain(text) + " "
	return hasWord(text, notVs) || elevation(text) || strings.Contains(p, " h v ") || strings.Contains(p, " s30 ") || strings.Contains(p, " s 30 ") || strings.Contains(p, " vs 30 ") ||
		contradicts(text, profile.Vs) != "" && slowness(text).Name == "" || statesUnit(text, profile.Length)
}

// cannotBeDepth reports whether a heading names something that is no depth.
func cannotBeDepth(text string) bool {
	return elevation(text) || hasWord(text, sideways) || contradicts(text, profile.Top) != "" || statesUnit(text, profile.Velocity)
}

// Words by which people call what a table of layers has, beside those in names;
// some in languages of their countries (general dictionaries, from memory). Of
// topWords and bottomWords those in the first list outdo those in the second,
// as in "depth to base" and "depth from top".
var (
	topWords = [2][]string{
		{"top", "oberkante", "ok", "techo", "tetto", "toit", "topo"},
		{"from", "start", "von", "ab", "da", "de", "desde", "od", "van", "du"},
	}
	bottomWords = [2][]string{
		{"bottom", "base", "unterkante", "uk", "muro", "letto", "mur", "fondo"},
		{"to", "end", "until", "bis", "hasta", "fino", "até", "do", "tot", "jusqu", "à", "au"},
	}
	thicknessWords = []string{"thickness", "mächtigkeit", "maechtigkeit", "dicke", "schichtdicke", "épaisseur", "epaisseur", "espesor", "spessore", "espessura", "dikte"}
	depthWords     = []string{"depth", "tiefe", "teufe", "profondeur", "profundidad", "profondità", "profondita", "profundidade", "diepte"}
	speedWords     = []string{
		"speed", "swave", "mps", "scherwellengeschwindigkeit", "geschwindigkeit", "scherwelle", "vitesse", "cisaillement", "velocidad", "velocità", "velocita",
		"velocidade", "corte", "cizalla", "taglio", "golfsnelheid",
	}
)

// boundary is what of a layer a heading of depths may give: its top, bottom or
// thickness, or Depth if it does not say.
func boundary(text string) profile.Quantity {
	if hasWord(text, thicknessWords) {
		return profile.Thickness
	}
	for i := range topWords {
		top, bottom := hasWord(text, topWords[i]), hasWord(text, bottomWords[i])
		switch {
		case bottom && !top:
			return profile.Bottom
		case top && !bottom:
			return profile.Top
		}
	}
	return profile.Depth
}

// mayBeDepth reports whether a heading that is not read may be one of depths or
// thicknesses: by its unit, or by its words.
func mayBeDepth(text string) bool {
	if len(text) > longestHeading || cannotBeDepth(text) {
		return false
	}
	return statesUnit(text, profile.Length) || hasWord(text, depthWords) || hasWord(text, thicknessWords) || boundary(text) != profile.Depth && len(words(text)) <= 4
}

// depthItems suggests which headings are the top and the bottom of the layers,
// or their thickness; none if none looks so.
func depthItems(unread []string) (items []suggestion, others []string) {
	var list []string
	for _, text := range unread {
		if mayBeDepth(text) {
			list = append(list, text)
		}
	}
	if len(list) == 0 {
		return nil, nil
	}
	first := func(q profile.Quantity) int {
		return slices.IndexFunc(list, func(text string) bool { return boundary(text) == q })
	}
	top, bottom := first(profile.Top), first(profile.Bottom)
	plainDepths := slices.DeleteFunc(slices.Clone(list), func(text string) bool { return boundary(text) != profile.Depth })
	switch {
	case top >= 0 && bottom >= 0:
		items = []suggestion{topItem(list[top]), bottomItem(list[bottom])}
	case first(profile.Thickness) >= 0:
		items = []suggestion{{"thickness", list[first(profile.Thickness)], "the thickness of each layer", "m"}}
	case bottom >= 0:
		items = []suggestion{bottomItem(list[bottom])}
	case top >= 0 && len(plainDepths) > 0:
		items = []suggestion{topItem(list[top]), bottomItem(plainDepths[0])}
	case top >= 0:
		items = []suggestion{topItem(list[top])}
	case len(plainDepths) == 2:
		items = []suggestion{topItem(plainDepths[0]), bottomItem(plainDepths[1])}
	default:
		items = []suggestion{{"depth", plainDepths[0], "the top or the bottom of each layer", "m"}}
	}
	for _, text := range list {
		if !slices.ContainsFunc(items, func(s suggestion) bool { return s.heading == text }) {
			others = append(others, text)
		}
	}
	return items, others
}

func topItem(text string) suggestion { return suggestion{"top", text, "the top of each layer", "m"} }
func bottomItem(text string) suggestion {
	return suggestion{"bottom", text, "the bottom of each layer", "m"}
}

// suggestion is an item of a mapping that a hint offers.
type suggestion struct {
	word, heading, what string
	unit                string // added where the heading states none
}

// item is the item as it is written.
func (s suggestion) item() string {
	item := s.word + "=" + s.heading
	d := named(s.word).quantity.Dimension()
	if !statesUnit(s.heading, d) && (d != profile.Velocity || slowness(s.heading).Name == "") {
		item += " [" + s.unit + "]"
	}
	return strings.NewReplacer(`"`, "", `\`, "").Replace(item)
}

// mapHint asks whether headings are what they look like and gives the mapping
// that says so, as words for a shell and for a notebook.
func mapHint(list []suggestion) string {
	var items, words, questions []string
	for _, s := range list {
		items = append(items, s.item())
		words = append(words, "--map "+profile.ShellWord(s.item()))
		questions = append(questions, quote(s.heading)+" "+s.what)
	}
	return "is " + strings.Join(questions, ", and ") + "? then add " + strings.Join(words, " ") +
		", or `map: [\"" + strings.Join(items, `", "`) + "\"]` to the profile in a notebook"
}

// bottomsUnread refuses tops alone beside a column that was not read and looks
// as if it gave the bottoms: without it the last layer would be a half-space that
// nobody measured.
func (r *reader) bottomsUnread() bool {
	if !r.has(profile.Top) || r.has(profile.Bottom) || r.has(profile.Thickness) {
		return true
	}
	for i := range r.columns.list {
		c := &r.columns.list[i]
		if c.quantity != profile.Unknown || c.text == "" || len(c.text) > longestHeading || cannotBeDepth(c.text) {
			continue
		}
		_, inRow := unitOf(c.unitText, profile.Length)
		if known := parseHeading(c.text); !statesUnit(c.text, profile.Length) && !(inRow && c.unitText != "") || known.quantity == profile.Top && !known.depth {
			continue
		}
		item := bottomItem(c.text)
		if boundary(c.text) == profile.Thickness {
			item = suggestion{"thickness", c.text, "the thickness of each layer", "m"}
		}
		r.fault(c.spot, mapHint([]suggestion{item})+"; if it is neither top nor bottom, leave the column out",
			"only tops are read, and column %s, a length, is not: the last layer would have no bottom", quote(c.name))
		return false
	}
	return true
}
