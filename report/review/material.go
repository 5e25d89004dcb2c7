package review

import (
	"fmt"
	"strings"
	"unicode"

	"shearbook/profile"
)

// materialRules are about velocities that the ground cannot have, or seldom
// has.
func materialRules() []Rule {
	return []Rule{
		{ID: "poisson", Weight: Explain, check: poisson,
			Summary: "Vp/Vs is below that of a Poisson's ratio of zero; below 1.1547 it is impossible, and the file is not read",
			Source:  "linear elasticity: ν = (r² − 2) / (2 (r² − 1)), r = Vp/Vs",
			Limits:  []Limit{{"Vp/Vs", 1.4142, "", "the least that is not told", 0}}},
		{ID: "saturation", Weight: Explain, check: saturation, Practice: true,
			Summary: "Vp says that a layer is saturated above the stated water table, or that it is not below it",
			Source:  "ASTM D7400 on P waves in saturated soil (about 1,450 m/s, 4,750 ft/s)",
			Limits: []Limit{{"Vp", 1450, "m/s", "from which soil is saturated", 0},
				{"Vs", 600, "m/s", "up to which a layer counts as soil", 0}}},
		{ID: "soil-window", Weight: Explain, check: soilWindow, Practice: true,
			Summary: "The velocity lies far outside what handbooks give for the described soil",
			Source:  "velocity windows of handbooks, from memory",
			Limits:  []Limit{{"slack", 20, "%", "beyond the window", 0}}},
	}
}

func poisson(x *examination) {
	x.each(func(e *Entry) {
		for i := range e.Profile.Layers {
			l := &e.Profile.Layers[i]
			if !l.Has(profile.GivenVp) || l.Vs <= 0 {
				continue
			}
			if r := l.Vp / max(l.Vs, l.VsBottom); r < x.limit("Vp/Vs")*(1-1e-6) {
				nu := (r*r - 2) / (2 * (r*r - 1))
				x.add(e.layer(i), fmt.Sprintf("Vp/Vs = %s means a Poisson's ratio of %s", short(r, 4), short(nu, 3)), short(r, 4), "at least "+short(x.limit("Vp/Vs"), 4))
			}
		}
	})
}

func saturation(x *examination) {
	x.each(func(e *Entry) {
		water := e.Profile.Survey.WaterTable
		if !water.Known {
			return
		}
		for i := range e.Profile.Layers {
			l := &e.Profile.Layers[i]
			if !l.Has(profile.GivenVp) || max(l.Vs, l.VsBottom) >= x.limit("Vs") {
				continue
			}
			wet := l.Vp >= x.limit("Vp")*(1-noise)
			switch {
			case wet && l.Bottom <= water.Value+profile.Joint:
				x.add(e.layer(i), fmt.Sprintf("Vp of %s says that the soil is saturated, and the layer lies above the water table at %s", speed(l.Vp), metres(water.Value)), "water table "+metres(water.Value), "Vp "+speed(l.Vp))
			case !wet && l.Top >= water.Value-profile.Joint:
				x.add(e.layer(i), fmt.Sprintf("Vp of %s says that the soil is not saturated, and the layer lies below the water table at %s", speed(l.Vp), metres(water.Value)), "water table "+metres(water.Value), "Vp "+speed(l.Vp))
			}
		}
	})
}

// window is a handbook's velocities (m/s) of a soil that is described with
// all of a few words.
type window struct {
	words     string // separated by blanks
	low, high float64
}

// windows are from memory, and serve as warnings alone.
var windows = []window{
	{"peat", 30, 120},
	{"soft clay", 60, 180}, {"firm clay", 150, 400}, {"stiff clay", 150, 400}, {"hard clay", 150, 400},
	{"loose sand", 100, 220}, {"dense sand", 200, 450},
	{"gravel", 250, 700},
	{"till", 350, 900},
	{"weathered rock", 400, 1000},
	{"soft rock", 600, 1500},
	{"hard rock", 1500, 3500},
}

// unlike are words that make a description fit no window.
var unlike = []string{"made", "fill", "loose gravel", "medium", "mixed", "cemented", "landfill"}

// windowOf is the widest window that a description fits, and false where it
// fits none.
func windowOf(description string) (w window, ok bool) {
	words := wordSet(description)
	has := func(all string) bool {
		for word := range strings.FieldsSeq(all) {
			if !words[word] {
				return false
			}
		}
		return true
	}
	for _, u := range unlike {
		if has(u) {
			return window{}, false
		}
	}
	for _, c := range windows {
		if !has(c.words) {
			continue
		}
		if !ok {
			w, ok = c, true
			continue
		}
		w.words += " or " + c.words
		w.low, w.high = min(w.low, c.low), max(w.high, c.high)
	}
	return w, ok
}

// wordSet is the words of a description; a description has a few dozen.
func wordSet(description string) map[string]bool {
	const longest = 1000 // bytes that are looked at
	description = description[:min(len(description), longest)]
	words := map[string]bool{}
	for _, w := range strings.FieldsFunc(strings.ToLower(description), func(r rune) bool { return !unicode.IsLetter(r) }) {
		words[w] = true
	}
	return words
}

func soilWindow(x *examination) {
	slack := x.limit("slack") / 100
	x.each(func(e *Entry) {
		for i := range e.Profile.Layers {
			l := &e.Profile.Layers[i]
			if l.Soil == "" || l.Vs <= 0 {
				continue
			}
			w, ok := windowOf(l.Soil)
			low, high := min(l.Vs, orSame(l.VsBottom, l.Vs)), max(l.Vs, l.VsBottom)
			if ok && (high < w.low*(1-slack) || low > w.high*(1+slack)) {
				x.add(e.layer(i), fmt.Sprintf("%s is far outside what handbooks give for %s, %s to %s m/s", speed(l.Vs), w.words, short(w.low, 0), short(w.high, 0)),
					profile.Quote(l.Soil), speed(l.Vs))
			}
		}
	})
}

func orSame(v, otherwise float64) float64 {
	if v == 0 {
		return otherwise
	}
	return v
}
