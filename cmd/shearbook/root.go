package main

import (
	"runtime/debug"
	"strings"

	"github.com/spf13/cobra"
)

// version is the program's version. Releases are tagged; a build from a tag
// says so itself.
const version = "0.1.0"

// versionText is what --version and the reports print.
func versionText() string {
	if info, ok := debug.ReadBuildInfo(); ok && strings.HasPrefix(info.Main.Version, "v") && !strings.Contains(info.Main.Version, "-0.") {
		return "shearbook " + strings.TrimPrefix(info.Main.Version, "v")
	}
	return "shearbook " + version
}

func newRoot(s streams) *cobra.Command {
	root := &cobra.Command{
		Use:   "shearbook",
		Short: "Seismic site-class reports from shear-wave velocity profiles",
		Long: `shearbook reads shear-wave velocity profiles, averages them by travel time,
applies the site-class table of a building code, and writes a report in
which every number can be checked by hand.

The design site class must be confirmed by a licensed engineer under the
locally adopted building code.`,
		Example: `  shearbook new ferry-road
  shearbook report ferry-road/notebook.md
  shearbook classify line-1.csv --code asce-7-16`,
		Version:       version,
		SilenceUsage:  true,
		SilenceErrors: true,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) > 0 {
				return misuse("`shearbook --help` lists the commands", "there is no command %q", args[0])
			}
			return nil
		},
		RunE: func(c *cobra.Command, _ []string) error { return c.Help() },
	}
	root.SetVersionTemplate(versionText() + "\n")
	root.SetFlagErrorFunc(func(c *cobra.Command, err error) error {
		return usageError{err, "`" + c.CommandPath() + " --help` lists the flags"}
	})
	root.AddCommand(newNew(s), newReport(s), newClassify(s), newBatch(s), newConvert(s), newCodes(s), newCorrelations(s), newWorkings(s), newReview(s))
	root.InitDefaultCompletionCmd()
	return root
}

// arguments checks the number of arguments; needs says what they are.
func arguments(least, most int, needs string) cobra.PositionalArgs {
	return func(c *cobra.Command, args []string) error {
		hint := "`" + c.CommandPath() + " --help` shows an example"
		switch {
		case len(args) < least:
			return misuse(hint, "%s needs %s", c.Name(), needs)
		case most >= 0 && len(args) > most:
			return misuse(hint, "%s takes %s, and not %q as well", c.Name(), needs, args[most])
		}
		return nil
	}
}
