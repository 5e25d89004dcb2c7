package main

import (
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"shearbook/profile"
	"shearbook/report/notebook"
)

func newWorkings(s streams) *cobra.Command {
	return &cobra.Command{
		Use:   "workings [NAME]",
		Short: "List what a notebook can work out, or explain one working",
		Long: `workings lists the fenced blocks that a notebook evaluates. With a name it
says what that working does, what keys it reads, and shows an example.`,
		Example:   "  shearbook workings\n  shearbook workings average",
		Args:      arguments(0, 1, "no more than one working"),
		ValidArgs: notebook.WorkingNames(),
		RunE: func(_ *cobra.Command, args []string) error {
			text := listWorkings()
			if len(args) == 1 {
				page, ok := notebook.WorkingNamed(args[0])
				if !ok {
					near := profile.Nearest(args[0], notebook.WorkingNames())
					return misuse("`shearbook workings` lists them; nearest: "+near, "there is no working %q", args[0])
				}
				text = explain(args[0], page)
			}
			_, err := io.WriteString(s.out, text)
			return err
		},
	}
}

func listWorkings() string {
	g := grid{wraps: 1}
	for _, name := range notebook.WorkingNames() {
		w, _ := notebook.WorkingNamed(name)
		g.rows = append(g.rows, []string{name, w.Summary})
	}
	return g.String()
}

// explain is the page of one working.
func explain(name string, w notebook.Working) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s\n", wrap(w.Summary, width, ""))
	if len(w.Keys) > 0 {
		b.WriteString("\nkeys\n")
		g := grid{indent: "  ", wraps: 1}
		for _, k := range w.Keys {
			g.rows = append(g.rows, []string{k.Name, k.Meaning})
		}
		b.WriteString(g.String())
	}
	fmt.Fprintf(&b, "\nexample\n  ```%s\n", name)
	for line := range strings.Lines(w.Example) {
		b.WriteString("  " + line)
	}
	b.WriteString("  ```\n")
	return b.String()
}
