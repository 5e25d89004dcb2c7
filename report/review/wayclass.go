package review

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
	"shearbook/vs30/siteclass"
)

// classCauses returns the ways in which the claimed class may have come out.
func classCauses(c *Case) []Cause {
	claimed := plainClass(undescribed(plainClass(c.Claim.Class)))
	isClaimed := func(class string) bool { return plainClass(class) == claimed }
	var causes []Cause
	add := func(id, format string, args ...any) {
		causes = append(causes, Cause{ID: id, Text: fmt.Sprintf(format, args...)})
	}
	v, _, _, ok := c.average()
	average := c.Claim.Average
	if ok {
		given := c.Code.ClassOf(v)
		if isClaimed(given) && !isClaimed(c.Decision.Class) {
			add("condition", "the class of the average alone, without what the code asks beside it: %s", overruled(&c.Decision))
		}
		if average.Known() && average.Means(v, 0) && mayBe(c.Code, average.Value, isClaimed) && !isClaimed(given) {
			add("rounded", "the average rounded to %s before it was compared with the bound", average.Text)
		}
		if average.Known() && !average.Means(v, 0) && isClaimed(c.Code.ClassOf(average.Value)) {
			add("average", "the class of the claimed average, which is not that of the layers")
		}
		beside := isClaimed(given) // the average is not the cause
		if class := twinClass(c.Code, v); isClaimed(class) && !beside {
			add("unit-print", "the bounds of the table's print in %s, which are no conversions of those in %s", c.Code.Twin.Unit.Name, c.Code.Unit.Name)
		}
		if class := misread(c.Code, v); isClaimed(class) && !beside {
			add("unit-bounds", "an average in %s held against bounds in %s", otherUnit(c.Code.Unit).Name, c.Code.Unit.Name)
		}
	}
	if c.Under != nil && c.Under.ID != c.Code.ID {
		if class, ok := classUnder(c, c.Under); ok && isClaimed(class) {
			add("other-code", "the class under %s, the code that the claim names", c.Under.Edition)
		}
	}
	barred := ok && average.Known() && average.Means(v, 0) && isClaimed(c.Code.ClassOf(v)) && !isClaimed(c.Decision.Class)
	if barred {
		return first(causes) // the average is right, and what the code asks beside it is the cause
	}
	for _, other := range editions(c.Code) {
		if c.Under != nil && other.ID == c.Under.ID {
			continue
		}
		if class, ok := classUnder(c, other); ok && isClaimed(class) {
			add("edition", "the class under another edition, %s", other.Edition)
		}
	}
	if ok && !average.Known() && !isClaimed(c.Code.ClassOf(v)) {
		for _, step := range []float64{1, 5, 10} {
			if rounded := math.Round(v/c.Code.Unit.Factor/step) * step * c.Code.Unit.Factor; mayBe(c.Code, rounded, isClaimed) {
				add("rounded", "the average rounded to the nearest %s %s before it was compared with the bound", short(step, 0), c.Code.Unit.Name)
				break
			}
		}
		causes = append(causes, classByWays(c, isClaimed)...)
	}
	return first(causes)
}

// mayBe reports whether a row of the table that is claimed holds an average;
// at a bound that may be one of two.
func mayBe(code *siteclass.Code, average float64, isClaimed func(string) bool) bool {
	for i := range code.Bands {
		b := &code.Bands[i]
		if !b.Indicative && !b.Vs.Empty() && isClaimed(b.Class) && b.Vs.Contains(average/code.Unit.Factor) {
			return true
		}
	}
	return isClaimed(code.ClassOf(average))
}

// classByWays are the wrong ways of averaging that lead to the class.
func classByWays(c *Case, isClaimed func(string) bool) []Cause {
	a, ok := newAveraging(c)
	if !ok {
		return nil
	}
	var causes []Cause
	for _, w := range ways {
		if v := w.value(a); v > 0 && !math.IsInf(v, 0) && isClaimed(c.Code.ClassOf(v)) {
			causes = append(causes, Cause{w.id, w.text(a), short(v, 1) + " m/s", true})
		}
	}
	return causes[:min(len(causes), maxLoose)]
}

// overruled words the condition that put a decision into another class than
// that of its average.
func overruled(d *siteclass.Decision) string {
	for _, r := range d.Conditions {
		if r.State == siteclass.Met {
			return r.Condition.Text + " (" + r.Condition.Clause + ")"
		}
	}
	return "what its steps say"
}

// classUnder is the class of the case's profile under another code.
func classUnder(c *Case, code *siteclass.Code) (string, bool) {
	d, err := report.Classify(c.Entry.Profile, code, c.Claim.Stated.facts())
	return d.Class, err == nil
}

// editions are the other built-in codes of the same family: asce-7-10 and
// asce-7-22 of asce-7-16.
func editions(code *siteclass.Code) []*siteclass.Code {
	family := familyOf(code.ID)
	var out []*siteclass.Code
	for _, c := range siteclass.All() {
		if c.ID != code.ID && familyOf(c.ID) == family {
			out = append(out, c)
		}
	}
	return out
}

func familyOf(id string) string {
	if i := strings.LastIndexByte(id, '-'); i > 0 {
		return id[:i]
	}
	return strings.TrimRight(id, "0123456789")
}

// twinClass is the class of an average under the print of the table in the
// other unit; "" where there is none.
func twinClass(code *siteclass.Code, v float64) string {
	if code.Twin.Unit.Name == "" {
		return ""
	}
	bounds := boundsOf(code)
	if len(bounds) != len(code.Twin.Bounds) {
		return ""
	}
	twin := *code
	twin.Unit = code.Twin.Unit
	twin.Bands = slices.Clone(code.Bands)
	for i := range twin.Bands {
		for _, l := range []*siteclass.Limit{&twin.Bands[i].Vs.Lower, &twin.Bands[i].Vs.Upper} {
			if at := slices.Index(bounds, l.Value); l.Op != siteclass.Open && at >= 0 {
				l.Value = code.Twin.Bounds[at]
			}
		}
	}
	return twin.ClassOf(v)
}

// boundsOf are the bounds of the velocity column from stiff to soft, each
// once.
func boundsOf(code *siteclass.Code) []float64 {
	var bounds []float64
	for _, b := range code.Bands {
		if b.Indicative {
			continue
		}
		for _, l := range []siteclass.Limit{b.Vs.Lower, b.Vs.Upper} {
			if l.Op != siteclass.Open && !slices.Contains(bounds, l.Value) {
				bounds = append(bounds, l.Value)
			}
		}
	}
	slices.Sort(bounds)
	slices.Reverse(bounds)
	return bounds
}

// misread is the class of an average whose number was held against bounds in
// another unit.
func misread(code *siteclass.Code, v float64) string {
	other := otherUnit(code.Unit)
	return code.ClassOf(v / other.Factor * code.Unit.Factor)
}

func otherUnit(u profile.Unit) profile.Unit {
	if u.Name == profile.FootPerSecond.Name {
		return profile.MetrePerSecond
	}
	return profile.FootPerSecond
}

// extensionCauses returns the ways in which a profile that is too short may
// have been averaged all the same.
func extensionCauses(c *Case) []Cause {
	if c.Carried == nil {
		return nil
	}
	a := &averaging{Case: c, all: c.layers(), from: c.Carried.Datum, thickness: c.Carried.Thickness}
	average := c.Claim.Average
	agrees := func(v float64) bool {
		if average.Known() {
			return fits(average, v)
		}
		return v > 0 && plainClass(c.Code.ClassOf(v)) == plainClass(c.Claim.Class)
	}
	var causes []Cause
	add := func(id, text string, v float64) {
		if agrees(v) {
			causes = append(causes, Cause{id, text, average.in(v), !average.Known()})
		}
	}
	for _, id := range report.Extensions() {
		text := "the average carried on by " + id + " without a word"
		if id == constantVelocity {
			text = "the deepest velocity carried on to the averaging depth without a word"
		}
		add(id, text, a.extended(id))
	}
	add("reached-only", "averaged over what was reached, in place of the code's depth", a.overReached())
	end := a.all[len(a.all)-1].Bottom
	mean := a.meanTo(end)
	add("full-over-reached", "the code's depth divided by the travel time of what was reached", a.overReached()*a.thickness/(end-a.from))
	add("reached-arithmetic", "the arithmetic mean by thickness of what was reached", mean)
	add("carried-arithmetic", "the arithmetic mean by thickness with the deepest velocity carried on to the averaging depth",
		(mean*(end-a.from)+a.all[len(a.all)-1].VsAt(end)*(a.from+a.thickness-end))/a.thickness)
	slices.SortStableFunc(causes, func(x, y Cause) int { return rank(x) - rank(y) })
	return first(causes)
}

// rank puts the commonest ways first.
func rank(c Cause) int { return slices.Index([]string{"reached-only", constantVelocity}, c.ID) * -1 }

// overReached averages what was reached.
func (a *averaging) overReached() float64 {
	layers := a.all
	end := layers[len(layers)-1].Bottom
	v, err := vs30.Average(layers, a.from, end-a.from)
	if err != nil || math.IsInf(end, 0) || end <= a.from {
		return math.NaN()
	}
	return v
}
