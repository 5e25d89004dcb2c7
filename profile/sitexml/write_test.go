package sitexml

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"golang.org/x/tools/txtar"

	"shearbook/profile"
)

func equal(t *testing.T, what string, got, want any, options ...cmp.Option) {
	t.Helper()
	if diff := cmp.Diff(want, got, options...); diff != "" {
		t.Errorf("%s (-want +got)\n%s", what, diff)
	}
}

// asWritten leaves out what Write does not write. The standard deviation goes
// through a product and a quotient, and may lose its last bits.
var asWritten = cmp.Options{
	cmpopts.IgnoreFields(profile.Profile{}, "Reading", "Notes"),
	cmpopts.IgnoreFields(profile.Layer{}, "Line", "Column"),
	cmp.FilterPath(func(p cmp.Path) bool { return p.Last().String() == ".SigmaLnVs" }, cmpopts.EquateApprox(1e-14, 0)),
}

var example = Publication{Authority: "example.org", Site: "quay", Created: "2026-03-02", Owner: Owner{"EXG", "Example Geophysics", "Ada", "Example", "ada@example.org"}}

func written(t *testing.T, profiles []profile.Profile, pub Publication) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, profiles, pub); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// random returns a profile of which nothing is lost.
func random(rnd *rand.Rand, name string, at profile.Position, level profile.Optional) profile.Profile {
	p := profile.Profile{Name: name, Position: at}
	p.Survey.GroundLevel = level
	if m := methods[rnd.IntN(len(methods))]; rnd.IntN(3) > 0 {
		p.Survey.Method, p.Survey.Basis = m.word, m.basis
	}
	z := 0.0
	for range 1 + rnd.IntN(12) {
		l := profile.Layer{Top: z, Bottom: z + 0.01 + 10*rnd.Float64(), Vs: 100 + 900*rnd.Float64()}
		z = l.Bottom
		for _, o := range []struct {
			given profile.Given
			to    *float64
			low   float64
		}{{profile.GivenVp, &l.Vp, 3000}, {profile.GivenDensity, &l.Density, 1500}, {profile.GivenSigma, &l.SigmaLnVs, 0.1}} {
			if rnd.IntN(2) == 0 {
				*o.to = o.low + rnd.Float64()
				l.Given |= o.given
			}
		}
		p.Layers = append(p.Layers, l)
	}
	if rnd.IntN(2) == 0 {
		p.Layers[len(p.Layers)-1].Bottom = math.Inf(1)
	}
	return p
}

// What Write writes, Read reads back, and Losses names nothing of it; the
// second writing is the same as the first, but for rounding in sigma.
func TestWriteRead(t *testing.T) {
	rnd := rand.New(rand.NewPCG(1, 2))
	for i := range 200 {
		at := profile.Position{Latitude: profile.Known(-90 + 180*rnd.Float64()), Longitude: profile.Known(-180 + 360*rnd.Float64())}
		level := profile.Optional{}
		if rnd.IntN(2) == 0 {
			level = profile.Known(-3 + 9*rnd.Float64())
		}
		var profiles []profile.Profile
		for j, name := range []string{"L1", "a, b/c", `"q" & <r>`, "Ü: =41", "100 %"}[:1+rnd.IntN(5)] {
			profiles = append(profiles, random(rnd, fmt.Sprint(name, j), at, level))
		}
		data := written(t, profiles, example)
		if problems := check(data); len(problems) > 0 {
			t.Fatalf("not of the form: %v\n%s", problems, data)
		}
		got, err := Read("x.xml", data)
		if err != nil {
			t.Fatalf("%d: %v\n%s", i, err, data)
		}
		equal(t, "profiles", got, profiles, asWritten)
		for j := range profiles {
			if lost := Losses(&profiles[j]); len(lost) > 0 {
				t.Errorf("lost of %+v: %v", profiles[j], lost)
			}
		}
		again, err := Read("x.xml", written(t, got, example))
		if err != nil {
			t.Fatal(err)
		}
		equal(t, "written again", again, got, asWritten)
	}
}

// What a file states beside the layers comes back where the form of the
// element is known.
func TestRestated(t *testing.T) {
	archive, err := txtar.ParseFile("testdata/shapes/forms.txtar")
	if err != nil {
		t.Fatal(err)
	}
	first, err := Read("a.xml", archive.Files[0].Data)
	if err != nil {
		t.Fatal(err)
	}
	data := written(t, first, Publication{})
	if problems := check(data); len(problems) > 0 {
		t.Errorf("not of the form: %v\n%s", problems, data)
	}
	second, err := Read("b.xml", data)
	if err != nil {
		t.Fatal(err)
	}
	equal(t, "profiles", second, first, asWritten)
	for _, path := range []string{
		"creationTime", "siteOwner/codeName", "siteOwner/fullName", "siteOwner/contact/person/firstname", "siteOwner/contact/person/mbox",
		"siteDescription/altitude", "siteDescription/siteMorphology/siteClassEC8", "siteDescription/siteMorphology/siteClassEC8Qindex1",
		"siteDescription/overallQindex", "analysis/resonanceFrequency", "analysis/resonanceFrequencyMethod", "analysis/velocityS30",
		"analysis/velocityS30Method", "analysis/velocityProfileCount", "analysis/velocityProfile/layerCount",
	} {
		if a, b := stated(&first[0], path), stated(&second[0], path); a != b || a == "" {
			t.Errorf("%s was %q and is %q", path, a, b)
		}
	}
}

// Elements whose content is not of the form are not written again.
func TestRestatedStrictly(t *testing.T) {
	p := profile.Profile{
		Name: "a", Position: profile.Position{Latitude: profile.Known(1), Longitude: profile.Known(2)},
		Survey: profile.Survey{Date: "2026-03-02"}, Layers: []profile.Layer{{Bottom: 4, Vs: 200}},
		Reading: &profile.Reading{Metadata: []profile.Metadatum{
			{Key: "siteDescription/siteMorphology/siteClassEC8", Value: "c"},
			{Key: "siteDescription/overallQindex", Value: "1.2"},
			{Key: "analysis/velocityS30", Value: "about 300"},
			{Key: "analysis/velocityS30", Value: "300 ± -4"},
			{Key: "analysis/velocityS30Qindex1", Value: "0.5"},
			{Key: "analysis/velocityS30Qindex1", Value: "0.6"},
			{Key: "analysis/velocityS30MethodCombIndex", Value: "1.0"},
			{Key: "analysis/velocityS30ManualIndex", Value: "0.5"},
			{Key: "analysis/resonanceFrequencyMethod", Value: "HVSR"},
			{Key: "analysis/resonanceFrequencyMethod", Value: "HVSR NOISE"},
			{Key: "analysis/resonanceFrequencyMethod", Value: "INFERRED"},
			{Key: "analysis/velocityProfileQindex1", Value: "NaN"},
		}},
	}
	data := written(t, []profile.Profile{p}, Publication{})
	if problems := check(data); len(problems) > 0 {
		t.Errorf("not of the form: %v\n%s", problems, data)
	}
	text := string(data)
	for part, n := range map[string]int{
		"siteMorphology": 0, "overallQindex": 0, "<velocityS30>": 0, "<velocityS30Qindex1>": 1, "CombIndex>1.0<": 1, "ManualIndex": 0,
		"<resonanceFrequencyMethod>": 2, "velocityProfileQindex1": 0, "not-stated": 5, "quakeml:local/": 8,
	} {
		if got := strings.Count(text, part); got != n {
			t.Errorf("%q stands %d times, want %d\n%s", part, got, n, text)
		}
	}
}

// model is the content of each element of SiteXML 1.3 that Write may write,
// in order: "?" once or not, "*" any number of times, "+" once or more, else
// once. An element that is not here holds text of a kind.
var model = map[string]string{
	"SERA_quakeml":    "creationTime externalReference* siteOwner siteDescription analysis*",
	"siteOwner":       "codeName fullName contact",
	"contact":         "person affiliation?",
	"person":          "firstname lastname mbox homepage?",
	"siteDescription": "station? latitude longitude altitude? minDistanceFromStation? maxDistanceFromStation? siteTopography? siteMorphology? preferredSiteAnalysisID? preferredVelocityProfileID? overallQindex?",
	"siteMorphology":  "morphology? siteClassEC8? siteClassEC8Qindex1? siteClassEC8Reference? bedrockDepth? bedrockDepthQindex1? bedrockDepthReference? h800? h800Qindex1? h800Reference?",
	"analysis": "siteDescriptionID creationTime? resonanceFrequency? resonanceFrequencyQindex1? resonanceFrequencyMethod* resonanceFrequencyReference? " +
		"velocityS30? velocityS30Qindex1? velocityS30Method* velocityS30MethodCombIndex? velocityS30ManualIndex? velocityS30Reference? " +
		"velocityProfileCount? sptLogsCount? cptLogsCount? boreholeLogsCount? velocityProfile* velocityProfileQindex1? velocityProfileReference?",
	"velocityProfile":     "layerCount velocityProfileData+",
	"velocityProfileData": "velocityP? velocityS? density? layerThickness",
	"layerThickness":      "layerTopDepth layerBottomDepth?",
	"latitude":            "value uncertainty?", "longitude": "value uncertainty?", "altitude": "value uncertainty?",
	"overallQindex": "value uncertainty?", "siteClassEC8Qindex1": "value uncertainty?", "bedrockDepth": "value uncertainty?",
	"bedrockDepthQindex1": "value uncertainty?", "h800": "value uncertainty?", "h800Qindex1": "value uncertainty?",
	"resonanceFrequency": "value uncertainty?", "resonanceFrequencyQindex1": "value uncertainty?",
	"velocityS30": "value uncertainty?", "velocityS30Qindex1": "value uncertainty?", "velocityProfileQindex1": "value uncertainty?",
	"velocityP": "value uncertainty?", "velocityS": "value uncertainty?", "density": "value uncertainty?",
	"layerTopDepth": "value uncertainty?", "layerBottomDepth": "value uncertainty?",
}

// identified are the elements with a publicID.
var identified = []string{"SERA_quakeml", "siteOwner", "siteDescription", "analysis", "velocityProfile"}

// node is an element.
type node struct {
	name       string
	attributes map[string]string
	children   []*node
	text       string
}

func tree(data []byte) (*node, error) {
	d := xml.NewDecoder(bytes.NewReader(data))
	stack := []*node{{}}
	for {
		token, err := d.Token()
		if err == io.EOF {
			return stack[0].children[0], nil
		}
		if err != nil {
			return nil, err
		}
		top := stack[len(stack)-1]
		switch t := token.(type) {
		case xml.StartElement:
			n := &node{name: t.Name.Local, attributes: map[string]string{}}
			if t.Name.Space != "http://www.orfeus-eu.org/xml/site/1" {
				n.name = "{" + t.Name.Space + "}" + n.name
			}
			for _, a := range t.Attr {
				n.attributes[a.Name.Local] = a.Value
			}
			top.children = append(top.children, n)
			stack = append(stack, n)
		case xml.EndElement:
			stack = stack[:len(stack)-1]
		case xml.CharData:
			top.text += strings.TrimSpace(string(t))
		}
	}
}

// check holds a file against the content of SiteXML 1.3, which is entered
// here a second time.
func check(data []byte) (problems []string) {
	root, err := tree(data)
	if err != nil {
		return []string{err.Error()}
	}
	if root.name != "SERA_quakeml" || root.attributes["schemaVersion"] != "1.3" {
		problems = append(problems, "root "+root.name)
	}
	ids := map[string]bool{}
	var visit func(n *node)
	visit = func(n *node) {
		if slices.Contains(identified, n.name) {
			id := n.attributes["publicID"]
			if !strings.HasPrefix(id, "quakeml:") || strings.ContainsAny(id, " <>\"%") || ids[id] {
				problems = append(problems, fmt.Sprintf("publicID %q of %s", id, n.name))
			}
			ids[id] = true
		}
		problems = append(problems, content(n)...)
		for _, c := range n.children {
			visit(c)
		}
	}
	visit(root)
	visit = func(n *node) {
		if strings.HasSuffix(n.name, "ID") && !ids[n.text] {
			problems = append(problems, n.name+" refers to nothing: "+n.text)
		}
		for _, c := range n.children {
			visit(c)
		}
	}
	visit(root)
	return problems
}

func content(n *node) (problems []string) {
	want, holds := model[n.name]
	if !holds {
		if len(n.children) > 0 || n.text == "" {
			problems = append(problems, n.name+" holds no text alone")
		}
		return append(problems, kindOf(n)...)
	}
	if n.text != "" {
		problems = append(problems, n.name+" holds text")
	}
	rest := n.children
	for part := range strings.FieldsSeq(want) {
		name := strings.TrimRight(part, "?*+")
		count := 0
		for len(rest) > 0 && rest[0].name == name {
			rest = rest[1:]
			count++
		}
		switch part[len(name):] {
		case "":
			holds = count == 1
		case "?":
			holds = count <= 1
		case "+":
			holds = count >= 1
		}
		if !holds {
			problems = append(problems, fmt.Sprintf("%d %s in %s", count, name, n.name))
		}
		holds = true
	}
	if len(rest) > 0 {
		problems = append(problems, fmt.Sprintf("%s stands where it may not in %s", rest[0].name, n.name))
	}
	return problems
}

// words are the values of elements that have a list of them.
var words = map[string][]string{
	"siteClassEC8": {"A", "B", "C", "D", "E", "S1", "S2", "Undefined"},
	"velocityS30Method": {
		"Geology", "Topographic Slope", "SPT", "CPT", "Laboratory", "S-REFR", "S-REFL", "SASW", "MASW", "SWI", "SPAC/F-K", "ReMi",
		"Crosshole", "Downhole", "Uphole", "P-S Log", "Seismic Cone", "DH Strong Motion Arrays",
	},
	"resonanceFrequencyMethod":   {"HVSR EARTHQUAKE RECORDS", "HVSR NOISE", "SSR EARTHQUAKE RECORDS", "SSR NOISE", "INFERRED"},
	"velocityS30MethodCombIndex": {"1.0", "1.2"},
	"velocityS30ManualIndex":     {"0.2", "0.4", "0.8", "1.0"},
}

func kindOf(n *node) []string {
	bad := false
	switch n.name {
	case "value", "uncertainty":
		v, err := strconv.ParseFloat(n.text, 64)
		bad = err != nil || math.IsInf(v, 0) || math.IsNaN(v) || n.name == "uncertainty" && v < 0 || strings.ContainsAny(n.text, "eExX")
	case "layerCount", "velocityProfileCount":
		_, err := strconv.ParseUint(n.text, 10, 32)
		bad = err != nil
	case "creationTime":
		_, ok := dateTime(n.text)
		bad = !ok || !strings.Contains(n.text, "T")
	}
	if list := words[n.name]; list != nil {
		bad = !slices.Contains(list, n.text)
	}
	if bad {
		return []string{n.name + " " + n.text}
	}
	return nil
}

// The checker itself finds what is wrong.
func TestCheckFinds(t *testing.T) {
	p := random(rand.New(rand.NewPCG(5, 6)), "a", profile.Position{Latitude: profile.Known(1), Longitude: profile.Known(2)}, profile.Optional{})
	good := string(written(t, []profile.Profile{p}, example))
	if problems := check([]byte(good)); len(problems) > 0 {
		t.Fatal(problems)
	}
	for _, change := range [][2]string{
		{"<codeName>EXG</codeName>", ""},
		{"fullName", "FullName"},
		{"<layerCount>", "<layerCount>x"},
		{"quakeml:example.org/analysis/a", "a b"},
		{"xmlns=", "xmlns:x="},
		{"T00:00:00Z", ""},
		{"<velocityProfileCount>1</velocityProfileCount>", "<velocityS30Method>magic</velocityS30Method>"},
		{"<latitude><value>1", "<latitude><value>"},
		{"<longitude>", "<altitude><value>1</value></altitude><longitude>"},
	} {
		bad := strings.ReplaceAll(good, change[0], change[1])
		if bad == good || len(check([]byte(bad))) == 0 {
			t.Errorf("%q for %q is not found", change[1], change[0])
		}
	}
}

// A gradient keeps its travel time: over 8 m from 200 to 400 m/s it is
// 8·ln(2)/200 s, so the constant velocity is 200/ln 2 = 288.539 m/s.
func TestGradient(t *testing.T) {
	p := profile.Profile{
		Name: "a", Position: profile.Position{Latitude: profile.Known(1), Longitude: profile.Known(2)},
		Layers: []profile.Layer{{Bottom: 8, Vs: 200, VsBottom: 400, SigmaLnVs: 0.1, Given: profile.GivenSigma}},
	}
	got, err := Read("x.xml", written(t, []profile.Profile{p}, example))
	if err != nil {
		t.Fatal(err)
	}
	if l := got[0].Layers[0]; math.Abs(l.Vs-288.539) > 0.001 || math.Abs(l.SigmaLnVs-0.1) > 1e-12 {
		t.Errorf("got %+v", l)
	}
	if lost := Losses(&p); len(lost) != 1 || !strings.HasPrefix(lost[0], "velocity gradients") {
		t.Errorf("lost: %v", lost)
	}
}

// Everything that the form has no place for is named.
func TestLosses(t *testing.T) {
	all := profile.GivenN | profile.GivenSu | profile.GivenPI | profile.GivenWaterContent
	p := profile.Profile{
		Layers: []profile.Layer{
			{Bottom: 8, Vs: 200, VsBottom: 400, Given: all, Refusal: true, Soil: "clay"}, {Top: 8, Bottom: 9, Vs: 300, Basis: profile.Correlated},
		},
		Survey: profile.Survey{
			Method: "downhole, by hammer", Date: "March", Operator: "x", Location: "y", Basis: profile.Measured, DepthReached: 7, WaterTable: profile.Known(1),
		},
		Notes: []profile.Note{{ID: "half-space-assumed"}, {ID: "below-depth-reached"}},
	}
	if lost := Losses(&p); len(lost) != 15 {
		t.Errorf("%d losses: %q", len(lost), lost)
	}
	if lost := Losses(&profile.Profile{Layers: []profile.Layer{{Bottom: 8, Vs: 200}, {Top: 8, Bottom: 9, Vs: 200}}}); len(lost) != 0 {
		t.Errorf("lost of a plain profile: %q", lost)
	}
}

// Write refuses what it cannot write truly.
func TestWriteRefuses(t *testing.T) {
	layers := []profile.Layer{{Top: 0, Bottom: 4, Vs: 200}}
	here := profile.Position{Latitude: profile.Known(1), Longitude: profile.Known(2)}
	there := profile.Position{Latitude: profile.Known(1), Longitude: profile.Known(3)}
	for name, c := range map[string]struct {
		profiles []profile.Profile
		pub      Publication
	}{
		"none":        {nil, example},
		"no name":     {[]profile.Profile{{Layers: layers, Position: here}}, example},
		"no position": {[]profile.Profile{{Name: "a", Layers: layers}}, example},
		"two places":  {[]profile.Profile{{Name: "a", Layers: layers, Position: here}, {Name: "b", Layers: layers, Position: there}}, example},
		"same name":   {[]profile.Profile{{Name: "a", Layers: layers, Position: here}, {Name: "a", Layers: layers, Position: here}}, example},
		"no layers":   {[]profile.Profile{{Name: "a", Position: here}}, example},
		"no Vs":       {[]profile.Profile{{Name: "a", Position: here, NoVelocity: true, Layers: []profile.Layer{{Bottom: 4, N: 5, Given: profile.GivenN}}}}, example},
		"no date":     {[]profile.Profile{{Name: "a", Layers: layers, Position: here, Survey: profile.Survey{Date: "in March"}}}, Publication{}},
		"bad time":    {[]profile.Profile{{Name: "a", Layers: layers, Position: here, Survey: profile.Survey{Date: "2026-03-02"}}}, Publication{Created: "now"}},
	} {
		var b bytes.Buffer
		if err := Write(&b, c.profiles, c.pub); err == nil || b.Len() > 0 {
			t.Errorf("%s: error %v, wrote %q", name, err, b.String())
		}
	}
	good := []profile.Profile{{Name: "a", Layers: layers, Position: here}}
	if err := Write(broken{}, good, example); !errors.Is(err, errBroken) {
		t.Errorf("error %v of a writer that fails, want its own", err)
	}
}

var errBroken = errors.New("broken")

type broken struct{}

func (broken) Write([]byte) (int, error) { return 0, errBroken }

func ExampleWrite() {
	Write(os.Stdout, []profile.Profile{{
		Name:     "Line 1",
		Survey:   profile.Survey{Method: "MASW"},
		Position: profile.Position{Latitude: profile.Known(51.02), Longitude: profile.Known(4.1)},
		Layers:   []profile.Layer{{Bottom: 8, Vs: 200, SigmaLnVs: 0.06, Given: profile.GivenSigma}, {Top: 8, Bottom: math.Inf(1), Vs: 439}},
	}}, Publication{Authority: "example.org", Site: "quay", Created: "2026-03-02", Owner: Owner{Code: "EXG", Name: "Example Geophysics"}})
	// Output:
	// <?xml version="1.0" encoding="UTF-8"?>
	// <SERA_quakeml xmlns="http://www.orfeus-eu.org/xml/site/1" publicID="quakeml:example.org/site/quay" schemaVersion="1.3">
	//   <creationTime>2026-03-02T00:00:00Z</creationTime>
	//   <siteOwner publicID="quakeml:example.org/site_owner/quay">
	//     <codeName>EXG</codeName>
	//     <fullName>Example Geophysics</fullName>
	//     <contact>
	//       <person>
	//         <firstname>not-stated</firstname>
	//         <lastname>not-stated</lastname>
	//         <mbox>not-stated</mbox>
	//       </person>
	//     </contact>
	//   </siteOwner>
	//   <siteDescription publicID="quakeml:example.org/site_description/quay">
	//     <latitude><value>51.02</value></latitude>
	//     <longitude><value>4.1</value></longitude>
	//     <preferredSiteAnalysisID>quakeml:example.org/analysis/Line=201</preferredSiteAnalysisID>
	//     <preferredVelocityProfileID>quakeml:example.org/velocity_profile/Line=201</preferredVelocityProfileID>
	//   </siteDescription>
	//   <analysis publicID="quakeml:example.org/analysis/Line=201">
	//     <siteDescriptionID>quakeml:example.org/site_description/quay</siteDescriptionID>
	//     <velocityS30Method>MASW</velocityS30Method>
	//     <velocityProfileCount>1</velocityProfileCount>
	//     <velocityProfile publicID="quakeml:example.org/velocity_profile/Line=201">
	//       <layerCount>2</layerCount>
	//       <velocityProfileData>
	//         <velocityS><value>200</value><uncertainty>12</uncertainty></velocityS>
	//         <layerThickness>
	//           <layerTopDepth><value>0</value></layerTopDepth>
	//           <layerBottomDepth><value>8</value></layerBottomDepth>
	//         </layerThickness>
	//       </velocityProfileData>
	//       <velocityProfileData>
	//         <velocityS><value>439</value></velocityS>
	//         <layerThickness>
	//           <layerTopDepth><value>8</value></layerTopDepth>
	//         </layerThickness>
	//       </velocityProfileData>
	//     </velocityProfile>
	//   </analysis>
	// </SERA_quakeml>
}
