package spreadsheet

import (
	"bytes"
	"errors"
	"math"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"
)

// written is the workbook that write writes.
func written(t testing.TB, write func(w *Writer)) []byte {
	t.Helper()
	var b bytes.Buffer
	w := NewWriter(&b)
	write(w)
	must(t, w.Close())
	return b.Bytes()
}

// opened opens a workbook with excelize v2.11.
func opened(t testing.TB, data []byte) *excelize.File {
	t.Helper()
	f, err := excelize.OpenReader(bytes.NewReader(data))
	must(t, err)
	t.Cleanup(func() { f.Close() })
	return f
}

// Whatever a cell holds comes back as it was: excelize reads what was written.
func TestWriterCells(t *testing.T) {
	texts := []string{
		"plain", " blanks ", "a<b>&\"c'", "=1+1", "007", "1e5", "2026-05-05", "\x00\x07\x1f", "a\r\nb\tc", "_x000D_", "_x005F_",
		"_xZZZZ_", "ü €", "\ufffe", strings.Repeat("x", MaxCell),
	}
	numbers := []float64{0, -1.5, 1e-300, 1e300, 0.1, 180, math.MaxFloat64}
	data := written(t, func(w *Writer) {
		must(t, w.Sheet("Äb c", []Column{{Heading: "text"}, {Heading: "number", Width: 20.5}}, []Cell{Text("title")}, nil))
		for i := range texts {
			must(t, w.Row(Text(texts[i]), Number(numbers[i%len(numbers)])))
		}
		must(t, w.Row(Number(math.NaN()), Cell{}, Number(math.Inf(1)), Text(""), Text("far")))
		must(t, w.Sheet("two", nil))
	})
	f := opened(t, data)
	if diff := cmp.Diff([]string{"Äb c", "two"}, f.GetSheetList()); diff != "" {
		t.Error(diff)
	}
	for i, want := range texts {
		at, _ := excelize.CoordinatesToCellName(1, i+4)
		got, err := f.GetCellValue("Äb c", at)
		must(t, err)
		if got != want {
			t.Errorf("%s: got %.60q, want %.60q", at, got, want)
		}
		at, _ = excelize.CoordinatesToCellName(2, i+4)
		got, err = f.GetCellValue("Äb c", at, excelize.Options{RawCellValue: true})
		must(t, err)
		if v, err := strconv.ParseFloat(got, 64); err != nil || v != numbers[i%len(numbers)] {
			t.Errorf("%s: got %q, want %v", at, got, numbers[i%len(numbers)])
		}
	}
	for at, want := range map[string]string{"A1": "title", "A3": "text", "B3": "number", "A19": "", "C19": "", "E19": "far"} {
		if got, err := f.GetCellValue("Äb c", at); err != nil || got != want {
			t.Errorf("%s: %q, %v; want %q", at, got, err, want)
		}
	}
}

// The header is bold and stays in sight, and columns are as wide as asked.
func TestWriterLook(t *testing.T) {
	f := opened(t, written(t, func(w *Writer) {
		must(t, w.Sheet("S", []Column{{Heading: "a"}, {Heading: "b", Width: 20.5}, {Heading: strings.Repeat("c", 30)}}, []Cell{Text("title")}))
		must(t, w.Row(Number(1)))
	}))
	for at, bold := range map[string]bool{"A1": false, "A2": true, "B2": true, "A3": false} {
		id, err := f.GetCellStyle("S", at)
		must(t, err)
		style, err := f.GetStyle(id)
		must(t, err)
		if got := style.Font != nil && style.Font.Bold; got != bold {
			t.Errorf("%s is bold: %v", at, got)
		}
	}
	panes, err := f.GetPanes("S")
	must(t, err)
	if !panes.Freeze || panes.YSplit != 2 || panes.TopLeftCell != "A3" {
		t.Errorf("panes: %+v", panes)
	}
	for column, want := range map[string]float64{"A": 8, "B": 20.5, "C": 32} {
		if got, err := f.GetColWidth("S", column); err != nil || got != want {
			t.Errorf("column %s: %v wide, %v; want %v", column, got, err, want)
		}
	}
}

// The same calls give the same bytes; no clock is read.
func TestWriterBytes(t *testing.T) {
	write := func(w *Writer) {
		must(t, w.Sheet("S", []Column{{Heading: "a"}}))
		must(t, w.Row(Number(1)))
	}
	if !bytes.Equal(written(t, write), written(t, write)) {
		t.Error("two runs differ")
	}
}

func TestWriterRefuses(t *testing.T) {
	var none bytes.Buffer
	for want, write := range map[string]func(w *Writer) error{
		"a workbook needs a sheet": func(w *Writer) error { return w.Close() },
		"a row needs a sheet":      func(w *Writer) error { return w.Row(Number(1)) },
		`a sheet cannot have the name "s": another sheet has it`: func(w *Writer) error {
			w.Sheet("S", nil)
			return w.Sheet("s", nil)
		},
		`a sheet cannot have the name " ": it is blank`:                                       func(w *Writer) error { return w.Sheet(" ", nil) },
		`a sheet cannot have the name "a/b": it has one of []:*?/\ in it`:                     func(w *Writer) error { return w.Sheet("a/b", nil) },
		`a sheet cannot have the name "'a": it has an apostrophe at its beginning or end`:     func(w *Writer) error { return w.Sheet("'a", nil) },
		`a sheet cannot have the name "a\nb": it is not plain text`:                           func(w *Writer) error { return w.Sheet("a\nb", nil) },
		`a sheet cannot have the name "history": spreadsheet programs keep it for themselves`: func(w *Writer) error { return w.Sheet("history", nil) },
		`a sheet cannot have the name "` + strings.Repeat("n", 32) + `": it is longer than 31 characters`: func(w *Writer) error {
			return w.Sheet(strings.Repeat("n", 32), nil)
		},
		"the text of cell B2 is longer than 32767 characters": func(w *Writer) error {
			w.Sheet("S", nil)
			return w.Row(Cell{}, Text(strings.Repeat("é", MaxCell+1)))
		},
		`row 2 of sheet "S" would have more than 16384 cells`: func(w *Writer) error {
			w.Sheet("S", nil)
			return w.Row(make([]Cell, MaxColumns+1)...)
		},
		`sheet "S" would have more than 16384 columns`: func(w *Writer) error { return w.Sheet("S", make([]Column, MaxColumns+1)) },
		`sheet "S" would have more than 1048576 rows: write several files, or CSV`: func(w *Writer) error {
			w.Sheet("S", nil)
			var err error
			for range MaxRows {
				err = errors.Join(err, w.Row())
			}
			return err
		},
	} {
		w := NewWriter(&none)
		if err := write(w); err == nil || err.Error() != want {
			t.Errorf("got %v, want %s", err, want)
		}
		if err := w.Close(); err == nil || err.Error() != want {
			t.Errorf("Close: got %v, want %s", err, want)
		}
	}
}

// failing fails after n bytes.
type failing struct{ n int }

func (f *failing) Write(p []byte) (int, error) {
	if f.n -= len(p); f.n < 0 {
		return 0, errors.New("the disk is full")
	}
	return len(p), nil
}

// An error of the writer below is told, wherever it strikes.
func TestWriterFails(t *testing.T) {
	whole := len(written(t, func(w *Writer) { w.Sheet("S", []Column{{Heading: "a"}}); w.Row(Number(1)) }))
	for n := range whole {
		w := NewWriter(&failing{n})
		w.Sheet("S", []Column{{Heading: "a"}})
		w.Row(Number(1))
		if err := w.Close(); err == nil {
			t.Fatalf("no error after %d bytes of %d", n, whole)
		}
	}
}
