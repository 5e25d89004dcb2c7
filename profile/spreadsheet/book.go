package spreadsheet

import (
	"archive/zip"
	"bytes"
	"path"
	"strings"

	"github.com/xuri/excelize/v2"

	"shearbook/profile"
)

const hintSave = "open it in a spreadsheet program, and save it as XLSX or the table as CSV"

// checkZip looks at the zip file's own list of its parts, before anything is
// unzipped: whether it is a workbook, and how large.
func (r *reader) checkZip(data []byte) bool {
	if len(data) > MaxBytes {
		r.stop("split it", "the file is larger than %d MiB", MaxBytes>>20)
		return false
	}
	archive, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		r.stop("was it copied or downloaded to its end?", "the file is damaged: as a zip file it has no list of its parts")
		return false
	}
	if len(archive.File) > MaxFiles {
		r.stop(hintSave, "the file has more than %d parts", MaxFiles)
		return false
	}
	return r.checkKind(archive) && r.checkSizes(archive)
}

// checkKind looks for the parts of a workbook.
func (r *reader) checkKind(archive *zip.Reader) bool {
	has := map[string]bool{}
	for _, part := range archive.File {
		has[strings.ToLower(strings.ReplaceAll(part.Name, `\`, "/"))] = true
	}
	const hint = "save it as XLSX, or the table as CSV"
	switch {
	case has["xl/workbook.xml"]:
		return true
	case has["xl/workbook.bin"]:
		r.stop(hint, "the file is a binary workbook (XLSB), which is not read")
	case has["content.xml"]:
		r.stop(hint, "the file is an OpenDocument file, which is not read")
	case has["word/document.xml"]:
		r.stop("copy the table into a spreadsheet", "the file is a text document (DOCX), which is not read")
	default:
		r.stop("unpack it, and name a file in it", "the file is a zip file, but not a workbook")
	}
	return false
}

// checkSizes adds up how large the parts are unzipped. What they claim is
// binding: unzipping ends in an error where a part is larger.
func (r *reader) checkSizes(archive *zip.Reader) bool {
	var sheets, others uint64
	for _, part := range archive.File {
		size, name := part.UncompressedSize64, strings.ToLower(strings.ReplaceAll(part.Name, `\`, "/"))
		switch {
		case size > MaxUnzipped:
			sheets = MaxUnzipped + 1
		case strings.HasPrefix(name, "xl/worksheets/sheet"), name == "xl/sharedstrings.xml":
			sheets += size
		case size > MaxPart && (path.Ext(name) == ".xml" || path.Ext(name) == ".rels"):
			r.stop(hintSave, "part %s is larger than %d MiB unzipped", profile.Quote(part.Name), MaxPart>>20)
			return false
		default:
			others += size
		}
	}
	switch {
	case sheets > MaxUnzipped:
		r.stop("keep the layers in a workbook of their own", "the sheets are larger than %d MiB unzipped", MaxUnzipped>>20)
	case others > MaxParts:
		r.stop("keep the layers in a workbook of their own", "pictures and other parts beside the sheets are larger than %d MiB unzipped", MaxParts>>20)
	}
	return sheets <= MaxUnzipped && others <= MaxParts
}

// readBook reads every sheet, and then the tables that they hold. A damaged
// part may make the library that takes the file apart panic; that too is
// reported as damage.
func (r *reader) readBook(data []byte) {
	if r.readSheets(data) && r.total == 0 {
		r.readTables()
	}
}

func (r *reader) readSheets(data []byte) (ok bool) {
	defer func() {
		if recover() != nil {
			r.damaged("")
			ok = false
		}
	}()
	f, err := excelize.OpenReader(bytes.NewReader(data), excelize.Options{UnzipSizeLimit: MaxUnzipped + MaxParts, RawCellValue: true})
	if err != nil {
		r.damaged("")
		return false
	}
	defer f.Close()
	b := newBook(f)
	list := f.GetSheetList()
	if len(list) > MaxSheets {
		r.stop("keep the layers in a workbook of their own", "the file has more than %d sheets", MaxSheets)
		return false
	}
	for _, name := range list {
		if !r.readSheet(b, name) {
			return false
		}
	}
	return true
}

// damaged tells that the file, or a sheet of it, cannot be taken apart.
func (r *reader) damaged(sheet string) {
	what := "the file"
	if sheet != "" {
		what = "sheet " + profile.Quote(sheet)
	}
	r.stop(hintSave, "%s is damaged, or not a workbook", what)
}

// book is an open workbook.
type book struct {
	file      *excelize.File
	formats   bool // some cell may be formatted as a date or a percentage
	inspected bool // its sheets may be inspected
	damaged   bool // a sheet could not be read to its end
}

func newBook(f *excelize.File) *book {
	b := &book{file: f, inspected: true}
	for i := 0; !b.formats; i++ {
		style, err := f.GetStyle(i)
		if err != nil {
			break
		}
		b.formats = style.NumFmt != 0
	}
	f.Pkg.Range(func(_, part any) bool {
		if xml, ok := part.([]byte); ok && bytes.Count(xml, []byte("mergeCell ")) > MaxMerged {
			b.inspected = false
		}
		return b.inspected
	})
	return b
}
