package main

import (
	"io"

	"shearbook/profile"
	"shearbook/profile/spreadsheet"
	"shearbook/report"
)

// classColumns are the columns of the workbook of classify, those of the
// summary of a batch that one answer has.
var classColumns = []struct {
	name string
	cell func(c *classified) spreadsheet.Cell
}{
	{"file", func(c *classified) spreadsheet.Cell { return spreadsheet.Text(c.file()) }},
	{"line", func(c *classified) spreadsheet.Cell { return atLeastOne(int(c.profile.Layers[0].Line)) }},
	{"profile", func(c *classified) spreadsheet.Cell { return spreadsheet.Text(c.profile.Name) }},
	{"code", func(c *classified) spreadsheet.Cell { return spreadsheet.Text(c.decision.Code.ID) }},
	{"class", func(c *classified) spreadsheet.Cell { return spreadsheet.Text(c.decision.Class) }},
	{"route", func(c *classified) spreadsheet.Cell { return spreadsheet.Text(c.decision.Route) }},
	{"velocity_mps", func(c *classified) spreadsheet.Cell { return aboveZero(c.decision.Velocity) }},
	{"depth_m", func(c *classified) spreadsheet.Cell { return aboveZero(c.decision.Thickness) }},
	{"vs30_mps", func(c *classified) spreadsheet.Cell {
		if c.vs30 == nil {
			return spreadsheet.Cell{}
		}
		return spreadsheet.Number(*c.vs30)
	}},
	{"depth_reached_m", func(c *classified) spreadsheet.Cell { return spreadsheet.Number(c.profile.DepthReached()) }},
	{"datum_m", func(c *classified) spreadsheet.Cell { return spreadsheet.Number(c.decision.Datum) }},
	{"basis", func(c *classified) spreadsheet.Cell { return spreadsheet.Text(c.decision.Basis) }},
	{"standing", func(c *classified) spreadsheet.Cell { return spreadsheet.Text(c.decision.Standing.String()) }},
	{"to_class", func(c *classified) spreadsheet.Cell {
		if c.decision.Margin == nil {
			return spreadsheet.Cell{}
		}
		return spreadsheet.Text(c.decision.Margin.ToClass)
	}},
	{"margin_percent", func(c *classified) spreadsheet.Cell {
		if c.decision.Margin == nil {
			return spreadsheet.Cell{}
		}
		return spreadsheet.Number(c.decision.Margin.Percent)
	}},
	{"latitude", func(c *classified) spreadsheet.Cell { return ifKnown(c.profile.Position.Latitude) }},
	{"longitude", func(c *classified) spreadsheet.Cell { return ifKnown(c.profile.Position.Longitude) }},
	{"easting", func(c *classified) spreadsheet.Cell { return ifKnown(c.profile.Position.Easting) }},
	{"northing", func(c *classified) spreadsheet.Cell { return ifKnown(c.profile.Position.Northing) }},
	{"epsg", func(c *classified) spreadsheet.Cell { return atLeastOne(c.profile.Position.EPSG) }},
}

func ifKnown(x profile.Optional) spreadsheet.Cell {
	if !x.Known {
		return spreadsheet.Cell{}
	}
	return spreadsheet.Number(x.Value)
}

func aboveZero(x float64) spreadsheet.Cell {
	return ifKnown(profile.Optional{Value: x, Known: x > 0})
}

func atLeastOne(n int) spreadsheet.Cell { return aboveZero(float64(n)) }

// file is the file that the profile was read from.
func (c *classified) file() string {
	if c.profile.Reading == nil {
		return ""
	}
	return c.profile.Reading.File
}

// writeClassBook writes answers as a workbook: a sheet with a row for each, and
// one with what must be known beside them. The caution stands above both.
func writeClassBook(w io.Writer, found []classified) error {
	caution := []spreadsheet.Cell{spreadsheet.Text(report.Caution)}
	columns := make([]spreadsheet.Column, len(classColumns))
	for i, c := range classColumns {
		columns[i].Heading = c.name
	}
	book := spreadsheet.NewWriter(w)
	_ = book.Sheet("classes", columns, caution) // Close returns the first error
	row := make([]spreadsheet.Cell, len(classColumns))
	for i := range found {
		for k, c := range classColumns {
			row[k] = c.cell(&found[i])
		}
		_ = book.Row(row...)
	}
	_ = book.Sheet("notes", []spreadsheet.Column{{Heading: "profile", Width: 20}, {Heading: "code", Width: 14}, {Heading: "kind", Width: 14}, {Heading: "text", Width: 100}}, caution)
	for i := range found {
		c := &found[i]
		say := func(kind, text string) {
			_ = book.Row(spreadsheet.Text(c.profile.Name), spreadsheet.Text(c.decision.Code.ID), spreadsheet.Text(kind), spreadsheet.Text(text))
		}
		for _, text := range noteTexts(c.decision.Notes) {
			say("note", text)
		}
		for _, text := range c.decision.Unassessed {
			say("not assessed", text)
		}
	}
	return book.Close()
}
