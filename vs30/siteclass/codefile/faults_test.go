package codefile

import (
	"errors"
	"fmt"
	"strings"
	"testing"
	"time"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// base is a table without a fault. Its lines are counted below: bands begin
// on line 11.
const base = `id: valley
title: A title
edition: An edition
clause: section 1
table: Table 1
parameter: Vs30
depth: 30 m
unit: m/s
standing: checked
bands:
- {class: A, name: rock, vs: "> 800"}
- {class: B, name: stiff, vs: "300 to 800"}
- {class: C, name: soft, vs: "< 300"}
`

func TestBaseHasNoFault(t *testing.T) {
	c, err := Read("t.yaml", []byte(base))
	if err != nil || c.DepthText != "30 m" || c.Length.Name != "m" || c.Correlated == "" {
		t.Errorf("%v, %+v", err, c)
	}
}

// faultCase is a change of the base in one place and what comes of it.
type faultCase struct {
	name     string
	old, new string   // what is put in place of what; with old "", new stands behind the base
	want     []string // the beginning of each fault
	hint     string   // a part of the first hint
}

// text is the base with the change.
func (c faultCase) text() string {
	if c.old == "" {
		return base + c.new
	}
	return strings.Replace(base, c.old, c.new, 1)
}

// TestFaults changes the base in one place and looks for every fault that
// comes of it, and no other: its place, its words, and its hint.
func TestFaults(t *testing.T) {
	for _, c := range faultCases() {
		if !strings.Contains(base, c.old) {
			t.Fatalf("%s: the base has no %q", c.name, c.old)
		}
		faults := faultsOf(t, c.name, c.text())
		var got []string
		for i, f := range faults {
			got = append(got, f.Error())
			if i < len(c.want) && !strings.HasPrefix(f.Error(), c.want[i]) {
				t.Errorf("%s: fault %d is %q, want %q", c.name, i+1, f.Error(), c.want[i])
			}
		}
		if len(got) != len(c.want) {
			t.Errorf("%s: faults\n\t%s\nwant\n\t%s", c.name, strings.Join(got, "\n\t"), strings.Join(c.want, "\n\t"))
		}
		if len(faults) > 0 && !strings.Contains(faults[0].Hint, c.hint) {
			t.Errorf("%s: hint %q, want %q", c.name, faults[0].Hint, c.hint)
		}
	}
}

func faultsOf(t *testing.T, name, text string) profile.Faults {
	t.Helper()
	c, err := Read("t.yaml", []byte(text))
	var faults profile.Faults
	if !errors.As(err, &faults) || c != nil {
		t.Errorf("%s: no faults, but %v", name, err)
	}
	return faults
}

func TestOutsideClosesTheTableBelow(t *testing.T) {
	text := strings.Replace(base, `"< 300"`, `"100 to 300"`, 1) + "outside: below the table\n"
	c, err := Read("t.yaml", []byte(text))
	if err != nil {
		t.Fatal(err)
	}
	s := site()
	for i := range s.Layers {
		s.Layers[i].Vs = 99
	}
	if d, err := c.Decide(s); err != nil || d.Class != "below the table" {
		t.Errorf("99 m/s is class %q (%v)", d.Class, err)
	}
}

// N and strength below the softest class of their column are of the row below
// it, as Code.LookupIn has it.
func TestRowBelowClosesAColumn(t *testing.T) {
	text := strings.Replace(base, `"300 to 800"`, `"300 to 800", n: "> 15"`, 1) + "routes: [{of: velocity}, {of: N}]\naveraging: {}\n"
	c, err := Read("t.yaml", []byte(text))
	if err != nil {
		t.Fatal(err)
	}
	s := siteclass.Site{Route: "N", Layers: []profile.Layer{{Top: 0, Bottom: 30, Vs: 500, N: 10, Given: profile.GivenN}}}
	if d, err := c.Decide(s); err != nil || d.Class != "C" {
		t.Errorf("N of 10 is class %q (%v)", d.Class, err)
	}
}

// What is too large, or no text, is refused as a whole.
func TestOtherFiles(t *testing.T) {
	band := func(i int) string {
		return fmt.Sprintf("- {class: C%d, name: soil, vs: \"%d to %d\"}\n", i, 10_000-10*i, 10_010-10*i)
	}
	many := strings.Split(base, "- {class: A")[0] + "- {class: A, name: rock, vs: \"> 10010\"}\n"
	for i := range MaxBands {
		many += band(i)
	}
	conditions := base + "conditions:\n" + strings.Repeat("- {fact: liquefiable soil, kind: special study, class: C}\n", MaxConditions+1)
	for name, c := range map[string]struct{ text, want string }{
		"empty":               {"", "t.yaml: the file is empty"},
		"blank":               {" \n\n", "t.yaml: the file is empty"},
		"only a comment":      {"# nothing\n", "t.yaml: the file is not readable YAML"},
		"a list":              {"- a\n- b\n", "t.yaml:1:1: the table is not a list of keys and values"},
		"a word":              {"table", "t.yaml:1:1: the table is not a list of keys and values"},
		"not UTF-8":           {"title: \xff", "t.yaml: the file is not UTF-8 text"},
		"UTF-16":              {"\xff\xfea\x00:\x00 \x00b\x00", "t.yaml: the file is not UTF-8 text"},
		"NUL":                 {base + "region: \x00", "t.yaml"},
		"too large":           {strings.Repeat("#\n", MaxSize), "t.yaml: the file is larger than 1 MiB"},
		"too many lists":      {strings.Repeat("[", 60_000), "t.yaml: the file holds too many lists"},
		"too many bands":      {many, "t.yaml:111:3: bands of the table has more than 100 entries"},
		"too many conditions": {conditions, "t.yaml:115:3: conditions of the table has more than 100 entries"},
	} {
		faults := faultsOf(t, name, c.text)
		if len(faults) != 1 || !strings.HasPrefix(faults[0].Error(), c.want) {
			t.Errorf("%s: %v, want %q", name, faults, c.want)
		}
		if faults[0].Hint == "" {
			t.Errorf("%s: no hint", name)
		}
	}
	if c, err := Read("t.yaml", []byte("\ufeff"+strings.ReplaceAll(base, "\n", "\r\n"))); err != nil || len(c.Bands) != 3 {
		t.Errorf("a byte order mark and CRLF: %v", err)
	}
}

// Many faults are counted and not all told.
func TestManyFaults(t *testing.T) {
	text := base
	for i := range 200 {
		text += fmt.Sprintf("zz%d: 1\n", i)
	}
	faults := faultsOf(t, "many", text)
	if n := len(faults); n != maxFaults+1 || faults[n-1].Text != "150 more faults" {
		t.Errorf("%d faults, the last %v", n, faults[len(faults)-1])
	}
}

// No file of the permitted size takes long: the worst known shapes of YAML,
// as large as they may be.
func TestHostileFilesAreQuick(t *testing.T) {
	for _, shape := range []string{"[", "{", "- ", "? ", "a,", "{a},", "a: b,", "&a ", "*a ", "!a ", "\"", "'", "\\", "k", "#", "\n", "a:\n", "%", "|", "\t", "é", "> ", "[]", "\"\\u00e9"} {
		for _, before := range []string{"", "[", "a: |\n "} {
			text := before + strings.Repeat(shape, (MaxSize-len(before))/len(shape))
			begin := time.Now()
			_, err := Read("t.yaml", []byte(text))
			if err == nil {
				t.Errorf("%q behind %q is a table", shape, before)
			}
			// The slowest takes a fifth of a second on an idle machine.
			if took := time.Since(begin); took > 20*time.Second {
				t.Errorf("%q behind %q takes %v", shape, before, took)
			}
		}
	}
}

func faultCases() []faultCase {
	return []faultCase{
		{"no id", "id: valley\n", "", []string{`t.yaml:1:1: the table does not state "id"`}, "id: halvard-2025"},
		{"blank id", "id: valley", "id: ' '", []string{`t.yaml:1:5: id of the table is blank`}, "write it as `id:"},
		{"id null", "id: valley", "id:", []string{`t.yaml:1:1: the table does not state "id"`}, ""},
		{"id in capitals", "id: valley", "id: Valley", []string{`t.yaml:1:5: the id "Valley" cannot be used`}, "small letters"},
		{"id with a space", "id: valley", "id: my valley", []string{`t.yaml:1:5: the id "my valley" cannot be used`}, ""},
		{"id of a built-in code", "id: valley", "id: asce-7-16", []string{`t.yaml:1:5: the id "asce-7-16" is that of a built-in code`}, "asce-7-16-local"},
		{"unknown key", "clause:", "clauses:", []string{`t.yaml:1:1: the table does not state "clause"`, `t.yaml:4:1: the table has no key "clauses"`}, ""},
		{"nearest key", "", "adoptd by: us\n", []string{`t.yaml:14:1: the table has no key "adoptd by"`}, `did you mean "adopted by"?`},
		{"no near key", "", "zzzzzzzzz: us\n", []string{`t.yaml:14:1: the table has no key "zzzzzzzzz"`}, "known here: id, title"},
		{"key twice", "", "unit: ft/s\n", []string{`t.yaml:14:1: the table states "unit" twice`}, "keep one"},
		{"title is a list", "title: A title", "title: [a]", []string{"t.yaml:2:8: title of the table is not plain text"}, ""},
		{"control character", "title: A title", `title: "a\x07"`, []string{"t.yaml:2:8: title of the table holds a character that cannot be printed"}, ""},
		{"turned text", "title: A title", `title: "a\u202Eb"`, []string{"t.yaml:2:8: title of the table holds a character"}, ""},
		{"long text", "title: A title", "title: " + strings.Repeat("x", MaxText+1), []string{"t.yaml:2:8: title of the table is longer than 2000 characters"}, ""},
		{"depth without a unit", "depth: 30 m", "depth: 30", []string{`t.yaml:7:8: depth of the table: "30" states no unit`}, "depth: 30 m"},
		{"depth in words", "depth: 30 m", "depth: deep", []string{`t.yaml:7:8: depth of the table: "deep" is not a number`}, ""},
		{"depth of seconds", "depth: 30 m", "depth: 30 s", []string{`t.yaml:7:8: depth of the table: "s" is not a unit of length`}, ""},
		{"no depth", "depth: 30 m", "depth: 0", []string{"t.yaml:7:8: depth of the table is not between 0 and 1000 m"}, ""},
		{"depth too deep", "depth: 30 m", "depth: 2 km", []string{`t.yaml:7:8: depth of the table: "km"`}, ""},
		{"depth of 1001 m", "depth: 30 m", "depth: 1001 m", []string{"t.yaml:7:8: depth of the table is not between"}, ""},
		{"negative depth", "depth: 30 m", "depth: -30 m", []string{"t.yaml:7:8: depth of the table is not between"}, ""},
		{"unit of length", "unit: m/s", "unit: m", []string{`t.yaml:8:7: unit of the table, "m", is not a unit of velocity`}, "known: m/s, ft/s, km/s"},
		{"no unit", "unit: m/s\n", "", []string{`t.yaml:1:1: the table does not state "unit"`}, "unit: m/s"},
		{"standing", "standing: checked", "standing: sure", []string{`t.yaml:9:11: standing of the table is "sure"`}, "known here: checked, one source, from memory"},
		{"standing mistyped", "standing: checked", "standing: from memry", []string{`t.yaml:9:11: standing of the table is "from memry"`}, `did you mean "from memory"?`},
		{"datum", "", "datum: roof\n", []string{`t.yaml:14:8: datum of the table is "roof"`}, "known here: not stated, ground surface, foundation"},

		{"no bands", "bands:\n- {class: A, name: rock, vs: \"> 800\"}\n- {class: B, name: stiff, vs: \"300 to 800\"}\n- {class: C, name: soft, vs: \"< 300\"}\n", "", []string{`t.yaml:1:1: the table does not state its "bands"`}, "- {class: A"},
		{"bands are a word", "bands:\n", "bands: none\nnotes:\n", []string{"t.yaml:10:8: band 1 is not a list of keys and values", "t.yaml:12:3: notes of the table is not plain text",
			"t.yaml:13:3: notes", "t.yaml:14:3: notes"}, ""},
		{"no class", "class: A, ", "", []string{`t.yaml:11:3: band 1 does not state "class"`}, "class: C"},
		{"no name", ", name: rock", "", []string{`t.yaml:11:3: class A does not state "name"`}, ""},
		{"key of a band", "name: rock, vs", "name: rock, v", []string{`t.yaml:11:26: class A has no key "v"`}, `did you mean "vs"?`},
		{"class twice", "class: B", "class: A", []string{"t.yaml:12:3: class A stands in the table twice"}, "one entry"},
		{"no operator", `"> 800"`, `800`, []string{`t.yaml:11:30: vs of class A: "800" has a number without an operator`}, `"> 1200"`},
		{"unquoted", `"> 800"`, `> 800`, []string{"t.yaml:11:30: the file is not readable YAML"}, `in quotes, as`},
		{"unit in the cell", `"> 800"`, `"> 800 m/s"`, []string{`t.yaml:11:30: vs of class A has a unit of its own, "m/s"`}, "stated once"},
		{"about", `"> 800"`, `"about > 800"`, []string{`t.yaml:11:30: vs of class A says about`}, ""},
		{"bound of 0", `"< 300"`, `"0 to 300"`, []string{`t.yaml:13:30: vs of class C has the bound 0`}, "leave a bound of 0 out"},
		{"cell is a list", `"> 800"`, `[800]`, []string{`t.yaml:11:30: vs of class A is not plain text`}, ""},
		{"gap", "300 to 800", "300 to 700", []string{"t.yaml:12:31: vs leaves a gap from 700 to 800 between class B and class A"}, "let the two classes meet"},
		{"overlap", "300 to 800", "300 to 900", []string{"t.yaml:12:31: vs from 800 to 900 is in class A and in class B"}, "meet in one value"},
		{"out of order", "300 to 800", "900 to 950", []string{"t.yaml:12:31: vs of class B is no softer than that of class A", "t.yaml:13:30: vs leaves a gap from 300 to 900"}, "stiffest first"},
		{"closed at the top", `"> 800"`, `"800 to 900"`, []string{"t.yaml:11:30: vs of class A, the stiffest, ends at 900"}, ""},
		{"closed below", `"< 300"`, `"100 to 300"`, []string{"t.yaml:13:30: vs of class C, the softest, ends at 100"}, "`outside:`"},
		{"open in the middle", "300 to 800", "< 800", []string{"t.yaml:12:31: vs of class B has no lower bound, and class C stands below it"}, ""},
		{"open above in the middle", "300 to 800", "> 300", []string{"t.yaml:12:31: vs of class B has no upper bound, and class A stands above it"}, ""},
		{"no velocities", "\"> 800\"}\n- {class: B, name: stiff, vs: \"300 to 800\"}\n- {class: C, name: soft, vs: \"< 300\"}", "}", []string{"t.yaml: no class of the table has a range of velocities"}, ""},
		{"N overlaps", "\"300 to 800\"}\n- {class: C, name: soft,", "\"300 to 800\", n: \"> 15\"}\n- {class: C, n: \"< 20\", name: soft,", []string{"t.yaml:13:17: n from 15 to 20 is in class B and in class C"}, ""},
		{"N closed below", `vs: "< 300"`, `vs: "< 300", n: "> 15"`, []string{"t.yaml:13:42: n of class C, the softest, ends at 15"}, "lower bound"},
		{"su without a unit", `vs: "< 300"`, `vs: "< 300", su: "< 50"`, []string{"t.yaml:13:43: class C bounds the strength"}, "strength unit: kPa"},
		{"weak class", `vs: "< 300"`, `vs: "< 300", standing: from memory`, []string{"t.yaml:13:49: class C stands as from memory and the table as checked"}, "weakest"},
		{"yes or no", `vs: "< 300"`, `vs: "< 300", improving: perhaps`, []string{`t.yaml:13:50: improving of class C is "perhaps"`}, "yes, no"},

		{"fact", "", "conditions: [{fact: mud, kind: special study, class: C}]\n", []string{`t.yaml:14:21: fact of condition 1 is "mud"`}, "known here: liquefiable soil"},
		{"kind", "", "conditions: [{fact: liquefiable soil, kind: special, class: C}]\n", []string{`t.yaml:14:45: kind of the condition on liquefiable soil is "special"`}, "known here: special study, soft class, rock barred"},
		{"no fact", "", "conditions: [{kind: special study, class: C}]\n", []string{`t.yaml:14:14: condition 1 does not state "fact"`}, ""},
		{"condition without a class", "", "conditions: [{fact: liquefiable soil, kind: special study}]\n", []string{`t.yaml:14:14: the condition on liquefiable soil does not state "class"`}, ""},
		{"condition with a blank class", "", "conditions: [{fact: liquefiable soil, kind: special study, class: ''}]\n", []string{`t.yaml:14:67: class of the condition on liquefiable soil is blank`}, ""},
		{"blank unit", "unit: m/s", "unit: ''", []string{`t.yaml:8:7: unit of the table is blank`}, "unit: m/s"},
		{"class that is none", "", "conditions: [{fact: liquefiable soil, kind: special study, class: F}]\n", []string{`t.yaml:14:67: class of the condition on liquefiable soil is "F"`}, "A, B, C"},
		{"limits of a yes or no", "", "conditions: [{fact: liquefiable soil, kind: special study, class: C, limits: {thickness: \"> 3 m\"}}]\n", []string{`t.yaml:14:79: limits of the condition on liquefiable soil cannot be "thickness"`}, "leave the limits out"},
		{"limit mistyped", "", "conditions: [{fact: peat, kind: special study, class: C, limits: {thicknes: \"> 3 m\"}}]\n", []string{`t.yaml:14:67: limits of the condition on peat cannot be "thicknes"`}, ""},
		{"limit without a unit", "", "conditions: [{fact: peat, kind: special study, class: C, limits: {thickness: \"> 3\"}}]\n", []string{`t.yaml:14:78: thickness in the limits of the condition on peat, "> 3", has no unit of length`}, `"> 3 m"`},
		{"limit of another unit", "", "conditions: [{fact: peat, kind: special study, class: C, limits: {thickness: \"> 3 kPa\"}}]\n", []string{`t.yaml:14:78: thickness in the limits`}, ""},
		{"limit without an operator", "", "conditions: [{fact: peat, kind: special study, class: C, limits: {thickness: 3 m}}]\n", []string{`t.yaml:14:78: thickness in the limits of the condition on peat: "3 m" has a number without an operator`}, `"> 3 m"`},
		{"no thickness", "", "conditions: [{fact: peat, kind: special study, class: C, limits: {PI: \"> 3\"}}]\n", []string{`t.yaml:14:66: the condition on peat has no limit on the thickness`}, "limits: {thickness"},
		{"ground that is not there", "", "conditions: [{fact: peat, kind: special study, class: C, limits: {thickness: \"< 3 m\"}}]\n", []string{`t.yaml:14:66: the thickness of the condition on peat holds for ground that is not there`}, ""},
		{"limits are a word", "", "conditions: [{fact: peat, kind: special study, class: C, limits: thick}]\n", []string{`t.yaml:14:66: limits of the condition on peat is not a list of keys`}, ""},
		{"only a class that is none", "", "conditions: [{fact: liquefiable soil, kind: special study, class: C, only: [B, D]}]\n", []string{`t.yaml:14:76: only of the condition on liquefiable soil is "D"`}, ""},
		{"bars without rock", "", "conditions: [{fact: peat, kind: rock barred, bars: A, limits: {thickness: \"> 3 m\"}}]\n", []string{`t.yaml:14:21: the condition on peat bars classes`}, "stiff ground"},
		{"rock without bars", "", "conditions: [{fact: stiff ground, kind: special study, class: C, limits: {cover: \"> 3 m\"}}]\n", []string{`t.yaml:14:21: the condition on stiff ground is of kind special study`}, "rock barred"},
		{"bars nothing", "", "conditions: [{fact: stiff ground, kind: rock barred, limits: {cover: \"> 3 m\"}}]\n", []string{`t.yaml:14:14: the condition on stiff ground does not state the classes it bars`}, "bars: [A, B]"},
		{"bars the softest", "", "conditions: [{fact: stiff ground, kind: rock barred, bars: [A, C], limits: {cover: \"> 3 m\"}}]\n", []string{`t.yaml:14:60: the condition on stiff ground cannot bar class C`}, ""},
		{"bar without a limit", "", "conditions: [{fact: stiff ground, kind: rock barred, bars: A}]\n", []string{`t.yaml:14:14: the condition on stiff ground has no limit on the cover`}, ""},
		{"bar with a class", "", "conditions: [{fact: stiff ground, kind: rock barred, bars: A, class: B, limits: {cover: \"> 3 m\"}}]\n", []string{`t.yaml:14:70: the condition on stiff ground has no use for "class"`}, ""},
		{"counted from", "", "conditions: [{fact: stiff ground, kind: rock barred, bars: A, counted from: sky, limits: {cover: \"> 3 m\"}}]\n", []string{`t.yaml:14:77: counted from of the condition on stiff ground is "sky"`}, "datum, foundation"},
		{"then without a bar", "", "conditions: [{fact: liquefiable soil, kind: special study, class: C, then: next class}]\n", []string{`t.yaml:14:76: the condition on liquefiable soil has no use for "then"`}, ""},
		{"condition twice", "", "conditions: [{fact: liquefiable soil, kind: special study, class: C}, {fact: liquefiable soil, kind: soft class, class: C}]\n", []string{`t.yaml:14:71: the table has two conditions called liquefiable-soil`}, ""},
		{"words without a text", "", "conditions: [{fact: ground described in words, kind: special study, class: C}]\n", []string{`t.yaml:14:14: the condition on ground described in words does not state "text"`}, ""},

		{"route of what", "", "routes: [{of: speed}]\n", []string{`t.yaml:14:15: of route 1 is "speed"`}, "known here: velocity, N, Nch, su"},
		{"route of nothing", "", "routes: [{rank: 1}]\n", []string{`t.yaml:14:10: route 1 does not say what it is "of"`}, "of: velocity"},
		{"route without its column", "", "routes: [{of: velocity}, {of: N}]\naveraging: {clause: 1}\n", []string{`t.yaml:14:26: route "N" averages N, which no class of the table bounds`}, ""},
		{"route twice", "", "routes: [{of: velocity}, {of: velocity}]\n", []string{`t.yaml:14:26: the table has two routes called "velocity"`}, ""},
		{"route of two", "", "routes: [{of: [velocity, N]}]\naveraging: {clause: 1}\n", []string{`t.yaml:14:15: route 1 takes the velocity with another average`}, "two routes"},
		{"route of an empty list", "", "routes: [{of: []}]\n", []string{`t.yaml:14:10: route 1 does not say what it is "of"`}, "of: velocity"},
		{"route of too many", "", "routes: [{of: [N, Nch, su, N, su]}]\naveraging: {clause: 1}\n", []string{`t.yaml:14:31: of of route 1 has more than 4 entries`}, ""},
		{"rank", "", "routes: [{of: velocity, rank: first}]\n", []string{`t.yaml:14:31: rank of route 1 is "first"`}, "whole number from 1"},
		{"needed", "", "routes: [{of: velocity}]\nroutes needed: 2\n", []string{`t.yaml:15:16: routes needed of the table is "2"`}, "from 1 to 1"},
		{"no averaging", "", "routes: [{of: velocity}, {of: su}]\n", []string{`t.yaml:14:9: the table has a route by N or su and does not state their "averaging"`}, "averaging: {clause"},
		{"cap", "", "averaging: {N cap: none}\n", []string{`t.yaml:14:20: N cap of averaging holds "none"`}, "bare number"},
		{"cap of 0", "", "averaging: {N cap: 0}\n", []string{`t.yaml:14:20: N cap of averaging is 0`}, ""},
		{"cap of su without a unit", "", "averaging: {su cap: 250}\n", []string{`t.yaml:14:21: averaging caps the strength`}, "strength unit"},
		{"index", "", "averaging: {cohesive: 20}\n", []string{`t.yaml:14:23: cohesive of averaging: "20" has a number without an operator`}, ""},
		{"index in kPa", "", "averaging: {cohesive: \"> 20 kPa\"}\n", []string{`t.yaml:14:23: cohesive of averaging is "> 20 kPa"`}, "plasticity index"},
		{"blow count", "", "averaging: {blow count: N55}\n", []string{`t.yaml:14:25: blow count of averaging is "N55"`}, "as measured"},
		{"default class", "", "default class: Z\n", []string{`t.yaml:14:16: default class of the table is "Z"`}, "A, B, C"},
		{"adopts without words", "", "adopts: nbcc-2015\n", []string{`t.yaml:1:1: the table does not state "adoption"`}, ""},

		{"twin of its own unit", "", "twin: {unit: m/s, bounds: [800, 300]}\n", []string{"t.yaml:14:14: twin is in the unit of the table itself"}, ""},
		{"twin with a bound too few", "", "twin: {unit: ft/s, bounds: [2600]}\n", []string{"t.yaml:14:28: twin has 1 bounds and the table has 2"}, ""},
		{"twin that rises", "", "twin: {unit: ft/s, bounds: [1000, 2600]}\n", []string{"t.yaml:14:28: the bounds of twin do not fall"}, ""},
		{"twin that is none", "", "twin: {unit: ft/s, bounds: [fast, 1]}\n", []string{`t.yaml:14:29: bounds of twin holds "fast"`}, ""},
		{"twin without a unit", "", "twin: {bounds: [2600, 1000]}\n", []string{`t.yaml:14:7: twin does not state "unit"`}, ""},

		{"several at once", "depth: 30 m\nunit: m/s\nstanding: checked", "depth: x\nunit: x\nstanding: x", []string{"t.yaml:7:8: ", "t.yaml:8:7: ", "t.yaml:9:11: "}, ""},
		{"reference", "title: A title", "title: &a A title\nregion: *a", []string{"t.yaml:2:8: a table of classes has no anchors"}, "write the value out"},
		{"merge", "", "<<: {title: b}\n", []string{`t.yaml:14:1: the table has no key "<<"`}, ""},
		{"nested", "title: A title", "title: [[[[[[[[a]]]]]]]]", []string{"t.yaml:2:14: this is nested too deep"}, ""},
		{"second document", "", "---\nid: b\n", []string{"t.yaml: the file is not readable YAML"}, ""},
		{"tab", "title: A title", "\ttitle: A title", []string{"t.yaml:2:1: the file is not readable YAML"}, ""},
		{"half a line", "title: A title", "title", []string{"t.yaml:3:1: the file is not readable YAML"}, ""},
	}
}
