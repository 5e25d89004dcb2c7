package siteclass

import (
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"strconv"
	"testing"

	"github.com/google/go-cmp/cmp"

	"shearbook/profile"
	"shearbook/vs30"
)

// timed are the codes that decide by velocities.
func timed() []*Code {
	return slices.DeleteFunc(All(), func(c *Code) bool { return !c.routes()[0].has(AverageVs) })
}

// columned are the codes with a velocity column whose bands are their
// classes: uniform ground of a velocity is in the band that has it.
func columned() []*Code {
	return slices.DeleteFunc(All(), func(c *Code) bool { return len(c.bounds()) == 0 || len(c.Rules) > 0 || c.ID == "ncse-02" })
}

// averaging are the codes by velocity that set the depth to average over.
func averaging() []*Code {
	return slices.DeleteFunc(timed(), func(c *Code) bool { return c.Depth == 0 })
}

// transcribeRules adds the tables of the rules and terms, where there are any.
func transcribeRules(c *Code, out transcription) {
	for i, u := range c.Rules {
		start := []string{strconv.Itoa(i + 1), u.Class}
		end := []string{u.Clause, words(u.Indicative, "indicative", false, ""), u.Standing.String()}
		if len(u.Asks) == 0 {
			out["Rules"] = append(out["Rules"], slices.Concat(start, make([]string, 6), end))
		}
		for _, a := range u.Asks {
			out["Rules"] = append(out["Rules"], slices.Concat(start, []string{a.Of}, cells(a.Range), []string{a.Unit.Name}, end))
		}
	}
	for _, t := range c.Terms {
		out["Terms"] = append(out["Terms"], slices.Concat([]string{t.ID}, cells(t.Range), []string{t.Unit.Name, t.Clause, t.Standing.String()}))
	}
}

// TestMissingRuleIsFound takes out each rule, limit and term in turn.
func TestMissingRuleIsFound(t *testing.T) {
	for _, build := range builders {
		if build().Adopts != "" {
			continue
		}
		second := readTranscription(t, build().ID)
		found := func(c *Code, what string, i int) {
			if cmp.Equal(second, transcribe(c), equateEmpty) {
				t.Errorf("%s: missing %s %d is not found", c.ID, what, i)
			}
		}
		for i := range build().Rules {
			c := build()
			c.Rules = slices.Delete(c.Rules, i, i+1)
			found(c, "rule", i)
			for k := range build().Rules[i].Asks {
				c := build()
				c.Rules[i].Asks = slices.Delete(c.Rules[i].Asks, k, k+1)
				found(c, "limit of rule", i)
			}
		}
		for i := range build().Terms {
			c := build()
			c.Terms = slices.Delete(c.Terms, i, i+1)
			found(c, "term", i)
		}
	}
}

// TestNothingInfinite: whatever the ground, a decision's numbers are finite:
// half-spaces go on without end, and no depth or period may.
func TestNothingInfinite(t *testing.T) {
	random := rand.New(rand.NewPCG(3, 9))
	for range 1000 {
		site := randomSite(random)
		for _, c := range timed() {
			d := decide(t, c.ID, site)
			finite := d.Velocity >= 0 && d.Thickness > 0 && d.Velocity < profile.MaxVelocity && d.Thickness < profile.MaxDepth
			for _, f := range d.Found {
				finite = finite && f.Value >= 0 && f.Value < profile.MaxDepth
			}
			for _, s := range d.Steps {
				finite = finite && !math.IsInf(s.Value, 0)
			}
			if !finite {
				t.Fatalf("%s: %v m/s over %v m, %+v, %v", c.ID, d.Velocity, d.Thickness, d.Found, d.Steps)
			}
		}
	}
}

// TestDatumBelowTheProfile: nothing is left to look at, and the error says
// so.
func TestDatumBelowTheProfile(t *testing.T) {
	for _, layers := range [][]profile.Layer{column(12, 200, 18, 400), column(30, 900), column(10, 200, 20, 1200)} {
		for _, from := range []float64{30, 30 + 1e-10, 31, 1e6} {
			site := siteOf(layers...)
			site.Datum = profile.Known(from)
			for _, c := range timed() {
				_, err := c.Decide(site)
				var short *vs30.ShortError
				if !errors.As(err, &short) {
					t.Errorf("%s, from %v m: %v", c.ID, from, err)
				}
			}
		}
	}
}
