package notebook

import (
	"maps"
	"slices"

	"shearbook/profile"
	"shearbook/report"
)

// Working is one kind of fenced block that is evaluated.
type Working struct {
	// Summary says in one line what the working puts into the report.
	Summary string
	// Keys are the keys it reads, each with what it means.
	Keys []Key
	// Example is a body that works in a notebook with a profile L1.
	Example string

	evaluate func(*evaluation, call) []report.Block
}

// Key is one key of a working.
type Key struct{ Name, Meaning string }

// ofKey is the key that most workings share.
var ofKey = Key{"of", "a profile, or a list of them; all profiles if left out"}

// workings is every working by the name that stands behind its fence.
var workings = map[string]Working{
	"title":      titleWorking,
	"summary":    summaryWorking,
	"survey":     surveyWorking,
	"layers":     layersWorking,
	"figure":     figureWorking,
	"extend":     extendWorking,
	"average":    averageWorking,
	"spread":     spreadWorking,
	"site":       siteWorking,
	"statistics": statisticsWorking,
	"class":      classWorking,
	"conditions": conditionsWorking,
	"compare":    compareWorking,
	"calc":       calcWorking,
	"limits":     limitsWorking,
	"sign-off":   signOffWorking,
	"data":       dataWorking,
}

// WorkingNames returns the names of all workings in alphabetical order.
func WorkingNames() []string { return slices.Sorted(maps.Keys(workings)) }

// WorkingNamed returns the working of a name, and false if there is none.
func WorkingNamed(name string) (Working, bool) {
	w, ok := workings[name]
	return w, ok
}

// call is one fenced block.
type call struct {
	name string
	body string
	at   profile.Place // of its fence
}

// keys reads the body of a working as a YAML mapping.
func (ev *evaluation) keys(c call) mapping {
	return parseMapping(ev.faultList, "working "+c.name, c.body, c.at.Line)
}

// of returns the sites that a working is about.
func (ev *evaluation) of(m *mapping) []*site {
	if m.texts("of") == nil {
		return ev.sites
	}
	return ev.sitesNamed(m, "of")
}

// sitesNamed returns the sites that a key names.
func (ev *evaluation) sitesNamed(m *mapping, key string) []*site {
	var chosen []*site
	for _, name := range m.texts(key) {
		if s := ev.site(name); s != nil {
			chosen = append(chosen, s)
			continue
		}
		m.add(m.at(m.get(key)), suggest(name, ev.siteNames()), "no profile is named %q", name)
	}
	return chosen
}

func (ev *evaluation) site(name string) *site {
	for _, s := range ev.sites {
		if s.profile.Name == name {
			return s
		}
	}
	return nil
}

func (ev *evaluation) siteNames() []string {
	var names []string
	for _, s := range ev.sites {
		names = append(names, s.profile.Name)
	}
	return names
}

// each evaluates f for each site, under a heading of its own where there are
// several.
func (ev *evaluation) each(sites []*site, f func(*site) []report.Block) []report.Block {
	var blocks []report.Block
	for _, s := range sites {
		if len(sites) > 1 {
			blocks = append(blocks, heading(3, "Profile "+s.profile.Name))
		}
		blocks = append(blocks, f(s)...)
	}
	return blocks
}

// eachMeasured is each for the sites whose profile states velocities; of the
// others it says that they do not.
func (ev *evaluation) eachMeasured(sites []*site, f func(*site) []report.Block) []report.Block {
	return ev.each(sites, func(s *site) []report.Block {
		if s.profile.NoVelocity {
			return one(para(report.Capital(noVelocity(s)) + "."))
		}
		return f(s)
	})
}

// measured are the sites whose profile states velocities.
func measured(sites []*site) []*site {
	var out []*site
	for _, s := range sites {
		if !s.profile.NoVelocity {
			out = append(out, s)
		}
	}
	return out
}

// The pieces below are what workings build their blocks from.

func heading(level int, text string) *report.Heading {
	return &report.Heading{Level: level, Inline: words(text)}
}

// words is plain text as inlines.
func words(text string) []report.Inline {
	if text == "" {
		return nil
	}
	return []report.Inline{report.Text(text)}
}

func strong(text string) []report.Inline {
	return []report.Inline{&report.Strong{Inline: words(text)}}
}

// row is a table row of plain cells.
func row(cells ...string) report.TableRow {
	r := report.TableRow{}
	for _, c := range cells {
		r.Cells = append(r.Cells, words(c))
	}
	return r
}

// column is a table column with a plain header.
func column(header string, align report.Align) report.TableColumn {
	return report.TableColumn{Header: words(header), Align: align}
}

// wide is a left-aligned column that takes the space left over.
func wide(header string) report.TableColumn {
	return report.TableColumn{Header: words(header), Wide: true}
}

// length and velocity print a number in the report's unit, without the unit,
// with the decimals it needs: a checker computes with what is printed.
func (ev *evaluation) length(v float64) string {
	return shortest(v/ev.system.length().Factor, 2)
}

func (ev *evaluation) velocity(v float64) string {
	return shortest(v/ev.system.velocity().Factor, 2)
}

// both prints a velocity in the report's unit and in the other system's.
func (ev *evaluation) both(v float64) string {
	return metresPerSecond(v).Print(ev.system) + " (" + metresPerSecond(v).Print(1-ev.system) + ")"
}

// bothLengths prints a length in the report's unit and in the other's.
func (ev *evaluation) bothLengths(v float64) string {
	return ev.length(v) + " " + ev.system.length().Name + " (" +
		shortest(v/(1-ev.system).length().Factor, 1) + " " + (1 - ev.system).length().Name + ")"
}

// below words a datum: "below ground level", "below 2.5 m depth".
func (ev *evaluation) below(datum float64) string {
	if datum == 0 {
		return "below ground level"
	}
	return "below a datum at " + ev.length(datum) + " " + ev.system.length().Name + " depth"
}
