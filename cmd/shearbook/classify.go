package main

import (
	"errors"
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/report"
	"shearbook/report/notebook"
	"shearbook/vs30/siteclass"
)

// classifyFlags are the flags of classify.
type classifyFlags struct {
	codes, codeFiles          []string
	datum, foundation, extend string
	format, book              string
	force                     bool
	read                      readFlags
}

func newClassify(s streams) *cobra.Command {
	var f classifyFlags
	c := &cobra.Command{
		Use:   "classify PROFILE…",
		Short: "Say the site class of profiles, with the steps of the decision",
		Long: `classify reads profiles, averages them as each code asks, and says the class
with every comparison that led to it. - reads standard input. What velocities
cannot settle is listed as not assessed: a notebook can state it. --code-file
adds a table of a jurisdiction's own; ` + "`codes ID --format yaml`" + ` writes one to
start from.`,
		Example: `  shearbook classify line-1.csv --code asce-7-16
  shearbook classify *.csv --code ec8-2004,ntc-2018 --datum 2.5m
  shearbook classify - --code nbcc-2015 --format json < line-1.csv
  shearbook classify line-1.csv --code-file local.yaml
  shearbook classify log.las --code ec8-2004 --map "Vs=DTS [us/ft]" --step 0.5m`,
		Args: arguments(1, -1, "at least one profile file"),
		RunE: func(_ *cobra.Command, args []string) error { return classify(s, f, args) },
	}
	fl := c.Flags()
	fl.StringSliceVar(&f.codes, "code", nil, "`ID`s of codes, with commas between")
	fl.StringVar(&f.datum, "datum", "", "`depth` to average from: 2.5m")
	fl.StringVar(&f.foundation, "foundation-depth", "", "`depth` of the foundation: 1.5m")
	fl.StringVar(&f.extend, "extend", "", "`rule` to carry a short profile on")
	f.read.define(fl)
	fl.StringVar(&f.format, "format", "text", "`text or json`")
	fl.StringVar(&f.book, "xlsx", "", "`file` to write the answers to as a workbook too")
	fl.BoolVar(&f.force, "force", false, "replace that workbook if it is there")
	codeFilesFlag(c, &f.codeFiles)
	completeCodes(c)
	completeWords(c, "extend", report.Extensions()...)
	completeWords(c, "format", "text", "json")
	return c
}

// classify is the whole of `shearbook classify`. Nothing is printed where
// any profile is at fault.
func classify(s streams, f classifyFlags, names []string) error {
	facts, codes, err := f.check()
	if err != nil {
		return err
	}
	opt, err := f.read.options()
	if err != nil {
		return err
	}
	if f.book != "" && !f.force {
		if err := mustBeNew(f.book); err != nil {
			return err
		}
	}
	var faults profile.Faults
	var found []classified
	for _, name := range names {
		profiles, err := openProfiles(s.in, name, opt)
		if err != nil {
			if faults, err = join(faults, err); err != nil {
				return err
			}
			continue
		}
		for i := range profiles {
			for _, code := range codes {
				d, err := report.Classify(&profiles[i], code, facts)
				if err != nil {
					faults = append(faults, report.Failure(&profiles[i], code, err))
					continue
				}
				found = append(found, classified{&profiles[i], d, report.Average30(&profiles[i], d.Datum, facts)})
			}
		}
	}
	if len(faults) > 0 {
		return faults
	}
	if f.book != "" {
		if err := writeWhole(f.book, f.force, func(w io.Writer) error { return writeClassBook(w, found) }); err != nil {
			return err
		}
	}
	if f.format == "json" {
		var results []report.Result
		for _, c := range found {
			results = append(results, report.NewResult(c.profile, c.decision, c.vs30))
		}
		return report.WriteResults(s.out, results)
	}
	var b strings.Builder
	for i, c := range found {
		s.writeDecision(&b, c)
		if last := i+1 == len(found) || found[i+1].profile != c.profile; last && len(codes) > 1 {
			b.WriteString(sideBySideCodes(found[i+1-len(codes) : i+1]))
		}
	}
	b.WriteString(wrap(report.Caution, width, "") + "\n")
	_, err = io.WriteString(s.out, b.String())
	return err
}

// sideBySideCodes is one profile under several codes in one table.
func sideBySideCodes(of []classified) string {
	g := grid{indent: "  ", wraps: 3, rows: [][]string{{"code", "class", "average", "over, from", "next", "standing"}}}
	for _, c := range of {
		d := c.decision
		average, next := "by "+d.Route, "–"
		if d.Velocity > 0 {
			average = fmt.Sprintf("%.1f %s", d.Velocity/d.Code.Unit.Factor, d.Code.Unit.Name)
		}
		if d.Margin != nil {
			next = fmt.Sprintf("%s %+.1f %%", d.Margin.ToClass, d.Margin.Percent)
		}
		g.rows = append(g.rows, []string{d.Code.ID, d.Class, average, fmt.Sprintf("%.4g m, %.4g m", d.Thickness, d.Datum), next, d.Standing.String()})
	}
	return report.Visible(of[0].profile.Name) + " side by side\n" + g.String() + "\n"
}

// classified is one answer.
type classified struct {
	profile  *profile.Profile
	decision siteclass.Decision
	vs30     *float64
}

// check checks the flags.
func (f classifyFlags) check() (facts report.Facts, codes []*siteclass.Code, err error) {
	if len(f.codes) == 0 && len(f.codeFiles) == 0 {
		return facts, nil, misuse("add --code asce-7-16, or another of `shearbook codes`", "classify needs a code")
	}
	own, err := readCodeFiles(f.codeFiles)
	if err != nil {
		return facts, nil, err
	}
	if codes, err = chooseCodes(f.codes, own); err != nil {
		return facts, nil, err
	}
	if facts.Datum, err = depthFlag("datum", f.datum); err != nil {
		return facts, nil, err
	}
	if facts.Foundation, err = depthFlag("foundation-depth", f.foundation); err != nil {
		return facts, nil, err
	}
	if facts.Extend = f.extend; f.extend != "" {
		err = checkExtend(f.extend)
	}
	if f.format != "text" && f.format != "json" {
		err = misuse("it is text or json", "format %q is not known", f.format)
	}
	return facts, codes, err
}

// openProfiles reads a file, or standard input for -.
func openProfiles(in io.Reader, name string, opt open.Options) ([]profile.Profile, error) {
	if name == "-" {
		return open.Reader("standard input", in, opt)
	}
	return open.File(name, opt)
}

// join adds the faults of err to faults; an error of another kind comes
// back.
func join(faults profile.Faults, err error) (profile.Faults, error) {
	var more profile.Faults
	if !errors.As(err, &more) {
		return faults, err
	}
	return append(faults, more...), nil
}

// writeDecision lays one answer out for the terminal.
func (s streams) writeDecision(b *strings.Builder, c classified) {
	d := c.decision
	where := ""
	if r := c.profile.Reading; r != nil && r.File != c.profile.Name {
		where = " (" + report.Visible(r.File) + ")"
	}
	fmt.Fprintf(b, "%s%s: %s\n", report.Visible(c.profile.Name), where, s.bold("site class "+d.ClassWords()))
	line := func(label, text string) {
		fmt.Fprintf(b, "  %s%s\n", pad(label, 10), wrap(text, width-12, strings.Repeat(" ", 12)))
	}
	line("code", d.Code.ID+": "+d.Code.Edition+", "+d.Code.Table)
	if len(d.Classes) > 1 {
		line("classes", strings.Join(d.Classes, ", ")+": the governing spectrum is the envelope of theirs")
	}
	if d.Velocity > 0 {
		line("average", fmt.Sprintf("%s over %s %s", velocities(d.Velocity), lengths(d.Thickness), below(d.Datum)))
	}
	for _, a := range d.Averages {
		if d.Velocity == 0 {
			line("average", fmt.Sprintf("%s = %.1f %s over %s", a.Symbol, a.Value, a.Unit, lengths(a.Thickness)))
		}
	}
	for _, f := range d.Found {
		more := map[bool]string{true: "more than "}[f.AtLeast]
		line(f.Of, fmt.Sprintf("%s%.4g %s: %s", more, f.Value, f.Unit, f.Text))
	}
	for _, o := range d.Others {
		line("also", "class "+o.Class+" by "+o.Route)
	}
	if c.vs30 != nil && d.Thickness != 30 {
		line("Vs30", velocities(*c.vs30))
	}
	line("reached", lengths(c.profile.DepthReached())+basisText(d.Basis))
	if d.Margin != nil {
		line("next", fmt.Sprintf("class %s at %.4g %s: %s would be %s", d.Margin.ToClass, d.Margin.Bound, d.Margin.Unit, notebook.MarginOf(d.Margin), notebook.MarginText(d.Margin)))
	}
	line("standing", d.Standing.String())
	b.WriteString("  steps\n")
	g := grid{indent: "    ", wraps: 1}
	for i, st := range d.Steps {
		g.rows = append(g.rows, []string{fmt.Sprintf("%d", i+1), st.Text, notebook.Comparison(st), map[bool]string{true: "yes", false: "no"}[st.Holds]})
	}
	if len(g.rows) > 0 {
		b.WriteString(g.String())
	}
	writeList(b, "notes", noteTexts(d.Notes))
	writeList(b, "not assessed", d.Unassessed)
	b.WriteByte('\n')
}

// basisText says how the velocities came to be known, where there are any.
func basisText(basis string) string {
	if basis == "" {
		return ""
	}
	return "; velocities " + basis
}

func noteTexts(notes []profile.Note) []string {
	var texts []string
	for _, n := range notes {
		texts = append(texts, n.Text)
	}
	return texts
}

func writeList(b *strings.Builder, label string, texts []string) {
	if len(texts) == 0 {
		return
	}
	fmt.Fprintf(b, "  %s\n", label)
	for _, t := range texts {
		fmt.Fprintf(b, "    - %s\n", wrap(report.Visible(t), width-6, "      "))
	}
}

func velocities(v float64) string {
	return fmt.Sprintf("%.1f m/s (%.1f ft/s)", v, v/profile.Foot)
}

func lengths(v float64) string {
	return fmt.Sprintf("%.4g m (%.4g ft)", v, v/profile.Foot)
}

func below(datum float64) string {
	if datum == 0 {
		return "below ground level"
	}
	return "below a datum at " + lengths(datum) + " depth"
}
