package spreadsheet

import (
	"strconv"
	"strings"
)

// What the parts of a workbook are named by (ISO/IEC 29500-1 and -2).
const (
	declaration   = `<?xml version="1.0" encoding="UTF-8" standalone="yes"?>` + "\n"
	mainSpace     = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
	relationSpace = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
	packageSpace  = "http://schemas.openxmlformats.org/package/2006/relationships"
	typeSpace     = "http://schemas.openxmlformats.org/package/2006/content-types"
	mainType      = "application/vnd.openxmlformats-officedocument.spreadsheetml."
)

const packageRelations = declaration + `<Relationships xmlns="` + packageSpace + `">` +
	`<Relationship Id="rId1" Type="` + relationSpace + `/officeDocument" Target="xl/workbook.xml"/></Relationships>`

// styles are two: 0, plain, and 1, bold for headings. The two fills are those
// that every workbook has.
const styles = declaration + `<styleSheet xmlns="` + mainSpace + `">` +
	`<fonts count="2"><font><sz val="11"/><name val="Calibri"/><family val="2"/></font>` +
	`<font><b/><sz val="11"/><name val="Calibri"/><family val="2"/></font></fonts>` +
	`<fills count="2"><fill><patternFill patternType="none"/></fill><fill><patternFill patternType="gray125"/></fill></fills>` +
	`<borders count="1"><border><left/><right/><top/><bottom/><diagonal/></border></borders>` +
	`<cellStyleXfs count="1"><xf numFmtId="0" fontId="0" fillId="0" borderId="0"/></cellStyleXfs>` +
	`<cellXfs count="2"><xf numFmtId="0" fontId="0" fillId="0" borderId="0" xfId="0"/>` +
	`<xf numFmtId="0" fontId="1" fillId="0" borderId="0" xfId="0" applyFont="1"/></cellXfs>` +
	`<cellStyles count="1"><cellStyle name="Normal" xfId="0" builtinId="0"/></cellStyles></styleSheet>`

// workbook is the list of sheets.
func (w *Writer) workbook() string {
	var b strings.Builder
	b.WriteString(declaration + `<workbook xmlns="` + mainSpace + `" xmlns:r="` + relationSpace + `"><bookViews><workbookView/></bookViews><sheets>`)
	for i, name := range w.sheets {
		n := strconv.Itoa(i + 1)
		b.WriteString(`<sheet name="`)
		b.Write(appendText(nil, name))
		b.WriteString(`" sheetId="` + n + `" r:id="rId` + n + `"/>`)
	}
	b.WriteString(`</sheets></workbook>`)
	return b.String()
}

// workbookRelations says which part each sheet is.
func (w *Writer) workbookRelations() string {
	var b strings.Builder
	b.WriteString(declaration + `<Relationships xmlns="` + packageSpace + `">`)
	for i := range w.sheets {
		n := strconv.Itoa(i + 1)
		b.WriteString(`<Relationship Id="rId` + n + `" Type="` + relationSpace + `/worksheet" Target="worksheets/sheet` + n + `.xml"/>`)
	}
	b.WriteString(`<Relationship Id="rId` + strconv.Itoa(len(w.sheets)+1) + `" Type="` + relationSpace + `/styles" Target="styles.xml"/></Relationships>`)
	return b.String()
}

// contentTypes says what kind each part is of.
func (w *Writer) contentTypes() string {
	var b strings.Builder
	b.WriteString(declaration + `<Types xmlns="` + typeSpace + `">` +
		`<Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/>` +
		`<Default Extension="xml" ContentType="application/xml"/>` +
		`<Override PartName="/xl/workbook.xml" ContentType="` + mainType + `sheet.main+xml"/>` +
		`<Override PartName="/xl/styles.xml" ContentType="` + mainType + `styles+xml"/>`)
	for i := range w.sheets {
		b.WriteString(`<Override PartName="/xl/worksheets/sheet` + strconv.Itoa(i+1) + `.xml" ContentType="` + mainType + `worksheet+xml"/>`)
	}
	b.WriteString(`</Types>`)
	return b.String()
}
