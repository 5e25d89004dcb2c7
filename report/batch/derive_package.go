package batch

import (
	"encoding/json"
	"io"

	"shearbook/report"
)

// dataPackage is datapackage.json: a Data Package of the Frictionless
// specifications, version 1 (data-package, tabular-data-resource and
// table-schema, 2017), which says of every column of the tables what it is,
// of what type and in what unit. The unit of a field, and the confirmation,
// are members of our own, which the specification allows.
type dataPackage struct {
	Profile      string         `json:"profile"`
	Name         string         `json:"name"`
	Title        string         `json:"title"`
	Confirmation string         `json:"confirmation"` // report.Caution
	Resources    []dataResource `json:"resources"`
}

type dataResource struct {
	Profile     string       `json:"profile"`
	Name        string       `json:"name"`
	Path        string       `json:"path"`
	Title       string       `json:"title"`
	Description string       `json:"description,omitempty"`
	Format      string       `json:"format"`
	MediaType   string       `json:"mediatype"`
	Encoding    string       `json:"encoding,omitempty"`
	Schema      *tableSchema `json:"schema,omitempty"`
}

type tableSchema struct {
	Fields        []schemaField `json:"fields"`
	MissingValues []string      `json:"missingValues"`
}

type schemaField struct {
	Name        string `json:"name"`
	Type        string `json:"type"`
	Unit        string `json:"unit,omitempty"`
	Description string `json:"description"`
}

// writePackage writes the datapackage.json of a folder that holds what opt
// asks for.
func writePackage(w io.Writer, opt *DeriveOptions) error {
	p := dataPackage{Profile: "data-package", Name: "batch", Title: opt.title(), Confirmation: report.Caution,
		Resources: []dataResource{
			csvResource("summary", Summary, "One row a profile and code, in the order of the input",
				"Texts stand as the input has them. A spreadsheet program may take one that begins with = + - or @ for a formula: import such columns as text, or take the workbook, whose texts are typed.", Columns),
			csvResource("faults", FaultsIn, "Every fault, and every note where notes were asked for", "", FaultColumns),
			csvResource("sources", Sources, "Every file that was read", "", SourceColumns),
		}}
	for _, r := range []struct {
		wanted                         bool
		name, path, title, media, kind string
	}{
		{opt.GeoJSON, "map", MapLayer, "The rows of summary.csv as a map layer", "application/geo+json", "geojson"},
		{opt.JSON, "lines", JSONLines, "The rows of summary.csv as JSON, one object a line", "application/x-ndjson", "jsonl"},
		{opt.XLSX, "workbook", Workbook, "The rows of summary.csv as a workbook", "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet", "xlsx"},
	} {
		if r.wanted {
			p.Resources = append(p.Resources, dataResource{Profile: "data-resource", Name: r.name, Path: r.path, Title: r.title, Format: r.kind, MediaType: r.media})
		}
	}
	e := json.NewEncoder(w)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	return e.Encode(p)
}

func csvResource(name, path, title, description string, columns []Column) dataResource {
	r := dataResource{Profile: "tabular-data-resource", Name: name, Path: path, Title: title, Description: description,
		Format: "csv", MediaType: "text/csv", Encoding: "utf-8", Schema: &tableSchema{MissingValues: []string{""}}}
	for _, c := range columns {
		r.Schema.Fields = append(r.Schema.Fields, schemaField{c.Name, c.Type, c.Unit, c.What})
	}
	return r
}
