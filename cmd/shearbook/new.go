package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/templates"
)

func newNew(s streams) *cobra.Command {
	return &cobra.Command{
		Use:   "new DIR",
		Short: "Start a site folder: a notebook and one invented profile",
		Long: `new makes the folder DIR with a notebook and one invented profile in it, to
be overwritten with your own. It touches nothing in a folder that holds a
notebook or a profile of these names already.`,
		Example: "  shearbook new ferry-road\n  shearbook report ferry-road/notebook.md",
		Args:    arguments(1, 1, "the name of a folder"),
		RunE: func(_ *cobra.Command, args []string) error {
			if err := startSite(args[0]); err != nil {
				return err
			}
			_, err := fmt.Fprintf(s.out, "Next: put your profile into %s, then: shearbook report %s\n",
				report.Visible(filepath.Join(args[0], "line-1.csv")), report.Visible(filepath.Join(args[0], "notebook.md")))
			return err
		},
	}
}

// startSite writes the starter files into dir.
func startSite(dir string) error {
	files := []struct{ name, text string }{
		{"notebook.md", templates.StarterNotebook},
		{"line-1.csv", templates.StarterProfile},
	}
	for _, f := range files {
		if _, err := os.Lstat(filepath.Join(dir, f.name)); err == nil {
			return hinted{fmt.Errorf("%s holds a site already: %s", dir, f.name), "choose another folder, or work on that one"}
		} else if !errors.Is(err, fs.ErrNotExist) {
			return hinted{fmt.Errorf("%s cannot be used: %w", dir, profile.FileError(err)), "choose another folder"}
		}
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return hinted{fmt.Errorf("%s cannot be made: %w", dir, profile.FileError(err)), "choose another folder"}
	}
	for i, f := range files {
		if err := os.WriteFile(filepath.Join(dir, f.name), []byte(f.text), 0o666); err != nil {
			for _, written := range files[:i+1] {
				_ = os.Remove(filepath.Join(dir, written.name)) // leave nothing half-made; the first error counts
			}
			return fmt.Errorf("%s cannot be written: %w", filepath.Join(dir, f.name), profile.FileError(err))
		}
	}
	return nil
}
