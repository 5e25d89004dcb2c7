package open

import (
	"strings"
	"testing"

	"golang.org/x/text/encoding/unicode"
)

const (
	logLAS  = "~Version\nVERS. 2.0 :\n~W\nWELL. A :\n~C\nDEPT.M :\nVS.M/S :\n~A\n0.5 200\n1.5 300\n"
	siteXML = `<?xml version="1.0"?><SERA_quakeml schemaVersion="1.3"><velocityProfile publicID="x/A">` +
		`<velocityProfileData><velocityS><value>200</value></velocityS></velocityProfileData></velocityProfile></SERA_quakeml>`
	logAGS = "\"GROUP\",\"WGPT\"\r\n\"HEADING\",\"LOCA_ID\",\"WGPG_ID\",\"WGPT_PARA\",\"WGPT_UNIT\",\"WGPT_DPTH\",\"WGPT_RDNG\"\r\n" +
		"\"UNIT\",\"\",\"\",\"\",\"\",\"m\",\"\"\r\n\"DATA\",\"A\",\"1\",\"PSL-SWV\",\"m/s\",\"0.50\",\"200\"\r\n\"DATA\",\"A\",\"1\",\"PSL-SWV\",\"m/s\",\"1.50\",\"300\"\r\n"
	ownJSON = `{"shearbook profiles": 1, "profiles": [{"name": "A", "layers": [{"top_m": 0, "bottom_m": 5, "vs_mps": 200}]}]}`
)

// Kinds of text go to their readers by how they begin, whatever they are
// called and however they are encoded.
func TestReaders(t *testing.T) {
	utf16, err := unicode.UTF16(unicode.LittleEndian, unicode.UseBOM).NewEncoder().String(logLAS)
	if err != nil {
		t.Fatal(err)
	}
	bare, err := unicode.UTF16(unicode.BigEndian, unicode.IgnoreBOM).NewEncoder().String(siteXML)
	if err != nil {
		t.Fatal(err)
	}
	for _, data := range []string{
		logLAS, "# made by hand\n\n# twice\n" + logLAS, "\ufeff\r\n" + logLAS, utf16,
		siteXML, "\ufeff" + siteXML, "\n " + siteXML[len(`<?xml version="1.0"?>`):], bare,
		ownJSON, " \r\n" + ownJSON,
		logAGS, "\ufeff\n" + logAGS, strings.ReplaceAll(logAGS, "GROUP", "Group"),
	} {
		profiles, err := Bytes("b.csv", []byte(data), Options{})
		if err != nil || len(profiles) != 1 || profiles[0].Name != "A" || profiles[0].Layers[0].Vs != 200 {
			t.Errorf("%.30q: %+v, %v", data, profiles, err)
		}
	}
}

// What begins like a kind and is another is told by its reader.
func TestReadersRefuse(t *testing.T) {
	for data, want := range map[string]string{
		"~V\nVERS. 3.0 :\n":       `f:2:7: version "3.0" of LAS is not read`,
		"~C\n":                    "f: the file has no section ~A, so no data",
		"<!DOCTYPE html>\n<html>": "f:1:1: the file is an HTML page",
		"<kml></kml>":             `f:1:1: the file is XML of another form: its outermost element is "kml"`,
		"\"GROUP\",\"PROJ\"\n":    "f: the file gives neither a shear-wave velocity of the ground nor N nor su; it has no group of a hole",
		`{"schema": 1}`:           `f:1:1: the file is JSON, but has no key "shearbook profiles"`,
		" [1, 2]":                 `f:1:2: the file is a list, not an object with the key "shearbook profiles"`,
	} {
		_, err := Bytes("f", []byte(data), Options{})
		wantFault(t, err, want)
	}
}

// Units that are given for a file reach the reader of a form that may lack
// them, and change nothing where they are fixed.
func TestReadersUnits(t *testing.T) {
	const log = "~V\nVERS. 2.0 :\n~C\nDEPT. :\nVS. :\n~A\n5 1000\n15 2000\n"
	profiles, err := Bytes("a.las", []byte(log), feet)
	// 1,000 ft/s is 304.8 m/s.
	if err != nil || profiles[0].Layers[0].Vs != 304.8 {
		t.Errorf("%+v, %v", profiles, err)
	}
	profiles, err = Bytes("a.json", []byte(ownJSON), feet)
	if err != nil || profiles[0].Layers[0].Vs != 200 {
		t.Errorf("%+v, %v", profiles, err)
	}
}
