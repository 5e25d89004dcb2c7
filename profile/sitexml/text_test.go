package sitexml

import (
	"bytes"
	"fmt"
	"runtime"
	"strings"
	"testing"

	"golang.org/x/text/encoding"
	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
	"golang.org/x/text/transform"

	"shearbook/profile"
)

// site is a file with a letter from outside ASCII.
const small = `<SERA_quakeml schemaVersion="1.3">
<siteOwner><fullName>Büro</fullName></siteOwner>
<velocityProfile publicID="x/Ü"><velocityProfileData><velocityS><value>180</value></velocityS></velocityProfileData></velocityProfile></SERA_quakeml>
`

func encode(t *testing.T, e encoding.Encoding, text string) []byte {
	t.Helper()
	data, _, err := transform.Bytes(e.NewEncoder(), []byte(text))
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// The same file in every encoding and with every end of line is the same
// profile. The encoder is golang.org/x/text v0.44.0.
func TestEncodings(t *testing.T) {
	declare := func(label string) string { return `<?xml version="1.0" encoding='` + label + `'?>` + small }
	for _, c := range []struct {
		name, encoding string
		data           []byte
	}{
		{"plain", "UTF-8", []byte(small)},
		{"declared", "UTF-8", []byte(declare("UTF-8"))},
		{"mark", "UTF-8", []byte("\ufeff" + small)},
		{"CRLF", "UTF-8", []byte(strings.ReplaceAll(small, "\n", "\r\n"))},
		{"CR", "UTF-8", []byte(strings.ReplaceAll(small, "\n", "\r"))},
		{"declared Latin-1", "Windows-1252", encode(t, charmap.ISO8859_1, declare("ISO-8859-1"))},
		{"declared Windows-1252", "Windows-1252", encode(t, charmap.Windows1252, declare("windows-1252"))},
		{"Windows-1252 that says UTF-8", "Windows-1252", encode(t, charmap.Windows1252, declare("utf-8"))},
		{"little endian, mark", "UTF-16LE", encode(t, unicode.UTF16(unicode.LittleEndian, unicode.UseBOM), declare("UTF-16"))},
		{"big endian, mark", "UTF-16BE", encode(t, unicode.UTF16(unicode.BigEndian, unicode.UseBOM), small)},
		{"little endian", "UTF-16LE", encode(t, unicode.UTF16(unicode.LittleEndian, unicode.IgnoreBOM), small)},
		{"big endian", "UTF-16BE", encode(t, unicode.UTF16(unicode.BigEndian, unicode.IgnoreBOM), declare("utf-16"))},
	} {
		t.Run(c.name, func(t *testing.T) {
			profiles, err := Read("x.xml", c.data)
			if err != nil {
				t.Fatal(err)
			}
			p := profiles[0]
			if p.Name != "Ü" || stated(&p, "siteOwner/fullName") != "Büro" || p.Reading.Encoding != c.encoding {
				t.Errorf("name %q, owner %q, encoding %s", p.Name, stated(&p, "siteOwner/fullName"), p.Reading.Encoding)
			}
			if l := p.Layers[0]; l.Line != 3 || l.Column != 72 {
				t.Errorf("Vs at %d:%d, want 3:72", l.Line, l.Column)
			}
		})
	}
}

// Input that is too large, or made to exhaust, ends in one clear fault.
func TestLimits(t *testing.T) {
	const head = "<SERA_quakeml>\n"
	for _, c := range []struct {
		name, data, want string
	}{
		{"deep", strings.Repeat("<a>", 1<<20), "x.xml:1:193: more than 64 elements lie inside one another"},
		{"a long text", head + "<a>" + strings.Repeat("5", 8<<20), "x.xml:2:4: a text is longer than 64 KiB"},
		{"a long name", head + "<" + strings.Repeat("a", 8<<20), "x.xml:2:1: a tag is longer than 64 KiB"},
		{"many attributes", head + "<a " + strings.Repeat("b='' ", 1<<20), "x.xml:2:1: a tag is longer than 64 KiB"},
		{"an attribute with >", head + "<a c='>" + strings.Repeat("b", 1<<20), "x.xml:2:8: a text is longer than 64 KiB"},
		{"a long comment", head + "<!--" + strings.Repeat("-", 8<<20), "x.xml:2:1: a comment is longer than 1 MiB"},
		{"a long section", head + "<![CDATA[" + strings.Repeat("-", 8<<20), "x.xml:2:1: a text is longer than 64 KiB"},
		{"an instruction", head + "<?" + strings.Repeat("x", 8<<20), "x.xml:2:1: a tag is longer than 64 KiB"},
		{"entities", `<!DOCTYPE l [<!ENTITY a "` + strings.Repeat("x", 100) + `"><!ENTITY b "&a;&a;">]><l>&b;</l>`, "x.xml:1:1: a document type declaration is not read"},
		{"a declaration inside", head + `<a><!ENTITY b "c"></a>`, "x.xml:2:4: a document type declaration is not read"},
		{"statements", head + strings.Repeat("<a>b</a>", MaxMetadata+1), "the file states more than 1000000 things"},
		{"too many profiles", head + strings.Repeat("<velocityProfile/>", MaxProfiles+1), "the file has more than 10000 profiles"},
		{"statements in profiles", head + "<b>" + strings.Repeat("<a>b</a>", 200) + "</b>" + strings.Repeat("<velocityProfile/>", MaxProfiles) + "</SERA_quakeml>", "counted for each profile"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := Read("x.xml", []byte(c.data))
			faults, ok := err.(profile.Faults)
			if !ok || len(faults) > profile.MaxFaults+2 || !strings.Contains(err.Error(), c.want) {
				t.Errorf("got  %v\nwant %s", err, c.want)
			}
		})
	}
	if _, err := Read("x.xml", make([]byte, MaxBytes+1)); err == nil || err.Error() != "x.xml: the file is larger than 64 MiB" {
		t.Errorf("a large file: %v", err)
	}
}

// big is a file of n layers in profiles of 20.
func big(n int) []byte {
	var b bytes.Buffer
	b.WriteString(`<SERA_quakeml schemaVersion="1.3"><analysis>`)
	for i := range n / 20 {
		fmt.Fprintf(&b, "<velocityProfile publicID=\"x/%d\">\n", i)
		for z := range 20 {
			fmt.Fprintf(&b, "<velocityProfileData><velocityS><value>%d</value></velocityS><layerThickness><layerTopDepth><value>%d</value></layerTopDepth>"+
				"<layerBottomDepth><value>%d</value></layerBottomDepth></layerThickness></velocityProfileData>", 150+10*z, z, z+1)
		}
		b.WriteString("</velocityProfile>")
	}
	b.WriteString("</analysis></SERA_quakeml>")
	return b.Bytes()
}

// What is allocated grows with the layers, not faster.
func TestManyLayers(t *testing.T) {
	const n = 20_000
	data := big(n)
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	profiles, err := Read("x.xml", data)
	runtime.ReadMemStats(&after)
	if err != nil || len(profiles) != n/20 {
		t.Fatalf("%d profiles, %v", len(profiles), err)
	}
	if last := profiles[len(profiles)-1]; last.Layers[19].Vs != 340 || last.Name != "999" || last.Layers[19].Line != n/20+1 {
		t.Errorf("the last profile is %+v", last)
	}
	// The parser of package encoding/xml takes most of it, and drops it again.
	perLayer := float64(after.TotalAlloc-before.TotalAlloc) / n
	t.Logf("%.0f bytes a layer of %d bytes", perLayer, len(data)/n)
	if perLayer > 8000 {
		t.Errorf("%.0f bytes allocated for each layer, want at most 8000", perLayer)
	}
}

func BenchmarkRead(b *testing.B) {
	data := big(100_000)
	b.SetBytes(int64(len(data)))
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Read("x.xml", data); err != nil {
			b.Fatal(err)
		}
	}
}
