package main

import (
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"shearbook/profile"
	"shearbook/profile/correlate"
)

func newCorrelations(s streams) *cobra.Command {
	return &cobra.Command{
		Use:   "correlations [ID]",
		Short: "List the relations from N, cones and su to velocity",
		Long: `correlations lists the published relations from blow counts (SPT), cone
readings (CPT) and undrained shear strength (su) to shear-wave velocity, for
--correlate and for the key ` + "`correlate:`" + ` of a notebook. With an ID it says what
is known of one. Name more than one of them: they differ by a third and more
for the same ground.`,
		Example:   "  shearbook correlations\n  shearbook correlations imai-tonouchi-1982",
		Args:      arguments(0, 1, "no more than one correlation"),
		ValidArgs: correlate.IDs(),
		RunE: func(_ *cobra.Command, args []string) error {
			if len(args) == 0 {
				return s.writeText(listCorrelations())
			}
			r, err := correlate.Find(args[0])
			if err != nil {
				return misuse("`shearbook correlations` lists them; nearest: "+profile.Nearest(args[0], correlate.IDs()), "there is no correlation %q", args[0])
			}
			return s.writeText(s.describeCorrelation(r))
		},
	}
}

// families are the headings of the list.
var families = []struct {
	family  correlate.Family
	heading string
}{
	{correlate.Penetration, "from blow counts (SPT)"},
	{correlate.ConeTest, "from cone readings (CPT)"},
	{correlate.Shear, "from undrained shear strength"},
}

// listCorrelations is the list of the relations by family.
func listCorrelations() string {
	var b strings.Builder
	for _, f := range families {
		fmt.Fprintf(&b, "%s\n", f.heading)
		for _, r := range correlate.All() {
			if r.Family == f.family {
				writeCorrelation(&b, r)
			}
		}
	}
	return b.String()
}

func writeCorrelation(b *strings.Builder, r *correlate.Relation) {
	const indent = "    "
	fmt.Fprintf(b, "  %s\n", r.ID)
	for _, text := range []string{
		r.Equation,
		"needs " + symbols(r) + "; for " + r.Scope() + "; sigma " + sigmaText(r) + "; standing: " + string(r.Standing),
		r.Source,
	} {
		fmt.Fprintf(b, "%s%s\n", indent, wrap(text, width-len(indent), indent))
	}
}

// symbols are the symbols of what a relation needs.
func symbols(r *correlate.Relation) string {
	var list []string
	for _, q := range r.Needs {
		list = append(list, q.String())
	}
	return strings.Join(list, ", ")
}

// sigmaText is the sigma of ln Vs of a relation in a few words.
func sigmaText(r *correlate.Relation) string {
	if r.SigmaLn > 0 {
		return fmt.Sprintf("%.3g, published", r.SigmaLn)
	}
	return fmt.Sprintf("%.3g, planned", correlate.Planning)
}

// describeCorrelation is what is known of one relation.
func (s streams) describeCorrelation(r *correlate.Relation) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s\n", s.bold(r.ID+": "+r.Name))
	line := func(label, text string) {
		if text != "" {
			fmt.Fprintf(&b, "  %s%s\n", pad(label, 10), wrap(text, width-12, strings.Repeat(" ", 12)))
		}
	}
	line("equation", r.Equation)
	line("units", r.Units)
	var needs []string
	for _, q := range r.Needs {
		needs = append(needs, q.Name()+" "+q.String())
	}
	line("needs", strings.Join(needs, ", "))
	line("for", r.For)
	line("region", r.Region)
	line("limits", r.Limits)
	sigma := fmt.Sprintf("%.3g of ln Vs", r.SigmaLn)
	if r.SigmaLn == 0 {
		sigma = fmt.Sprintf("%s; %.3g of ln Vs stands for it, the middle of the %.2f to %.2f that is planned with (common practice)",
			r.SigmaNote, correlate.Planning, correlate.PlanningLow, correlate.PlanningHigh)
	}
	line("sigma", sigma)
	line("standing", string(r.Standing))
	line("note", r.Note)
	line("source", r.Source)
	return b.String()
}
