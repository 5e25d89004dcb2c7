package spreadsheet

import (
	"archive/zip"
	"bytes"
	"errors"
	"math"
	"strconv"
	"strings"
	"testing"
	"time"

	"shearbook/profile"
)

// bookOf is a workbook of one sheet whose parts are given.
func bookOf(t testing.TB, sheet, texts, formats string) []byte {
	t.Helper()
	var b bytes.Buffer
	w := zip.NewWriter(&b)
	for _, part := range [][2]string{
		{"xl/workbook.xml", declaration + `<workbook xmlns="` + mainSpace + `" xmlns:r="` + relationSpace + `"><sheets><sheet name="S" sheetId="1" r:id="rId1"/></sheets></workbook>`},
		{"xl/_rels/workbook.xml.rels", declaration + `<Relationships xmlns="` + packageSpace + `"><Relationship Id="rId1" Type="` + relationSpace + `/worksheet" Target="worksheets/sheet1.xml"/></Relationships>`},
		{"xl/worksheets/sheet1.xml", sheet}, {"xl/sharedStrings.xml", texts}, {"xl/styles.xml", formats},
	} {
		if part[1] == "" {
			continue
		}
		f, err := w.Create(part[0])
		must(t, err)
		_, err = f.Write([]byte(part[1]))
		must(t, err)
	}
	must(t, w.Close())
	return b.Bytes()
}

// Whatever the parts of a workbook hold, it is read or refused with faults at
// places, in bounded time.
func FuzzParts(f *testing.F) {
	const head = `<worksheet xmlns="` + mainSpace + `">`
	cell := func(at, text string) string {
		return `<c r="` + at + `" t="inlineStr"><is><t>` + text + `</t></is></c>`
	}
	f.Add(head+`<sheetData><row r="1">`+cell("A1", "top_m")+cell("B1", "bottom_m")+cell("C1", "vs_mps")+`</row><row r="2"><c r="A2"><v>0</v></c><c r="B2"><v>5</v></c><c r="C2"><v>200</v></c></row></sheetData></worksheet>`, "", styles, "")
	f.Add(head+`<cols><col min="1" max="16384" hidden="1"/></cols><sheetData><row>`+cell("A1", "von")+cell("C1", "v")+`</row></sheetData><mergeCells><mergeCell ref="A1:XFD1048576"/></mergeCells></worksheet>`, "", "", "Vs=v [m/s]")
	f.Add(head+`<sheetData><row r="1"><c t="s"><v>0</v></c><c t="s"><v>1</v></c></row><row r="1048576"><c r="A1048576" s="1"><f>1+1</f></c><c t="b"><v>1</v></c></row></sheetData></worksheet>`,
		`<sst xmlns="`+mainSpace+`"><si><t>depth (m)</t></si><si><r><t>phase </t></r><r><t>velocity</t></r></si></sst>`, styles, "top=depth")
	f.Add(head+`<sheetData><row r="3">`+cell("B3", "Frequency (Hz)")+cell("C3", "phase velocity")+`</row></sheetData></worksheet>`, "", "", "")
	f.Add("<", "&", "]", "=")
	f.Fuzz(func(t *testing.T, sheet, texts, formats, mapped string) {
		var opt Options
		if mapped != "" {
			opt.Map = strings.Split(mapped, "\n")
		}
		began := time.Now()
		profiles, err := Read("f.xlsx", bookOf(t, sheet, texts, formats), opt)
		if took := time.Since(began); took > 20*time.Second {
			t.Errorf("took %v", took)
		}
		var faults profile.Faults
		switch {
		case err != nil && !errors.As(err, &faults):
			t.Errorf("not faults: %v", err)
		case len(faults) > profile.MaxFaults+3:
			t.Errorf("%d faults", len(faults))
		case err == nil && len(profiles) == 0:
			t.Error("neither profiles nor faults")
		}
		for i := range profiles {
			if faults := profile.Validate(&profiles[i]); len(faults) > 0 {
				t.Errorf("a profile is faulty: %v", faults)
			}
		}
		if err == nil {
			back(t, profiles)
		}
	})
}

// Texts and numbers come back from a workbook as they went in, to 15 digits.
func FuzzWriter(f *testing.F) {
	for _, text := range []string{"", "a", "=1", "_x000D_", "\x00\uffff", " \r\n", "<&>", "_x_x0041_", "_x000D\x13"} {
		f.Add(text, 0.1)
	}
	f.Fuzz(func(t *testing.T, text string, x float64) {
		if len(text) > MaxCell {
			return
		}
		data := written(t, func(w *Writer) {
			must(t, w.Sheet("S", []Column{{Heading: "h"}}))
			must(t, w.Row(Text(text), Number(x)))
		})
		archive, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
		must(t, err)
		b, err := openBook(archive)
		must(t, err)
		var got []string
		must(t, b.readRows(b.sheets[0].part, &sheet{}, func(r row) error {
			got = append(got, r.cell(0), r.cell(1))
			return nil
		}))
		want := strings.TrimSpace(strings.ToValidUTF8(text, "\ufffd"))
		if invalid := strings.ToValidUTF8(text, ""); invalid == text && got[2] != want {
			t.Errorf("got %q, want %q", got[2], want)
		}
		v := math.NaN()
		if got[3] != "" {
			var err error
			v, err = strconv.ParseFloat(got[3], 64)
			must(t, err)
		}
		if math.IsInf(x, 0) || math.IsNaN(x) {
			if got[3] != "" {
				t.Errorf("%v is written %q", x, got[3])
			}
		} else if math.Abs(v-x) > 1e-14*math.Abs(x) && math.Abs(x) > 1e-300 {
			t.Errorf("%v is read as %v", x, v)
		}
	})
}
