package main

import (
	"bytes"
	"io"
	"os"
	"path/filepath"
	"slices"
	"testing"

	"github.com/xuri/excelize/v2"

	"shearbook/report"
	"shearbook/report/batch"
)

// The workbook has a row for each answer, in columns that are those of a batch,
// and the caution and the notes beside them.
func TestClassBook(t *testing.T) {
	dir := t.TempDir()
	file, book := filepath.Join(dir, "a.csv"), filepath.Join(dir, "a.xlsx")
	const table = "profile,latitude,longitude,easting,northing,epsg,top_m,bottom_m,vs_mps\n=A,51,4,,,,0,40,300\nB,,,100,200,25831,0,5,600\nB,,,,,,5,,900\n"
	if err := os.WriteFile(file, []byte(table), 0o666); err != nil {
		t.Fatal(err)
	}
	var complaint bytes.Buffer
	if status := run([]string{"classify", file, "--code", "asce-7-16,ec8-2004", "--xlsx", book}, streams{out: io.Discard, err: &complaint}); status != done {
		t.Fatal(complaint.String())
	}
	f, err := excelize.OpenFile(book)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := f.GetRows("classes", excelize.Options{RawCellValue: true})
	if err != nil {
		t.Fatal(err)
	}
	if len(rows) != 6 || rows[0][0] != report.Caution {
		t.Fatalf("got %q", rows)
	}
	var known []string
	for _, c := range batch.Columns {
		known = append(known, c.Name)
	}
	at := 0
	for _, name := range rows[1] {
		i := slices.Index(known[at:], name)
		if i < 0 {
			t.Errorf("column %s is not one of a batch, or out of order", name)
			continue
		}
		at += i
	}
	cell := func(row int, name string) string {
		i := slices.Index(rows[1], name)
		if i < 0 || i >= len(rows[row]) {
			return ""
		}
		return rows[row][i]
	}
	for _, c := range []struct {
		row        int
		name, want string
	}{
		{2, "profile", "=A"}, {2, "code", "asce-7-16"}, {3, "code", "ec8-2004"}, {2, "class", "D"}, {3, "class", "C"}, {2, "velocity_mps", "300"},
		{2, "line", "2"}, {4, "line", "3"}, {2, "file", file}, {2, "depth_m", "30.48"}, {3, "depth_m", "30"}, {2, "latitude", "51"}, {2, "easting", ""},
		{4, "easting", "100"}, {4, "epsg", "25831"}, {4, "latitude", ""},
		// 30.48 m under ASCE 7 (100 ft): 30.48 / (5/600 + 25.48/900).
		{4, "velocity_mps", "831.776834445118"},
	} {
		got := cell(c.row, c.name)
		if c.name == "velocity_mps" {
			got = got[:min(len(got), len(c.want))]
		}
		if got != c.want {
			t.Errorf("row %d, %s: %q, want %q", c.row, c.name, got, c.want)
		}
	}
	notes, err := f.GetRows("notes")
	if err != nil || len(notes) < 4 || notes[0][0] != report.Caution || len(notes[2]) != 4 {
		t.Errorf("notes: %q, %v", notes, err)
	}
	if status := run([]string{"classify", file, "--code", "asce-7-16", "--xlsx", book}, streams{out: io.Discard, err: &complaint}); status != atFault {
		t.Error("a workbook was replaced without force")
	}
	if status := run([]string{"classify", file, "--code", "asce-7-16", "--xlsx", book, "--force"}, streams{out: io.Discard, err: &complaint}); status != done {
		t.Error(complaint.String())
	}
}
