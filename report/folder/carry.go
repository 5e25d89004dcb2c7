package folder

import (
	"bytes"
	"io"
	"path"
	"strings"

	"shearbook/report"
	"shearbook/report/evidence"
	"shearbook/report/pdf"
)

// writePDF prints a document and adds its evidence. The manifest states the
// digest of the PDF before anything is added to it, so it is made last.
func writePDF(w io.Writer, d *report.Document, b evidence.Bundle, opt pdf.Options) error {
	var pages bytes.Buffer
	if err := pdf.Write(&pages, d, opt); err != nil {
		return err
	}
	m := b.Manifest
	m.Pages = evidence.Pages{SHA256: evidence.Digest(pages.Bytes()), Size: int64(pages.Len())}
	var carried []pdf.Attachment
	for i, f := range b.Files {
		if !m.Files[i].Withheld {
			carried = append(carried, attachment(f, m.Files[i].AttachedAs()))
		}
	}
	carried = append(carried, pdf.Attachment{Name: evidence.ManifestName, MIME: "application/json", Relation: pdf.Supplement,
		Description: "the files of this report with their SHA-256 digests", Data: m.Bytes()})
	whole, err := pdf.Attach(pages.Bytes(), carried)
	if err != nil {
		return err
	}
	_, err = w.Write(whole)
	return err
}

// attachment is a file as a PDF carries it under a name.
func attachment(f evidence.File, name string) pdf.Attachment {
	a := pdf.Attachment{Name: name, MIME: mediaType(f.Name), Description: string(f.Role), Relation: pdf.Data, Data: f.Data}
	switch f.Role {
	case evidence.Notebook:
		a.Relation = pdf.Source
	case evidence.Image:
		a.Relation = pdf.Supplement
	case evidence.Profile:
		a.Description = "velocities as read"
	case evidence.Results:
		a.Description = "results of this report"
	}
	return a
}

// mediaType returns the registered type of a file by its extension, "" where
// none fits.
func mediaType(name string) string {
	switch strings.ToLower(path.Ext(name)) {
	case ".md", ".markdown":
		return "text/markdown"
	case ".csv":
		return "text/csv"
	case ".tsv":
		return "text/tab-separated-values"
	case ".txt", ".ags", ".las":
		return "text/plain"
	case ".json":
		return "application/json"
	case ".xml":
		return "application/xml"
	case ".yaml", ".yml":
		return "application/yaml"
	case ".xlsx":
		return "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet"
	case ".png":
		return "image/png"
	case ".jpg", ".jpeg":
		return "image/jpeg"
	}
	return ""
}
