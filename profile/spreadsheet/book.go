package spreadsheet

import (
	"archive/zip"
	"bytes"
	"errors"
	"path"
	"strings"

	"shearbook/profile"
)

const hintSave = "open it in a spreadsheet program, and save it as XLSX or the table as CSV"

// checkZip looks at the zip file's own list of its parts, before anything is
// unzipped: whether it is a workbook, and how large.
func (r *reader) checkZip(data []byte) (*zip.Reader, bool) {
	if len(data) > MaxBytes {
		r.stop("split it", "the file is larger than %d MiB", MaxBytes>>20)
		return nil, false
	}
	archive, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		r.stop("was it copied or downloaded to its end?", "the file is damaged: as a zip file it has no list of its parts")
		return nil, false
	}
	if len(archive.File) > MaxFiles {
		r.stop(hintSave, "the file has more than %d parts", MaxFiles)
		return nil, false
	}
	return archive, r.checkKind(archive) && r.checkSizes(archive)
}

// checkKind looks for the parts of a workbook.
func (r *reader) checkKind(archive *zip.Reader) bool {
	has := map[string]bool{}
	for _, part := range archive.File {
		has[partName(part.Name)] = true
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

// partName is the name of a part as names are compared: parts that differ in
// case alone are the same (ISO/IEC 29500-2, part names).
func partName(name string) string {
	return strings.ToLower(strings.ReplaceAll(name, `\`, "/"))
}

// checkSizes adds up how large the parts claim to be unzipped, so that most
// files that are too large are refused at once. Reading them counts again.
func (r *reader) checkSizes(archive *zip.Reader) bool {
	var sheets, others uint64
	for _, part := range archive.File {
		size, name := part.UncompressedSize64, partName(part.Name)
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

// readBook reads every sheet, and then the tables that they hold.
func (r *reader) readBook(archive *zip.Reader) {
	if r.readSheets(archive) && r.total == 0 {
		r.readTables()
	}
}

func (r *reader) readSheets(archive *zip.Reader) bool {
	b, err := openBook(archive)
	if err != nil {
		r.unreadable("", err)
		return false
	}
	if len(b.sheets) > MaxSheets {
		r.stop("keep the layers in a workbook of their own", "the file has more than %d sheets", MaxSheets)
		return false
	}
	for i := range b.sheets {
		if !r.readSheet(b, &b.sheets[i]) {
			return false
		}
	}
	return true
}

// unreadable tells why the file, or a sheet of it, cannot be taken apart,
// unless that was told already.
func (r *reader) unreadable(sheet string, err error) {
	what := "the file"
	if sheet != "" {
		what = "sheet " + profile.Quote(sheet)
	}
	switch {
	case errors.Is(err, errStopped):
	case errors.Is(err, errLarge):
		r.stop("keep the layers in a workbook of their own", "the sheets are larger than %d MiB unzipped", MaxUnzipped>>20)
	default:
		r.stop(hintSave, "%s is damaged, or not a workbook", what)
	}
}
