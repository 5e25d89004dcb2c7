package main

import (
	"fmt"
	"io"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"shearbook/report"
	"shearbook/report/notebook"
	"shearbook/vs30/siteclass"
	"shearbook/vs30/siteclass/codefile"
)

// codesFlags are the flags of codes.
type codesFlags struct {
	format      string
	differences bool
	files       []string
}

func newCodes(s streams) *cobra.Command {
	var f codesFlags
	c := &cobra.Command{
		Use:   "codes [ID] | codes --differences ID ID",
		Short: "List the codes, print one code's table, or hold two side by side",
		Long: `codes lists the codes that shearbook can classify under. With an ID it prints
that code's table as it is printed, its conditions, and what the print leaves
open. The standing says how well each part is known to agree with the print.

--differences prints what differs between two codes, side by side: bounds and
operators, depth, datum, unit, conditions.

--format yaml writes one code's table as a file, for a jurisdiction's own
amendment to start from; --code-file reads such a file. A code that decides
by a rule of its own beside its table is not written: the table alone would
decide otherwise.

--format json writes all codes, or one:

  {"schema": 1, "confirmation": "…licensed engineer…", "codes": [{
    "id", "title", "edition", "region", "clause", "table", "parameter",
    "depth", "depth_m", "datum", "unit", "strength_unit", "standing",
    "own_rule", "classes": [{"class", "name", "vs", "n", "su", "rules",
    "also", "standing"}]}]}

depth is as the code words it, depth_m in metres. vs, n and su are ranges as
a table file has them: "> 1200", ">= 600, <= 1200", "600 to 1200", or "" where
the row has none; vs is in unit, su in strength_unit, n in blows per 0.3 m;
rules are in words, of a class that no column gives.
own_rule is true where the code does not decide by these rows alone. Fields
may be added; schema grows when one changes its meaning or goes away.`,
		Example: `  shearbook codes
  shearbook codes asce-7-16
  shearbook codes --differences asce-7-16 asce-7-22
  shearbook codes nbcc-2015 --format yaml > local.yaml`,
		Args: codesArguments,
		ValidArgsFunction: func(*cobra.Command, []string, string) ([]cobra.Completion, cobra.ShellCompDirective) {
			return codeIDs(), cobra.ShellCompDirectiveNoFileComp
		},
		RunE: func(_ *cobra.Command, args []string) error { return codes(s, f, args) },
	}
	fl := c.Flags()
	fl.StringVar(&f.format, "format", "text", "`text, json or yaml`")
	fl.BoolVar(&f.differences, "differences", false, "print what differs between two codes")
	codeFilesFlag(c, &f.files)
	completeWords(c, "format", "text", "json", "yaml")
	return c
}

// codesArguments checks the number of arguments: two with --differences.
func codesArguments(c *cobra.Command, args []string) error {
	if both, _ := c.Flags().GetBool("differences"); both { // fails only for a flag of another type
		return arguments(2, 2, "two codes to hold side by side")(c, args)
	}
	return arguments(0, 1, "no more than one code")(c, args)
}

// codes is the whole of `shearbook codes`.
func codes(s streams, f codesFlags, ids []string) error {
	own, err := readCodeFiles(f.files)
	if err != nil {
		return err
	}
	var chosen []*siteclass.Code
	for _, id := range ids {
		code, err := findCode(id, own)
		if err != nil {
			return err
		}
		chosen = append(chosen, code)
	}
	switch {
	case f.differences && f.format != "text":
		return misuse("leave --format out", "--differences prints text and not %s", f.format)
	case f.differences:
		return s.writeText(s.differences(chosen[0], chosen[1]))
	}
	switch f.format {
	case "text":
		if len(chosen) == 1 {
			return s.writeText(s.describe(chosen[0]))
		}
		return s.writeText(listCodes(allCodes(own)))
	case "json":
		if len(chosen) == 0 {
			chosen = allCodes(own)
		}
		return writeCodes(s.out, chosen)
	case "yaml":
		return writeTable(s.out, chosen)
	}
	return misuse("it is text, json or yaml", "format %q is not known", f.format)
}

// writeText writes a text with the caution below it.
func (s streams) writeText(text string) error {
	_, err := io.WriteString(s.out, text+"\n"+wrap(report.Caution, width, "")+"\n")
	return err
}

// writeTable writes one code's table as a file.
func writeTable(w io.Writer, chosen []*siteclass.Code) error {
	if len(chosen) != 1 {
		return misuse("name one, as `shearbook codes nbcc-2015 --format yaml`", "a file holds the table of one code")
	}
	if err := codefile.Write(w, chosen[0]); err != nil {
		return hinted{err, "start from a code of bands, or classify under " + chosen[0].ID + " itself"}
	}
	return nil
}

// allCodes are the built-in codes and then those of files.
func allCodes(own []codeFile) []*siteclass.Code {
	all := siteclass.All()
	for _, f := range own {
		all = append(all, f.code)
	}
	return all
}

// listCodes is two lines a code: what it is, and how it classifies.
func listCodes(all []*siteclass.Code) string {
	var b strings.Builder
	for _, c := range all {
		indent := strings.Repeat(" ", 15)
		fmt.Fprintf(&b, "%s%s\n", pad(c.ID, len(indent)), wrap(c.Edition+"; "+c.Clause+", "+c.Table, width-len(indent), indent))
		fmt.Fprintf(&b, "%s%s\n", indent, wrap(c.Parameter+" over "+c.DepthText+"; datum: "+c.Datum.String()+"; standing: "+c.Standing.String(), width-len(indent), indent))
	}
	return b.String()
}

// describe is one code with its table.
func (s streams) describe(c *siteclass.Code) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s\n", s.bold(wrap(c.ID+": "+c.Edition, width-2, "  ")))
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
	line("routes", routesText(c))
	line("standing", c.Standing.String())
	line("source", c.Source)
	line("adopts", c.Adoption)
	line("superseded", c.Superseded)

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
	writeList(&b, "rules beside the columns, the first that holds decides", notebook.RuleTexts(c))
	writeList(&b, "figures that these rules rest on", termsText(c))
	if len(c.Conditions) > 0 {
		b.WriteString("\n  conditions beside the average\n")
		for _, cond := range c.Conditions {
			text := fmt.Sprintf("%s: %s (%s; %s)", notebook.ConditionClass(&cond), cond.Text, cond.Clause, cond.Standing)
			fmt.Fprintf(&b, "    - %s\n", wrap(text, width-6, "      "))
		}
	}
	writeList(&b, "where data are lacking", present(c.Default, c.Short))
	writeList(&b, "what the print leaves open", c.Notes)
	return b.String()
}

// routesText says by which averages a code gives the class, the ranks in
// their order; "" where there is only the velocity.
func routesText(c *siteclass.Code) string {
	text, last := "", 0
	for _, r := range slices.SortedStableFunc(slices.Values(c.Routes), func(a, b siteclass.Route) int { return a.Rank - b.Rank }) {
		switch {
		case text == "":
		case r.Rank == last:
			text += ", or "
		default:
			text += "; failing that "
		}
		text, last = text+r.Name, r.Rank
	}
	return text
}

// termsText are the figures that a code's own rule rests on.
func termsText(c *siteclass.Code) []string {
	var texts []string
	for _, t := range c.Terms {
		texts = append(texts, fmt.Sprintf("%s (%s; %s)", t.Text, t.Clause, t.Standing))
	}
	return texts
}

// present leaves out what is not said.
func present(texts ...string) []string {
	return slices.DeleteFunc(texts, func(text string) bool { return text == "" })
}
