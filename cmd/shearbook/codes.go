package main

import (
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"shearbook/report"
	"shearbook/report/notebook"
	"shearbook/vs30/siteclass"
)

func newCodes(s streams) *cobra.Command {
	c := &cobra.Command{
		Use:   "codes [ID]",
		Short: "List the codes, or print one code's table",
		Long: `codes lists the codes that shearbook can classify under. With an ID it prints
that code's table as it is printed, its conditions, and what the print leaves
open. The standing says how well each part is known to agree with the print.`,
		Example:   "  shearbook codes\n  shearbook codes asce-7-16",
		Args:      arguments(0, 1, "no more than one code"),
		ValidArgs: codeIDs(),
		RunE: func(_ *cobra.Command, args []string) error {
			text := listCodes()
			if len(args) == 1 {
				code, err := siteclass.Find(args[0])
				if err != nil {
					return usageError{err, "`shearbook codes` lists them"}
				}
				text = s.describe(code)
			}
			_, err := io.WriteString(s.out, text+"\n"+wrap(report.Caution, width, "")+"\n")
			return err
		},
	}
	return c
}

// listCodes is one line a code.
func listCodes() string {
	g := grid{wraps: 1, rows: [][]string{{"ID", "Edition", "Parameter", "Depth", "Standing"}}}
	for _, c := range siteclass.All() {
		g.rows = append(g.rows, []string{c.ID, c.Edition, c.Parameter, c.DepthText, c.Standing.String()})
	}
	return g.String()
}

// describe is one code with its table.
func (s streams) describe(c *siteclass.Code) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s\n", s.bold(c.ID+": "+c.Edition))
	line := func(label, text string) {
		if text != "" {
			fmt.Fprintf(&b, "  %s%s\n", pad(label, 11), wrap(text, width-13, strings.Repeat(" ", 13)))
		}
	}
	line("title", c.Title)
	line("used in", c.Region)
	line("clause", c.Clause+", "+c.Table)
	line("parameter", c.Parameter+", over "+c.DepthText)
	line("datum", strings.TrimSuffix(c.Datum.String()+"; "+c.DatumNote, "; "))
	line("standing", c.Standing.String())
	line("source", c.Source)

	t := notebook.ClassTable(c)
	g := grid{indent: "  ", wraps: 1, rows: [][]string{}}
	var head []string
	for _, col := range t.Columns {
		head = append(head, report.PlainText(col.Header))
	}
	g.rows = append(g.rows, head)
	for _, r := range t.Rows {
		g.rows = append(g.rows, cells(r.Cells))
	}
	b.WriteString("\n" + g.String())
	if len(c.Conditions) > 0 {
		b.WriteString("\n  conditions beside the average\n")
		for _, cond := range c.Conditions {
			text := fmt.Sprintf("%s: %s (%s; %s)", notebook.ConditionClass(&cond), cond.Text, cond.Clause, cond.Standing)
			fmt.Fprintf(&b, "    - %s\n", wrap(text, width, "      "))
		}
	}
	writeList(&b, "what the print leaves open", c.Notes)
	return b.String()
}
