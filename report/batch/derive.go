package batch

import (
	"errors"
	"io"
	"io/fs"

	"shearbook/report"
	"shearbook/vs30/siteclass"
)

// What is made from the tables of a batch's folder.
const (
	Package         = "datapackage.json" // what the tables' columns are
	MapLayer        = "summary.geojson"
	JSONLines       = "summary.jsonl"
	Workbook        = "summary.xlsx"
	SummaryMarkdown = "summary.md"
	SummaryHTML     = "summary.html"
	SummaryPDF      = "summary.pdf"
	Figures         = "figures"
)

// DeriveOptions says what is made from the tables of a batch, and what the
// summary's pages say beyond them.
type DeriveOptions struct {
	GeoJSON bool // summary.geojson
	JSON    bool // summary.jsonl
	XLSX    bool // summary.xlsx
	Report  bool // summary.md, summary.html, summary.pdf and figures

	Codes []*siteclass.Code // of the rows, for titles, bounds and standing; what other codes the rows name is told without these
	Facts report.Facts      // under which the rows were decided, but for what a manifest said
	Near  float64           // %, the margin that was flagged; 0 is Near, below 0 none

	Title      string // "Seismic site classification: batch" if ""
	Project    string
	PreparedBy string
	Date       string // as it is to be printed
	Letter     bool   // paper: Letter, not A4
	US         bool   // ft and ft/s in the pages; the tables stay in SI
	Settings   []Setting
	Version    string // "shearbook 1.0.0"
	Command    string // that made the batch

	// Template is the notebook, without front matter, that the pages are made
	// from; templates.Batch if "".
	Template string
}

// Setting is one choice of the run that the pages tell.
type Setting struct{ Name, Value string }

func (o *DeriveOptions) title() string {
	if o.Title == "" {
		return "Seismic site classification: batch"
	}
	return o.Title
}

func (o *DeriveOptions) near() float64 { return near(o.Near) }

// Derive makes what opt asks for from summary.csv, faults.csv and sources.csv
// in dir, and puts it beside them; datapackage.json always. It reads nothing
// else and no clock, so that equal tables give equal bytes however they came
// to be. The tables may have any number of rows: no more than a few of them
// are held. The files appear together once all are whole; what an earlier run
// left and this one was not asked for goes away. The error is a
// profile.Faults where a table is not one that a batch wrote.
func Derive(dir string, opt DeriveOptions) error {
	s := newStage(dir)
	defer s.discard()
	err := s.write(Package, func(w io.Writer) error { return writePackage(w, &opt) })
	if err == nil && (opt.GeoJSON || opt.JSON || opt.XLSX) {
		err = deriveRows(s, &opt)
	}
	if err == nil && opt.Report {
		err = publish(s, &opt)
	}
	if err == nil {
		err = s.commit()
	}
	if err != nil {
		return err
	}
	return removeStale(dir, s.names)
}

// deriveRows makes what is one row after another, in one pass.
func deriveRows(s *stage, opt *DeriveOptions) (err error) {
	t, in, err := openTable(s.dir, Summary, Columns)
	if err != nil {
		return err
	}
	defer in.Close()
	var sinks sinks
	if err = sinks.open(s, opt); err == nil {
		err = sinks.pour(t)
	}
	return sinks.close(s, err)
}

// sinks are the outputs that rows go to.
type sinks struct {
	files  []sinkFile
	object *jsonRow
	lines  *jsonLines
	layer  *mapLayer
	book   *workbook
}

type sinkFile struct {
	name  string
	file  io.Closer
	close func() error
}

func (k *sinks) open(s *stage, opt *DeriveOptions) error {
	k.object = newJSONRow()
	for _, o := range []struct {
		wanted bool
		name   string
		begin  func(io.Writer) func() error
	}{
		{opt.JSON, JSONLines, func(w io.Writer) func() error { k.lines = newJSONLines(w); return k.lines.close }},
		{opt.GeoJSON, MapLayer, func(w io.Writer) func() error { k.layer = newMapLayer(w); return k.layer.close }},
		{opt.XLSX, Workbook, func(w io.Writer) func() error { k.book = newWorkbook(w); return k.book.close }},
	} {
		if !o.wanted {
			continue
		}
		f, err := s.create(o.name)
		if err != nil {
			return err
		}
		k.files = append(k.files, sinkFile{o.name, f, o.begin(f)})
	}
	return nil
}

// pour writes every row of a table to every output.
func (k *sinks) pour(t *table) error {
	for {
		record, err := t.read()
		if err == io.EOF {
			return nil
		}
		if err == nil {
			err = k.row(t, record)
		}
		if err != nil {
			return err
		}
	}
}

func (k *sinks) row(t *table, record [][]byte) error {
	if k.book != nil {
		if err := k.book.row(t, record); err != nil {
			return err
		}
	}
	if k.lines == nil && k.layer == nil {
		return nil
	}
	object, err := k.object.of(t, record)
	if err == nil && k.lines != nil {
		err = k.lines.row(object)
	}
	if err == nil && k.layer != nil {
		err = k.layer.row(t, record, object)
	}
	return err
}

// close ends the outputs. A file that could not be written is named.
func (k *sinks) close(s *stage, err error) error {
	for _, f := range k.files {
		if err == nil {
			err = f.close()
		}
		if closed := f.file.Close(); err == nil {
			err = closed
		}
		var path *fs.PathError
		if errors.As(err, &path) {
			err = s.failed(f.name, err)
		}
	}
	return err
}
