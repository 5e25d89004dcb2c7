package spreadsheet

import (
	"archive/zip"
	"bytes"
	"errors"
	"fmt"
	"hash/crc32"
	"io"
	"math/rand/v2"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"

	"shearbook/profile"
)

// rewritten is a workbook with one text in one of its parts replaced.
func rewritten(t testing.TB, data []byte, part, from, to string) []byte {
	t.Helper()
	archive, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	must(t, err)
	var b bytes.Buffer
	w := zip.NewWriter(&b)
	found := false
	for _, f := range archive.File {
		in, err := f.Open()
		must(t, err)
		content, err := io.ReadAll(in)
		must(t, err)
		if f.Name == part {
			found = bytes.Contains(content, []byte(from))
			content = bytes.Replace(content, []byte(from), []byte(to), 1)
		}
		out, err := w.Create(f.Name)
		must(t, err)
		_, err = out.Write(content)
		must(t, err)
	}
	must(t, w.Close())
	if !found {
		t.Fatalf("part %s does not hold %q", part, from)
	}
	return b.Bytes()
}

// packed is a zip file of parts that hold size zero bytes each; a claim other
// than 0 is what the list of parts says their size is.
func packed(t testing.TB, size int, claim uint64, names ...string) []byte {
	t.Helper()
	var b bytes.Buffer
	w := zip.NewWriter(&b)
	for _, name := range names {
		if claim == 0 {
			out, err := w.Create(name)
			must(t, err)
			_, err = io.CopyN(out, zeros{}, int64(size))
			must(t, err)
			continue
		}
		content := make([]byte, size)
		out, err := w.CreateRaw(&zip.FileHeader{Name: name, Method: zip.Store, CRC32: crc32.ChecksumIEEE(content), CompressedSize64: uint64(size), UncompressedSize64: claim})
		must(t, err)
		_, err = out.Write(content)
		must(t, err)
	}
	must(t, w.Close())
	return b.Bytes()
}

type zeros struct{}

func (zeros) Read(p []byte) (int, error) {
	clear(p)
	return len(p), nil
}

// Bombs and files of other kinds end in one clear fault with little memory.
func TestBombs(t *testing.T) {
	farCorner := workbook(t, one, simple, nil)
	farCorner = rewritten(t, farCorner, "xl/worksheets/sheet1.xml", "</sheetData>", `<row r="1048576"><c r="XFD1048576"><v>1</v></c></row></sheetData>`)
	wide := func(rows int) []byte {
		var b strings.Builder
		for i := range rows {
			fmt.Fprintf(&b, `<row r="%d"><c r="XFD%d"><v>1</v></c></row>`, i+5, i+5)
		}
		return rewritten(t, workbook(t, one, simple, nil), "xl/worksheets/sheet1.xml", "</sheetData>", b.String()+"</sheetData>")
	}
	var merges strings.Builder
	for i := range 100_000 {
		fmt.Fprintf(&merges, `<mergeCell ref="F%d:G%d"/>`, i+10, i+10)
	}
	many := make([]string, MaxFiles+1)
	for i := range many {
		many[i] = fmt.Sprint("xl/media/", i)
	}
	sheets := make([]string, MaxSheets+1)
	for i := range sheets {
		sheets[i] = fmt.Sprint("S", i)
	}
	for _, c := range []struct {
		name string
		data []byte
		want string // "" if it is read
		most uint64 // MiB allocated
	}{
		{"a sheet of 300 MiB", packed(t, 300<<20, 0, "xl/workbook.xml", "xl/worksheets/sheet1.xml"), "x.xlsx: the sheets are larger than 256 MiB unzipped", 2},
		{"a part of 9 MiB", packed(t, 9<<20, 0, "xl/workbook.xml"), `x.xlsx: part "xl/workbook.xml" is larger than 8 MiB unzipped`, 2},
		{"pictures of 80 MiB", packed(t, 7<<20, 0, "xl/workbook.xml", "xl/media/1", "xl/media/2", "xl/media/3", "xl/media/4", "xl/media/5", "xl/media/6", "xl/media/7", "xl/media/8", "xl/media/9", "xl/media/10"), "x.xlsx: pictures and other parts beside the sheets are larger than 64 MiB unzipped", 2},
		{"a false size", packed(t, 1<<20, 10, "xl/workbook.xml"), "x.xlsx: the file is damaged, or not a workbook", 4},
		{"too many parts", packed(t, 1, 0, many...), "x.xlsx: the file has more than 5000 parts", 8},
		{"too many sheets", workbook(t, sheets, nil, nil), "x.xlsx: the file has more than 100 sheets", 64},
		{"a cell in the far corner", farCorner, "", 64},
		{"thousands of wide rows", wide(1000), "x.xlsx: the sheets have more than 10000000 cells", 1200},
		{"too many merged cells", rewritten(t, workbook(t, one, simple, nil), "xl/worksheets/sheet1.xml", "</sheetData>", "</sheetData><mergeCells>"+merges.String()+"</mergeCells>"), "", 64},
		{"a large file", make([]byte, MaxBytes+1), "x.xlsx: the file is larger than 64 MiB", 2},
		{"a text document", packed(t, 1, 0, "word/document.xml"), "x.xlsx: the file is a text document (DOCX), which is not read", 2},
		{"a binary workbook", packed(t, 1, 0, "xl/workbook.bin"), "x.xlsx: the file is a binary workbook (XLSB), which is not read", 2},
		{"an OpenDocument file", packed(t, 1, 0, "content.xml"), "x.xlsx: the file is an OpenDocument file, which is not read", 2},
		{"a zip file", packed(t, 1, 0, "readme"), "x.xlsx: the file is a zip file, but not a workbook", 2},
		{"an empty workbook part", packed(t, 0, 0, "xl/workbook.xml"), "x.xlsx: the file is damaged, or not a workbook", 4},
	} {
		t.Run(c.name, func(t *testing.T) {
			var before, after runtime.MemStats
			runtime.ReadMemStats(&before)
			profiles, err := Read("x.xlsx", c.data, Options{})
			runtime.ReadMemStats(&after)
			got := ""
			if err != nil {
				got = err.Error()
			}
			if got != c.want || err == nil && layers(&profiles[0]) != simpleWant {
				t.Errorf("got  %s\nwant %s", got, c.want)
			}
			used := (after.TotalAlloc - before.TotalAlloc) >> 20
			t.Logf("%d MiB allocated", used)
			if used > c.most {
				t.Errorf("%d MiB allocated, want at most %d", used, c.most)
			}
		})
	}
}

// A file cut off anywhere is refused as damaged.
func TestTruncated(t *testing.T) {
	data := workbook(t, one, simple, nil)
	for n := 4; n < len(data); n += 97 {
		_, err := Read("x.xlsx", data[:n], Options{})
		var faults profile.Faults
		if !errors.As(err, &faults) || !strings.Contains(err.Error(), "damaged") || faults[0].Hint == "" {
			t.Fatalf("the first %d bytes: %v", n, err)
		}
	}
}

// Any byte changed gives profiles or faults; a sheet whose XML breaks off is
// damaged.
func TestDamaged(t *testing.T) {
	data := workbook(t, one, simple, nil)
	random := rand.New(rand.NewPCG(1, 2))
	for range 300 {
		damaged := bytes.Clone(data)
		damaged[random.IntN(len(data))] ^= byte(1 + random.IntN(255))
		checkRead(t, damaged, "")
	}
	broken := rewritten(t, data, "xl/worksheets/sheet1.xml", "</row><row", "</row><<row")
	if _, err := Read("x.xlsx", broken, Options{}); err == nil || err.Error() != `x.xlsx: sheet "Sheet1" is damaged, or not a workbook` {
		t.Errorf("broken XML: %v", err)
	}
}

// checkRead reads a file and checks that what comes out is in order.
func checkRead(t *testing.T, data []byte, units string) {
	profiles, err := Read("fuzz.xlsx", data, Options{Units: units})
	if err != nil {
		var faults profile.Faults
		if !errors.As(err, &faults) || len(faults) == 0 || len(faults) > profile.MaxFaults+2 {
			t.Fatalf("error %v", err)
		}
		for _, f := range faults {
			if f.Text == "" || f.Place.Line > 0 && f.Place.Cell == "" {
				t.Errorf("fault %+v", f)
			}
		}
		return
	}
	names := map[string]bool{}
	for i := range profiles {
		p := &profiles[i]
		if faults := profile.Validate(p); len(faults) > 0 || names[p.Name] || len(p.Reading.Rows) != len(p.Layers) {
			t.Errorf("profile %q: %v, %d rows", p.Name, faults, len(p.Reading.Rows))
		}
		names[p.Name] = true
	}
	if len(profiles) == 0 {
		t.Error("neither profiles nor faults")
	}
}

// FuzzRead looks for workbooks that Read neither reads nor refuses in order.
// The sheet's XML is what is changed; zipped bytes would rarely get past the
// checksums.
func FuzzRead(f *testing.F) {
	base := workbook(f, one, nil, nil)
	seeds := []cells{simple, with(simple, cells{"Sheet1!C3": "fast", "Sheet1!B4": "=B3+8"}), {
		"Sheet1!A1": "North", "Sheet1!A2": line("bottom (m)", "Vs (m/s)", nil, "top (ft)", "Vs (ft/s)"), "Sheet1!A3": line(2, 180, nil, 0, 1000),
		"Sheet1!A5": "name: South", "Sheet1!A6": line("line", "bottom", "Vs"), "Sheet1!A7": line("L1", "4,5", 300)}}
	for _, c := range seeds {
		data := workbook(f, one, c, func(f *excelize.File) { _ = f.MergeCell("Sheet1", "A2", "A3") })
		archive, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
		must(f, err)
		sheet, err := archive.Open("xl/worksheets/sheet1.xml")
		must(f, err)
		xml, err := io.ReadAll(sheet)
		must(f, err)
		f.Add(xml, "")
		f.Add(bytes.ReplaceAll(xml, []byte(` t="s"`), []byte(` t="inlineStr"`)), "m, m/s")
	}
	inline := `<worksheet><sheetData><row r="1"><c t="str"><v>bottom</v></c><c t="str"><v>Vs</v></c></row><row r="2"><c><v>5</v></c><c><v>200</v></c></row></sheetData></worksheet>`
	f.Add([]byte(inline), "m, m/s")
	f.Fuzz(func(t *testing.T, xml []byte, units string) {
		checkRead(t, replaced(t, base, "xl/worksheets/sheet1.xml", xml), units)
		checkRead(t, xml, units)
	})
}

// replaced is a workbook with the content of one part replaced.
func replaced(t testing.TB, data []byte, part string, content []byte) []byte {
	archive, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	must(t, err)
	var b bytes.Buffer
	w := zip.NewWriter(&b)
	for _, f := range archive.File {
		if f.Name != part {
			must(t, w.Copy(f))
			continue
		}
		out, err := w.Create(part)
		must(t, err)
		_, err = out.Write(content)
		must(t, err)
	}
	must(t, w.Close())
	return b.Bytes()
}

// A sheet of a great many rows is read as a stream and says that it was not
// inspected. The live heap stays far below the size of the sheet's cells held
// apart, and nothing is left in the folder of temporary files.
func TestLargeSheet(t *testing.T) {
	n := 100_000
	f := excelize.NewFile()
	w, err := f.NewStreamWriter("Sheet1")
	must(t, err)
	must(t, w.SetRow("A1", line("line", "top (m)", "bottom (m)", "Vs (m/s)")))
	for i := range n {
		z := i % 20
		must(t, w.SetRow(fmt.Sprint("A", i+2), line(fmt.Sprint("L", i/20), z, z+1, 150+10*z)))
	}
	must(t, w.Flush())
	b, err := f.WriteToBuffer()
	must(t, err)
	must(t, f.Close())
	t.Setenv("TMPDIR", t.TempDir())
	profiles, err := Read("x.xlsx", b.Bytes(), Options{})
	if err != nil || len(profiles) != n/20 {
		t.Fatalf("%d profiles, %v", len(profiles), err)
	}
	last := profiles[len(profiles)-1]
	if l := last.Layers[19]; l.Vs != 340 || l.Line != int32(n+1) || last.Notes[0].ID != "sheet-not-inspected" {
		t.Errorf("%+v, notes %v", l, last.Notes)
	}
	if left, _ := filepath.Glob(filepath.Join(os.TempDir(), "*")); len(left) > 0 {
		t.Errorf("left behind: %v", left)
	}
}
