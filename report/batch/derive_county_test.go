package batch

import (
	"encoding/csv"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30/siteclass"
)

// county is a batch of an invented county: a river plain of soft ground
// between hills, with holes that fail, that end early, that lie on a bound,
// that are known by a grid alone or not at all.
type county struct {
	rows   []Row
	faults []Fault
	files  [][3]string
}

// newCounty returns the rows of n profiles under the codes. The same call
// gives the same county.
func newCounty(t testing.TB, n int, ids ...string) *county {
	t.Helper()
	rng := rand.New(rand.NewPCG(6, 400))
	c := &county{}
	for i := range n {
		file := fmt.Sprintf("survey/sheet-%02d.csv", i/25+1)
		if i%25 == 0 {
			c.files = append(c.files, [3]string{file, fmt.Sprintf("%064x", 7919*(i+1)), strconv.Itoa(4000 + 13*i)})
		}
		east, north := rng.Float64(), rng.Float64()
		base := Row{File: file, Line: 2 + 11*(i%25), Profile: fmt.Sprintf("HL-%03d", i+1)}
		switch {
		case i%29 == 11:
			base.Position = profile.Position{Easting: profile.Known(math.Round(512000 + 40000*east)), Northing: profile.Known(math.Round(281000 + 30000*north)), EPSG: 28992}
		case i%67 == 5:
		default:
			base.Position = profile.Position{Latitude: profile.Known(math.Round((52.1+0.42*north)*1e5) / 1e5), Longitude: profile.Known(math.Round((5.9+0.8*east)*1e5) / 1e5)}
		}
		river := math.Abs(north - 0.45 - 0.15*math.Sin(5*east))
		softness := math.Exp(-river * river / 0.02)
		top := (170 + 330*(1-softness)) * math.Exp(0.18*rng.NormFloat64())
		p := &profile.Profile{Name: base.Profile, Layers: []profile.Layer{
			{Top: 0, Bottom: 6, Vs: top, Basis: profile.Inverted},
			{Top: 6, Bottom: 18, Vs: top * (1.25 + 0.2*rng.Float64()), Basis: profile.Inverted},
			{Top: 18, Bottom: 40, Vs: top * (1.8 + 0.8*rng.Float64()), Basis: profile.Inverted},
		}}
		if i%13 == 4 {
			p.Layers[1].Vs = top * 0.7
		}
		if i%37 == 9 {
			p.Layers = p.Layers[:2]
		}
		for _, id := range ids {
			c.decide(t, base, p, id)
		}
	}
	c.rows = append(c.rows, Row{File: "survey/scan.pdf", Code: ids[0], Flags: Failed, Faults: 1, Problem: "it is no file of profiles"})
	c.faults = append(c.faults, Fault{Severity: "fault", Place: profile.Place{File: "survey/scan.pdf"}, Text: "it is no file of profiles", Hint: "give a table, AGS4, LAS or JSON"})
	return c
}

// decide adds the row of a profile under a code.
func (c *county) decide(t testing.TB, r Row, p *profile.Profile, id string) {
	t.Helper()
	code, err := siteclass.Find(id)
	if err != nil {
		t.Fatal(err)
	}
	r.Code, r.DepthReached, r.Depth = id, p.DepthReached(), code.Depth
	note := func(flag Flags, id, text string) {
		r.Flags |= flag
		r.Notes++
		c.faults = append(c.faults, Fault{Severity: "note", Place: profile.Place{File: r.File, Line: r.Line}, Profile: r.Profile, Code: code.ID, ID: id, Text: text})
	}
	if p.Layers[1].Vs < p.Layers[0].Vs {
		note(Reversed, "reversal", "a softer layer lies under a stiffer one: "+number(p.Layers[1].Vs, 1)+" m/s from 6 m")
	}
	d, err := report.Classify(p, code, report.Facts{})
	if err != nil {
		r.Flags |= Failed | Shallow
		r.Problem = "the profile ends at " + number(r.DepthReached, 2) + " m and the code averages over 30 m"
		r.Faults = 1
		c.faults = append(c.faults, Fault{Severity: "fault", Place: profile.Place{File: r.File, Line: r.Line}, Profile: r.Profile, Code: code.ID, Text: r.Problem, Hint: "name a relation with --extend"})
		c.rows = append(c.rows, r)
		return
	}
	r.Class, r.Route, r.Velocity, r.Depth, r.Vs30 = d.Class, d.Route, d.Velocity, d.Thickness, d.Velocity
	r.Basis, r.Standing = d.Basis, d.Standing.String()
	if d.Margin != nil {
		r.ToClass, r.Margin = d.Margin.ToClass, d.Margin.Percent
		if math.Abs(r.Margin) <= Near {
			r.Flags |= NearBound
		}
	}
	if len(c.rows)%41 == 3 {
		note(Odd, "thick-layer", "one layer of 22 m makes most of the average")
	}
	c.rows = append(c.rows, r)
}

// number is a number of a table: as few digits as it takes.
func number(v float64, digits int) string {
	p := math.Pow(10, float64(digits))
	return strconv.FormatFloat(math.Round(v*p)/p, 'f', -1, 64)
}

// write writes the tables of the county into a folder with a writer that has
// nothing to do with those of the package.
func (c *county) write(t testing.TB, dir string) {
	t.Helper()
	var summary, faults, sources [][]string
	for _, r := range c.rows {
		summary = append(summary, cellsOf(r))
	}
	for _, f := range c.faults {
		faults = append(faults, []string{f.Severity, f.Place.File, blank(float64(f.Place.Line), 0), blank(float64(f.Place.Column), 0), f.Place.Cell, f.Profile, f.Code, f.ID, f.Text, f.Hint})
	}
	for _, f := range c.files {
		sources = append(sources, f[:])
	}
	writeCSV(t, filepath.Join(dir, Summary), Columns, summary)
	writeCSV(t, filepath.Join(dir, FaultsIn), FaultColumns, faults)
	writeCSV(t, filepath.Join(dir, Sources), SourceColumns, sources)
}

// cellsOf is a row as summary.csv has it.
func cellsOf(r Row) []string {
	known := func(o profile.Optional) string {
		if !o.Known {
			return ""
		}
		return number(o.Value, 9)
	}
	var flags []string
	for i, w := range FlagWords {
		if r.Flags&(1<<i) != 0 {
			flags = append(flags, w)
		}
	}
	margin := blank(r.Margin, 1)
	if r.ToClass != "" {
		margin = number(r.Margin, 1)
	}
	return []string{r.File, blank(float64(r.Line), 0), r.Profile, r.Code, r.Class, r.Route,
		blank(r.Velocity, 1), blank(r.Depth, 2), blank(r.Vs30, 1), blank(r.DepthReached, 2), number(r.Datum, 2),
		r.Basis, r.Standing, r.ToClass, margin, strings.Join(flags, " "), number(float64(r.Notes), 0), number(float64(r.Faults), 0),
		known(r.Position.Latitude), known(r.Position.Longitude), known(r.Position.Easting), known(r.Position.Northing),
		blank(float64(r.Position.EPSG), 0), r.Problem, r.Report}
}

func blank(v float64, digits int) string {
	if v == 0 {
		return ""
	}
	return number(v, digits)
}

func writeCSV(t testing.TB, path string, columns []Column, rows [][]string) {
	t.Helper()
	f, err := os.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	w := csv.NewWriter(f)
	names := make([]string, len(columns))
	for i, c := range columns {
		names[i] = c.Name
	}
	w.Write(names)
	w.WriteAll(rows)
	if err := w.Error(); err != nil {
		t.Fatal(err)
	}
}
